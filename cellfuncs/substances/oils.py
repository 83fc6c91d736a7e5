"""Mineral oils: viscosity by two points (ASTM D341) or grade and viscosity index; the rest by relations."""

import math
import re
import unicodedata
from functools import cache

from ..errors import NoModel, NumberRefused, OutOfRange, UnknownName
from ..sources import read_table
from .base import ATMOSPHERE, Limits, Substance, check_state, phase_word
from .properties import property_key

STOKES = 1e-6  # [m2/s] one cSt or mm2/s
T_40, T_100 = 313.15, 373.15
LOWEST, HIGHEST = 0.21, 2e7  # [mm2/s] range of ASTM D341
T_OIL = (243.15, 423.15)  # [K] range in which these oils are asked for: -30 to 150 degC
PARAFFINIC = 0.82  # viscosity-gravity constant of a paraffinic oil, for a density that is not given
P_MAX = 1e7  # [Pa] the effect of pressure is left out, common practice below this
DENSITY_RANGE = (800.9, 1163.5)  # [kg/m3 at 15 degC] of the lubricating-oil table
WATER_60F = 999.016  # [kg/m3] density of water at 60 degF, for relative densities


def _height(viscosity, lib):
    """The double logarithm of ASTM D341 for viscosities in mm2/s; `lib` is math, or numpy for arrays."""
    v = viscosity
    return lib.log10(lib.log10(v + 0.7 + lib.exp(-1.47 - 1.84 * v - 0.51 * v * v)))


def _viscosity_at(height, lib):
    """The inverse of ``_height`` [mm2/s], by Newton's method, so that the two points come out exactly."""
    inner = 10.0 ** (10.0**height) - 0.7
    v = inner
    for _ in range(5):  # from 0.21 mm2/s up four steps reach the last digit
        bend = lib.exp(-1.47 - 1.84 * v - 0.51 * v * v)
        v = v - (v + bend - inner) / (1 - bend * (1.84 + 1.02 * v))
    return v


def _every(condition) -> bool:
    """Whether a comparison of numbers or arrays holds everywhere."""
    return condition if isinstance(condition, bool) else bool(condition.all())


def oil_viscosity(temperature, temperature_1, viscosity_1, temperature_2, viscosity_2):
    """Kinematic viscosity of an oil from two known points, by ASTM D341.

    Parameters
    ----------
    temperature, temperature_1, temperature_2 [K], viscosity_1, viscosity_2 [m2/s] : numbers or arrays

    Returns
    -------
    kinematic viscosity [m2/s], a float for numbers

    Notes
    -----
    log log Z = A - B log T, Z = v + 0.7 + exp(-1.47 - 1.84 v - 0.51 v^2), v in mm2/s; range 0.21 to
    2e7 mm2/s, raises OutOfRange outside. Extrapolation beyond the two points is what the standard
    is for, as long as the oil stays a Newtonian liquid (no wax below the cloud point). Source: ASTM-D341.
    """
    given = (temperature, temperature_1, viscosity_1, temperature_2, viscosity_2)
    single = all(isinstance(value, int | float) for value in given)
    if single:
        lib = math
        t, t1, v1, t2, v2 = given
    else:
        import numpy as lib

        t, t1, v1, t2, v2 = (lib.asarray(value, dtype=float) for value in given)
    v1, v2 = v1 / STOKES, v2 / STOKES
    if not all(_every(value > 0) and _every(value < math.inf) for value in (t, t1, t2)):
        raise OutOfRange("the temperatures of an oil must be above absolute zero")
    if not all(_every(value >= LOWEST) and _every(value <= HIGHEST) for value in (v1, v2)):
        raise OutOfRange(f"an oil's viscosity is outside {LOWEST} to 2e7 mm2/s, the range of ASTM D341")
    if not _every(abs(t1 - t2) >= 1):
        raise OutOfRange("the two temperatures of an oil must be at least 1 K apart")
    if not _every((v1 - v2) * (t1 - t2) < 0):
        raise OutOfRange("an oil gets thinner when warmer: the two viscosities are the wrong way round")
    height_1 = _height(v1, lib)
    slope = (height_1 - _height(v2, lib)) / lib.log10(t2 / t1)
    height = height_1 - slope * lib.log10(t / t1)
    lowest, highest = _height(LOWEST, math), _height(HIGHEST, math)
    if not (_every(height >= lowest - 1e-12) and _every(height <= highest + 1e-12)):
        raise OutOfRange(f"the oil's viscosity would be outside {LOWEST} to 2e7 mm2/s, the range of ASTM D341")
    result = _viscosity_at(height, lib) * STOKES
    return float(result) if single or lib.ndim(result) == 0 else result


