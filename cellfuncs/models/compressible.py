"""A gas or liquid along a duct with falling pressure: friction, expansion, kinetic energy and wall heat together.

One-dimensional, steady, constant area, in units of the inlet (T̂ = T/T₁, p̂ = p/p₁, û = u/u₁ = 1/ρ̂), x = 0 … 1:

    p̂' = −A·(F·û + û'),                          A = ρ₁u₁²/p₁,  F = f·L/(2D)
    Ĥ' = N·(T̂_w − T̂ − r·E·û²/2) + S,             E = u₁²/(cpT₁) = A·Π,  Π = p₁/(ρ₁cpT₁)
    Ĥ = T̂ + E·û²/2 + ∫(1 − b)·Π·û dp̂             enthalpy with kinetic energy over cpT₁; b = βT

and û = p̂^−k·T̂^b with k = κp (isothermal compressibility): k = b = 1 is an ideal gas. Ĥ itself is integrated, so
that an ideal gas in an adiabatic duct keeps its total temperature to rounding. Refused where the flow chokes.
"""

import math
from dataclasses import dataclass

import numpy as np

from cellfuncs.errors import NoModel
from cellfuncs.models.trust import finite

_FINE, _COARSE = 1e-10, 1e-8
_NEAR_CHOKING = 1e-4
_LOWEST = 1e-3  # of the inlet pressure
_STIFF = 30.0  # transfer units from which the wall holds the temperature tightly


@dataclass(frozen=True)
class Stream:
    """What is given; see above. ``wall`` is T_w/T₁; ``source`` includes a prescribed flux."""

    drag: float  # F
    dynamic: float  # A
    expansion_ratio: float  # Π
    expansion: float = 1.0  # b
    compressibility: float = 1.0  # k
    transfer: float = 0.0  # N
    wall: float = 1.0
    recovery: float = 0.0  # r
    source: float = 0.0  # S


@dataclass(frozen=True)
class Outlet:
    """Where the stream leaves, in units of the inlet."""

    temperature: float
    total_temperature: float  # T̂ + E·û²/2
    pressure: float
    velocity: float
    choking: float  # 1 − Ma² there (0 at choking)
    duty: float  # heat taken up through the wall and from the source, over ṁcpT₁
    adiabatic_wall: float  # T̂ + r·E·û²/2
    error: float  # absolute, of the temperatures


def flow(given: Stream) -> Outlet:
    """The outlet of the stream; NoModel where it chokes on the way or runs out of pressure."""
    finite(
        friction=given.drag, dynamic_pressure=given.dynamic, expansion=given.expansion,
        compressibility=given.compressibility, transfer_units=given.transfer, wall_temperature=given.wall,
        recovery=given.recovery, source=given.source, pressure_over_heat_content=given.expansion_ratio,
    )  # fmt: skip
    if min(given.drag, given.dynamic, given.transfer, given.wall) < 0 or given.expansion_ratio <= 0:
        raise NoModel("friction, transfer units and pressures are numbers from zero upwards")
    fine, coarse = _integrate(given, _FINE), _integrate(given, _COARSE)
    error = max(abs(f - c) for f, c in zip(fine, coarse, strict=True)) + 1e-14
    enthalpy, pressure, spent = fine
    system = _System(given)
    temperature, velocity = system.state(enthalpy, pressure, spent)
    kinetic = 0.5 * system.kinetic * velocity**2
    return Outlet(
        temperature, temperature + kinetic, pressure, velocity, system.choking(temperature, pressure, velocity),
        enthalpy - 1.0 - 0.5 * system.kinetic, temperature + given.recovery * kinetic, error,
    )  # fmt: skip


