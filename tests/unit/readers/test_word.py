"""Word documents, written by python-docx, with parts of the XML put in by hand."""

from __future__ import annotations

import io
from collections.abc import Callable
from typing import Any

import docx
from docx.oxml import parse_xml
from PIL import Image as Picture

from tests.unit.readers.reading import passages, read, reasons, tables, texts, unread

W = 'xmlns:w="http://schemas.openxmlformats.org/wordprocessingml/2006/main"'


def document(fill: Callable[[Any], None]) -> bytes:
    made = docx.Document()
    fill(made)
    stream = io.BytesIO()
    made.save(stream)
    return stream.getvalue()


def with_xml(inner: str) -> bytes:
    def fill(made: Any) -> None:
        made.add_paragraph()._p.append(parse_xml(f"<w:smartTag {W}>{inner}</w:smartTag>"))

    return document(fill)


def test_paragraphs_and_tables_in_the_order_of_the_document() -> None:
    def fill(made: Any) -> None:
        made.add_heading("3.2.S.1 General information", 1)
        made.add_heading("3.2.S.1.1 Nomenclature", 2)
        made.add_paragraph("before")
        table = made.add_table(2, 2)
        for number, cell in enumerate(cell for row in table.rows for cell in row.cells):
            cell.text = str(number)
        made.add_heading("3.2.S.1.2 Structure", 2)
        made.add_paragraph("after")

    items = read("a.docx", document(fill))
    found = passages(items)
    assert [p.text for p in found][-3:] == ["before", "3.2.S.1.2 Structure", "after"]
    assert found[2].headings == ("3.2.S.1 General information", "3.2.S.1.1 Nomenclature")
    assert found[-1].headings == ("3.2.S.1 General information", "3.2.S.1.2 Structure")
    assert found[-1].place.section == "3.2.S.1.2"
    assert [p.place.paragraph for p in found] == [1, 2, 3, 4, 5]
    (table,) = tables(items)
    assert texts(table) == [["0", "1"], ["2", "3"]]
    assert (table.place.table, table.place.section) == (1, "3.2.S.1.1")
    assert [type(item).__name__ for item in items][3] == "Table"


def test_runs_are_joined_across_formatting() -> None:
    def fill(made: Any) -> None:
        paragraph = made.add_paragraph("(2")
        paragraph.add_run("S").italic = True
        paragraph.add_run(")-butan-2-ol C")
        paragraph.add_run("4").font.subscript = True

    assert passages(read("a.docx", document(fill)))[0].text == "(2S)-butan-2-ol C4"


def test_special_characters() -> None:
    inner = (
        "<w:r><w:t>a</w:t><w:noBreakHyphen/><w:t>b</w:t><w:softHyphen/><w:t>c</w:t><w:tab/>"
        '<w:t>d</w:t><w:br/><w:sym w:font="Symbol" w:char="F061"/></w:r>'
    )
    assert passages(read("a.docx", with_xml(inner)))[0].text == "a\u2011b\u00adc\td\nα"


def test_a_symbol_without_a_known_meaning_is_unread() -> None:
    items = read("a.docx", with_xml('<w:r><w:sym w:font="Wingdings" w:char="F0E0"/></w:r>'))
    assert reasons(items) == ["symbol-character"]


def test_tracked_changes_as_the_document_reads_now() -> None:
    inner = (
        "<w:r><w:t>(2</w:t></w:r><w:del><w:r><w:delText>R</w:delText></w:r></w:del>"
        "<w:ins><w:r><w:t>S</w:t></w:r></w:ins><w:moveFrom><w:r><w:t>gone</w:t></w:r></w:moveFrom>"
        "<w:moveTo><w:r><w:t>)-x</w:t></w:r></w:moveTo>"
    )
    assert passages(read("a.docx", with_xml(inner)))[0].text == "(2S)-x"


