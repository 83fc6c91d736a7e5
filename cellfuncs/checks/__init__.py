"""Checks: recompute what a sheet states from what else it states, and find the cause where they differ.

``stated`` holds what was read, ``relations`` the declared list of what follows from what.
"""

from cellfuncs.checks.stated import Graph, SheetCase, Stated

__all__ = ["Graph", "SheetCase", "Stated"]
