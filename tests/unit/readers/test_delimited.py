from __future__ import annotations

import csv
import io

import pytest
from hypothesis import given
from hypothesis import strategies as st

from dossiercheck.limits import Limits
from dossiercheck.model import Source
from dossiercheck.readers import delimited
from tests.unit.readers.reading import read, reasons, tables, texts, unread


@pytest.mark.parametrize("mark", [",", ";", "\t", "|"])
@pytest.mark.parametrize("name", ["a.csv", "a.tsv"])
def test_the_delimiter_is_found_by_content(mark: str, name: str) -> None:
    stream = io.StringIO()
    rows = [
        ["Code", "Name", "MW"],
        ["A", "(2S,3R)-2,3-x", "281,35"],
        ["B", "1,2-y; salt", "9,5"],
    ]
    csv.writer(stream, delimiter=mark).writerows(rows)
    (table,) = tables(read(name, stream.getvalue().encode()))
    assert texts(table) == rows


def test_decimal_commas_do_not_make_columns() -> None:
    (table,) = tables(read("a.csv", b"Name;MW;Rotation\nx;281,35;-12,5\ny;12,01;+3,0\n"))
    assert texts(table)[1] == ["x", "281,35", "-12,5"]


def test_a_title_above_the_headings_is_kept() -> None:
    data = b"List of compounds, printed 3 May\n\nCode;SMILES;MW\nA;CC;30,07\nB;CCC;44,1\n"
    (table,) = tables(read("a.csv", data))
    assert texts(table)[0] == ["List of compounds, printed 3 May", "", ""]
    assert [row[0].place.row for row in table.rows] == [1, 3, 4, 5]


def test_one_column_of_names_with_commas_stays_one_column() -> None:
    (table,) = tables(read("a.csv", b"Names\n(2S,3R)-a\n(1R)-b\n1,2,3-c\n"))
    assert texts(table) == [["Names"], ["(2S,3R)-a"], ["(1R)-b"], ["1,2,3-c"]]


def test_rows_are_numbered_as_a_spreadsheet_counts() -> None:
    data = b'Code,Name\n\nA,"two\nlines"\nB,x\n'
    (table,) = tables(read("a.csv", data))
    assert [(row[0].text, row[0].place.row) for row in table.rows] == [
        ("Code", 1),
        ("A", 3),
        ("B", 4),
    ]
    assert table.rows[1][1].text == "two\nlines"
    assert table.rows[1][1].place.column == "Name"


def test_a_column_without_a_heading_of_its_own_is_called_by_its_letter() -> None:
    (table,) = tables(read("a.csv", b"Code,,Code\nA,x,y\n"))
    assert [cell.place.column for cell in table.rows[1]] == ["A", "B", "C"]


def test_a_row_of_another_width_is_unread_and_the_others_come() -> None:
    items = read("a.csv", b"Code,Name,MW\nA,1,2-x,5\nB,y,6\nC,z\nD,w,7,,\n")
    (table,) = tables(items)
    assert [row[0].text for row in table.rows] == ["Code", "B", "D"]
    assert [(entry.reason, entry.place.row) for entry in unread(items)] == [
        ("ragged-row", 2),
        ("ragged-row", 4),
    ]
    assert unread(items)[0].text == "A,1,2-x,5"


@pytest.mark.parametrize(
    ("data", "row"),
    [
        pytest.param(b'Code,Name\nA,x\nB,"y\nC,z\nD,w\n', 3, id="to the end of the file"),
        pytest.param(b'Code,Name\nA,x\nB,"y\nC,z\n"D",w\n', 3, id="to the next quote"),
        pytest.param(b'Code,Name\nA,x\nB,"y\nC,z\nD,w"\nE,v\n', 3, id="closed by chance"),
    ],
)
def test_an_unclosed_quote_is_named_and_rows_before_it_are_kept(data: bytes, row: int) -> None:
    items = read("a.csv", data)
    assert [row[0].text for row in tables(items)[0].rows] == ["Code", "A"]
    assert [(entry.reason, entry.place.row) for entry in unread(items)] == [("unclosed-quote", row)]


def test_bad_quoting_within_a_row_costs_that_row() -> None:
    items = read("a.csv", b'Code,Name\nA,"x"y\nB,z\n')
    assert [row[0].text for row in tables(items)[0].rows] == ["Code", "B"]
    assert [(entry.reason, entry.place.row) for entry in unread(items)] == [("quoting", 2)]


@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16", "utf-16-le", "cp1252"])
def test_encodings(encoding: str) -> None:
    (table,) = tables(read("a.csv", "Code,Name\nA,naïve – µ\n".encode(encoding)))
    assert texts(table) == [["Code", "Name"], ["A", "naïve – µ"]]


def test_the_delimiter_may_be_declared() -> None:
    (table,) = tables(read("a.csv", b"sep=;\nCode;Name\nA;1,2-x\n"))
    assert texts(table) == [["Code", "Name"], ["A", "1,2-x"]]


def test_rows_past_the_budget_are_unread() -> None:
    text = "Code,Name\n" + "A,x\n" * 50
    source = Source("a.csv", "", len(text), "csv")
    items = list(delimited.read_text(source, text, Limits(rows=10)))
    assert len(tables(items)[0].rows) == 10
    assert [(entry.reason, entry.place.row) for entry in unread(items)] == [("row-budget", 11)]


def test_columns_past_the_budget_are_refused() -> None:
    text = ",".join("abcdefgh") + "\n"
    items = list(delimited.read_text(Source("a.csv", "", 0, "csv"), text, Limits(columns=5)))
    assert reasons(items) == ["column-budget"]


CELLS = st.text(st.characters(codec="utf-8", exclude_categories=["Cc", "Cs"]), max_size=12)


@given(
    st.lists(st.tuples(CELLS, CELLS, CELLS), min_size=1, max_size=8),
    st.sampled_from(["\n", "\r\n", "\r"]),
)
def test_quoted_rows_come_back_whatever_their_line_ends(
    rows: list[tuple[str, str, str]], end: str
) -> None:
    stream = io.StringIO()
    writer = csv.writer(stream, quoting=csv.QUOTE_ALL, lineterminator=end)
    writer.writerow(["first", "second", "third"])
    writer.writerows(rows)
    items = read("a.csv", stream.getvalue().encode())
    assert reasons(items) == []
    expected = [[cell.strip() for cell in row] for row in rows if any(c.strip() for c in row)]
    assert texts(tables(items)[0])[1:] == expected
