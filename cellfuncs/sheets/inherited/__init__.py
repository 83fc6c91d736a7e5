"""Sheets that somebody else wrote: read as they stand, without a word about Cellfuncs in them.

=============  ============================================================================
formats.py     what a number format shows: decimals, per cent, a unit in it
page.py        the cells of a sheet: stored values, texts, formulas, number formats
shapes.py      formulas with their references taken out, so that copies are parsed once
texts.py       what a text in a cell is: label, symbol, unit, number with its unit, heading
tables.py      columns of numbers under labels: one row a case
rows.py        numbers beside labels: one value, or one column a case
settle.py      which quantity of the dictionary a label with its unit stands for
facts.py       what texts say: substances, arrangement, methods, regime, what is neglected
gather.py      labelled quantities into cases
regions.py     which texts belong to which calculation
found.py       a number with what stands around it
links.py       what depends on what
reading.py     all of it together: ``read_book``
=============  ============================================================================

The stored values are what the sheet says; nothing is recalculated here. What stays ambiguous becomes a
remark, not a guess.
"""
