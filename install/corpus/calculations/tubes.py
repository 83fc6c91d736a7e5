"""Heat in tubes: turbulent water by Dittus and Boelter, laminar oil."""

import random

from corpus import properties
from corpus.calculation import Calculation, Slip, between, rounded

_LENGTH, _BORE = ("m", "ft"), ("mm", "in")


def heated_tube(rng: random.Random, system: str) -> Calculation:
    """Water heated or cooled in a tube at constant wall temperature."""
    heating = rng.random() < 0.5
    c = Calculation("Tube side, water", system, "duct")
    c.texts += [("Fluid", "Water"), (rng.choice(("Correlation", "Method")), "Dittus-Boelter")]
    c.facts = {"substance": "water", "method": "Dittus-Boelter"}
    low, high = 273.15 + rng.uniform(12, 25), 273.15 + rng.uniform(55, 80)
    t_in, t_out = (low, high) if heating else (high, low)
    t_in = c.typed(
        "Ti", "inlet_temperature", "Inlet temperature;Water inlet temperature", ("degC", "degF"), t_in, "Tin", 3
    )
    t_out = c.typed(
        "To", "outlet_temperature", "Outlet temperature;Water outlet temperature", ("degC", "degF"), t_out, "Tout", 3
    )
    t_wall = high + rng.uniform(8, 25) if heating else low - rng.uniform(4, 9)
    c.typed("Tw", "wall_temperature", "Wall temperature;Tube wall temperature", ("degC", "degF"), t_wall, "Tw", 3)
    c.typed("D", "diameter", "Inside diameter;Tube ID", _BORE, rng.choice((0.0158, 0.0199, 0.0266)), "D")
    velocity = between(rng, 0.8, 1.9)
    mean = (t_in + t_out) / 2.0
    right = properties.water(mean)
    flow = velocity * right["density"] * 3.14159 / 4 * c.line("D").value ** 2 * (1e-6 if system == "si" else 0.0254**2)
    c.typed("m", "mass_flow", "Mass flow;Mass flow rate", ("kg/s", "lb/h"), flow, "ṁ", 3)
    c.computed("Tm", "property_temperature", "Mean temperature;Mean bulk temperature", ("degC", "degF"),
               "={Ti:raw}/2+{To:raw}/2", "Tm")  # fmt: skip
    c.fluid("water", right, "rho mu k cp", (("property-temperature", properties.water(t_in)),
                                            ("wrong-fluid", properties.methanol(mean))))  # fmt: skip
    c.computed("A", "flow_area", "Flow area;Cross section", ("m2", "ft2"), "PI()/4*{D}^2", "A")
    c.computed("w", "velocity", "Velocity;Mean velocity", ("m/s", "ft/s"), "{m}/({rho}*{A})", "w")
    c.computed("Re", "reynolds", "Reynolds number;Re", ("", ""), "{rho}*{w}*{D}/{mu}", "Re")
    c.computed("Pr", "prandtl", "Prandtl number;Pr", ("", ""), "{mu}*{cp}/{k}", "Pr")
    power = "0.4" if heating else "0.3"
    c.computed("Nu", "nusselt", "Nusselt number;Nu", ("", ""), f"0.023*{{Re}}^0.8*{{Pr}}^{power}", "Nu")
    c.computed(
        "h", "coefficient", "Heat transfer coefficient;Coefficient", ("W/m2K", "Btu/h-ft2-F"), "{Nu}*{k}/{D}", "h"
    )
    c.computed("LM", "log_mean_difference", "LMTD;Log mean temperature difference", ("dK", "dF"),
               "({Tw:d}-{Ti:d}-({Tw:d}-{To:d}))/LN(({Tw:d}-{Ti:d})/({Tw:d}-{To:d}))" if heating else
               "({Ti:d}-{Tw:d}-({To:d}-{Tw:d}))/LN(({Ti:d}-{Tw:d})/({To:d}-{Tw:d}))", "ΔTlm")  # fmt: skip
    c.computed("Q", "duty", "Heat duty;Duty;Heat transfer rate", ("kW", "Btu/h"), "{m}*{cp}*ABS({To:d}-{Ti:d})", "Q")
    c.computed("S", "area", "Heat transfer area;Required area", ("m2", "ft2"), "{Q}/({h}*{LM})", "S")
    c.computed("L", "length", "Tube length;Required length", _LENGTH, "{S}/(PI()*{D})", "L")
    other = "0.3" if heating else "0.4"
    c.slip("exponent-heating-cooling", "Nu", f"0.023*{{Re}}^0.8*{{Pr}}^{other}")
    c.slip("wrong-regime", "Nu", "3.66")
    c.slip("radius-for-diameter", "h", "{Nu}*{k}/({D}/2)")
    first, second = ("{Tw:d}-{Ti:d}", "{Tw:d}-{To:d}") if heating else ("{Ti:d}-{Tw:d}", "{To:d}-{Tw:d}")
    c.slip("log-base", "LM", f"(({first})-({second}))/LOG10(({first})/({second}))")
    c.slip("mean-difference", "LM", f"(({first})+({second}))/2")
    c.slip("dimension-mismatch", "w", "{m}/{A}")
    c.slip("dimension-mismatch", "h", "{Nu}*{k}")
    c.slip("radius-for-diameter", "A", "PI()/4*({D}/2)^2")
    c.slip("area-factor", "L", "{S}/{D}")
    c.slip("dimension-mismatch", "Pr", "{mu}/{k}")
    m, d = c.line("m"), c.line("D")
    bore = d.value * (0.001 if system == "si" else 0.0254)
    reynolds = 4.0 * flow / (3.14159 * bore * right["viscosity"])
    slow = rounded(m.value * rng.uniform(5000, 8000) / reynolds, 3)
    c.slips.append(Slip("outside-range", "m", value=slow, seen_at="Nu"))
    return c


