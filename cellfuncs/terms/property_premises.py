"""Premises of constant properties: the change between the wall and where properties are taken, and its correction.

A property that is r times as large at the wall asks for a correction r^n (viscosity: r^−n of the coefficient). The
limit is the change for which that is the tolerance, (1 + tolerance)^(1/n) − 1.
"""

from cellfuncs.answers.internal import RATIOS
from cellfuncs.errors import NoModel
from cellfuncs.methods import METHODS
from cellfuncs.terms.facts import Facts
from cellfuncs.terms.figure import Figure
from cellfuncs.terms.one_phase import celsius
from cellfuncs.terms.size import num
from cellfuncs.terms.thresholds import FAILS, HOLDS, STRAINED, threshold


def viscosity(f: Facts) -> Figure:
    """Change of viscosity as the coefficient feels it."""
    return _changed(f, "viscosity", "constant viscosity", "coefficient", -1.0)


def viscosity_friction(f: Facts) -> Figure:
    """Change of viscosity as friction feels it, for liquids."""
    if f.flow not in ("duct", "gap"):
        raise NoModel("concerns ducts and films")
    if f.case.substance is not None and f.phase == "gas":
        raise NoModel("a gas: its friction follows the change of density")
    limits = "constant viscosity, friction" if f.laminar else "constant viscosity, turbulent friction"
    return _changed(f, "viscosity", limits, "friction")


def conductivity(f: Facts) -> Figure:
    return _changed(f, "conductivity", "constant conductivity", "coefficient")


def density(f: Facts) -> Figure:
    return _changed(f, "density", "constant density", "coefficient")


def specific_heat(f: Facts) -> Figure:
    return _changed(f, "specific_heat", "constant specific heat", "coefficient")


def _changed(f: Facts, name: str, limits: str, what: str, sign: float = 1.0) -> Figure:
    here, there = getattr(f.properties, name), getattr(f.far_properties(), name)
    ratio = there / here
    row = threshold(limits)
    change = max(ratio, 1.0 / ratio) - 1.0
    strained, fails = (
        (1.0 + times * f.case.tolerance) ** (1.0 / row.exponent) - 1.0 for times in (row.strained, row.fails)
    )
    where, temperature = f.far
    asks = f"correct the {what} by a factor {num(ratio ** (sign * row.exponent))}"
    if f.family != "through":
        asks = "one temperature stands for both"
    elif counted := _counted(f, what):
        asks = counted
    return Figure(
        change,
        f"{num(here)} at {celsius(f.temperature)} where properties are taken, {num(there)} at the {where}, "
        f"{celsius(temperature)}: {asks}",
        limits=limits,
        limit=strained,
        state=FAILS if change >= fails else STRAINED if change >= strained else HOLDS,
    )


def _counted(f: Facts, what: str) -> str:
    """Words where the coefficient or the friction of a duct counts changing properties already; empty else."""
    values = getattr(f.answers, "values", None)
    if values is None:
        return ""
    if what == "friction":
        return f"the friction counts a factor {num(values.friction_factor)}" if values.friction_factor != 1.0 else ""
    if values.words:
        return f"the coefficient counts a factor {num(values.nusselt_factor)} ({values.words})"
    method = METHODS.get(f.answers.chosen.nusselt)
    counts = method is not None and not RATIOS.isdisjoint(method.inputs)
    return f"the method ({method.name}) counts it" if counts else ""
