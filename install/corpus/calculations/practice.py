"""Calculations as practice has them: parallel tubes, assumed coefficients, rounded constants, no substance."""

import random

from corpus import properties
from corpus.calculation import Calculation, between

_T, _MM, _L = ("degC", "degF"), ("mm", "in"), ("m", "ft")
_H = ("W/m2K", "Btu/h-ft2-F")


def tube_bundle(rng: random.Random, system: str) -> Calculation:
    """Water through parallel tubes, with an allowance on the pressure drop and an installed area above the required."""
    c = Calculation("Oil cooler E-12, tube side", system, "duct")
    c.texts.append(("Tube side fluid", "Water"))
    c.facts = {"substance": "water"}
    t = 273.15 + rng.uniform(25, 45)
    right = properties.water(t)
    c.typed("N", "tubes", "Number of tubes;Tubes", ("", ""), rng.choice((24, 36, 52, 80)), "N", 3)
    c.typed("D", "diameter", "Tube ID;Tube inside diameter", _MM, 0.0148, "Di", 3)
    c.typed("Do", "outside_diameter", "Tube OD;Tube outside diameter", _MM, 0.0191, "Do", 3)
    c.typed("L", "length", "Tube length", _L, rng.choice((2.4, 3.0, 3.66)), "L", 3)
    c.typed("V", "volume_flow", "Water flow rate;Volume flow", ("m3/h", "gpm"), between(rng, 18, 60) / 3600, "V", 3)
    c.typed("T", "property_temperature", "Mean temperature", _T, t, "tm", 3)
    c.fluid("water", right, "rho mu", ())
    c.computed("A1", "flow_area", "Flow area of one tube;Cross section", ("cm2", "in2"), "3.1416/4*{D}^2", "A1")
    c.computed("w", "velocity", "Tube velocity;Velocity", ("m/s", "ft/s"), "{V}/({N}*{A1})", "w")
    c.computed("m", "mass_flow", "Mass flow", ("kg/s", "lb/h"), "{V}*{rho}", "m")
    c.computed("Re", "reynolds", "Reynolds number", ("", ""), "{w}*{D}*{rho}/{mu}", "Re")
    c.computed("f", "friction_factor", "Friction factor", ("", ""), "0.3164/{Re}^0.25", "f")
    c.computed("dp", "pressure_drop", "Pressure drop", ("kPa", "psi"), "{f}*{L}/{D}*{rho}*{w}^2/2", "dp")
    c.computed("S", "area", "Exchange surface;Heat transfer area", ("m2", "ft2"), "{N}*PI()*{Do}*{L}", "S")
    return c


def mass_flow_pipe(rng: random.Random, system: str) -> Calculation:
    """Reynolds number straight from the mass flow, Petukhov's factor, head with g of 9.81."""
    c = Calculation("Condensate return", system, "duct")
    c.texts.append(("Medium", "water"))
    c.facts = {"substance": "water"}
    t = 273.15 + rng.uniform(60, 90)
    c.typed(
        "m", "mass_flow", "Condensate flow rate, mass;Mass flow rate", ("kg/s", "lb/h"), between(rng, 0.5, 6), "m", 3
    )
    c.typed("D", "diameter", "Inside diameter", _MM, rng.choice((0.0266, 0.0409, 0.0525)), "d", 3)
    c.typed("L", "length", "Length of line;Pipe length", _L, between(rng, 20, 150), "L", 2)
    c.typed("T", "property_temperature", "Mean temperature", _T, t, "t", 2)
    c.fluid("water", properties.water(c.typed_si("T")), "rho mu cp", ())
    c.computed("Re", "reynolds", "Reynolds number", ("", ""), "4*{m}/(PI()*{D}*{mu})", "Re")
    c.computed("f", "friction_factor", "Friction factor", ("", ""), "(0.79*LN({Re})-1.64)^-2", "f")
    c.computed("w", "velocity", "Velocity", ("m/s", "ft/s"), "4*{m}/({rho}*PI()*{D}^2)", "w")
    c.computed("H", "head", "Friction head", _L, "{f}*{L}/{D}*{w}^2/(2*9.81)", "hf")
    c.computed("dp", "pressure_drop", "Pressure drop", ("kPa", "psi"), "{H}*{rho}*9.81", "dp")
    c.computed("dT", "friction_rise", "Temperature rise by friction", ("dK", "dF"), "{dp}/({rho}*{cp})", "dtf")
    return c


