"""Areas, perimeters, diameters. Lengths in m, areas in m2."""

from math import pi

from cellfuncs.checks.relation import relation

_AS_RADIUS = ("radius-for-diameter", "the diameter stands where the radius is meant", lambda diameter: pi * diameter**2)
_AS_DIAMETER = (
    "radius-for-diameter",
    "the radius stands where the diameter is meant",
    lambda diameter: pi / 16.0 * diameter**2,
)
_SQUARE = ("area-factor", "π/4 is missing", lambda diameter: diameter**2)
_HALF = ("area-factor", "π/2 stands for π/4", lambda diameter: pi / 2.0 * diameter**2)
_NO_PI = ("area-factor", "π is missing", lambda diameter: diameter**2 / 4.0)


def _in_a_circle(case) -> bool:
    return case.facts.get("section", "tube") in ("tube", "other") and not case.stated.get("core_diameter")


def _sphere(case) -> bool:
    return case.flow == "sphere" or "sphere" in (case.facts.get("shape"), case.facts.get("surface"))


@relation("section of a round tube", "flow_area", wrong=(_AS_RADIUS, _AS_DIAMETER, _SQUARE, _HALF, _NO_PI),
          when=_in_a_circle)  # fmt: skip
def round_section(diameter):
    """A = π/4·D² of one tube."""
    return pi / 4.0 * diameter**2


@relation("section of all tubes", "flow_area", derives=False, when=_in_a_circle)
def round_sections(diameter, tubes):
    """A = N·π/4·D²."""
    return tubes * pi / 4.0 * diameter**2


@relation("section of the tubes of one pass", "flow_area", derives=False, when=_in_a_circle)
def sections_of_a_pass(diameter, tubes, passes):
    """A = N/passes·π/4·D²."""
    return tubes / passes * pi / 4.0 * diameter**2


@relation("section from the radius", "flow_area", when=_in_a_circle)
def section_of_radius(inside_radius):
    """A = π·r²."""
    return pi * inside_radius**2


@relation("section of an annulus", "flow_area", derives=False)
def annular_section(diameter, core_diameter):
    """A = π/4·(D² − d²)."""
    return pi / 4.0 * (diameter**2 - core_diameter**2)


@relation("section of a rectangle", "flow_area", derives=False)
def rectangular_section(width, height):
    """A = width·height."""
    return width * height


@relation("section of a slot", "flow_area", derives=False)
def slot_section(width, gap):
    """A = width·gap."""
    return width * gap


@relation("inside diameter from outside", "diameter")
def bore_from_outside(outside_diameter, wall_thickness):
    """D = Do − 2s."""
    return outside_diameter - 2.0 * wall_thickness


@relation("inside radius", "inside_radius")
def inner_radius(diameter):
    """r = D/2."""
    return diameter / 2.0


@relation("outside radius", "outside_radius")
def outer_radius(outside_diameter):
    """r = Do/2."""
    return outside_diameter / 2.0


@relation("outside radius from inside", "outside_radius")
def radius_over_wall(inside_radius, wall_thickness):
    """ro = ri + s."""
    return inside_radius + wall_thickness


@relation("diameter over the insulation", "insulation_diameter")
def over_insulation(outside_diameter, insulation_thickness):
    """D = Do + 2s."""
    return outside_diameter + 2.0 * insulation_thickness


@relation("radius over the insulation", "insulation_radius")
def radius_over_insulation(outside_radius, insulation_thickness):
    """r = ro + s."""
    return outside_radius + insulation_thickness


@relation("perimeter of a circle", "wetted_perimeter", when=_in_a_circle)
def round_perimeter(diameter):
    """P = π·D."""
    return pi * diameter


@relation("perimeter of an annulus", "wetted_perimeter", derives=False)
def annular_perimeter(diameter, core_diameter):
    """P = π·(D + d)."""
    return pi * (diameter + core_diameter)


@relation("perimeter of a rectangle", "wetted_perimeter", derives=False)
def rectangular_perimeter(width, height):
    """P = 2·(width + height)."""
    return 2.0 * (width + height)


