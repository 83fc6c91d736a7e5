"""Solved blocks, remembered by content: forty cells on one block cost one solution."""

from functools import lru_cache
from typing import Any

from cellfuncs.answers import Solution, solve
from cellfuncs.cases import read_case
from cellfuncs.terms import term_rows
from cellfuncs.terms.premises import premise_rows

_MOST_BLOCKS = 512

Block = tuple[tuple[Any, ...], ...]


@lru_cache(maxsize=_MOST_BLOCKS)
def solution(block: Block) -> Solution:
    """The solution of a block as ``convert.read_block`` gives it."""
    return solve(read_case(block))


@lru_cache(maxsize=_MOST_BLOCKS)
def terms(block: Block, equation: str) -> tuple[tuple[Any, ...], ...]:
    """The rows of the term table of a block."""
    return tuple(term_rows(solution(block), equation))


@lru_cache(maxsize=_MOST_BLOCKS)
def premises(block: Block) -> tuple[tuple[Any, ...], ...]:
    """The rows of the table of premises of a block."""
    return tuple(premise_rows(solution(block)))