def condenser(rng: random.Random, system: str) -> Calculation:
    """Steam condensing on tubes; U assumed, area installed larger than needed."""
    c = Calculation("Turbine drain condenser", system)
    c.typed("ms", "steam_flow", "Steam flow;Condensate flow", ("kg/s", "lb/h"), between(rng, 0.2, 1.5), "ms", 3)
    c.typed(
        "r", "latent_heat", "Latent heat;Heat of vaporisation", ("kJ/kg", "kJ/kg"), rng.uniform(2.2e6, 2.35e6), "r", 4
    )
    c.typed("Tw", "wall_temperature", "Wall temperature", _T, 273.15 + rng.uniform(85, 110), "ts", 3)
    c.typed("Ti", "inlet_temperature", "Inlet temperature", _T, 273.15 + rng.uniform(15, 25), "t1", 3)
    c.typed("m", "mass_flow", "Cooling water mass flow rate;Mass flow", ("kg/s", "lb/h"), between(rng, 20, 60), "m", 3)
    c.typed("cp", "specific_heat", "Specific heat", ("kJ/kgK", "Btu/lb-F"), 4180.0, "c", 3)
    c.typed(
        "U",
        "overall_coefficient",
        "Overall coefficient;Overall heat transfer coefficient",
        _H,
        rng.uniform(1500, 2800),
        "k",
        2,
    )
    c.computed("Q", "duty", "Duty;Heat duty", ("kW", "Btu/h"), "{ms}*{r}", "Q")
    c.computed("To", "outlet_temperature", "Outlet temperature", _T, "{Ti}+{Q}/({m}*{cp})", "t2")
    c.computed("LM", "log_mean_difference", "Log mean temperature difference;LMTD", ("dK", "dF"),
               "({To:d}-{Ti:d})/LN(({Tw:d}-{Ti:d})/({Tw:d}-{To:d}))", "dtm")  # fmt: skip
    c.computed("A", "area", "Required area;Heat transfer area", ("m2", "ft2"), "{Q}/({U}*{LM})", "A")
    c.slip("log-base", "LM", "({To:d}-{Ti:d})/LOG10(({Tw:d}-{Ti:d})/({Tw:d}-{To:d}))")
    c.slip("mean-difference", "LM", "{Tw:d}-({Ti:d}+{To:d})/2")
    c.slip("dimension-mismatch", "A", "{Q}/{U}")
    return c


def hot_panel(rng: random.Random, system: str) -> Calculation:
    """A furnace panel: coefficient assumed, radiation with 273 and rounded constants."""
    c = Calculation("Furnace door, losses", system)
    c.typed("A", "area", "Surface;Heat transfer area", ("m2", "ft2"), between(rng, 0.5, 6), "A", 3)
    c.typed("em", "emissivity", "Emissivity;Surface emissivity", ("", ""), rng.uniform(0.6, 0.95), "e", 2)
    c.typed("h", "coefficient", "Convection coefficient;Heat transfer coefficient", _H, rng.uniform(6, 14), "h", 2)
    c.typed(
        "Tw",
        "wall_temperature",
        "Surface temperature;Wall temperature",
        ("degC", "degF"),
        273.15 + rng.uniform(90, 260),
        "Ts",
        3,
    )
    c.typed(
        "Ta",
        "ambient_temperature",
        "Outside temperature;Environment temperature",
        ("degC", "degF"),
        273.15 + rng.uniform(10, 32),
        "Ta",
        2,
    )
    c.computed("dT", "temperature_difference", "Temperature difference", ("dK", "dF"), "{Tw:d}-{Ta:d}", "dT")
    c.computed("Qc", "convective_heat", "Heat by convection;Convection loss", ("W", "Btu/h"), "{h}*{A}*{dT}", "Qc")
    kelvin = "({Tw:d}+273)" if system == "si" else "{Tw}"
    around = "({Ta:d}+273)" if system == "si" else "{Ta}"
    c.computed(
        "Qr",
        "radiant_heat",
        "Heat by radiation;Radiation loss",
        ("W", "Btu/h"),
        f"5.67E-08*{{em}}*{{A}}*({kelvin}^4-{around}^4)",
        "Qr",
    )
    c.computed("Q", "duty", "Heat loss;Heat flow", ("W", "Btu/h"), "{Qc}+{Qr}", "Q")
    c.slip("celsius-for-kelvin", "Qr", "5.67E-08*{em}*{A}*({Tw:d}^4-{Ta:d}^4)")
    c.slip("dimension-mismatch", "Qc", "{h}*{dT}")
    return c


