"""pint (a general library of units) as the oracle: every unit of the table that it knows, and compounds."""

import functools
from fractions import Fraction

import pint
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from cellfuncs import quantities
from cellfuncs.errors import UnitRefused
from cellfuncs.quantities import KINDS, atoms, unit_text
from cellfuncs.quantities.kinds import BASE


@functools.cache
def registry() -> pint.UnitRegistry:
    return pint.UnitRegistry()


BTU = "international_british_thermal_unit"

# First spelling in units.csv -> how pint writes it, where it is not the same.
IN_PINT = {
    "°C": "kelvin",
    "°F": "degR",
    "°R": "degR",
    "ΔK": "kelvin",
    "ΔC": "kelvin",
    "ΔF": "degR",
    "ΔR": "degR",
    "lbmol": "pound/gram*mole",
    "deg": "degree",
    "grad": "grade",
    "rev": "turn",
    "rps": "turn/s",
    "daN": "decanewton",
    "daPa": "decapascal",
    "Wh": "watt_hour",
    "d": "day",
    "yr": "365 day",
    "kL": "m^3",
    "cc": "cm^3",
    "sqm": "m^2",
    "sqmm": "mm^2",
    "sqcm": "cm^2",
    "cum": "m^3",
    "t": "metric_ton",
    "at": "technical_atmosphere",
    "Hg": "millimeter_Hg/millimeter",
    "H2O": "9806.65 Pa/m",
    "iwc": "9806.65 Pa/m*inch",
    "psf": "pound_force/ft^2",
    "ksc": "kgf/cm^2",
    "gf": "gram_force",
    "ozf": "ounce*g_0",
    "pdl": "poundal",
    "cal": "international_calorie",
    "calth": "calorie",
    "Btu": BTU,
    "MMBtu": f"1e6 {BTU}",
    "Btuth": "thermochemical_british_thermal_unit",
    "therm": f"1e5 {BTU}",
    "dekatherm": f"1e6 {BTU}",
    "quad": f"1e15 {BTU}",
    "Btuh": f"{BTU}/hour",
    "MBH": f"1000 {BTU}/hour",
    "MMBH": f"1e6 {BTU}/hour",
    "RT": f"12000 {BTU}/hour",
    "hp": "horsepower",
    "PS": "metric_horsepower",
    "cps": "centipoise",
    "cts": "centistokes",
    "in": "inch",
    "mil": "thou",
    "sqft": "ft^2",
    "sqin": "inch^2",
    "sqyd": "yard^2",
    "acre": "43560 ft^2",
    "cuft": "ft^3",
    "cuin": "inch^3",
    "cuyd": "yard^3",
    "imp gal": "imperial_gallon",
    "fl oz": "US_fluid_ounce",
    "bbl": "42 gallon",
    "short ton": "2000 pound",
    "long ton": "2240 pound",
    "gn": "g_0",
    "fpm": "ft/min",
    "gpm": "gallon/min",
    "gph": "gallon/hour",
    "gpd": "gallon/day",
    "MGD": "1e6 gallon/day",
    "igpm": "imperial_gallon/min",
    "lpm": "liter/min",
    "lps": "liter/s",
    "lph": "liter/hour",
    "cfm": "ft^3/min",
    "cfs": "ft^3/s",
    "cfh": "ft^3/hour",
    "cmh": "m^3/hour",
    "cmm": "m^3/min",
    "bpd": "42 gallon/day",
    "pph": "pound/hour",
    "pcf": "pound/ft^3",
    "wt%": "percent",
    "vol%": "percent",
    "mol%": "percent",
    "%RH": "percent",
    "ppb": "1e-3 ppm",
}
NOT_IN_PINT = {
    "boiler hp": "pint rounds 33 475 Btu/h, NIST SP 811 prints 9.80950 E+03 W",
    "dimensionless": "a word, not a unit",
    "g": "gram in pint, also the standard acceleration here",
}

PINT_BASE = {
    "[length]": "L",
    "[mass]": "M",
    "[time]": "T",
    "[temperature]": "Θ",
    "[substance]": "N",
    "[current]": "I",
}


def in_si(text: str) -> tuple[float, dict[str, int]]:
    """Factor and dimension (without the angle, which pint does not count) as pint has them."""
    quantity = (1 * registry()(text)).to_base_units()
    powers = {PINT_BASE[name]: round(power) for name, power in quantity.dimensionality.items()}
    return float(quantity.magnitude), powers


def without_angle(dimension: tuple[int, ...]) -> dict[str, int]:
    return {base: power for base, power in zip(BASE, dimension, strict=True) if power and base != "A"}


