"""The map of a term's verdict as a picture: what to keep and what to leave out over two rows or groups of a case.

Verdicts are told apart by lightness first and by hatching, so that they read in grey and for any colour vision.
"""

import io
import math
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import Any

from cellfuncs import quantities
from cellfuncs.answers.effects import TEMPERATURES
from cellfuncs.cases.case import Case, flow_words
from cellfuncs.sheets.inks import CAUTION, GREY, INK, RULE
from cellfuncs.terms.regimes import NO_ANSWER, Axis, Point, RegimeMap, regime_map
from cellfuncs.terms.size import num, percent
from cellfuncs.terms.verdicts import BORDERLINE, KEEP, LEAVE_OUT

USUAL = 41
# from light to dark: left out, borderline, kept; nothing known is white with dots
_FILLS = {LEAVE_OUT: "#F1ECE0", BORDERLINE: "#C2B59B", KEEP: "#5B4B8A", NO_ANSWER: "#FFFFFF"}
_HATCHES = {LEAVE_OUT: "", BORDERLINE: "////", KEEP: "", NO_ANSWER: "...."}
_ORDER = (NO_ANSWER, LEAVE_OUT, BORDERLINE, KEEP)
_NINETY_FIVE = math.sqrt(5.991)  # standard uncertainties round two quantities that hold 95 % (chi-square, two degrees)
_DOTS = 150

Progress = Callable[[str], None]


@dataclass
class Drawn:
    """A finished picture and what it shows."""

    png: bytes
    counts: dict[str, int]
    x: str
    y: str


def draw(
    case: Case, term: str, x: str | None, y: str | None, points: int, progress: Progress | None = None, workers: int = 0
) -> Drawn:
    """The picture as PNG; ``workers`` processes share the work (0: as the machine has processors, two at most)."""
    found = regime_map(case, term, x, y, points)
    columns = []
    for k, column in enumerate(_columns(found, workers), 1):
        columns.append(column)
        if progress is not None:
            progress(f"column {k} of {points}")
    if progress is not None:
        progress("drawing")
    counts = {verdict: sum(p.verdict == verdict for column in columns for p in column) for verdict in _ORDER}
    return Drawn(_picture(found, columns), counts, found.x.label, found.y.label)


def _columns(found: RegimeMap, workers: int) -> Iterator[list[Point]]:
    """The points, column by column."""
    import multiprocessing as processes
    import os

    workers = workers or min(2, os.cpu_count() or 1)
    if workers < 2 or "fork" not in processes.get_all_start_methods():
        for x in found.x.places:
            yield _column(found, x)
        return
    # a forked process has all that is loaded here, which another would need longer to load than to work
    _shared.append(found)
    pool = processes.get_context("fork").Pool(workers, initializer=_quietly)
    try:
        yield from pool.imap(_column_of_shared, found.x.places)
    finally:
        pool.terminate()
        pool.join()
        _shared.clear()


_shared: list[RegimeMap] = []  # what forked processes find in their memory; a case does not travel


def _quietly() -> None:
    """An interrupt ends the parent, which ends us."""
    import signal

    signal.signal(signal.SIGINT, signal.SIG_IGN)


def _column_of_shared(x: float) -> list[Point]:
    return _column(_shared[-1], x)


def _column(found: RegimeMap, x: float) -> list[Point]:
    return [found.point(x, y) for y in found.y.places]


def _picture(found: RegimeMap, columns: Sequence[Sequence[Point]]) -> bytes:
    import matplotlib

    matplotlib.use("Agg")
    from matplotlib.figure import Figure

    figure = Figure(figsize=(8.2, 6.4), dpi=_DOTS, facecolor="white")
    axes = figure.add_axes((0.11, 0.17, 0.62, 0.70))
    _fill(axes, found, columns)
    _lines(axes, found, columns)
    _own(axes, found)
    _dress(figure, axes, found)
    target = io.BytesIO()
    figure.savefig(target, format="png", metadata={"Software": "Cellfuncs"})
    return target.getvalue()


def _shown(axis: Axis, case: Case) -> tuple[Callable[[float], float], str]:
    """SI to what stands on the axis, and its unit: that of the case's row, or the usual one of the kind."""
    stated = case.stated.get(axis.key)
    unit = stated.unit if stated is not None else ""
    if not unit or axis.kind == "dimensionless":
        unit = quantities.KINDS[axis.kind].si_unit if axis.kind != "dimensionless" else ""
    if unit in ("", "1"):
        return lambda value: value, ""
    return lambda value: float(quantities.from_si(value, unit, axis.kind)), unit


def _edges(places: Sequence[float], logarithmic: bool) -> list[float]:
    """The borders between places, and half a step beyond the ends."""
    at = [math.log(abs(p)) for p in places] if logarithmic else list(places)
    inner = [(a + b) / 2.0 for a, b in pairwise(at)]
    found = [at[0] - (inner[0] - at[0]), *inner, at[-1] + (at[-1] - inner[-1])]
    return [math.copysign(math.exp(e), places[0]) for e in found] if logarithmic else found


