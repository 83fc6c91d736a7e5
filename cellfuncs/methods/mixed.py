"""The blend of forced and free convection."""

from cellfuncs.methods.base import METHODS, Range, method


@method(
    "Churchill blend",
    gives="mean Nu",
    ranges=(Range("Gr/Re2", 0.0, 100.0),),
    scatter=0.2,
    property_temperature="film",
    source="churchill-1977",
)
def blend(forced: float, free: float, direction: str) -> float:
    """Nu of mixed convection, Nu³ = Nu_F³ ± Nu_N³: + assisting and transverse, − opposing."""
    sign = -1.0 if direction == "opposing" else 1.0
    return abs(forced**3 + sign * free**3) ** (1.0 / 3.0)


def outside(ratio: float, allow: bool) -> str:
    """What lies outside the range of the blend."""
    return METHODS["Churchill blend"].check(allow, **{"Gr/Re2": ratio})
