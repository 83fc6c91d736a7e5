"""A part that cools, a pin fin, a sheared oil film."""

import random

from corpus.calculation import Calculation, between

_T, _MM = ("degC", "degF"), ("mm", "in")
_H = ("W/m2K", "Btu/h-ft2-F")


def cooling_part(rng: random.Random, system: str) -> Calculation:
    """A small steel part after the furnace, lumped."""
    c = Calculation("Hardened part, air cooling", system, "body")
    c.typed(
        "Ti",
        "initial_temperature",
        "Initial temperature;Starting temperature",
        _T,
        273.15 + rng.uniform(300, 600),
        "Ti",
        3,
    )
    c.typed(
        "Ta", "stream_temperature", "Air temperature;Ambient temperature", _T, 273.15 + rng.uniform(15, 30), "T∞", 2
    )
    c.typed("h", "coefficient", "Heat transfer coefficient;Coefficient", _H, rng.uniform(25, 80), "h", 2)
    d = rng.choice((0.01, 0.015, 0.02))
    c.typed("V", "volume", "Volume;Body volume", ("cm3", "in3"), 0.785 * d**2 * 0.1, "V", 3)
    c.typed("A", "surface_area", "Surface area;Body surface", ("cm2", "in2"), 3.14 * d * 0.1 + 1.57 * d**2, "As", 3)
    c.typed("rho", "solid_density", "Material density;Density of the body", ("kg/m3", "lb/ft3"), 7850.0, "ρs", 3)
    c.typed(
        "cp",
        "solid_specific_heat",
        "Material specific heat;Specific heat of the body",
        ("kJ/kgK", "Btu/lb-F"),
        480.0,
        "cs",
        3,
    )
    c.typed(
        "k",
        "solid_conductivity",
        "Material conductivity;Conductivity of the material",
        ("W/mK", "Btu/h-ft-F"),
        rng.uniform(30, 50),
        "ks",
        2,
    )
    c.typed("t", "time", "Time;Cooling time", ("min", "min"), 60.0 * rng.uniform(2, 8), "t", 2)
    c.computed("Lc", "characteristic_length", "Characteristic length", _MM, "{V}/{A}", "Lc")
    c.computed("Bi", "biot", "Biot number;Bi", ("", ""), "{h}*{Lc}/{k}", "Bi")
    c.computed("a", "solid_diffusivity", "Diffusivity of the solid", ("mm2/s", "ft2/h"), "{k}/({rho}*{cp})", "αs")
    c.computed("Fo", "fourier", "Fourier number;Fo", ("", ""), "{a}*{t}/{Lc}^2", "Fo")
    c.computed("tau", "time_constant", "Time constant", ("s", "s"), "{rho}*{cp}*{Lc}/{h}", "τ")
    c.computed(
        "th", "temperature_ratio", "Temperature ratio;Dimensionless temperature", ("", ""), "EXP(0-{t}/{tau})", "θ"
    )
    c.computed(
        "T", "final_temperature", "Final temperature;Temperature after the time", _T, "{Ta}+({Ti:d}-{Ta:d})*{th}", "T"
    )
    c.computed("M", "mass", "Body mass;Mass", ("kg", "lb"), "{rho}*{V}", "m")
    c.computed("Q", "stored_heat", "Heat released;Heat given off", ("kJ", "Btu"), "{M}*{cp}*({Ti:d}-{T:d})", "Q")
    c.slip("dimension-mismatch", "Lc", "{A}/{V}")
    c.slip("dimension-mismatch", "Fo", "{a}*{t}/{Lc}")
    c.slip("dimension-mismatch", "tau", "{rho}*{cp}/{h}")
    c.slip("unit-factor", "th", "EXP(0-{t:raw}/{tau})")
    return c


