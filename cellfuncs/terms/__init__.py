"""The scaled energy and momentum equations of a case: how large each term is, and which may be left out.

The sizes of the energy terms of a family of flows stand in one file each (``duct.py``, ``layer.py``, ``gap.py``,
``free.py`` …), those of momentum in ``momentum.py``; ``verdicts.py`` turns sizes into verdicts, ``table.py`` puts
both into rows with their reasons. ``premises.py`` judges what the whole calculation rests on, ``limits.py`` finds
where a term begins to count, ``facts.py`` tells what a solved case of any kind has.
"""

from cellfuncs.terms.table import ALL_LEFT_OUT, COLUMNS, EQUATIONS, MEASURES, MOMENTUM_TERMS, TERMS, term_rows

__all__ = ["ALL_LEFT_OUT", "COLUMNS", "EQUATIONS", "MEASURES", "MOMENTUM_TERMS", "TERMS", "term_rows"]
