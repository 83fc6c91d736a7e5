"""The solved duct beside finite differences (``install/finite_differences.py``), which come to it by their order."""

import importlib.util
from pathlib import Path

import numpy as np
import pytest

from cellfuncs.models.duct import DuctProblem, solve

HELPER = Path(__file__).resolve().parents[2] / "install" / "finite_differences.py"
PLACES = np.array([-0.1, 0.1, 1.0, 1.9])  # x/D


@pytest.fixture(scope="module")
def differences():
    spec = importlib.util.spec_from_file_location("finite_differences", HELPER)
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return module


@pytest.mark.parametrize("peclet", [10.0, 50.0])
def test_differences_come_to_the_solved_duct(differences, peclet):
    """Insulated, heated over 2 D, insulated: errors fall by about four for twice the cells."""
    exact = solve(DuctProblem(peclet=peclet, heated_length=2.0 / peclet)).bulk(PLACES / peclet)
    errors = []
    for cells in (20, 40, 80):
        found = differences.bulk_temperatures(peclet, 2.0, PLACES, cells)
        errors.append(np.abs(found / exact - 1.0))
    order = np.log2(errors[1] / errors[2])
    assert ((order > 1.7) & (order < 2.2)).all(), order
    assert (errors[2] < [0.01, 1e-3, 2e-4, 1.2e-4]).all()


def test_even_cells_feel_the_step(differences):
    """Cells that do not crowd at the step lose an order: why the ratio in the bench is against crowded ones."""
    exact = solve(DuctProblem(peclet=10.0, heated_length=0.2)).bulk(PLACES / 10.0)
    found = [differences.bulk_temperatures(10.0, 2.0, PLACES, cells, crowded=False) for cells in (20, 40)]
    errors = np.abs(np.array(found) / exact - 1.0)
    order = np.log2(errors[0] / errors[1])
    assert (order < 1.5).all()
