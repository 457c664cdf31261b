"""Word documents that lie, loop, or hide text: each piece listed, nothing read twice or lost."""

from __future__ import annotations

import hashlib
import io
import zipfile

import pytest

from tests.unit.readers.reading import passages, read, reasons, tables, unread
from tests.unit.readers.wordparts import R, paragraph, row, run, table, taken_out, with_body

MAIN = f'<Relationship Id="{{}}" Type="{R}/officeDocument" Target="word/document.xml"/>'


def relationship(identity: str, kind: str, target: str, mode: str = "Internal") -> str:
    return (
        f'<Relationship Id="{identity}" Type="{R}/{kind}" Target="{target}" TargetMode="{mode}"/>'
    )


def test_one_relationship_id_for_two_parts_is_refused() -> None:
    parts = {
        "a": relationship("one", "image", "a.png"),
        "b": relationship("one", "image", "b.png"),
    }
    assert reasons(read("a.docx", with_body(paragraph(run("x")), parts))) == ["duplicate-part"]


def test_two_documents_in_one_package_are_refused() -> None:
    stream = io.BytesIO(with_body(paragraph(run("x"))))
    out = io.BytesIO()
    with zipfile.ZipFile(stream) as old, zipfile.ZipFile(out, "w") as new:
        for name in old.namelist():
            content = old.read(name)
            if name == "_rels/.rels":
                content = f'<Relationships xmlns="x">{MAIN.format(1)}{MAIN.format(2)}</Relationships>'.encode()
            new.writestr(name, content)
    assert reasons(read("a.docx", out.getvalue())) == ["duplicate-part"]


@pytest.mark.parametrize(
    "part",
    [
        relationship("x", "subDocument", "http://127.0.0.1/sub.docx", "External"),
        relationship("x", "oleObject", "file:///etc/passwd", "External"),
        relationship("x", "image", "//host/share/a.png", "External"),
    ],
)
def test_parts_that_lie_elsewhere_are_named_and_not_fetched(part: str) -> None:
    assert reasons(read("a.docx", with_body(paragraph(run("x")), {"x": part}))) == ["external-part"]


def test_a_document_set_in_whole_is_listed_at_its_place() -> None:
    part = relationship("x", "aFChunk", "chunk.html")
    body = paragraph(run("before")) + '<w:altChunk r:id="x"/>' + paragraph(run("after"))
    (entry,) = unread(read("a.docx", with_body(body, {"x": part})))
    assert (entry.reason, entry.place.paragraph) == ("embedded-document", 1)
    assert "chunk.html" in entry.detail


def test_a_field_that_never_ends_does_not_swallow_the_text_after_it() -> None:
    begin = '<w:r><w:fldChar w:fldCharType="begin"/></w:r>'
    body = paragraph(run("one"), begin) + paragraph(run("(2S)-butan-2-ol"))
    items = read("a.docx", with_body(body))
    assert [p.text for p in passages(items)] == ["one"]
    assert [(e.reason, e.text) for e in unread(items)] == [("field", "(2S)-butan-2-ol")]


def test_ends_of_fields_that_never_began_harm_nothing() -> None:
    marks = "".join(
        f'<w:r><w:fldChar w:fldCharType="{kind}"/></w:r>' for kind in ("end", "separate", "odd")
    )
    assert [p.text for p in passages(read("a.docx", with_body(paragraph(marks, run("x")))))] == [
        "x"
    ]


def test_styles_based_on_one_another_in_a_ring() -> None:
    ring = "".join(
        f'<w:style w:type="paragraph" w:styleId="{here}"><w:basedOn w:val="{there}"/></w:style>'
        for here, there in (("A", "B"), ("B", "C"), ("C", "A"), ("D", "D"))
    )
    body = paragraph(run("x"), properties='<w:pStyle w:val="A"/>')
    items = read("a.docx", with_body(body, {"styles": f"<w:styles>{ring}</w:styles>"}))
    assert [p.text for p in passages(items)] == ["x"]


@pytest.mark.parametrize(
    "numbering",
    [
        '<w:numbering><w:num w:numId="1"/></w:numbering>',
        '<w:numbering><w:num w:numId="1"><w:abstractNumId w:val="9"/></w:num></w:numbering>',
        '<w:numbering><w:abstractNum w:abstractNumId="0"><w:numStyleLink w:val="Z"/>'
        '</w:abstractNum><w:num w:numId="1"><w:abstractNumId w:val="0"/></w:num></w:numbering>',
        '<w:numbering><w:abstractNum w:abstractNumId="0"><w:lvl w:ilvl="0"><w:start w:val="x"/>'
        '<w:lvlText w:val="%"/></w:lvl></w:abstractNum><w:num w:numId="1">'
        '<w:abstractNumId w:val="0"/></w:num></w:numbering>',
        "<w:numbering></w:numbering>",
    ],
)
def test_lists_that_are_not_there(numbering: str) -> None:
    listed = '<w:numPr><w:ilvl w:val="99999999"/><w:numId w:val="1"/></w:numPr>'
    for properties in (listed, listed.replace("99999999", "0"), listed.replace("99999999", "-1")):
        body = paragraph(run("x"), properties=properties)
        (found,) = passages(read("a.docx", with_body(body, {"numbering": numbering})))
        assert found.text in ("x", "% x")


