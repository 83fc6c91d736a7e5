"""What a user may type, for CF_LIST and for drop-down lists."""

from collections.abc import Callable, Mapping

from cellfuncs import groups, quantities, substances
from cellfuncs.cases import labels
from cellfuncs.cases.case import answers_of
from cellfuncs.cells import catalogue, inputs_block
from cellfuncs.errors import UnknownName
from cellfuncs.methods import METHODS
from cellfuncs.terms import EQUATIONS, MEASURES, MOMENTUM_TERMS, TERMS


def _labels(of: str | None) -> list[str]:
    """Labels of a block, of one flow kind where it is named."""
    flow = labels.choice("flow_kind", of) if of else None
    roles = ("stated", "choice", "text")
    entries = labels.dictionary().values()
    return [e.label for e in entries if e.role in roles and (not flow or not e.flows or flow in e.flows)]


def _derived(of: str | None) -> list[str]:
    return [e.label for e in labels.dictionary().values() if e.role in ("stated", "derived")]


def _choices(of: str | None) -> list[str]:
    if not of:
        return [e.label for e in labels.dictionary().values() if e.role == "choice"]
    key = labels.find(of)
    if labels.dictionary()[key].role != "choice":
        raise UnknownName(f'"{of[:40]}" has no list of choices', argument="of")
    return list(labels.choices(key))


def _answers(of: str | None) -> list[str]:
    """Answers, of one flow kind where it is named."""
    return list(answers_of(labels.choice("flow_kind", of)) if of else labels.choices("answer"))


def _units(of: str | None) -> list[str]:
    if of:
        return list(quantities.KINDS[quantities.kind_key(of)].units)
    return list(dict.fromkeys(unit for kind in quantities.KINDS.values() for unit in kind.units))


def _terms(of: str | None) -> list[str]:
    """Terms of one equation where it is named, else of both."""
    if of is None:
        return list(dict.fromkeys((*TERMS, *MOMENTUM_TERMS)))
    by_equation = {"energy": TERMS, "momentum": MOMENTUM_TERMS}
    if of.strip().casefold() not in by_equation:
        raise UnknownName(f'"{of[:40]}" is no equation; write energy or momentum', argument="of")
    return list(by_equation[of.strip().casefold()])


def _methods(of: str | None) -> list[str]:
    """Methods, of one flow kind or of what they give where that is named."""
    if of is None:
        return list(METHODS)
    given = [m.name for m in METHODS.values() if m.gives.casefold() == of.strip().casefold()]
    if given:
        return given
    flow = labels.choice("flow_kind", of)
    return [m.name for m in METHODS.values() if flow in m.flows]


_LISTS: Mapping[str, Callable[[str | None], list[str]]] = {
    "labels": _labels,
    "quantities": _derived,
    "choices": _choices,
    "units": _units,
    "kinds": lambda of: [kind.words for kind in quantities.KINDS.values()],
    "terms": _terms,
    "equations": lambda of: list(EQUATIONS),
    "measures": lambda of: list(MEASURES),
    "answers": _answers,
    "flow kinds": lambda of: list(labels.choices("flow_kind")),
    "properties": lambda of: [p.words for p in substances.PROPERTIES.values()],
    "moist air": lambda of: [p.words for p in substances.MOIST_AIR.values()],
    "substances": lambda of: [name for name, *_ in substances.names(of or "")],
    "methods": _methods,
    "method inputs": inputs_block.input_words,
    "groups": lambda of: [group.name for group in groups.table().values()],
    "functions": lambda of: list(catalogue.functions()),
}


def entries(what: str, of: str | None) -> list[str]:
    """The list ``what``, narrowed by ``of``."""
    plain = " ".join(what.replace("_", " ").split()).casefold()
    for name in (plain, plain + "s"):
        if name in _LISTS:
            return _LISTS[name](of)
    raise UnknownName(f'"{what[:40]}" is no list; write one of: {", ".join(_LISTS)}', argument="what")
