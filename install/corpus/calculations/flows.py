"""Flow and pressure: a water pipe, an oil line, a pump, a ventilation duct."""

import random

from corpus import properties
from corpus.calculation import Calculation, between

_LENGTH, _BORE, _FLOW = ("m", "ft"), ("mm", "in"), ("m3/h", "gpm")
_VELOCITY, _POWER = ("m/s", "ft/s"), ("kW", "hp")
HAALAND = "(-1.8*LOG10(6.9/{Re}+({rr}/3.7)^1.11))^-2"


def _circle(c: Calculation, letter: str = "D") -> None:
    c.computed("A", "flow_area", "Flow area;Cross section;Free area", ("m2", "ft2"), f"PI()/4*{{{letter}}}^2", "A")
    c.slip("radius-for-diameter", "A", f"PI()/4*({{{letter}}}/2)^2")
    c.slip("radius-for-diameter", "A", f"PI()*{{{letter}}}^2")
    c.slip("area-factor", "A", f"{{{letter}}}^2")
    c.slip("area-factor", "A", f"PI()/2*{{{letter}}}^2")


def water_pipe(rng: random.Random, system: str) -> Calculation:
    """Turbulent water in a steel pipe."""
    c = Calculation("Cooling water pipe, pressure drop", system, "duct")
    c.texts.append((rng.choice(("Fluid", "Medium")), "Water"))
    c.facts = {"substance": "water"}
    t = c.typed("T", "property_temperature", "Mean temperature;Water temperature, mean;Average temperature",
                ("degC", "degF"), 273.15 + rng.uniform(38, 75), "Tm", 3)  # fmt: skip
    c.typed("V", "volume_flow", "Volume flow;Flow rate;Volumetric flow", _FLOW, between(rng, 6, 60) / 3600, "Q", 3)
    c.typed("D", "diameter", "Inside diameter;Pipe ID;Bore", _BORE, rng.choice((0.0409, 0.0525, 0.0779, 0.1023)), "D")
    c.typed("L", "length", "Pipe length;Length", _LENGTH, between(rng, 15, 200), "L", 3)
    c.typed("eps", "roughness", "Roughness;Wall roughness;Absolute roughness", _BORE, 45e-6, "ε", 3)
    right, cold = properties.water(t), properties.water(293.15)
    c.fluid("water", right, "rho mu", (("property-temperature", cold), ("wrong-fluid", properties.methanol(t))))
    _circle(c)
    c.computed("w", "velocity", "Velocity;Mean velocity;Flow velocity", _VELOCITY, "{V}/{A}", "w")
    c.computed("nu", "kinematic_viscosity", "Kinematic viscosity", ("mm2/s", "cSt"), "{mu}/{rho}", "ν")
    c.computed("Re", "reynolds", "Reynolds number;Re", ("", ""), "{rho}*{w}*{D}/{mu}", "Re")
    c.computed("rr", "relative_roughness", "Relative roughness", ("", ""), "{eps}/{D}", "ε/D")
    c.computed("f", "friction_factor", "Friction factor;Darcy friction factor", ("", ""), HAALAND, "f")
    c.computed("dp", "pressure_drop", "Pressure drop;Friction pressure drop;Pressure loss", ("kPa", "psi"),
               "{f}*{L}/{D}*{rho}*{w}^2/2", "Δp")  # fmt: skip
    c.computed("H", "head", "Head loss;Friction head", _LENGTH, "{dp}/({rho}*9.80665)", "hL")
    c.computed("P", "hydraulic_power", "Hydraulic power;Fluid power", _POWER, "{dp}*{V}", "Ph")
    c.slip("kinematic-for-dynamic", "Re", "{rho}*{w}*{D}/{nu:as mu}")
    c.slip("radius-for-diameter", "Re", "{rho}*{w}*({D}/2)/{mu}")
    c.slip("dimension-mismatch", "Re", "{rho}*{w}/{mu}")
    c.slip("dimension-mismatch", "dp", "{f}*{L}/{D}*{rho}*{w}/2")
    c.slip("fanning-for-darcy", "f", f"{HAALAND}/4")
    c.slip("fanning-for-darcy", "dp", "4*{f}*{L}/{D}*{rho}*{w}^2/2")
    c.slip("wrong-regime", "f", "64/{Re}")
    return c


