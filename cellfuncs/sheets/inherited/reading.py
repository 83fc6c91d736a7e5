"""A whole workbook read: its cells, the quantities it states, the cases they make, and what depends on what."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Mapping
from dataclasses import dataclass, field

from cellfuncs.books import Book
from cellfuncs.cases import labels
from cellfuncs.checks.finding import Judgement
from cellfuncs.checks.stated import SheetCase, Stated
from cellfuncs.quantities import STANDARD_ATMOSPHERE
from cellfuncs.sheets.inherited import gather, rows, sections, settle, tables
from cellfuncs.sheets.inherited.facts import Facts, facts_of
from cellfuncs.sheets.inherited.gather import Quantity
from cellfuncs.sheets.inherited.links import Links
from cellfuncs.sheets.inherited.page import Page, Spot, address, is_error, read_pages
from cellfuncs.sheets.inherited.regions import Regions

MOST_NOTES = 200
MOST_JUDGED = 200  # cases of a workbook


@dataclass
class Reading:
    """What was read. ``quantities`` are the settled numbers by cell; ``notes`` are cells that were not understood."""

    pages: list[Page]
    quantities: dict[str, Quantity]
    cases: list[SheetCase]
    links: Links
    notes: Judgement = field(default_factory=Judgement)
    facts: dict[str, Facts] = field(default_factory=dict)

    @property
    def graph(self) -> Mapping[str, tuple[str, ...]]:
        return self.links.graph


def read_book(book: Book) -> Reading:
    """Read a workbook that passed the gate."""
    pages = read_pages(book)
    links = Links(pages, book.names)
    notes = Judgement()
    found: list[Quantity] = []
    facts: dict[str, Facts] = {}
    for page in pages:
        facts[page.name] = facts_of(page)
        found += _quantities(page, facts[page.name], links, notes)
        _odd_cells(page, notes)
    _settle(found, facts, links, notes)
    known = [q for q in found if q.stated is not None]
    cases = _cases(known, facts, links, notes)
    return Reading(pages, {q.stated.cell: q for q in known}, cases, links, notes, facts)


def _quantities(page: Page, facts: Facts, links: Links, notes: Judgement) -> list[Quantity]:
    in_tables, taken, copies = tables.tables_in(page)
    for spot, number in copies:
        notes.notes.append((page.address(spot), f"{number} more rows with the same formulas were not recomputed"))
    entries = in_tables + rows.rows_in(page, taken)
    for name, spot in links.named(page.name):
        _use_name(page, name, spot, entries)
    in_si = facts.said.get("si") == "yes"
    found = []
    for entry in sorted(entries, key=lambda e: e.spot):
        if not entry.in_text:
            entry.value /= page.shown(entry.spot).scale
        settled = settle.options_for(entry, in_si, STANDARD_ATMOSPHERE, entry.spot in page.formulas)
        found.append(Quantity(page.name, entry, settled))
    return found


def _use_name(page: Page, name: str, spot: tuple[int, int], entries: list[settle.Found]) -> None:
    """A defined name is one more label of its cell, and the only one where none stands beside it."""
    value = page.values.get(spot)
    if not isinstance(value, float):
        return
    text = name.replace("_", " ").strip()
    for entry in entries:
        if entry.spot == spot:
            entry.names = (*entry.names, text)
            return
    own = page.shown(spot).text
    entries.append(settle.Found(spot, value, (text,), (own,) if own else (), name, spot[1]))


def _odd_cells(page: Page, notes: Judgement) -> None:
    """Tell errors that are stored, formulas without a value, and a sheet that was not read to its end."""
    errors: dict[str, list[Spot]] = defaultdict(list)
    for spot, value in page.values.items():
        if is_error(value):
            errors[str(value)].append(spot)
    for text, spots in errors.items():
        more = f", and so do {len(spots) - 1} more cells of the sheet" if len(spots) > 1 else ""
        notes.notes.append((page.address(min(spots)), f"shows the error {text}{more}"))
    empty = [spot for spot, formula in page.formulas.items() if formula.stored is None]
    if empty:
        first = page.address(min(empty))
        text = f"{len(empty)} formulas have no stored value; open the workbook in a spreadsheet program and save it"
        notes.notes.append((first, text if len(empty) > 1 else "the formula has no stored value"))
    if page.cut:
        notes.notes.append((page.address((1, 1)), "the sheet is too large; only its first cells were read"))


def _settle(found: list[Quantity], facts: Mapping[str, Facts], links: Links, notes: Judgement) -> None:
    """Settle what is clear, then the rest by its neighbours; what stays open becomes a note."""
    keys: dict[str, set[str]] = defaultdict(set)
    waiting = []
    told: set[tuple[str, str, int, str]] = set()  # one note for all numbers beside or under a label
    for quantity in found:
        if not quantity.settled.options:
            why = quantity.settled.why
            place = (quantity.page, quantity.found.written_label, quantity.found.block, why)
            if why not in ("remark", "no label") and place not in told:
                told.add(place)
                notes.notes.append((_cell(quantity), f'"{quantity.found.written_label[:60]}": {why}'))
            continue
        if quantity.settled.clear:
            _state(quantity, quantity.settled.options[0], links)
            keys[quantity.page].add(quantity.stated.key)
        else:
            waiting.append(quantity)
    for quantity in waiting:
        beside = keys[quantity.page]
        flow = facts[quantity.page].said.get("flow")
        option = settle.by_neighbours(quantity.settled, beside, flow)
        if option is None:
            names = " or ".join(labels.dictionary()[o.key].label for o in quantity.settled.options[:3])
            notes.notes.append((_cell(quantity), f'"{quantity.found.written_label[:60]}" may be {names}'))
            continue
        _state(quantity, option, links)
        beside.add(quantity.stated.key)
    by_cell = {q.stated.cell: q for q in found if q.stated is not None}
    for cell in sections.among({cell: q.stated for cell, q in by_cell.items()}, links):
        _state(by_cell[cell], by_cell[cell].settled.as_key("flow_area"), links)


def _cell(quantity: Quantity) -> str:
    return address(quantity.page, quantity.found.spot)


def _state(quantity: Quantity, option: settle.Option, links: Links) -> None:
    found = quantity.found
    cell = _cell(quantity)
    formula, refs = links.formula(cell)
    page = links.pages[quantity.page]
    unit = option.unit
    shown = page.shown(found.spot)
    scale = 1.0 if found.in_text else shown.scale
    half = shown.half_digit(found.value * scale, formula is None) / scale
    key = gather.stream_key(option.key, found, labels.dictionary())
    kind = labels.dictionary()[key].kind
    quantity.echo = links.is_echo(cell)
    quantity.stated = Stated(
        key,
        kind,
        found.value,
        option.unit_text,
        found.value * unit.factor + unit.offset,
        half * unit.factor,
        cell,
        found.written_label,
        formula,
        refs,
    )


def _cases(known: list[Quantity], facts: Mapping[str, Facts], links: Links, notes: Judgement) -> list[SheetCase]:
    found: list[SheetCase] = []
    groups = gather.groups_of(known, links.graph)
    parted = {sheet: Regions(page, groups) for sheet, page in links.pages.items()} if len(groups) > 1 else {}
    for number, group in enumerate(groups):
        said = Facts()
        sheets = dict.fromkeys(q.page for q in group.quantities)
        for sheet in sheets:
            here = facts_of(links.pages[sheet], parted[sheet].of(number)) if parted else facts[sheet]
            for key, value in here.said.items():
                for one in value if isinstance(value, list) else [value]:
                    said.put(key, one, here.cells.get(f"{key} {one}", here.cells[key]))
        section = next((q.found.section for q in group.quantities if q.found.section), "")
        name = section if len(groups) > 1 and section else next(iter(sheets))
        found += gather.cases_of(group, said, name, notes)
    for sheet in dict.fromkeys(q.page for q in known):
        here = [q for q in known if q.page == sheet]
        found += gather.exchanger_of(here, facts[sheet], f"{sheet}, both streams", labels.dictionary())
    if len(found) > MOST_JUDGED:
        first = next(iter(found[MOST_JUDGED].all())).cell
        notes.notes.append((first, f"{len(found) - MOST_JUDGED} more calculations were not recomputed"))
    return found[:MOST_JUDGED]
