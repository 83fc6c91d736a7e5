"""The one family of refusals.

Raised low, with a sentence that says what was there and what would do, and turned into the text
of a cell in one place only (``cells/faults.py``). Whoever knows which argument is to blame says so
with ``argument``; otherwise the cell layer names the one it was reading.
"""


class CellfuncsError(ValueError):
    """Root of every refusal; ``str(error)`` is one clear sentence."""

    def __init__(self, text: str, argument: str | None = None):
        super().__init__(text)
        self.argument = argument


class UnitRefused(CellfuncsError):
    """A unit text that is unknown, ambiguous, or of another kind than the one wanted."""


class NumberRefused(CellfuncsError):
    """A text that is no number, or may be two different numbers."""


class OutOfRange(CellfuncsError):
    """A value outside the physical or published range; the text names the range."""


class UnknownName(CellfuncsError):
    """A substance, property, label or choice that is not known; the text names the nearest."""


class NoModel(CellfuncsError):
    """A property or effect for which no published model is at hand."""


class CaseRefused(CellfuncsError):
    """A case block that does not make one case: missing, doubled or contradicting rows."""


class BookRefused(CellfuncsError):
    """A file that is no workbook, or one outside the limits of the gate."""
