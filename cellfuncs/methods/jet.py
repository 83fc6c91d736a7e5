"""Jets of gas on a wall, mean Nu of the wall that they cover. Re and Nu on the nozzle's diameter; of a slot on its
hydraulic diameter, twice its width. ``height`` is the distance of the nozzle, ``radius`` half of what one jet covers,
both over that diameter; ``open_area`` is the nozzles' part of the area.

Scatters are those that authors or handbooks give, mostly from memory.
"""

from cellfuncs.methods.algebra import sqrt
from cellfuncs.methods.base import Range, follows, method

_ROUND = {"jet": ("round",)}


@method(
    "Martin jet",
    gives="mean Nu",
    ranges=(Range("Re", 2000.0, 4e5), Range("H/D", 2.0, 12.0), Range("r/D", 2.5, 7.5)),
    scatter=0.15,
    property_temperature="film",
    source="martin-1977",
    flows=("jet",),
    where=_ROUND,
    length="diameter of the nozzle",
)
def martin_round(reynolds: float, prandtl: float, height: float, radius: float) -> float:
    """Mean Nu inside the radius of a single round jet; H/D and r/D."""
    k = 1.0 / radius
    shape = k * (1.0 - 1.1 * k) / (1.0 + 0.1 * (height - 6.0) * k)
    flow = 2.0 * sqrt(reynolds) * sqrt(1.0 + 0.005 * reynolds**0.55)
    return shape * flow * prandtl**0.42


@method(
    "Goldstein jet",
    gives="mean Nu",
    ranges=(Range("Re", 6.1e4, 1.24e5), Range("H/D", 6.0, 12.0), Range("Pr", 0.68, 0.76)),
    scatter=0.1,
    property_temperature="film",
    source="goldstein-1986",
    flows=("jet",),
    where=_ROUND | {"phase": ("gas",)},
    length="diameter of the nozzle",
)
def goldstein(reynolds: float, height: float, radius: float) -> float:
    """Mean Nu inside the radius of a round jet of air on a wall of given flux.

    (24 − |H/D − 7.75|) Re^0.76/(533 + 44(r/D)^1.285); scatter from memory.
    """
    return (24.0 - abs(height - 7.75)) * reynolds**0.76 / (533.0 + 44.0 * radius**1.285)


@method(
    "Martin slot jet",
    gives="mean Nu",
    ranges=(Range("Re", 3000.0, 9e4), Range("H/D", 2.0, 10.0), Range("r/D", 2.0, 25.0)),
    scatter=0.15,
    property_temperature="film",
    source="martin-1977",
    flows=("jet",),
    where={"jet": ("slot",)},
    length="hydraulic diameter of the slot, twice its width",
)
def martin_slot(reynolds: float, prandtl: float, height: float, radius: float) -> float:
    """Mean Nu to the distance x on both sides of a single slot, 1.53 Re^m Pr^0.42/(x/S + H/S + 1.39)."""
    power = 0.695 - 1.0 / (radius + height**1.33 + 3.06)
    return 1.53 / (radius + height + 1.39) * reynolds**power * prandtl**0.42


@method(
    "Martin jet array",
    gives="mean Nu",
    ranges=(Range("Re", 2000.0, 1e5), Range("H/D", 2.0, 12.0), Range("open area", 0.004, 0.04)),
    scatter=0.15,
    property_temperature="film",
    source="martin-1977",
    flows=("jet",),
    where={"jet": ("round array",)},
    length="diameter of the nozzle",
)
def martin_array(reynolds: float, prandtl: float, height: float, open_area: float) -> float:
    """Mean Nu under an array of round nozzles whose air leaves between them, K·G·Re^2/3 Pr^0.42/2."""
    root = sqrt(open_area)
    close = (1.0 + (height * root / 0.6) ** 6) ** -0.05
    shape = 2.0 * root * (1.0 - 2.2 * root) / (1.0 + 0.2 * (height - 6.0) * root)
    return 0.5 * close * shape * reynolds ** (2.0 / 3.0) * prandtl**0.42


@follows("open area/f0")
def open_area_ratio(height: float, open_area: float) -> float:
    """Open area over f0 = (60 + 4(H/S − 2)²)^−1/2."""
    return open_area * sqrt(60.0 + 4.0 * (height - 2.0) ** 2)


@method(
    "Martin slot array",
    gives="mean Nu",
    ranges=(
        Range("Re", 1500.0, 4e4),
        Range("H/D", 1.0, 40.0),
        Range("open area", low=0.008),
        Range("open area/f0", high=2.5),
    ),
    scatter=0.15,
    property_temperature="film",
    source="martin-1977",
    flows=("jet",),
    where={"jet": ("slot array",)},
    length="hydraulic diameter of the slot, twice its width",
)
def martin_slot_array(reynolds: float, prandtl: float, height: float, open_area: float) -> float:
    """Mean Nu under an array of slots, 2/3 f0^3/4 (2Re/(f/f0 + f0/f))^2/3 Pr^0.42."""
    ratio = open_area_ratio(height, open_area)
    part = open_area / ratio
    flow = 2.0 * reynolds / (ratio + 1.0 / ratio)
    return 2.0 / 3.0 * part**0.75 * flow ** (2.0 / 3.0) * prandtl**0.42
