"""Heat transfer and friction at a flat plate in a parallel stream. Properties at film temperature."""

from cellfuncs.methods.base import METHODS, Range, method

TRANSITION = 5e5


@method(
    "plate laminar",
    gives="mean Nu",
    ranges=(Range("Re", 100.0, 3e6), Range("Pr", low=0.6)),
    scatter=0.03,
    property_temperature="film",
    source="pohlhausen-1921",
)
def laminar(reynolds: float, prandtl: float) -> float:
    """Mean Nu at uniform wall temperature, 0.664 Re^1/2 Pr^1/3."""
    return 0.664 * reynolds**0.5 * prandtl ** (1.0 / 3.0)


@method(
    "plate laminar, flux",
    gives="mean Nu",
    ranges=(Range("Re", 100.0, 3e6), Range("Pr", low=0.6)),
    scatter=0.03,
    property_temperature="film",
    source="rohsenow-1998",
)
def laminar_flux(reynolds: float, prandtl: float) -> float:
    """Mean Nu at uniform flux (on the mean difference), 0.680 Re^1/2 Pr^1/3."""
    return 0.680 * reynolds**0.5 * prandtl ** (1.0 / 3.0)


@method(
    "plate laminar, any Pr",
    gives="mean Nu",
    ranges=(Range("Re", 100.0, 3e6), Range("Pe", low=100.0)),
    scatter=0.03,
    property_temperature="film",
    source="churchill-ozoe-1973",
)
def laminar_any_prandtl(reynolds: float, prandtl: float, flux: bool = False) -> float:
    """Mean Nu, twice the local 0.3387 Re^1/2 Pr^1/3/(1+(0.0468/Pr)^2/3)^1/4 (flux: 0.4637 and 0.0207).

    For a prescribed flux the mean is on the mean difference, 3/2 of the local value at the end.
    """
    lead, at, mean = (0.4637, 0.0207, 1.5) if flux else (0.3387, 0.0468, 2.0)
    local = lead * reynolds**0.5 * prandtl ** (1.0 / 3.0) / (1.0 + (at / prandtl) ** (2.0 / 3.0)) ** 0.25
    return mean * local


@method(
    "plate mixed",
    gives="mean Nu",
    ranges=(Range("Re", high=1e8), Range("Pr", 0.6, 60.0)),
    scatter=0.15,
    property_temperature="film",
    source="rohsenow-1998",
)
def mixed(reynolds: float, prandtl: float, transition: float = TRANSITION) -> float:
    """Mean Nu of a layer laminar to the transition and turbulent behind it, (0.037 Re^4/5 − A) Pr^1/3."""
    a = 0.037 * transition**0.8 - 0.664 * transition**0.5
    return (0.037 * reynolds**0.8 - a) * prandtl ** (1.0 / 3.0)


@method(
    "plate turbulent, local",
    gives="local Nu",
    ranges=(Range("Re", 5e5, 1e8), Range("Pr", 0.6, 60.0)),
    scatter=0.15,
    property_temperature="film",
    source="rohsenow-1998",
)
def turbulent_local(reynolds: float, prandtl: float) -> float:
    """Local Nu of a turbulent layer at uniform wall temperature, 0.0296 Re^4/5 Pr^1/3."""
    return 0.0296 * reynolds**0.8 * prandtl ** (1.0 / 3.0)


def nusselt(
    reynolds: float, prandtl: float, wall: str, transition: float = TRANSITION, allow: bool = False
) -> tuple[float, str, str]:
    """Mean Nu over the plate, the method's name, and what lies outside its range."""
    if reynolds > transition:
        outside = METHODS["plate mixed"].check(allow, Re=reynolds, Pr=prandtl)
        return mixed(reynolds, prandtl, transition), "plate mixed", outside
    if prandtl < 0.6:
        name = "plate laminar, any Pr"
        outside = METHODS[name].check(allow, Re=reynolds, Pe=reynolds * prandtl)
        return laminar_any_prandtl(reynolds, prandtl, wall == "flux"), name, outside
    name = "plate laminar, flux" if wall == "flux" else "plate laminar"
    outside = METHODS[name].check(allow, Re=reynolds, Pr=prandtl)
    value = laminar_flux(reynolds, prandtl) if wall == "flux" else laminar(reynolds, prandtl)
    return value, name, outside
