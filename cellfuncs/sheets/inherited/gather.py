"""Labelled quantities into cases: one calculation, or one a column, one a row, one a block."""

from __future__ import annotations

from collections import Counter, defaultdict
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from itertools import combinations, pairwise

from cellfuncs.books.grid import Area
from cellfuncs.checks.finding import Judgement
from cellfuncs.checks.stated import SheetCase, Stated
from cellfuncs.sheets.inherited.facts import SIDES, Facts, side_of
from cellfuncs.sheets.inherited.found import Found
from cellfuncs.sheets.inherited.settle import Settled

MOST_BLOCKS = 60  # blocks of a sheet that are compared with one another
MOST_CASES = 60  # cases with the same formulas that are judged one by one
_HEADING = 6  # rows between a heading and the first number below it
_JUDGED = 6  # of more, so many are judged: the first ones, the last, and those that differ


@dataclass(slots=True)
class Quantity:
    """A number on its way: where it was found, what it may be, what it was settled to."""

    page: str
    found: Found
    settled: Settled
    stated: Stated | None = None
    echo: bool = False  # only repeats another cell

    @property
    def block(self) -> tuple[str, int, int]:
        return self.page, self.found.block, self.found.section_row


@dataclass
class Group:
    """Blocks that belong to one calculation."""

    blocks: list[tuple[str, int, int]]
    quantities: list[Quantity] = field(default_factory=list)

    def areas(self) -> dict[str, list[Area]]:
        """Where its blocks stand on each sheet, with their headings: the rectangle round each."""
        found: dict[str, list[Area]] = defaultdict(list)
        by_block: dict[tuple[str, int, int], list[Quantity]] = defaultdict(list)
        for quantity in self.quantities:
            by_block[quantity.block].append(quantity)
        for (page, block, section), quantities in by_block.items():
            rows = [q.found.spot[0] for q in quantities]
            columns = [q.found.spot[1] for q in quantities] + ([block] if block > 0 else [])
            top = section if section and min(rows) - section <= _HEADING else min(rows)
            found[page].append((top, min(columns), max(rows), max(columns) + 1))
        return found


def groups_of(quantities: Sequence[Quantity], graph: Mapping[str, tuple[str, ...]]) -> list[Group]:
    """Blocks joined by formulas, or by standing on one sheet without contradicting each other."""
    blocks: dict[tuple[str, int, int], list[Quantity]] = defaultdict(list)
    for quantity in quantities:
        blocks[quantity.block].append(quantity)
    own = {name: _keys(entries) for name, entries in blocks.items()}
    parent = {name: name for name in blocks}

    def root(name: tuple[str, int, int]) -> tuple[str, int, int]:
        while parent[name] != name:
            parent[name] = parent[parent[name]]
            name = parent[name]
        return name

    members = {name: [name] for name in blocks}

    def join(one: tuple[str, int, int], other: tuple[str, int, int]) -> None:
        one, other = root(one), root(other)
        if one == other or _contradict(one, other, members, own):
            return
        parent[other] = one
        members[one] += members.pop(other)

    home = {q.stated.cell: q.block for q in quantities if q.stated}
    order = list(blocks)
    near = Counter(
        (home[cell], home[source])
        for cell, sources in graph.items()
        if cell in home
        for source in sources
        if source in home and home[source] != home[cell]
    )
    for (one, other), _ in near.most_common():
        join(*sorted((one, other), key=order.index))
    for page in dict.fromkeys(name[0] for name in order):
        here = [name for name in order if name[0] == page]
        roots = list(dict.fromkeys(map(root, here)))
        if len(roots) > MOST_BLOCKS or any(_contradict(a, b, members, own) for a, b in combinations(roots, 2)):
            # several calculations on one sheet: a block goes with the one before it, where they have nothing in common
            for before, name in pairwise(here):
                if not own[name] & set().union(*(own[m] for m in members[root(before)])):
                    join(before, name)
            continue
        for other in here[1:]:
            join(here[0], other)
    if len({root(name) for name in order}) > 1:
        _attach_lonely(order, members, root, parent, own)
    found = []
    for top in dict.fromkeys(root(name) for name in order):
        group = Group(members[top])
        group.quantities = sorted(
            (q for name in members[top] for q in blocks[name]), key=lambda q: (q.page, q.found.spot)
        )
        found.append(group)
    return found


def _keys(entries: Iterable[Quantity]) -> set[str]:
    return {q.stated.key for q in entries if q.stated and not q.echo and q.found.lane is None}


def _contradict(one, other, members, own) -> bool:
    """Whether two sets of blocks state the same things twice, as two calculations do."""
    if one == other:
        return False
    first = set().union(*(own[m] for m in members[one]))
    second = set().union(*(own[m] for m in members[other]))
    common = first & second
    return len(common) >= 3 or (len(common) >= 2 and 2 * len(common) >= min(len(first), len(second)))


