"""Continuity, viscosities, friction and pressure. SI units; f is Darcy's friction factor."""

from math import pi

from cellfuncs.checks.relation import relation
from cellfuncs.groups import STANDARD_GRAVITY

_ATMOSPHERE = 101_325.0


def _of_a_wrong_section(velocity):
    """What a mistake in the section of a round tube makes of the velocity in it."""
    return (
        ("radius-for-diameter", "the section has the diameter where the radius is meant",
         lambda **stated: velocity(**stated) / 4.0),
        ("radius-for-diameter", "the section has the radius where the diameter is meant",
         lambda **stated: velocity(**stated) * 4.0),
        ("area-factor", "π/4 is missing in the section", lambda **stated: velocity(**stated) * pi / 4.0),
        ("area-factor", "π is missing in the section", lambda **stated: velocity(**stated) * pi),
        ("area-factor", "π/2 stands for π/4 in the section", lambda **stated: velocity(**stated) / 2.0),
    )  # fmt: skip


@relation("velocity from volume flow", "velocity", source="continuity",
          wrong=_of_a_wrong_section(
              lambda volume_flow, flow_area: volume_flow / flow_area))  # fmt: skip
def velocity_of_volume_flow(volume_flow, flow_area):
    """U = V̇/A."""
    return volume_flow / flow_area


@relation("velocity in one of the tubes", "velocity", source="continuity",
          wrong=_of_a_wrong_section(
              lambda volume_flow, flow_area, tubes: volume_flow / (tubes * flow_area)))  # fmt: skip
def velocity_in_tubes(volume_flow, flow_area, tubes):
    """U = V̇/(N·A) with the section of one tube."""
    return volume_flow / (tubes * flow_area)


@relation("velocity from mass flow", "velocity", source="continuity",
          wrong=_of_a_wrong_section(
              lambda mass_flow, density, flow_area: mass_flow / (density * flow_area)))  # fmt: skip
def velocity_of_mass_flow(mass_flow, density, flow_area):
    """U = ṁ/(ρA)."""
    return mass_flow / (density * flow_area)


@relation("velocity in one of the tubes from mass flow", "velocity", source="continuity",
          wrong=_of_a_wrong_section(
              lambda mass_flow, density, flow_area, tubes: mass_flow / (density * tubes * flow_area)))  # fmt: skip
def velocity_in_tubes_of_mass_flow(mass_flow, density, flow_area, tubes):
    """U = ṁ/(ρNA) with the section of one tube."""
    return mass_flow / (density * tubes * flow_area)


@relation("mass flow from volume flow", "mass_flow", source="continuity")
def mass_of_volume_flow(volume_flow, density):
    """ṁ = ρV̇."""
    return density * volume_flow


@relation("mass flow from velocity", "mass_flow", source="continuity")
def mass_of_velocity(velocity, density, flow_area):
    """ṁ = ρUA."""
    return density * velocity * flow_area


@relation("volume flow from mass flow", "volume_flow", source="continuity")
def volume_of_mass_flow(mass_flow, density):
    """V̇ = ṁ/ρ."""
    return mass_flow / density


@relation("mass flux from mass flow", "mass_flux", source="continuity")
def flux_of_mass_flow(mass_flow, flow_area):
    """G = ṁ/A."""
    return mass_flow / flow_area


@relation("mass flux from velocity", "mass_flux", source="continuity")
def flux_of_velocity(velocity, density):
    """G = ρU."""
    return density * velocity


@relation("kinematic viscosity", "kinematic_viscosity", source="ISO 80000-4")
def kinematic(viscosity, density):
    """ν = μ/ρ."""
    return viscosity / density


@relation("dynamic viscosity from the kinematic one", "viscosity", source="ISO 80000-4")
def dynamic(kinematic_viscosity, density):
    """μ = νρ."""
    return kinematic_viscosity * density


@relation("density from specific volume", "density", source="ISO 80000-4")
def density_of_volume(specific_volume):
    """ρ = 1/v."""
    return 1.0 / specific_volume


