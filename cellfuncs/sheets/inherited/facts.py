"""What texts say beside the numbers: substances, arrangement, methods, regime, what is neglected."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, field
from functools import lru_cache
from typing import Any

from cellfuncs import substances
from cellfuncs.cases import labels
from cellfuncs.errors import CellfuncsError
from cellfuncs.sheets.inherited import texts
from cellfuncs.sheets.inherited.page import Page, Spot
from cellfuncs.sources import read_table

_LONGEST = 400
_NEGLECT = re.compile(
    r"\b(?:neglect\w*|ignor\w*|omit\w*|disregard\w*|not considered|left out|without|no allowance for|negligible|no)\b",
    re.IGNORECASE,
)
_NOT = re.compile(
    r"\bnot (?:be )?(?:neglect|ignor|omit|negligible)\w*|\bcannot be neglected"
    r"|^\s*(?:where|whether|when|which|if|how|why|is|are|can|may)\b|\?\s*$",
    re.IGNORECASE,
)
_HOT = re.compile(r"\b(?:hot|warm|hotter)\b", re.IGNORECASE)
_COLD = re.compile(r"\b(?:cold|cooler|colder)\b", re.IGNORECASE)
# families whose names are also ordinary words in sheets do not count outside a row that asks for a substance
_IN_TEXTS = frozenset(("pure fluid", "solution", "moist air", "thermal oil", "liquid"))
_ORDINARY = frozenset(("d4", "d5", "d6", "md2m", "neon", "r", "lead", "tin", "ice", "salt"))
_SHARE = re.compile(r"[a-z][a-z ]*[a-z][ ,(]*\d[\d.]* ?%(?: by (?:mass|weight|volume)| ?[wv]/[wv])?", re.IGNORECASE)
SIDES = ("hot", "cold")
_PIPE = re.compile(r"\b(?:pipe|pipes|pipeline|tube|tubes|bore|duct)\b", re.IGNORECASE)
_AROUND = re.compile(
    r"\b(?:insulat\w*|lagging|bare|heat loss|outside|outer|od|ambient|surface temp\w*|shell|hot|cold|bank|bundle"
    r"|cross.?flow|fin|fins)\b",
    re.IGNORECASE,
)
_PIPE_LABELS = 2


@dataclass
class Facts:
    """What a sheet or block says, and the cell of each."""

    said: dict[str, Any] = field(default_factory=dict)
    cells: dict[str, str] = field(default_factory=dict)

    def put(self, key: str, value: Any, cell: str) -> None:
        """The first that is said counts; methods and what is neglected are gathered."""
        if key in ("neglects", "method"):
            listed = self.said.setdefault(key, [])
            if value not in listed:
                listed.append(value)
                self.cells.setdefault(key, cell)
                self.cells[f"{key} {value}"] = cell
                self.cells[f"{key}:{value}"] = cell
        elif key not in self.said:
            self.said[key] = value
            self.cells[key] = cell


@lru_cache(maxsize=1)
def _patterns() -> tuple[tuple[str, str, re.Pattern[str]], ...]:
    found = []
    for row in read_table("sheet_facts.csv"):
        words = "|".join(re.escape(word) for word in row["words"].split(";"))
        found.append((row["fact"], row["value"], re.compile(rf"(?<!\w)(?:{words})(?!\w)", re.IGNORECASE)))
    return tuple(found)


@lru_cache(maxsize=1)
def _terms() -> tuple[tuple[str, re.Pattern[str]], ...]:
    found = []
    for row in read_table("term_names.csv"):
        words = "|".join(re.escape(word) for word in (row["term"], *filter(None, row["names"].split(";"))))
        found.append((row["term"], re.compile(rf"(?<!\w)(?:{words})(?!\w)", re.IGNORECASE)))
    return tuple(found)


@lru_cache(maxsize=1)
def _substance_words() -> Mapping[str, str]:
    """Names in small letters that count as a substance wherever they stand, and what they mean; nothing for one that
    needs its concentration."""
    table: dict[str, str] = {}
    for name, family, others in substances.names():
        if family in _IN_TEXTS:
            needs_share = "%" in name
            for word in (name.split(",")[0], *others.split(", ")):
                word = word.strip().casefold()
                if len(word) >= 3 and word not in _ORDINARY:
                    table.setdefault(word, "" if needs_share else name)
    table["air"] = "air"
    return table


@lru_cache(maxsize=4096)
def side_of(text: str) -> str:
    """``hot`` or ``cold`` where a text names one stream of an exchanger."""
    hot, cold = _HOT.search(text), _COLD.search(text)
    return "" if bool(hot) == bool(cold) else "hot" if hot else "cold"


Written = list[tuple[Spot, str]]


def written_on(page: Page) -> Written:
    """The texts of a sheet in reading order, without what our own functions say."""
    return sorted(
        (spot, value)
        for spot, value in page.values.items()
        if isinstance(value, str) and len(value) <= _LONGEST and not _is_ours(page, spot)
    )


def _is_ours(page: Page, spot: Spot) -> bool:
    formula = page.formulas.get(spot)
    return formula is not None and "CF_" in formula.text.upper()


def facts_of(page: Page, written: Written | None = None) -> Facts:
    """What the texts of a sheet say, or some of them; the sheet's name counts as one."""
    facts = Facts()
    if written is None:
        written = written_on(page)
    for spot, text in written:
        _rows_that_ask(page, spot, text, facts)
    for spot, text in ((1, 1), page.name), *written:
        _said(text, page.address(spot), facts)
    _flow_of_labels([text for _, text in written], page, facts)
    if not any(key.endswith("substance") for key in facts.said):
        for spot, text in ((1, 1), page.name), *written:
            name = substance_in(text)
            if name:
                facts.put("substance", name, page.address(spot))
                break
    return facts


