"""Reads a block of a method's inputs: label, value and, where it has a dimension, unit.

Labels are the words, symbols or names of ``data/method_inputs.csv``, or what a case block calls the same. Besides them
a block may say ``flow kind``, ``method``, ``substance`` and ``pressure`` (for properties that are not given) and
``beyond range``.
"""

from functools import cache
from typing import Any

from cellfuncs import quantities, substances
from cellfuncs.answers import choice
from cellfuncs.answers.told import Told, evaluate, recommended
from cellfuncs.cases import labels
from cellfuncs.errors import CaseRefused, CellfuncsError, UnknownName
from cellfuncs.methods.base import Input, choices_of
from cellfuncs.methods.base import inputs as all_inputs

_OURS = ("flow_kind", "method", "substance", "pressure", "beyond_range", "note")
# what case blocks call an input, where the names differ
_SAME = {
    "volume": None,
    "heated_walls": "heated",
    "flow_direction": "direction",
    "nozzle": "jet",
    "diameter": "diameter",
    "emissivity": "emissivity",
}

Block = tuple[tuple[Any, ...], ...]


def is_case(block: Block) -> bool:
    """Whether a block states a case: it names a flow kind, and none of its rows is a group that a case derives."""
    keys = [_our_key(row[1]) for row in block if isinstance(row[1], str)]
    derived = any(
        labels.dictionary()[key].role == "derived"
        for row in block
        if isinstance(row[1], str) and len(row) > 2 and isinstance(row[2], float)
        for key in labels.candidates(row[1])[:1]
    )
    return "flow_kind" in keys and not derived


def _our_key(label: str) -> str | None:
    return next((key for key in labels.candidates(label) if key in _OURS), None)


def number(block: Block, method: str | None) -> float:
    """The number of a method, named in the cell or the block, or of the one recommended for the flow kind named."""
    told, name, ours = _told(block, method)
    allow = ours.get("beyond_range") == "allow"
    if name is not None:
        return evaluate(told, name, allow)
    flow = ours.get("flow_kind")
    if flow is None:
        why = 'name a method, or add the row "flow kind" so that one can be recommended'
        raise CaseRefused(why, argument="method_name")
    return recommended(told, flow, allow)[1]


def coefficient(block: Block, method: str | None) -> float:
    """The coefficient [W/(m2 K)] of a named method that gives one, or a flux over the wall's superheat."""
    told, name, ours = _told(block, method)
    if name is None:
        raise CaseRefused('name a method, or add the row "flow kind" and what a case needs', argument="method_name")
    found = choice.find(name)
    if found.gives not in ("mean coefficient", "heat flux"):
        raise CaseRefused(
            f"{found.name} gives a {found.gives}; CF_NUSSELT_OF tells it, and a case gives the coefficient",
            argument="method_name",
        )
    value = evaluate(told, name, ours.get("beyond_range") == "allow")
    if found.gives == "mean coefficient":
        return value
    superheat = told.view(found).get("wall_superheat")
    if superheat is None:
        needed = all_inputs()["wall_superheat"].words
        raise CaseRefused(f'{found.name} gives a flux; a coefficient needs the row "{needed}"')
    return value / superheat


def _told(block: Block, method: str | None) -> tuple[Told, str | None, dict[str, Any]]:
    """The inputs of a block, the name of the method, and our own rows."""
    known, ours = _read(block)
    substance = substances.find(ours["substance"]) if "substance" in ours else None
    return Told(known, substance, ours.get("pressure")), method or ours.get("method"), ours


def _read(block: Block) -> tuple[dict[str, Any], dict[str, Any]]:
    """Inputs by their names in Python, and our own rows."""
    known: dict[str, Any] = {}
    ours: dict[str, Any] = {}
    for number_, *cells in block:
        label, value, unit, *_ = (*cells, None, None, None)
        if label is None or value is None:
            continue
        if not isinstance(label, str):
            raise CaseRefused(f"row {number_} begins with the number {label:g}; the first column holds the labels")
        name = input_of(label)
        if name is not None:
            if name in known:
                raise CaseRefused(f'"{label}" is stated twice; keep one')
            known[name] = _value(all_inputs()[name], label, value, unit)
            continue
        key = _our_key(label)
        if key is None:
            raise CaseRefused(f'row {number_}: "{label[:40]}" is no input of a method; {_hint(label)}')
        if key != "note":
            ours[key] = _own(key, label, value, unit)
    return known, ours