@relation("density from specific gravity", "density", scatter=0.003, source="common practice")
def density_of_gravity(specific_gravity):
    """ρ = SG·999 kg/m3 (water at 15 °C; 1000 and 998 are in use)."""
    return 999.0 * specific_gravity


@relation("Reynolds number from mass flow", "reynolds", source="ISO 80000-11")
def reynolds_of_mass_flow(mass_flow, bore, viscosity, tubes=1.0):
    """Re = 4ṁ/(πDμ) in round tubes."""
    return 4.0 * mass_flow / (pi * bore * viscosity * tubes)


@relation("Reynolds number from mass flux", "reynolds", source="ISO 80000-11")
def reynolds_of_flux(mass_flux, bore, viscosity):
    """Re = GD/μ."""
    return mass_flux * bore / viscosity


@relation("Reynolds number from kinematic viscosity", "reynolds", source="ISO 80000-11")
def reynolds_of_kinematic(velocity, group_length, kinematic_viscosity):
    """Re = UL/ν."""
    return velocity * group_length / kinematic_viscosity


@relation("Fanning's factor", "fanning_factor", source="common practice")
def fanning(friction_factor):
    """f_F = f/4."""
    return friction_factor / 4.0


@relation("Darcy's factor from Fanning's", "friction_factor", source="common practice")
def darcy(fanning_factor):
    """f = 4·f_F."""
    return 4.0 * fanning_factor


@relation("friction pressure drop", "pressure_drop", source="Darcy-Weisbach")
def friction_drop(friction_factor, length, bore, density, velocity):
    """Δp = f·L/D·ρU²/2."""
    return friction_factor * length / bore * density * velocity**2 / 2.0


@relation("friction pressure drop from Fanning's factor", "pressure_drop", source="common practice")
def fanning_drop(fanning_factor, length, bore, density, velocity):
    """Δp = 4·f_F·L/D·ρU²/2."""
    return 2.0 * fanning_factor * length / bore * density * velocity**2


@relation("friction pressure drop from mass flux", "pressure_drop", source="Darcy-Weisbach")
def flux_drop(friction_factor, length, bore, mass_flux, density):
    """Δp = f·L/D·G²/(2ρ)."""
    return friction_factor * length / bore * mass_flux**2 / (2.0 * density)


@relation("pressure drop of friction and fittings", "pressure_drop", source="Darcy-Weisbach")
def friction_and_fittings(friction_factor, length, bore, density, velocity, loss_coefficient):
    """Δp = (f·L/D + ΣK)·ρU²/2."""
    return (friction_factor * length / bore + loss_coefficient) * density * velocity**2 / 2.0


@relation("total pressure drop of friction and fittings", "total_pressure_drop", source="Darcy-Weisbach")
def total_of_factors(friction_factor, length, bore, density, velocity, loss_coefficient):
    """Δp = (f·L/D + ΣK)·ρU²/2."""
    return (friction_factor * length / bore + loss_coefficient) * density * velocity**2 / 2.0


@relation("laminar pressure drop", "pressure_drop", source="Hagen-Poiseuille",
          when=lambda case: case.facts.get("regime") == "laminar")  # fmt: skip
def poiseuille(viscosity, length, velocity, bore):
    """Δp = 32μLU/D² in a round tube."""
    return 32.0 * viscosity * length * velocity / bore**2


@relation("pressure gradient", "pressure_gradient")
def gradient(pressure_drop, length):
    """Δp/L."""
    return pressure_drop / length


@relation("dynamic pressure", "dynamic_pressure")
def dynamic_pressure(density, velocity):
    """ρU²/2."""
    return density * velocity**2 / 2.0


@relation("loss in fittings", "minor_loss", source="common practice")
def fittings(loss_coefficient, density, velocity):
    """Δp = K·ρU²/2."""
    return loss_coefficient * density * velocity**2 / 2.0


