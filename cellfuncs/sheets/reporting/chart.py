"""A drawing of a case's terms: bars of their shares on a logarithmic axis, as SVG text."""

from __future__ import annotations

import math
from collections.abc import Sequence
from html import escape
from typing import NamedTuple

from cellfuncs.checks.stated import SheetCase
from cellfuncs.errors import CellfuncsError
from cellfuncs.sheets.inks import GREY, INK, LINE, RULE

FLOOR = 1e-6
_WIDTH, _LEFT, _RIGHT, _BAR, _TOP = 640, 150, 110, 20, 24


class Bar(NamedTuple):
    """One term: its share (None: none) and its verdict."""

    term: str
    share: float | None
    verdict: str


class Drawing(NamedTuple):
    """A case's chart, or why there is none."""

    name: str
    svg: str
    why: str


def drawing_of(case: SheetCase) -> Drawing:
    """The terms of the case that a sheet states, judged and drawn."""
    try:
        return _drawn(case)
    except CellfuncsError as error:
        return Drawing(case.name, "", str(error))
    except Exception as error:  # a chart that cannot be drawn must not take the report along
        return Drawing(case.name, "", f"an error of the program itself ({type(error).__name__})")


def _drawn(case: SheetCase) -> Drawing:
    from cellfuncs.answers import solve
    from cellfuncs.checks.neglected import case_of
    from cellfuncs.terms import table

    stated = case_of(case)
    if stated is None:
        return Drawing(case.name, "", "the kind of flow is not known")
    whys = []
    for equation in table.EQUATIONS:
        try:
            rows = table.term_rows(solve(stated), equation)
        except CellfuncsError as error:
            whys.append(str(error))
            continue
        bars = [Bar(row[0], row[2] if isinstance(row[2], float) else None, row[4]) for row in rows]
        return Drawing(f"{case.name}, {equation}", svg(bars, case.name), "")
    return Drawing(case.name, "", whys[0])


def svg(bars: Sequence[Bar], title: str) -> str:
    """The bars as one SVG element; verdicts stand in words at their ends, in bold where a term is to be kept."""
    high = _TOP + _BAR * len(bars) + 26
    inner = _WIDTH - _LEFT - _RIGHT
    decades = round(-math.log10(FLOOR))
    parts = [
        f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {_WIDTH} {high}" role="img" '
        f'aria-label="{escape("shares of the terms, " + title, quote=True)}" font-size="11" fill="{INK}">'
    ]
    for decade in range(decades + 1):
        x = _LEFT + inner * decade / decades
        parts.append(
            f'<line x1="{x:.1f}" y1="{_TOP - 6}" x2="{x:.1f}" y2="{high - 22}" stroke="{LINE}" stroke-width="0.6"/>'
        )
        parts.append(
            f'<text x="{x:.1f}" y="{high - 8}" text-anchor="middle" fill="{GREY}">{10.0 ** (decade - decades):g}</text>'
        )
    for place, bar in enumerate(bars):
        y = _TOP + _BAR * place
        parts.append(f'<text x="{_LEFT - 8}" y="{y + 9}" text-anchor="end">{escape(bar.term)}</text>')
        length = 0.0
        if bar.share is not None and bar.share > FLOOR:
            length = inner * min(1.0, (math.log10(bar.share) + decades) / decades)
            parts.append(
                f'<rect x="{_LEFT}" y="{y}" width="{length:.1f}" height="{_BAR - 8}" fill="none" stroke="{RULE}"/>'
            )
        weight = ' font-weight="bold"' if bar.verdict.startswith("keep") else ""
        ink = GREY if bar.verdict.startswith("leave") else INK
        parts.append(f'<text x="{_LEFT + inner + 8}" y="{y + 9}" fill="{ink}"{weight}>{escape(bar.verdict)}</text>')
    parts.append(f'<text x="{_LEFT}" y="12" fill="{GREY}">share of the largest term</text></svg>')
    return "".join(parts)
