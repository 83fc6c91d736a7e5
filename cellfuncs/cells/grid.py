"""A range as an argument: its values in rows, the faults of single cells, and how ranges fit together."""

import math
from collections.abc import Iterator
from dataclasses import dataclass, field
from typing import Any

from cellfuncs.errors import NumberRefused

MOST_CELLS = 200_000


@dataclass
class Grid:
    """A range of an argument: values in rows, and the faults of single cells by position."""

    rows: list[list[Any]]
    faults: dict[tuple[int, int], str] = field(default_factory=dict)

    @property
    def shape(self) -> tuple[int, int]:
        return len(self.rows), len(self.rows[0])

    def at(self, i: int, j: int) -> Any:
        """Value at a place of the broadcast shape."""
        rows = self.rows
        row = rows[i if len(rows) > 1 else 0]
        return row[j if len(row) > 1 else 0]

    def fault_at(self, i: int, j: int) -> str | None:
        if not self.faults:
            return None
        height, width = self.shape
        return self.faults.get((i if height > 1 else 0, j if width > 1 else 0))

    def array(self):
        """The values as a float array (nan where a cell is faulty)."""
        import numpy as np

        return np.array([[math.nan if v is None else v for v in row] for row in self.rows], dtype=float)


def positions(shape: tuple[int, int]) -> Iterator[tuple[int, int]]:
    for i in range(shape[0]):
        for j in range(shape[1]):
            yield i, j


def common_shape(grids: list[Grid]) -> tuple[int, int]:
    """The shape that ranges of the arguments share; single rows and columns stretch."""
    height = max(g.shape[0] for g in grids)
    width = max(g.shape[1] for g in grids)
    for grid in grids:
        if grid.shape[0] not in (1, height) or grid.shape[1] not in (1, width):
            raise NumberRefused(
                f"ranges of {grid.shape[0]} x {grid.shape[1]} and {height} x {width} cells do not fit together"
            )
    if height * width > MOST_CELLS:
        raise NumberRefused(f"{height * width:,} answers; at most {MOST_CELLS:,} in one call")
    return height, width
