"""Checks: recompute what a sheet states from what else it states, and find the cause where they differ.

``stated``      what was read from a sheet
``relation``    what a relation is; ``relations/`` is the declared list of them
``references``  who refers to whom
``resolve``     which number fills a parameter of a relation
``trial``       one relation tried on one number
``causes/``     hypotheses for a disagreement
``neglected``   effects that a sheet leaves out, against terms
``judge``       all of it together: findings, and what agrees
"""

from cellfuncs.checks.finding import Finding, Judgement
from cellfuncs.checks.stated import Graph, SheetCase, Stated

__all__ = ["Finding", "Graph", "Judgement", "SheetCase", "Stated"]
