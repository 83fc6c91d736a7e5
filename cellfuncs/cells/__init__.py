"""The cell functions: one catalogue, one conversion of cell values, one file a family.

To add a cell function, write one function in the file of its family and decorate it with
``cell_function``; argument names come from ``data/arguments.csv``.
"""
