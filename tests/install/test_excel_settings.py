"""The settings file that Excel's side reads, and how paths are spelled in it."""

import csv
import os
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent.parent
sys.path.insert(0, str(ROOT / "install"))

from excel import settings  # noqa: E402


@pytest.fixture
def user(tmp_path, monkeypatch):
    """A user of her own, in a folder with a space and a letter that is not ASCII."""
    home = tmp_path / "Åsa Müller"
    home.mkdir()
    monkeypatch.setenv("USERPROFILE", str(home))
    return home


def as_vba_reads(path):
    """What VBA's `Input #` makes of the file: fields in quotes, in the code page, a record a line."""
    text = path.read_bytes().decode(settings.code_page())
    assert all(line.endswith("\r") for line in text.split("\n")[:-1])
    return dict(csv.reader(text.splitlines()))


def test_the_file_is_where_a_custom_add_in_of_that_name_looks(user):
    assert settings.file() == user / ".cellfuncs" / "cellfuncs.conf"


def test_what_is_written_is_what_vba_reads(user):
    ours = settings.wanted(
        r"C:\Users\Åsa Müller\Cell funcs\.venv\Scripts\python.exe", r"C:\Users\Åsa Müller\Cell, funcs"
    )
    settings.save(ours)
    assert as_vba_reads(settings.file()) == {
        "INTERPRETER_WIN": r"C:\Users\Åsa Müller\Cell funcs\.venv\Scripts\python.exe",
        "PYTHONPATH": r"C:\Users\Åsa Müller\Cell, funcs",
        "UDF MODULES": "cellfuncs.hosts.excel",
        "ADD_WORKBOOK_TO_PYTHONPATH": "False",
    }
    assert settings.load() == ours
    assert os.listdir(user / ".cellfuncs") == ["cellfuncs.conf"]


def test_settings_that_the_user_has_added_stay(user):
    settings.file().parent.mkdir()
    settings.file().write_text('"SHOW CONSOLE","True"\r\n"interpreter_win","C:\\old.exe"\r\n\r\n', "cp1252")
    settings.save({"INTERPRETER_WIN": r"C:\new.exe"})
    assert as_vba_reads(settings.file()) == {"SHOW CONSOLE": "True", "INTERPRETER_WIN": r"C:\new.exe"}


def test_a_damaged_file_is_mended(user):
    settings.file().parent.mkdir()
    settings.file().write_bytes(b'\x81\x00"x\r\n"one"\r\n"A","b","c"')
    settings.save({"INTERPRETER_WIN": "C:\\new.exe"})
    assert settings.load()["INTERPRETER_WIN"] == "C:\\new.exe"


@pytest.mark.parametrize("text", ["", "{", "[1]", "\x00"])
def test_a_damaged_record_counts_as_none(user, text):
    assert settings.load_record() == {}
    settings.record_file().parent.mkdir()
    settings.record_file().write_text(text)
    assert settings.load_record() == {}


def test_removing_takes_our_files_and_nothing_else(user):
    assert settings.remove() == []
    settings.save({"PYTHONPATH": "x"})
    settings.save_record({"add_in": "x"})
    assert settings.remove() == [settings.file(), settings.record_file()]
    assert not settings.folder().exists()
    settings.save({"PYTHONPATH": "x"})
    (settings.folder() / "notes").write_text("mine")
    assert settings.remove() == [settings.file()]
    assert (settings.folder() / "notes").read_text() == "mine"


def test_spaces_and_letters_of_the_code_page_stay_as_they_are():
    for text in ("/a b/Müller & Søn (2)/it's/#1!", "/plain"):
        assert settings.spelled(Path(text)) == text


def test_other_letters_take_the_short_name(monkeypatch):
    monkeypatch.setattr(settings, "short_name", lambda path: "/PROJEK~1/PYTHON~1.EXE")
    assert settings.spelled(Path("/проект/python.exe")) == "/PROJEK~1/PYTHON~1.EXE"


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("/проект/python.exe", "letters that Windows does not know"),
        ("/a;b", "has ; in its name"),
        ("/100 %/x", "has % in its name"),
        ("/a^b;c", "has ; ^ in its name"),
        ("/" + "long/" * 60, "more than 240 characters"),
    ],
)
def test_what_cannot_be_spelled_is_refused_in_words(monkeypatch, text, words):
    monkeypatch.setattr(settings, "short_name", lambda path: path)
    with pytest.raises(ValueError, match=words.replace("^", r"\^")):
        settings.spelled(Path(text))
