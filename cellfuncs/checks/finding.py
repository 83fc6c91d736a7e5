"""What a check reports: a cell, what it states, what comes out, and the likely cause."""

from dataclasses import dataclass, field

SEVERITIES = ("error", "warning", "note")

# the causes, exactly as outputs write them
CAUSES = (
    "unit-factor",
    "radius-for-diameter",
    "kinematic-for-dynamic",
    "celsius-for-kelvin",
    "gauge-for-absolute",
    "property-temperature",
    "wrong-fluid",
    "fanning-for-darcy",
    "wrong-regime",
    "outside-range",
    "exponent-heating-cooling",
    "log-base",
    "mean-difference",
    "area-factor",
    "hard-coded",
    "typing-slip",
    "dimension-mismatch",
    "dropped-term",
    "unknown",
)


@dataclass(frozen=True)
class Finding:
    """One finding.

    ``stated`` is the number as the sheet shows it, ``recomputed`` what comes out, both in ``unit`` (None where there is
    none); ``code`` is one of ``CAUSES``, ``cause`` the same in words with the numbers in it, ``confidence`` 0 to 1.
    ``inherited`` are cells that are wrong only because of this one. ``reasoning`` are lines with the numbers.
    """

    cell: str
    severity: str
    quantity: str
    stated: float | None
    recomputed: float | None
    unit: str
    code: str
    cause: str
    confidence: float
    message: str
    source: str = ""
    inherited: tuple[str, ...] = ()
    case: str = ""
    reasoning: tuple[str, ...] = ()

    def __post_init__(self) -> None:
        if self.severity not in SEVERITIES or self.code not in CAUSES:
            raise ValueError(f"{self.severity} or {self.code} is no word of the list")


@dataclass
class Judgement:
    """All that a check says: findings, the cells that agree with what they are, and cells that were not judged."""

    findings: list[Finding] = field(default_factory=list)
    agreed: list[tuple[str, str]] = field(default_factory=list)  # cell, quantity
    notes: list[tuple[str, str]] = field(default_factory=list)  # cell, why
