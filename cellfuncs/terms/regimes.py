"""A map of a term's verdict over two rows or groups of a case.

A row is varied itself. A group is varied by a row that it depends on: two groups by the two rows whose exponents,
found at the case's own point, tell them apart best. Points lie even on both axes in the logarithm, but where
properties change along the way a group comes out a little beside its place, and that is what is told.
"""

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import product

from cellfuncs.answers import Solution, solve
from cellfuncs.cases import labels
from cellfuncs.cases.case import Case
from cellfuncs.cases.vary import row_key, with_value
from cellfuncs.errors import CaseRefused, CellfuncsError, NoModel, OutOfRange, UnknownName
from cellfuncs.terms.priced import NO_MODEL
from cellfuncs.terms.table import equation_of, judged

COLUMNS = ("x", "y", "verdict", "share")
NO_ANSWER = "no answer"
FEWEST, MOST, USUAL = 3, 101, 13
_DECADES = 1.5  # both ways from the case's own point
_NEAR, _FAR = 0.1, 3.0  # a temperature: parts of its distance from the temperature it exchanges with
_STEP = 0.01  # of the logarithm, for the exponents
_SINGULAR = 0.02  # determinant of the exponents below which two rows do not tell two groups apart
# the rows by which a group may be varied, in this order where they do equally well
_LEVERS = (
    "velocity", "volume_flow", "mass_flow", "film_flow", "length", "diameter", "hydraulic_diameter", "gap", "height",
    "time", "temperature_difference", "heat_flux", "volumetric_source", "wall_conductivity", "wall_thickness",
    "coefficient",
)  # fmt: skip
# what rules a term: axes in the order in which they are tried
_RULING = {
    "conduction along": ("peclet", "length"),
    "viscous heating": ("brinkman", "length"),
    "pressure work": ("brinkman", "length"),
    "storage": ("time", "length"),
    "volumetric source": ("volumetric_source", "length"),
    "wall conduction": ("velocity", "wall_thickness"),
    "wall radiation": ("emissivity", "surroundings_temperature"),
    "inertia": ("reynolds", "length"),
    "buoyancy": ("velocity", "temperature_difference"),
}
_FALLBACK = (
    "velocity", "volume_flow", "mass_flow", "film_flow", "length", "diameter", "gap", "temperature_difference",
    "wall_temperature", "heat_flux", "time", "coefficient",
)  # fmt: skip


@dataclass(frozen=True)
class Axis:
    """One axis: a row of the case or a group, with the places on it."""

    key: str
    places: tuple[float, ...]
    own: float | None  # where the case itself lies

    @property
    def label(self) -> str:
        return labels.dictionary()[self.key].label

    @property
    def kind(self) -> str:
        return labels.dictionary()[self.key].kind

    @property
    def logarithmic(self) -> bool:
        return self.kind != "temperature"


@dataclass(frozen=True)
class Point:
    """One place of a map; ``weight`` is the effect, or the share where no model gives one (None: kelvins decide)."""

    x: float
    y: float
    verdict: str
    share: float | None
    weight: float | None