def _integrate(given: Stream, tolerance: float) -> tuple[float, float, float]:
    from scipy.integrate import solve_ivp

    system = _System(given)
    if system.choking(1.0, 1.0, 1.0) <= _NEAR_CHOKING:
        raise NoModel("the flow is choked or supersonic where it enters; this balance is for subsonic flow")

    def near(x: float, y: np.ndarray) -> float:
        try:
            temperature, velocity = system.state(*y)
        except _Ended:
            return -1.0
        return min(system.choking(temperature, y[1], velocity) - _NEAR_CHOKING, y[1] - _LOWEST)

    near.terminal = True
    method = "LSODA" if given.transfer > _STIFF else "DOP853"
    try:
        found = solve_ivp(
            system.slopes, (0.0, 1.0), [1.0 + 0.5 * system.kinetic, 1.0, 0.0], method=method, rtol=tolerance,
            atol=1e-2 * tolerance, events=near,
        )  # fmt: skip
    except _Ended:
        raise NoModel("the flow chokes on the way, or its pressure is used up; the duct is too long for it") from None
    if found.status != 0:
        raise NoModel(f"the flow chokes, or its pressure is used up, at {100 * float(found.t[-1]):.3g} % of the length")
    enthalpy, pressure, spent = (float(v) for v in found.y[:, -1])
    return enthalpy, pressure, spent


class _Ended(Exception):
    """No temperature belongs to this enthalpy and pressure."""


class _System:
    def __init__(self, given: Stream):
        self.given = given
        self.kinetic = given.dynamic * given.expansion_ratio  # E

    def state(self, enthalpy: float, pressure: float, spent: float) -> tuple[float, float]:
        """Temperature and velocity from Ĥ, p̂ and ∫(1 − b)Πû dp̂, by Newton's method on T̂ + E·û²/2."""
        b, k = self.given.expansion, self.given.compressibility
        rest = enthalpy - spent
        if pressure <= 0 or rest <= 0:
            raise _Ended
        loose = pressure**-k
        temperature = rest
        for _ in range(60):
            kinetic = 0.5 * self.kinetic * (loose * temperature**b) ** 2
            step = (temperature + kinetic - rest) / (1.0 + 2.0 * b * kinetic / temperature)
            while temperature - step <= 0:
                step *= 0.5
            temperature -= step
            if abs(step) <= 4e-16 * temperature:
                break
        return temperature, loose * temperature**b

    def choking(self, temperature: float, pressure: float, velocity: float) -> float:
        """1 − Ma² of an ideal gas; in general where û' has no bound."""
        inertia, gain = self._gains(temperature, pressure, velocity)
        return inertia - gain * self.given.dynamic

    def _gains(self, temperature: float, pressure: float, velocity: float) -> tuple[float, float]:
        b, k, ratio = self.given.expansion, self.given.compressibility, self.given.expansion_ratio
        inertia = 1.0 + b * self.kinetic * velocity**2 / temperature
        gain = velocity * (k / pressure + b * (1.0 - b) * ratio * velocity / temperature)
        return inertia, gain

    def slopes(self, x: float, y: np.ndarray) -> list[float]:
        g = self.given
        enthalpy, pressure, spent = (float(v) for v in y)
        t, u = self.state(enthalpy, pressure, spent)
        heat = g.transfer * (g.wall - t - 0.5 * g.recovery * self.kinetic * u**2) + g.source
        inertia, gain = self._gains(t, pressure, u)
        faster = (gain * g.dynamic * g.drag * u + g.expansion * u * heat / t) / (inertia - gain * g.dynamic)
        falls = -g.dynamic * (g.drag * u + faster)
        return [heat, falls, (1.0 - g.expansion) * g.expansion_ratio * u * falls]


def fanno_length(mach: float, gamma: float) -> float:
    """f·L/D from a Mach number to choking in an adiabatic duct (Shapiro 1953); f is Darcy's."""
    m2 = mach * mach
    part = 0.5 * (gamma + 1.0) * m2 / (1.0 + 0.5 * (gamma - 1.0) * m2)
    return (1.0 - m2) / (gamma * m2) + (gamma + 1.0) / (2.0 * gamma) * math.log(part)
