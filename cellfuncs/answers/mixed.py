"""Answers of mixed convection: a plate, cylinder or sphere in a stream that buoyancy helps or hinders."""

from dataclasses import replace

from cellfuncs.answers import choice
from cellfuncs.answers.free import free_known, free_lengths
from cellfuncs.answers.inputs import Inputs
from cellfuncs.answers.layer import LayerAnswers, solve_layer
from cellfuncs.cases.case import Case
from cellfuncs.errors import CaseRefused

_FORCED = {"vertical plate": "plate", "horizontal cylinder": "cylinder", "sphere": "sphere"}


def solve_mixed(case: Case) -> LayerAnswers:
    """The forced layer with the coefficient of the blend with free convection."""
    surface = case.need("surface")
    if surface not in _FORCED:
        raise CaseRefused(f'"surface" of mixed convection: write {", ".join(_FORCED)}')
    blend_named = choice.row(case, "method", choice.NUSSELT)
    if blend_named is not None and "mixed" not in choice.find(blend_named).flows:
        blend_named = None
    dropped = {"surface", "flow_direction", *(("method",) if blend_named else ())}
    stated = {key: entry for key, entry in case.stated.items() if key not in dropped}
    direction = case.get("flow_direction", "assisting")

    def blended(forced: LayerAnswers) -> LayerAnswers:
        if forced.method == "stated" or not forced.difference:
            return forced
        state, size = forced.state, forced.group_length
        known = {**free_known(forced.case, surface, size), "wall": "temperature"}
        still = _with(state, known, free_lengths(forced.case, surface, size))
        free = choice.first(still, choice.in_order("free", choice.NUSSELT), "free convection", True)
        shape = {"surface": surface, "direction": direction}
        numbers = {"forced": forced.nusselt, "free": choice.value(free)}
        both = _with(state, shape | numbers, {"": size})
        if blend_named is None:
            blend = choice.first(both, choice.in_order("mixed", choice.NUSSELT), "coefficient", case.allow)
        else:
            blend = choice.named(both, blend_named, choice.NUSSELT, "coefficient", case.allow, "mixed")
        nusselt = choice.value(blend)
        h = nusselt * forced.properties.conductivity / size
        return replace(forced, nusselt=nusselt, coefficient=h, method=blend.method.name, blended=both)

    return solve_layer(case.stating(stated, _FORCED[surface]), blended)


def _with(state: Inputs, known: dict, lengths: dict) -> Inputs:
    """The state with other things known."""
    return Inputs(
        state.case, known, lengths, state.bulk, state.difference, state.memo, gravity=state.gravity, flux=state.flux
    )
