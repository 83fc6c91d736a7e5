"""High speed: recovery factors of plates, and the temperature at which properties are taken then.

ΔT_rec = rU²/(2cp). h is on the difference wall minus recovery temperature; with the reference temperature (or, where
cp changes much, the reference enthalpy) the formulas of slow flow hold.

Scatters are those that authors or handbooks give, mostly from memory.
"""

from typing import Any

from cellfuncs.methods.algebra import sqrt, where
from cellfuncs.methods.base import Range, method

_FLOWS = ("plate",)


@method(
    "recovery, laminar plate",
    gives="recovery factor",
    ranges=(Range("Pr", low=0.01),),
    scatter=0.08,
    property_temperature="reference",
    source="pohlhausen-1921;narasimha-vasantha-1966",
    flows=_FLOWS,
    where={"regime": ("laminar",)},
)
def laminar_recovery(prandtl: float) -> float:
    """Recovery factor √Pr to Pr 5, 1.922 Pr^1/3 − 1.341 from 7, linear between."""
    root, third = sqrt(prandtl), 1.922 * prandtl ** (1.0 / 3.0) - 1.341
    at_5, at_7 = 2.23606797749979, 2.335653733288532
    middle = at_5 + 0.5 * (prandtl - 5.0) * (at_7 - at_5)
    return where(prandtl <= 5.0, root, where(prandtl >= 7.0, third, middle))


@method(
    "recovery, turbulent plate",
    gives="recovery factor",
    ranges=(Range("Pr", 0.5, 10.0),),
    scatter=0.02,
    property_temperature="reference",
    source="eckert-1955",
    flows=_FLOWS,
    where={"regime": ("turbulent", "mixed")},
)
def turbulent_recovery(prandtl: float) -> float:
    """Recovery factor Pr^1/3; meant for gases, rough from Pr 1 to 10."""
    return prandtl ** (1.0 / 3.0)


def _eckert(stream: Any, wall: Any, recovery: Any) -> Any:
    return 0.5 * (wall + stream) + 0.22 * (recovery - stream)


@method(
    "Eckert reference temperature",
    gives="reference temperature",
    scatter=0.05,
    property_temperature="reference",
    source="eckert-1955",
    flows=_FLOWS,
    where={"phase": ("gas",)},
)
def eckert_temperature(stream_temperature: float, wall_temperature: float, recovery_temperature: float) -> float:
    """Temperature [K] of the properties at high speed, (Tw + T)/2 + 0.22(Trec − T)."""
    return _eckert(stream_temperature, wall_temperature, recovery_temperature)


@method(
    "Eckert reference enthalpy",
    gives="reference enthalpy",
    scatter=0.05,
    property_temperature="reference",
    source="eckert-1955",
    flows=_FLOWS,
    where={"phase": ("gas",)},
)
def eckert_enthalpy(stream_enthalpy: float, wall_enthalpy: float, recovery_enthalpy: float) -> float:
    """Enthalpy [J/kg] of the properties where cp changes much, (iw + i)/2 + 0.22(irec − i)."""
    return _eckert(stream_enthalpy, wall_enthalpy, recovery_enthalpy)


@method(
    "Meador and Smart reference temperature, laminar",
    gives="reference temperature",
    scatter=0.05,
    property_temperature="reference",
    source="meador-smart-2005",
    flows=_FLOWS,
    where={"phase": ("gas",), "regime": ("laminar",)},
)
def meador_smart_laminar(stream_temperature: float, wall_temperature: float, recovery_temperature: float) -> float:
    """Temperature [K] of the properties, 0.45 T + 0.55 Tw + 0.16(Trec − T); coefficients and scatter from memory."""
    rise = recovery_temperature - stream_temperature
    return 0.45 * stream_temperature + 0.55 * wall_temperature + 0.16 * rise


@method(
    "Meador and Smart reference temperature, turbulent",
    gives="reference temperature",
    scatter=0.05,
    property_temperature="reference",
    source="meador-smart-2005",
    flows=_FLOWS,
    where={"phase": ("gas",), "regime": ("turbulent", "mixed")},
)
def meador_smart_turbulent(stream_temperature: float, wall_temperature: float, recovery_temperature: float) -> float:
    """Temperature [K] of the properties, 0.5(T + Tw) + 0.16(Trec − T); coefficients and scatter from memory."""
    rise = recovery_temperature - stream_temperature
    return 0.5 * (stream_temperature + wall_temperature) + 0.16 * rise
