"""Tracked changes, comments and list numbers in Word documents. ECMA-376 part 1, 17.13 and 17.9."""

from __future__ import annotations

from dossiercheck.model import Pending
from tests.unit.readers.reading import passages, read, reasons, tables, texts, unread
from tests.unit.readers.wordparts import (
    paragraph,
    put_in,
    row,
    run,
    table,
    taken_out,
    with_body,
)

REMOVED = "<w:rPr><w:del/></w:rPr>"


def test_what_is_put_in_and_taken_out_is_marked_in_the_text_as_it_reads_now() -> None:
    body = paragraph(run("(2"), taken_out("R"), put_in(run("S")), run(")-butan-2-ol"))
    items = read("a.docx", with_body(body))
    (found,) = passages(items)
    assert found.text == "(2S)-butan-2-ol"
    assert found.pending == (Pending(2, 2, "R"), Pending(2, 3))
    assert [(e.reason, e.text) for e in unread(items)] == [("pending-deletion", "R")]


def test_neighbouring_runs_of_one_change_are_one_change() -> None:
    body = paragraph(
        run("a"), put_in(run("b"), run("c")), put_in(run("d")), taken_out("x"), run("e")
    )
    (found,) = passages(read("a.docx", with_body(body)))
    assert (found.text, found.pending) == ("abcde", (Pending(1, 4), Pending(4, 4, "x")))


def test_what_was_put_in_and_taken_out_again_leaves_no_trace() -> None:
    items = read("a.docx", with_body(paragraph(run("a"), put_in(taken_out("b")), run("c"))))
    assert [(p.text, p.pending) for p in passages(items)] == [("ac", ())]
    assert reasons(items) == []


def test_a_paragraph_end_taken_out_joins_two_lines() -> None:
    body = (
        paragraph(run("(2S)-bu"), properties=REMOVED)
        + paragraph(run("tan-2-ol"))
        + paragraph(run("z"))
    )
    first, last = passages(read("a.docx", with_body(body)))
    assert (first.text, first.pending) == ("(2S)-butan-2-ol", (Pending(7, 7, "\n"),))
    assert (last.text, last.place.paragraph) == ("z", 2)


def test_a_paragraph_end_taken_out_before_a_table_or_at_the_end_joins_nothing() -> None:
    body = (
        paragraph(run("a"), properties=REMOVED)
        + table(row("b"))
        + paragraph(run("c"), properties=REMOVED)
    )
    items = read("a.docx", with_body(body))
    assert [type(item).__name__ for item in items] == ["Passage", "Table", "Passage"]
    assert [p.text for p in passages(items)] == ["a", "c"]


def test_rows_and_cells_taken_out_are_listed_and_those_put_in_marked() -> None:
    gone = f"<w:tc><w:tcPr><w:cellDel/></w:tcPr><w:p>{run('old cell')}</w:p></w:tc>"
    body = table(
        row("a", gone, "b"),
        row("old row", properties="<w:del/>"),
        row("new", "row", properties="<w:ins/>"),
    )
    items = read("a.docx", with_body(body))
    (found,) = tables(items)
    assert texts(found) == [["a", "b"], ["new", "row"]]
    assert found.rows[1][0].pending == (Pending(0, 3),)
    assert [(e.reason, e.text) for e in unread(items)] == [
        ("pending-deletion", "old cell"),
        ("pending-deletion", "old row"),
    ]


def test_changes_in_a_cell_are_counted_in_the_text_of_the_cell() -> None:
    lines = paragraph() + paragraph(run(" first")) + paragraph(run("se"), put_in(run("cond")))
    items = read("a.docx", with_body(table(row(f"<w:tc>{lines}</w:tc>"))))
    cell = tables(items)[0].rows[0][0]
    assert cell.text == "first\nsecond"
    assert [cell.text[one.start : one.end] for one in cell.pending] == ["cond"]


COMMENTS = (
    "<w:comments>"
    f'<w:comment w:id="0">{paragraph(run("Is it (2R)?"))}{paragraph(run("Check."))}</w:comment>'
    f'<w:comment w:id="7">{paragraph(run("loose"))}</w:comment></w:comments>'
)


