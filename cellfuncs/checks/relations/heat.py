"""Coefficients, duties and fluxes, radiation. SI units."""

from cellfuncs.checks.relation import relation
from cellfuncs.groups import STEFAN_BOLTZMANN

_ZERO = 273.15


def _in_celsius(surrounding: str):
    def flux(emissivity, wall_temperature, area=1.0, **rest):
        other = rest[surrounding]
        return emissivity * STEFAN_BOLTZMANN * ((wall_temperature - _ZERO) ** 4 - (other - _ZERO) ** 4) * area

    return ("celsius-for-kelvin", "the fourth powers are of °C", flux)


@relation("coefficient from Nusselt number", "coefficient", source="ISO 80000-11")
def coefficient(nusselt, conductivity, group_length):
    """h = Nu·k/L."""
    return nusselt * conductivity / group_length


@relation("inside coefficient from Nusselt number", "inside_coefficient", source="ISO 80000-11")
def inside_coefficient(nusselt, conductivity, bore):
    """h = Nu·k/D."""
    return nusselt * conductivity / bore


@relation("outside coefficient from Nusselt number", "outside_coefficient", source="ISO 80000-11")
def outside_coefficient(nusselt, conductivity, outside_diameter):
    """h = Nu·k/Do."""
    return nusselt * conductivity / outside_diameter


@relation("coefficient of convection and radiation", "outside_coefficient")
def both_coefficients(coefficient, radiative_coefficient):
    """h = hc + hr."""
    return coefficient + radiative_coefficient


@relation("Rayleigh number from Gr and Pr", "rayleigh", source="ISO 80000-11")
def rayleigh_of_grashof(grashof, prandtl):
    """Ra = Gr·Pr."""
    return grashof * prandtl


@relation("Péclet number from Re and Pr", "peclet", source="ISO 80000-11")
def peclet_of(reynolds, prandtl):
    """Pe = Re·Pr."""
    return reynolds * prandtl


@relation("Stanton number from Nu", "stanton", source="ISO 80000-11")
def stanton_of(nusselt, reynolds, prandtl):
    """St = Nu/(Re·Pr)."""
    return nusselt / (reynolds * prandtl)


@relation("Graetz number from Re and Pr", "graetz", source="ISO 80000-11")
def graetz_of(reynolds, prandtl, bore, length):
    """Gz = Re·Pr·D/L."""
    return reynolds * prandtl * bore / length


@relation("Prandtl number from viscosity and diffusivity", "prandtl", source="ISO 80000-11")
def prandtl_of(kinematic_viscosity, diffusivity):
    """Pr = ν/α."""
    return kinematic_viscosity / diffusivity


@relation("Prandtl number from kinematic viscosity", "prandtl", source="ISO 80000-11")
def prandtl_of_kinematic(kinematic_viscosity, density, specific_heat, conductivity):
    """Pr = νρcp/k."""
    return kinematic_viscosity * density * specific_heat / conductivity


@relation("thermal diffusivity", "diffusivity", source="ISO 80000-5")
def diffusivity(conductivity, density, specific_heat):
    """α = k/(ρcp)."""
    return conductivity / (density * specific_heat)


@relation("duty from the rise of the stream", "duty", source="energy balance", streams=True)
def duty_of_stream(mass_flow, specific_heat, inlet_temperature, outlet_temperature):
    """Q = ṁcp|Tout − Tin|."""
    return mass_flow * specific_heat * abs(outlet_temperature - inlet_temperature)


@relation("duty from a stated rise", "duty", source="energy balance")
def duty_of_rise(mass_flow, specific_heat, bulk_rise):
    """Q = ṁcpΔT."""
    return mass_flow * specific_heat * bulk_rise


@relation("duty from a stated difference", "duty", source="energy balance")
def duty_of_span(mass_flow, specific_heat, temperature_difference):
    """Q = ṁcpΔT."""
    return mass_flow * specific_heat * temperature_difference


@relation("duty from capacity rate", "duty", source="energy balance", streams=True)
def duty_of_capacity(capacity_rate, inlet_temperature, outlet_temperature):
    """Q = C|Tout − Tin|."""
    return capacity_rate * abs(outlet_temperature - inlet_temperature)


@relation("capacity rate", "capacity_rate", source="definition", streams=True)
def capacity_rate(mass_flow, specific_heat):
    """C = ṁcp."""
    return mass_flow * specific_heat


@relation("duty through a coefficient", "duty", source="Newton")
def duty_of_coefficient(any_coefficient, any_area, any_difference):
    """Q = hAΔT."""
    return any_coefficient * any_area * any_difference


