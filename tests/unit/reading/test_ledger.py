from __future__ import annotations

from pathlib import Path

import pytest

from rulecheck.diagnostics import Diagnostic, Refused, Span
from rulecheck.reading.bounds import MAXIMUM_ROWS
from rulecheck.reading.ledger import COLUMNS, LedgerRow, read_ledger
from rulecheck.reading.workspace import Workspace


def read(tmp_path: Path, text: str, **signs: str) -> tuple[LedgerRow, ...]:
    (tmp_path / "parts.csv").write_bytes(text.encode())
    return read_ledger(Workspace(tmp_path), "parts.csv", **signs)


def refusals(tmp_path: Path, text: str, **signs: str) -> tuple[Diagnostic, ...]:
    with pytest.raises(Refused) as refused:
        read(tmp_path, text, **signs)
    return refused.value.diagnostics


def cells(row: LedgerRow) -> dict[str, str]:
    return {name: cell.text for name, cell in row.cells.items()}


def test_rows_with_their_places(tmp_path: Path) -> None:
    text = 'item,mass,x,datum\r\nseat,4.2 kg,1100 mm,cockpit\r\n"belt, left",900 gram,,\r\n'
    seat, belt = read(tmp_path, text)
    assert (seat.number, belt.number) == (2, 3)
    assert cells(seat) == {"item": "seat", "mass": "4.2 kg", "x": "1100 mm", "datum": "cockpit"}
    assert cells(belt) == {"item": "belt, left", "mass": "900 gram"}
    assert str(seat.cells["x"].span) == "parts.csv:2:13"
    normalised = text.replace("\r\n", "\n")
    span = belt.cells["mass"].span
    assert normalised[span.start : span.end] == "900 gram"


def test_all_columns_in_any_order(tmp_path: Path) -> None:
    header = ",".join(reversed(COLUMNS))
    (row,) = read(tmp_path, f"{header}\n" + ",".join(f"v{index}" for index in range(len(COLUMNS))) + "\n")
    assert set(row.cells) == set(COLUMNS)
    assert row.cells["item"].text == f"v{len(COLUMNS) - 1}"


def test_bare_numbers_take_the_unit_of_the_heading(tmp_path: Path) -> None:
    text = "item,mass [kg],x[mm],growth [%],quantity\na,12.5,-3,5,2\nb,900 gram,1e3,,\nc,about 3,+4 in,1,1\n"
    rows = read(tmp_path, text)
    assert cells(rows[0]) == {"item": "a", "mass": "12.5 kg", "x": "-3 mm", "growth": "5 %", "quantity": "2"}
    assert cells(rows[1]) == {"item": "b", "mass": "900 gram", "x": "1e3 mm"}
    assert cells(rows[2]) == {"item": "c", "mass": "about 3", "x": "+4 in", "growth": "1 %", "quantity": "1"}
    span = rows[0].cells["mass"].span
    assert text[span.start : span.end] == "12.5"
    assert rows[0].cells["mass"].part(5, 7).end == span.end


def test_a_decimal_comma_that_is_declared(tmp_path: Path) -> None:
    text = "item;mass [kg];x;owner\nseat 4,2;12,5;1,5 mm ± 0,5 mm;Dept 1,2\n"
    (row,) = read(tmp_path, text, delimiter=";", decimal=",")
    assert cells(row) == {"item": "seat 4,2", "mass": "12.5 kg", "x": "1.5 mm ± 0.5 mm", "owner": "Dept 1,2"}
    assert row.cells["mass"].raw == "12,5"


def test_a_decimal_sign_is_never_guessed(tmp_path: Path) -> None:
    (comma,) = refusals(tmp_path, 'item,mass\nseat,"4,2 kg"\n')
    assert comma.code == "ledger-row"
    assert "row 2, column 'mass': a comma stands in the number '4,2 kg'" in comma.message
    assert 'declare `decimal: ","`' in comma.advice
    (point,) = refusals(tmp_path, "item;mass\nseat;1.234,5 kg\n", delimiter=";", decimal=",")
    assert "a point stands in the number" in point.message


