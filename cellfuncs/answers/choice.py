"""Which method answers for a case: the candidates of its flow kind, how each lies to its range, the one recommended.

The rule, the same always: of the methods that give the wanted answer and whose inputs the case tells, those in range;
of these the one with the smallest published scatter; of equal scatter the one with the narrowest range, since it was
made for less; of equal range the one that stands first in the library. Where the answer is wanted at the end of a
duct (prescribed flux), local methods and those of developed flow stand before means over the entry. A row ``method``
in the case, or a method named in a cell, stands before the rule.
"""

import math
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from functools import lru_cache

from cellfuncs.answers.inputs import Inputs, View
from cellfuncs.cases.case import Case
from cellfuncs.errors import CaseRefused, CellfuncsError, NoModel, OutOfRange, UnknownName
from cellfuncs.methods import METHODS, Method, Range
from cellfuncs.methods.duct import LAMINAR_UP_TO, TURBULENT_FROM

NUSSELT = ("mean Nu", "local Nu")
FRICTION = ("Darcy friction factor",)
DROP = ("pressure drop", "pressure gradient")
_ROUNDING = 1e-12  # of a variable, at the end of a range
_OPEN, _HALF_OPEN = 8.0, 4.0  # decades that a range counts for where it has no end, or one
_CHOICE = 2.0  # decades that a condition on a choice is worth
Conditions = tuple[tuple[str, tuple[str, ...]], ...]
_ENTRY = ("x_star", "x_plus", "length_over_diameter")


@dataclass(frozen=True)
class Candidate:
    """A method as it lies to a case."""

    method: Method
    view: View
    missed: tuple[tuple[Range, float], ...]
    rank: int  # 0 fits the wanted answer, 1 is a mean where the value at the end is wanted

    @property
    def in_range(self) -> bool:
        return not self.missed

    @property
    def outside(self) -> str:
        """What lies outside the range, in words; empty inside."""
        return "; ".join(f"{r.words()}, here {value:.4g}" for r, value in self.missed)

    @property
    def other_regime(self) -> bool:
        """Whether it was made for the other side of the transition: laminar for turbulent, or the other way round."""
        return any(
            r.variable == "Re" and (r.high <= TURBULENT_FROM < re or re < LAMINAR_UP_TO <= r.low)
            for r, re in self.missed
        ) or (
            any(r.variable == "Reε" for r, _ in self.missed)  # rough walls are of turbulent flow
            and (self.view.get("reynolds") or 0.0) < LAMINAR_UP_TO
        )

    @property
    def distance(self) -> float:
        """How far outside, in logarithms of the variables."""
        return sum(_distance(r, value) for r, value in self.missed)


def _distance(r: Range, value: float) -> float:
    limit = r.low if value < r.low else r.high
    if limit > 0 and value > 0:
        return abs(math.log(value / limit))
    return abs(value - limit) / (1.0 + abs(limit))


def narrowness(method: Method) -> float:
    """How much a method restricts: decades over the variables of its range, and its choices; larger is narrower."""
    return sum(_OPEN - _width(r) for r in method.ranges) + _CHOICE * len(method.where)


def _width(r: Range) -> float:
    if r.low == -math.inf or r.high == math.inf:
        return _HALF_OPEN
    if r.low <= 0:
        return _HALF_OPEN if r.high > 0 else 1.0
    return min(_HALF_OPEN, math.log10(r.high / r.low))


@lru_cache(maxsize=64)
def in_order(flow: str, gives: tuple[str, ...]) -> "Order":
    """The methods of a flow kind in the order of the rule, range aside."""
    return by_rule(m for m in METHODS.values() if flow in m.flows and m.gives in gives)


class Order(tuple[Method, ...]):
    """Methods in the order of the rule; two orders are the same only if they are one object."""

    __hash__ = object.__hash__
    __eq__ = object.__eq__


def by_rule(methods: Iterable[Method]) -> Order:
    """Methods in the order of the rule, range aside."""
    place = {name: k for k, name in enumerate(METHODS)}
    return Order(sorted(methods, key=lambda m: (m.scatter, -narrowness(m), place[m.name])))


@lru_cache(maxsize=512)
def _open_conditions(
    methods: Order, choices: tuple[tuple[str, str], ...], must: tuple[str, ...]
) -> tuple[tuple[Method, Conditions], ...]:
    """The methods that settled choices leave, each with the conditions on what is still open."""
    settled = dict(choices)
    return tuple(
        (m, tuple((key, allowed) for key, allowed in m.where.items() if key not in settled))
        for m in methods
        if all(settled.get(key, allowed[0]) in allowed for key, allowed in m.where.items())
        and all(name in m.inputs for name in must)
    )


def candidates(state: Inputs, methods: Order, at_end: bool = False) -> Iterator[Candidate]:
    """The methods that are for a case and whose inputs it tells, in the order given."""
    for method, conditions in _open_conditions(methods, state.known.choices, state.known.get("must", ())):
        order = rank(method, at_end)
        if order is None or not state.agrees(conditions):
            continue
        view = state.view(method)
        for name in method.needed:
            if view.get(name) is None:
                break
        else:
            yield Candidate(method, view, missed(method, view), order)


def rank(method: Method, at_end: bool) -> int | None:
    """0 where the method gives what is wanted, 1 for a mean over the entry where the end is wanted, None else."""
    if not at_end:
        return None if method.gives == "local Nu" else 0
    entry = method.gives == "mean Nu" and any(name in _ENTRY for name in method.inputs)
    return 1 if entry else 0


