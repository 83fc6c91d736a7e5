"""Cellfuncs: cell functions for convection and fluid-friction calculations in workbooks.

Where does a new function go? Ask which question it answers, and take the lowest room that can:

* what a text means as a number with a unit            -> ``quantities``
* a property of a substance                            -> ``substances``
* a characteristic number                              -> ``groups``
* a label, or what follows from a case by definition   -> ``cases``
* a published correlation                              -> ``methods``
* an answer of a case (outlet, coefficient, ...)       -> ``answers``
* the size of a term, a verdict, a premise             -> ``terms``
* something a cell can call                            -> ``cells`` (one decorated function)
* another program that shows cells                     -> ``hosts``
* workbook files as files                              -> ``books``

Imports go down that list, never up. Importing this package imports nothing heavy.
"""

__version__ = "0.1.0"
