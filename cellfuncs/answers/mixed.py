"""Answers of mixed convection: a plate, cylinder or sphere in a stream that buoyancy helps or hinders."""

from dataclasses import replace

from cellfuncs.answers.layer import LayerAnswers, solve_layer
from cellfuncs.cases.case import Case
from cellfuncs.errors import CaseRefused
from cellfuncs.groups import STANDARD_GRAVITY, grashof, rayleigh
from cellfuncs.methods import free, mixed

_FORCED = {"vertical plate": "plate", "horizontal cylinder": "cylinder", "sphere": "sphere"}


def solve_mixed(case: Case) -> LayerAnswers:
    """The forced layer with the coefficient of the blend; the wall temperature is prescribed."""
    surface = case.need("surface")
    if surface not in _FORCED:
        raise CaseRefused(f'"surface" of mixed convection: write {", ".join(_FORCED)}')
    if case.has("heat_flux"):
        raise CaseRefused("mixed convection is blended at a prescribed wall temperature; state that, not a flux")
    stated = {key: entry for key, entry in case.stated.items() if key not in ("surface", "flow_direction")}
    forced = solve_layer(case.stating(stated, _FORCED[surface]))
    p, g = forced.properties, case.get("gravity", STANDARD_GRAVITY)
    nu = p.viscosity / p.density
    size = forced.length
    ra = rayleigh(size, abs(forced.difference), nu, p.diffusivity, max(p.expansion, 1e-12), g)
    still, *_ = free.nusselt(surface, ra, p.prandtl, case.allow)
    nusselt = mixed.blend(forced.nusselt, still, case.get("flow_direction", "assisting"))
    ratio = grashof(size, abs(forced.difference), nu, p.expansion, g) / forced.reynolds**2
    outside = "; ".join(filter(None, (forced.outside, mixed.outside(ratio, case.allow))))
    h = nusselt * p.conductivity / size
    return replace(forced, nusselt=nusselt, coefficient=h, method="Churchill blend", outside=outside)
