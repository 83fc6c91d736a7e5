"""All methods in range for one duct over a sweep of its flow, one formula a cell, with the band of scatter."""

import datetime as dt
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from xlsxwriter.utility import xl_col_to_name

from cellfuncs.cases import labels
from cellfuncs.cells import catalogue
from cellfuncs.sheets.inks import CAUTION, GREY, INK, LINE, RULE
from pages.page import HEAD_ROWS, Page

_TINT = "#DED0EC"
_LISTED = 12  # rows of CF_METHODS that are shown
_SPARE = 3
_TOP = HEAD_ROWS + 1
# families of markers: shape and ink together tell fifteen methods apart
_SHAPES = ("circle", "diamond", "triangle", "square", "x")
_INKS = (RULE, INK, "#C46A1B")
_FLOW, _REYNOLDS, _NAME, _BEST, _SCATTER, _LOW, _BAND, _FIRST = range(8)  # columns of the sweep


@dataclass(frozen=True)
class MethodSweep:
    """``rows`` are label, value, unit; ``sweep`` the label varied, its unit and its places."""

    title: str
    story: str
    block: str
    rows: tuple[tuple[str, Any, str | None], ...]
    sweep: tuple[str, str, tuple[float, ...]]


def methods_in_range(content: MethodSweep) -> list[str]:
    """Every method that is in range somewhere in the sweep, in the order in which they come into range."""
    functions = catalogue.functions()
    label, unit, places = content.sweep
    block = [list(row) for row in content.rows]
    found: dict[str, None] = {}
    for place in places:
        rows = functions["CF_METHODS"].call(functions["CF_VARY"].call(block, label, place, unit))
        found.update(dict.fromkeys(row[0] for row in rows[1:] if row[3] == "in range"))
    return list(found)


def write_methods(content: MethodSweep, path: str | Path) -> None:
    """Write the workbook; its formulas have no values yet."""
    import xlsxwriter

    book = xlsxwriter.Workbook(str(path))
    book.set_properties({"title": content.title, "comments": CAUTION, "created": dt.datetime(2026, 1, 1)})
    _case(book, content)
    _sweep(book, content, methods_in_range(content))
    book.close()


def _case(book: Any, content: MethodSweep) -> None:
    """The block, and what CF_METHODS says of it."""
    page = Page(book, "Case", content.title, content.story, (20, 22, 10, 3, 30, 11, 22, 9, 70))
    sheet, look = page.sheet, page.look
    page.heading(_TOP, ("Case", "value", "unit"), left=(0, 1, 2))
    offered = _lists(book)
    last = _TOP + len(content.rows) + _SPARE
    for k in range(len(content.rows) + _SPARE):
        at = _TOP + 1 + k
        label, value, unit = content.rows[k] if k < len(content.rows) else (None, None, None)
        sheet.write(at, 0, label, look.label())
        sheet.write(at, 1, value, look.entry())
        sheet.write(at, 2, unit, look.entry(ruled=False))
        source = {"labels": "A", "methods": "B"}
        if label is None:
            which, column = "labels", 0
        elif label == "method":
            which, column = "methods", 1
        elif labels.dictionary()[labels.find(label)].role == "choice":
            choices = list(labels.choices(labels.find(label)))
            sheet.data_validation(at, 1, at, 1, {"validate": "list", "source": choices})
            continue
        else:
            continue
        place = f"=Lists!${source[which]}$2:${source[which]}${1 + offered[which]}"
        rule = {"validate": "list", "source": place, "error_type": "information"}
        sheet.data_validation(at, column, at, column, rule)
    book.define_name(content.block, f"=Case!$A${_TOP + 2}:$C${last + 1}")
    words = ("method", "coefficient", "in range", "scatter", "reason")
    page.heading(_TOP, ("What CF_METHODS says", "W/m2K", " in range", "scatter", " reason"), 4, left=(0, 2, 4))
    for k in range(_LISTED):
        at = _TOP + 1 + k
        for column, word in enumerate(words, start=4):
            place = f"{k + 2},{_column_of(word)}"
            number = word in ("coefficient", "scatter")
            style = look.label(
                num_format={"coefficient": "#,##0", "scatter": '"±"0.0 %'}.get(word, "General"),
                align="right" if number else "left", indent=int(word in ("in range", "reason")),
                bold=k == 0 and word == "method", font_size=9.5,
            )  # fmt: skip
            sheet.write_formula(at, column, f"=INDEX(CF_METHODS({content.block}),{place})", style)
    facts = (
        ("Reynolds number", "", "0"),
        ("coefficient", "W/m2K", "#,##0"),
        ("outlet temperature", "degC", "0.0"),
        ("pressure drop", "kPa", "0.00"),
    )
    for k, (what, unit, shown) in enumerate(facts, start=last + 2):
        ask = f',"{unit}"' if unit else ""
        sheet.write(k, 0, f"{what} [{unit}]" if unit else what, look.label())
        formula = f'=CF_CASE({content.block},"{what}"{ask})'
        sheet.write_formula(k, 1, formula, look.label(num_format=shown, align="right"))
    page.faults(f"A{_TOP + 2}:I{last + 8}")


