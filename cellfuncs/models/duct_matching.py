"""Amplitudes of the modes of joined stretches of duct, from what must be continuous where they meet.

A state (θ and the flux along) is a sum of modes, and by their orthogonality in A each amplitude is an inner product of
the mode with the state: so the conditions at an interface are plain inner products, nothing is marched. Downstream
modes are measured from a stretch's start and upstream ones from its end, so that all factors decay.
Source: Papoutsakis, Ramkrishna and Lim 1980; the coupling of several stretches is this project's own.
"""

import math
from itertools import pairwise
from typing import Any

import numpy as np

from cellfuncs.models.duct_modes import Modes, modes_of
from cellfuncs.models.duct_regions import WIDTH, Stretch, steady
from cellfuncs.models.duct_section import Section

_GONE = 0.0  # modes from beyond an infinite stretch
ADIABATIC, SAME_WALL, FIXED = "adiabatic", "wall at inlet temperature", "fixed inlet"


def stretches(section: Section, wall: str, upstream: str, along: float, length: float) -> tuple[Stretch, ...]:
    """The stretches of a duct from upstream to downstream, amplitudes found.

    ``wall`` temperature or flux; ``upstream`` adiabatic, wall at the inlet temperature, or a fixed inlet temperature at
    x = 0; ``along`` = 1/Pe or 0; ``length`` heated, in x*, insulated after it.
    """
    if along == 0.0:
        return _without_conduction(section, wall, length)
    parts = [_Part(section, wall, along, 0.0, length, driven=True, heating=True)]
    if upstream != FIXED:
        kind = "temperature" if wall == "temperature" and upstream == SAME_WALL else "flux"
        parts.insert(0, _Part(section, kind, along, -math.inf, 0.0, driven=False, heating=False))
    if math.isfinite(length):
        parts.append(_Part(section, "flux", along, length, math.inf, driven=False, heating=True))
    offset = 0
    for part in parts:
        offset = part.number(offset)
    rows, right = [], []
    if upstream == FIXED:
        _at_inlet(parts[0], section, along, offset, rows, right)
    for left, following in pairwise(parts):
        _between(left, following, section, along, offset, rows, right)
    found = np.linalg.solve(np.vstack(rows), np.vstack(right))
    return tuple(part.solved(found) for part in parts)


class _Part:
    """A stretch whose amplitudes are still unknown, and where they stand among all unknowns."""

    def __init__(self, section: Section, wall: str, along: float, start: float, end: float, **acts: bool):
        self.insulated = wall == "flux"
        self.start, self.end = start, end
        self.down, self.up = modes_of(section, self.insulated, along)
        self.rest = steady(section, wall, along, **acts)
        self.levelled = self.insulated and math.isfinite(start)
        length = end - start
        self.fade_down = np.exp(-np.minimum(length / self.down.mu, 700.0))
        self.fade_up = np.exp(-np.minimum(length / self.up.mu, 700.0))

    def number(self, offset: int) -> int:
        at = offset
        self.at_down = slice(at, at := at + (len(self.down.mu) if math.isfinite(self.start) else 0))
        self.at_up = slice(at, at := at + (len(self.up.mu) if math.isfinite(self.end) else 0))
        self.at_level = at
        return at + self.levelled

    def at(self, end: bool) -> tuple[tuple[slice, Any], tuple[slice, Any]]:
        """Where the amplitudes of (downstream, upstream) modes stand among the unknowns, and what is left of them."""
        down = np.where(end, self.fade_down, 1.0) if math.isfinite(self.start) else _GONE
        up = np.where(end, 1.0, self.fade_up) if math.isfinite(self.end) else _GONE
        return (self.at_down, down), (self.at_up, up)

    def level(self, count: int) -> Any:
        row = np.zeros(count)
        if self.levelled:
            row[self.at_level] = 1.0
        return row

    def drift(self, end: bool) -> Any:
        """What the steady part has gained at its end over its start; nothing upstream, where it does not change."""
        return (self.end - self.start) * self.rest.slope if end and math.isfinite(self.start) else np.zeros(WIDTH)

    def solved(self, found: Any) -> Stretch:
        down = found[self.at_down] if math.isfinite(self.start) else np.zeros((len(self.down.mu), WIDTH))
        up = found[self.at_up] if math.isfinite(self.end) else np.zeros((len(self.up.mu), WIDTH))
        rest = self.rest.raised(found[self.at_level]) if self.levelled else self.rest
        return Stretch(self.start, self.end, rest, self.down, self.up, down, up, self.insulated)