@dataclass(frozen=True)
class RegimeMap:
    """Two axes and the way from a place on them to a case."""

    case: Case
    term: str
    x: Axis
    y: Axis
    levers: tuple[str, ...]  # of the groups among the axes
    moves: tuple[tuple[float, ...], ...]  # d ln lever/d ln group

    def points(self) -> Iterator[tuple[float, float]]:
        """All places, column by column, so that what depends on x alone is solved once."""
        return product(self.x.places, self.y.places)

    def at(self, x: float, y: float) -> tuple[float, float, str, float | str]:
        """x, y, verdict and share at a place; where the case has no answer there the verdict says so."""
        p = self.point(x, y)
        return p.x, p.y, p.verdict, NO_MODEL if p.share is None else p.share

    def point(self, x: float, y: float) -> Point:
        """The same with what decides the verdict: the effect, or the share where no model gives one."""
        try:
            solution = solve(self.case_at(x, y))
            terms = judged(solution, equation_of(self.term), quickly_for=self.term)
            j = next(j for j in terms if j.size.term == self.term)
            found = (_value(solution, self.x, x), _value(solution, self.y, y))
        except (CellfuncsError, ArithmeticError):
            return Point(x, y, NO_ANSWER, None, None)
        by_kelvins = j.size.settled is not None or (j.effect is not None and j.effect.ratio is None)
        return Point(*found, j.verdict, None if j.size.no_share else j.share, None if by_kelvins else j.weight)

    def spread(self) -> list[tuple[float, float]]:
        """How one standard uncertainty of each row with a ± moves the case's own place, along both axes.

        Differences of the logarithm on a logarithmic axis. Empty without ±.
        """
        moves = []
        for name, entry in self.case.stated.items():
            if not entry.plus_minus:
                continue
            try:
                solution = solve(with_value(self.case, name, entry.value + entry.plus_minus))
                ends = [_own(solution, axis.key) for axis in (self.x, self.y)]
            except (CellfuncsError, ArithmeticError):
                continue
            moves.append(tuple(
                math.log(end / axis.own) if axis.logarithmic else end - axis.own
                for end, axis in zip(ends, (self.x, self.y), strict=True)
            ))  # fmt: skip
        return moves

    def case_at(self, x: float, y: float) -> Case:
        """The case at a place."""
        case = self.case
        wanted = []
        for axis, place in ((self.x, x), (self.y, y)):
            if _is_row(axis.key):
                case = with_value(case, axis.key, place)
            else:
                wanted.append(math.log(place / axis.own))
        for lever, row in zip(self.levers, self.moves, strict=True):
            factor = math.exp(sum(m * w for m, w in zip(row, wanted, strict=True)))
            case = with_value(case, lever, self.case.get(lever) * factor)
        return case


def regime_map(case: Case, term: str, x: str | None = None, y: str | None = None, points: int = USUAL) -> RegimeMap:
    """The map of a term; without axes over the two that rule it. Refuses what does not vary or depends on nothing."""
    if not FEWEST <= points <= MOST:
        raise OutOfRange(f"{points} points on an axis; from {FEWEST} to {MOST} make a map", "points")
    case = case.origin or case  # rows as stated; what follows from them follows anew at each place
    solution = solve(case)
    j = next((j for j in judged(solution, equation_of(term)) if j.size.term == term), None)
    if j is None or j.size.leading:
        raise NoModel(f"{term} has one verdict everywhere; name a term that may be left out", argument="term")
    keys = [_axis_key(solution, text, name) for text, name in ((x, "x"), (y, "y")) if text]
    if len(keys) < 2:
        keys = _completed(solution, term, keys, given_y=bool(y and not x))
    if keys[0] == keys[1]:
        raise UnknownName("both axes are the same; name two rows or groups", argument="y")
    own = [_own(solution, key) for key in keys]
    axes = [Axis(key, _places(case, key, at, points), at) for key, at in zip(keys, own, strict=True)]
    groups = [key for key in keys if not _is_row(key)]
    levers, moves = _levers(case, solution, groups, [key for key in keys if _is_row(key)])
    return RegimeMap(case, term, axes[0], axes[1], levers, moves)


def _is_row(key: str) -> bool:
    return labels.dictionary()[key].role == "stated"


def _axis_key(solution: Solution, text: str, argument: str) -> str:
    """The row or group that an axis is named after."""
    try:
        try:
            return row_key(solution.case, text)
        except UnknownName:
            key = labels.find(text, solution.case.flow)
        entry = labels.dictionary()[key]
        if entry.role != "derived" or entry.kind != "dimensionless":
            raise UnknownName(f'"{entry.label}" cannot be an axis; name a row that states a number, or a group')
    except CellfuncsError as error:
        error.argument = argument
        raise
    return key


def _completed(solution: Solution, term: str, given: list[str], given_y: bool) -> list[str]:
    """Two axes: those given, and those that rule the term as far as the case has them."""
    found = list(given)
    for key in (*_RULING.get(term, ()), *_FALLBACK):
        if len(found) == 2:
            break
        if key in found or not _serves(solution, key, found):
            continue
        found.append(key)
    if len(found) < 2:
        raise CaseRefused("the case has no two rows or groups to spread a map over; name them", argument="x")
    return found[::-1] if given_y else found


