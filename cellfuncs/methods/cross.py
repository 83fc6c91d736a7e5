"""Heat transfer of a cylinder and a sphere in cross-flow, and of a round jet on a wall."""

from cellfuncs.methods.base import METHODS, Range, method


@method(
    "Churchill-Bernstein",
    gives="mean Nu",
    ranges=(Range("Pe", low=0.2), Range("Re", high=1e7)),
    scatter=0.2,
    property_temperature="film",
    source="churchill-bernstein-1977",
)
def cylinder(reynolds: float, prandtl: float) -> float:
    """Mean Nu of a cylinder across a stream, on its diameter."""
    lead = 0.62 * reynolds**0.5 * prandtl ** (1.0 / 3.0) / (1.0 + (0.4 / prandtl) ** (2.0 / 3.0)) ** 0.25
    return 0.3 + lead * (1.0 + (reynolds / 282_000.0) ** 0.625) ** 0.8


@method(
    "Whitaker",
    gives="mean Nu",
    ranges=(Range("Re", 3.5, 7.6e4), Range("Pr", 0.7, 380.0), Range("viscosity ratio", 1.0, 3.2)),
    scatter=0.3,
    property_temperature="stream",
    source="whitaker-1972",
)
def sphere(reynolds: float, prandtl: float, viscosity_ratio: float = 1.0) -> float:
    """Mean Nu of a sphere in a stream, on its diameter; the ratio is stream over wall."""
    return 2.0 + (0.4 * reynolds**0.5 + 0.06 * reynolds ** (2.0 / 3.0)) * prandtl**0.4 * viscosity_ratio**0.25


@method(
    "Martin jet",
    gives="mean Nu",
    ranges=(Range("Re", 2000.0, 4e5), Range("H/D", 2.0, 12.0), Range("r/D", 2.5, 7.5)),
    scatter=0.15,
    property_temperature="film",
    source="martin-1977",
)
def jet(reynolds: float, prandtl: float, height: float, radius: float) -> float:
    """Mean Nu (on the nozzle's diameter) inside the radius of a single round jet; H/D and r/D."""
    k = 1.0 / radius
    shape = k * (1.0 - 1.1 * k) / (1.0 + 0.1 * (height - 6.0) * k)
    flow = 2.0 * reynolds**0.5 * (1.0 + 0.005 * reynolds**0.55) ** 0.5
    return shape * flow * prandtl**0.42


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
