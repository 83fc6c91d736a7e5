"""Air over a plate, a plate in still air, a gas line, a fast stream."""

import random

from corpus import properties
from corpus.calculation import Calculation, Slip, between

_T, _MM, _L = ("degC", "degF"), ("mm", "in"), ("m", "ft")
_H = ("W/m2K", "Btu/h-ft2-F")


def air_over_plate(rng: random.Random, system: str) -> Calculation:
    """Laminar air along a cooled plate."""
    c = Calculation("Flat plate in an air stream", system, "plate")
    c.texts += [("Fluid", "Air"), ("Flow kind", "flat plate")]
    c.facts = {"substance": "air"}
    ts = c.typed(
        "Ts", "stream_temperature", "Air temperature;Free stream temperature", _T, 273.15 + rng.uniform(10, 30), "T∞", 2
    )
    tw = c.typed(
        "Tw", "wall_temperature", "Plate temperature;Surface temperature", _T, 273.15 + rng.uniform(110, 170), "Ts", 3
    )
    c.typed("w", "velocity", "Air velocity;Free stream velocity;Velocity", ("m/s", "ft/s"), between(rng, 2, 9), "U", 2)
    c.typed("L", "length", "Plate length;Length", _MM, rng.uniform(0.15, 0.5), "L", 3)
    c.typed("B", "width", "Plate width;Width", _MM, rng.uniform(0.2, 0.8), "B", 3)
    film = (ts + tw) / 2.0
    c.computed("Tf", "property_temperature", "Film temperature", _T, "={Ts:raw}/2+{Tw:raw}/2", "Tf")
    right = properties.air(film)
    c.fluid("air", right, "rho mu k cp", (("property-temperature", properties.air(ts)),
                                          ("wrong-fluid", properties.carbon_dioxide(film))))  # fmt: skip
    c.computed("Re", "reynolds", "Reynolds number;Re", ("", ""), "{rho}*{w}*{L}/{mu}", "Re")
    c.computed("Pr", "prandtl", "Prandtl number;Pr", ("", ""), "{mu}*{cp}/{k}", "Pr")
    c.computed("Nu", "nusselt", "Nusselt number;Nu", ("", ""), "0.664*SQRT({Re})*{Pr}^(1/3)", "Nu")
    c.computed("h", "coefficient", "Heat transfer coefficient;Coefficient", _H, "{Nu}*{k}/{L}", "h")
    c.computed("A", "area", "Heat transfer area;Area", ("m2", "ft2"), "{L}*{B}", "A")
    c.computed("dT", "temperature_difference", "Temperature difference", ("dK", "dF"), "{Tw:d}-{Ts:d}", "ΔT")
    c.computed("q", "heat_flux", "Heat flux", ("W/m2", "Btu/h-ft2"), "{h}*{dT}", "q")
    c.computed("Q", "duty", "Heat flow;Heat rate;Heat duty", ("W", "Btu/h"), "{h}*{A}*{dT}", "Q")
    c.slip("wrong-regime", "Nu", "0.037*{Re}^0.8*{Pr}^(1/3)")
    c.slip("dimension-mismatch", "Re", "{w}*{L}/{mu}")
    c.slip("dimension-mismatch", "h", "{Nu}*{k}")
    c.slip("dimension-mismatch", "Q", "{h}*{dT}")
    return c


