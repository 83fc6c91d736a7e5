"""Characteristic numbers: each definition of ``groups`` is a relation, its parameters by their labels."""

import inspect

from cellfuncs import groups
from cellfuncs.cases import labels
from cellfuncs.checks.relation import RELATIONS, STAND_INS, Relation

# parameters of groups whose label has another name, or that several labels may fill
_NAMES = {
    "length": "group_length",
    "temperature_difference": "span",
    "stream_length": "length",
    "pressure_difference": "pressure_drop",
    "pressure_absolute": "pressure",
    "coefficient": "any_coefficient",
    "area": "frontal_area",
    "force": "drag_force",
}
# what belongs to a solid body stands in relations of its own
_ELSEWHERE = ("biot", "fourier")


def _parameters(group: groups.Group) -> dict[str, str]:
    return {name: _NAMES.get(name, name) for name in inspect.signature(group.function).parameters}


def _known(name: str) -> bool:
    return name == "group_length" or name in STAND_INS or name in labels.dictionary()


def _declare() -> None:
    for key, group in groups.table().items():
        if key in _ELSEWHERE or key not in labels.dictionary():
            continue
        own = _parameters(group)
        if key == "graetz":
            own["diameter"] = "bore"
        defaults = {n for n, p in inspect.signature(group.function).parameters.items() if p.default is not p.empty}
        if all(map(_known, own.values())):
            needs = tuple(name for name in own if name not in defaults)
            RELATIONS.append(
                Relation(group.name, key, needs, tuple(defaults), group.function, 0.0, group.source, renamed=own)
            )


_declare()
