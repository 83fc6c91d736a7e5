"""The wall of a duct as a body: its cross-section and its capacity beside the stream's."""

from cellfuncs.answers.duct import DuctAnswers
from cellfuncs.cases.case import Case


def metal_over_flow(a: DuctAnswers, thickness: float) -> float:
    """Cross-section of the wall over that of the stream."""
    d = a.shape.diameter
    if a.shape.section == "plates":
        return 2.0 * thickness / (d / 2.0)
    return 4.0 * thickness * (d + thickness) / d**2


def conduction_number(case: Case, a: DuctAnswers) -> float | None:
    """M = k_s·A_s/(L·ρcpU·A_f) (Maranzana et al. 2004), or None where no wall is stated."""
    if not (case.has("wall_thickness") and case.has("wall_conductivity")):
        return None
    metal = metal_over_flow(a, case.get("wall_thickness"))
    return case.get("wall_conductivity") * metal / (a.length * a.capacity_flux)


def stores(case: Case) -> bool:
    """Whether the rows that make the wall's capacity are stated."""
    return all(map(case.has, ("wall_thickness", "wall_density", "wall_specific_heat")))


def own_time(case: Case, a: DuctAnswers) -> float:
    """ρcs/h of the wall [s]: it follows slower changes only."""
    s, volume = case.get("wall_thickness"), case.get("wall_density") * case.get("wall_specific_heat")
    return volume * s / a.coefficient


def capacity_ratio(case: Case, a: DuctAnswers) -> float:
    """Capacity of the wall over that of the fluid."""
    volume = case.get("wall_density") * case.get("wall_specific_heat")
    p = a.properties
    return volume * metal_over_flow(a, case.get("wall_thickness")) / (p.density * p.specific_heat)
