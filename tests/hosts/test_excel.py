"""Excel's side, against the real modules of xlwings for Windows with the modules of pywin32 stubbed.

This file is its own child process: started as a script it puts the stubs in place, imports xlwings as on
Windows, registers our functions and does what a test wrote into its input; see ``excel`` and ``child``.
"""

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent.parent
VARIABLES = os.environ | {"PYTHONPATH": str(ROOT)}

MISSING = -2147352572  # what Excel hands over for an argument that was left out (DISP_E_PARAMNOTFOUND)
DIVISION_BY_ZERO, NOT_AVAILABLE, SPILL = -2146826281, -2146826246, -2146826243  # CVErr 2007, 2042, 2045


def child() -> None:
    """Do the calls on standard input; metadata, VBA text and answers go to standard output as JSON."""
    import collections
    import ctypes
    import datetime
    import decimal
    import types
    from unittest.mock import MagicMock

    class Stub(types.ModuleType):
        __path__ = ()
        __file__ = "stub.dll"

        def __getattr__(self, name):
            if name.startswith("__"):
                raise AttributeError(name)
            made = type(name, (), {})
            setattr(self, name, made)
            return made

    names = [
        *("pywintypes", "pythoncom", "win32api", "win32con", "win32event", "win32gui", "win32process"),
        *("win32timezone", "win32com", "win32com.client", "win32com.client.gencache", "win32com.server"),
        *("win32com.server.dispatcher", "win32com.server.policy", "win32com.server.util"),
    ]
    for name in names:
        sys.modules[name] = Stub(name)
        above, _, last = name.rpartition(".")
        if above:
            setattr(sys.modules[above], last, sys.modules[name])
    sys.modules["pywintypes"].com_error = type("com_error", (Exception,), {})
    sys.modules["pywintypes"].IID = str
    sys.modules["pythoncom"].TypeIIDs = collections.defaultdict(object)
    sys.modules["win32process"].GetWindowThreadProcessId = lambda window: (0, 1)
    for name in ("windll", "oledll", "PyDLL"):
        setattr(ctypes, name, MagicMock())

    import asyncio  # noqa: F401  (loaded before the platform changes its name)
    import concurrent.futures  # noqa: F401

    import numpy  # noqa: F401

    plain, sys.platform = sys.platform, "win32"
    import xlwings

    sys.platform = plain
    from xlwings import com_server, udfs

    assert xlwings.func is udfs.xlfunc, "the real decorators of Windows must be in place"

    def cells(value):
        """A range as COM shows it: its values, and what tells that it is one."""
        made = MagicMock()
        made.Value = value
        rows = value if isinstance(value, tuple) else ((value,),)
        made.Row, made.Column, made.Rows.Count, made.Columns.Count = 1, 1, len(rows), len(rows[0])
        made._oleobj_.GetTypeInfo().GetTypeAttr().iid = "{00020846-0000-0000-C000-000000000046}"
        return made

    class Time(datetime.datetime):
        """Dates of cells come as pywintypes' own kind of datetime."""

    sys.modules["pywintypes"].TimeType = Time

    def handed(value):
        if isinstance(value, dict) and "range" in value:
            inner = value["range"]
            return cells(tuple(map(tuple, inner)) if isinstance(inner, list) else inner)
        if isinstance(value, dict) and "array" in value:
            return tuple(tuple(row) if isinstance(row, list) else row for row in value["array"])
        if isinstance(value, dict) and "currency" in value:
            return decimal.Decimal(value["currency"])
        if isinstance(value, dict) and "date" in value:
            return Time(*value["date"])
        if isinstance(value, dict) and "date in range" in value:
            return cells(Time(*value["date in range"]))
        return value

    def call(name, *values):
        arguments = tuple(handed(value) for value in values)
        return com_server.XLPython().CallUDF("cellfuncs.hosts.excel", name, arguments, None, cells(None))

    asked = json.load(sys.stdin)
    module = udfs.get_udf_module("cellfuncs.hosts.excel", None)

    class Lines:
        text = ""

        def write(self, text):
            self.text += text

    lines, book = Lines(), MagicMock()
    book.Name = "Cellfuncs.xlam"
    udfs.generate_vba_wrapper("cellfuncs.hosts.excel", module, lines, book)
    registered = {}
    for value in vars(module).values():
        if hasattr(value, "__xlfunc__"):
            record = value.__xlfunc__
            registered[record["name"]] = {
                "category": record["category"],
                "doc": record["ret"]["doc"],
                "is where calls look": getattr(module, record["name"]) is value,
                "args": [
                    {
                        "name": one["name"],
                        "doc": one["doc"],
                        "options": one["options"],
                        "optional": "optional" in one,
                    }
                    for one in record["args"]
                ],
            }
    answers = [call(*words) for words in asked]
    kinds = [type(answer).__name__ for answer in answers]
    pro = sorted(name for name in sys.modules if name.startswith("cellfuncs") and "pro" in name.split("."))
    json.dump(
        {"registered": registered, "vba": lines.text, "answers": answers, "kinds": kinds, "pro": pro},
        sys.stdout,
    )


