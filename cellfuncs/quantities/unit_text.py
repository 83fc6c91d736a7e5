"""The reader of unit texts: closed, bounded, our own.

A text is cut into factors (`_factors`), each factor into units of the table (`_meanings_of`), and
all that the text may mean comes back as `Meaning`s, ordered by how far they are from the table's
spelling. Which of them holds is settled in ``convert`` by the kind that is wanted.

What stands after a solidus is below it, whatever joins it; a second solidus divides again; `*`
after a solidus is refused. A hyphen joins; between a unit and a digit it is the sign of a power.
"""

import itertools
import re
from dataclasses import dataclass
from fractions import Fraction

from ..errors import UnitRefused
from . import atoms, clean
from .atoms import EXACT, LOOSE, LOOSE_SPLIT, SPLIT, Atom, Piece
from .kinds import NO_DIMENSION, Dimension, read_dimension
from .texts import shortened

MOST_FACTORS = 8
HIGHEST_POWER = 4
MOST_GLUED = 14  # letters of a word that is taken apart
MOST_COMBINATIONS = 48

LENGTH, TEMPERATURE = read_dimension("L"), read_dimension("Θ")

_TOKEN = re.compile(
    r"""[ ]?(?:
    (?P<word>Δ[CFRKcfrk](?![A-Za-z])|°[CFRKEcfrke]|%RH|%|[A-Za-zμΩÅ]+%?|[‰'"°])(?P<power>\^[+-]?\d+|-?\d+(?![\d]))?
    |(?P<number>\d+)
    |(?P<open>\()
    |(?P<close>\))(?P<group_power>\^[+-]?\d+|\d+)?
    |(?P<sign>[/*·.-])
    )""",
    re.VERBOSE,
)
_DIMENSIONLESS = frozenset(("-", "--", "1", "[-]", "(-)"))
_BELOW_NUMBERS = ("100", "1000")  # Pa per 100 m, ft per 1000 ft
_OFFSETS = {"°C": Fraction("273.15"), "°F": Fraction(45967, 180)}


@dataclass(frozen=True, slots=True)
class Factor:
    """A word with its own power; ``side`` is 1 above the solidus, -1 below, times a bracket's power."""

    word: str
    power: int
    side: int


@dataclass(frozen=True, slots=True, eq=False)
class Meaning:
    """One thing that a unit text may mean."""

    dimension: Dimension
    rank: int
    pieces: tuple[tuple[Piece, int], ...]
    divisor: int

    @property
    def factor(self) -> Fraction:
        """SI value of one such unit (turns in radians)."""
        result = Fraction(1, self.divisor)
        for piece, power in self.pieces:
            value = piece.atom.factor
            if piece.prefix:
                value *= Fraction(10) ** atoms.PREFIXES[piece.prefix]
            result *= value**power
        return result

    @property
    def single(self) -> Atom | None:
        """The atom, when the text is one unit to the first power."""
        if len(self.pieces) == 1 and self.pieces[0][1] == 1 and self.divisor == 1:
            return self.pieces[0][0].atom
        return None

    @property
    def offset(self) -> Fraction:
        """What is added for a temperature."""
        single = self.single
        return _OFFSETS.get(single.symbol, Fraction(0)) if single else Fraction(0)

    @property
    def is_difference(self) -> bool:
        return self.single is not None and self.single.symbol.startswith("Δ")

    def allows(self, kind: str) -> bool:
        """Whether none of its units is reserved for other kinds."""
        return all(not piece.atom.kinds or kind in piece.atom.kinds for piece, _ in self.pieces)

    def text(self, swap: dict[str, str] | None = None) -> str:
        """The understood form: ``W/(m²·K)``."""
        above, below = [], []
        for piece, power in self.pieces:
            symbol = piece.atom.symbol
            symbol = piece.prefix + (swap or {}).get(symbol, symbol)
            side = above if power > 0 else below
            if piece.atom.place == "column":
                symbol = side.pop() + symbol
            side.append(symbol + _superscript(abs(power)))
        if self.divisor != 1:
            below[0] = f"{self.divisor} {below[0]}"
        head = "·".join(above) or "1"
        if not below:
            return head if above else "-"
        return f"{head}/{below[0]}" if len(below) == 1 else f"{head}/({'·'.join(below)})"


