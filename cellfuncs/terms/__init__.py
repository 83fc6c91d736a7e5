"""The scaled energy equation of a case: how large each term is, and which may be left out.

The sizes of a flow kind stand in one file each (``duct.py``, ``plate.py``, ``gap.py``); ``verdicts.py``
turns sizes into verdicts, ``table.py`` puts both into rows with their reasons.
"""

from cellfuncs.terms.table import COLUMNS, MEASURES, TERMS, term_rows

__all__ = ["COLUMNS", "MEASURES", "TERMS", "term_rows"]