def still_air_plate(rng: random.Random, system: str) -> Calculation:
    """An upright warm face: free convection and radiation."""
    c = Calculation("Vertical plate in still air", system, "free")
    c.texts += [("Fluid", "Air"), ("Surface", "vertical plate"), ("Flow kind", "natural convection")]
    c.facts = {"substance": "air", "surface": "vertical plate"}
    ts = c.typed(
        "Ts", "stream_temperature", "Ambient temperature;Air temperature", _T, 273.15 + rng.uniform(10, 30), "T∞", 2
    )
    tw = c.typed(
        "Tw", "wall_temperature", "Surface temperature;Wall temperature", _T, 273.15 + rng.uniform(70, 140), "Tw", 3
    )
    c.typed("L", "length", "Plate length;Length", _L, rng.uniform(0.3, 0.9), "L", 2)
    c.typed("B", "width", "Plate width;Width", _L, rng.uniform(0.4, 1.5), "B", 2)
    c.typed("em", "emissivity", "Emissivity", ("", ""), rng.uniform(0.7, 0.95), "ε", 2)
    film = (ts + tw) / 2.0
    c.computed("Tf", "property_temperature", "Film temperature", _T, "={Ts:raw}/2+{Tw:raw}/2", "Tf")
    c.fluid("air", properties.air(film), "rho mu k cp", ())
    c.computed("be", "expansion", "Expansion coefficient;Thermal expansion coefficient", ("1/K", "1/R"), "1/{Tf}", "β")
    c.computed("nu", "kinematic_viscosity", "Kinematic viscosity", ("m2/s", "ft2/s"), "{mu}/{rho}", "ν")
    c.computed("dT", "temperature_difference", "Temperature difference", ("dK", "dF"), "{Tw:d}-{Ts:d}", "ΔT")
    c.computed("Pr", "prandtl", "Prandtl number;Pr", ("", ""), "{mu}*{cp}/{k}", "Pr")
    c.computed("Gr", "grashof", "Grashof number;Gr", ("", ""), "9.80665*{be}*{dT}*{L}^3/{nu}^2", "Gr")
    c.computed("Ra", "rayleigh", "Rayleigh number;Ra", ("", ""), "{Gr}*{Pr}", "Ra")
    c.computed("Nu", "nusselt", "Nusselt number;Nu", ("", ""),
               "(0.825+0.387*{Ra}^(1/6)/(1+(0.492/{Pr})^(9/16))^(8/27))^2", "Nu")  # fmt: skip
    c.computed("h", "coefficient", "Heat transfer coefficient;Convection coefficient", _H, "{Nu}*{k}/{L}", "h")
    c.computed("A", "area", "Heat transfer area;Area", ("m2", "ft2"), "{L}*{B}", "A")
    c.computed("Qc", "convective_heat", "Heat by convection;Convective heat loss", ("W", "Btu/h"), "{h}*{A}*{dT}", "Qc")
    c.computed("Qr", "radiant_heat", "Heat by radiation;Radiation heat loss", ("W", "Btu/h"),
               "{em}*5.670374E-08*{A}*({Tw}^4-{Ts}^4)", "Qr")  # fmt: skip
    c.computed("Q", "duty", "Heat flow;Heat rate", ("W", "Btu/h"), "{Qc}+{Qr}", "Q")
    c.slip("celsius-for-kelvin", "Qr", "{em}*5.670374E-08*{A}*({Tw:d}^4-{Ts:d}^4)")
    c.slip("celsius-for-kelvin", "be", "1/{Tf:d}")
    c.slip("dimension-mismatch", "Gr", "9.80665*{be}*{dT}*{L}/{nu}^2")
    c.slip("dimension-mismatch", "h", "{Nu}*{k}")
    c.slip("kinematic-for-dynamic", "Pr", "{nu}*{cp}/{k}")
    c.slips.append(Slip("dropped-term", "note:Radiation is neglected."))
    return c