def _superscript(power: int) -> str:
    return "" if power == 1 else "⁰¹²³⁴"[power] if power <= HIGHEST_POWER else f"^{power}"


def meanings(text: str) -> list[Meaning]:
    """All that a unit text may mean, nearest to the table's spelling first.

    Raises
    ------
    UnitRefused
        When it cannot be read, or holds something that is refused by name.
    """
    plain = clean.clean(text)
    if plain in _DIMENSIONLESS:
        return [Meaning(NO_DIMENSION, EXACT, (), 1)]
    factors, divisor = _factors(plain, text)
    alone = len(factors) == 1 and factors[0].power == factors[0].side == divisor == 1
    choices = [_meanings_of(factor.word, alone, text) for factor in factors]
    found = []
    for combination in itertools.islice(itertools.product(*choices), MOST_COMBINATIONS):
        pieces = []
        for factor, (_, glued) in zip(factors, combination, strict=True):
            pieces += [(piece, factor.side) for piece in glued[:-1]]
            pieces.append((glued[-1], factor.side * factor.power))
        if not _columns_stand(pieces) or any(p.atom.place == "once" and abs(n) != 1 for p, n in pieces):
            continue
        if len(pieces) > MOST_FACTORS:
            raise UnitRefused(f'"{shortened(text)}" has more than {MOST_FACTORS} factors')
        dimension = tuple(
            sum(piece.atom.dimension[place] * power for piece, power in pieces) for place in range(len(NO_DIMENSION))
        )
        found.append(Meaning(dimension, max(rank for rank, _ in combination), tuple(pieces), divisor))
    if not found:
        raise UnitRefused(f'"{shortened(text)}" is no known unit')
    found.sort(key=lambda meaning: meaning.rank)
    return found


def _columns_stand(pieces: list[tuple[Piece, int]]) -> bool:
    """Whether each column of water or mercury follows its height: mmHg, in w.c."""
    heights = [None, *pieces[:-1]]
    return all(
        before is not None and before[0].atom.dimension == LENGTH and before[1] == power
        for before, (piece, power) in zip(heights, pieces, strict=True)
        if piece.atom.place == "column"
    )


def _factors(plain: str, text: str) -> tuple[list[Factor], int]:
    """Cut a plain text into words with signed powers; also a number below the solidus."""
    shown = shortened(text)
    factors: list[Factor] = []
    divisor = 1
    outer, below, group_start = 1, False, -1
    joined = True  # whether a factor may or must follow: start, or after a sign
    after_solidus = False
    position = 0
    while position < len(plain):
        token = _TOKEN.match(plain, position)
        if not token:
            raise UnitRefused(f'"{shown}" cannot be read as a unit at "{shortened(plain[position:], 10)}"')
        position = token.end()
        sign = -1 if below else 1
        if token["word"]:
            power = _power(token["power"], shown)
            if below and power < 0:
                raise UnitRefused(
                    f'"{shown}" has a negative power below the solidus; write it above, or without the sign'
                )
            factors.append(Factor(token["word"], power, outer * sign))
            joined = after_solidus = False
        elif token["number"]:
            number = token["number"]
            if number == "1" and not factors and joined and not after_solidus:
                pass
            elif number in _BELOW_NUMBERS and after_solidus and divisor == 1 and outer == 1:
                divisor = int(number)
            else:
                raise UnitRefused(f'"{shown}" holds the number {number[:10]}; put it into the value')
            joined = after_solidus = False
        elif token["open"]:
            if group_start >= 0:
                raise UnitRefused(f'"{shown}" has a bracket in a bracket; write it with one')
            group_start = len(factors)
            outer, below, outer_below = sign, False, below
            joined, after_solidus = True, False
        elif token["close"]:
            if group_start < 0 or joined:
                raise UnitRefused(f'"{shown}" has a bracket too many, or an empty one')
            if token["group_power"]:
                power = _power(token["group_power"], shown)
                factors[group_start:] = [Factor(f.word, f.power, f.side * power) for f in factors[group_start:]]
            group_start, outer, below = -1, 1, outer_below
            joined = False
        else:
            operator = token["sign"].strip()
            if operator == "/":
                if joined and (factors or after_solidus):
                    raise UnitRefused(f'"{shown}" has two signs in a row')
                below = after_solidus = joined = True
            elif operator == "." and not joined and _ends_abbreviation(plain, position):
                pass
            elif joined:
                raise UnitRefused(f'"{shown}" has two signs in a row')
            elif operator == "*" and below:
                raise UnitRefused(
                    f'"{shown}" leaves open what stands below the solidus; write the lower part in brackets'
                )
            else:
                joined, after_solidus = True, False
    if group_start >= 0 or joined:
        raise UnitRefused(f'"{shown}" breaks off; write the whole unit')
    if len(factors) > MOST_FACTORS:
        raise UnitRefused(f'"{shown}" has more than {MOST_FACTORS} factors')
    if any(abs(factor.power * factor.side) > HIGHEST_POWER for factor in factors):
        raise UnitRefused(f'"{shown}" has a power beyond {HIGHEST_POWER}')
    return factors, divisor


