"""The catalogue refuses at import what a host could not bear, and is complete."""

import pytest

from cellfuncs.cells import catalogue

FUNCTIONS = catalogue.functions()
SETTLED = {
    "CF_IN_UNIT": "value unit wanted",
    "CF_SI": "value unit [kind]",
    "CF_UNIT_FITS": "unit kind",
    "CF_FAULTS": "range",
    "CF_LIST": "what [of]",
    "CF_VERSION": "",
    "CF_PROPERTY": "substance what temperature [pressure] [unit]",
    "CF_PROPERTIES": "substance temperature [pressure]",
    "CF_SATURATION": "substance what phase [temperature] [pressure] [unit]",
    "CF_MOIST_AIR": "what temperature relative_humidity [pressure] [unit]",
    "CF_OIL_VISCOSITY": "temperature temperature_1 viscosity_1 temperature_2 viscosity_2 [unit]",
    "CF_SUBSTANCES": "[contains]",
    "CF_REYNOLDS": "velocity length density viscosity",
    "CF_PRANDTL": "viscosity specific_heat conductivity",
    "CF_PECLET": "velocity length diffusivity",
    "CF_ECKERT": "velocity temperature_difference specific_heat",
    "CF_BRINKMAN": "velocity temperature_difference viscosity conductivity",
    "CF_BLOCK": "labels values [units] [plus_minus]",
    "CF_VARY": "block label value [unit]",
    "CF_CASE": "block what [unit]",
    "CF_TERMS": "block [equation]",
    "CF_TERM": "block term [measure]",
    "CF_PREMISES": "block",
    "CF_GROUPS": "block",
    "CF_VALUE_FOR": "block vary what target [unit]",
    "CF_TERM_LIMIT": "block term vary [level] [unit]",
}
ORDER = [
    "block",
    "substance",
    "velocity",
    "length",
    "time",
    "temperature",
    "temperature_difference",
    "density",
    "viscosity",
    "specific_heat",
    "conductivity",
    "diffusivity",
]


def shown(function):
    return " ".join(f"[{a.name}]" if a.optional else a.name for a in function.arguments)


@pytest.mark.parametrize("name", SETTLED)
def test_settled_names_and_arguments(name):
    assert shown(FUNCTIONS[name]) == SETTLED[name]


def test_twenty_groups():
    assert sum(f.family == "Groups" for f in FUNCTIONS.values()) >= 20


@pytest.mark.parametrize("name", sorted(FUNCTIONS))
def test_arguments_stand_in_the_one_order(name):
    places = [ORDER.index(a.name) for a in FUNCTIONS[name].arguments if a.name in ORDER]
    assert places == sorted(places)


@pytest.mark.parametrize("name", sorted(FUNCTIONS))
def test_texts(name):
    function = FUNCTIONS[name]
    assert function.summary.endswith(".")
    assert len(function.summary) <= 255
    assert function.example.startswith("=")
    assert name in function.example
    assert all(a.help for a in function.arguments)


def define(name="CF_TRIAL", function=None, **more):
    options = {
        "family": "Groups",
        "summary": "A trial.",
        "returns": "number",
        "source": "none",
        "example": "=CF_TRIAL()",
    } | more
    return catalogue.cell_function(name, **options)(function or (lambda velocity: velocity))


@pytest.mark.parametrize(
    ("options", "part"),
    [
        ({"function": lambda case: 1.0, "takes": {"case": "velocity"}}, "reserved"),
        ({"function": lambda to: 1.0, "takes": {"to": "velocity"}}, "reserved"),
        ({"function": lambda Type: 1.0, "takes": {"Type": "velocity"}}, "reserved"),
        ({"function": lambda property: 1.0, "takes": {"property": "velocity"}}, "reserved"),
        ({"function": lambda velocity, Velocity: 1.0, "takes": {"Velocity": "velocity"}}, "case"),
        ({"function": lambda unheard_of: 1.0}, "arguments.csv"),
        ({"function": lambda pressure_difference=None: 1.0}, "zero means something"),
        ({"function": lambda relative_humidity=None: 1.0}, "zero means something"),
        ({"summary": "x" * 300}, "summary"),
        ({"family": "Nowhere"}, "family"),
        ({"source": ""}, "source"),
        ({"name": "CF_REYNOLDS"}, "taken"),
        ({"name": "REYNOLDS"}, "taken, or not CF_"),
    ],
)
def test_what_a_host_could_not_bear_is_refused(options, part):
    before = dict(catalogue._functions)
    with pytest.raises(TypeError, match=part):
        define(**options)
    assert catalogue._functions == before


def test_the_function_itself_is_unchanged():
    from cellfuncs import groups

    assert FUNCTIONS["CF_REYNOLDS"].function is groups.reynolds