@relation("hydraulic diameter", "hydraulic_diameter",
          wrong=(("area-factor", "hydraulic radius A/P for the diameter 4A/P", lambda flow_area, wetted_perimeter:
                  flow_area / wetted_perimeter),))  # fmt: skip
def hydraulic(flow_area, wetted_perimeter):
    """Dh = 4A/P."""
    return 4.0 * flow_area / wetted_perimeter


@relation("hydraulic diameter of a rectangle", "hydraulic_diameter", wrong=(
    ("area-factor", "ab/(a+b) for 2ab/(a+b)", lambda width, height: width * height / (width + height)),
))  # fmt: skip
def hydraulic_of_rectangle(width, height):
    """Dh = 2ab/(a + b)."""
    return 2.0 * width * height / (width + height)


@relation("circular equivalent of a rectangle", "hydraulic_diameter", derives=False, source="Huebscher 1948")
def circular_equivalent(width, height):
    """De = 1.30·(ab)^0.625/(a + b)^0.25, the round duct of the same loss at the same flow."""
    return 1.30 * (width * height) ** 0.625 / (width + height) ** 0.25


@relation("hydraulic diameter of an annulus", "hydraulic_diameter", derives=False)
def hydraulic_of_annulus(diameter, core_diameter):
    """Dh = D − d."""
    return diameter - core_diameter


@relation("hydraulic diameter of a slot", "hydraulic_diameter", derives=False)
def hydraulic_of_slot(gap):
    """Dh = 2·gap."""
    return 2.0 * gap


@relation("relative roughness", "relative_roughness")
def relative_roughness(roughness, bore):
    """ε/D."""
    return roughness / bore


@relation("outside surface of tubes", "area", derives=False)
def outside_surface(outside_diameter, length, tubes=1.0):
    """A = N·π·Do·L."""
    return tubes * pi * outside_diameter * length


@relation("inside surface of tubes", "area", derives=False)
def inside_surface(diameter, length, tubes=1.0):
    """A = N·π·D·L."""
    return tubes * pi * diameter * length


@relation("surface over the insulation", "area", derives=False)
def insulated_surface(insulation_diameter, length):
    """A = π·D·L."""
    return pi * insulation_diameter * length


@relation("surface of a duct", "area", derives=False)
def duct_surface(wetted_perimeter, length):
    """A = P·L."""
    return wetted_perimeter * length


@relation("surface of a plate", "area", derives=False)
def plate_surface(length, width):
    """A = L·W."""
    return length * width


@relation("characteristic length", "characteristic_length")
def volume_over_surface(volume, any_area):
    """Lc = V/A."""
    return volume / any_area


@relation("characteristic length of a sphere", "characteristic_length", derives=False, when=_sphere)
def third_of_radius(diameter):
    """Lc = D/6."""
    return diameter / 6.0


@relation("volume of a sphere", "volume", derives=False, when=_sphere)
def sphere_volume(diameter):
    """V = π/6·D³."""
    return pi / 6.0 * diameter**3


@relation("surface of a sphere", "surface_area", derives=False, when=_sphere)
def sphere_surface(diameter):
    """A = π·D²."""
    return pi * diameter**2


@relation("volume of a cylinder", "volume", derives=False)
def cylinder_volume(diameter, length):
    """V = π/4·D²·L."""
    return pi / 4.0 * diameter**2 * length


@relation("volume of a slab", "volume", derives=False)
def slab_volume(length, width, wall_thickness):
    """V = L·W·s."""
    return length * width * wall_thickness


@relation("perimeter of a straight fin", "fin_perimeter")
def fin_perimeter(width, fin_thickness):
    """P = 2·(w + t)."""
    return 2.0 * (width + fin_thickness)


@relation("cross-section of a straight fin", "fin_section")
def fin_section(width, fin_thickness):
    """A = w·t."""
    return width * fin_thickness


@relation("perimeter of a pin", "fin_perimeter", derives=False)
def pin_perimeter(diameter):
    """P = π·D."""
    return pi * diameter


@relation("cross-section of a pin", "fin_section", wrong=(_AS_RADIUS, _AS_DIAMETER, _SQUARE, _HALF, _NO_PI))
def pin_section(diameter):
    """A = π/4·D²."""
    return pi / 4.0 * diameter**2
