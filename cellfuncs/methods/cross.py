"""What a case of a cylinder, a sphere or a jet takes for its coefficient."""

from cellfuncs.methods.base import METHODS
from cellfuncs.methods.cylinder import churchill_bernstein as cylinder
from cellfuncs.methods.jet import martin_round as jet
from cellfuncs.methods.sphere import whitaker as sphere


def nusselt(
    flow: str, reynolds: float, prandtl: float, allow: bool, *, viscosity_ratio: float = 1.0, height: float = 0.0,
    radius: float = 0.0,
) -> tuple[float, str, str]:  # fmt: skip
    """Mean Nu of the flow kind, the method's name, and what lies outside its range."""
    if flow == "cylinder":
        name, value = "Churchill-Bernstein", cylinder(reynolds, prandtl)
        return value, name, METHODS[name].check(allow, Re=reynolds, Pe=reynolds * prandtl)
    if flow == "sphere":
        name, value = "Whitaker", sphere(reynolds, prandtl, viscosity_ratio)
        ratio = max(viscosity_ratio, 1.0 / viscosity_ratio)
        return value, name, METHODS[name].check(allow, **{"Re": reynolds, "Pr": prandtl, "viscosity ratio": ratio})
    name = "Martin jet"
    outside = METHODS[name].check(allow, **{"Re": reynolds, "H/D": height, "r/D": radius})
    return jet(reynolds, prandtl, height, radius), name, outside
