"""What is found of Excel, from a registry and program files made for the test."""

import struct
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent.parent
sys.path.insert(0, str(ROOT / "install"))

from excel import office  # noqa: E402

CONFIGURATION = r"HKLM\SOFTWARE\Microsoft\Office\ClickToRun\Configuration"
OWN = r"HKCU\Software\Microsoft\Office\16.0\Excel\Security"
POLICY = r"HKCU\Software\Policies\Microsoft\Office\16.0\Excel\Security"
MACHINE_POLICY = POLICY.replace("HKCU", "HKLM")


def program_file(path, machine):
    """A file that begins as a Windows program for that machine does (Microsoft's PE format, sections 2 and 3.3.1)."""
    path.parent.mkdir(parents=True, exist_ok=True)
    head = b"MZ" + b"\0" * 58 + struct.pack("<I", 128)
    path.write_bytes(head.ljust(128, b"\0") + b"PE\0\0" + struct.pack("<H", machine) + b"\0" * 18)
    return path


@pytest.fixture
def registry(monkeypatch):
    """(key, name) -> value; the default value of a key has no name."""
    entries = {}
    monkeypatch.setattr(office, "read", lambda place, name="": entries.get((place, name)))
    monkeypatch.setattr(
        office, "values", lambda place: {name: value for (key, name), value in entries.items() if key == place}
    )
    monkeypatch.setattr(office, "subkeys", lambda place: entries.get((place, "keys"), []))
    return entries


@pytest.mark.parametrize(("machine", "bits"), [(0x8664, "64-bit"), (0x14C, "32-bit"), (0xAA64, "ARM64"), (0x1C0, "")])
def test_the_bitness_is_read_from_the_program(tmp_path, machine, bits):
    assert office.bits_of(program_file(tmp_path / "EXCEL.EXE", machine)) == bits


@pytest.mark.parametrize(
    "data", [b"", b"MZ", b"#!/bin/sh\n" * 20, b"MZ" + b"\xff" * 62, b"MZ" + b"\0" * 58 + struct.pack("<I", 10**9)]
)
def test_another_file_has_no_bitness(tmp_path, data):
    (tmp_path / "x").write_bytes(data)
    assert office.bits_of(tmp_path / "x") == ""
    assert office.bits_of(tmp_path / "missing") == ""


@pytest.mark.parametrize(
    ("command", "program"),
    [
        (r"C:\Program Files\Office16\EXCEL.EXE", r"C:\Program Files\Office16\EXCEL.EXE"),
        (r'"C:\Program Files\Office16\EXCEL.EXE" /automation', r"C:\Program Files\Office16\EXCEL.EXE"),
        (r"C:\PROGRA~1\Office16\EXCEL.EXE /automation", r"C:\PROGRA~1\Office16\EXCEL.EXE"),
        ("", None),
        (None, None),
        (1, None),
    ],
)
def test_the_program_of_a_command(command, program):
    assert office.program_in(command) == (Path(program) if program else None)


def test_click_to_run_of_64_bit(tmp_path, registry):
    program = program_file(tmp_path / "root" / "Office16" / "EXCEL.EXE", 0x8664)
    registry[office.PROGRAM_PLACES[1], ""] = str(program)
    registry[r"HKCR\Excel.Application\CurVer", ""] = "Excel.Application.16"
    registry[CONFIGURATION, "Platform"] = "x64"
    assert office.find() == office.Excel(program, "16.0", "64-bit", "Click-to-Run")


def test_an_installer_package_of_32_bit_known_as_a_com_server_only(tmp_path, registry):
    program = program_file(tmp_path / "Office15" / "EXCEL.EXE", 0x14C)
    registry[office.PROGRAM_PLACES[3], ""] = f'"{program}" /automation'
    registry[r"HKCR\Excel.Application\CurVer", ""] = "Excel.Application.15"
    assert office.find() == office.Excel(program, "15.0", "32-bit", "installer package")


def test_a_program_that_cannot_be_read_has_the_bitness_that_is_registered(tmp_path, registry):
    (tmp_path / "EXCEL.EXE").write_bytes(b"")
    registry[office.PROGRAM_PLACES[0], ""] = str(tmp_path / "EXCEL.EXE")
    assert office.find().bits == "unknown bitness"
    registry[CONFIGURATION, "Platform"] = "x86"
    assert office.find().bits == "32-bit"