def gas_meter(rng: random.Random, system: str) -> Calculation:
    """Natural gas by its molar mass."""
    c = Calculation("Burner supply line", system, "duct")
    c.typed("p", "pressure", "Absolute pressure;Operating pressure", ("bara", "psia"), between(rng, 1.5e5, 9e5), "p", 3)
    c.typed("T", "property_temperature", "Mean temperature", ("degC", "degF"), 273.15 + rng.uniform(5, 40), "T", 3)
    c.typed("M", "molar_mass", "Molar mass;Molecular weight", ("g/mol", "g/mol"), rng.uniform(0.0165, 0.019), "M", 3)
    c.typed("V", "volume_flow", "Volume flow;Flow rate", ("m3/h", "cfm"), between(rng, 80, 900) / 3600, "Q", 3)
    c.typed("D", "diameter", "Pipe ID;Inside diameter", _MM, rng.choice((0.0525, 0.0779, 0.1023)), "D", 3)
    c.computed("rho", "density", "Density;Gas density", ("kg/m3", "lb/ft3"), "{p}*{M}/(8.314*{T})", "rho")
    c.computed("m", "mass_flow", "Mass flow", ("kg/h", "lb/h"), "{rho}*{V}", "m")
    c.computed("A", "flow_area", "Pipe area;Cross section", ("m2", "ft2"), "0.7854*{D}^2", "A")
    c.computed("w", "velocity", "Gas velocity;Velocity", ("m/s", "ft/s"), "{V}/{A}", "w")
    c.computed("pd", "dynamic_pressure", "Velocity pressure;Dynamic pressure", ("Pa", "psi"), "0.5*{rho}*{w}^2", "pd")
    c.slip("celsius-for-kelvin", "rho", "{p}*{M}/(8.314*{T:d})")
    c.slip("gauge-for-absolute", "rho", "({p}-101325)*{M}/(8.314*{T})")
    c.slip("radius-for-diameter", "A", "3.1416*{D}^2")
    c.slip("area-factor", "A", "{D}^2")
    return c


def cooled_rod(rng: random.Random, system: str) -> Calculation:
    """A rod quenched: Biot and Fourier numbers, ratio from both."""
    c = Calculation("Quench of rods", system, "body")
    c.typed("Ti", "initial_temperature", "Initial temperature", _T, 273.15 + rng.uniform(500, 850), "To", 3)
    c.typed(
        "Ta", "stream_temperature", "Bath temperature;Ambient temperature", _T, 273.15 + rng.uniform(20, 50), "Tb", 2
    )
    c.typed("Lc", "characteristic_length", "Characteristic length", _MM, rng.uniform(0.002, 0.005), "Lc", 3)
    c.typed("h", "coefficient", "Heat transfer coefficient", _H, rng.uniform(200, 700), "h", 2)
    c.typed("k", "solid_conductivity", "Material conductivity", ("W/mK", "Btu/h-ft-F"), rng.uniform(35, 60), "k", 2)
    c.typed("rho", "solid_density", "Material density", ("kg/m3", "lb/ft3"), 7850.0, "rho", 3)
    c.typed(
        "cp", "solid_specific_heat", "Material specific heat", ("kJ/kgK", "Btu/lb-F"), rng.uniform(450, 520), "c", 3
    )
    c.typed("t", "time", "Time", ("s", "s"), rng.uniform(5, 30), "t", 2)
    c.computed("Bi", "biot", "Biot number", ("", ""), "{h}*{Lc}/{k}", "Bi")
    c.computed("Fo", "fourier", "Fourier number", ("", ""), "{k}/({rho}*{cp})*{t}/{Lc}^2", "Fo")
    c.computed("th", "temperature_ratio", "Temperature ratio", ("", ""), "EXP(0-{Bi}*{Fo})", "theta")
    c.computed("T", "final_temperature", "Final temperature", _T, "{Ta}+({Ti:d}-{Ta:d})*{th}", "T")
    c.slip("dimension-mismatch", "Bi", "{h}/{k}")
    c.slip("dimension-mismatch", "Fo", "{k}/({rho}*{cp})*{t}/{Lc}")
    return c