def _flow_of_labels(written: list[str], page: Page, facts: Facts) -> None:
    """Labels that speak of pipes and tubes, and of nothing around them, make a duct."""
    if "flow" in facts.said or any(map(_AROUND.search, written)):
        return
    if sum(map(bool, map(_PIPE.search, written))) >= _PIPE_LABELS:
        facts.put("flow", "duct", page.address((1, 1)))


def _rows_that_ask(page: Page, spot: Spot, text: str, facts: Facts) -> None:
    """``Fluid | water``, ``Correlation | Gnielinski``, and rows with a choice of case blocks."""
    row, column = spot
    beside = next((v for v in (page.at(row, column + step) for step in (1, 2)) if v is not None), None)
    head, colon, tail = text.partition(":")
    value = tail.strip() if colon and tail.strip() else beside.strip() if isinstance(beside, str) else ""
    if not value:
        return
    label = head if colon else text
    keys = {k.key for name in texts.label_in(label).names for k in texts.known(name)}
    where = page.address(spot)
    if "substance" in keys or re.search(r"\b(?:fluid|medium|coolant|substance)\b", label, re.IGNORECASE):
        try:
            named = substances.find(value).name and value
        except CellfuncsError:
            named = substance_in(value)
        if named:
            side = side_of(label)
            facts.put(f"{side}_substance" if side else "substance", named, where)
    for key in keys:
        entry = labels.dictionary()[key]
        if entry.role != "choice":
            continue
        try:
            chosen = labels.choice(key, value)
        except CellfuncsError:
            continue
        facts.put("flow" if key == "flow_kind" else key, chosen, where)


def _said(text: str, where: str, facts: Facts) -> None:
    for fact, value, pattern in _patterns():
        if pattern.search(text):
            facts.put(fact, value, where)
    if _NEGLECT.search(text) and not _NOT.search(text):
        for term, pattern in _terms():
            if pattern.search(text):
                facts.put("neglects", term, where)


def substance_in(text: str) -> str:
    """The substance that a text names somewhere, the longest name first; empty where none does."""
    words = re.findall(r"[a-z0-9%.()\-]+", text.casefold())[:30]
    known = _substance_words()
    for length in (4, 3, 2, 1):
        for start in range(len(words) - length + 1):
            name = " ".join(words[start : start + length]).strip(".()")
            if name in known:
                return known[name] or _with_share(text)
    return ""


def _with_share(text: str) -> str:
    """``ethylene glycol 30 % by mass`` somewhere in a text; empty where no concentration stands there."""
    match = re.search(
        r"[a-z][a-z ]*[a-z][ ,(]*\d[\d.]* ?%(?: by (?:mass|weight|volume)| ?[wv]/[wv])?", text, re.IGNORECASE
    )
    if match is None:
        return ""
    try:
        return substances.find(match[0].replace("(", " ")) and match[0]
    except CellfuncsError:
        return ""