def test_comments_are_listed_where_they_are_anchored_and_are_no_text() -> None:
    anchor = '<w:r><w:commentReference w:id="0"/></w:r>'
    body = paragraph(run("one")) + paragraph(run("(2S)-butan"), anchor, run("-2-ol"))
    items = read("a.docx", with_body(body, {"comments": COMMENTS}))
    assert [p.text for p in passages(items)] == ["one", "(2S)-butan-2-ol"]
    assert [(e.reason, e.text, e.place.paragraph) for e in unread(items)] == [
        ("comment", "Is it (2R)?\nCheck.", 2),
        ("comment", "loose", None),
    ]


def level(index: int, text: str, form: str = "decimal", more: str = "") -> str:
    return (
        f'<w:lvl w:ilvl="{index}"><w:start w:val="1"/><w:numFmt w:val="{form}"/>{more}'
        f'<w:lvlText w:val="{text}"/></w:lvl>'
    )


def listed(number: int, index: int = 0) -> str:
    return f'<w:numPr><w:ilvl w:val="{index}"/><w:numId w:val="{number}"/></w:numPr>'


NUMBERING = (
    "<w:numbering>"
    f'<w:abstractNum w:abstractNumId="0">{level(0, "3.2.S.%1")}{level(1, "3.2.S.%1.%2")}'
    f"{level(2, 'Impurity %3', 'upperLetter')}</w:abstractNum>"
    f'<w:abstractNum w:abstractNumId="1">{level(0, "•", "bullet")}{level(1, "%2)", "lowerRoman")}'
    f"{level(2, '%3', 'cardinalText')}</w:abstractNum>"
    '<w:num w:numId="1"><w:abstractNumId w:val="0"/></w:num>'
    '<w:num w:numId="2"><w:abstractNumId w:val="1"/></w:num>'
    '<w:num w:numId="3"><w:abstractNumId w:val="0"/><w:lvlOverride w:ilvl="2">'
    '<w:startOverride w:val="5"/></w:lvlOverride></w:num>'
    "</w:numbering>"
)


def numbered(*entries: tuple[int, int, str]) -> bytes:
    body = "".join(
        paragraph(run(text), properties=listed(number, index)) for number, index, text in entries
    )
    return with_body(body, {"numbering": NUMBERING})


def test_numbers_of_lists_stand_before_the_text() -> None:
    items = read(
        "a.docx",
        numbered(
            (1, 0, "General"),
            (1, 1, "Nomenclature"),
            (1, 1, "Structure"),
            (1, 2, "first"),
            (1, 2, "second"),
            (1, 0, "Manufacture"),
            (1, 1, "Manufacturer"),
            (2, 0, "a point"),
            (2, 1, "a"),
            (2, 1, "b"),
            (3, 2, "other"),
        ),
    )
    found = passages(items)
    assert [p.text for p in found] == [
        "3.2.S.1 General",
        "3.2.S.1.1 Nomenclature",
        "3.2.S.1.2 Structure",
        "Impurity A first",
        "Impurity B second",
        "3.2.S.2 Manufacture",
        "3.2.S.2.1 Manufacturer",
        "a point",
        "i) a",
        "ii) b",
        "Impurity E other",
    ]
    assert found[3].place.section == "3.2.S.1.2"


def test_a_number_in_an_unknown_format_is_unread() -> None:
    items = read("a.docx", numbered((2, 2, "x")))
    assert reasons(items) == ["list-number"]


def test_a_paragraph_taken_out_is_not_counted() -> None:
    body = (
        paragraph(taken_out("gone"), properties=listed(1) + REMOVED)
        + paragraph(run("General"), properties=listed(1))
        + paragraph(run("n"), put_in(run("ew")), properties=listed(1, 2))
    )
    items = passages(read("a.docx", with_body(body, {"numbering": NUMBERING})))
    assert [p.text for p in items] == ["3.2.S.1 General", "Impurity A new"]
    assert items[1].text[items[1].pending[0].start :] == "ew"


def test_a_heading_style_brings_its_number() -> None:
    styles = (
        '<w:styles><w:style w:type="paragraph" w:styleId="H1"><w:name w:val="heading 1"/><w:pPr>'
        '<w:numPr><w:numId w:val="1"/></w:numPr></w:pPr></w:style></w:styles>'
    )
    body = paragraph(run("General"), properties='<w:pStyle w:val="H1"/>') + paragraph(run("text"))
    items = read("a.docx", with_body(body, {"numbering": NUMBERING, "styles": styles}))
    heading, text = passages(items)
    assert heading.text == "3.2.S.1 General"
    assert (text.headings, text.place.section) == (("3.2.S.1 General",), "3.2.S.1")
