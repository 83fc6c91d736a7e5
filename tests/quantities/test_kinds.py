"""The table of kinds, and names of kinds."""

import pytest

from cellfuncs import quantities
from cellfuncs.errors import OutOfRange, UnknownName
from cellfuncs.quantities import KINDS


def test_there_are_enough_kinds():
    assert len(KINDS) >= 70


@pytest.mark.parametrize("kind", KINDS)
def test_usual_units_and_the_example_are_of_the_kind(kind):
    assert KINDS[kind].units
    for unit in KINDS[kind].units:
        assert kind in quantities.kinds_for(unit), unit
    si = quantities.read_quantity(quantities.example(kind), kind)
    quantities.check_physical(si, kind)


@pytest.mark.parametrize("kind", KINDS)
def test_the_si_unit_has_factor_one(kind):
    if kind == "pressure_gauge":
        assert quantities.read_unit("Pa g", kind).factor == 1
        return
    text = "-" if KINDS[kind].si_unit == "1" else KINDS[kind].si_unit
    unit = quantities.read_unit(text, kind)
    assert (unit.factor, unit.offset) == (1, 0)


@pytest.mark.parametrize(
    ("text", "key"),
    [
        ("dynamic viscosity", "dynamic_viscosity"),
        ("Dynamic_Viscosity", "dynamic_viscosity"),
        ("viscosity", "dynamic_viscosity"),
        (" Heat-transfer  coefficient ", "heat_transfer_coefficient"),
        ("pressure", "pressure_absolute"),
        ("pressure drop", "pressure_difference"),
        ("temperature", "temperature"),
        ("temperature difference", "temperature_difference"),
        ("conductivity", "thermal_conductivity"),
        ("speed", "velocity"),
        ("delta T", "temperature_difference"),
        ("UA", "thermal_conductance"),
    ],
)
def test_a_kind_is_found_by_its_names(text, key):
    assert quantities.kind_key(text) == key


def test_an_unknown_kind_names_the_nearest():
    with pytest.raises(UnknownName, match="dynamic viscosity"):
        quantities.kind_key("dynamic viscosty")
    with pytest.raises(UnknownName):
        quantities.kind_key("§" * 5000)


def test_no_name_of_a_kind_stands_for_another():
    for kind in KINDS.values():
        assert quantities.kind_key(kind.words) == kind.name
        assert quantities.kind_key(kind.name) == kind.name


@pytest.mark.parametrize(
    ("si", "kind"),
    [
        (-0.5, "temperature"),
        (-1.0, "pressure_absolute"),
        (-1.0, "density"),
        (0.0, "density"),
        (float("nan"), "velocity"),
        (float("inf"), "power"),
    ],
)
def test_what_cannot_be_is_refused(si, kind):
    with pytest.raises(OutOfRange):
        quantities.check_physical(si, kind)


def test_what_can_be_passes():
    for si, kind in (
        (0.0, "temperature"),
        (-5.0, "temperature_difference"),
        (-2.0, "velocity"),
        (0.0, "length"),
    ):
        quantities.check_physical(si, kind)


def test_arrays_are_checked_whole():
    import numpy as np

    quantities.check_physical(np.array([300.0, 350.0]), "temperature")
    quantities.check_physical(np.array([]), "temperature")
    for bad in (-1.0, np.nan, np.inf):
        with pytest.raises(OutOfRange):
            quantities.check_physical(np.array([300.0, bad]), "temperature")
