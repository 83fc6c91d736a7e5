"""The dictionary of labels: every name finds its own entry, every kind and source is there."""

import pytest

from cellfuncs import quantities
from cellfuncs.cases import labels
from cellfuncs.errors import CellfuncsError

ENTRIES = labels.dictionary()


@pytest.mark.parametrize("key", ENTRIES)
def test_a_label_finds_itself(key):
    entry = ENTRIES[key]
    assert labels.candidates(entry.label) == (key,)
    assert labels.candidates(entry.label.upper()) == (key,)
    for name in entry.synonyms:
        assert key in labels.candidates(name, sheets=entry.role == "sheet")
    for symbol in entry.symbols:
        own = labels.candidates(symbol, sheets=entry.role == "sheet")
        # a symbol that is another quantity's name as well is that: P beside perimeter
        assert key in own or entry.role == "sheet"
    assert entry.role in ("stated", "choice", "text", "note", "derived", "sheet")
    if entry.role in ("stated", "derived", "sheet"):
        assert entry.kind in quantities.KINDS


@pytest.mark.parametrize("key", [k for k, e in ENTRIES.items() if e.role == "choice"])
def test_choices_read_themselves(key):
    for choice in labels.choices(key):
        assert labels.choice(key, choice) == choice
        assert labels.choice(key, choice.upper()) == choice


def test_case_blocks_keep_their_meaning_of_a_shared_name():
    """A name that sheets use for more stays what it is in a case block."""
    assert labels.candidates("A") == ("flow_area",)
    assert "area" in labels.candidates("A", sheets=True) and "flow_area" in labels.candidates("A", sheets=True)
    assert labels.candidates("lmtd") == ("log_mean_difference",)


def test_a_shared_name_is_settled_by_unit_or_flow_or_asked():
    """Names with several entries: the unit or the flow kind settles them, or the text names all."""
    shared = {
        name: labels.candidates(name)
        for entry in ENTRIES.values()
        if entry.role != "sheet"
        for name in (*entry.synonyms, *entry.symbols)
        if len(labels.candidates(name)) > 1
    }
    assert "flow rate" in shared and "h" in shared
    for name, keys in shared.items():
        units = {quantities.KINDS[ENTRIES[k].kind].units[0] for k in keys if ENTRIES[k].kind}
        flows = {flow for k in keys for flow in ENTRIES[k].flows} or {None}
        settled = set()
        for unit in units | {""}:
            for flow in flows:
                try:
                    settled.add(labels.settle(name, keys, unit, flow))
                except CellfuncsError as error:
                    assert all(ENTRIES[k].label in str(error) for k in keys[:1]) or "may be" in str(error)
        assert settled, name


@pytest.mark.parametrize(
    ("text", "label", "unit"),
    [
        ("Tube ID (mm)", "Tube ID", "mm"),
        ("mean velocity [m/s]", "mean velocity", "m/s"),
        ("velocity (mean)", "velocity", ""),
        ("Diameter (D)", "Diameter", ""),
        ("Length (L)", "Length", ""),
        ("Gap (h)", "Gap", ""),
        ("Velocity (V)", "Velocity", ""),
        ("Velocity [kg]", "Velocity", "kg"),
        ("velocity", "velocity", ""),
        ("(mm)", "(mm)", ""),
    ],
)
def test_units_in_brackets(text, label, unit):
    assert labels.split_unit(text) == (label, unit)
