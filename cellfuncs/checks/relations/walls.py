"""Thermal resistances of films, walls and layers, and overall coefficients. SI units."""

from math import log, log10, pi

from cellfuncs.checks.relation import relation


def _bare(case) -> bool:
    return not {"insulation_thickness", "insulation_diameter", "insulation_radius"} & set(case.stated)


@relation("resistance of the inside film", "inside_resistance")
def inside_film(inside_coefficient, diameter, length):
    """R = 1/(hπDL)."""
    return 1.0 / (inside_coefficient * pi * diameter * length)


@relation("resistance of the outside film", "outside_resistance", when=_bare)
def outside_film(outside_coefficient, outside_diameter, length):
    """R = 1/(hπDoL)."""
    return 1.0 / (outside_coefficient * pi * outside_diameter * length)


@relation("resistance of the film over the insulation", "outside_resistance")
def insulated_film(outside_coefficient, insulation_diameter, length):
    """R = 1/(hπDL) with the diameter over the insulation."""
    return 1.0 / (outside_coefficient * pi * insulation_diameter * length)


@relation("resistance of a film", "outside_resistance")
def film(outside_coefficient, area):
    """R = 1/(hA)."""
    return 1.0 / (outside_coefficient * area)


@relation("resistance of a tube wall", "wall_resistance", source="Fourier", wrong=(
    ("log-base", "the logarithm to base 10", lambda outside_diameter, diameter, wall_conductivity, length:
     log10(outside_diameter / diameter) / (2.0 * pi * wall_conductivity * length)),
))  # fmt: skip
def tube_wall(outside_diameter, diameter, wall_conductivity, length):
    """R = ln(Do/D)/(2πkL)."""
    return log(outside_diameter / diameter) / (2.0 * pi * wall_conductivity * length)


@relation("resistance of tubular insulation", "insulation_resistance", source="Fourier", wrong=(
    ("log-base", "the logarithm to base 10",
     lambda insulation_diameter, outside_diameter, insulation_conductivity, length:
     log10(insulation_diameter / outside_diameter) / (2.0 * pi * insulation_conductivity * length)),
    ("radius-for-diameter", "the thickness is added once to the diameter",
     lambda insulation_diameter, outside_diameter, insulation_conductivity, length:
     log((insulation_diameter + outside_diameter) / 2.0 / outside_diameter)
     / (2.0 * pi * insulation_conductivity * length)),
))  # fmt: skip
def tube_insulation(insulation_diameter, outside_diameter, insulation_conductivity, length):
    """R = ln(D/Do)/(2πkL)."""
    return log(insulation_diameter / outside_diameter) / (2.0 * pi * insulation_conductivity * length)


@relation("resistance of tubular insulation by radii", "insulation_resistance", source="Fourier", wrong=(
    ("log-base", "the logarithm to base 10",
     lambda insulation_radius, outside_radius, insulation_conductivity, length:
     log10(insulation_radius / outside_radius) / (2.0 * pi * insulation_conductivity * length)),
))  # fmt: skip
def tube_insulation_of_radii(insulation_radius, outside_radius, insulation_conductivity, length):
    """R = ln(r/ro)/(2πkL)."""
    return log(insulation_radius / outside_radius) / (2.0 * pi * insulation_conductivity * length)


@relation("total resistance", "total_resistance")
def sum_of_resistances(insulation_resistance, outside_resistance, inside_resistance=0.0, wall_resistance=0.0):
    """The sum of those in series."""
    return inside_resistance + wall_resistance + insulation_resistance + outside_resistance


@relation("total resistance of a wall", "total_resistance")
def sum_without_insulation(wall_resistance, outside_resistance, inside_resistance=0.0):
    """The sum of those in series."""
    return inside_resistance + wall_resistance + outside_resistance


@relation("heat through resistances", "duty")
def duty_of_resistance(inlet_temperature, ambient_temperature, total_resistance):
    """Q = ΔT/R."""
    return abs(inlet_temperature - ambient_temperature) / total_resistance


@relation("heat from a wall through resistances", "duty")
def duty_from_wall(wall_temperature, bath, total_resistance):
    """Q = ΔT/R."""
    return abs(wall_temperature - bath) / total_resistance


@relation("heat of a difference through resistances", "duty")
def duty_of_difference(temperature_difference, total_resistance):
    """Q = ΔT/R."""
    return temperature_difference / total_resistance


