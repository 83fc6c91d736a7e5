"""Loss coefficients K of fittings and changes of section: Δp = K·ρU²/2, beyond the friction of straight duct.

U is the velocity in the narrow section where the section changes, otherwise in the tube. Entry losses of
laminar flow stand in ``friction_laminar.py``.
"""

import math
from functools import lru_cache

from cellfuncs.errors import UnknownName
from cellfuncs.methods.algebra import between, cos, sqrt, where
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.coil_friction import ito_turbulent
from cellfuncs.sources import read_table

LENGTH = "tube diameter"
CHANGE = {"shape": ("change of section",)}
AREAS = Range("A1/A2", 0.01, 1.0)
INCH = 0.0254
RADIANS = math.pi / 180.0

# Idelchik's entrance with a rounded edge in a wall: radius over diameter, K
_ROUNDING = (0.0, 0.01, 0.02, 0.03, 0.04, 0.05, 0.06, 0.08, 0.10, 0.12, 0.16, 0.20)
_ROUNDED = (0.50, 0.43, 0.36, 0.31, 0.26, 0.22, 0.20, 0.15, 0.12, 0.09, 0.06, 0.03)


@lru_cache(maxsize=1)
def fittings() -> dict[str, tuple[float, float, bool]]:
    """Fitting -> K1, K of large Re, whether K grows in small bores (``data/loss_coefficients.csv``)."""
    return {
        row["fitting"]: (float(row["per_reynolds"]), float(row["large"]), row["grows_when_small"] == "yes")
        for row in read_table("loss_coefficients.csv")
    }


@method(
    "Hooper two-K",
    gives="loss coefficient",
    ranges=(Range("Re", 50.0, 1e8), Range("diameter", 0.01, 1.2)),
    scatter=0.3,
    property_temperature="mean bulk",
    source="hooper-1981",
    flows=("duct",),
    length=LENGTH,
)
def hooper(reynolds: float, fitting: str, diameter: float) -> float:
    """K of a fitting, K1/Re + K∞ (1 + 1 inch/d), laminar and turbulent; diameter [m] is the inner one."""
    if fitting not in fittings():
        import difflib

        near = difflib.get_close_matches(str(fitting), fittings(), 1, 0.3) or list(fittings())[:1]
        raise UnknownName(f'"{str(fitting)[:40]}" is no fitting with a loss coefficient here; there is "{near[0]}"')
    per_reynolds, large, grows = fittings()[fitting]
    return per_reynolds / reynolds + large * (1.0 + (INCH / diameter if grows else 0.0 * diameter))


@method(
    "Borda-Carnot",
    gives="loss coefficient",
    ranges=(Range("Re", 1e4), Range("A1/A2", 0.0001, 1.0)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="borda-carnot",
    flows=("duct",),
    where=CHANGE,
    length=LENGTH,
)
def borda_carnot(area_ratio: float) -> float:
    """K of a sudden expansion on the velocity before it, (1 − A1/A2)²; an outlet into a large space has 1."""
    return (1.0 - area_ratio) ** 2


@method(
    "sudden contraction",
    gives="loss coefficient",
    ranges=(Range("Re", 1e4), AREAS),
    scatter=0.1,
    property_temperature="mean bulk",
    source="idelchik-1986",
    flows=("duct",),
    where=CHANGE,
    length=LENGTH,
)
def contraction(area_ratio: float) -> float:
    """K of a sudden contraction on the velocity behind it, 0.5 (1 − A1/A2)^3/4; a sharp inlet has 0.5."""
    return 0.5 * (1.0 - area_ratio) ** 0.75


@method(
    "sharp orifice",
    gives="loss coefficient",
    ranges=(Range("Re", 1e5), Range("A1/A2", 0.02, 0.9)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="idelchik-1986",
    flows=("duct",),
    where=CHANGE,
    length=LENGTH,
)
def orifice(area_ratio: float) -> float:
    """K of a sharp-edged orifice on the velocity in the tube, (1 − a + 0.707 (1 − a)^3/8)²/a², a = A1/A2."""
    return (1.0 - area_ratio + math.sqrt(0.5) * (1.0 - area_ratio) ** 0.375) ** 2 / area_ratio**2


@method(
    "conical diffuser",
    gives="loss coefficient",
    ranges=(Range("Re", 1e5), Range("A1/A2", 0.05, 1.0), Range("cone angle", 3.0, 40.0)),
    scatter=0.2,
    property_temperature="mean bulk",
    source="idelchik-1986",
    flows=("duct",),
    where=CHANGE,
    length=LENGTH,
)
def diffuser(area_ratio: float, cone_angle: float, friction: float) -> float:
    """K of a cone that widens, on the velocity before it: 3.2 tan(α/2)^5/4 (1 − A1/A2)² and its wall friction."""
    cosine = cos(0.5 * cone_angle * RADIANS)
    sine = sqrt(1.0 - cosine * cosine)
    expansion = 3.2 * (sine / cosine) ** 1.25 * (1.0 - area_ratio) ** 2
    return expansion + friction / (8.0 * sine) * (1.0 - area_ratio**2)


@method(
    "rounded entrance",
    gives="loss coefficient",
    ranges=(Range("Re", 1e4), Range("edge r/D", 0.0, 1.0)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="idelchik-1986",
    flows=("duct",),
    where=CHANGE,
    length=LENGTH,
)
def rounded_entrance(rounding: float) -> float:
    """K of an entrance flush with a wall: 0.5 with a sharp edge, 0.03 with a well-rounded one (table)."""
    return between(rounding, _ROUNDING, _ROUNDED)


@method(
    "mitre bend",
    gives="loss coefficient",
    ranges=(Range("Re", 2e4), Range("bend angle", 20.0, 130.0)),
    scatter=0.2,
    property_temperature="mean bulk",
    source="idelchik-1986",
    flows=("duct",),
    where={"shape": ("bend",)},
    length=LENGTH,
)
def mitre(bend_angle: float) -> float:
    """K of a sharp mitre, 0.95 sin²(δ/2) + 2.05 sin⁴(δ/2) (Weisbach)."""
    half = 0.5 * (1.0 - cos(bend_angle * RADIANS))
    return 0.95 * half + 2.05 * half * half


@method(
    "Itō bend",
    gives="loss coefficient",
    ranges=(Range("Re", 2e4, 4e5), Range("r/d", 1.0, 25.0), Range("bend angle", 45.0, 180.0)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="ito-1960",
    flows=("duct",),
    where={"shape": ("bend",)},
    length=LENGTH,
)
def ito_bend(reynolds: float, bend_radius: float, bend_angle: float) -> float:
    """K of a smooth bend, its wall friction included; published for 45, 90, 180 degrees, straight between."""
    radii = 2.0 * bend_radius  # radius of the bend over that of the tube
    at_45 = 1.0 + 14.2 * radii**-1.47
    at_90 = where(radii < 19.7, 0.95 + 17.2 * radii**-1.96, 1.0)
    at_180 = 1.0 + 116.0 * radii**-4.52
    low = at_45 + (at_90 - at_45) * (bend_angle - 45.0) / 45.0
    high = at_90 + (at_180 - at_90) * (bend_angle - 90.0) / 90.0
    bent = where(bend_angle < 90.0, low, high) * bend_angle
    gentle = 0.5 * RADIANS * ito_turbulent(reynolds, 1.0 / radii) * radii
    tight = 0.00241 * reynolds**-0.17 * radii**0.84
    return bent * where(reynolds < 91.0 * radii**2, gentle, tight)
