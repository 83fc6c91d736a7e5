"""Answers of mixed convection: a plate, cylinder or sphere in a stream that buoyancy helps or hinders."""

from dataclasses import replace

from cellfuncs.answers.layer import LayerAnswers, solve_layer
from cellfuncs.cases.case import Case
from cellfuncs.errors import CaseRefused
from cellfuncs.groups import STANDARD_GRAVITY, grashof, rayleigh
from cellfuncs.methods import free, mixed

_FORCED = {"vertical plate": "plate", "horizontal cylinder": "cylinder", "sphere": "sphere"}


def solve_mixed(case: Case) -> LayerAnswers:
    """The forced layer with the coefficient of the blend."""
    surface = case.need("surface")
    if surface not in _FORCED:
        raise CaseRefused(f'"surface" of mixed convection: write {", ".join(_FORCED)}')
    stated = {key: entry for key, entry in case.stated.items() if key not in ("surface", "flow_direction")}
    direction = case.get("flow_direction", "assisting")
    gravity = case.get("gravity", STANDARD_GRAVITY)

    def blended(forced: LayerAnswers, allow: bool) -> LayerAnswers:
        if forced.method == "stated" or not forced.difference:
            return forced
        p, size = forced.properties, forced.length
        nu = p.viscosity / p.density
        ra = rayleigh(size, abs(forced.difference), nu, p.diffusivity, max(p.expansion, 1e-12), gravity)
        still, *_ = free.nusselt(surface, ra, p.prandtl, allow)
        nusselt = mixed.blend(forced.nusselt, still, direction)
        ratio = grashof(size, abs(forced.difference), nu, p.expansion, gravity) / forced.reynolds**2
        outside = "; ".join(filter(None, (forced.outside, mixed.outside(ratio, allow))))
        h = nusselt * p.conductivity / size
        return replace(forced, nusselt=nusselt, coefficient=h, method="Churchill blend", outside=outside)

    return solve_layer(case.stating(stated, _FORCED[surface]), blended)
