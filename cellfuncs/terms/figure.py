"""What a premise hands over before it is given its state."""

from dataclasses import dataclass


@dataclass(frozen=True)
class Figure:
    """The figure of a premise in a case.

    ``limits`` names the row of ``data/premises.csv`` where it is another than the premise's own. ``limit`` is shown
    in place of the row's; ``state`` is one that needs no limits.
    """

    value: float
    reason: str
    limits: str | None = None
    limit: float | None = None
    state: str | None = None