def gas_line(rng: random.Random, system: str) -> Calculation:
    """Air at pressure in a pipe, density as an ideal gas."""
    c = Calculation("Compressed air main", system, "duct")
    c.texts.append(("Fluid", "Air"))
    c.facts = {"substance": "air"}
    c.typed(
        "pg",
        "gauge_pressure",
        "Gauge pressure;Pressure gauge",
        ("barg", "psig"),
        101325 + between(rng, 2e5, 8e5),
        "pg",
        3,
    )
    t = c.typed(
        "T", "property_temperature", "Mean temperature;Average temperature", _T, 273.15 + rng.uniform(20, 60), "Tm", 3
    )
    c.typed("R", "gas_constant", "Gas constant;Specific gas constant", ("J/kgK", "J/kgK"), 287.06, "R")
    c.typed("m", "mass_flow", "Mass flow;Mass flow rate", ("kg/h", "lb/h"), between(rng, 300, 2500) / 3600, "ṁ", 3)
    c.typed("D", "diameter", "Inside diameter;Pipe ID", _MM, rng.choice((0.0525, 0.0779, 0.1023)), "D")
    c.typed("L", "length", "Pipe length;Length", _L, between(rng, 30, 250), "L", 3)
    c.typed("eps", "roughness", "Roughness;Wall roughness", _MM, 45e-6, "ε", 2)
    c.typed("mu", "viscosity", "Dynamic viscosity;Viscosity", ("mPa.s", "cP"), properties.air(t)["viscosity"], "μ", 3)
    c.computed("p", "pressure", "Absolute pressure;Operating pressure", ("bara", "psia"), "{pg}", "p")
    c.computed("rho", "density", "Density;Gas density", ("kg/m3", "lb/ft3"), "{p}/({R}*{T})", "ρ")
    c.computed("A", "flow_area", "Flow area;Cross section", ("m2", "ft2"), "PI()/4*{D}^2", "A")
    c.computed("w", "velocity", "Velocity;Mean velocity", ("m/s", "ft/s"), "{m}/({rho}*{A})", "w")
    c.computed("Re", "reynolds", "Reynolds number;Re", ("", ""), "{rho}*{w}*{D}/{mu}", "Re")
    c.computed("rr", "relative_roughness", "Relative roughness", ("", ""), "{eps}/{D}", "ε/D")
    c.computed("f", "friction_factor", "Friction factor;Darcy friction factor", ("", ""),
               "0.25/LOG10({rr}/3.7+5.74/{Re}^0.9)^2", "f")  # fmt: skip
    c.computed("dp", "pressure_drop", "Pressure drop;Pressure loss", ("kPa", "psi"), "{f}*{L}/{D}*{rho}*{w}^2/2", "Δp")
    c.slip("celsius-for-kelvin", "rho", "{p}/({R}*{T:d})")
    c.slip("gauge-for-absolute", "rho", "{pg:gauge}/({R}*{T})")
    c.slip("gauge-for-absolute", "p", "{pg:gauge}")
    c.slip("fanning-for-darcy", "f", "0.0625/LOG10({rr}/3.7+5.74/{Re}^0.9)^2")
    c.slip("fanning-for-darcy", "dp", "4*{f}*{L}/{D}*{rho}*{w}^2/2")
    c.slip("area-factor", "A", "{D}^2")
    c.slip("radius-for-diameter", "A", "PI()*{D}^2")
    c.slip("wrong-regime", "f", "64/{Re}")
    return c


def fast_air(rng: random.Random, system: str) -> Calculation:
    """Recovery temperature in a fast stream of air."""
    c = Calculation("Blow-off nozzle, plate downstream", system, "plate")
    c.texts += [("Fluid", "Air"), ("Flow kind", "flat plate")]
    c.facts = {"substance": "air"}
    ts = c.typed(
        "Ts", "stream_temperature", "Free stream temperature;Air temperature", _T, 273.15 + rng.uniform(0, 40), "T∞", 2
    )
    c.typed("w", "velocity", "Velocity;Free stream velocity", ("m/s", "ft/s"), rng.uniform(120, 260), "U", 3)
    c.typed("kap", "isentropic_exponent", "Isentropic exponent;Ratio of specific heats", ("", ""), 1.4, "κ", 3)
    c.typed("R", "gas_constant", "Gas constant;Specific gas constant", ("J/kgK", "J/kgK"), 287.06, "R")
    c.typed("Pr", "prandtl", "Prandtl number", ("", ""), 0.71, "Pr", 2)
    air = properties.air(ts)
    c.typed("cp", "specific_heat", "Specific heat;Heat capacity", ("kJ/kgK", "Btu/lb-F"), air["specific_heat"], "cp")
    c.computed("c", "speed_of_sound", "Speed of sound;Sonic velocity", ("m/s", "ft/s"), "SQRT({kap}*{R}*{Ts})", "c")
    c.computed("Ma", "mach", "Mach number;Ma", ("", ""), "{w}/{c}", "Ma")
    c.computed("r", "recovery_factor", "Recovery factor", ("", ""), "{Pr}^(1/3)", "r")
    c.computed(
        "Tr",
        "recovery_temperature",
        "Recovery temperature;Adiabatic wall temperature",
        _T,
        "{Ts}+{r}*{w}^2/(2*{cp})",
        "Tr",
    )
    c.computed(
        "T0", "stagnation_temperature", "Stagnation temperature;Total temperature", _T, "{Ts}+{w}^2/(2*{cp})", "T0"
    )
    c.slip("celsius-for-kelvin", "c", "SQRT({kap}*{R}*{Ts:d})")
    c.slip("dimension-mismatch", "Tr", "{Ts}+{r}*{w}/(2*{cp})")
    c.slip("unit-factor", "Tr", "{Ts}+{r}*{w}^2/(2*{cp:raw})")
    c.slip("unit-factor", "T0", "{Ts}+{w}^2/(2*{cp:raw})")
    return c