@relation("static pressure difference", "static_difference")
def static(density, elevation, gravity=STANDARD_GRAVITY):
    """Δp = ρgz."""
    return density * gravity * elevation


@relation("total pressure drop", "total_pressure_drop")
def sum_of_losses(pressure_drop, minor_loss=0.0, static_difference=0.0):
    """The sum of friction, fittings and elevation."""
    return pressure_drop + minor_loss + static_difference


@relation("velocity head", "velocity_head")
def velocity_head(velocity, gravity=STANDARD_GRAVITY):
    """U²/(2g)."""
    return velocity**2 / (2.0 * gravity)


@relation("head of a pressure drop", "head")
def head_of_drop(any_drop, density, gravity=STANDARD_GRAVITY):
    """H = Δp/(ρg)."""
    return any_drop / (density * gravity)


@relation("head of a pressure drop and elevation", "head")
def head_with_lift(any_drop, density, elevation, gravity=STANDARD_GRAVITY):
    """H = Δp/(ρg) + z."""
    return any_drop / (density * gravity) + elevation


@relation("friction head", "head", source="Darcy-Weisbach")
def friction_head(friction_factor, length, bore, velocity, gravity=STANDARD_GRAVITY):
    """H = f·L/D·U²/(2g)."""
    return friction_factor * length / bore * velocity**2 / (2.0 * gravity)


@relation("temperature rise by friction", "friction_rise", source="energy balance, liquid")
def friction_rise(any_drop, density, specific_heat):
    """ΔT = Δp/(ρcp)."""
    return any_drop / (density * specific_heat)


@relation("wall shear in a duct", "wall_shear", source="force balance")
def shear_of_drop(pressure_drop, bore, length):
    """τ = ΔpD/(4L)."""
    return pressure_drop * bore / (4.0 * length)


@relation("wall shear from the friction factor", "wall_shear", source="Darcy-Weisbach")
def shear_of_factor(friction_factor, density, velocity):
    """τ = fρU²/8."""
    return friction_factor * density * velocity**2 / 8.0


@relation("wall shear on a plate", "wall_shear", flows=("plate",))
def shear_on_plate(friction_coefficient, density, velocity):
    """τ = c_f·ρU²/2."""
    return friction_coefficient * density * velocity**2 / 2.0


@relation("drag of a plate", "drag_force", flows=("plate",))
def plate_drag(friction_coefficient, density, velocity, area):
    """F = c_f·ρU²/2·A."""
    return friction_coefficient * density * velocity**2 / 2.0 * area


@relation("drag of a body", "drag_force")
def body_drag(drag_coefficient, density, velocity, frontal_area):
    """F = c_D·ρU²/2·A."""
    return drag_coefficient * density * velocity**2 / 2.0 * frontal_area


@relation("friction velocity", "friction_velocity")
def friction_velocity(wall_shear, density):
    """u_τ = √(τ/ρ)."""
    return (wall_shear / density) ** 0.5


@relation("shear rate in a gap", "shear_rate", flows=("gap",))
def gap_shear_rate(velocity, gap):
    """U/h."""
    return velocity / gap


@relation("shear stress in a gap", "wall_shear", flows=("gap",), source="Newton")
def gap_shear(viscosity, velocity, gap):
    """τ = μU/h."""
    return viscosity * velocity / gap


@relation("power lost in a gap", "friction_power", flows=("gap",))
def gap_power(wall_shear, velocity, area):
    """P = τUA."""
    return wall_shear * velocity * area


@relation("absolute pressure from gauge", "pressure", scatter=0.002, source="common practice",
          wrong=(("gauge-for-absolute", "the gauge pressure is taken as absolute", lambda gauge_pressure, **_:
                  gauge_pressure - _ATMOSPHERE),))  # fmt: skip
def absolute(gauge_pressure, atmosphere=_ATMOSPHERE):
    """p = p_gauge + p_atm; the reading in SI stands on the standard atmosphere already."""
    return gauge_pressure - _ATMOSPHERE + atmosphere
