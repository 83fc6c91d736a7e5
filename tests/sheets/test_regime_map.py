"""`cellfuncs map`: the block found in a workbook, the picture drawn, what is refused, and nothing half written."""

import struct

import pytest
import xlsxwriter

from cellfuncs import cli
from cellfuncs.cases import read_case
from cellfuncs.errors import BookRefused, NoModel
from cellfuncs.sheets import regime_book, regime_picture
from cellfuncs.terms.regimes import regime_map

ROWS = [
    ["flow kind", "duct", "", ""], ["density", 850.0, "kg/m3", ""], ["viscosity", 2e-4, "Pa s", ""],
    ["specific heat", 1000.0, "J/kgK", ""], ["conductivity", 25.0, "W/mK", "5 %"], ["velocity", 0.03, "m/s", "10 %"],
    ["diameter", 10.0, "mm", ""], ["length", 20.0, "mm", "5 %"], ["inlet temperature", 300.0, "degC", ""],
    ["wall temperature", 350.0, "degC", 1.0],
]  # fmt: skip


@pytest.fixture
def book(tmp_path):
    """A workbook with the block under two names, and a name that is none."""
    path = tmp_path / "metal.xlsx"
    with xlsxwriter.Workbook(path) as written:
        sheet = written.add_worksheet("The case")
        for k, row in enumerate(ROWS):
            for m, cell in enumerate(row):
                sheet.write(k + 2, m + 1, cell)
        written.define_name("metal", "='The case'!$B$3:$E$14")
        written.define_name("metal_values", "='The case'!$B$3:$D$14")
        written.define_name("corner", "='The case'!$A$1:$B$2")
    return path


def test_the_widest_name_of_a_block_is_taken(book):
    name, rows = regime_book.block_of(book, None)
    assert name == "metal"
    assert read_case(rows).stated["velocity"].plus_minus == pytest.approx(0.003)
    assert regime_book.block_of(book, "METAL_values")[0] == "metal_values"


@pytest.mark.parametrize("name", ["corner", "nothing"])
def test_a_name_that_is_no_block_is_refused(book, name):
    with pytest.raises(BookRefused, match=f"{name} is no name of this workbook for a case block"):
        regime_book.block_of(book, name)


def test_two_blocks_ask_for_a_name(tmp_path):
    path = tmp_path / "two.xlsx"
    with xlsxwriter.Workbook(path) as written:
        sheet = written.add_worksheet("A")
        for side in (0, 6):
            for k, row in enumerate(ROWS):
                for m, cell in enumerate(row):
                    sheet.write(k, m + side, cell if side == 0 or row[0] != "velocity" or m != 1 else 0.5)
        written.define_name("slow", "=A!$A$1:$D$10")
        written.define_name("fast", "=A!$G$1:$J$10")
    with pytest.raises(BookRefused, match="several case blocks: fast, slow; write --block NAME"):
        regime_book.block_of(path, None)
    assert read_case(regime_book.block_of(path, "fast")[1]).get("velocity") == 0.5


def test_the_picture_is_drawn_and_the_book_untouched(book, tmp_path, capsys):
    before = book.read_bytes()
    target = tmp_path / "map.png"
    code = cli.main([
        "map", str(book), "--term", "conduction along", "--x", "velocity", "--y", "length", "--points", "5",
        "--png", str(target),
    ])  # fmt: skip
    assert code == 0
    data = target.read_bytes()
    assert data.startswith(b"\x89PNG\r\n\x1a\n")
    width, height = struct.unpack(">II", data[16:24])
    assert width > 1000 and height > 800
    said = capsys.readouterr()
    assert "metal: conduction along over velocity and length: " in said.out and said.err == ""
    assert book.read_bytes() == before
    assert [p.name for p in tmp_path.iterdir() if p.suffix not in (".xlsx", ".png")] == []


def test_one_worker_and_two_see_the_same(book):
    case = read_case(regime_book.block_of(book, None)[1])
    found = regime_map(case, "conduction along", "velocity", "length", 4)
    assert list(regime_picture._columns(found, 1)) == list(regime_picture._columns(found, 2))


def test_the_region_of_the_uncertainty_has_the_rows_that_move_it(book):
    """Velocity moves one axis, length the other; conductivity moves neither row."""
    case = read_case(regime_book.block_of(book, None)[1])
    moves = regime_map(case, "conduction along", "velocity", "length", 3).spread()
    assert sorted(tuple(round(m, 4) for m in move) for move in moves) == [
        (0.0, 0.0),
        (0.0, 0.0),
        (0.0, 0.0488),
        (0.0953, 0.0),
    ]
    pe = regime_map(case, "conduction along", "peclet", "length", 3).spread()
    assert any(m[0] < -0.04 for m in pe) and any(m[0] > 0.09 for m in pe)  # conductivity and velocity


def test_an_interrupt_writes_nothing(book, tmp_path, monkeypatch):
    target = tmp_path / "map.png"

    def interrupted(*_):
        raise KeyboardInterrupt

    monkeypatch.setattr(regime_picture, "_picture", interrupted)
    code = cli.main(["map", str(book), "--term", "conduction along", "--points", "3", "--png", str(target)])
    assert code == cli.INTERRUPTED and not target.exists()


@pytest.mark.parametrize(
    ("arguments", "part"),
    [
        (["--png", "map.jpg"], "the picture is a .png"),
        (["--term", "advection", "--png", "m.png"], "has one verdict everywhere"),
        (["--term", "warmth", "--png", "m.png"], "is not known"),
        (["--x", "substance", "--png", "m.png"], "substance"),
        (["--points", "2", "--png", "m.png"], "from 3 to 101"),
        (["--block", "other", "--png", "m.png"], "is no name of this workbook"),
        (["--png", "no/such/folder/m.png", "--points", "3"], "Cannot write"),
    ],
)
def test_what_cannot_be_drawn_is_told(book, capsys, arguments, part, tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    assert cli.main(["map", str(book), *arguments]) == 2
    assert part in capsys.readouterr().err
    assert not list(tmp_path.glob("*.png"))


def test_a_term_with_no_size_has_no_map(book):
    case = read_case(regime_book.block_of(book, None)[1])
    with pytest.raises(NoModel):
        regime_map(case, "conduction across")
