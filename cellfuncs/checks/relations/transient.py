"""Bodies that warm up or cool down, and fins. SI units."""

from math import exp, tanh

from cellfuncs.checks.relation import relation


@relation("Biot number of a body", "biot", source="ISO 80000-11")
def biot(coefficient, characteristic_length, solid_conductivity):
    """Bi = hLc/k with the body's conductivity."""
    return coefficient * characteristic_length / solid_conductivity


@relation("diffusivity of the body", "solid_diffusivity", source="ISO 80000-5")
def solid_diffusivity(solid_conductivity, solid_density, solid_specific_heat):
    """α = k/(ρc)."""
    return solid_conductivity / (solid_density * solid_specific_heat)


@relation("Fourier number of a body", "fourier", source="ISO 80000-11")
def fourier(any_diffusivity, time, characteristic_length):
    """Fo = αt/Lc²."""
    return any_diffusivity * time / characteristic_length**2


@relation("mass of the body", "mass")
def mass(solid_density, volume):
    """m = ρV."""
    return solid_density * volume


@relation("time constant", "time_constant", source="lumped body")
def time_constant(solid_density, solid_specific_heat, characteristic_length, coefficient):
    """τ = ρcLc/h."""
    return solid_density * solid_specific_heat * characteristic_length / coefficient


@relation("time constant from properties of the only material", "time_constant", source="lumped body")
def plain_time_constant(density, specific_heat, characteristic_length, coefficient):
    """τ = ρcLc/h."""
    return density * specific_heat * characteristic_length / coefficient


@relation("time constant from mass", "time_constant", source="lumped body")
def time_constant_of_mass(mass, solid_specific_heat, coefficient, any_area):
    """τ = mc/(hA)."""
    return mass * solid_specific_heat / (coefficient * any_area)


@relation("temperature ratio", "temperature_ratio", source="lumped body")
def temperature_ratio(time, time_constant):
    """θ = e^(−t/τ)."""
    return exp(-time / time_constant)


@relation("temperature ratio from Bi and Fo", "temperature_ratio", source="lumped body")
def temperature_ratio_of_groups(biot, fourier):
    """θ = e^(−Bi·Fo)."""
    return exp(-biot * fourier)


@relation("final temperature", "final_temperature", source="lumped body")
def final_temperature(initial_temperature, bath, time, time_constant):
    """T = T∞ + (Ti − T∞)e^(−t/τ)."""
    return bath + (initial_temperature - bath) * exp(-time / time_constant)


@relation("final temperature from the ratio", "final_temperature", source="lumped body")
def final_of_ratio(initial_temperature, bath, temperature_ratio):
    """T = T∞ + (Ti − T∞)θ."""
    return bath + (initial_temperature - bath) * temperature_ratio


@relation("heat given off", "stored_heat", source="energy balance")
def stored_heat(mass, solid_specific_heat, initial_temperature, final_temperature):
    """Q = mc|Ti − T|."""
    return mass * solid_specific_heat * abs(initial_temperature - final_temperature)


@relation("fin parameter", "fin_parameter", source="fin equation")
def fin_parameter(coefficient, fin_perimeter, fin_conductivity, fin_section):
    """m = √(hP/(kA))."""
    return (coefficient * fin_perimeter / (fin_conductivity * fin_section)) ** 0.5


@relation("fin parameter of a thin fin", "fin_parameter", source="fin equation")
def thin_fin_parameter(coefficient, fin_conductivity, fin_thickness):
    """m = √(2h/(kt))."""
    return (2.0 * coefficient / (fin_conductivity * fin_thickness)) ** 0.5


@relation("fin efficiency", "fin_efficiency", source="fin equation")
def fin_efficiency(fin_parameter, length):
    """η = tanh(mL)/(mL)."""
    return tanh(fin_parameter * length) / (fin_parameter * length)


@relation("heat of a fin", "duty", source="fin equation")
def fin_heat(coefficient, fin_perimeter, fin_conductivity, fin_section, fin_parameter, length, wall_temperature,
             bath):  # fmt: skip
    """Q = √(hPkA)·ΔT·tanh(mL)."""
    root = (coefficient * fin_perimeter * fin_conductivity * fin_section) ** 0.5
    return root * abs(wall_temperature - bath) * tanh(fin_parameter * length)


@relation("heat of a fin from its efficiency", "duty", source="fin equation")
def fin_heat_of_efficiency(fin_efficiency, coefficient, any_area, wall_temperature, bath):
    """Q = ηhAΔT."""
    return fin_efficiency * coefficient * any_area * abs(wall_temperature - bath)


@relation("surface of a fin", "area", derives=False)
def fin_surface(fin_perimeter, length):
    """A = P·L."""
    return fin_perimeter * length
