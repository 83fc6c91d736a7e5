"""Nu, friction and drag by published methods: the one that the sheet names, else any that holds for the case.

A value that a method gives outside its range, or in the other regime, or with the other exponent for heating and
cooling, is a known mistake and carries its code.
"""

from collections.abc import Iterable, Iterator, Mapping
from functools import lru_cache
from typing import Any

from cellfuncs.checks.relation import Admissible, relation
from cellfuncs.checks.stated import SheetCase
from cellfuncs.errors import CellfuncsError, OutOfRange
from cellfuncs.methods import METHODS, Method
from cellfuncs.methods.base import inputs

# relative: what rounded coefficients of a method make (0.0243 for 0.023 is more, and another method)
SAME = 0.006
# what typed values of good handbooks, read from charts, may differ from the methods
LOOSE = {"mean Nu": 0.15, "Darcy friction factor": 0.04, "drag coefficient": 0.15}
LAMINAR, TURBULENT = 2300.0, 4000.0
# methods for ducts that end below this are for laminar flow
_LAMINAR_END = 3000.0
_DEFAULTS: Mapping[str, Any] = {
    "section": "tube",
    "wall": "temperature",
    "heated": "both",
    "relative_roughness": 0.0,
    "viscosity_ratio": 1.0,
    "temperature_ratio": 1.0,
    "prandtl_ratio": 1.0,
}
_RATIOS = ("viscosity_ratio", "temperature_ratio", "prandtl_ratio")
# the plain shape of a flow kind, where the sheet names no other
_SHAPES: Mapping[str | None, str] = {"duct": "straight", "cylinder": "circle"}


@lru_cache(maxsize=16)
def _giving(gives: tuple[str, ...]) -> tuple[Method, ...]:
    return tuple(m for m in METHODS.values() if m.gives in gives)


@lru_cache(maxsize=1)
def _conditions() -> frozenset[str]:
    """What methods make conditions on: section, surface, regime …"""
    return frozenset(key for m in METHODS.values() for key in m.where) | frozenset(inputs())


@lru_cache(maxsize=256)
def _plain(name: str) -> str:
    return "".join(letter for letter in name.casefold() if letter.isalnum())


def named_methods(case: SheetCase, gives: tuple[str, ...]) -> list[Method]:
    """The methods that the sheet's texts name, of those that give what is wanted."""
    named = case.facts.get("method") or ()
    texts = [_plain(str(text)) for text in ([named] if isinstance(named, str) else named)]
    known = [text for text in texts if text]
    return [m for m in _giving(gives) if any(_plain(m.name) in text or text in _plain(m.name) for text in known)]


def _applies(method: Method, case: SheetCase, given: Mapping[str, Any]) -> bool:
    if method.flows and case.flow and case.flow not in method.flows:
        return False
    return all(given.get(key) is None or given[key] in allowed for key, allowed in method.where.items())


def _missed(method: Method, given: Mapping[str, Any]) -> list[str]:
    """The symbols of the ranges that the case lies outside of."""
    by_symbol = {inputs()[name].symbol: value for name, value in given.items() if name in inputs()}
    return [
        r.variable
        for r in method.ranges
        if isinstance(by_symbol.get(r.variable), (int, float)) and not r.low <= by_symbol[r.variable] <= r.high
    ]


def _reynolds_range(method: Method) -> tuple[float, float] | None:
    return next(((r.low, r.high) for r in method.ranges if r.variable == "Re"), None)


def _regime_missed(method: Method, given: Mapping[str, Any], others: Iterable[Method]) -> bool:
    """Whether the case lies in the other regime than the method is for.

    That is so where Re is beyond an end of its range and a method of the other regime holds there.
    """
    reynolds, own = given.get("reynolds"), _reynolds_range(method)
    if reynolds is None or own is None or own[0] <= reynolds <= own[1]:
        return False
    there = [m for m in others if (found := _reynolds_range(m)) and found[0] <= reynolds <= found[1]]
    regimes = set(method.where.get("regime", ()))
    if regimes and any(regimes.isdisjoint(m.where.get("regime", regimes)) for m in there):
        return True
    ranges = [_reynolds_range(m) or (0.0, 0.0) for m in there]
    if reynolds < own[0]:
        return any(high <= _LAMINAR_END for _, high in ranges)
    return own[1] <= _LAMINAR_END and any(low >= 0.7 * own[1] for low, _ in ranges)


def _evaluate(method: Method, given: Mapping[str, Any]) -> tuple[float, str] | None:
    """The method's answer and what lies outside its range; None where it cannot answer."""
    given = {name: value for name, value in given.items() if name in inputs()}
    try:
        return float(method.evaluate(given)), ""
    except OutOfRange as error:
        try:
            return float(method.evaluate(given, allow=True)), str(error)
        except (CellfuncsError, ArithmeticError, ValueError, KeyError, TypeError):
            return None
    except (CellfuncsError, ArithmeticError, ValueError, KeyError, TypeError):
        return None


