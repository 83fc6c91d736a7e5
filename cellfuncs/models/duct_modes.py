"""The modes v·exp(−x/μ) of a duct whose wall is held at a temperature or insulated, with or without conduction along.

With conduction along (ε = 1/Pe²) a mode obeys K v = λ U v + ελ² M v: conduction across, advection, conduction along.
With w = √ε·λ·v it is the symmetric first-order pair B z = μ A z, z = (v, w), A = diag(K, M), B = [U √εM; √εM 0]:
A is positive definite, so all μ = 1/λ are real, negative ones belong to what decays upstream, and the modes are
orthogonal in A; coefficients follow from inner products. An insulated wall has λ = 0 as well (a uniform temperature):
it is taken out exactly, since every other mode carries no energy along.
Source: Papoutsakis, Ramkrishna and Lim 1980, The extended Graetz problem with Dirichlet wall boundary conditions,
Appl. Sci. Res. 36, 13-34, and ... with prescribed wall flux, AIChE J. 26, 779-787.
"""

from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import numpy as np

from cellfuncs.models.duct_section import Section

_SMALLEST = 1e-16  # of the largest μ without conduction along: decayed after x* = 1e-15


@dataclass(frozen=True, eq=False)
class Modes:
    """Modes that decay with x (``up`` False) or against it; columns belong to ``mu`` (all positive: lengths in x*).

    ``p`` and ``g`` are the state (θ and the scaled flux along), ``wall``, ``bulk`` and ``energy`` their rows; energy
    is what advection and conduction along carry together, over the capacity flow.
    """

    mu: Any
    p: Any
    g: Any
    wall: Any
    bulk: Any
    energy: Any

    def state(self) -> Any:
        return np.vstack([self.p, self.g])


@lru_cache(maxsize=16)
def modes_of(section: Section, insulated: bool, along: float) -> tuple[Modes, Modes]:
    """(modes that decay downstream, modes that decay upstream); ``along`` is 1/Pe, 0 without conduction along."""
    n = section.terms
    if along == 0.0:
        matrix = section.carry - (np.outer(section.carried, section.carried) if insulated else 0.0)
        mu, p = np.linalg.eigh(matrix)
        kept = mu > _SMALLEST * mu[-1]
        mu, p = mu[kept], p[:, kept]
        wall = -section.carried @ p if insulated else np.zeros(len(mu))
        bulk = wall + section.carried @ p
        none = np.zeros((0, len(mu)))
        down = Modes(mu, p, none, wall, bulk, bulk)
        nothing = np.zeros(0)
        return down, Modes(nothing, p[:, :0], none[:, :0], nothing, nothing, nothing)
    flux = section.whole if insulated else section.embed.T @ section.whole
    size = len(flux)
    matrix = np.zeros((n + size, n + size))
    matrix[:n, :n] = section.carry
    matrix[:n, n:] = along * (section.fold @ section.embed.T if insulated else section.fold)
    matrix[n:, :n] = matrix[:n, n:].T
    carried = np.concatenate([section.carried, along * flux])
    if insulated:
        matrix -= np.outer(carried, carried)
    mu, z = np.linalg.eigh(matrix)
    energy = carried @ z
    wall = -energy if insulated else np.zeros(len(mu))
    bulk = wall + section.carried @ z[:n]
    g = z[n:] if insulated else section.embed @ z[n:]
    # as many of each sign as the wall's value adds: rounding must not move one across
    first = size
    least = np.finfo(float).tiny
    sides = []
    for part, sign in ((slice(first, None), 1.0), (slice(0, first), -1.0)):
        lengths = np.maximum(sign * mu[part], max(least, 1e-18 * along))
        total = wall[part] + energy[part] if insulated else energy[part]
        sides.append(Modes(lengths, z[:n, part], g[:, part], wall[part], bulk[part], total))
    return sides[0], sides[1]
