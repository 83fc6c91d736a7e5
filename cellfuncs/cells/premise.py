"""Cell functions on what a calculation rests on: premises, and the groups that a case determines."""

from cellfuncs.cells import solved
from cellfuncs.cells.catalogue import cell_function
from cellfuncs.terms.premises import COLUMNS


@cell_function(
    "CF_PREMISES",
    family="Terms",
    summary="What the whole calculation rests on: each premise with its figure, limit, state (holds, strained, fails, "
    "not judged), source and reason; what may hurt someone comes first.",
    returns="table",
    source="the limits and sources of cellfuncs/data/premises.csv",
    example="=CF_PREMISES(coolant)",
)
def premises(block):
    return [list(COLUMNS), *map(list, solved.premises(block))]