def _without_corrections(method: Method, given: Mapping[str, Any], value: float) -> Iterator[Admissible]:
    """The same where a sheet leaves out what corrects for a short tube or for changing properties."""
    for names, words in ((("diameter_over_length",), "the entrance"), (_RATIOS, "changing properties")):
        if not any(name in method.inputs for name in names):
            continue
        plain = {**given, **{name: 0.0 if name == "diameter_over_length" else 1.0 for name in names}}
        found = _evaluate(method, plain)
        if found and not found[1] and abs(found[0] / value - 1.0) > SAME:
            yield Admissible(found[0], f"{method.name} without a factor for {words}", SAME)


def _flipped(given: Mapping[str, Any]) -> dict[str, Any]:
    """The same with heating for cooling."""
    other = {"heating": "cooling", "cooling": "heating"}
    return {**given, "heating": other.get(given.get("heating"))}


def answers(case: SheetCase, given: Mapping[str, Any], gives: tuple[str, ...]) -> list[Admissible]:
    """Right answers first, then known mistakes with their codes, then what the spread of methods allows."""
    named = named_methods(case, gives)
    right, wrong = [], []
    for method in named or _giving(gives):
        if not _applies(method, case, given):
            continue
        found = _evaluate(method, given)
        if found is None or found[0] <= 0:
            continue
        value, outside = found
        if not outside:
            right.append(Admissible(value, method.name, SAME))
            right += _without_corrections(method, given, value)
        elif named or all(given.get(key) is not None for key in method.where if key != "regime"):
            regime = _regime_missed(method, given, _applying(case, given, gives))
            code = "wrong-regime" if regime else "outside-range"
            wrong.append(Admissible(value, outside, SAME, code))
    wrong += _other_exponents(case, given, named or _giving(gives))
    if named and not right:
        right_ones = [m for m in _giving(gives) if m not in named and _applies(m, case, given)]
        right += _inside(right_ones, given, loose=True)
    if named:
        others = _applying(case, given, gives)
        wrong += _outside_of_regime([m for m in others if m not in named], given, others)
    return [*right, *wrong, *_envelope(right, gives, bool(named))]


def _inside(methods: Iterable[Method], given: Mapping[str, Any], loose: bool) -> list[Admissible]:
    found = [(m, _evaluate(m, given)) for m in methods]
    return [Admissible(f[0], m.name, SAME, loose=loose) for m, f in found if f and not f[1] and f[0] > 0]


def _applying(case: SheetCase, given: Mapping[str, Any], gives: tuple[str, ...]) -> list[Method]:
    return [m for m in _giving(gives) if _applies(m, case, given)]


def _outside_of_regime(
    methods: Iterable[Method], given: Mapping[str, Any], others: Iterable[Method]
) -> list[Admissible]:
    found = [(m, _evaluate(m, given)) for m in methods if _regime_missed(m, given, others)]
    return [Admissible(f[0], f[1] or m.name, SAME, "wrong-regime") for m, f in found if f and f[0] > 0]


def _other_exponents(case: SheetCase, given: Mapping[str, Any], methods: Iterable[Method]) -> Iterator[Admissible]:
    if given.get("heating") is None:
        return
    for method in methods:
        asks = "heating" in method.where or "heating" in method.inputs
        if asks and (not method.flows or not case.flow or case.flow in method.flows):
            flipped = _flipped(given)
            if not all(flipped.get(k) is None or flipped[k] in allowed for k, allowed in method.where.items()):
                continue
            found = _evaluate(method, flipped)
            if found and found[0] > 0:
                words = f"{method.name} for {flipped['heating']}, but the stream is in {given['heating']}"
                yield Admissible(found[0], words, SAME, "exponent-heating-cooling")


def _envelope(right: list[Admissible], gives: tuple[str, ...], named: bool) -> list[Admissible]:
    """One loose answer that spans the right ones with their scatter; a method that is named has none to spare."""
    if not right:
        return []
    low, high = min(a.value for a in right), max(a.value for a in right)
    middle = (low + high) / 2.0
    # one law alone, as in laminar flow, leaves no room either
    width = (high - low) / (2.0 * middle) + (0.02 if named or high <= low * 1.001 else LOOSE.get(gives[0], 0.1))
    return [Admissible(middle, "methods that hold here", width, loose=True)]


def _stream_heating(case: SheetCase, wall: float | None, bulk: float | None, outlet: float | None) -> str | None:
    stated = case.facts.get("heating")
    if stated in ("heating", "cooling"):
        return stated
    if wall is not None and bulk is not None and wall != bulk:
        return "heating" if wall > bulk else "cooling"
    if bulk is not None and outlet is not None and outlet != bulk:
        return "heating" if outlet > bulk else "cooling"
    return None


