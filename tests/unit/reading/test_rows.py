from __future__ import annotations

from rulecheck.diagnostics import Faults
from rulecheck.reading.bounds import MAXIMUM_CELLS, MAXIMUM_FAULTS, MAXIMUM_SCALAR
from rulecheck.reading.rows import Row, Scanner


def scan(text: str, delimiter: str = ",") -> tuple[list[Row], Faults]:
    faults = Faults()
    rows = list(Scanner("a.csv", text, delimiter, faults).rows())
    for row in rows:
        for cell in row.cells:
            raw = cell.raw if cell.raw is not None else cell.text
            assert text[cell.span.start : cell.span.end] == raw
            assert text.count("\n", 0, cell.span.start) + 1 == cell.span.line
            assert cell.span.start - text.rfind("\n", 0, cell.span.start) == cell.span.column
    return rows, faults


def texts(text: str, delimiter: str = ",") -> list[list[str]]:
    rows, faults = scan(text, delimiter)
    assert not faults
    return [[cell.text for cell in row.cells] for row in rows]


def test_the_examples_of_rfc_4180() -> None:
    # RFC 4180, section 2, items 1, 2, 5, 6 and 7 (items 6 and 7 shortened to one record).
    assert texts("aaa,bbb,ccc\nzzz,yyy,xxx\n") == [["aaa", "bbb", "ccc"], ["zzz", "yyy", "xxx"]]
    assert texts("aaa,bbb,ccc\nzzz,yyy,xxx") == [["aaa", "bbb", "ccc"], ["zzz", "yyy", "xxx"]]
    assert texts('"aaa","bbb","ccc"\nzzz,yyy,xxx') == [["aaa", "bbb", "ccc"], ["zzz", "yyy", "xxx"]]
    assert texts('"aaa","b\nbb","ccc"\nzzz,yyy,xxx') == [["aaa", "b\nbb", "ccc"], ["zzz", "yyy", "xxx"]]
    assert texts('"aaa","b""bb","ccc"') == [["aaa", 'b"bb', "ccc"]]


def test_blanks_empty_cells_and_other_delimiters() -> None:
    assert texts(" a , b b ,, \n") == [["a", "b b", "", ""]]
    assert texts("a;1,5;\n", ";") == [["a", "1,5", ""]]
    assert texts("\tb\t\n", "\t") == [["", "b", ""]]
    assert texts(' "a" , "b,c" ') == [["a", "b,c"]]


def test_empty_lines_and_comments_are_passed_over_and_lines_still_count() -> None:
    rows, faults = scan('a\n\n  # no row\n"b\nc"\nd\n   \n')
    assert not faults
    assert [row.number for row in rows] == [1, 4, 6]


def test_a_mark_inside_a_row_is_no_comment() -> None:
    assert texts("a,#b\n") == [["a", "#b"]]
    assert texts("\t#b\n", "\t") == [["", "#b"]]


def test_quotes_that_are_amiss() -> None:
    _, faults = scan('a\n"b" c,d\ne\n"f\ng\n')
    assert [str(item).split(";")[0] for item in faults.found] == [
        "a.csv:2:5: ledger-row: text stands behind a cell in quotes",
        "a.csv:4:1: ledger-row: the quote that opens here is never closed",
    ]


def test_a_quote_inside_a_plain_cell_is_text() -> None:
    assert texts('rim 13",b\n') == [['rim 13"', "b"]]


def test_bounds() -> None:
    _, faults = scan("a," + "x" * (MAXIMUM_SCALAR + 1))
    assert [item.code for item in faults.found] == ["too-large"]
    _, faults = scan('"a" b\n' * 10_000)
    assert len(faults.found) == MAXIMUM_FAULTS


def test_the_bound_on_cells() -> None:
    assert len(texts("," * (MAXIMUM_CELLS - 1))[0]) == MAXIMUM_CELLS
    rows, faults = scan("a\n" + "," * 1_000_000 + "\nb\n")
    assert [item.code for item in faults.found] == ["ledger-row"]
    assert [row.number for row in rows] == [1, 3]


def test_nothing_gives_no_rows() -> None:
    assert texts("") == texts("\n\n# a\n") == []