def test_a_list_that_counts_beyond_every_letter_and_numeral() -> None:
    numbering = (
        '<w:numbering><w:abstractNum w:abstractNumId="0"><w:lvl w:ilvl="0">'
        '<w:start w:val="999999"/><w:numFmt w:val="upperRoman"/><w:lvlText w:val="%1"/></w:lvl>'
        '</w:abstractNum><w:num w:numId="1"><w:abstractNumId w:val="0"/></w:num></w:numbering>'
    )
    body = paragraph(run("x"), properties='<w:numPr><w:numId w:val="1"/></w:numPr>')
    assert reasons(read("a.docx", with_body(body, {"numbering": numbering}))) == ["list-number"]


def test_a_wide_row_and_many_narrow_ones_are_refused_as_a_table_only() -> None:
    wide = "<w:tc><w:tcPr><w:gridSpan w:val='999999999'/></w:tcPr><w:p/></w:tc>"
    body = table(row(*[wide] * 9)) + paragraph(run("after"))
    items = read("a.docx", with_body(body))
    assert reasons(items) == ["cell-budget"]
    assert [p.text for p in passages(items)] == ["after"]
    assert tables(items) == []


def test_a_span_that_is_no_number() -> None:
    odd = "<w:tc><w:tcPr><w:gridSpan w:val='-3'/><w:vMerge/><w:hMerge/></w:tcPr><w:p/></w:tc>"
    (found,) = tables(read("a.docx", with_body(table(row(odd, "b"), row(odd, odd)))))
    assert [len(cells) for cells in found.rows] == [2, 2]


@pytest.mark.parametrize(
    "parts",
    [
        {"comments": "<w:comments><w:comment w:id='0'></w:comments>"},
        {"numbering": "<w:numbering>&x;</w:numbering>"},
        {"styles": "<w:styles><"},
    ],
)
def test_a_part_that_changes_what_is_read_and_is_damaged_refuses_the_document(
    parts: dict[str, str],
) -> None:
    assert reasons(read("a.docx", with_body(paragraph(run("x")), parts))) == ["damaged-xml"]


def test_a_damaged_header_costs_only_itself() -> None:
    items = read("a.docx", with_body(paragraph(run("x")), {"header": "<w:hdr><w:p></w:hdr>"}))
    assert [p.text for p in passages(items)] == ["x"]
    assert [(e.reason, e.place.section) for e in unread(items)] == [
        ("damaged-xml", "page header 1")
    ]


def test_comments_under_one_id_are_both_listed() -> None:
    comments = "<w:comments>" + "".join(
        f'<w:comment w:id="0">{paragraph(run(text))}</w:comment>' for text in ("one", "two")
    )
    body = paragraph(run("x"), '<w:r><w:commentReference w:id="0"/></w:r>' * 3)
    items = read("a.docx", with_body(body, {"comments": comments + "</w:comments>"}))
    assert [(e.reason, e.text) for e in unread(items)] == [("comment", "one\ntwo")]


def test_two_hundred_boxes_in_boxes() -> None:
    depth = 40
    body = paragraph(
        "<w:r><w:pict><w:txbxContent><w:p>" * depth
        + run("inside")
        + "</w:p></w:txbxContent></w:pict></w:r>" * depth
    )
    assert [p.text for p in passages(read("a.docx", with_body(body)))] == ["inside"]


def test_a_document_of_nothing_but_deletions() -> None:
    gone = "<w:rPr><w:del/></w:rPr>"
    body = paragraph(taken_out("a"), properties=gone) * 200
    items = read("a.docx", with_body(body))
    assert passages(items) == []
    assert reasons(items) == ["pending-deletion"] * 200


def test_a_hundred_thousand_runs_in_one_paragraph() -> None:
    texts = [hashlib.sha256(str(n).encode()).hexdigest() for n in range(50_000)]
    body = paragraph("".join(run(text) + taken_out(text) for text in texts))
    (found,) = passages(read("a.docx", with_body(body)))
    assert found.text == "".join(texts)
    assert len(found.pending) == 50_000


@pytest.mark.parametrize(
    ("name", "data"),
    [
        ("a.rtf", b"{\\rtf1 text}"),
        ("a.odt", b"PK\x03\x04 text"),
        ("a.fodt", b"<?xml version='1.0'?><office:document/>"),
    ],
)
def test_documents_of_other_word_processors(name: str, data: bytes) -> None:
    (entry,) = unread(read(name, data))
    assert entry.reason == "unsupported-format"
    assert "save it as DOCX or PDF" in entry.detail


@pytest.mark.parametrize("name", ["a.docm", "a.dotx", "a.dotm"])
def test_macros_and_templates_are_documents_all_the_same(name: str) -> None:
    assert [p.text for p in passages(read(name, with_body(paragraph(run("x")))))] == ["x"]