def pin_fin(rng: random.Random, system: str) -> Calculation:
    """A pin on a warm housing."""
    c = Calculation("Drive housing, pin fins", system)
    c.typed(
        "Tw", "wall_temperature", "Wall temperature;Surface temperature", _T, 273.15 + rng.uniform(70, 110), "Tw", 3
    )
    c.typed(
        "Ta", "stream_temperature", "Air temperature;Ambient temperature", _T, 273.15 + rng.uniform(15, 35), "T∞", 2
    )
    c.typed("h", "coefficient", "Heat transfer coefficient;Coefficient", _H, rng.uniform(20, 60), "h", 2)
    c.typed("D", "diameter", "Diameter;Pin diameter", _MM, rng.choice((0.004, 0.005, 0.008)), "D", 3)
    c.typed("L", "length", "Length;Pin length", _MM, rng.uniform(0.03, 0.07), "L", 3)
    c.typed(
        "k",
        "fin_conductivity",
        "Fin conductivity;Conductivity of the fin",
        ("W/mK", "Btu/h-ft-F"),
        rng.uniform(150, 210),
        "kfin",
        3,
    )
    c.computed("P", "fin_perimeter", "Fin perimeter;Perimeter of the fin", _MM, "PI()*{D}", "Pf")
    c.computed("A", "fin_section", "Fin cross section;Cross section of the fin", ("cm2", "in2"), "PI()/4*{D}^2", "Af")
    c.computed("m", "fin_parameter", "Fin parameter", ("1/m", "1/ft"), "SQRT({h}*{P}/({k}*{A}))", "m")
    c.computed("e", "fin_efficiency", "Fin efficiency", ("", ""), "TANH({m}*{L})/({m}*{L})", "ηf")
    c.computed("S", "area", "Heat transfer area;Exposed area", ("cm2", "in2"), "{P}*{L}", "S")
    c.computed("Q", "duty", "Heat flow;Heat rate", ("W", "Btu/h"), "{e}*{h}*{S}*({Tw:d}-{Ta:d})", "Q")
    c.slip("radius-for-diameter", "A", "PI()/4*({D}/2)^2")
    c.slip("area-factor", "A", "{D}^2")
    c.slip("area-factor", "P", "{D}")
    c.slip("dimension-mismatch", "m", "{h}*{P}/({k}*{A})")
    c.slip("dimension-mismatch", "Q", "{h}*{S}/({Tw:d}-{Ta:d})")
    return c


def oil_film(rng: random.Random, system: str) -> Calculation:
    """A film between a sliding and a resting face."""
    strong = rng.random() < 0.5
    c = Calculation("Thrust bearing, oil film between plates", system, "gap")
    c.texts.append(("Flow kind", "oil film"))
    c.facts = {}
    c.typed("w", "velocity", "Sliding velocity;Sliding speed", ("m/s", "ft/s"), between(rng, 24, 40), "U", 3)
    c.typed("g", "gap", "Film thickness;Gap;Oil film thickness", _MM, rng.uniform(5e-5, 1.2e-4), "h", 3)
    c.typed("mu", "viscosity", "Dynamic viscosity;Viscosity", ("mPa.s", "cP"), between(rng, 0.035, 0.08), "μ", 3)
    c.typed("rho", "density", "Density;Oil density", ("kg/m3", "lb/ft3"), 870.0, "ρ", 3)
    c.typed("k", "conductivity", "Thermal conductivity;Conductivity", ("W/mK", "Btu/h-ft-F"), 0.14, "k", 3)
    c.typed("cp", "specific_heat", "Specific heat;Heat capacity", ("kJ/kgK", "Btu/lb-F"), 1950.0, "cp", 3)
    c.typed("T1", "wall_temperature", "Wall temperature;Plate temperature", _T, 273.15 + rng.uniform(40, 50), "Tw", 3)
    c.typed(
        "T2",
        "second_wall_temperature",
        "Second wall temperature;Other wall temperature",
        _T,
        273.15 + rng.uniform(60, 75),
        "Tw2",
        3,
    )
    c.typed("S", "area", "Heat transfer area;Area", ("cm2", "in2"), between(rng, 0.01, 0.05), "A", 3)
    c.computed("G", "shear_rate", "Shear rate", ("1/s", "1/s"), "{w}/{g}", "γ̇")
    c.computed("tau", "wall_shear", "Shear stress;Wall shear stress", ("kPa", "psi"), "{mu}*{w}/{g}", "τ")
    c.computed("P", "friction_power", "Friction power;Power lost to friction", ("kW", "hp"), "{tau}*{w}*{S}", "P")
    c.computed("dT", "temperature_difference", "Temperature difference", ("dK", "dF"), "{T2:d}-{T1:d}", "ΔT")
    c.computed("Br", "brinkman", "Brinkman number;Br", ("", ""), "{mu}*{w}^2/({k}*{dT})", "Br")
    c.computed("Pr", "prandtl", "Prandtl number;Pr", ("", ""), "{mu}*{cp}/{k}", "Pr")
    c.slip("dimension-mismatch", "P", "{tau}*{S}")
    c.slip("dimension-mismatch", "Br", "{mu}*{w}/({k}*{dT})")
    c.slip("dimension-mismatch", "tau", "{mu}*{w}")
    c.slips.append(_neglect("Viscous heating is neglected."))
    if not strong:
        c.notes.append("Conduction along the film is neglected.")
    return c


def _neglect(words: str):
    from corpus.calculation import Slip

    return Slip("dropped-term", "note:" + words)