@cache
def _index_rows() -> tuple[tuple[float, ...], ...]:
    columns = ("y_min", "y_max", "l2", "l1", "l0", "h2", "h1", "h0")
    return tuple(tuple(float(row[column]) for column in columns) for row in read_table("viscosity_index.csv"))


def _index_curves(viscosity_100: float) -> tuple[float, float]:
    """L and H of ASTM D2270 [mm2/s] for a viscosity at 100 degC [mm2/s]."""
    for low, high, l2, l1, l0, h2, h1, h0 in _index_rows():
        if low <= viscosity_100 <= high:
            y = viscosity_100
            return (l2 * y + l1) * y + l0, (h2 * y + h1) * y + h0
    raise OutOfRange(f"a viscosity index needs at least 2 mm2/s at 100 degC, here {viscosity_100:.4g} mm2/s")


def viscosity_index(viscosity_40: float, viscosity_100: float) -> float:
    """Viscosity index (ASTM D2270, procedures A and B) from the viscosities at 40 and 100 degC [m2/s]."""
    u, y = viscosity_40 / STOKES, viscosity_100 / STOKES
    if not (math.isfinite(u) and math.isfinite(y) and u > y > 0):
        raise OutOfRange("an oil is thicker at 40 than at 100 degC, and both viscosities are positive")
    low, high = _index_curves(y)
    if u >= high:
        return 100 * (low - u) / (low - high)
    return 100 + (10 ** (math.log10(high / u) / math.log10(y)) - 1) / 0.00715


def viscosity_at_100(viscosity_40: float, index: float) -> float:
    """Viscosity at 100 degC [m2/s] that gives a viscosity index with one at 40 degC [m2/s] (bisection)."""
    if not 0 <= index <= 400:
        raise OutOfRange(f"a viscosity index of {index:g} is outside 0 to 400")
    low, high = 2.0 * STOKES, viscosity_40 * (1 - 1e-9)
    if low >= high or not viscosity_index(viscosity_40, low) <= index <= viscosity_index(viscosity_40, high):
        raise OutOfRange(
            f"an oil of {viscosity_40 / STOKES:.4g} mm2/s at 40 degC cannot have a viscosity index of "
            f"{index:g} by ASTM D2270; give its viscosity at a second temperature instead"
        )
    for _ in range(80):
        middle = math.sqrt(low * high)
        low, high = (middle, high) if viscosity_index(viscosity_40, middle) < index else (low, middle)
    return math.sqrt(low * high)


def default_density(viscosity_40: float) -> float:
    """Density at 15 degC [kg/m3] of a paraffinic oil of a viscosity at 40 degC [m2/s], about 3 %.

    From the viscosity-gravity constant of ASTM D2501, put at 0.82 (paraffinic, common practice).
    """
    v = viscosity_40 / STOKES
    if v < 7:
        raise NoModel("the density of so thin an oil cannot be estimated; add it, for instance: , 850 kg/m3")
    bend = math.log10(v - 5.5)
    return 1000 * (0.0664 + 0.1154 * bend + PARAFFINIC * (0.94 - 0.109 * bend))