def _own(key: str, label: str, value: Any, unit: Any) -> Any:
    if key in ("flow_kind", "beyond_range"):
        return labels.choice(key, value if isinstance(value, str) else f"{value:g}")
    if key == "pressure":
        return _quantity("pressure_absolute", label, value, unit)
    if not isinstance(value, str):
        raise CaseRefused(f'"{label}" is a name; the cell holds the number {value:g}')
    return value


def _value(entry: Input, label: str, value: Any, unit: Any) -> Any:
    if entry.sign == "choice":
        return _choice(entry, label, value)
    if entry.kind:
        return _quantity(entry.kind, label, value, unit)
    if isinstance(value, str):
        return _quantity("dimensionless", label, value, unit)
    if isinstance(unit, str) and not quantities.unit_fits(unit, "dimensionless"):
        raise CaseRefused(f'"{label}" has no dimension, but its unit says {unit[:20]}')
    return value * (quantities.read_unit(unit, "dimensionless").factor if isinstance(unit, str) else 1.0)


def _quantity(kind: str, label: str, value: Any, unit: Any) -> float:
    try:
        if isinstance(value, str):
            return quantities.read_quantity(value if unit is None else f"{value} {unit}", kind)
        if unit is None and kind not in ("fraction", "dimensionless"):
            raise CaseRefused(f"has no unit; write one, for instance {quantities.KINDS[kind].units[0]}")
        found = value if unit is None else quantities.to_si(value, unit, kind)
        quantities.check_physical(found, kind)
        return found
    except CellfuncsError as error:
        raise CaseRefused(f'"{label}": {error}') from None


def _choice(entry: Input, label: str, value: Any) -> str:
    """A choice as methods know it: by a case's spellings where a case has this row, else as written."""
    text = value if isinstance(value, str) else f"{value:g}"
    for key in (entry.parameter, *(k for k, name in _SAME.items() if name == entry.parameter)):
        if key in labels.dictionary() and labels.dictionary()[key].role == "choice":
            try:
                return labels.choice(key, text)
            except UnknownName as error:
                raise CaseRefused(f'"{label}": {error}') from None
    return _known(entry, label, text.strip().casefold()) if entry.parameter != "fitting" else text.strip()


def _known(entry: Input, label: str, text: str) -> str:
    """The word of a choice where methods know it."""
    words = choices_of(entry.parameter)
    if words and text not in words:
        raise CaseRefused(f'"{label}": write {", ".join(words[:-1])} or {words[-1]}, not {text[:40]}')
    return text


@cache
def input_of(label: str) -> str | None:
    """The input that a label means: by its words, symbol or name, or by what a case calls it; None for none."""
    plain = _plain(label)
    for name, entry in all_inputs().items():
        if plain in (_plain(entry.words), _plain(entry.words.split(":")[0]), _plain(name)):
            return name
    for name, entry in all_inputs().items():
        if label.strip().rstrip(":").strip() == entry.symbol:
            return name
    bare, _unit = labels.split_unit(label)
    for key in labels.candidates(label) or labels.candidates(bare):
        if key in _OURS:
            continue
        name = _SAME.get(key, key)
        if name in all_inputs():
            return name
    return None


def _plain(text: str) -> str:
    return " ".join(text.replace("_", " ").replace("-", " ").rstrip(":").split()).casefold()


def _hint(label: str) -> str:
    from rapidfuzz import fuzz, process

    words = [entry.words for entry in all_inputs().values()]
    near, score, _ = process.extractOne(_plain(label), words, scorer=fuzz.WRatio)
    return f'the nearest is "{near[:60]}"' if score >= 60 else '=CF_LIST("method inputs") lists them'


def input_words(of: str | None) -> list[str]:
    """Words of all inputs, or of those that a method takes."""
    names = choice.find(of).inputs if of else tuple(all_inputs())
    return [all_inputs()[name].words for name in names]
