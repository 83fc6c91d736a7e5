"""Drag of spheres, cylinders and plates, and local friction on plates.

Of a sphere on its cross-section, of a cylinder on diameter × length, of a plate on the wetted face (one side);
force = c·area·ρU²/2. Re on the diameter or the plate's length, the distance from the edge for local friction.

Scatters are those that authors or handbooks give, mostly from memory.
"""

import math
from typing import Any

from cellfuncs.methods.algebra import log, log10, smaller, sqrt
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.plate import TRANSITION


def _drag(name: str, ranges: tuple[Range, ...], scatter: float, source: str, flow: str, **more: Any) -> Any:
    given = {"gives": "drag coefficient", "property_temperature": "film"} | more
    lengths = {"plate": "length", "sphere": "diameter", "cylinder": "diameter"}
    return method(
        name, ranges=ranges, scatter=scatter, source=source, flows=(flow,), length=lengths[flow], **given
    )  # fmt: skip


# -- sphere ----------------------------------------------------------------------------------------------


@_drag("Stokes", (Range("Re", high=0.1),), 0.02, "stokes-1851", "sphere", property_temperature="stream")
def stokes(reynolds: float) -> float:
    """Drag of a sphere in creeping flow, 24/Re; 2 % low at Re 0.1."""
    return 24.0 / reynolds


@_drag(
    "Schiller-Naumann",
    (Range("Re", high=800.0),),
    0.05,
    "schiller-naumann-1935",
    "sphere",
    property_temperature="stream",
)
def schiller_naumann(reynolds: float) -> float:
    """Drag of a sphere, 24/Re (1 + 0.15 Re^0.687)."""
    return 24.0 / reynolds * (1.0 + 0.15 * reynolds**0.687)


@_drag("Clift-Gauvin", (Range("Re", high=3e5),), 0.06, "clift-gauvin-1971", "sphere", property_temperature="stream")
def clift_gauvin(reynolds: float) -> float:
    """Drag of a sphere below the critical Re, that of Schiller and Naumann + 0.42/(1 + 42500 Re^−1.16)."""
    return schiller_naumann(reynolds) + 0.42 / (1.0 + 42_500.0 * reynolds**-1.16)


@_drag("Brown-Lawler", (Range("Re", high=2e5),), 0.05, "brown-lawler-2003", "sphere", property_temperature="stream")
def brown_lawler(reynolds: float) -> float:
    """Drag of a sphere, 24/Re (1 + 0.15 Re^0.681) + 0.407/(1 + 8710/Re); scatter from memory."""
    return 24.0 / reynolds * (1.0 + 0.15 * reynolds**0.681) + 0.407 / (1.0 + 8710.0 / reynolds)


# -- cylinder --------------------------------------------------------------------------------------------


@_drag("Lamb cylinder", (Range("Re", high=0.3),), 0.1, "lamb-1911", "cylinder", property_temperature="stream")
def lamb(reynolds: float) -> float:
    """Drag of a long cylinder in creeping flow, 8π/(Re (2.002 − ln Re)); scatter from memory."""
    return 8.0 * math.pi / (reynolds * (2.0022 - log(reynolds)))


@_drag("Sucker-Brauer", (Range("Re", 1e-4, 2e5),), 0.1, "sucker-brauer-1975", "cylinder", property_temperature="stream")
def sucker_brauer(reynolds: float) -> float:
    """Drag of a smooth long cylinder below the critical Re; scatter from memory.

    1.18 + 6.8/Re^0.89 + 1.96/Re^1/2 − 0.0004 Re/(1 + 3.64·10⁻⁷ Re²).
    """
    return (
        1.18
        + 6.8 / reynolds**0.89
        + 1.96 / sqrt(reynolds)
        - 4e-4 * reynolds / (1.0 + 3.64e-7 * reynolds**2)
    )  # fmt: skip


# -- plate -----------------------------------------------------------------------------------------------

_LOCAL = {"gives": "local friction coefficient"}