ATOMS = {
    atom.symbol: atom
    for spelling in atoms.spellings()
    for piece in atoms.whole(spelling)
    if not piece.prefix and not (atom := piece.atom).refuse
}


@pytest.mark.parametrize("symbol", [s for s in ATOMS if s not in NOT_IN_PINT])
def test_a_unit_of_the_table(symbol):
    factor, powers = in_si(IN_PINT.get(symbol, symbol))
    assert float(ATOMS[symbol].factor) == pytest.approx(factor, rel=1e-12, abs=0)
    assert without_angle(ATOMS[symbol].dimension) == powers


def test_the_oracle_speaks_about_nearly_all():
    assert len(ATOMS) > 120
    assert set(NOT_IN_PINT) | set(IN_PINT) <= set(ATOMS)


@pytest.mark.parametrize("spelling", atoms.spellings())
def test_every_spelling_reads(spelling):
    """Each word of the table is understood as one of its own rows, or refused by name."""
    own = {piece.atom.symbol for piece in atoms.whole(spelling) if not piece.prefix}
    column = any(piece.atom.place == "column" for piece in atoms.whole(spelling))
    try:
        found = unit_text.meanings(f"mm {spelling}" if column else spelling)
    except UnitRefused:
        assert any(piece.atom.refuse for piece in atoms.whole(spelling))
    else:
        symbols = {piece.atom.symbol for meaning in found if meaning.rank == 0 for piece, _ in meaning.pieces}
        assert symbols & (own | {"H2O"}), symbols


# What compounds are built of: our spelling -> pint's, by dimension.
BUILDING = {
    "L": {"m": "m", "mm": "mm", "cm": "cm", "ft": "ft", "in": "inch", "μm": "um"},
    "M": {"kg": "kg", "g": "gram", "lb": "pound", "t": "metric_ton"},
    "T": {"s": "s", "min": "min", "h": "hour", "hr": "hour", "d": "day"},
    "Θ": {"K": "kelvin", "°C": "kelvin", "C": "kelvin", "°F": "degR", "F": "degR", "R": "degR"},
    "N": {"mol": "mol", "kmol": "kmol", "lbmol": "pound/gram*mole"},
    "I": {"A": "ampere", "mA": "mA"},
}
DERIVED = {
    "W": "watt",
    "kW": "kW",
    "kJ": "kJ",
    "Btu": BTU,
    "kcal": "1000 international_calorie",
    "N": "newton",
    "lbf": "pound_force",
    "Pa": "Pa",
    "bar": "bar",
    "psi": "psi",
    "mPa": "mPa",
    "L": "liter",
    "gal": "gallon",
    "cP": "centipoise",
    "kWh": "kilowatt_hour",
}
SUPERSCRIPTS = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")

Powers = list[tuple[str, int]]


def plain(word: str, power: int) -> str:
    return word if power == 1 else f"{word}{power}"


def raised(word: str, power: int) -> str:
    return word if power == 1 else f"{word}^{power}"


def parts(powers: Powers) -> tuple[list[str], list[str]]:
    above = [plain(w, p) for w, p in powers if p > 0] or ["1"]
    return above, [plain(w, -p) for w, p in powers if p < 0]


def hyphens(powers: Powers) -> str:
    above, below = parts(powers)
    return "-".join(above) + ("/" + "-".join(below) if below else "")


def bracket(powers: Powers) -> str:
    above, below = parts(powers)
    return " ".join(above) + (f"/({' '.join(below)})" if below else "")


def dots(powers: Powers) -> str:
    above, below = parts(powers)
    return "·".join(above) + ("/" + "·".join(below) if below else "")


def carets(powers: Powers) -> str:
    return " ".join(raised(w, p) for w, p in powers)


def superscripts(powers: Powers) -> str:
    return "·".join(w if p == 1 else w + str(p).translate(SUPERSCRIPTS) for w, p in powers)


def slashes(powers: Powers) -> str:
    above, below = parts(powers)
    return "/".join([" ".join(above), *below])


DIALECTS = (hyphens, bracket, dots, carets, superscripts, slashes)


def expected(powers: list[tuple[str, str, int]]) -> float:
    factor = Fraction(1)
    for _, name, power in powers:
        factor *= Fraction(in_si_cached(name)) ** power
    return float(factor)


@functools.cache
def in_si_cached(name: str) -> float:
    return in_si(name)[0]


ALL_UNITS = {word: name for group in BUILDING.values() for word, name in group.items()} | DERIVED