def laminar_tube(rng: random.Random, system: str) -> Calculation:
    """Oil in a long tube at constant wall temperature, properties typed from a data sheet."""
    c = Calculation("Lube oil heater, tube side", system, "duct")
    c.texts.append(("Flow regime", "laminar"))
    c.facts = {"regime": "laminar"}
    c.typed(
        "m",
        "mass_flow",
        "Mass flow;Oil mass flow rate;Mass flow rate",
        ("kg/s", "lb/h"),
        between(rng, 0.02, 0.09),
        "ṁ",
        3,
    )
    c.typed("D", "diameter", "Inside diameter;Tube ID", _BORE, rng.choice((0.0158, 0.0199)), "D")
    c.typed("L", "length", "Tube length;Length", _LENGTH, between(rng, 300, 900), "L", 3)
    c.typed(
        "Ti",
        "inlet_temperature",
        "Inlet temperature;Oil inlet temperature",
        ("degC", "degF"),
        273.15 + rng.uniform(20, 40),
        "Tin",
        3,
    )
    c.typed("Tw", "wall_temperature", "Wall temperature", ("degC", "degF"), 273.15 + rng.uniform(90, 120), "Tw", 3)
    c.typed("rho", "density", "Density;Oil density", ("kg/m3", "lb/ft3"), rng.uniform(840, 880), "ρ", 3)
    c.typed("mu", "viscosity", "Dynamic viscosity;Viscosity", ("mPa.s", "cP"), between(rng, 0.02, 0.06), "μ", 3)
    c.typed("k", "conductivity", "Thermal conductivity;Conductivity", ("W/mK", "Btu/h-ft-F"), 0.135, "k", 3)
    c.typed("cp", "specific_heat", "Specific heat;Heat capacity", ("kJ/kgK", "Btu/lb-F"), 2050.0, "cp", 3)
    c.computed("A", "flow_area", "Flow area;Cross section", ("m2", "ft2"), "PI()/4*{D}^2", "A")
    c.computed("w", "velocity", "Velocity;Mean velocity", ("m/s", "ft/s"), "{m}/({rho}*{A})", "w")
    c.computed("Re", "reynolds", "Reynolds number;Re", ("", ""), "{rho}*{w}*{D}/{mu}", "Re")
    c.computed("Pr", "prandtl", "Prandtl number;Pr", ("", ""), "{mu}*{cp}/{k}", "Pr")
    c.computed("Gz", "graetz", "Graetz number;Gz", ("", ""), "{Re}*{Pr}*{D}/{L}", "Gz")
    c.computed("Nu", "nusselt", "Nusselt number;Nu", ("", ""), "3.66+0.0668*{Gz}/(1+0.04*{Gz}^(2/3))", "Nu")
    c.computed(
        "h", "coefficient", "Heat transfer coefficient;Coefficient", ("W/m2K", "Btu/h-ft2-F"), "{Nu}*{k}/{D}", "h"
    )
    c.computed("S", "area", "Heat transfer area;Exchange area", ("m2", "ft2"), "PI()*{D}*{L}", "S")
    c.computed("N", "transfer_units", "NTU;Number of transfer units", ("", ""), "{h}*{S}/({m}*{cp})", "NTU")
    c.computed("To", "outlet_temperature", "Outlet temperature;Oil outlet temperature", ("degC", "degF"),
               "{Tw}-({Tw:d}-{Ti:d})*EXP(0-{N})", "Tout")  # fmt: skip
    c.computed("Q", "duty", "Heat duty;Duty", ("kW", "Btu/h"), "{m}*{cp}*({To:d}-{Ti:d})", "Q")
    c.slip("wrong-regime", "Nu", "0.023*{Re}^0.8*{Pr}^0.4")
    c.slip("radius-for-diameter", "S", "PI()*({D}/2)*{L}")
    c.slip("area-factor", "S", "{D}*{L}")
    c.slip("dimension-mismatch", "Re", "{w}*{D}/{mu}")
    c.slip("radius-for-diameter", "A", "PI()*{D}^2")
    c.slip("dimension-mismatch", "Pr", "{mu}/{k}")
    c.slip("dimension-mismatch", "N", "{h}/({m}*{cp})")
    return c
