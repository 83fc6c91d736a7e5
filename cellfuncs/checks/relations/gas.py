"""Ideal gases and fast streams. Temperatures in K, pressures absolute in Pa."""

from cellfuncs.checks.relation import relation

_GAS_CONSTANT = 8.31446261815324  # J/(mol K), exact by definition of the SI
_ATMOSPHERE = 101_325.0
_ZERO = 273.15
_IN_CELSIUS = (
    "celsius-for-kelvin",
    "the temperature stands in °C",
    lambda pressure, gas_constant, gas_temperature: pressure / (gas_constant * (gas_temperature - _ZERO)),
)
_ON_GAUGE = (
    "gauge-for-absolute",
    "the gauge pressure is used",
    lambda pressure, gas_constant, gas_temperature: (pressure - _ATMOSPHERE) / (gas_constant * gas_temperature),
)


@relation("gas constant", "gas_constant", source="exact by definition of the SI")
def specific_constant(molar_mass):
    """R = 8.314/M."""
    return _GAS_CONSTANT / molar_mass


@relation("density of an ideal gas", "density", scatter=0.01, source="ideal gas", wrong=(_IN_CELSIUS, _ON_GAUGE))
def ideal_density(pressure, gas_constant, gas_temperature):
    """ρ = p/(RT)."""
    return pressure / (gas_constant * gas_temperature)


@relation(
    "density of an ideal gas from its molar mass", "density", scatter=0.01, source="ideal gas",
    wrong=(
        ("celsius-for-kelvin", "the temperature stands in °C", lambda pressure, molar_mass, gas_temperature:
         pressure * molar_mass / (_GAS_CONSTANT * (gas_temperature - _ZERO))),
        ("gauge-for-absolute", "the gauge pressure is used", lambda pressure, molar_mass, gas_temperature:
         (pressure - _ATMOSPHERE) * molar_mass / (_GAS_CONSTANT * gas_temperature)),
    ),
)  # fmt: skip
def molar_density(pressure, molar_mass, gas_temperature):
    """ρ = pM/(R₀T)."""
    return pressure * molar_mass / (_GAS_CONSTANT * gas_temperature)


@relation("speed of sound of an ideal gas", "speed_of_sound", scatter=0.01, source="ideal gas",
          wrong=(("celsius-for-kelvin", "the temperature stands in °C",
                  lambda isentropic_exponent, gas_constant, gas_temperature:
                  (isentropic_exponent * gas_constant * (gas_temperature - _ZERO)) ** 0.5),))  # fmt: skip
def sound(isentropic_exponent, gas_constant, gas_temperature):
    """c = √(κRT)."""
    return (isentropic_exponent * gas_constant * gas_temperature) ** 0.5


@relation("expansion coefficient of an ideal gas", "expansion", scatter=0.01, source="ideal gas",
          wrong=(("celsius-for-kelvin", "the temperature stands in °C",
                  lambda gas_temperature: 1.0 / (gas_temperature - _ZERO)),))  # fmt: skip
def gas_expansion(gas_temperature):
    """β = 1/T."""
    return 1.0 / gas_temperature


@relation("recovery factor of a laminar layer", "recovery_factor", scatter=0.01, source="Pohlhausen 1921",
          wrong=(("wrong-regime", "Pr^1/3 of a turbulent layer", lambda prandtl, reynolds=None:
                  prandtl ** (1.0 / 3.0)),))  # fmt: skip
def laminar_recovery(prandtl, reynolds=None):
    """r = √Pr."""
    if reynolds is not None and reynolds > 3e6:
        raise ValueError("turbulent")
    return prandtl**0.5


@relation("recovery factor of a turbulent layer", "recovery_factor", scatter=0.01, source="common practice",
          wrong=(("wrong-regime", "√Pr of a laminar layer", lambda prandtl, reynolds=None: prandtl**0.5),))  # fmt: skip
def turbulent_recovery(prandtl, reynolds=None):
    """r = Pr^1/3."""
    if reynolds is not None and reynolds < 1e5:
        raise ValueError("laminar")
    return prandtl ** (1.0 / 3.0)


@relation("recovery temperature", "recovery_temperature")
def recovery_temperature(stream_temperature, recovery_factor, velocity, specific_heat):
    """Tr = T + rU²/(2cp)."""
    return stream_temperature + recovery_factor * velocity**2 / (2.0 * specific_heat)


@relation("stagnation temperature", "stagnation_temperature")
def stagnation_temperature(stream_temperature, velocity, specific_heat):
    """T0 = T + U²/(2cp)."""
    return stream_temperature + velocity**2 / (2.0 * specific_heat)


@relation("recovery rise", "recovery_rise")
def recovery_rise(recovery_factor, velocity, specific_heat):
    """ΔT = rU²/(2cp)."""
    return recovery_factor * velocity**2 / (2.0 * specific_heat)


@relation("Mach number of an ideal gas", "mach", scatter=0.01, source="ISO 80000-11",
          wrong=(("celsius-for-kelvin", "the temperature stands in °C",
                  lambda velocity, isentropic_exponent, gas_constant, gas_temperature: velocity
                  / (isentropic_exponent * gas_constant * (gas_temperature - _ZERO)) ** 0.5),))  # fmt: skip
def ideal_mach(velocity, isentropic_exponent, gas_constant, gas_temperature):
    """Ma = U/√(κRT)."""
    return velocity / (isentropic_exponent * gas_constant * gas_temperature) ** 0.5