class MineralOil(Substance):
    """A mineral oil from two viscosities and its density at 15 degC (estimated when None)."""

    family = "mineral oil"

    def __init__(self, name: str, points: tuple[float, float, float, float], density_15: float | None, note: str = ""):
        self.name = name
        self.points = points
        self._note = note
        oil_viscosity(300.0, *points)  # refuses impossible points when the oil is named, not when it is used
        if density_15 is not None and not DENSITY_RANGE[0] <= density_15 <= DENSITY_RANGE[1]:
            raise OutOfRange(
                f"a density of {density_15:g} kg/m3 at 15 degC is outside {DENSITY_RANGE[0]} to "
                f"{DENSITY_RANGE[1]} kg/m3, the range for lubricating oils"
            )
        self._given = density_15
        self._density_15 = density_15

    def get(self, what: str, temperature: float, pressure: float | None = None, phase: str | None = None) -> float:
        """Return property `what` [SI]; see ``Substance.get``. The pressure changes nothing here."""
        key = property_key(what)
        pressure = ATMOSPHERE if pressure is None else pressure
        if phase_word(phase) not in (None, "liquid"):
            raise NoModel(f"{self.name} is a liquid here; no model of another phase is at hand")
        check_state(self.name, temperature, pressure, *T_OIL, P_MAX)
        return self._value(key, float(temperature))

    def _value(self, key: str, temperature: float) -> float:
        if key == "kinematic_viscosity":
            return oil_viscosity(temperature, *self.points)
        if key == "viscosity":
            return oil_viscosity(temperature, *self.points) * self._density(temperature)
        if key == "density":
            return self._density(temperature)
        if key == "expansion_coefficient":
            thermal = 0.6278 / self._base()
            return thermal * (1 + 1.6 * thermal * (temperature - 288.15))
        fahrenheit = temperature * 1.8 - 459.67
        relative = self._base() / WATER_60F
        if key == "specific_heat":
            return 4186.8 * (0.388 + 0.00045 * fahrenheit) / math.sqrt(relative)
        if key == "conductivity":
            return 0.1442279 * 0.813 / relative * (1 - 0.0003 * (fahrenheit - 32))
        if key == "prandtl":
            return (
                self._value("viscosity", temperature)
                * self._value("specific_heat", temperature)
                / self._value("conductivity", temperature)
            )
        if key == "thermal_diffusivity":
            return self._value("conductivity", temperature) / (
                self._density(temperature) * self._value("specific_heat", temperature)
            )
        raise self._no_model(key)

    def _base(self) -> float:
        """Density at 15 degC [kg/m3], given or estimated."""
        if self._density_15 is None:
            self._density_15 = default_density(oil_viscosity(T_40, *self.points))
        return self._density_15

    def _density(self, temperature: float) -> float:
        """Density [kg/m3] by the lubricating-oil constants of the petroleum tables (ASTM D1250)."""
        base = self._base()
        step = 0.6278 / base * (temperature - 288.15)
        return base * math.exp(-step * (1 + 0.8 * step))

    def phase(self, temperature: float, pressure: float | None = None) -> str:
        """Return "liquid", after the checks of ``get``."""
        self.get("kinematic_viscosity", temperature, pressure)
        return "liquid"

    def source(self, what: str) -> str:
        """Return the bibliography keys of the relations behind a property."""
        key = property_key(what)
        viscosity = "ASTM-D341" + (";ASTM-D2270;ISO-3448" if "by its VI" in self._note else "")
        density = "ASTM-D1250" + ("" if self._given else ";ASTM-D2501")
        parts = {
            "kinematic_viscosity": viscosity,
            "viscosity": f"{viscosity};{density}",
            "density": density,
            "expansion_coefficient": density,
            "specific_heat": "Cragoe-1929",
            "conductivity": "Cragoe-1929",
            "thermal_diffusivity": f"Cragoe-1929;{density}",
            "prandtl": f"Cragoe-1929;{viscosity};{density}",
        }
        if key not in parts:
            raise self._no_model(key)
        return parts[key]

    def note(self, what: str) -> str:
        """Return uncertainties, and whether the density is estimated."""
        key = property_key(what)
        notes = [self._note] if self._note else []
        if key in ("specific_heat", "thermal_diffusivity", "prandtl"):
            notes.append("specific heat about 4 %")
        if key in ("conductivity", "thermal_diffusivity", "prandtl"):
            notes.append("conductivity about 10 %")
        if key != "kinematic_viscosity" and self._given is None:
            notes.append("density estimated (paraffinic oil), about 3 %")
        return "; ".join(notes)

    def limits(self) -> Limits:
        """Return the range in which mineral oils are answered here."""
        return Limits(*T_OIL, P_MAX, "ASTM-D341")


# ---- names

