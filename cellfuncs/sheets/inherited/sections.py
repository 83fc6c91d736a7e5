"""Which plain areas are what a flow goes through: told by their formula and by what is made of them."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping

from cellfuncs.cases import labels
from cellfuncs.checks.stated import Stated
from cellfuncs.sheets.inherited.links import Links

# a label that names no use: area, A, Area (m²)
_PLAIN = re.compile(r"\W*(the\s+)?(area(\W+a)?|a)\W*([\[(].*)?", re.IGNORECASE)
_PI, _SQUARE = r"(PI\(\)|3\.14\d*)", r"(\([^()]*\)|[^-+*/()]+)\^2"
_CIRCLE = re.compile(rf"={_PI}(/4\*{_SQUARE}|\*{_SQUARE}/4)", re.IGNORECASE)
_HEAT = frozenset(("power", "heat_flux", "thermal_conductance", "heat_transfer_coefficient"))
_FLOWS = frozenset(("volume_flow", "mass_flow"))
_SPEEDS = frozenset(("velocity", "mass_flux"))


def among(stated: Mapping[str, Stated], links: Links) -> Iterator[str]:
    """The cells of plain areas that are sections of a flow."""
    for cell, entry in stated.items():
        if entry.key != "area" or not _PLAIN.fullmatch(entry.label):
            continue
        users = [stated[user] for user in links.users.get(cell, ()) if user in stated]
        if any(_of_a_flow(user, stated, links) for user in users) or (_is_circle(entry) and not _heated(users)):
            yield cell


def _of_a_flow(user: Stated, stated: Mapping[str, Stated], links: Links) -> bool:
    """Whether a formula is flow over area or speed times area."""
    beside = {stated[cell].key for cell in links.graph.get(user.cell, ()) if cell in stated}
    return bool((user.key in _SPEEDS and beside & _FLOWS) or (user.key in _FLOWS and beside & _SPEEDS))


def _is_circle(entry: Stated) -> bool:
    formula = (entry.formula or "").replace(" ", "").replace("$", "")
    return bool(_CIRCLE.fullmatch(formula))


def _heated(users: list[Stated]) -> bool:
    return any(labels.dictionary()[user.key].kind in _HEAT for user in users)
