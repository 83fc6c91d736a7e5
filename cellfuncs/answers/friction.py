"""Darcy's friction factor of a straight tube from Re and roughness alone, numbers or columns, by the same rule."""

from functools import lru_cache
from typing import Any

from cellfuncs.answers import choice
from cellfuncs.errors import NumberRefused, OutOfRange
from cellfuncs.methods import METHODS, Method
from cellfuncs.methods.base import Range
from cellfuncs.methods.duct import LAMINAR_UP_TO, TURBULENT_FROM
from cellfuncs.methods.friction import haaland


@lru_cache(maxsize=1)
def _methods() -> tuple[Method, ...]:
    """The laminar law, and the one that holds at any roughness: a sweep from smooth to rough walls has no seam."""
    return METHODS["laminar friction"], METHODS["Colebrook-White"]


def friction_factor(reynolds: Any, relative_roughness: Any, name: str | None = None) -> Any:
    """Darcy's f; ``reynolds`` and ``relative_roughness`` (sand grain over diameter) numbers or arrays of one shape.

    Without a method 64/Re up to Re 2300, Colebrook and White's equation from 4000, linear in Re between
    (Gnielinski 2013). Raises OutOfRange where no method holds, or where the named one does not.
    """
    if name is not None:
        return _by(name, reynolds, relative_roughness)
    if isinstance(reynolds, float) and isinstance(relative_roughness, float):
        return _one(reynolds, relative_roughness)
    import numpy as np

    re, rough = np.broadcast_arrays(np.asarray(reynolds, float), np.asarray(relative_roughness, float))
    found = np.full(re.shape, np.nan)
    between = (re > LAMINAR_UP_TO) & (re < TURBULENT_FROM)
    if between.any():
        low = _column(np.full(between.sum(), LAMINAR_UP_TO), rough[between])
        high = _column(np.full(between.sum(), TURBULENT_FROM), rough[between])
        share = (re[between] - LAMINAR_UP_TO) / (TURBULENT_FROM - LAMINAR_UP_TO)
        found[between] = (1.0 - share) * low + share * high
    found[~between] = _column(re[~between], rough[~between])
    return found


def _one(reynolds: float, rough: float) -> float:
    if LAMINAR_UP_TO < reynolds < TURBULENT_FROM:
        share = (reynolds - LAMINAR_UP_TO) / (TURBULENT_FROM - LAMINAR_UP_TO)
        return (1.0 - share) * _one(LAMINAR_UP_TO, rough) + share * _one(TURBULENT_FROM, rough)
    for method in _methods():
        if all(r.low <= _variable(r, reynolds, rough) <= r.high for r in method.ranges):
            return float(method.function(**_given(method, reynolds, rough)))
    return _refuse(reynolds, rough)


def _column(re: Any, rough: Any) -> Any:
    """f of a column outside the transition; refused with the first pair that no method holds for."""
    import numpy as np

    found = np.full(re.shape, np.nan)
    left = np.ones(re.shape, bool)
    for method in _methods():
        inside = left.copy()
        for r in method.ranges:
            value = _variable(r, re, rough)
            inside &= (value >= r.low) & (value <= r.high)
        if inside.any():
            found[inside] = method.function(**_given(method, re[inside], rough[inside]))
            left &= ~inside
        if not left.any():
            return found
    k = int(np.argmax(left))
    return _refuse(float(re[k]), float(rough[k]))


def _variable(r: Range, re: Any, rough: Any) -> Any:
    if r.variable == "Re":
        return re
    if r.variable == "roughness":
        return rough
    if r.variable != "Reε":
        raise NumberRefused(f"{r.variable} is not known here")
    return re * (haaland(re, rough) / 8.0) ** 0.5 * rough


def _given(method: Method, re: Any, rough: Any) -> dict[str, Any]:
    known = {"reynolds": re, "relative_roughness": rough, "section": "tube"}
    return {name: known[name] for name in method.inputs if name in known}


def _refuse(reynolds: float, rough: float) -> Any:
    raise OutOfRange(
        f"no friction factor at hand holds at Re {reynolds:.4g} with a relative roughness of {rough:.4g}; "
        "roughness up to 0.05, Re up to 1e8"
    )


def _by(name: str, reynolds: Any, relative_roughness: Any) -> Any:
    method = choice.find(name)
    if method.gives not in choice.FRICTION:
        raise NumberRefused(f"{method.name} gives a {method.gives}, no Darcy friction factor", argument="method_name")
    given = {"reynolds": reynolds, "relative_roughness": relative_roughness, "section": "tube"}
    missing = [n for n in method.needed if n not in given]
    if missing:
        why = f"{method.name} needs more than Re and roughness; a case has it, or CF_NUSSELT_OF"
        raise NumberRefused(why, argument="method_name")
    try:
        return method.evaluate({n: given[n] for n in given if n in method.inputs or n != "section"})
    except OutOfRange as refused:
        where = str(refused).split("; change the case")[0]
        raise OutOfRange(f"{where}; leave the method out, or name one that holds there") from None