@_drag("Blasius plate", (Range("Re", 1e3, 3e6),), 0.03, "blasius-1908", "plate", where={"regime": ("laminar",)})
def blasius(reynolds: float) -> float:
    """Mean friction coefficient of a laminar plate, 1.328/Re^1/2; 7 % low at Re 1e3, where the edge adds 2.7/Re^7/8."""
    return 1.328 / sqrt(reynolds)


@_drag(
    "Blasius plate, local",
    (Range("Re", 1e3, 3e6),),
    0.03,
    "blasius-1908",
    "plate",
    where={"regime": ("laminar",)},
    **_LOCAL,
)
def blasius_local(reynolds: float) -> float:
    """Local friction coefficient of a laminar plate, 0.664/Re^1/2."""
    return 0.5 * blasius(reynolds)


@_drag("Prandtl plate", (Range("Re", 5e5, 1e7),), 0.05, "prandtl-1927", "plate", where={"regime": ("turbulent",)})
def prandtl_power(reynolds: float) -> float:
    """Mean friction coefficient turbulent from the leading edge, 0.074/Re^1/5."""
    return 0.074 / reynolds**0.2


@_drag(
    "Prandtl plate, local",
    (Range("Re", 5e5, 1e7),),
    0.05,
    "prandtl-1927",
    "plate",
    where={"regime": ("turbulent", "mixed")},
    **_LOCAL,
)
def prandtl_power_local(reynolds: float) -> float:
    """Local friction coefficient of a turbulent layer, 0.0592/Re^1/5."""
    return 0.0592 / reynolds**0.2


@_drag(
    "Prandtl-Schlichting plate",
    (Range("Re", 5e5, 1e9),),
    0.03,
    "prandtl-schlichting-1934",
    "plate",
    where={"regime": ("turbulent",)},
)
def prandtl_schlichting(reynolds: float) -> float:
    """Mean friction coefficient turbulent from the leading edge, 0.455/(log10 Re)^2.58."""
    return 0.455 / log10(reynolds) ** 2.58


@_drag(
    "Prandtl-Schlichting plate with transition", (Range("Re", 5e5, 1e9), Range("Re transition", 1e5, 3e6)), 0.05,
    "prandtl-schlichting-1934", "plate", where={"regime": ("mixed",)},
)  # fmt: skip
def with_transition(reynolds: float, transition: float = TRANSITION) -> float:
    """Mean friction coefficient, laminar to the transition: 0.455/(log10 Re)^2.58 − A/Re, A = 1700 at 5e5."""
    reached = smaller(transition, reynolds)
    given_up = reached * (prandtl_schlichting(reached) - blasius(reached))
    return prandtl_schlichting(reynolds) - given_up / reynolds


@_drag(
    "Schultz-Grunow plate friction, local",
    (Range("Re", 5e5, 1e9),),
    0.03,
    "schultz-grunow-1940",
    "plate",
    where={"regime": ("turbulent", "mixed")},
    **_LOCAL,
)
def schultz_grunow(reynolds: float) -> float:
    """Local friction coefficient of a turbulent layer, 0.370/(log10 Re)^2.584."""
    return 0.370 / log10(reynolds) ** 2.584


@_drag("ITTC 1957", (Range("Re", 1e6, 1e10),), 0.05, "ITTC-1957", "plate", where={"regime": ("turbulent",)})
def ittc(reynolds: float) -> float:
    """Line of the towing tanks between model and ship, 0.075/(log10 Re − 2)², a little above a plate's friction."""
    return 0.075 / (log10(reynolds) - 2.0) ** 2


@_drag(
    "Schlichting rough plate", (Range("L/ks", 1e2, 1e6),), 0.05, "schlichting-1937", "plate",
    where={"regime": ("turbulent",)},
)  # fmt: skip
def rough(length_over_roughness: float) -> float:
    """Mean friction coefficient of a fully rough plate, (1.89 + 1.62 log10 L/ks)^−2.5, ks the sand roughness."""
    return (1.89 + 1.62 * log10(length_over_roughness)) ** -2.5
