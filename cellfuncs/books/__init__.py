"""Workbook files: the gate, reading, writing values in place, and the engine.

Knows no physics and no function names; whoever wants functions evaluated hands over a mapping.
Every workbook passes the gate (``inspect``) before any other code reads it, and everything after works on
the bytes that the gate has seen, so that a file cannot change in between. No link is followed, no macro
is looked into.

=============  ==============================================================================
package.py     the zip container: strict directory, bounded inflating, a copy with parts replaced
gate.py        the one pre-scan, its limits and refusals; returns a :class:`Book`
scans.py       what the gate looks for in the main part and in each worksheet
reading.py     formulas, stored values and byte offsets of one sheet
strings.py     shared strings, stored values of single cells
splice.py      new values set into the sheet's own text
rewrite.py     formulas changed wherever a part writes one
parts.py       parts, relations and content types added and taken out
notes.py       notes put on cells
added.py       a sheet of texts added
share.py       a copy with values in the place of some formulas, which are kept in notes
xmltext.py     values as cell texts and back
grid.py        rows, columns, areas
formulas.py    formulas as texts: prefixes of names, shared formulas, references
influence.py   which formulas depend on which
externals.py   tables of the workbook, and stored values of other workbooks
translate.py   a formula of the file as the engine wants it
stand_in.py    the small package that the engine gets instead of the file
engine.py      evaluation: what has to be calculated, and the comparison with stored values
what_if.py     some formulas with other values, beside the workbook
exchange.py    values on their way to and from the engine
outcome.py     what was calculated, as values for cells
child.py       a bounded process for work on files from strangers
areas.py       contiguous areas of our formulas with labels and heads, for a reader
=============  ==============================================================================
"""

from cellfuncs.books.gate import Book, SheetPart, inspect
from cellfuncs.books.scans import DefinedName

__all__ = ["Book", "DefinedName", "SheetPart", "inspect"]