def _column_of(word: str) -> int:
    from cellfuncs.cells.method import COLUMNS

    return COLUMNS.index(word) + 1


def _lists(book: Any) -> dict[str, int]:
    """A sheet with what the drop-down lists offer, by CF_LIST; how long the lists are."""
    sheet = book.add_worksheet("Lists")
    lengths = {}
    for column, what in enumerate(("labels", "methods")):
        sheet.write(0, column, f"{what} of a duct")
        entries = catalogue.functions()["CF_LIST"].call(what, "duct")
        lengths[what] = len(entries)
        for k in range(len(entries)):
            sheet.write_formula(1 + k, column, f'=INDEX(CF_LIST("{what}","duct"),{k + 1})')
    sheet.set_column(0, 1, 32)
    sheet.hide()
    return lengths


def _sweep(book: Any, content: MethodSweep, methods: list[str]) -> None:
    """Coefficients over the flow, relative to the recommended one too, and two charts."""
    label, unit, places = content.sweep
    widths = [9, 8, 19, 9, 8, 9, 9, *[10] * len(methods)]
    page = Page(book, "Sweep", f"{content.title}: every method in range", content.story, widths)
    sheet, look = page.sheet, page.look
    head, first = _TOP + 1, _TOP + 2
    last = first + len(places) - 1
    end = xl_col_to_name(_FIRST + len(methods) - 1)
    sheet.write(
        _TOP, 0, f"Coefficient [W/m2K] over {label} [{unit}]; outside: not in the method's range", look.style(bold=True)
    )
    words = (label, "Re", "recommended", "W/m2K", "scatter", "low", "band", *methods)
    page.heading(head, words, left=(_NAME,))
    sheet.set_row(head, 58)
    for row, place in enumerate(places, start=first):
        at = row + 1
        varied = f'CF_VARY({content.block},"{label}",$A{at},"{unit}")'
        sheet.write(row, _FLOW, place, look.entry(align="right"))
        number, share = look.label(num_format="#,##0", align="right"), look.label(num_format='"±"0.0 %', align="right")
        sheet.write_formula(row, _REYNOLDS, f'=CF_CASE({varied},"Reynolds number")', number)
        sheet.write_formula(row, _NAME, f"=INDEX(CF_METHODS({varied}),2,1)", look.label(font_size=9.5, indent=1))
        sheet.write_formula(
            row, _BEST, f'=CF_COEFFICIENT({varied},,"W/m2K")', look.label(num_format="#,##0", bold=True)
        )
        sheet.write_formula(row, _SCATTER, f"=INDEX(CF_METHODS({varied}),2,{_column_of('scatter')})", share)
        sheet.write_formula(row, _LOW, f"=D{at}*(1-E{at})", number)
        sheet.write_formula(row, _BAND, f"=2*D{at}*E{at}", number)
        for k in range(len(methods)):
            letter = xl_col_to_name(_FIRST + k)
            asked = f'CF_COEFFICIENT({varied},{letter}${head + 1},"W/m2K")'
            # refused outside its range; CF_COEFFICIENT alone says why
            formula = f'=IF(ISNUMBER({asked}),{asked},"outside")'
            sheet.write_formula(row, _FIRST + k, formula, look.label(num_format="#,##0", align="right", font_size=9.5))
    grey = book.add_format({"font_color": GREY})
    rule = {"type": "cell", "criteria": "==", "value": '"outside"', "format": grey}
    sheet.conditional_format(f"H{first + 1}:{end}{last + 1}", rule)
    top = _relative(page, methods, places, first, last + 3)
    page.faults(f"A{first + 1}:{end}{last + 1}", column=_NAME)
    names = {"sheet": "Sweep", "head": head, "first": first, "last": last, "unit": unit, "label": label}
    # the numbers behind the charts stand below them, beyond the printed page
    sheet.insert_chart(last + 2, 0, _absolute_chart(book, names), {"x_offset": 4, "y_offset": 4})
    sheet.insert_chart(last + 2, 8, _relative_chart(book, names, methods, top), {"x_offset": 4, "y_offset": 4})
    sheet.print_area(0, 0, last + 26, _FIRST + len(methods) - 1)


