"""Units through the formulas of a sheet: what dimension and scale a formula gives, and whether that is what is stated.

============  ===============================================================================
constants.py  numbers in formulas that convert units or carry them (``data/sheet_constants.csv``)
measure.py    dimension, scale and zero of a number, and how they go through + - * / and powers
derive.py     a formula's tree with the measures of its cells: the measure of its result
cells.py      the measures of a sheet's cells: stated by label and unit, else derived
judge.py      derived against stated: findings
============  ===============================================================================

A formula with numbers in it that neither are plain nor convert units is an empirical one: where it does not come
out, it is not judged.
"""
