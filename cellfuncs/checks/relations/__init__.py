"""The declared list of what follows from what, one file a field. Importing it fills ``relation.RELATIONS``.

A new relation is one small function with the decorator; its parameters are keys of ``data/labels.csv``.
"""

from cellfuncs.checks.relation import RELATIONS
from cellfuncs.checks.relations import (  # noqa: F401
    by_group,
    by_method,
    exchangers,
    flow,
    gas,
    geometry,
    heat,
    machines,
    of_substance,
    temperatures,
    transient,
    walls,
)

__all__ = ["RELATIONS"]