def _between(
    left: _Part, right: _Part, section: Section, along: float, count: int, rows: list[Any], constants: list[Any]
) -> None:
    """The conditions where two stretches meet."""
    left_places, right_places = left.at(end=True), right.at(end=False)
    step = right.rest.wall - left.rest.wall - left.drift(end=True)
    if left.insulated == right.insulated:
        jump = right.rest.state() - left.rest.state()
        both = (left.down, 1.0), (left.up, -1.0)
        for (modes, sign), before, after in zip(both, left_places, right_places, strict=True):
            row = np.zeros((len(modes.mu), count))
            _put(row, before, 1.0)
            _put(row, after, -1.0)
            handed = modes.state().T @ jump
            if not left.insulated:  # a step of the wall itself: θ = 1 is no sum of modes, its advection and flux are
                handed += sign * np.outer(modes.energy / modes.mu, step)
            rows.append(row)
            constants.append(handed)
        if left.insulated:
            rows.append((left.level(count) - right.level(count))[None, :])
            constants.append((right.rest.energy - left.rest.energy - left.drift(end=True))[None, :])
        return
    held, free = (right, left) if left.insulated else (left, right)
    held_places, free_places = (right_places, left_places) if left.insulated else (left_places, right_places)
    for modes, place in zip((held.down, held.up), held_places, strict=True):
        turn = modes.state().T
        row = np.zeros((len(modes.mu), count))
        for beyond, there in zip((free.down, free.up), free_places, strict=True):
            if there[1] is not _GONE:
                row[:, there[0]] = turn @ beyond.state() * there[1]
        _put(row, place, -1.0)
        rows.append(row)
        constants.append(turn @ (held.rest.state() - free.rest.state()))
    row = free.level(count)
    for beyond, there in zip((free.down, free.up), free_places, strict=True):
        if there[1] is not _GONE:
            row[there[0]] = beyond.wall * there[1]
    rows.append(row[None, :])
    constants.append((step if left.insulated else -step)[None, :])


def _put(row: Any, place: tuple[slice, Any], sign: float) -> None:
    """The amplitudes themselves, one a row, where there are any."""
    if place[1] is not _GONE:
        row[np.arange(len(row)), np.arange(place[0].start, place[0].stop)] += sign * place[1]


def _at_inlet(
    part: _Part, section: Section, along: float, count: int, rows: list[Any], constants: list[Any]
) -> None:
    """θ = 0 over the whole section x = 0, in coordinates of the mean square."""
    row = np.outer(section.whole, part.level(count))
    for modes, sign, place in zip((part.down, part.up), (1.0, -1.0), part.at(end=False), strict=True):
        if place[1] is not _GONE:
            row[:, place[0]] += _traces(section, modes, along, sign) * place[1]
    rest = section.embed @ (section.fold.T @ part.rest.p) + np.outer(section.whole, part.rest.wall)
    if not part.insulated:
        row, rest = section.embed.T @ row, section.embed.T @ rest
    rows.append(row)
    constants.append(-rest)


def _traces(section: Section, modes: Modes, along: float, sign: float) -> Any:
    """θ of modes in g coordinates; from the flux along where a mode is short, from p where it is long."""
    by_p = section.embed @ (section.fold.T @ modes.p) + np.outer(section.whole, modes.wall)
    by_g = modes.g * (sign * modes.mu / along)
    return np.where(modes.mu > along, by_p, by_g)


def _without_conduction(section: Section, wall: str, length: float) -> tuple[Stretch, ...]:
    """Nothing reaches upstream: every stretch starts from the profile that it is handed."""
    insulated = wall == "flux"
    down, up = modes_of(section, insulated, 0.0)
    nothing = np.zeros((0, WIDTH))
    rest = steady(section, wall, 0.0, driven=True, heating=True)
    amplitudes = -down.p.T @ rest.p
    if insulated:
        rest = rest.raised(-rest.energy)
    else:  # the step at the wall is no function of the space: project it with the weight of advection
        amplitudes -= np.outer((down.p.T @ section.carried) / down.mu, rest.wall)
    heated = Stretch(0.0, length, rest, down, up, amplitudes, nothing)
    if not math.isfinite(length):
        return (heated,)
    after, beyond = modes_of(section, True, 0.0)
    behind = steady(section, "flux", 0.0, driven=False, heating=True)
    _, p = heated.profile(length)
    behind = behind.raised(heated.read("bulk", np.array([length]))[0] - behind.energy)
    return heated, Stretch(length, math.inf, behind, after, beyond, after.p.T @ (p - behind.p), nothing)
