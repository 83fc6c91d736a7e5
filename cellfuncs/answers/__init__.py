"""From a case to its answers: closes the loops that need a coefficient (property and wall temperature)."""

from cellfuncs.answers.solve import Solution, solve

__all__ = ["Solution", "solve"]
