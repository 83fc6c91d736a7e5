"""Tube banks, beds of particles and falling films: coefficients and friction."""

from cellfuncs.methods.base import METHODS, Range, method

# Žukauskas 1972: arrangement -> rows of (Re from, C, exponent); C of the staggered bank from Re 1e3 also
# carries (ST/SL)^1/5 while ST/SL is below 2
_BANK = {
    "inline": ((10.0, 0.80, 0.40), (100.0, 0.51, 0.50), (1e3, 0.27, 0.63), (2e5, 0.021, 0.84)),
    "staggered": ((10.0, 0.90, 0.40), (100.0, 0.51, 0.50), (1e3, 0.40, 0.60), (2e5, 0.022, 0.84)),
}
_ROWS = (1, 2, 3, 4, 5, 7, 10, 13, 16, 20)
_ROW_FACTOR = {
    "inline": (0.70, 0.80, 0.86, 0.90, 0.92, 0.95, 0.97, 0.98, 0.99, 1.0),
    "staggered": (0.64, 0.76, 0.84, 0.89, 0.92, 0.95, 0.97, 0.98, 0.99, 1.0),
}


@method(
    "Zukauskas bank",
    gives="mean Nu",
    ranges=(Range("Re", 10.0, 2e6), Range("Pr", 0.7, 500.0)),
    scatter=0.15,
    property_temperature="mean bulk",
    source="zukauskas-1972",
)
def bank(reynolds: float, prandtl: float, arrangement: str, across: float, along: float, rows: float) -> float:
    """Mean Nu of a tube bank; Re with the velocity of the narrowest section; pitches over the diameter."""
    table = _BANK[arrangement]
    _, c, m = next(row for row in reversed(table) if reynolds >= row[0] or row is table[0])
    if arrangement == "staggered" and m == 0.60 and across / along < 2.0:
        c = 0.35 * (across / along) ** 0.2
    return _row_factor(arrangement, rows) * c * reynolds**m * prandtl**0.36


def _row_factor(arrangement: str, rows: float) -> float:
    """Fewer than twenty rows give less, linear between the published rows."""
    factors = _ROW_FACTOR[arrangement]
    for k in range(len(_ROWS) - 1):
        if rows <= _ROWS[k + 1]:
            t = max(0.0, (rows - _ROWS[k]) / (_ROWS[k + 1] - _ROWS[k]))
            return factors[k] + t * (factors[k + 1] - factors[k])
    return 1.0


@method(
    "Jakob bank friction",
    gives="pressure drop",
    ranges=(Range("Re", 2000.0, 4e4),),
    scatter=0.25,
    property_temperature="mean bulk",
    source="jakob-1938",
)
def bank_drop(
    reynolds: float, density: float, velocity: float, arrangement: str, across: float, along: float, rows: float
) -> float:
    """Pressure drop [Pa] of a bank, 2f'·N·ρU² with the velocity of the narrowest section."""
    open_ratio = across - 1.0
    if arrangement == "staggered":
        factor = (0.25 + 0.118 / open_ratio**1.08) * reynolds**-0.16
    else:
        factor = (0.044 + 0.08 * along / open_ratio ** (0.43 + 1.13 / along)) * reynolds**-0.15
    return 2.0 * factor * rows * density * velocity**2


@method(
    "Wakao bed",
    gives="mean Nu",
    ranges=(Range("Re", 15.0, 8500.0),),
    scatter=0.3,
    property_temperature="mean bulk",
    source="wakao-1979",
)
def bed(reynolds: float, prandtl: float) -> float:
    """Nu of the particles of a bed on their diameter; Re with the superficial velocity."""
    return 2.0 + 1.1 * reynolds**0.6 * prandtl ** (1.0 / 3.0)


@method(
    "Ergun",
    gives="pressure drop",
    ranges=(Range("voidage", 0.36, 0.5),),
    scatter=0.25,
    property_temperature="mean bulk",
    source="ergun-1952",
)
def bed_gradient(velocity: float, diameter: float, voidage: float, density: float, viscosity: float) -> float:
    """Pressure gradient [Pa/m] of a bed, viscous and inertial part; superficial velocity."""
    solid = 1.0 - voidage
    viscous = 150.0 * solid**2 * viscosity * velocity / (voidage**3 * diameter**2)
    return viscous + 1.75 * solid * density * velocity**2 / (voidage**3 * diameter)


@method(
    "laminar film",
    gives="mean Nu",
    ranges=(Range("film Re", high=1800.0),),
    scatter=0.2,
    property_temperature="mean bulk",
    source="nusselt-1923",
)
def film(wall: str) -> float:
    """Nu on the thickness of a developed laminar falling film: 1.88, or 35/17 for a flux; waves add up to 20 %."""
    return 35.0 / 17.0 if wall == "flux" else 1.88


def film_thickness(flow: float, density: float, viscosity: float, gravity: float) -> float:
    """Nusselt's thickness [m] of a falling film, (3μΓ/(ρ²g))^1/3, Γ in kg/(m s)."""
    return (3.0 * viscosity * flow / (density**2 * gravity)) ** (1.0 / 3.0)


def film_outside(flow: float, viscosity: float, allow: bool) -> str:
    return METHODS["laminar film"].check(allow, **{"film Re": 4.0 * flow / viscosity})
