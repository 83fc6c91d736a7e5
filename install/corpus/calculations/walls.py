"""Walls: an insulated steam pipe, a furnace wall."""

import random

from corpus.calculation import Calculation, between

_T, _MM, _L = ("degC", "degF"), ("mm", "in"), ("m", "ft")
_H = ("W/m2K", "Btu/h-ft2-F")


def insulated_pipe(rng: random.Random, system: str) -> Calculation:
    """Heat loss of a steam pipe."""
    c = Calculation("Boiler house, steam main heat loss", system)
    tw = c.typed(
        "Tw",
        "wall_temperature",
        "Pipe surface temperature;Wall temperature;Surface temperature",
        _T,
        273.15 + rng.uniform(140, 260),
        "Tw",
        3,
    )
    ta = c.typed(
        "Ta",
        "ambient_temperature",
        "Temperature outside;Outside temperature;Environment temperature",
        _T,
        273.15 + rng.uniform(5, 30),
        "Tamb",
        2,
    )
    assert tw > ta
    c.typed(
        "Do", "outside_diameter", "Outside diameter;Pipe OD", _MM, rng.choice((0.0603, 0.0889, 0.1143, 0.1683)), "Do"
    )
    c.typed("s", "insulation_thickness", "Insulation thickness", _MM, rng.choice((0.04, 0.05, 0.08, 0.1)), "s", 3)
    c.typed("L", "length", "Pipe length;Length", _L, between(rng, 10, 120), "L", 3)
    c.typed(
        "ki",
        "insulation_conductivity",
        "Insulation conductivity;Conductivity of the insulation",
        ("W/mK", "Btu/h-ft-F"),
        rng.uniform(0.035, 0.06),
        "kins",
        2,
    )
    c.typed("ho", "outside_coefficient", "Outside coefficient;External coefficient", _H, rng.uniform(7, 14), "ho", 2)
    c.computed(
        "D3", "insulation_diameter", "Diameter over insulation;Insulation outside diameter", _MM, "{Do}+2*{s}", "D3"
    )
    c.computed("R1", "insulation_resistance", "Insulation resistance;Resistance of the insulation", ("K/W", "h-F/Btu"),
               "LN({D3}/{Do})/(2*PI()*{ki}*{L})", "Rins")  # fmt: skip
    c.computed("R2", "outside_resistance", "Outside film resistance;Outside convection resistance", ("K/W", "h-F/Btu"),
               "1/({ho}*PI()*{D3}*{L})", "Ro")  # fmt: skip
    c.computed(
        "R", "total_resistance", "Total thermal resistance;Total resistance", ("K/W", "h-F/Btu"), "{R1}+{R2}", "Rtot"
    )
    c.computed("Q", "duty", "Heat loss;Heat flow", ("kW", "Btu/h"), "({Tw:d}-{Ta:d})/{R}", "Q")
    c.computed("q", "heat_per_length", "Heat loss per length;Linear heat loss", ("W/m", "Btu/h-ft"), "{Q}/{L}", "q'")
    c.slip("log-base", "R1", "LOG10({D3}/{Do})/(2*PI()*{ki}*{L})")
    c.slip("area-factor", "R2", "1/({ho}*PI()*{Do}*{L})")
    c.slip("area-factor", "R2", "1/({ho}*{D3}*{L})")
    c.slip("radius-for-diameter", "R2", "1/({ho}*PI()*({D3}/2)*{L})")
    c.slip("dimension-mismatch", "R1", "LN({D3}/{Do})/(2*PI()*{ki})")
    c.slip("dimension-mismatch", "Q", "{R}*({Tw:d}-{Ta:d})")
    return c


def furnace_wall(rng: random.Random, system: str) -> Calculation:
    """A plane wall with insulation."""
    c = Calculation("Kiln wall, layers", system)
    ti = c.typed(
        "Ti", "wall_temperature", "Wall temperature;Surface temperature", _T, 273.15 + rng.uniform(300, 700), "Tw", 3
    )
    ta = c.typed(
        "Ta",
        "ambient_temperature",
        "Temperature outside;Environment temperature",
        _T,
        273.15 + rng.uniform(10, 30),
        "Tamb",
        2,
    )
    assert ti > ta
    c.typed("hi", "inside_coefficient", "Inside coefficient", _H, rng.uniform(20, 60), "hi", 2)
    c.typed("ho", "outside_coefficient", "Outside coefficient", _H, rng.uniform(7, 14), "ho", 2)
    c.typed(
        "s1", "wall_thickness", "Wall thickness;Thickness of the wall", _MM, rng.choice((0.115, 0.23, 0.345)), "sw", 3
    )
    c.typed(
        "k1",
        "wall_conductivity",
        "Wall conductivity;Conductivity of the wall",
        ("W/mK", "Btu/h-ft-F"),
        rng.uniform(0.7, 1.4),
        "kw",
        2,
    )
    c.typed("s2", "insulation_thickness", "Insulation thickness", _MM, rng.choice((0.05, 0.1, 0.15)), "si", 3)
    c.typed(
        "k2",
        "insulation_conductivity",
        "Insulation conductivity",
        ("W/mK", "Btu/h-ft-F"),
        rng.uniform(0.06, 0.15),
        "kins",
        2,
    )
    c.typed("A", "area", "Heat transfer area;Surface", ("m2", "ft2"), between(rng, 5, 60), "A", 3)
    c.computed("Ri", "inside_insulance", "Inside surface resistance", ("m2K/W", "h-ft2-F/Btu"), "1/{hi}", "Rsi")
    c.computed("R1", "wall_insulance", "Wall R-value;Wall insulance", ("m2K/W", "h-ft2-F/Btu"), "{s1}/{k1}", "Rw'")
    c.computed(
        "R2",
        "insulation_insulance",
        "Insulation R-value;Insulation insulance",
        ("m2K/W", "h-ft2-F/Btu"),
        "{s2}/{k2}",
        "Rins'",
    )
    c.computed("Ro", "outside_insulance", "Outside surface resistance", ("m2K/W", "h-ft2-F/Btu"), "1/{ho}", "Rse")
    c.computed(
        "R",
        "total_insulance",
        "Total R-value;Sum of layer resistances",
        ("m2K/W", "h-ft2-F/Btu"),
        "{Ri}+{R1}+{R2}+{Ro}",
        "RT",
    )
    c.computed("U", "overall_coefficient", "U value;Overall coefficient", _H, "1/{R}", "U")
    c.computed("dT", "temperature_difference", "Temperature difference", ("dK", "dF"), "{Ti:d}-{Ta:d}", "ΔT")
    c.computed("q", "heat_flux", "Heat flux", ("kW/m2", "Btu/h-ft2"), "{U}*{dT}", "q")
    c.computed("Q", "duty", "Heat loss;Heat flow", ("kW", "Btu/h"), "{q}*{A}", "Q")
    c.slip("dimension-mismatch", "R2", "{k2}/{s2}")
    c.slip("dimension-mismatch", "U", "{R}")
    c.slip("dimension-mismatch", "Q", "{q}/{A}")
    return c
