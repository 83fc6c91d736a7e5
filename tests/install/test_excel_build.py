"""The add-in, made by the real code of xlwings in a stand-in of Excel; its VBA is read and compared.

This file is its own child process (see `child`), because the stubs of Windows' modules must not stay.
"""

import csv
import json
import os
import re
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent.parent
VARIABLES = os.environ | {"PYTHONPATH": os.pathsep.join(map(str, (ROOT, ROOT / "install", Path(__file__).parent)))}
CONTINUATIONS = 24  # VBA language specification, 3.2.2: logical lines; the editor takes 24 continuations
LONGEST_LINE = 1023


def child() -> None:
    """Make an add-in as standard input says; what Excel has seen goes to standard output."""
    import contextlib
    import io

    import stand_ins

    asked = json.load(sys.stdin)
    stand_ins.windows_modules()
    excel = stand_ins.Excel(asked["startup"], asked["mood"])

    def dispatch(name):
        if asked["mood"] == "does not start":
            raise stand_ins.ComError(-2147221005, "Invalid class string", None, None)
        assert name == "Excel.Application"
        return excel

    sys.modules["win32com.client"].DispatchEx = dispatch
    from excel import build

    with contextlib.redirect_stdout(io.StringIO()) as output:
        code = build.main(["make", asked["template"]])
    json.dump(
        {
            "code": code,
            "told": [json.loads(line) for line in output.getvalue().splitlines() if line.startswith("{")],
            "saved": excel.saved,
            "options": excel.options,
            "ended": excel.ended,
            "closed": excel.closed,
            "alerts": getattr(excel, "DisplayAlerts", None),
            "visible": getattr(excel, "Visible", None),
        },
        sys.stdout,
    )


def quickstart(folder):
    """The template, got in the documented way, really."""
    command = [sys.executable, "-m", "xlwings.cli", "quickstart", "Cellfuncs", "--addin"]
    subprocess.run(command, check=True, cwd=folder, capture_output=True)
    return folder / "Cellfuncs" / "Cellfuncs.xlam"


def made(folder, mood="", before=None):
    template = quickstart(folder)
    startup = folder / "Jürgen Åström" / "XLSTART"
    if before is not None:
        startup.mkdir(parents=True)
        (startup / "Cellfuncs.xlam").write_bytes(before)
    done = subprocess.run(
        [sys.executable, __file__],
        input=json.dumps({"template": str(template), "startup": str(startup), "mood": mood}),
        capture_output=True,
        encoding="utf-8",
        env=VARIABLES,
        timeout=300,
    )
    assert done.returncode == 0, done.stderr
    return json.loads(done.stdout) | {"startup": startup, "template": template}


@pytest.fixture(scope="module")
def add_in(tmp_path_factory):
    return made(tmp_path_factory.mktemp("add in"))


@pytest.fixture(scope="module")
def catalogue():
    from cellfuncs.cells import catalogue

    return catalogue.functions()


@pytest.fixture(scope="module")
def vba(add_in):
    """The module that xlwings made, with continued lines joined."""
    return "\n".join(add_in["saved"]["components"]["xlwings_udfs"]).replace(" _\n", "")


def test_the_add_in_is_made_proved_and_put_where_excel_loads_it(add_in):
    target = add_in["startup"] / "Cellfuncs.xlam"
    assert add_in["code"] == 0
    assert add_in["told"][0] == {"pid": 4711}
    assert add_in["told"][-1]["add_in"] == str(target)
    assert target.read_bytes() == add_in["template"].read_bytes() and target.read_bytes().endswith(
        b"saved by the stand-in"
    )
    assert [path.name for path in add_in["startup"].parent.iterdir()] == ["XLSTART"]
    assert add_in["saved"]["IsAddin"] is True
    assert add_in["saved"]["title"] == "Cellfuncs" and "Cellfuncs 0" in add_in["saved"]["cell"]
    assert add_in["ended"] and add_in["closed"][:2] == [str(add_in["template"]), str(target)]
    assert add_in["visible"] is False and add_in["alerts"] is False


def test_the_template_of_xlwings_is_the_one_known(add_in):
    assert sorted(add_in["saved"]["components"]) == ["Dictionary", "Sheet2", "ThisWorkbook", "xlwings", "xlwings_udfs"]


def test_the_fingerprint_is_that_of_an_add_in_made_now(add_in):
    done = subprocess.run(
        [sys.executable, "-m", "excel.build", "fingerprint"],
        capture_output=True,
        text=True,
        check=True,
        env=VARIABLES,
    )
    assert json.loads(done.stdout) == {"fingerprint": add_in["told"][-1]["fingerprint"]}


