"""What depends on what: the cells that each formula uses, names and references to other sheets resolved."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Mapping, Sequence
from functools import cached_property

from cellfuncs.books.externals import absolute
from cellfuncs.books.grid import rectangle
from cellfuncs.books.scans import DefinedName
from cellfuncs.sheets.inherited.page import Page, Spot, address
from cellfuncs.sheets.inherited.shapes import Shape, Target, shape_of

MOST_WRITTEN_OUT = 64  # cells of a range that stand in the graph one by one
_NAME = re.compile(r"(?<![\w.\\$!'])[^\W\d][\w.\\]*(?![\w.\\(!\['])")


class Links:
    """The formulas of a workbook and what they use."""

    def __init__(self, pages: Sequence[Page], names: Sequence[DefinedName]) -> None:
        self.pages = {page.name: page for page in pages}
        self._folded = {page.name.casefold(): page.name for page in pages}
        self._names: dict[tuple[str, str | None], tuple[str, Target]] = {}
        for name in names:
            shape = shape_of(name.text.lstrip("="))
            if len(shape.targets) == 1 and shape.text.strip() == "_r1_":
                place = name.sheet.casefold() if name.sheet else None
                self._names[name.name.casefold(), place] = (name.name, shape.targets[0])

    @property
    def has_names(self) -> bool:
        """Whether the workbook defines names of cells."""
        return bool(self._names)

    def target(self, target: Target, sheet: str) -> tuple[Page, tuple[int, int, int, int]] | None:
        """The sheet and area of a reference in a formula of ``sheet``; None outside the workbook."""
        name = sheet if target.sheet is None else self._folded.get(target.sheet.casefold())
        return None if name is None else (self.pages[name], target.area)

    def name(self, text: str, sheet: str) -> Target | None:
        """What a defined name means in a formula of ``sheet``."""
        folded = text.casefold()
        found = self._names.get((folded, sheet.casefold())) or self._names.get((folded, None))
        return found and found[1]

    def named(self, sheet: str) -> Iterator[tuple[str, Spot]]:
        """The names of single cells of a sheet."""
        for name, target in self._names.values():
            place = target.sheet and self._folded.get(target.sheet.casefold())
            if place == sheet and target.area[:2] == target.area[2:]:
                yield name, target.area[:2]

    @cached_property
    def shapes(self) -> Mapping[str, tuple[str, Spot, Shape]]:
        """Every formula but copies in long tables: sheet, place, and shape, by its cell."""
        found = {}
        for page in self.pages.values():
            for spot, formula in page.formulas.items():
                if spot not in page.copies:
                    found[address(page.name, spot)] = (page.name, spot, shape_of(formula.text))
        return found

    @cached_property
    def graph(self) -> Mapping[str, tuple[str, ...]]:
        """Every formula cell and the cells that its formula uses directly."""
        return {cell: tuple(self._used(sheet, shape)) for cell, (sheet, _, shape) in self.shapes.items()}

    @cached_property
    def users(self) -> Mapping[str, tuple[str, ...]]:
        """Every cell that formulas use, and these formulas."""
        found: dict[str, list[str]] = {}
        for cell, sources in self.graph.items():
            for source in sources:
                found.setdefault(source, []).append(cell)
        return {cell: tuple(users) for cell, users in found.items()}

    def resting_on(self, cells: Iterable[str], most: int | None = None) -> dict[str, None]:
        """All formulas that rest on some cells, up to ``most`` of them."""
        found: dict[str, None] = {}
        waiting = [user for cell in cells for user in self.users.get(cell, ())]
        while waiting and (most is None or len(found) <= most):
            at = waiting.pop()
            if at not in found:
                found[at] = None
                waiting.extend(self.users.get(at, ()))
        return found

    def _used(self, sheet: str, shape: Shape) -> list[str]:
        targets = list(shape.targets)
        if self._names:
            for match in _NAME.finditer(shape.text):
                named = self.name(match[0], sheet)
                if named is not None:
                    targets.append(named)
        found: dict[str, None] = {}
        for target in targets:
            place = self.target(target, sheet)
            if place is None:
                continue
            page, (top, left, bottom, right) = place
            if (top, left) == (bottom, right):
                found[address(page.name, (top, left))] = None
            elif (bottom - top + 1) * (right - left + 1) <= MOST_WRITTEN_OUT:
                for row in range(top, bottom + 1):
                    for column in range(left, right + 1):
                        if (row, column) in page.values:
                            found[address(page.name, (row, column))] = None
        return list(found)

    def formula(self, cell: str) -> tuple[str | None, tuple[str, ...]]:
        """The formula of a cell with its ``=``, and the cells it uses; None for a typed value."""
        place = self.shapes.get(cell)
        if place is None:
            return None, ()
        return "=" + self.pages[place[0]].formulas[place[1]].text, self.graph[cell]

    @staticmethod
    def place(cell: str) -> Spot | None:
        """Row and column of ``Sheet1!C7``."""
        area = rectangle(cell.rpartition("!")[2])
        return None if area is None else area[:2]

    def without_names(self, text: str, sheet: str) -> str:
        """A formula with the areas of the workbook's names in their place."""
        if not self._names:
            return text

        def area(match: re.Match[str]) -> str:
            named = self.name(match[0], sheet)
            if named is None:
                return match[0]
            place = self.target(named, sheet)
            return match[0] if place is None else absolute(place[0].name, place[1])

        return _NAME.sub(area, text)

    def is_echo(self, cell: str) -> bool:
        """Whether a formula only repeats another cell."""
        place = self.shapes.get(cell)
        return place is not None and place[2].text.strip("+() ") == "_r1_" and len(place[2].targets) == 1
