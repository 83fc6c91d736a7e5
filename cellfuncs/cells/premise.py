"""Cell functions on what a calculation rests on: premises, and the groups that a case determines."""

from cellfuncs.cells import solved
from cellfuncs.cells.catalogue import cell_function
from cellfuncs.terms import determined, premises


@cell_function(
    "CF_PREMISES",
    family="Terms",
    summary="What the whole calculation rests on: each premise with its figure, limit, state (holds, strained, fails, "
    "not judged), source and reason; what may hurt someone comes first.",
    returns="table",
    source="the limits and sources of cellfuncs/data/premises.csv",
    example="=CF_PREMISES(coolant)",
)
def premise_table(block):
    return [list(premises.COLUMNS), *map(list, solved.premises(block))]


@cell_function(
    "CF_GROUPS",
    family="Cases",
    summary="The characteristic numbers that a case determines: name, symbol, value, what each compares and what the "
    "value says here.",
    returns="table",
    source="definitions of cellfuncs/data/groups.csv, limits of cellfuncs/data/premises.csv",
    example="=CF_GROUPS(coolant)",
)
def group_table(block):
    return [list(determined.COLUMNS), *map(list, determined.group_rows(solved.solution(block)))]
