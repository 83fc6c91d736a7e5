"""Workbook files: the gate, reading, writing values in place, and the engine.

Knows no physics and no function names; whoever wants functions evaluated hands over a mapping.
Every workbook passes the gate (``gate.inspect``) before any other code reads it, and everything after
works on the bytes that the gate has seen, so that a file cannot change in between.

==============  ==========================================================================
package.py      the zip container: strict directory, bounded inflating, writing a copy
gate.py         the one pre-scan, its limits and refusals; returns a :class:`Book`
reading.py      formulas, stored values and byte offsets of one sheet
splice.py       new values set into the sheet's own text
formulas.py     names with prefixes, shared formulas, references, what depends on what
externals.py    values that the file has stored of other workbooks; table ranges
engine.py       evaluation with the engine, and the comparison with stored values
==============  ==========================================================================
"""

from cellfuncs.books.gate import Book, DefinedName, SheetPart, inspect

__all__ = ["Book", "DefinedName", "SheetPart", "inspect"]
