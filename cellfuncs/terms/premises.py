"""The premises under a whole calculation: fixed rows in fixed order, safety first, each with its state and why.

A premise is a function of the facts of a case (``one_phase.py``, ``flow_premises.py``, ``property_premises.py``); its
limits and their source stand in ``data/premises.csv``. What a case cannot tell is not judged, with the reason.
"""

import math
from collections.abc import Callable, Mapping

from cellfuncs.answers import Solution
from cellfuncs.errors import CellfuncsError
from cellfuncs.terms import flow_premises as flow
from cellfuncs.terms import one_phase
from cellfuncs.terms import property_premises as properties
from cellfuncs.terms.facts import Facts
from cellfuncs.terms.figure import Figure
from cellfuncs.terms.thresholds import NOT_JUDGED, Threshold, threshold

COLUMNS = ("premise", "figure", "limit", "state", "source", "reason")
NONE = "none"
PREMISES: Mapping[str, Callable[[Facts], Figure]] = {
    "boiling": one_phase.boiling,
    "freezing": one_phase.freezing,
    "flash point": one_phase.flash_point,
    "choking": one_phase.choking,
    "cavitation": one_phase.cavitation,
    "condensing": one_phase.condensing,
    "critical point": one_phase.critical_point,
    "continuum": flow.continuum,
    "thermal slip": flow.thermal_slip,
    "density change by velocity": flow.density_by_velocity,
    "density change by pressure": flow.density_by_pressure,
    "heat of compression and friction": flow.compression_heat,
    "steady stream": flow.steady_stream,
    "steady layer": flow.steady_layer,
    "flow regime": flow.regime,
    "developed velocity": flow.developed_velocity,
    "developed temperature": flow.developed_temperature,
    "constant viscosity": properties.viscosity,
    "constant viscosity, friction": properties.viscosity_friction,
    "constant conductivity": properties.conductivity,
    "constant density": properties.density,
    "constant specific heat": properties.specific_heat,
    "viscosity feedback": flow.viscosity_feedback,
    "Boussinesq": flow.boussinesq,
    "mixed convection": flow.mixed_convection,
    "thin layer": flow.thin_layer,
    "lumped body": flow.lumped_body,
}

Row = tuple[str, float | str, float | str, str, str, str]


def premise_rows(solution: Solution) -> list[Row]:
    """Rows of the table of premises (without the head)."""
    facts = Facts(solution)
    return [_row(name, judge_of, facts) for name, judge_of in PREMISES.items()]


def _row(name: str, judge_of: Callable[[Facts], Figure], facts: Facts) -> Row:
    limits = threshold(name)
    try:
        figure = judge_of(facts)
    except CellfuncsError as error:
        return name, NONE, _limit(limits, facts), NOT_JUDGED, limits.source, str(error)
    except (AttributeError, TypeError, ArithmeticError):
        # a flow kind without what the premise asks for: its answers have other fields, or none
        return name, NONE, _limit(limits, facts), NOT_JUDGED, limits.source, f"not known for a {facts.flow}"
    limits = threshold(figure.limits or name)
    scale = facts.case.tolerance if limits.of_tolerance else 1.0
    state = figure.state or limits.state(figure.value, scale)
    limit = _limit(limits, facts) if figure.limit is None else figure.limit
    return name, figure.value, limit, state, limits.source, figure.reason


def _limit(limits: Threshold, facts: Facts) -> float | str:
    """The limit as shown; none where it only follows with the figure."""
    if math.isnan(limits.strained) or not math.isnan(limits.exponent):
        return NONE
    return limits.strained * (facts.case.tolerance if limits.of_tolerance else 1.0)