_GRADE = re.compile(r"\biso[\s\-]*vg[\s\-]*(?P<grade>\d+(?:\.\d+)?)")
_INDEX = re.compile(r"\b(?:vi|viscosity index)\s*[=:]?\s*(?P<index>\d+(?:\.\d+)?)")
_POINT = re.compile(
    r"(?P<value>\d+(?:\.\d+)?)\s*(?:cst|mm2/s|mm\^2/s)\s*(?:at|@)\s*"
    r"(?P<temperature>-?\d+(?:\.\d+)?)\s*(?:°|deg\.?\s*)?(?P<scale>[ckf])\b"
)
_DENSITY = re.compile(r"(?P<density>\d+(?:\.\d+)?)\s*kg/m\^?3(?:\s*(?:at|@)\s*15\s*(?:°|deg\.?\s*)?c)?")
_FILLER = re.compile(r"[\s,;()]|\b(?:oil|mineral|lubricating|hydraulic|gear|turbine|and|density|liquid)\b")


def oil(text: str) -> MineralOil | None:
    """Read "ISO VG 46 VI 95" or "oil 46 cSt at 40 degC, 6.8 cSt at 100 degC, 870 kg/m3"; else None.

    Raises UnknownName where something must be asked, OutOfRange for values that no oil has.
    """
    plain = unicodedata.normalize("NFKC", text).casefold().replace("−", "-")
    grade = _GRADE.search(plain)
    points = list(_POINT.finditer(plain))
    if not grade and not points:
        if re.search(r"\b(?:mineral|lubricating|hydraulic|gear|engine|turbine) oil\b|^\s*oil\b|\bcst\b", plain):
            raise UnknownName(
                "which oil: write ISO VG 46 VI 95, or oil 46 cSt at 40 degC, 6.8 cSt at 100 degC "
                "(density at 15 degC may follow: , 870 kg/m3)"
            )
        return None
    index, density = _INDEX.search(plain), _DENSITY.search(plain)
    rest = plain
    for part in (_GRADE, _INDEX, _POINT, _DENSITY, _FILLER):
        rest = part.sub("", rest)
    if rest:
        raise NumberRefused(f'"{rest[:30]}" in the name of an oil is not understood; write ISO VG 46 VI 95')
    density_15 = float(density["density"]) if density else None
    tail = f", {density_15:g} kg/m3" if density else ""
    if grade:
        if points:
            raise UnknownName("an oil by its grade or by two viscosities, not both")
        return _by_grade(grade["grade"], index, density_15, tail)
    if index and len(points) == 1:
        raise UnknownName("with a viscosity index write the grade: ISO VG 46 VI 95; or give two viscosities")
    if len(points) != 2:
        raise UnknownName("an oil needs its viscosity at two temperatures: 46 cSt at 40 degC, 6.8 cSt at 100 degC")
    (t1, v1), (t2, v2) = ((_temperature(point), float(point["value"]) * STOKES) for point in points)
    said = ", ".join(f"{point['value']} cSt at {_temperature(point) - 273.15:.6g} degC" for point in points)
    return MineralOil(f"oil {said}{tail}", (t1, v1, t2, v2), density_15)


def _by_grade(grade: str, index, density_15: float | None, tail: str) -> MineralOil:
    table = {row["grade"]: float(row["midpoint_mm2_per_s_at_40_degC"]) for row in read_table("oil_grades.csv")}
    if grade not in table:
        raise UnknownName(f"ISO 3448 has no grade VG {grade}; its grades are {', '.join(table)}")
    if not index:
        raise UnknownName(f"ISO VG {grade} of which viscosity index? Write for instance ISO VG {grade} VI 95")
    viscosity_40 = table[grade] * STOKES
    value = float(index["index"])
    viscosity_100 = viscosity_at_100(viscosity_40, value)
    note = f"middle of the grade (10 % each way), {viscosity_100 / STOKES:.4g} cSt at 100 degC by its VI"
    return MineralOil(
        f"ISO VG {grade} VI {value:g}{tail}", (T_40, viscosity_40, T_100, viscosity_100), density_15, note
    )


def _temperature(point: re.Match) -> float:
    value = float(point["temperature"])
    return {"k": value, "c": value + 273.15, "f": (value + 459.67) / 1.8}[point["scale"]]
