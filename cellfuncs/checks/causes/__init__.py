"""Hypotheses: what was probably done where a number disagrees. Each reproduces the stated value, or is not named.

``guess``       what a hypothesis is, and how they are ranked
``digits``      slips of typing
``ratios``      factors between units
``substitutes`` another number in the place of the right one
``of_property`` another temperature, pressure or fluid
"""

from cellfuncs.checks.causes.guess import Guess, ranked
from cellfuncs.checks.causes.search import causes_of, causes_of_ratio

__all__ = ["Guess", "causes_of", "causes_of_ratio", "ranked"]
