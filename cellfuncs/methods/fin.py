"""Fins: how much of the heat a fin gives off that it would if it were as warm as its root.

One coefficient all over, conduction along the fin only, no contact resistance. A tip that gives off heat is counted
by lengthening the fin by half its thickness (a pin: a quarter of its diameter), within 8 % for √(ht/k) up to 0.5.
"""

from typing import Any

from cellfuncs.errors import NumberRefused
from cellfuncs.methods.algebra import exp, holds, larger, plain, smaller, sqrt, tanh
from cellfuncs.methods.base import method

_LEAST = 1e-9  # a fin with mL below it is as warm as its root


def _tanh_over(x: Any) -> Any:
    return tanh(x) / x


def fin_number(coefficient: Any, conductivity: Any, thickness: Any, length: Any) -> Any:
    """m·L = L·√(2h/(kt)) of a straight fin [-]; h [W/(m2 K)], k [W/(m K)], t and L [m]."""
    return length * sqrt(2.0 * coefficient / (conductivity * thickness))


@method(
    "straight fin",
    gives="efficiency",
    scatter=0.01,
    property_temperature="solid",
    source="harper-brown-1922",
)
def straight(coefficient: Any, conductivity: Any, thickness: Any, length: Any) -> Any:
    """Efficiency of a straight fin of even thickness, tanh(mL)/(mL) with L lengthened by half the thickness."""
    return _tanh_over(fin_number(coefficient, conductivity, thickness, length + 0.5 * thickness))


@method("pin fin", gives="efficiency", scatter=0.01, property_temperature="solid", source="harper-brown-1922")
def pin(coefficient: Any, conductivity: Any, diameter: Any, length: Any) -> Any:
    """Efficiency of a round pin, tanh(mL)/(mL), m = √(4h/(kD)), with L lengthened by a quarter of the diameter."""
    return _tanh_over(sqrt(4.0 * coefficient / (conductivity * diameter)) * (length + 0.25 * diameter))


@method("triangular fin", gives="efficiency", scatter=0.01, property_temperature="solid", source="gardner-1945")
def triangular(coefficient: Any, conductivity: Any, thickness: Any, length: Any) -> Any:
    """Efficiency of a straight fin that tapers to an edge, I1(2mL)/(mL·I0(2mL)); thickness at the root."""
    from scipy.special import ive

    number = larger(fin_number(coefficient, conductivity, thickness, length), _LEAST)
    return plain(ive(1, 2.0 * number) / (number * ive(0, 2.0 * number)))


@method("parabolic fin", gives="efficiency", scatter=0.01, property_temperature="solid", source="gardner-1945")
def parabolic(coefficient: Any, conductivity: Any, thickness: Any, length: Any) -> Any:
    """Efficiency of a straight fin with concave parabolic sides, 2/(1 + √(1 + 4m²L²)); thickness at the root."""
    number = fin_number(coefficient, conductivity, thickness, length)
    return 2.0 / (1.0 + sqrt(1.0 + 4.0 * number * number))


@method("conical pin fin", gives="efficiency", scatter=0.01, property_temperature="solid", source="gardner-1945")
def cone(coefficient: Any, conductivity: Any, diameter: Any, length: Any) -> Any:
    """Efficiency of a pin that tapers to a point, 2·I2(2mL)/(mL·I1(2mL)), m = √(4h/(kD)); diameter at the root."""
    from scipy.special import ive

    number = larger(length * sqrt(4.0 * coefficient / (conductivity * diameter)), _LEAST)
    return plain(2.0 * ive(2, 2.0 * number) / (number * ive(1, 2.0 * number)))


@method(
    "annular fin",
    gives="efficiency",
    scatter=0.01,
    property_temperature="solid",
    source="harper-brown-1922;gardner-1945",
)
def annular(coefficient: Any, conductivity: Any, thickness: Any, diameter: Any, diameter_ratio: Any) -> Any:
    """Efficiency of a ring of even thickness on a tube, exact with Bessel functions, lengthened by half its thickness.

    ``diameter`` of the tube [m], ``diameter_ratio`` outer diameter of the fin over it.
    """
    from scipy.special import ive, kve

    m = sqrt(2.0 * coefficient / (conductivity * thickness))
    inner, outer = 0.5 * diameter, 0.5 * (diameter * diameter_ratio + thickness)
    a = larger(m * inner, _LEAST)
    b = a * (outer / inner)
    if not holds(b > a):
        raise NumberRefused("the fin must reach beyond the tube: outer over inner diameter above 1")
    # scaled functions: I carries e^x, K e^-x; what is left of them is e^(2a − 2b), never more than 1
    small = exp(2.0 * (a - b))
    above = kve(1, a) * ive(1, b) - ive(1, a) * kve(1, b) * small
    below = ive(0, a) * kve(1, b) * small + kve(0, a) * ive(1, b)
    # a fin hardly beyond the tube loses digits in b − a, and is as warm as the tube
    return smaller(plain(2.0 * a / ((b - a) * (b + a)) * above / below), 1.0)


@method("finned surface", gives="efficiency", scatter=0.0, property_temperature="solid", source="gardner-1945")
def overall(fin_efficiency: Any, fin_share: Any) -> Any:
    """Efficiency of a whole finned surface, 1 − (A_fins/A)(1 − η): fins and the bare surface between them."""
    if not (holds(fin_share <= 1.0) and holds(fin_efficiency <= 1.0)):
        raise NumberRefused("the efficiency of the fins and their share of the surface are at most 1")
    return 1.0 - fin_share * (1.0 - fin_efficiency)
