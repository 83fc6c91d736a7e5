"""The case: one operating point, read from a block of labelled rows, and what follows by definition."""

from cellfuncs.cases.block import read_case
from cellfuncs.cases.case import Case

__all__ = ["Case", "read_case"]