def excel(*calls):
    """What the child answers to these calls."""
    done = subprocess.run(
        [sys.executable, __file__],
        input=json.dumps(calls),
        capture_output=True,
        encoding="utf-8",
        env=VARIABLES,
        timeout=300,
    )
    assert done.returncode == 0, done.stderr
    return json.loads(done.stdout)


REYNOLDS = 2.0 * 0.05 * 998.0 / 0.001

# A case block as cells hold it; every property is stated, so that no table of fluids is needed.
BLOCK = [
    ["Cooling of a tube", None, None],
    ["flow kind", "duct", None],
    ["diameter", 25.0, "mm"],
    ["length", 4.0, "m"],
    ["velocity", 1.2, "m/s"],
    [None, None, None],
    ["inlet temperature", 20.0, "degC"],
    ["wall temperature", 60.0, "degC"],
    ["density", 998.0, "kg/m3"],
    ["viscosity", 1.0, "mPa s"],
    ["conductivity", 0.6, "W/mK"],
    ["specific heat", 4180.0, "J/kgK"],
    ["expansion coefficient", 2e-4, "1/K"],
]

# What Excel hands over, and what has to come back; a text is the start of a fault.
CALLS = {
    "numbers": (["CF_REYNOLDS", 2.0, 0.05, 998.0, 0.001], REYNOLDS),
    "texts": (["CF_REYNOLDS", "2 m/s", "50 mm", "998 kg/m3", "1 cP"], REYNOLDS),
    "single cells": (
        ["CF_REYNOLDS", {"range": 2.0}, {"range": "50 mm"}, {"range": 998.0}, {"range": 0.001}],
        REYNOLDS,
    ),
    "value beside its unit": (
        ["CF_REYNOLDS", {"range": [[200.0, "cm/s"]]}, 0.05, {"range": [[998.0, "kg/m3"]]}, 0.001],
        REYNOLDS,
    ),
    "a column": (
        ["CF_REYNOLDS", {"range": [[2.0], [4.0], ["6 m/s"]]}, 0.05, 998.0, 0.001],
        [[REYNOLDS], [2 * REYNOLDS], [3 * REYNOLDS]],
    ),
    "a row": (
        ["CF_REYNOLDS", {"range": [[2.0, 4.0, 6.0]]}, 0.05, 998.0, 0.001],
        [REYNOLDS, 2 * REYNOLDS, 3 * REYNOLDS],
    ),
    "a computed array": (
        ["CF_REYNOLDS", {"array": [[2.0], [4.0]]}, 0.05, 998.0, 0.001],
        [[REYNOLDS], [2 * REYNOLDS]],
    ),
    "an empty cell": (["CF_REYNOLDS", {"range": None}, 0.05, 998.0, 0.001], "! velocity: "),
    "an empty cell of a column": (
        ["CF_REYNOLDS", {"range": [[2.0], [None]]}, 0.05, 998.0, 0.001],
        [[REYNOLDS], ["! velocity: "]],
    ),
    "an empty text": (["CF_REYNOLDS", "", 0.05, 998.0, 0.001], "! velocity: "),
    "an error cell": (["CF_REYNOLDS", {"range": DIVISION_BY_ZERO}, 0.05, 998.0, 0.001], "! velocity: "),
    "an error from a formula": (["CF_REYNOLDS", NOT_AVAILABLE, 0.05, 998.0, 0.001], "! velocity: "),
    "a newer error": (["CF_REYNOLDS", {"range": SPILL}, 0.05, 998.0, 0.001], "! velocity: "),
    "a newer error from a formula": (["CF_IN_UNIT", SPILL, "K", "K"], "! value: "),
    "errors of a column": (
        ["CF_REYNOLDS", {"range": [[2.0], [SPILL], [DIVISION_BY_ZERO]]}, 0.05, 998.0, 0.001],
        [[REYNOLDS], ["! velocity: "], ["! velocity: "]],
    ),
    "a fault of another cell": (["CF_REYNOLDS", "! length: gone", 0.05, 998.0, 0.001], "! length: gone"),
    "a date": (["CF_REYNOLDS", {"date": [2024, 5, 17]}, 0.05, 998.0, 0.001], "! velocity: "),
    "a date cell": (
        ["CF_REYNOLDS", {"date in range": [2024, 5, 17, 8, 30]}, 0.05, 998.0, 0.001],
        "! velocity: ",
    ),
    "optional left out": (["CF_SI", 25.0, "mm", MISSING], 0.025),
    "optional from an empty cell": (["CF_SI", 25.0, "mm", {"range": None}], 0.025),
    "optional given": (["CF_SI", 25.0, "C", "temperature"], 298.15),
    "currency": (["CF_REYNOLDS", {"currency": "2.0"}, 0.05, 998.0, 0.001], REYNOLDS),
    "a block": (["CF_CASE", {"range": BLOCK}, "reynolds", MISSING], 0.025 * 1.2 * 998.0 / 0.001),
    "a block with an error": (
        ["CF_CASE", {"range": [*BLOCK[:-1], ["expansion coefficient", NOT_AVAILABLE, "1/K"]]}, "reynolds"],
        "! ",
    ),
    "a table back": (["CF_TERMS", {"range": BLOCK}, MISSING], None),
    "a text back": (["CF_VERSION"], None),
    "truth as a number": (["CF_UNIT_FITS", True, "velocity"], "! unit: "),
}


