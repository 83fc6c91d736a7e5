"""What the tests share: calling a cell function, and the case blocks they vary."""

import os

os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")  # as the command line and the hosts set it, before numpy is loaded

import pytest
from hypothesis import settings

from cellfuncs.cells import catalogue

# a loaded machine is no failure: speed is measured by the bench, not by the tests
settings.register_profile("cellfuncs", deadline=None)
settings.load_profile("cellfuncs")


@pytest.fixture(scope="session")
def cf():
    """Call a cell function by its name without the prefix: cf("REYNOLDS", 1.0, ...)."""

    def call(name, *arguments):
        return catalogue.functions()[f"CF_{name}"].call(*arguments)

    return call


@pytest.fixture
def stated_duct():
    """A duct with every property stated, so that Re and Pr can be set at will."""

    def rows(reynolds=500.0, prandtl=5.0, **more):
        """Water-like density and conductivity; viscosity follows from Re, specific heat from Pr."""
        velocity, diameter, density, conductivity = 1.0, 0.02, 1000.0, 0.6
        viscosity = density * velocity * diameter / reynolds
        block = {
            "flow kind": ("duct", ""),
            "velocity": (velocity, "m/s"),
            "diameter": (diameter, "m"),
            "length": (4.0, "m"),
            "inlet temperature": (300.0, "K"),
            "wall temperature": (320.0, "K"),
            "density": (density, "kg/m3"),
            "viscosity": (viscosity, "Pa s"),
            "conductivity": (conductivity, "W/mK"),
            "specific heat": (prandtl * conductivity / viscosity, "J/kgK"),
            "expansion coefficient": (0.0003, "1/K"),
        }
        return as_block(block | more)

    return rows


@pytest.fixture
def stated_plate():
    """A plate with every property stated."""

    def rows(reynolds=1e4, prandtl=0.7, **more):
        velocity, length, density, conductivity = 20.0, 0.5, 1.2, 0.026
        viscosity = density * velocity * length / reynolds
        block = {
            "flow kind": ("plate", ""),
            "velocity": (velocity, "m/s"),
            "length": (length, "m"),
            "stream temperature": (293.0, "K"),
            "wall temperature": (333.0, "K"),
            "density": (density, "kg/m3"),
            "viscosity": (viscosity, "Pa s"),
            "conductivity": (conductivity, "W/mK"),
            "specific heat": (prandtl * conductivity / viscosity, "J/kgK"),
        }
        return as_block(block | more)

    return rows


@pytest.fixture
def stated_gap():
    """A gap with every property stated."""

    def rows(**more):
        block = {
            "flow kind": ("gap", ""),
            "velocity": (5.0, "m/s"),
            "gap": (50e-6, "m"),
            "length": (0.1, "m"),
            "wall temperature": (320.0, "K"),
            "density": (870.0, "kg/m3"),
            "viscosity": (0.03, "Pa s"),
            "conductivity": (0.13, "W/mK"),
            "specific heat": (2000.0, "J/kgK"),
        }
        return as_block(block | more)

    return rows


def as_block(rows):
    """Rows of a block from label -> (value, unit); None drops a row."""
    return [[label, *cells] for label, cells in rows.items() if cells is not None]


@pytest.fixture(scope="session")
def block():
    return as_block