def _attach_lonely(order, members, root, parent, own) -> None:
    """Blocks that state nothing twice belong to the calculation before them on their sheet."""
    for name in order:
        top = root(name)
        if len(set().union(*(own[m] for m in members[top]))) > 1:
            continue
        for other in order:
            target = root(other)
            if target != top and other[0] == name[0]:
                parent[top] = target
                members[target] += members.pop(top)
                break


def cases_of(group: Group, facts: Facts, name: str, notes: Judgement) -> list[SheetCase]:
    """The cases of a calculation: one, or one a lane with what all lanes share."""
    stated = [q for q in group.quantities if q.stated is not None]
    lanes: dict[int, list[Quantity]] = defaultdict(list)
    for quantity in stated:
        if quantity.found.lane is not None:
            lanes[quantity.found.lane].append(quantity)
    shared = [q for q in stated if q.found.lane is None]
    if not lanes:
        return [_case(name, shared, facts)]
    chosen = _chosen(lanes, notes)
    found = []
    for lane in chosen:
        head = next((q.found.head for q in lanes[lane] if q.found.head), f"{name} {lane}")
        own = {q.stated.key for q in lanes[lane]}
        beside = [q for q in shared if q.stated.key not in own]
        found.append(_case(head, [*beside, *lanes[lane]], facts))
    return found


# what only the flow in a pipe has together, and what others have
_OF_A_DUCT = {"diameter", "friction_factor"}
_OF_OTHERS = {"pitch_across", "pitch_along", "particle_diameter", "voidage", "film_flow", "friction_coefficient"}

_ENDS = {"inlet_temperature", "outlet_temperature"}


def exchanger_of(quantities: Sequence[Quantity], facts: Facts, name: str, dictionary: Mapping[str, object]) -> list:
    """The case of an exchanger whose streams stand in two blocks that do not say which is hot (tube side, shell side):
    the one that enters hotter. Nothing where there are no two such blocks."""
    blocks: dict[tuple[str, int, int], dict[str, Stated]] = defaultdict(dict)
    for quantity in quantities:
        if quantity.found.lane is None:
            blocks[quantity.block].setdefault(quantity.stated.key, quantity.stated)
    ends = [block for block, stated in blocks.items() if stated.keys() >= _ENDS]
    if len(ends) != 2 or any(q.stated.key.startswith("hot_") for q in quantities):
        return []
    cold, hot = sorted(ends, key=lambda block: blocks[block]["inlet_temperature"].si)
    sides = {hot: "hot", cold: "cold"}
    case = _case(name, [], facts)
    for quantity in sorted(quantities, key=lambda q: (q.page, q.found.spot)):
        key = quantity.stated.key
        if quantity.block in sides and f"{sides[quantity.block]}_{key}" in dictionary:
            key = f"{sides[quantity.block]}_{key}"
        elif quantity.block in sides and all(key in blocks[side] for side in sides):
            continue
        if quantity.found.lane is None:
            case.add(replace(quantity.stated, key=key))
    return [case]


def _chosen(lanes: Mapping[int, Sequence[Quantity]], notes: Judgement) -> list[int]:
    """The lanes that are judged: all, or of many with the same formulas the first ones and the last."""
    if len(lanes) <= MOST_CASES:
        return sorted(lanes)
    alike: dict[tuple, list[int]] = defaultdict(list)
    for lane, quantities in lanes.items():
        alike[tuple(sorted((q.stated.key, q.stated.typed) for q in quantities))].append(lane)
    usual = max(alike.values(), key=len)
    chosen = set()
    for group in alike.values():
        group = sorted(group)
        chosen.update(group if len(group) <= _JUDGED else [*group[: _JUDGED - 1], group[-1]])
    first = lanes[sorted(usual)[0]][0].stated.cell
    notes.notes.append((first, f"{len(usual)} cases with the same formulas; {_JUDGED} of them were recomputed"))
    return sorted(chosen)[:MOST_CASES]


def _case(name: str, quantities: Sequence[Quantity], facts: Facts) -> SheetCase:
    case = SheetCase(name)
    for quantity in sorted(quantities, key=lambda q: (q.page, q.found.spot)):
        case.add(quantity.stated)
    for key, value in facts.said.items():
        if key == "flow":
            case.flow = value
        elif key != "si":
            case.facts[key] = tuple(value) if key == "method" else value
    if case.flow is None and case.stated.keys() >= _OF_A_DUCT and not case.stated.keys() & _OF_OTHERS:
        case.flow = "duct"
    case.fact_cells.update(facts.cells)
    case.fact_cells |= {key: cell for key, cell in facts.cells.items() if key.startswith("neglects:")}
    return case


def stream_key(key: str, found: Found, dictionary: Mapping[str, object]) -> str:
    """The key of one stream of an exchanger where heading or column head names its side."""
    for text in (found.head, found.section):
        side = side_of(text)
        if side and not key.startswith(tuple(f"{s}_" for s in SIDES)) and f"{side}_{key}" in dictionary:
            return f"{side}_{key}"
    return key