def oil_line(rng: random.Random, system: str) -> Calculation:
    """Laminar oil in a return line; temperature rise by friction."""
    c = Calculation("Gear oil return line", system, "duct")
    c.texts.append(("Flow regime", "laminar"))
    c.facts = {"regime": "laminar"}
    c.typed(
        "m", "mass_flow", "Mass flow;Oil flow, mass;Mass flow rate", ("kg/s", "lb/s"), between(rng, 0.4, 2.0), "ṁ", 3
    )
    c.typed("D", "diameter", "Inside diameter;Tube ID", _BORE, rng.choice((0.0409, 0.0525, 0.0627)), "D")
    c.typed("L", "length", "Line length;Pipe length", _LENGTH, between(rng, 8, 40), "L", 3)
    c.typed("rho", "density", "Density;Oil density", ("kg/m3", "lb/ft3"), rng.uniform(850, 895), "ρ", 4)
    c.typed("nu", "kinematic_viscosity", "Kinematic viscosity;Oil viscosity, kinematic", ("mm2/s", "cSt"),
            between(rng, 60e-6, 220e-6), "ν", 3)  # fmt: skip
    c.typed("cp", "specific_heat", "Specific heat;Specific heat capacity", ("kJ/kgK", "Btu/lb-F"), 1950.0, "cp", 3)
    c.computed("mu", "viscosity", "Dynamic viscosity", ("mPa.s", "cP"), "{nu}*{rho}", "μ")
    _circle(c)
    c.computed("w", "velocity", "Velocity;Mean velocity", _VELOCITY, "{m}/({rho}*{A})", "w")
    c.computed("Re", "reynolds", "Reynolds number;Re", ("", ""), "{w}*{D}/{nu}", "Re")
    c.computed("f", "friction_factor", "Friction factor;Darcy friction factor", ("", ""), "64/{Re}", "f")
    c.computed("dp", "pressure_drop", "Pressure drop;Pressure loss", ("kPa", "psi"), "{f}*{L}/{D}*{rho}*{w}^2/2", "Δp")
    c.computed("tau", "wall_shear", "Wall shear stress", ("Pa", "psi"), "{dp}*{D}/(4*{L})", "τw")
    c.computed("dT", "friction_rise", "Temperature rise by friction", ("dK", "dF"), "{dp}/({rho}*{cp})", "ΔTf")
    c.slip("kinematic-for-dynamic", "Re", "{w}*{D}/{mu:as nu}")
    c.slip("dimension-mismatch", "w", "{m}/{A}")
    c.slip("radius-for-diameter", "Re", "{w}*({D}/2)/{nu}")
    c.slip("fanning-for-darcy", "f", "16/{Re}")
    c.slip("wrong-regime", "f", "0.3164/{Re}^0.25")
    c.slip("dimension-mismatch", "dp", "{f}*{L}*{rho}*{w}^2/2")
    return c


def pump(rng: random.Random, system: str) -> Calculation:
    """A pump that lifts water."""
    c = Calculation("Transfer pump P-4", system, "duct")
    c.texts.append(("Fluid", "Water"))
    c.facts = {"substance": "water"}
    t = c.typed("T", "property_temperature", "Mean temperature;Temperature, mean", ("degC", "degF"),
                273.15 + rng.uniform(15, 60), "Tm", 3)  # fmt: skip
    c.typed("V", "volume_flow", "Volume flow;Capacity;Flow rate", _FLOW, between(rng, 10, 120) / 3600, "Q", 3)
    c.typed("z", "elevation", "Static head;Elevation difference;Static lift", _LENGTH, between(rng, 5, 40), "z", 3)
    c.typed("D", "diameter", "Inside diameter;Pipe ID", _BORE, rng.choice((0.0779, 0.1023, 0.1541)), "D")
    c.typed("K", "loss_coefficient", "Sum of loss coefficients;Loss coefficient;Resistance coefficient", ("", ""),
            rng.uniform(3, 20), "ΣK", 3)  # fmt: skip
    c.typed(
        "dpf",
        "pressure_drop",
        "Friction pressure drop;Pressure drop",
        ("kPa", "psi"),
        between(rng, 10e3, 90e3),
        "Δpf",
        3,
    )
    c.typed("eta", "pump_efficiency", "Pump efficiency;Efficiency", ("%", "%"), rng.uniform(0.6, 0.8), "η", 2)
    c.typed("etam", "motor_efficiency", "Motor efficiency", ("%", "%"), rng.uniform(0.88, 0.95), "ηm", 2)
    c.fluid("water", properties.water(t), "rho", ())
    c.computed("A", "flow_area", "Flow area;Cross section", ("m2", "ft2"), "PI()/4*{D}^2", "A")
    c.computed("w", "velocity", "Velocity;Pipe velocity, mean", _VELOCITY, "{V}/{A}", "w")
    c.computed("dpm", "minor_loss", "Fittings loss;Minor losses", ("kPa", "psi"), "{K}*{rho}*{w}^2/2", "Δpm")
    c.computed("dps", "static_difference", "Static pressure difference;Hydrostatic pressure", ("kPa", "psi"),
               "{rho}*9.80665*{z}", "Δps")  # fmt: skip
    c.computed("dpt", "total_pressure_drop", "Total pressure drop", ("kPa", "psi"), "{dpf}+{dpm}+{dps}", "Δpt")
    c.computed("H", "head", "Pump head;Total head;Total dynamic head", _LENGTH, "{dpt}/({rho}*9.80665)", "H")
    c.computed("Ph", "hydraulic_power", "Hydraulic power;Water power", _POWER, "{rho}*9.80665*{V}*{H}", "Ph")
    c.computed("Ps", "shaft_power", "Shaft power;Brake power", _POWER, "{Ph}/{eta}", "Ps")
    c.computed("Pm", "motor_power", "Motor power;Motor input", _POWER, "{Ps}/{etam}", "Pm")
    c.slip("dimension-mismatch", "Ph", "{rho}*{V}*{H}")
    c.slip("radius-for-diameter", "A", "PI()/4*({D}/2)^2")
    c.slip("area-factor", "A", "{D}^2")
    c.slip("dimension-mismatch", "dpm", "{K}*{rho}*{w}/2")
    c.slip("unit-factor", "Ps", "{Ph}/{eta:raw}")
    c.slip("dimension-mismatch", "H", "{dpt}/{rho}")
    return c