def crossed_cylinder(rng: random.Random, system: str) -> Calculation:
    """A cable in wind, Churchill and Bernstein."""
    c = Calculation("Cable duct in cross wind", system, "cylinder")
    c.texts += [("Fluid", "Air"), ("Flow kind", "cylinder in cross flow"), ("Correlation", "Churchill-Bernstein")]
    c.facts = {"substance": "air", "method": "Churchill-Bernstein"}
    ts = c.typed("Ts", "stream_temperature", "Air temperature", _T, 273.15 + rng.uniform(5, 25), "Ta", 2)
    tw = c.typed("Tw", "wall_temperature", "Surface temperature", _T, 273.15 + rng.uniform(50, 90), "Tw", 2)
    c.typed("D", "diameter", "Diameter;Cable diameter", _MM, rng.uniform(0.02, 0.08), "D", 3)
    c.typed("w", "velocity", "Air velocity;Wind velocity", ("m/s", "ft/s"), between(rng, 2, 12), "U", 2)
    film = (ts + tw) / 2.0
    c.computed("Tf", "property_temperature", "Film temperature", _T, "={Ts:raw}/2+{Tw:raw}/2", "Tf")
    c.fluid("air", properties.air(film), "rho mu k cp", ())
    c.computed("Re", "reynolds", "Reynolds number", ("", ""), "{rho}*{w}*{D}/{mu}", "Re")
    c.computed("Pr", "prandtl", "Prandtl number", ("", ""), "{mu}*{cp}/{k}", "Pr")
    by_both = "0.3+0.62*SQRT({Re})*{Pr}^(1/3)/(1+(0.4/{Pr})^(2/3))^0.25*(1+({Re}/282000)^0.625)^0.8"
    c.computed("Nu", "nusselt", "Nusselt number", ("", ""), by_both, "Nu")
    c.computed("h", "coefficient", "Heat transfer coefficient", _H, "{Nu}*{k}/{D}", "h")
    c.computed("q", "heat_flux", "Heat flux", ("W/m2", "Btu/h-ft2"), "{h}*({Tw:d}-{Ts:d})", "q")
    c.slip("radius-for-diameter", "Re", "{rho}*{w}*({D}/2)/{mu}")
    c.slip("dimension-mismatch", "q", "{h}*({Tw:d}-{Ts:d})*{D}")
    return c


def fouled_exchanger(rng: random.Random, system: str) -> Calculation:
    """Overall coefficient on the outside of a tube, clean and fouled; cocurrent mean difference."""
    c = Calculation("Effluent heater", system)
    c.texts.append(("Arrangement", "cocurrent"))
    c.facts = {"arrangement": "cocurrent"}
    c.typed("D", "diameter", "Tube inside diameter;Inside diameter", _MM, 0.0212, "Di", 3)
    c.typed("Do", "outside_diameter", "Tube outside diameter;Outside diameter", _MM, 0.0254, "Do", 3)
    c.typed("kw", "wall_conductivity", "Wall conductivity", ("W/mK", "Btu/h-ft-F"), rng.uniform(15, 50), "kw", 2)
    c.typed("hi", "inside_coefficient", "Inside coefficient", _H, between(rng, 900, 4000), "hi", 3)
    c.typed("ho", "outside_coefficient", "Outside coefficient", _H, between(rng, 600, 2500), "ho", 3)
    c.typed("Ri", "inside_fouling", "Inside fouling resistance", ("m2K/W", "h-ft2-F/Btu"), 1.8e-4, "Rfi", 2)
    c.typed("Ro", "outside_fouling", "Outside fouling resistance", ("m2K/W", "h-ft2-F/Btu"), 3.5e-4, "Rfo", 2)
    t1 = 273.15 + rng.uniform(90, 110)
    c.typed("Thi", "hot_inlet_temperature", "Hot inlet temperature", _T, t1, "T1", 3)
    c.typed("Tho", "hot_outlet_temperature", "Hot outlet temperature", _T, t1 - rng.uniform(20, 30), "T2", 3)
    c.typed("Tci", "cold_inlet_temperature", "Cold inlet temperature", _T, 273.15 + rng.uniform(12, 20), "t1", 3)
    c.typed("Tco", "cold_outlet_temperature", "Cold outlet temperature", _T, 273.15 + rng.uniform(40, 55), "t2", 3)
    c.typed("A", "area", "Installed area;Heat transfer area", ("m2", "ft2"), between(rng, 5, 40), "A", 3)
    c.computed("U", "overall_coefficient", "Overall coefficient;Overall heat transfer coefficient", _H,
               "1/((1/{hi}+{Ri})*{Do}/{D}+{Do}*LN({Do}/{D})/(2*{kw})+{Ro}+1/{ho})", "U")  # fmt: skip
    c.computed("LM", "log_mean_difference", "LMTD", ("dK", "dF"),
               "(({Thi:d}-{Tci:d})-({Tho:d}-{Tco:d}))/LN(({Thi:d}-{Tci:d})/({Tho:d}-{Tco:d}))", "LMTD")  # fmt: skip
    c.computed("Q", "duty", "Duty;Heat duty", ("kW", "Btu/h"), "{U}*{A}*{LM}", "Q")
    c.slip("mean-difference", "LM", "(({Thi:d}-{Tco:d})-({Tho:d}-{Tci:d}))/LN(({Thi:d}-{Tco:d})/({Tho:d}-{Tci:d}))")
    c.slip("log-base", "U", "1/((1/{hi}+{Ri})*{Do}/{D}+{Do}*LOG10({Do}/{D})/(2*{kw})+{Ro}+1/{ho})")
    c.slip("dimension-mismatch", "Q", "{U}*{LM}")
    return c