def test_settings_come_from_the_users_own_file_alone(add_in):
    text = "\n".join(add_in["saved"]["components"]["xlwings"])
    assert 'Public Const PROJECT_NAME As String = "cellfuncs"' in text
    body = re.search(r"^Function GetConfig\(.*?^End Function", text, re.DOTALL | re.MULTILINE)[0]
    asked_first = re.findall(r"^    If (source = .*) Then$", body, re.MULTILINE)
    assert asked_first == ['source = "sheet"', 'source = "directory"', 'source = "" Or source = "user"']
    # A third argument would name a source of its own: nobody gives one.
    plainly = re.findall(r'GetConfig\("[A-Z_ ]+"(?:, (?:"\w*"|True|False|Environ\("Temp"\)))?\)', text)
    assert len(plainly) == text.count('GetConfig("') > 20


def test_the_server_is_started_apart_from_folders_and_packages_of_others(add_in):
    text = "\n".join(add_in["saved"]["components"]["xlwings"])
    body = re.search(r"^Function XLPyCommand\(.*?^End Function", text, re.DOTALL | re.MULTILINE)[0]
    excel_part = body.split("#Else")[0]
    assert "FullName" not in excel_part
    assert ' -I -B -c ""import sys, os;' in body


@pytest.mark.parametrize("before", [None, b"the add-in of last year"])
@pytest.mark.parametrize("mood", ["trust off", "macros off", "server fails", "wrong", "does not start"])
def test_what_goes_wrong_is_told_and_what_was_there_stays(tmp_path, mood, before):
    words = {
        "trust off": "Trust access to the VBA",
        "macros off": "macros are switched off there",
        "server fails": "'Could not load xlwings64-0.0.0.dll",
        "wrong": "a cell with =CF_REYNOLDS(2,0.05,998,0.001) shows 99801.0",
        "does not start": "Excel did not start (Invalid class string)",
    }
    result = made(tmp_path, mood, before)
    assert result["code"] == 1
    assert words[mood] in result["told"][-1]["trouble"]
    assert "\n" not in result["told"][-1]["trouble"]
    there = {path.name: path.read_bytes() for path in result["startup"].parent.rglob("*") if path.is_file()}
    assert there == ({"Cellfuncs.xlam": before} if before else {})
    if mood in ("macros off", "server fails", "wrong"):
        assert str(result["startup"] / "Cellfuncs.xlam") in result["closed"], "an open file could not be taken back"
    assert result["ended"] or mood == "does not start"


def test_every_function_is_declared_as_in_the_catalogue(vba, catalogue):
    declared = dict(re.findall(r"^Function (\w+)\((.*)\)$", vba, re.MULTILINE))
    wanted = {
        name: ", ".join(("Optional " if one.optional else "") + one.name for one in function.arguments)
        for name, function in catalogue.items()
    }
    assert declared == wanted


def test_every_function_calls_its_own_with_its_arguments_in_order(vba, catalogue):
    for name, function in catalogue.items():
        body = re.search(rf"^Function {name}\(.*?^End Function$", vba, re.DOTALL | re.MULTILINE)[0]
        given = ", ".join(one.name for one in function.arguments)
        call = f'{name} = XLPy.CallUDF("cellfuncs.hosts.excel", "{name}", Array({given}), ActiveWorkbook,'
        assert call in body
        assert f"{name} = Err.Description" in body


def test_blocks_of_the_vba_are_closed(vba):
    opened = []
    pairs = {"End Function": "Function", "#End If": "#If", "#Else": "#If"}
    for line in map(str.strip, vba.splitlines()):
        if line.startswith(("Function ", "#If ")):
            opened.append(line.split()[0])
        for end, start in pairs.items():
            if line == end:
                assert opened and opened[-1] == start, line
                if end != "#Else":
                    opened.pop()
    assert opened == []