@pytest.fixture(scope="module")
def answered():
    return excel(*(words for words, _ in CALLS.values()))


@pytest.fixture(scope="module")
def catalogue():
    from cellfuncs.cells import catalogue

    return catalogue.functions()


def agrees(answer, wanted):
    if isinstance(wanted, list):
        return len(answer) == len(wanted) and all(map(agrees, answer, wanted))
    if isinstance(wanted, str):
        return isinstance(answer, str) and answer.startswith(wanted)
    return answer == pytest.approx(wanted, rel=1e-12)


@pytest.mark.parametrize("case", [name for name, (_, wanted) in CALLS.items() if wanted is not None])
def test_calls_come_back_right(answered, case):
    place = list(CALLS).index(case)
    answer, wanted = answered["answers"][place], CALLS[case][1]
    assert agrees(answer, wanted), f"{answer!r} instead of {wanted!r}"


def test_the_named_error_is_shown(answered):
    for case, name in (
        ("an error cell", "#DIV/0!"),
        ("a newer error", "#SPILL!"),
        ("an error from a formula", "#N/A"),
    ):
        assert name in answered["answers"][list(CALLS).index(case)]


def test_a_text_comes_back_as_text(answered):
    from cellfuncs import __version__

    assert __version__ in answered["answers"][list(CALLS).index("a text back")]


def test_a_table_comes_back_whole(answered, catalogue):
    table = answered["answers"][list(CALLS).index("a table back")]
    assert table[0][:3] == ["term", "one-scale", "share"]
    assert table == catalogue["CF_TERMS"].call(BLOCK)


def test_every_function_is_registered_with_category_and_help(answered, catalogue):
    registered = answered["registered"]
    assert list(registered) == list(catalogue)
    for name, function in catalogue.items():
        record = registered[name]
        assert record["category"] == function.family
        assert record["doc"] == function.summary
        assert record["is where calls look"]
        assert [one["name"] for one in record["args"]] == [one.name for one in function.arguments]
        assert [one["doc"] for one in record["args"]] == [one.help for one in function.arguments]
        assert [one["optional"] for one in record["args"]] == [one.optional for one in function.arguments]


def test_shape_and_errors_are_asked_for(answered):
    options = [one["options"] for record in answered["registered"].values() for one in record["args"]]
    assert options and all(one == {"ndim": 2, "err_to_str": True} for one in options)


def test_nothing_is_cut_and_the_function_wizard_can_show_it(answered):
    for name, record in answered["registered"].items():
        assert len(record["doc"]) <= 255 and len(record["category"]) <= 255, name
        assert all(len(one["doc"]) <= 255 for one in record["args"]), name
        assert len(record["args"]) + sum(len(one["name"]) for one in record["args"]) <= 254, name
        assert "caller" not in [one["name"] for one in record["args"]], name


def test_vba_declares_the_right_arguments(answered, catalogue):
    lines = [line.strip() for line in answered["vba"].splitlines()]
    declared = [line for line in lines if line.startswith("Function ")]
    wanted = []
    for name in sorted(catalogue):
        words = [("Optional " if one.optional else "") + one.name for one in catalogue[name].arguments]
        wanted.append(f"Function {name}({', '.join(words)})")
    assert declared == wanted
    assert max(map(len, lines)) < 1023, "the longest line that VBA reads"
    reynolds = ", ".join(one.name for one in catalogue["CF_REYNOLDS"].arguments)
    assert f'CF_REYNOLDS = XLPy.CallUDF("cellfuncs.hosts.excel", "CF_REYNOLDS", Array({reynolds})' in answered["vba"]


def test_it_can_be_imported_where_there_is_no_excel(catalogue):
    script = (
        "import sys; from cellfuncs.hosts import excel; print(excel.CF_REYNOLDS(2.0, 0.05, 998.0, 0.001));"
        "print('CoolProp' in sys.modules)"
    )
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, env=VARIABLES)
    assert done.returncode == 0, done.stderr
    number, loaded = done.stdout.split()
    assert float(number) == pytest.approx(REYNOLDS, rel=1e-12)
    assert loaded == "False"


if __name__ == "__main__":
    child()
