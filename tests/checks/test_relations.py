"""The declared list: enough of them, known labels, each solved for whichever of its quantities is wanted."""

import math
import random

import pytest

from cellfuncs.cases import labels
from cellfuncs.checks.relation import STAND_INS, solve
from cellfuncs.checks.relations import RELATIONS
from cellfuncs.checks.resolve import evaluate
from cellfuncs.checks.stated import SheetCase

PLAIN = [r for r in RELATIONS if not r.takes_case]
# SI values in which every relation can answer
TYPICAL = {
    "temperature": 350.0,
    "temperature_difference": 20.0,
    "pressure_absolute": 3e5,
    "pressure_gauge": 3e5,
    "length": 0.5,
    "fraction": 0.6,
    "dimensionless": 3.0,
    "dynamic_viscosity": 1e-3,
    "kinematic_viscosity": 1e-6,
    "density": 900.0,
    "specific_heat": 2000.0,
}
DISTINCT = {
    "diameter": 0.05,
    "outside_diameter": 0.06,
    "insulation_diameter": 0.1,
    "core_diameter": 0.02,
    "wall_thickness": 0.005,
    "hot_inlet_temperature": 400.0,
    "hot_outlet_temperature": 370.0,
    "cold_outlet_temperature": 330.0,
    "cold_inlet_temperature": 300.0,
    "wall_temperature": 420.0,
    "inlet_temperature": 300.0,
    "outlet_temperature": 340.0,
    "initial_temperature": 500.0,
    "final_temperature": 400.0,
    "stream_temperature": 310.0,
    "second_wall_temperature": 380.0,
}


def words(relation):
    return f"{relation.name}-{relation.gives}"


def test_there_are_at_least_sixty():
    assert len({r.name for r in RELATIONS}) >= 60


@pytest.mark.parametrize("relation", RELATIONS, ids=words)
def test_labels_are_known_and_a_source_is_named(relation):
    known = labels.dictionary()
    case = SheetCase("any")
    for need in (relation.gives, *relation.needs, *relation.optional):
        for key in relation.keys_for(need, case):
            assert key in known, key
    assert relation.source


def _typical(key, rng):
    name = STAND_INS.get(key, (key,))[0]
    name = "diameter" if name == "group_length" else name
    if name in DISTINCT:
        return DISTINCT[name]
    kind = labels.dictionary()[name].kind
    return TYPICAL.get(kind, 5.0) * rng.uniform(0.9, 1.1)


@pytest.mark.parametrize("relation", PLAIN, ids=words)
def test_it_is_solved_for_each_of_its_quantities(relation):
    """What a relation gives, put back, gives each input again."""
    rng = random.Random(relation.name)
    case = SheetCase("any")
    renamed = relation.renamed or {}
    values = {need: _typical(renamed.get(need, need), rng) for need in relation.needs}
    answers = evaluate(relation, case, values)
    if not answers:
        pytest.skip("the typical values lie outside what it is for")
    target = answers[0].value
    assert math.isfinite(target)
    for name in relation.needs:
        start = values[name] * 1.005

        def forward(x, name=name):
            found = evaluate(relation, case, {**values, name: x})
            if not found:
                raise ValueError
            return found[0].value

        if abs(forward(values[name] * 1.001) - target) <= 1e-13 * abs(target):
            continue  # of two capacity rates only the smaller one counts
        found = solve(forward, target, start)
        assert found is not None, name
        assert forward(found) == pytest.approx(target, rel=1e-7), name


def test_a_root_far_from_the_start_is_found():
    assert solve(lambda x: x**3, 27.0, 0.01) == pytest.approx(3.0)
    assert solve(lambda x: 5.0 - x, 2.0, 0.5) == pytest.approx(3.0)
    assert solve(lambda x: 1.0 + x * x, -1.0, 0.5) is None
