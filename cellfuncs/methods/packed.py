"""What a case of a tube bank, a bed or a falling film takes for its coefficient and its friction."""

from cellfuncs.methods.bank import jakob_drop as bank_drop
from cellfuncs.methods.bank import zukauskas as bank
from cellfuncs.methods.base import METHODS
from cellfuncs.methods.bed import ergun as bed_gradient
from cellfuncs.methods.bed import wakao as bed
from cellfuncs.methods.film import film_reynolds, thickness
from cellfuncs.methods.film import laminar as film

__all__ = ["bank", "bank_drop", "bed", "bed_gradient", "film", "film_outside", "film_thickness"]

film_thickness = thickness


def film_outside(flow: float, viscosity: float, allow: bool) -> str:
    return METHODS["laminar film"].check(allow, **{"film Re": film_reynolds(flow, viscosity)})