def missed(method: Method, view: View) -> tuple[tuple[Range, float], ...]:
    """The ranges of a method in which a case does not lie."""
    found = []
    for r in method.ranges:
        value = view.of_symbol(r.variable)
        if value is None or r.low <= value <= r.high:
            continue
        if not _distance(r, value) <= _ROUNDING:  # a Prandtl number of 0.5 may come out as 0.49999999999999994
            found.append((r, value))
    return tuple(found)


def recommended(state: Inputs, gives: tuple[str, ...], what: str, allow: bool, at_end: bool = False) -> Candidate:
    """The method that the rule recommends; outside all ranges refused, or with ``allow`` the one least outside.

    A method of the other side of a duct's transition is never recommended, only taken where it is named.
    """
    flow = state.case.flow
    found = first(state, in_order(flow, gives), what, True, at_end)
    if flow == "duct" and found.other_regime:
        raise NoModel(
            f"no method at hand gives the {what} of this duct at its Reynolds number; state it, or change section, "
            "heated walls or inlet profile"
        )
    if found.missed and not allow:
        refuse_outside(found)
    return found


def first(
    state: Inputs, methods: Order, what: str, allow: bool, at_end: bool = False
) -> Candidate:
    """The first of the methods, which stand in order, that is in range."""
    second: Candidate | None = None
    outside: list[Candidate] = []
    for found in candidates(state, methods, at_end):
        if not found.in_range:
            outside.append(found)
        elif found.rank == 0:
            return found
        else:
            second = second or found
    if second is not None:
        return second
    if not outside:
        raise NoModel(f"no method at hand gives the {what} of this {state.case.flow}; state it")
    nearest = min(outside, key=lambda c: (c.other_regime, c.distance))
    if not allow:
        refuse_outside(nearest)
    return nearest


def refuse_outside(found: Candidate) -> None:
    """Raise with the range of a method and where the case lies."""
    raise OutOfRange(
        f"{found.method.name} holds for {found.outside}; change the case, state a coefficient, "
        "or add the row: beyond range | allow"
    )


def named(
    state: Inputs, name: str, gives: tuple[str, ...], what: str, allow: bool, flow: str | None = None
) -> Candidate:
    """The method of that name for a case, or a refusal that says why it is none."""
    method, flow = find(name), flow or state.case.flow
    if method.gives not in gives:
        raise CaseRefused(f"{method.name} gives a {method.gives}, not the {what}")
    if flow not in method.flows:
        fits = " or ".join(method.flows) or "no flow kind of cases"
        raise CaseRefused(f"{method.name} is for {fits}, this case is a {flow}")
    for key, allowed in method.where.items():
        known = state.choice(key)
        if known is not None and known not in allowed:
            raise CaseRefused(f"{method.name} is for {key.replace('_', ' ')} {' or '.join(allowed)}, here {known}")
    view = state.view(method)
    missing = view.missing(method)
    if missing:
        raise CaseRefused(f"{method.name} needs the {' and the '.join(missing)}, which this case does not tell")
    found = Candidate(method, view, missed(method, view), 0)
    if not found.in_range and not allow:
        refuse_outside(found)
    return found


def row(case: Case, key: str, gives: tuple[str, ...]) -> str | None:
    """The method that a row of the case names, where it gives what is asked."""
    name = case.get(key)
    return name if name is not None and find(name).gives in gives else None


def find(name: str) -> Method:
    """The method of a name, whatever its case; UnknownName with the nearest one."""
    known = METHODS.get(name)
    if known is not None:
        return known
    plain = _plain(name)
    found = _plain_names().get(plain)
    if found is not None:
        return METHODS[found]
    author = plain.rstrip("0123456789 ")  # a year after it is not part of a name
    begins = [known for key, known in _plain_names().items() if author and key.startswith(author + " ")]
    if begins:
        listed = ", ".join(f'"{known}"' for known in begins[:5]) + (", and more" if len(begins) > 5 else "")
        raise UnknownName(f'"{name[:40]}" is no method; there {"is" if len(begins) == 1 else "are"} {listed}')
    from rapidfuzz import fuzz, process

    near, score, _ = process.extractOne(plain, list(_plain_names()), scorer=fuzz.ratio)
    hint = f'the nearest is "{_plain_names()[near]}"' if score >= 60 else '=CF_LIST("methods") lists them'
    raise UnknownName(f'"{name[:40]}" is no method; {hint}')


def _plain(text: str) -> str:
    return " ".join(text.replace("-", " ").replace("_", " ").replace(",", " ").split()).casefold()


@lru_cache(maxsize=1)
def _plain_names() -> dict[str, str]:
    return {_plain(name): name for name in METHODS}


def value(found: Candidate) -> float:
    """The method's number for the case; refused where the formula has none there."""
    return number(found.method, found.view)


def number(method: Method, view: View) -> float:
    """A method's number at a view, its range aside."""
    try:
        result = method.function(**view.given(method))
    except CellfuncsError:
        raise
    except (ZeroDivisionError, OverflowError, ValueError):  # ValueError: a logarithm or root of less than nothing
        result = math.nan
    if isinstance(result, complex) or not math.isfinite(result):
        raise OutOfRange(f"{method.name} has no finite value here")
    if result <= 0 and method.gives in (*NUSSELT, *FRICTION, *DROP):
        raise OutOfRange(f"{method.name} has no value here, its formula gives {result:.4g}")
    return float(result)


def disagreement(best: Sequence[tuple[Method, float]]) -> str:
    """Words where the two best in range differ by more than both their scatters; empty else."""
    if len(best) < 2:
        return ""
    (one, a), (other, b) = best[:2]
    apart = abs(a - b) / max(abs(a), abs(b), 1e-300)
    if apart <= one.scatter + other.scatter:
        return ""
    return f"differs from {other.name} by {100 * apart:.0f} %, more than their scatter"