def _ends_abbreviation(plain: str, position: int) -> bool:
    """Whether the dot before ``position`` belongs to an abbreviation: ``in. w.c.``, ``hr.``"""
    return plain[position : position + 1] in ("", " ", "/", ")", "-", "·", "*")


def _power(text: str | None, shown: str) -> int:
    if not text:
        return 1
    power = int(text.lstrip("^")) if len(text) <= 4 else 99
    if not 0 < abs(power) <= HIGHEST_POWER:
        raise UnitRefused(f'"{shown}" has a power outside -{HIGHEST_POWER} to {HIGHEST_POWER}')
    return power


Choice = tuple[int, list[Piece]]


def _meanings_of(word: str, alone: bool, text: str) -> list[Choice]:
    """What one word may mean: a unit as spelled, glued units, then both in any case."""
    choices: list[Choice] = []
    exact = _usable(atoms.whole(word), alone, text)
    choices += [(EXACT, [piece]) for piece in exact]
    loose = _usable(atoms.whole_in_any_case(word), alone, text, may_refuse=not exact)
    if not exact or word == "ms":  # kg/ms is a viscosity as well as a flow
        choices += [(SPLIT, glued) for glued in _glued(word, atoms.whole)]
    known = [(piece.atom, piece.prefix) for piece in exact]
    choices += [(LOOSE, [piece]) for piece in loose if (piece.atom, piece.prefix) not in known]
    if not exact and not loose:
        choices += [(LOOSE_SPLIT, glued) for glued in _glued(word, atoms.whole_in_any_case)]
    if not choices:
        raise UnitRefused(f'"{shortened(word, 20)}" is no known unit')
    return choices


def _usable(pieces: list[Piece], alone: bool, text: str, may_refuse: bool = True) -> list[Piece]:
    """The pieces that may stand here; one that is refused by name raises."""
    kept = []
    for piece in pieces:
        atom = piece.atom
        if atom.place == "alone" and not alone:
            continue
        if piece.prefix and atom.dimension == TEMPERATURE and not alone:
            continue  # mK in W/mK is metre kelvin
        kept.append(piece)
    refused = [piece.atom.refuse for piece in kept if piece.atom.refuse]
    if refused and may_refuse:
        raise UnitRefused(f'"{shortened(text)}" {refused[0]}')
    return [piece for piece in kept if not piece.atom.refuse]


def _glued(word: str, lookup) -> list[list[Piece]]:
    """The ways to take a word apart into the fewest units: ``mPas``, ``kgK``, ``mmHg``."""
    if not 2 <= len(word) <= MOST_GLUED:
        return []
    ways: list[list[list[Piece]]] = [[] for _ in range(len(word))] + [[[]]]
    for start in range(len(word) - 1, -1, -1):
        found: list[list[Piece]] = []
        for end in range(start + 1, len(word) + 1):
            if not ways[end] or (start == 0 and end == len(word)):
                continue
            for piece in lookup(word[start:end]):
                if _may_be_glued(piece, last=end == len(word)):
                    found += [[piece, *rest] for rest in ways[end]]
        fewest = min(map(len, found), default=0)
        ways[start] = [way for way in found if len(way) == fewest][:6]
    return ways[0]


def _may_be_glued(piece: Piece, last: bool) -> bool:
    atom = piece.atom
    if atom.place not in ("joins", "column") or atom.refuse:
        return False
    if atom.dimension == TEMPERATURE:
        return last and not piece.prefix
    return not (piece.prefix and atom.symbol == "s")  # Nms is newton metre second