def _choices(case: SheetCase) -> dict[str, Any]:
    facts = case.facts
    known = {**_DEFAULTS, **{k: v for k, v in facts.items() if k in _conditions() and isinstance(v, str)}}
    if case.flow in _SHAPES:
        known.setdefault("shape", _SHAPES[case.flow])
    if facts.get("heated_walls"):
        known["heated"] = facts["heated_walls"]
    if "heat_flux" in case.stated and "wall_temperature" not in case.stated:
        known["wall"] = "flux"
    return known


@relation("Nusselt number of a forced stream", "nusselt", source="methods",
          when=lambda case: case.flow not in ("free", "enclosure", "gap", "body"))  # fmt: skip
def forced_nusselt(case, reynolds, prandtl, length=None, bore=None, relative_roughness=None, friction_factor=None,
                   viscosity=None, wall_viscosity=None, wall_temperature=None, inlet_temperature=None,
                   outlet_temperature=None, stream_temperature=None):  # fmt: skip
    """Nu by a method, from Re and Pr."""
    given = _choices(case)
    given |= {"reynolds": reynolds, "prandtl": prandtl, "peclet": reynolds * prandtl}
    bulk = inlet_temperature if inlet_temperature is not None else stream_temperature
    given["heating"] = _stream_heating(case, wall_temperature, bulk, outlet_temperature)
    if viscosity and wall_viscosity:
        given["viscosity_ratio"] = viscosity / wall_viscosity
    if length and bore:
        over = length / bore
        given |= {"length_over_diameter": over, "diameter_over_length": 1.0 / over}
        given |= {"x_star": over / (reynolds * prandtl), "x_plus": over / reynolds}
    else:
        given |= {"diameter_over_length": 0.0, "x_star": 10.0, "x_plus": 10.0}
    if relative_roughness is not None:
        given["relative_roughness"] = relative_roughness
        given["roughness_reynolds"] = reynolds * relative_roughness * (smooth_factor(reynolds) / 8.0) ** 0.5
    given["friction"] = friction_factor or smooth_factor(reynolds)
    return answers(case, given, ("mean Nu", "local Nu"))


def smooth_factor(reynolds: float) -> float:
    """Darcy's f of a smooth tube, laminar or turbulent."""
    from cellfuncs.methods.duct import smooth_friction

    return 64.0 / reynolds if reynolds < LAMINAR else smooth_friction(max(reynolds, 3000.0))


@relation("Nusselt number of free convection", "nusselt", source="methods",
          when=lambda case: case.flow in (None, "free", "enclosure"))  # fmt: skip
def free_nusselt(case, rayleigh, prandtl, gap=None, height=None, length=None):
    """Nu by a method, from Ra and Pr."""
    given = _choices(case) | {"rayleigh": rayleigh, "prandtl": prandtl, "grashof": rayleigh / prandtl, "angle": 0.0}
    if gap and (height or length):
        given["aspect"] = (height or length) / gap
    return answers(case, given, ("mean Nu",))


@relation("friction factor", "friction_factor", source="methods", flows=("duct", "bank", "bed"))
def friction_factor(case, reynolds, relative_roughness=None):
    """Darcy's f by a method, from Re and the relative roughness."""
    given = _choices(case) | {"reynolds": reynolds}
    if relative_roughness is not None:
        given["relative_roughness"] = relative_roughness
        given["roughness_reynolds"] = reynolds * relative_roughness * (smooth_factor(reynolds) / 8.0) ** 0.5
    found = answers(case, given, ("Darcy friction factor",))
    quarter = [
        Admissible(a.value / 4.0, f"Fanning's factor by {a.words} where Darcy's is meant", SAME, "fanning-for-darcy")
        for a in found
        if not a.code and not a.loose
    ]
    if relative_roughness is None and reynolds > LAMINAR:
        # an unknown roughness only adds to a smooth wall's
        found += [Admissible(a.value * 1.27, a.words, 0.26, loose=True, assumed=True) for a in found if a.loose]
    tight = [a for a in found if not a.code and not a.loose]
    if reynolds > TURBULENT:
        # the round tube's laminar law stands for every section in sheets
        quarter.append(Admissible(64.0 / reynolds, "64/Re of laminar flow", SAME, "wrong-regime"))
        quarter.append(Admissible(16.0 / reynolds, "16/Re of laminar flow", SAME, "wrong-regime"))
    return [*tight, *quarter, *(a for a in found if a.code), *(a for a in found if a.loose)]


@relation("Fanning's factor of a tube", "fanning_factor", source="methods", flows=("duct",))
def fanning_factor(case, reynolds, relative_roughness=None):
    """f/4 by a method, from Re and the relative roughness."""
    found = friction_factor(case, reynolds, relative_roughness)
    return [Admissible(a.value / 4.0, a.words, a.scatter, a.code, a.loose) for a in found
            if a.code != "fanning-for-darcy"]  # fmt: skip


@relation("drag coefficient by a method", "drag_coefficient", source="methods", flows=("sphere", "cylinder"))
def drag(case, reynolds):
    """c_D by a method, from Re."""
    return answers(case, _choices(case) | {"reynolds": reynolds}, ("drag coefficient",))