@st.composite
def compounds(draw):
    words = draw(st.lists(st.sampled_from(sorted(ALL_UNITS)), min_size=2, max_size=4, unique=True))
    # kg-mol, lb mol, g mol are names of kmol, lbmol, mol in the trade, not products
    assume("mol" not in words or not {"kg", "g", "lb"} & set(words))
    powers = draw(st.lists(st.sampled_from([1, 1, 1, 2, 3, -1, -1, -2, -3]), min_size=4, max_size=4))
    return [(word, ALL_UNITS[word], power) for word, power in zip(words, powers, strict=False)]


@given(compounds(), st.sampled_from(DIALECTS))
def test_compounds_in_every_dialect(compound, dialect):
    text = dialect([(word, power) for word, _, power in compound])
    assume(len(text) <= 40)
    first = unit_text.meanings(text)[0]
    assert float(first.factor) == pytest.approx(expected(compound), rel=1e-12, abs=0)
    wanted = {}
    for _, name, power in compound:
        for base, own in in_si(name)[1].items():
            wanted[base] = wanted.get(base, 0) + own * power
    assert without_angle(first.dimension) == {base: power for base, power in wanted.items() if power}


PLAIN_KINDS = [
    kind
    for kind in KINDS.values()
    if any(kind.dimension) and not kind.dimension[-1] and kind.name != "temperature"
]


@st.composite
def units_of_a_kind(draw):
    kind = draw(st.sampled_from(PLAIN_KINDS))
    powers = [
        (*draw(st.sampled_from(sorted(BUILDING[base].items()))), power)
        for base, power in zip(BASE, kind.dimension, strict=True)
        if power
    ]
    return kind, draw(st.permutations(powers))


@given(units_of_a_kind(), st.sampled_from(DIALECTS))
def test_units_of_every_kind_in_every_dialect(built, dialect):
    kind, powers = built
    text = dialect([(word, power) for word, _, power in powers])
    assume(len(text) <= 40 and kind.name != "pressure_gauge")
    unit = quantities.read_unit(text, kind.name)
    assert unit.factor == pytest.approx(expected(powers), rel=1e-12, abs=0)
    assert unit.offset == 0
    assert kind.name in quantities.kinds_for(text)


@given(
    units_of_a_kind(),
    st.sampled_from(DIALECTS),
    st.sampled_from([str.upper, str.lower, str.title, str.swapcase]),
)
def test_another_case_reads_the_same_or_asks(built, dialect, recase):
    kind, powers = built
    text = dialect([(word, power) for word, _, power in powers])
    assume(len(text) <= 40 and kind.name != "pressure_gauge")
    try:
        unit = quantities.read_unit(recase(text), kind.name)
    except UnitRefused as refused:
        assert "may be" in str(refused) or "known" in str(refused) or "write" in str(refused)
    else:
        assert unit.factor == pytest.approx(expected(powers), rel=1e-12, abs=0)


@given(units_of_a_kind(), st.floats(-1e6, 1e6))
def test_a_pint_quantity_is_taken(built, value):
    kind, powers = built
    unit = registry().Unit("")
    factor = 1.0
    for _, name, power in powers:
        one = registry()(name)
        factor *= one.magnitude**power
        unit = unit * one.units**power
    quantity = registry().Quantity(value * factor, unit)
    assert quantities.from_pint(quantity, kind.name) == pytest.approx(
        value * expected(powers), rel=1e-9, abs=1e-300
    )


def test_temperatures_of_pint_do_not_mix():
    u = registry()
    assert quantities.from_pint(u.Quantity(20, "degC"), "temperature") == pytest.approx(293.15)
    assert quantities.from_pint(u.Quantity(9, "delta_degF"), "temperature_difference") == pytest.approx(5)
    assert quantities.from_pint(u.Quantity(300, "K"), "temperature") == 300
    for quantity, kind in (
        (u.Quantity(20, "degC"), "temperature_difference"),
        (u.Quantity(5, "delta_degC"), "temperature"),
        (u.Quantity(5, "m"), "temperature"),
        (u.Quantity(5, "kg/s"), "volume_flow"),
        (u.Quantity(5, "m"), "dimensionless"),
    ):
        with pytest.raises(UnitRefused, match="write for instance"):
            quantities.from_pint(quantity, kind)


def test_turns_of_pint():
    u = registry()
    assert quantities.from_pint(u.Quantity(60, "rpm"), "rotational_frequency") == pytest.approx(1)
    assert quantities.from_pint(u.Quantity(50, "Hz"), "frequency") == pytest.approx(50)
    assert quantities.from_pint(u.Quantity(60, "rpm"), "angular_velocity") == pytest.approx(6.283185307179586)
    assert quantities.from_pint(u.Quantity(180, "degree"), "angle") == pytest.approx(3.141592653589793)
    assert quantities.from_pint(u.Quantity(5, "percent"), "fraction") == pytest.approx(0.05)