def test_no_name_is_reserved_and_none_stands_for_two_things(add_in, vba, catalogue):
    with (ROOT / "cellfuncs" / "data" / "reserved_names.csv").open(encoding="utf-8", newline="") as file:
        reserved = {row["name"].casefold() for row in csv.DictReader(file)}
    assert {"byref", "optional", "to", "type", "property"} <= reserved
    own = "\n".join(add_in["saved"]["components"]["xlwings"])
    declared = re.findall(r"^\s*(?:Public |Private )?(?:Function|Sub|Const) (\w+)", own, re.MULTILINE | re.IGNORECASE)
    assert "XLPy" in declared
    taken = {name.casefold() for name in declared} | {"app", "failed"}
    for name, arguments in re.findall(r"^Function (\w+)\((.*)\)$", vba, re.MULTILINE):
        names = [name, *(one.removeprefix("Optional ") for one in arguments.split(", ") if one)]
        folded = [one.casefold() for one in names]
        assert len(set(folded)) == len(folded), name
        assert not set(folded) & (reserved | taken), name
        assert all(re.fullmatch(r"[A-Za-z]\w{0,254}", one, re.ASCII) for one in names), name
        # A name that is also the address of a cell (CF1) cannot be a worksheet function.
        assert not re.fullmatch(r"[A-Z]{1,3}\d+", name)
    assert len({name.casefold() for name in catalogue}) == len(catalogue)


def test_the_vba_is_plain_and_its_lines_are_short_enough(add_in):
    lines = add_in["saved"]["components"]["xlwings_udfs"]
    assert all(line.isascii() and len(line) <= LONGEST_LINE for line in lines)
    run = longest = 0
    for line in lines:
        run = run + 1 if line.endswith(" _") else 0
        longest = max(longest, run)
    assert longest <= CONTINUATIONS


def test_help_reaches_the_function_wizard_whole(add_in, catalogue):
    options = {name.partition("!")[2]: given for name, given in add_in["options"]}
    assert [name.partition("!")[0] for name, _ in add_in["options"]] == ["'Cellfuncs.xlam'"] * len(catalogue)
    assert list(options) == sorted(catalogue)
    for name, function in catalogue.items():
        assert options[name]["Description"] == function.summary
        assert options[name]["Category"] == function.family
        assert (options[name]["ArgumentDescriptions"] or []) == [one.help for one in function.arguments]


def test_the_module_is_imported_as_the_server_does_it_in_a_bare_environment(add_in, tmp_path):
    """Through the very words that the add-in's VBA hands to Python, beside files that would shadow ours."""
    text = "\n".join(add_in["saved"]["components"]["xlwings"])
    tail = re.search(r"^\s*tail = \"(.*)\"$", text, re.MULTILINE)[1]
    path = f"False;;;;;;{tmp_path / 'an Übung' / 'project & more'}"
    (tmp_path / "an Übung").mkdir()
    (tmp_path / "an Übung" / "project & more").symlink_to(ROOT, target_is_directory=True)
    assert tail.count('" & LicenseKeyEnvString & "') == tail.count('" & PYTHONPATH & "') == 1
    tail = tail.replace('" & LicenseKeyEnvString & "', "").replace('" & PYTHONPATH & "', path)
    switches, script = re.fullmatch(r' (.*) -c ""(.*)""', tail).groups()
    script = script.replace('\\""', '"')
    assert script.endswith("import xlwings; xlwings.serve('$(CLSID)')")
    script = script.replace(
        "xlwings.serve('$(CLSID)')",
        "from importlib import import_module; host = import_module('cellfuncs.hosts.excel');"
        "print(host.CF_REYNOLDS(2.0, 0.05, 998.0, 0.001), host.__file__)",
    )
    for shadow in ("xlwings.py", "cellfuncs.py", "os.py", "json.py", "numpy.py"):
        (tmp_path / shadow).write_text("raise SystemExit('shadowed')")
    bare = {"PYTHONPATH": str(tmp_path), "PYTHONHOME": "/nowhere"}
    bare |= {name: os.environ[name] for name in ("SYSTEMROOT",) if name in os.environ}
    done = subprocess.run(
        [sys.executable, *switches.split(), "-c", script],
        env=bare,
        cwd=tmp_path,
        capture_output=True,
        encoding="utf-8",
        errors="replace",
    )
    assert done.returncode == 0, done.stderr
    number, place = done.stdout.split(" ", 1)
    assert float(number) == pytest.approx(2 * 0.05 * 998 / 0.001, rel=1e-12)
    assert Path(place.strip()).resolve() == ROOT / "cellfuncs" / "hosts" / "excel.py"


def test_another_module_of_xlwings_is_refused_in_words():
    sys.path.insert(0, str(ROOT / "install"))
    from excel import build

    known = "\n".join(old for old, _, _ in build.CHANGES)
    assert build.changed(known) == "\n".join(new for _, new, _ in build.CHANGES)
    for lacking in (known.replace("tail", "head"), known + "\n" + build.CHANGES[0][0]):
        with pytest.raises(build.Refused, match=r"install the version in install/lock\.txt"):
            build.changed(lacking)


if __name__ == "__main__":
    child()