def test_hidden_text_is_not_part_of_the_document_and_is_listed() -> None:
    inner = "<w:r><w:t>seen</w:t></w:r><w:r><w:rPr><w:vanish/></w:rPr><w:t>(2R)</w:t></w:r>"
    items = read("a.docx", with_xml(inner))
    assert passages(items)[0].text == "seen"
    assert [(entry.reason, entry.text) for entry in unread(items)] == [("hidden-text", "(2R)")]


def test_merged_cells_are_repeated_with_one_place() -> None:
    def fill(made: Any) -> None:
        table = made.add_table(3, 3)
        table.cell(0, 0).text, table.cell(0, 2).text = "wide", "c"
        table.cell(0, 0).merge(table.cell(0, 1))
        table.cell(1, 0).text = "tall"
        table.cell(1, 0).merge(table.cell(2, 0))
        table.cell(2, 1).text = "x"

    (table,) = tables(read("a.docx", document(fill)))
    assert texts(table) == [["wide", "wide", "c"], ["tall", "", ""], ["tall", "x", ""]]
    assert table.rows[0][0] is table.rows[0][1]
    assert table.rows[2][0].place == table.rows[1][0].place


def test_pictures_and_objects_are_listed_at_their_paragraph() -> None:
    stream = io.BytesIO()
    Picture.new("RGB", (4, 4)).save(stream, "PNG")

    def fill(made: Any) -> None:
        made.add_paragraph("one")
        stream.seek(0)
        made.add_picture(stream)
        made.add_paragraph()._p.append(
            parse_xml(f"<w:r {W}><w:object><w:control/></w:object></w:r>")
        )

    assert [(e.reason, e.place.paragraph) for e in unread(read("a.docx", document(fill)))] == [
        ("picture", 2),
        ("drawing-object", 3),
    ]


def test_a_picture_in_a_table_cell_is_listed_at_its_cell() -> None:
    stream = io.BytesIO()
    Picture.new("RGB", (4, 4)).save(stream, "PNG")

    def fill(made: Any) -> None:
        stream.seek(0)
        made.add_table(1, 2).cell(0, 1).paragraphs[0].add_run().add_picture(stream)

    (entry,) = unread(read("a.docx", document(fill)))
    assert (entry.reason, entry.place.table, entry.place.row, entry.place.column) == (
        "picture",
        1,
        1,
        "B",
    )


def test_the_text_of_a_text_box_is_read() -> None:
    inner = (
        "<w:r><w:pict><w:txbxContent><w:p><w:r><w:t>in the box</w:t></w:r></w:p>"
        "</w:txbxContent></w:pict></w:r>"
    )
    items = read("a.docx", with_xml(inner))
    assert [p.text for p in passages(items)] == ["in the box"]
    assert reasons(items) == []


def test_headers_and_footers_are_read_apart_from_the_body() -> None:
    def fill(made: Any) -> None:
        made.add_paragraph("body")
        made.sections[0].header.paragraphs[0].text = "DX-101"
        made.sections[0].footer.paragraphs[0].text = "page"

    found = passages(read("a.docx", document(fill)))
    assert [(p.text, p.place.section) for p in found] == [
        ("body", None),
        ("DX-101", "page header 1"),
        ("page", "page footer 1"),
    ]


def test_a_table_in_a_cell_comes_as_a_table() -> None:
    def fill(made: Any) -> None:
        cell = made.add_table(1, 1).cell(0, 0)
        cell.text = "outer"
        cell.add_table(1, 1).cell(0, 0).text = "inner"

    assert [texts(t) for t in tables(read("a.docx", document(fill)))] == [[["outer"]], [["inner"]]]


def test_a_heading_style_of_ones_own_counts_by_what_it_is_based_on() -> None:
    def fill(made: Any) -> None:
        style = made.styles.add_style("Company heading", 1)
        style.base_style = made.styles["Heading 1"]
        made.add_paragraph("Impurity B", style="Company heading")
        made.add_paragraph("text")

    assert passages(read("a.docx", document(fill)))[1].headings == ("Impurity B",)
