"""Two streams: sizing by log mean difference, rating by transfer units."""

import random

from corpus.calculation import Calculation, between

_T = ("degC", "degF")


def counter_exchanger(rng: random.Random, system: str) -> Calculation:
    """Sizing of a countercurrent cooler."""
    c = Calculation("Product cooler, sizing", system)
    c.texts.append(("Arrangement", "countercurrent"))
    c.facts = {"arrangement": "countercurrent"}
    t1 = 273.15 + rng.uniform(90, 130)
    t2 = t1 - rng.uniform(30, 45)
    s1 = 273.15 + rng.uniform(15, 25)
    c.typed("Thi", "hot_inlet_temperature", "Hot inlet temperature;Hot side inlet temperature", _T, t1, "Th1", 3)
    c.typed("Tho", "hot_outlet_temperature", "Hot outlet temperature;Hot side outlet temperature", _T, t2, "Th2", 3)
    c.typed("Tci", "cold_inlet_temperature", "Cold inlet temperature;Cold side inlet temperature", _T, s1, "Tc1", 3)
    mh = between(rng, 1, 6)
    c.typed("mh", "hot_mass_flow", "Hot mass flow;Hot side mass flow", ("kg/s", "lb/h"), mh, "mh", 3)
    c.typed(
        "cph",
        "hot_specific_heat",
        "Hot specific heat;Hot side specific heat",
        ("kJ/kgK", "Btu/lb-F"),
        rng.uniform(2000, 3200),
        "cph",
        3,
    )
    c.typed(
        "mc",
        "cold_mass_flow",
        "Cold mass flow;Cold side mass flow",
        ("kg/s", "lb/h"),
        mh * rng.uniform(0.75, 1.0),
        "mc",
        3,
    )
    c.typed(
        "cpc",
        "cold_specific_heat",
        "Cold specific heat;Cold side specific heat",
        ("kJ/kgK", "Btu/lb-F"),
        4180.0,
        "cpc",
        3,
    )
    c.typed(
        "hi",
        "inside_coefficient",
        "Inside coefficient;Tube side coefficient",
        ("W/m2K", "Btu/h-ft2-F"),
        between(rng, 1500, 5000),
        "hi",
        3,
    )
    c.typed(
        "ho",
        "outside_coefficient",
        "Outside coefficient;Shell side coefficient",
        ("W/m2K", "Btu/h-ft2-F"),
        between(rng, 400, 1200),
        "ho",
        3,
    )
    c.typed(
        "Rf",
        "fouling",
        "Fouling resistance;Fouling factor",
        ("m2K/W", "h-ft2-F/Btu"),
        rng.choice((1.8e-4, 3.5e-4)),
        "Rf",
        2,
    )
    c.typed(
        "F", "correction_factor", "LMTD correction factor;Correction factor", ("", ""), rng.uniform(0.85, 0.97), "F", 2
    )
    c.computed("Q", "duty", "Heat duty;Duty", ("kW", "Btu/h"), "{mh}*{cph}*({Thi:d}-{Tho:d})", "Q")
    c.computed("Tco", "cold_outlet_temperature", "Cold outlet temperature;Cold side outlet temperature", _T,
               "{Tci}+{Q}/({mc}*{cpc})", "Tc2")  # fmt: skip
    c.computed(
        "d1",
        "terminal_difference_1",
        "Temperature difference at end 1;Terminal difference 1",
        ("dK", "dF"),
        "{Thi:d}-{Tco:d}",
        "ΔT1",
    )
    c.computed(
        "d2",
        "terminal_difference_2",
        "Temperature difference at end 2;Terminal difference 2",
        ("dK", "dF"),
        "{Tho:d}-{Tci:d}",
        "ΔT2",
    )
    c.computed(
        "LM",
        "log_mean_difference",
        "LMTD;Log mean temperature difference",
        ("dK", "dF"),
        "({d1}-{d2})/LN({d1}/{d2})",
        "ΔTlm",
    )
    words = "Overall heat transfer coefficient;Overall coefficient"
    c.computed("U", "overall_coefficient", words, ("W/m2K", "Btu/h-ft2-F"), "1/(1/{hi}+1/{ho}+{Rf})", "U")
    c.computed("A", "area", "Heat transfer area;Exchanger area;Required area", ("m2", "ft2"), "{Q}/({U}*{F}*{LM})", "A")
    c.computed("UA", "conductance", "UA;UA value", ("kW/K", "Btu/h-F"), "{U}*{A}", "UA")
    c.slip("mean-difference", "LM", "({d1}+{d2})/2")
    c.slip("log-base", "LM", "({d1}-{d2})/LOG10({d1}/{d2})")
    c.slip("dimension-mismatch", "Q", "{mh}*({Thi:d}-{Tho:d})")
    c.slip("dimension-mismatch", "A", "{Q}/({F}*{LM})")
    c.slip("unit-factor", "A", "{Q:raw}/({U:raw}*{F}*{LM:raw})" if system == "si" else "{Q}*60/({U}*{F}*{LM})")
    return c


