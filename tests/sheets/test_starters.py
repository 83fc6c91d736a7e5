"""Starters: one for every flow kind, free of faults, protected with their inputs open."""

import openpyxl
import pytest

from cellfuncs.cases import labels
from cellfuncs.hosts import embedded
from cellfuncs.sheets import starters


def test_every_flow_kind_has_one():
    assert set(starters.kinds()) == set(labels.choices("flow_kind"))


@pytest.mark.parametrize("kind", starters.kinds())
def test_a_starter_recalculates_without_a_fault(kind, tmp_path):
    raw, out = tmp_path / "raw.xlsx", tmp_path / "starter.xlsx"
    starters.write_starter(kind, raw)
    embedded.recalc(raw, out, apart=True)  # in a process of its own, as the command line does it
    book = openpyxl.load_workbook(out, data_only=True)
    assert book.sheetnames == ["Contents", "Case", "Premises"]
    sheet = book["Case"]
    texts = [cell.value for row in sheet.iter_rows() for cell in row if isinstance(cell.value, str)]
    assert not [text for text in texts if text.startswith("! ")]
    assert sheet["B3"].value == 0
    assert sheet.protection.sheet and not sheet.protection.password
    assert not sheet["B8"].protection.locked
    assert sheet["A1"].protection.locked
    spare = next(r for r in range(8, 40) if sheet.cell(r, 1).value is None)
    assert not sheet.cell(spare, 1).protection.locked
    assert any(str(spare - 0) in str(v.sqref) for v in sheet.data_validations.dataValidation)
    name = f"{kind.replace(' ', '_')}_case"
    assert name in book.defined_names


def test_another_word_is_refused():
    with pytest.raises(Exception, match="write one of"):
        starters.starter("river")