def test_a_wrong_delimiter_is_answered_with_the_right_one(tmp_path: Path) -> None:
    (semicolon,) = refusals(tmp_path, "item;mass\nseat;4 kg\n")
    assert semicolon.code == "ledger-header"
    assert semicolon.advice == 'declare `delimiter: ";"`'
    (tab,) = refusals(tmp_path, "item\tmass\nseat\t4 kg\n")
    assert tab.advice == r'declare `delimiter: "\t"`'
    (comma,) = refusals(tmp_path, "item,mass\nseat,4 kg\n", delimiter=";")
    assert comma.advice == 'declare `delimiter: ","`'


def test_faults_of_the_header_all_at_once(tmp_path: Path) -> None:
    found = refusals(tmp_path, "itm,x,x,,owner [kg],z []\n")
    assert [(item.span.column if item.span else 0, item.message) for item in found] == [
        (1, "no column is called 'itm'"),
        (1, "the header lacks the column 'item'"),
        (1, "the header lacks the column 'mass'"),
        (7, "the column 'x' stands twice"),
        (9, "column 4 has no name"),
        (10, "the column 'owner' takes no unit"),
        (21, "the unit of the column 'z' is empty"),
    ]
    assert found[0].advice == "did you mean 'item'?"
    assert {item.code for item in found} == {"ledger-header"}
    assert found[3].related[0].span.column == 5


def test_a_heading_in_other_letter_case_is_answered_with_the_name(tmp_path: Path) -> None:
    found = refusals(tmp_path, "Item,mass\n")
    assert found[0].advice == "did you mean 'item'?"


@pytest.mark.parametrize("text", ["", "\n\n", "# only a remark\n"])
def test_a_ledger_without_header(tmp_path: Path, text: str) -> None:
    (item,) = refusals(tmp_path, text)
    assert item.code == "ledger-header"


def test_a_header_without_rows_gives_none(tmp_path: Path) -> None:
    assert read(tmp_path, "item,mass\n") == ()


def test_rows_with_too_many_or_too_few_cells_are_all_reported(tmp_path: Path) -> None:
    found = refusals(tmp_path, "item,mass,x\na,1 kg\nb,1 kg,2 mm,3\nc,1 kg,2 mm\n")
    assert [item.code for item in found] == ["ledger-row", "ledger-row"]
    assert found[0].message == "row 2: 2 cells stand under 3 columns; the first that lacks is column 'x'"
    assert found[1].message == "row 3: 4 cells stand under 3 columns; the first too many is cell 4"
    assert str(found[1].span) == "parts.csv:3:13"
    assert "decimal commas" in found[1].advice


def test_a_required_cell_that_is_empty(tmp_path: Path) -> None:
    found = refusals(tmp_path, "item,mass,x\na,,1 mm\n,1 kg,\n")
    assert [item.message for item in found] == [
        "row 2, column 'mass': nothing stands here",
        "row 3, column 'item': nothing stands here",
    ]
    assert str(found[0].span) == "parts.csv:2:3"


def test_rows_without_any_value_are_passed_over(tmp_path: Path) -> None:
    rows = read(tmp_path, "item,mass\na,1 kg\n,\n  \n# remark\nb,2 kg\n")
    assert [row.number for row in rows] == [2, 6]


@pytest.mark.parametrize(
    ("delimiter", "decimal"), [(",", ","), ("", "."), (",,", "."), ('"', "."), (";", ""), (";", "x"), ("\n", ".")]
)
def test_signs_that_cannot_be(tmp_path: Path, delimiter: str, decimal: str) -> None:
    asked = Span("car.design.yaml", 0, 1, 1, 1)
    with pytest.raises(Refused) as refused:
        read_ledger(Workspace(tmp_path), "parts.csv", delimiter=delimiter, decimal=decimal, asked=asked)
    assert [(item.code, item.span) for item in refused.value.diagnostics] == [("bad-value", asked)]


def test_the_bound_on_rows(tmp_path: Path) -> None:
    found = refusals(tmp_path, "item,mass\n" + "a,1 kg\n" * (MAXIMUM_ROWS + 1))
    assert [item.code for item in found] == ["too-large"]
    assert str(MAXIMUM_ROWS) in found[0].message


def test_what_the_workspace_refuses_is_passed_on(tmp_path: Path) -> None:
    asked = Span("car.design.yaml", 0, 1, 1, 1)
    with pytest.raises(Refused) as refused:
        read_ledger(Workspace(tmp_path), "none.csv", asked=asked)
    assert [(item.code, item.span) for item in refused.value.diagnostics] == [("no-such-file", asked)]
