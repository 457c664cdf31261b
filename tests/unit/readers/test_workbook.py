"""Workbooks, written by openpyxl and by hand."""

from __future__ import annotations

import io
from collections.abc import Callable
from typing import Any

import openpyxl
import pytest
from openpyxl.comments import Comment
from openpyxl.drawing.image import Image
from PIL import Image as Picture

from dossiercheck.limits import Limits
from dossiercheck.model import Item, Source
from dossiercheck.readers import workbook
from dossiercheck.readers.numberformat import shown
from tests.unit.readers.reading import read, reasons, tables, texts, unread


def book(fill: Callable[[Any], None], title: str = "Sheet") -> bytes:
    made = openpyxl.Workbook()
    made.active.title = title
    fill(made.active)
    return saved(made)


def saved(made: Any) -> bytes:
    stream = io.BytesIO()
    made.save(stream)
    return stream.getvalue()


def within(data: bytes, limits: Limits) -> list[Item]:
    return list(workbook.read_within(Source("a.xlsx", "", len(data), "xlsx"), data, limits))


def test_cells_carry_sheet_row_and_column() -> None:
    def fill(sheet: Any) -> None:
        sheet.append(["Code", "Name"])
        sheet.append(["A", "(2S)-butan-2-ol"])

    (table,) = tables(read("a.xlsx", book(fill, "Impurities")))
    assert texts(table) == [["Code", "Name"], ["A", "(2S)-butan-2-ol"]]
    place = table.rows[1][1].place
    assert (place.sheet, place.table, place.row, place.column) == ("Impurities", 1, 2, "B")


@pytest.mark.parametrize(
    ("value", "code", "text"),
    [
        (281.3, "0.00", "281.30"),
        (281.35, "General", "281.35"),
        (281.0, "General", "281"),
        (281.355, "0.00", "281.36"),
        (1281.35, "#,##0.00", "1,281.35"),
        (281.35, '0.0" g/mol"', "281.4 g/mol"),
        (0.0715, "0.0%", "7.2%"),
        (0.000123, "0.0E+00", "1.2E-04"),
        (-12.5, "0.0_);(0.0)", "-12.5"),
        (281.35, "0.0##", "281.35"),
        (281.0, "0.##", "281"),
        (281.35, "[Red]0.0", "281.4"),
        (281.35, "# ?/?", "281.35"),
        (45000, "yyyy-mm-dd", "2023-03-15"),
        (50, "@", "50"),
    ],
)
def test_numbers_come_as_the_sheet_shows_them(value: float, code: str, text: str) -> None:
    """Expected texts: what a spreadsheet program shows for these formats (from memory, checked
    against ECMA-376 part 1, 18.8.31); half is rounded away from zero."""

    def fill(sheet: Any) -> None:
        sheet["A1"] = value
        sheet["A1"].number_format = code

    (table,) = tables(read("a.xlsx", book(fill)))
    assert texts(table) == [[text]]


def test_binary_noise_in_a_stored_number_is_not_shown() -> None:
    assert shown("281.35000000000002", "General") == "281.35"
    assert shown("not a number", "0.00") == "not a number"


def test_a_merged_cell_is_repeated_with_its_own_place() -> None:
    def fill(sheet: Any) -> None:
        for row in (["Code", "Name"], ["A", "x"], [None, "y"], ["B", "z"]):
            sheet.append(row)
        sheet.merge_cells("A2:A3")

    (table,) = tables(read("a.xlsx", book(fill)))
    assert texts(table) == [["Code", "Name"], ["A", "x"], ["A", "y"], ["B", "z"]]
    assert table.rows[2][0].place == table.rows[1][0].place


def test_a_merge_over_the_whole_sheet_costs_nothing() -> None:
    def fill(sheet: Any) -> None:
        sheet.append(["Code", "Name"])
        sheet.append(["A", "x"])

    made = openpyxl.load_workbook(io.BytesIO(book(fill)))
    made.active.merged_cells.add("A1:XFD1048576")
    (table,) = tables(read("a.xlsx", saved(made)))
    assert texts(table) == [["Code", "Name"], ["A", "x"]]


def test_a_lone_cell_in_the_last_corner_costs_nothing() -> None:
    """A budget of rows that a walk over a million rows would break is not touched."""

    def fill(sheet: Any) -> None:
        sheet.append(["Code", "Name"])
        sheet["B1048576"] = "last row"
        sheet["XFD1048576"] = "last corner"

    items = within(book(fill), Limits(rows=3, cells=4))
    assert texts(tables(items)[0]) == [["Code", "Name"], ["", ""], ["", "last row"]]
    assert tables(items)[0].rows[2][1].place.row == 1048576
    assert reasons(items) == ["column-budget"]


def test_rows_past_the_budget_are_unread() -> None:
    def fill(sheet: Any) -> None:
        for number in range(20):
            sheet.append([number, "x"])

    items = within(book(fill), Limits(rows=5))
    assert len(tables(items)[0].rows) == 5
    assert reasons(items) == ["row-budget"]


def test_a_formula_whose_result_is_not_stored_is_unread() -> None:
    def fill(sheet: Any) -> None:
        sheet.append(["MW", "=1+1"])

    items = read("a.xlsx", book(fill))
    (entry,) = unread(items)
    assert (entry.reason, entry.place.column, entry.text) == ("formula-without-value", "B", "1+1")


def test_a_cell_that_shows_an_error_is_unread() -> None:
    def fill(sheet: Any) -> None:
        sheet.append(["MW", "#N/A"])

    (entry,) = unread(read("a.xlsx", book(fill)))
    assert (entry.reason, entry.place.column) == ("cell-error", "B")


def test_hidden_sheets_are_read_and_said_to_be_hidden() -> None:
    made = openpyxl.Workbook()
    made.active.append(["Code"])
    made.create_sheet("Old").append(["Name"])
    made["Old"].sheet_state = "hidden"
    found = tables(read("a.xlsx", saved(made)))
    assert [table.place.sheet for table in found] == ["Sheet", "Old (hidden)"]
    assert [table.place.table for table in found] == [1, 2]


def test_pictures_comments_and_charts_are_listed() -> None:
    made = openpyxl.Workbook()
    made.active.append(["Code"])
    made.active["A1"].comment = Comment("look", "someone")
    stream = io.BytesIO()
    Picture.new("RGB", (4, 4)).save(stream, "PNG")
    made.active.add_image(Image(stream), "C3")
    made.create_chartsheet("Chart")
    assert sorted(reasons(read("a.xlsx", saved(made)))) == ["chart-sheet", "comment", "picture"]


def test_rich_text_is_joined() -> None:
    from openpyxl.cell.rich_text import CellRichText, TextBlock
    from openpyxl.cell.text import InlineFont

    def fill(sheet: Any) -> None:
        sheet["A1"] = CellRichText("(2", TextBlock(InlineFont(i=True), "S"), ")-butan-2-ol")

    assert texts(tables(read("a.xlsx", book(fill)))[0]) == [["(2S)-butan-2-ol"]]


def test_an_empty_workbook_gives_no_table() -> None:
    assert tables(read("a.xlsx", book(lambda sheet: None))) == []
