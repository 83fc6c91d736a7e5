"""The measure of a formula's result from the measures of the cells it uses."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from typing import Any

from cellfuncs.sheets.dimensions import measure as m
from cellfuncs.sheets.dimensions.measure import NONE, NUMBER, PRESSURE, TEMPERATURE, UNKNOWN, Measure, alike

ATMOSPHERE = 101325.0  # Pa, NIST SP 811 (2008) B.8
_ZEROS = (0.0, 273.15, 255.372)  # K: shifts of K, °C and °F
_NEAR_ZERO = 0.7  # K: 273 for 273.15
_NEAR_ATMOSPHERE = 0.03  # relative: 1 bar for 1.013

_SAME = frozenset(("ABS", "ROUND", "ROUNDUP", "ROUNDDOWN", "INT", "TRUNC", "CEILING", "FLOOR", "MROUND", "N", "FIXED",
                   "IFERROR", "IFNA", "SUBTOTAL", "CEILING.MATH", "FLOOR.MATH"))  # fmt: skip
_ALIKE = frozenset(("SUM", "AVERAGE", "MAX", "MIN", "MEDIAN", "LARGE", "SMALL"))
_OF_NUMBERS = frozenset(("EXP", "SINH", "COSH", "TANH", "ASIN", "ACOS", "ATAN", "ASINH", "ACOSH", "ATANH"))
_OF_ANGLES = frozenset(("SIN", "COS", "TAN"))
_LOGS = frozenset(("LN", "LOG10", "LOG"))


@dataclass(frozen=True)
class Problem:
    """Something that cannot be right in a formula, whatever is stated: the code of the cause, and words."""

    code: str
    words: str


@dataclass
class Derivation:
    """A formula's tree walked with the measures of its references (``_r1_`` is the first)."""

    targets: Sequence[Measure | tuple[Measure, ...]]
    names: Callable[[str], Measure]
    problems: list[Problem] = field(default_factory=list)

    def result(self, tree: Mapping[str, Any]) -> Measure:
        """The measure of the whole formula."""
        return m.settled(self._no_log(self.of(tree)))

    def _no_log(self, measure: Measure) -> Measure:
        """Tell of the logarithm of something with a unit that is not taken from another such logarithm."""
        if measure.log_of is None:
            return measure
        if not measure.empirical:
            self.problems.append(
                Problem("dimension-mismatch", f"takes the logarithm of {words(Measure(measure.log_of))}")
            )
        return UNKNOWN

    def of(self, tree: Mapping[str, Any]) -> Measure:
        """The measure of a node."""
        kind = tree.get("node_type")
        if kind == "Literal":
            value = tree.get("value")
            number = isinstance(value, (int, float)) and not isinstance(value, bool)
            return m.literal(float(value)) if number else UNKNOWN
        if kind == "Reference":
            found = self._reference(tree["reference"])
            return found if isinstance(found, Measure) else UNKNOWN
        if kind == "UnaryOp":
            return self._unary(tree)
        if kind == "BinaryOp":
            return self._binary(tree)
        if kind == "Function":
            return self._function(tree)
        return UNKNOWN

    def _reference(self, text: str) -> Measure | tuple[Measure, ...]:
        if text.startswith("_r") and text.endswith("_") and text[2:-1].isdigit():
            place = int(text[2:-1]) - 1
            return self.targets[place] if place < len(self.targets) else UNKNOWN
        return self.names(text)

    def _unary(self, tree: Mapping[str, Any]) -> Measure:
        inner = self.of(tree["operand"])
        if tree["operator"] == "%":
            return m.times(inner, m.literal(0.01))
        if tree["operator"] == "-" and inner.known:
            if inner.literal:
                return m.literal(-inner.value)
            return replace(inner, weight=-inner.weight, shift=-inner.shift)
        return inner

    def _binary(self, tree: Mapping[str, Any]) -> Measure:
        sign = tree["operator"]
        one, other = self.of(tree["left"]), self.of(tree["right"])
        if sign not in ("+", "-"):
            one, other = self._no_log(one), self._no_log(other)
        if sign == "*":
            return m.times(one, other)
        if sign == "/":
            return self._over(one, other)
        if sign == "^":
            return self._power(one, other)
        if sign in "+-":
            return self._sum(one, other, 1.0 if sign == "+" else -1.0)
        return NUMBER if sign in ("=", "<", ">", "<=", ">=", "<>") else UNKNOWN

    def _over(self, one: Measure, other: Measure) -> Measure:
        if one.known and other.known and other.literal and other.value == 0:
            return UNKNOWN
        return m.times(one, other, -1.0)

    def _power(self, base: Measure, exponent: Measure) -> Measure:
        if not (base.known and exponent.known):
            return UNKNOWN
        if exponent.literal:
            if base.literal:
                try:
                    return m.literal(float(base.value**exponent.value))
                except (ArithmeticError, TypeError, ValueError):
                    return UNKNOWN
            return m.raised(base, exponent.value)
        if base.literal or alike(base.dimension, NONE):
            return NUMBER
        return UNKNOWN

    # -- sums --------------------------------------------------------------------------------------------

    def _sum(self, one: Measure, other: Measure, sign: float) -> Measure:
        if not (one.known and other.known):
            return UNKNOWN
        if one.literal and other.literal:
            return m.literal(one.value + sign * other.value)
        one, other = m.settled(one), m.settled(other)
        if one.literal:
            other = replace(other, weight=sign * other.weight, shift=sign * other.shift)
            return self._with_number(other, one.value, 1.0)
        if other.literal:
            return self._with_number(one, other.value, sign)
        if (one.log_of is None) != (other.log_of is None):
            self._no_log(one)
            self._no_log(other)
            return UNKNOWN
        if one.log_of is not None and other.log_of is not None:
            together = tuple(a + sign * b for a, b in zip(one.log_of, other.log_of, strict=True))
            return NUMBER if alike(together, NONE) else UNKNOWN
        return self._joined(one, other, sign)

    def _with_number(self, measure: Measure, number: float, sign: float) -> Measure:
        """A measure and a plain number: a change of the zero, or a number in the same unit."""
        if alike(measure.dimension, NONE):
            return replace(measure, factor=1.0, log_of=None, literals=()) if m.scaled_to(measure, 1.0) else UNKNOWN
        mixed = measure.weight == 0.0 and abs(measure.shift) > 1.0
        if (m.is_point(measure) or mixed) and alike(measure.dimension, TEMPERATURE):
            shift = measure.shift - sign * number * measure.factor
            for zero in (0.0,) if mixed else _ZEROS:
                if abs(shift - zero) < _NEAR_ZERO and abs(number) > 30.0:
                    return replace(measure, shift=zero)
        if m.is_point(measure) and alike(measure.dimension, PRESSURE):
            step = sign * number * measure.factor
            for product, _ in m.subsets(measure.literals):
                if abs(abs(step / product) - ATMOSPHERE) < _NEAR_ATMOSPHERE * ATMOSPHERE:
                    shift = 0.0 if measure.shift > 0 and step > 0 else measure.shift - math.copysign(ATMOSPHERE, step)
                    return replace(measure, shift=shift if abs(shift) > 1e-6 * ATMOSPHERE else 0.0)
        return replace(measure, empirical=measure.empirical or number not in (0.0, 1.0), log_of=None)

    def _joined(self, one: Measure, other: Measure, sign: float) -> Measure:
        """The sum or difference of two measures."""
        if not alike(one.dimension, other.dimension):
            if one.odd or other.odd:
                return UNKNOWN
            self.problems.append(Problem("dimension-mismatch", f"adds {words(one)} and {words(other)}"))
            return UNKNOWN
        same = one.literals == other.literals
        factor = one.factor if same and math.isclose(one.factor, other.factor, rel_tol=1e-9) else None
        kept = one.literals if factor is not None else ()
        factor = factor or m.common_factor(one, other)
        if factor is None:
            if one.odd or other.odd:
                return UNKNOWN
            ratio = one.factor / other.factor
            self.problems.append(
                Problem("unit-factor", f"adds numbers of one quantity in units that differ by a factor {ratio:.4g}")
            )
            return UNKNOWN
        shift, weight = one.shift + sign * other.shift, one.weight + sign * other.weight
        weight = 0.0 if abs(weight) < 1e-9 else weight
        return Measure(
            one.dimension,
            factor,
            shift,
            weight,
            literals=kept,
            empirical=one.empirical or other.empirical,
            marks=one.marks | other.marks,
        )

    # -- functions ---------------------------------------------------------------------------------------

    def _function(self, tree: Mapping[str, Any]) -> Measure:
        name = str(tree.get("name", "")).upper().removeprefix("_XLFN.").removeprefix("_XLWS.")
        args = tree.get("args") or []
        if name == "PI":
            return m.literal(math.pi)
        if name == "SQRT" and len(args) == 1:
            return m.raised(self.of(args[0]), 0.5)
        if name == "POWER" and len(args) == 2:
            return self._power(self.of(args[0]), self.of(args[1]))
        if name in _SAME and args:
            place = 1 if name == "SUBTOTAL" and len(args) > 1 else 0
            return self.of(args[place])
        if name == "IF" and len(args) >= 2:
            return self._either([self.of(arg) for arg in args[1:3]])
        if name == "IFS" and len(args) >= 2:
            return self._either([self.of(arg) for arg in args[1::2]])
        if name in _ALIKE and args:
            return self._together(name, args)
        if name == "PRODUCT" and args:
            result = self.of(args[0])
            for arg in args[1:]:
                result = m.times(result, self.of(arg))
            return result
        if name in _LOGS and args:
            return self._logarithm(self.of(args[0]))
        if name in _OF_NUMBERS and args:
            self._needs_number(self.of(args[0]), "the exponential" if name == "EXP" else f"the function {name}")
            return NUMBER
        if name in _OF_ANGLES:
            return NUMBER
        if name in ("RADIANS", "DEGREES") and args:
            return NUMBER
        return UNKNOWN

    def _either(self, branches: Sequence[Measure]) -> Measure:
        """What one of several branches gives."""
        real = [b for b in branches if b.known and not b.literal]
        if not real:
            return branches[0] if all(b.known for b in branches) else UNKNOWN
        first = real[0]
        for other in real[1:]:
            if not alike(first.dimension, other.dimension) or m.common_factor(first, other) is None:
                return UNKNOWN
        factor = first.factor
        for other in real[1:]:
            factor = m.common_factor(first, other) or factor
        literals = first.literals if len(real) == 1 else ()
        return replace(first, factor=factor, literals=literals)

    def _together(self, name: str, args: Sequence[Mapping[str, Any]]) -> Measure:
        """A sum, mean or extreme of many."""
        parts: list[Measure] = []
        for arg in args[: 1 if name in ("LARGE", "SMALL") else None]:
            found = self._reference(arg["reference"]) if arg.get("node_type") == "Reference" else self.of(arg)
            parts += found if isinstance(found, tuple) else [found]
        if name in ("MAX", "MIN"):
            parts = [p for p in parts if not p.literal] or parts
        if not parts or not all(p.known for p in parts):
            return UNKNOWN
        if all(p.literal for p in parts):
            return UNKNOWN
        parts = [m.settled(p) for p in parts]
        result = next(p for p in parts if not p.literal)
        for part in parts:
            if part.literal:
                continue
            if not alike(result.dimension, part.dimension):
                if not (result.odd or part.odd):
                    words_of = f"puts {words(result)} and {words(part)} together in {name}"
                    self.problems.append(Problem("dimension-mismatch", words_of))
                return UNKNOWN
            if m.common_factor(result, part) is None or abs(result.shift - part.shift) > 1.0:
                return UNKNOWN
        if name == "SUM" and len(parts) > 1:
            return replace(result, weight=result.weight * len(parts), shift=result.shift * len(parts))
        return result

    def _logarithm(self, inner: Measure) -> Measure:
        if not inner.known:
            return UNKNOWN
        if inner.literal:
            return NUMBER
        if alike(inner.dimension, NONE):
            self._needs_number(inner, "the logarithm")
            return NUMBER
        return replace(NUMBER, log_of=inner.dimension, empirical=inner.odd)

    def _needs_number(self, inner: Measure, what: str) -> None:
        """Tell of the exponential or logarithm of something with a unit."""
        if not inner.known or inner.odd or inner.literal:
            return
        if not alike(inner.dimension, NONE):
            self.problems.append(Problem("dimension-mismatch", f"takes {what} of {words(inner)}"))
        elif not m.scaled_to(inner, 1.0):
            self.problems.append(
                Problem("unit-factor", f"takes {what} of a ratio whose units differ by a factor {inner.factor:.4g}")
            )


def words(measure: Measure) -> str:
    """A measure as a kind of quantity, or as its SI unit."""
    from cellfuncs.sheets.dimensions.cells import kind_words

    return kind_words(measure.dimension)