def test_the_store_edition_is_told_apart(tmp_path, registry):
    program = program_file(tmp_path / "WindowsApps" / "Microsoft.Office.Desktop.Excel" / "EXCEL.EXE", 0x14C)
    registry[office.PROGRAM_PLACES[0], ""] = str(program)
    assert office.find().kind == "Store"
    registry.clear()
    registry[office.PACKAGES, "keys"] = ["Microsoft.Office.Desktop.Excel_16051.1_x86"]
    assert office.find().kind == "Store"


def test_no_excel(registry, tmp_path):
    registry[office.PROGRAM_PLACES[0], ""] = str(tmp_path / "uninstalled" / "EXCEL.EXE")
    registry[office.PACKAGES, "keys"] = ["Microsoft.WindowsCalculator_11"]
    assert office.find() is None


def test_nothing_set_means_no_trust_and_no_obstacle(registry):
    assert office.security("16.0") == office.Security(False, False, False, False, False)


@pytest.mark.parametrize(
    ("entries", "trusts", "by_policy"),
    [
        ({OWN: 1}, True, False),
        ({OWN: 0}, False, False),
        ({OWN: 1, POLICY: 0}, False, True),
        ({OWN: 0, MACHINE_POLICY: 1}, True, True),
        ({POLICY: 1, MACHINE_POLICY: 0}, True, True),
    ],
)
def test_trust_and_who_decides_on_it(registry, entries, trusts, by_policy):
    registry.update({(place, "AccessVBOM"): value for place, value in entries.items()})
    found = office.security("16.0")
    assert (found.trusts_access, found.by_policy) == (trusts, by_policy)


def test_what_keeps_add_ins_from_loading(registry):
    registry[OWN, "DisableAllAddins"] = 1
    registry[OWN, "RequireAddinSig"] = 1
    registry[OWN + r"\Trusted Locations", "AllLocationsDisabled"] = 1
    assert office.security("16.0") == office.Security(False, False, True, True, True)


def test_the_note_of_a_crash_is_found_among_others(registry):
    place = r"HKCU\Software\Microsoft\Office\16.0\Excel\Resiliency\DisabledItems"
    path = r"c:\users\åsa\appdata\roaming\microsoft\excel\xlstart\cellfuncs.xlam"
    registry[place, "1A2B"] = b"\1\0\0\0" + path.encode("utf-16-le") + b"\0\0"
    registry[place, "1A2C"] = b"\1\0\0" + path.encode("utf-16-le")
    registry[place, "FFFF"] = "c:\\other.xlam".encode("utf-16-le")
    registry[place, "number"] = 7
    assert office.disabled_items("16.0", "Cellfuncs.xlam") == [(place, "1A2B"), (place, "1A2C")]


@pytest.mark.parametrize(
    ("output", "is_open"),
    [
        ('"EXCEL.EXE","5108","Console","1","150.000 K"\n', True),
        ("INFO: No tasks are running which match the specified criteria.\n", False),
        ("INFORMATION: Es werden keine Aufgaben mit den angegebenen Kriterien ausgeführt.\n", False),
        ("", False),
    ],
)
def test_an_open_excel_of_this_user(monkeypatch, output, is_open):
    asked = []

    def run(command, **options):
        asked.append(command)
        return subprocess.CompletedProcess(command, 0, output, "")

    monkeypatch.setenv("USERDOMAIN", "PLANT")
    monkeypatch.setenv("USERNAME", "asa")
    monkeypatch.setattr(subprocess, "run", run)
    assert office.is_open() is is_open
    assert asked[0][-1] == r"USERNAME eq PLANT\asa" and "IMAGENAME eq EXCEL.EXE" in asked[0]


def test_without_tasklist_excel_counts_as_closed(monkeypatch):
    def fail(*words, **options):
        raise FileNotFoundError("tasklist")

    monkeypatch.setattr(subprocess, "run", fail)
    assert office.is_open() is False


def test_synced_folders(monkeypatch, tmp_path):
    for name in ("OneDrive", "OneDriveConsumer"):
        monkeypatch.delenv(name, raising=False)
    monkeypatch.setenv("OneDriveCommercial", str(tmp_path / "OneDrive - Plant"))
    assert office.synced(tmp_path / "OneDrive - Plant" / "Cellfuncs")
    assert not office.synced(tmp_path / "OneDrive - Plant 2")
    assert not office.synced(tmp_path)


def test_the_start_folder_is_the_users_own(monkeypatch, tmp_path):
    monkeypatch.setenv("APPDATA", str(tmp_path / "Roaming"))
    assert office.startup_folder() == tmp_path / "Roaming" / "Microsoft" / "Excel" / "XLSTART"