def _fill(axes: Any, found: RegimeMap, columns: Sequence[Sequence[Point]]) -> None:
    import numpy as np
    from matplotlib.colors import BoundaryNorm, ListedColormap

    to_x, to_y = _shown(found.x, found.case)[0], _shown(found.y, found.case)[0]
    x = [to_x(v) for v in _edges(found.x.places, found.x.logarithmic)]
    y = [to_y(v) for v in _edges(found.y.places, found.y.logarithmic)]
    kinds = np.array([[_ORDER.index(p.verdict) for p in column] for column in columns]).T
    axes.pcolormesh(
        x, y, kinds, cmap=ListedColormap([_FILLS[v] for v in _ORDER]), norm=BoundaryNorm(np.arange(-0.5, 4), 4),
        shading="flat", rasterized=True,
    )  # fmt: skip
    middle_x, middle_y = ([to(v) for v in axis.places] for to, axis in ((to_x, found.x), (to_y, found.y)))
    for verdict, hatch in _HATCHES.items():
        mask = (kinds == _ORDER.index(verdict)).astype(float)
        if hatch and mask.sum() > 0.0 and len(middle_x) > 1:
            drawn = axes.contourf(middle_x, middle_y, mask, levels=[0.5, 1.5], colors="none", hatches=[hatch])
            drawn.set(edgecolor=GREY, linewidth=0.0)
    for scale, axis in ((axes.set_xscale, found.x), (axes.set_yscale, found.y)):
        if axis.logarithmic:
            scale("log")
    axes.set_xlim(x[0], x[-1])
    axes.set_ylim(y[0], y[-1])


def _lines(axes: Any, found: RegimeMap, columns: Sequence[Sequence[Point]]) -> None:
    """Where the effect (or the share) is the tolerance; and a third and three times of it, thin."""
    import numpy as np

    to_x, to_y = _shown(found.x, found.case)[0], _shown(found.y, found.case)[0]
    x, y = ([to(v) for v in axis.places] for to, axis in ((to_x, found.x), (to_y, found.y)))
    weight = np.array([[np.nan if p.weight is None else max(p.weight, 1e-30) for p in column] for column in columns]).T
    known = np.ma.masked_invalid(np.log10(weight))
    if known.count() < 4:
        return
    tolerance = math.log10(found.case.tolerance)
    for level, width, style in ((tolerance, 1.8, "-"), (tolerance - 0.5, 0.7, "--"), (tolerance + 0.5, 0.7, "--")):
        if known.min() < level < known.max():
            drawn = axes.contour(x, y, known, levels=[level], colors=[INK], linewidths=width, linestyles=style)
            axes.clabel(drawn, fmt={level: percent(10.0**level)}, fontsize=7.5, inline=True)


def _own(axes: Any, found: RegimeMap) -> None:
    """The case's own place, and the region that holds it with 95 % by its ±."""
    import numpy as np

    to_x, to_y = _shown(found.x, found.case)[0], _shown(found.y, found.case)[0]
    moves = np.array(found.spread())
    if len(moves):
        covariance = moves.T @ moves
        values, vectors = np.linalg.eigh(covariance)
        round_it = np.linspace(0.0, 2.0 * math.pi, 181)
        circle = np.array([np.cos(round_it), np.sin(round_it)])
        ring = vectors @ (np.sqrt(np.maximum(values, 0.0))[:, None] * circle) * _NINETY_FIVE
        x, y = (
            [to(axis.own * math.exp(d) if axis.logarithmic else axis.own + d) for d in offsets]
            for to, axis, offsets in ((to_x, found.x, ring[0]), (to_y, found.y, ring[1]))
        )
        axes.plot(x, y, color="white", linewidth=3.0, solid_capstyle="round")
        axes.plot(x, y, color=INK, linewidth=1.2)
    axes.plot(
        [to_x(found.x.own)], [to_y(found.y.own)], marker="o", markersize=8, markerfacecolor="white",
        markeredgecolor=INK, markeredgewidth=2.0, linestyle="none",
    )  # fmt: skip


def _dress(figure: Any, axes: Any, found: RegimeMap) -> None:
    from matplotlib.lines import Line2D
    from matplotlib.patches import Patch

    for set_label, axis in ((axes.set_xlabel, found.x), (axes.set_ylabel, found.y)):
        unit = _shown(axis, found.case)[1]
        set_label(f"{axis.label} [{unit}]" if unit else axis.label, color=INK, fontsize=10)
    axes.tick_params(colors=INK, labelsize=8.5)
    for side in axes.spines.values():
        side.set_color(GREY)
    title = f"{found.term} in a {flow_words(found.case.flow)}"
    figure.text(0.11, 0.945, title, fontsize=15, fontweight="bold", color=INK)
    answer = f"answer: {found.case.answer}, tolerance {percent(found.case.tolerance)}"
    if found.case.answer in TEMPERATURES:
        answer += f", less than {num(found.case.smallest)} K does not matter"
    figure.text(0.11, 0.905, answer, fontsize=9.5, color=GREY)
    figure.add_artist(Line2D([0.095, 0.095], [0.90, 0.975], color=RULE, linewidth=3))
    entries: list[Any] = [
        Patch(facecolor=_FILLS[v], hatch=_HATCHES[v], edgecolor=GREY, linewidth=0.6, label=v)
        for v in (KEEP, BORDERLINE, LEAVE_OUT, NO_ANSWER)
    ]
    entries.append(Line2D([], [], color=INK, linewidth=1.8, label="effect = tolerance"))
    entries.append(Line2D([], [], color=INK, linewidth=0.7, linestyle="--", label="a third, three times"))
    own = {"marker": "o", "markerfacecolor": "white", "markeredgecolor": INK, "linestyle": "none"}
    entries.append(Line2D([], [], markersize=7, label="this case", **own))
    if any(abs(move) > 1e-9 for moves in found.spread() for move in moves):
        entries.append(Line2D([], [], color=INK, linewidth=1.2, label="95 % of its ±"))
    figure.legend(handles=entries, loc="upper left", bbox_to_anchor=(0.745, 0.885), frameon=False, fontsize=9)
    figure.text(0.11, 0.025, _wrapped(CAUTION), fontsize=6.8, color=GREY)


def _wrapped(text: str) -> str:
    import textwrap

    return "\n".join(textwrap.wrap(text, 120))