def _relative(page: Page, methods: list[str], places: tuple[float, ...], first: int, after: int) -> int:
    """Each method over the recommended one, #N/A where it is outside: for the chart. The first row of numbers."""
    sheet, look = page.sheet, page.look
    top = after + 27
    sheet.write(top - 2, 0, "for the chart: over the recommended method", look.quiet())
    page.heading(top - 1, ("flow", "low", "band", *[""] * 4, *methods))
    for k in range(len(places)):
        at, row, quiet = first + k + 1, top + k, look.quiet(align="right", num_format="0.000")
        sheet.write_formula(row, 0, f"=A{at}", look.quiet(align="right"))
        sheet.write_formula(row, 1, f"=1-E{at}", quiet)
        sheet.write_formula(row, 2, f"=2*E{at}", quiet)
        for j in range(len(methods)):
            letter = xl_col_to_name(_FIRST + j)
            formula = f"=IF(ISNUMBER({letter}{at}),{letter}{at}/D{at},NA())"
            sheet.write_formula(row, _FIRST + j, formula, quiet)
    return top


def _band(book: Any, sheet: str, rows: tuple[int, int], flow: int, low: int, band: int) -> Any:
    """An area from low to high: an unseen one with the band upon it."""
    area = book.add_chart({"type": "area", "subtype": "stacked"})
    first, last = rows
    x = [sheet, first, flow, last, flow]
    unseen = {"name": "low end of the scatter", "categories": x, "values": [sheet, first, low, last, low]}
    area.add_series(unseen | {"fill": {"none": True}, "border": {"none": True}})
    seen = {"name": "scatter as published", "categories": x, "values": [sheet, first, band, last, band]}
    area.add_series(seen | {"fill": {"color": _TINT}, "border": {"none": True}})
    return area


def _dress(chart: Any, names: dict[str, Any], title: str, y: dict[str, Any]) -> None:
    font = {"color": INK, "size": 9}
    chart.set_title({"name": title, "name_font": {"size": 11, "bold": True, "color": INK}})
    x = {"name": f"{names['label']} [{names['unit']}]", "num_font": font, "line": {"color": INK}}
    chart.set_x_axis(x | {"name_font": {"size": 9, "bold": False}, "label_position": "low"})
    grid = {"major_gridlines": {"visible": True, "line": {"color": LINE}}, "num_font": font}
    chart.set_y_axis(grid | {"name_font": {"size": 9, "bold": False}} | y)
    chart.set_legend({"position": "right", "font": {"color": INK, "size": 8}, "delete_series": [0]})


def _absolute_chart(book: Any, names: dict[str, Any]) -> Any:
    rows = (names["first"], names["last"])
    area = _band(book, names["sheet"], rows, _FLOW, _LOW, _BAND)
    line = book.add_chart({"type": "line"})
    line.add_series(
        {
            "name": "recommended",
            "categories": [names["sheet"], rows[0], _FLOW, rows[1], _FLOW],
            "values": [names["sheet"], rows[0], _BEST, rows[1], _BEST],
            "line": {"color": RULE, "width": 2},
            "marker": {"type": "circle", "size": 5, "fill": {"color": RULE}, "border": {"color": RULE}},
        }
    )
    area.combine(line)
    _dress(area, names, "The recommended coefficient", {"name": "W/m2K", "log_base": 10, "min": 100})
    area.set_size({"width": 560, "height": 440})
    return area


def _relative_chart(book: Any, names: dict[str, Any], methods: list[str], top: int) -> Any:
    last = top + names["last"] - names["first"]
    area = _band(book, names["sheet"], (top, last), 0, 1, 2)
    line = book.add_chart({"type": "line"})
    for k, method in enumerate(methods):
        shape, ink = _SHAPES[k % len(_SHAPES)], _INKS[k // len(_SHAPES) % len(_INKS)]
        line.add_series(
            {
                "name": method,
                "categories": [names["sheet"], top, 0, last, 0],
                "values": [names["sheet"], top, _FIRST + k, last, _FIRST + k],
                "line": {"color": ink, "width": 0.75},
                "marker": {"type": shape, "size": 6, "fill": {"color": ink}, "border": {"color": ink}},
            }
        )
    area.combine(line)
    y = {"name": "over the recommended method", "min": 0.7, "max": 1.3, "num_format": "0.00", "major_unit": 0.1}
    _dress(area, names, "Every method in range beside it", y)
    area.set_size({"width": 860, "height": 440})
    return area