@relation("duty from wall to stream", "duty", source="Newton")
def duty_to_stream(any_coefficient, any_area, wall_temperature, bath):
    """Q = hA|Tw − T∞|."""
    return any_coefficient * any_area * abs(wall_temperature - bath)


@relation("convective heat", "convective_heat", source="Newton")
def convective_heat(any_coefficient, any_area, wall_temperature, bath):
    """Q = hA|Tw − T∞|."""
    return any_coefficient * any_area * abs(wall_temperature - bath)


@relation("convective heat from a difference", "convective_heat", source="Newton")
def convective_heat_of_difference(any_coefficient, any_area, any_difference):
    """Q = hAΔT."""
    return any_coefficient * any_area * any_difference


@relation("flux through a coefficient", "heat_flux", source="Newton")
def flux_of_coefficient(any_coefficient, any_difference):
    """q = hΔT."""
    return any_coefficient * any_difference


@relation("flux from wall to stream", "heat_flux", source="Newton")
def flux_to_stream(any_coefficient, wall_temperature, bath):
    """q = h|Tw − T∞|."""
    return any_coefficient * abs(wall_temperature - bath)


@relation("duty from flux", "duty")
def duty_of_flux(heat_flux, any_area):
    """Q = qA."""
    return heat_flux * any_area


@relation("flux from electric power", "heat_flux")
def flux_of_power(electric_power, any_area):
    """q = P/A."""
    return electric_power / any_area


@relation("heat loss per length", "heat_per_length")
def per_length(duty, length):
    """q' = Q/L."""
    return duty / length


@relation("heat by convection and radiation", "duty")
def both_ways(convective_heat, radiant_heat):
    """Q = Qc + Qr."""
    return convective_heat + radiant_heat


@relation("radiant heat", "radiant_heat", source="Stefan-Boltzmann",
          wrong=(_in_celsius("surroundings_temperature"),))  # fmt: skip
def radiant_heat(emissivity, any_area, wall_temperature, surroundings_temperature):
    """Q = εσA(Tw⁴ − Tsur⁴)."""
    return emissivity * STEFAN_BOLTZMANN * any_area * (wall_temperature**4 - surroundings_temperature**4)


@relation("radiant heat to the air's temperature", "radiant_heat", source="Stefan-Boltzmann",
          wrong=(_in_celsius("bath"),))  # fmt: skip
def radiant_heat_to_bath(emissivity, any_area, wall_temperature, bath):
    """Q = εσA(Tw⁴ − T∞⁴) where the surroundings have the stream's temperature."""
    return emissivity * STEFAN_BOLTZMANN * any_area * (wall_temperature**4 - bath**4)


@relation("radiant flux", "radiant_flux", source="Stefan-Boltzmann",
          wrong=(_in_celsius("surroundings_temperature"),))  # fmt: skip
def radiant_flux(emissivity, wall_temperature, surroundings_temperature):
    """q = εσ(Tw⁴ − Tsur⁴)."""
    return emissivity * STEFAN_BOLTZMANN * (wall_temperature**4 - surroundings_temperature**4)


@relation("radiative coefficient", "radiative_coefficient", source="Stefan-Boltzmann",
          wrong=(("celsius-for-kelvin", "the powers are of °C", lambda emissivity, wall_temperature, bath:
                  emissivity * STEFAN_BOLTZMANN * (wall_temperature + bath - 2 * _ZERO)
                  * ((wall_temperature - _ZERO) ** 2 + (bath - _ZERO) ** 2)),))  # fmt: skip
def radiative_coefficient(emissivity, wall_temperature, bath):
    """h = εσ(Tw + Ts)(Tw² + Ts²)."""
    return emissivity * STEFAN_BOLTZMANN * (wall_temperature + bath) * (wall_temperature**2 + bath**2)


@relation("steam flow", "steam_flow", source="energy balance")
def steam_flow(duty, latent_heat):
    """ṁ = Q/h_v."""
    return duty / latent_heat


@relation("duty of condensing steam", "duty", source="energy balance")
def duty_of_steam(steam_flow, latent_heat):
    """Q = ṁ·h_v."""
    return steam_flow * latent_heat


@relation("mass flow from duty", "mass_flow", source="energy balance")
def flow_of_duty(duty, specific_heat, bulk_rise):
    """ṁ = Q/(cpΔT)."""
    return duty / (specific_heat * bulk_rise)


@relation("volumetric source", "volumetric_source")
def source(electric_power, volume):
    """q‴ = P/V."""
    return electric_power / volume