def _serves(solution: Solution, key: str, others: Sequence[str]) -> bool:
    """Whether the case has this row, or rows that vary this group; the groups before it keep rows to be varied by."""
    try:
        if _is_row(key) and not solution.case.has(key):
            return False
        _own(solution, key)
        groups = [k for k in (*others, key) if not _is_row(k)]
        rows = [k for k in (*others, key) if _is_row(k)]
        return not groups or bool(_levers(solution.case, solution, groups, rows))
    except CellfuncsError:
        return False


def _own(solution: Solution, key: str) -> float:
    """Where the case lies on an axis."""
    stated = solution.case.get(key)
    value = stated if _is_row(key) else solution.value(key)
    if value is None:
        raise CaseRefused(f'the row "{labels.dictionary()[key].label}" is not stated; a map is spread around its value')
    if not isinstance(value, float | int) or (not value and labels.dictionary()[key].kind != "temperature"):
        raise CaseRefused(f'"{labels.dictionary()[key].label}" is zero or no number; a map needs a size to start from')
    return float(value)


def _places(case: Case, key: str, own: float, points: int) -> tuple[float, ...]:
    entry = labels.dictionary()[key]
    steps = [2.0 * k / (points - 1) - 1.0 for k in range(points)]
    if entry.kind == "temperature":
        others = [
            float(s.value) for name, s in case.stated.items()
            if labels.dictionary()[name].kind == "temperature" and name != key
        ]  # fmt: skip
        near = min(others, key=lambda t: abs(t - own), default=own - 10.0)
        apart = own - near or 10.0
        ends = (near + _NEAR * apart, near + _FAR * apart)
        return tuple(sorted(ends[0] + (ends[1] - ends[0]) * (s + 1.0) / 2.0 for s in steps))
    found = [own * 10.0 ** (_DECADES * s) for s in steps]
    if entry.kind == "fraction":
        highest = min(1.0, abs(found[-1]))
        found = [math.copysign(highest * 10.0 ** (_DECADES * (s - 1.0)), own) for s in steps]
    return tuple(sorted(found))


def _levers(
    case: Case, solution: Solution, groups: Sequence[str], taken: Sequence[str]
) -> tuple[tuple[str, ...], tuple[tuple[float, ...], ...]]:
    """The rows by which the groups are varied, and the exponents of these rows in the groups."""
    if not groups:
        return (), ()
    exponents = {}
    for key in _LEVERS:
        value = case.get(key)
        if key in taken or not isinstance(value, float) or value == 0.0:
            continue
        try:
            moved = solve(with_value(case, key, value * math.exp(_STEP)))
            exponents[key] = [math.log(moved.value(g) / solution.value(g)) / _STEP for g in groups]
        except (CellfuncsError, ArithmeticError, ValueError):
            continue
    best, found = 0.0, None
    for chosen in _combinations(list(exponents), len(groups)):
        rows = [exponents[key] for key in chosen]
        size = abs(_determinant(rows))
        if size > best * (1.0 + 1e-3) and size > _SINGULAR:
            best, found = size, chosen
        if best > 0.5:
            break  # the first that does well: rows are in the order of preference
    if found is None:
        names = " and ".join(labels.dictionary()[g].label for g in groups)
        raise CaseRefused(f"no rows of this case vary {names} by themselves; name rows as axes", argument="x")
    return tuple(found), _inverse([exponents[key] for key in found])


def _combinations(keys: list[str], count: int) -> Iterator[tuple[str, ...]]:
    for chosen in product(keys, repeat=count):
        if len(set(chosen)) == count:
            yield chosen


def _determinant(rows: list[list[float]]) -> float:
    return rows[0][0] if len(rows) == 1 else rows[0][0] * rows[1][1] - rows[0][1] * rows[1][0]


def _inverse(rows: list[list[float]]) -> tuple[tuple[float, ...], ...]:
    """d ln lever/d ln group, a row for each lever, from d ln group/d ln lever (a row for each lever)."""
    d = _determinant(rows)
    if len(rows) == 1:
        return ((1.0 / d,),)
    (a, b), (c, e) = rows  # of lever 1: groups 1 and 2; of lever 2: groups 1 and 2
    return ((e / d, -c / d), (-b / d, a / d))


def _value(solution: Solution, axis: Axis, place: float) -> float:
    return place if _is_row(axis.key) else float(solution.value(axis.key))