def rating(rng: random.Random, system: str) -> Calculation:
    """Rating of a countercurrent exchanger by its transfer units."""
    c = Calculation("Heat recovery unit, rating", system)
    c.texts.append(("Flow arrangement", "countercurrent"))
    c.facts = {"arrangement": "countercurrent"}
    t1, s1 = 273.15 + rng.uniform(80, 140), 273.15 + rng.uniform(10, 25)
    c.typed("Thi", "hot_inlet_temperature", "Hot inlet temperature;Hot fluid inlet temperature", _T, t1, "Th1", 3)
    c.typed("Tci", "cold_inlet_temperature", "Cold inlet temperature;Cold fluid inlet temperature", _T, s1, "Tc1", 3)
    mh = between(rng, 1, 6)
    c.typed("mh", "hot_mass_flow", "Hot mass flow;Hot side mass flow", ("kg/s", "lb/h"), mh, "mh", 3)
    c.typed(
        "cph", "hot_specific_heat", "Hot specific heat;Hot side specific heat", ("kJ/kgK", "Btu/lb-F"), 1008.0, "cph", 4
    )
    c.typed(
        "mc",
        "cold_mass_flow",
        "Cold mass flow;Cold side mass flow",
        ("kg/s", "lb/h"),
        mh * rng.uniform(1.2, 1.9),
        "mc",
        3,
    )
    c.typed(
        "cpc",
        "cold_specific_heat",
        "Cold specific heat;Cold side specific heat",
        ("kJ/kgK", "Btu/lb-F"),
        1006.0,
        "cpc",
        4,
    )
    c.typed(
        "U",
        "overall_coefficient",
        "Overall heat transfer coefficient;Overall coefficient",
        ("W/m2K", "Btu/h-ft2-F"),
        between(rng, 20, 60),
        "U",
        3,
    )
    c.typed("A", "area", "Heat transfer area;Installed area", ("m2", "ft2"), between(rng, 60, 220), "A", 3)
    c.computed("Ch", "hot_capacity_rate", "Hot capacity rate", ("kW/K", "Btu/h-F"), "{mh}*{cph}", "Ch")
    c.computed("Cc", "cold_capacity_rate", "Cold capacity rate", ("kW/K", "Btu/h-F"), "{mc}*{cpc}", "Cc")
    c.computed(
        "Cn",
        "smallest_capacity_rate",
        "Minimum capacity rate;Smallest capacity rate",
        ("kW/K", "Btu/h-F"),
        "MIN({Ch},{Cc})",
        "Cmin",
    )
    c.computed(
        "Cx",
        "largest_capacity_rate",
        "Maximum capacity rate;Largest capacity rate",
        ("kW/K", "Btu/h-F"),
        "MAX({Ch},{Cc})",
        "Cmax",
    )
    c.computed("R", "capacity_ratio", "Capacity ratio", ("", ""), "{Cn}/{Cx}", "Cr")
    c.computed("N", "transfer_units", "NTU;Number of transfer units", ("", ""), "{U}*{A}/{Cn}", "NTU")
    c.computed("e", "effectiveness", "Effectiveness;Exchanger effectiveness", ("", ""),
               "(1-EXP(0-{N}*(1-{R})))/(1-{R}*EXP(0-{N}*(1-{R})))", "ε")  # fmt: skip
    c.computed(
        "Qm", "largest_duty", "Maximum duty;Maximum possible duty", ("kW", "Btu/h"), "{Cn}*({Thi:d}-{Tci:d})", "Qmax"
    )
    c.computed("Q", "duty", "Heat duty;Duty", ("kW", "Btu/h"), "{e}*{Qm}", "Q")
    c.computed("Tho", "hot_outlet_temperature", "Hot outlet temperature", _T, "{Thi}-{Q}/{Ch}", "Th2")
    c.computed("Tco", "cold_outlet_temperature", "Cold outlet temperature", _T, "{Tci}+{Q}/{Cc}", "Tc2")
    c.slip("mean-difference", "e", "(1-EXP(0-{N}*(1+{R})))/(1+{R})")
    c.slip("dimension-mismatch", "Ch", "{mh}")
    c.slip("dimension-mismatch", "N", "{A}/{Cn}")
    return c