def ventilation_duct(rng: random.Random, system: str) -> Calculation:
    """Air in a rectangular sheet-metal duct."""
    c = Calculation("Dryer hall, supply air duct", system, "duct")
    c.texts += [("Fluid", "Air"), ("Cross section shape", "rectangular")]
    c.facts = {"substance": "air", "section": "rectangle"}
    t = c.typed("T", "property_temperature", "Mean temperature;Air temperature, mean", ("degC", "degF"),
                273.15 + rng.uniform(45, 110), "Tm", 3)  # fmt: skip
    c.typed(
        "V", "volume_flow", "Volume flow;Air flow;Flow rate", ("m3/h", "cfm"), between(rng, 2000, 12000) / 3600, "Q", 3
    )
    c.typed("B", "width", "Duct width;Width", _BORE, rng.uniform(0.4, 0.8), "B", 3)
    c.typed("Hh", "height", "Duct height;Height of the duct", _BORE, rng.uniform(0.25, 0.4), "Hd", 3)
    c.typed("L", "length", "Duct length;Length", _LENGTH, between(rng, 10, 60), "L", 3)
    c.typed("eps", "roughness", "Roughness;Wall roughness", _BORE, 90e-6, "ε", 2)
    right = properties.air(t)
    c.fluid("air", right, "rho mu", (("property-temperature", properties.air(293.15)),
                                     ("wrong-fluid", properties.carbon_dioxide(t))))  # fmt: skip
    c.computed("A", "flow_area", "Flow area;Cross section", ("m2", "ft2"), "{B}*{Hh}", "A")
    c.computed("U", "wetted_perimeter", "Perimeter;Wetted perimeter", _LENGTH, "2*({B}+{Hh})", "U")
    c.computed("D", "hydraulic_diameter", "Hydraulic diameter;Equivalent diameter", _BORE, "4*{A}/{U}", "Dh")
    c.computed("w", "velocity", "Velocity;Air velocity, mean", _VELOCITY, "{V}/{A}", "w")
    c.computed("Re", "reynolds", "Reynolds number;Re", ("", ""), "{rho}*{w}*{D}/{mu}", "Re")
    c.computed("rr", "relative_roughness", "Relative roughness", ("", ""), "{eps}/{D}", "ε/D")
    c.computed("f", "friction_factor", "Friction factor", ("", ""), HAALAND, "f")
    c.computed("dp", "pressure_drop", "Pressure drop;Pressure loss", ("Pa", "psi"), "{f}*{L}/{D}*{rho}*{w}^2/2", "Δp")
    c.computed("pd", "dynamic_pressure", "Dynamic pressure;Velocity pressure", ("Pa", "psi"), "{rho}*{w}^2/2", "pd")
    c.slip("area-factor", "D", "{A}/{U}")
    c.slip("fanning-for-darcy", "f", f"{HAALAND}/4")
    c.slip("wrong-regime", "f", "64/{Re}")
    c.slip("dimension-mismatch", "w", "{V}/{D}")
    c.slip("dimension-mismatch", "pd", "{rho}*{w}/2")
    return c