@relation("resistance of a plane wall of unit area", "wall_insulance", source="Fourier")
def plane_wall(wall_thickness, wall_conductivity):
    """R = s/k."""
    return wall_thickness / wall_conductivity


@relation("resistance of plane insulation of unit area", "insulation_insulance", source="Fourier")
def plane_insulation(insulation_thickness, insulation_conductivity):
    """R = s/k."""
    return insulation_thickness / insulation_conductivity


@relation("inside film of unit area", "inside_insulance")
def inside_insulance(inside_coefficient):
    """R = 1/h."""
    return 1.0 / inside_coefficient


@relation("outside film of unit area", "outside_insulance")
def outside_insulance(outside_coefficient):
    """R = 1/h."""
    return 1.0 / outside_coefficient


@relation("total resistance of unit area", "total_insulance")
def sum_of_insulances(inside_insulance, wall_insulance, outside_insulance, insulation_insulance=0.0):
    """The sum of those in series."""
    return inside_insulance + wall_insulance + insulation_insulance + outside_insulance


@relation("overall coefficient from resistance", "overall_coefficient")
def overall_of_insulance(total_insulance):
    """U = 1/R."""
    return 1.0 / total_insulance


@relation("flux through an overall coefficient", "heat_flux")
def overall_flux(overall_coefficient, temperature_difference):
    """q = UΔT."""
    return overall_coefficient * temperature_difference


@relation("duty through an overall coefficient", "duty")
def overall_duty(overall_coefficient, any_area, temperature_difference):
    """Q = UAΔT."""
    return overall_coefficient * any_area * temperature_difference


@relation("overall coefficient of two films and fouling", "overall_coefficient", source="common practice")
def overall_thin(inside_coefficient, outside_coefficient, fouling=0.0, inside_fouling=0.0, outside_fouling=0.0):
    """1/U = 1/hi + 1/ho + ΣRf, thin wall."""
    fouled = fouling + inside_fouling + outside_fouling
    return 1.0 / (1.0 / inside_coefficient + 1.0 / outside_coefficient + fouled)


@relation("overall coefficient with a plane wall", "overall_coefficient", source="common practice")
def overall_plane(inside_coefficient, outside_coefficient, wall_thickness, wall_conductivity, fouling=0.0,
                  inside_fouling=0.0, outside_fouling=0.0):  # fmt: skip
    """1/U = 1/hi + s/k + 1/ho + ΣRf."""
    fouled = fouling + inside_fouling + outside_fouling
    return 1.0 / (1.0 / inside_coefficient + wall_thickness / wall_conductivity + 1.0 / outside_coefficient + fouled)


@relation("overall coefficient on the outside of a tube", "overall_coefficient", source="common practice", wrong=(
    ("log-base", "the logarithm to base 10",
     lambda inside_coefficient, outside_coefficient, outside_diameter, diameter, wall_conductivity, inside_fouling=0.0,
     outside_fouling=0.0: 1.0 / ((1.0 / inside_coefficient + inside_fouling) * outside_diameter / diameter
     + outside_diameter * log10(outside_diameter / diameter) / (2.0 * wall_conductivity) + outside_fouling
     + 1.0 / outside_coefficient)),
))  # fmt: skip
def overall_tube(inside_coefficient, outside_coefficient, outside_diameter, diameter, wall_conductivity,
                 inside_fouling=0.0, outside_fouling=0.0):  # fmt: skip
    """1/U = (1/hi + Rfi)·Do/D + Do·ln(Do/D)/(2k) + Rfo + 1/ho."""
    inside = (1.0 / inside_coefficient + inside_fouling) * outside_diameter / diameter
    wall = outside_diameter * log(outside_diameter / diameter) / (2.0 * wall_conductivity)
    return 1.0 / (inside + wall + outside_fouling + 1.0 / outside_coefficient)


@relation("clean overall coefficient", "clean_coefficient", source="common practice")
def clean(inside_coefficient, outside_coefficient):
    """1/U = 1/hi + 1/ho."""
    return 1.0 / (1.0 / inside_coefficient + 1.0 / outside_coefficient)


@relation("overall coefficient with fouling", "overall_coefficient", source="common practice")
def fouled(clean_coefficient, fouling=0.0, inside_fouling=0.0, outside_fouling=0.0):
    """1/U = 1/Uc + ΣRf."""
    return 1.0 / (1.0 / clean_coefficient + fouling + inside_fouling + outside_fouling)
