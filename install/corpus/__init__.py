"""Workbooks with seeded slips, and how well the check finds them.

Everything here is computed by plain spreadsheet formulas and this folder's own factors and property formulas, never by
the package that is judged. A sheet follows from its seed: the calculation, its numbers, the layout, the system of
units, and at most one slip.

``formula``       formulas with conversions written by hand, and their values
``properties``    water and air from outside the package
``calculation``   what a calculation is: lines, texts, slips
``calculations/`` twenty-five kinds of them
``slips``         slips that any calculation can have
``layouts``       how the lines stand in a sheet
``sheet``         a seed's workbook
``score``         recall, precision, causes
"""
