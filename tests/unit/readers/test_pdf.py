from __future__ import annotations

from pathlib import Path

import pytest

from dossiercheck.model import Item, Passage, Table
from tests.unit.readers.pdfmaking import Maker, lines, one_page, ruled, show
from tests.unit.readers.reading import passages, read, reasons, tables, texts, unread

REAL = Path("/work/shared/external/ctd_layout")
FILLER = (
    "The drug substance was prepared in three steps, and the yield of each of them was",
    "found to be within the limits that had been set for it during the development work.",
)


def document(*contents: str) -> list[Item]:
    made = Maker()
    for content in contents:
        made.page(content)
    return read("a.pdf", made.bytes())


def body(items: list[Item]) -> list[str]:
    return [p.text for p in passages(items) if not (p.place.section or "").startswith("page ")]


# --- lines and paragraphs ------------------------------------------------------------------


def test_lines_that_the_layout_ended_are_one_paragraph() -> None:
    (passage,) = passages(document(lines(*FILLER)))
    assert passage.text == "\n".join(FILLER)
    assert passage.breaks == (len(FILLER[0]),)
    assert passage.place.page == 1


def test_lines_with_room_left_are_paragraphs_of_their_own() -> None:
    fields = ("Molecular formula: C5H11NO2", "Relative molecular mass: 117.15")
    assert body(document(lines(*FILLER, *fields))) == ["\n".join(FILLER), *fields]


def test_a_hyphen_at_the_end_of_a_line_is_kept_and_the_break_marked() -> None:
    (passage,) = passages(document(lines("the amine (2R)-2-amino-3-methyl-", "butan-1-ol.")))
    assert passage.text == "the amine (2R)-2-amino-3-methyl-\nbutan-1-ol."
    assert passage.breaks == (32,)


def test_an_open_bracket_goes_over_the_line() -> None:
    (passage,) = passages(document(lines("the acid (2R)-2-(4-chloro", "phenyl)propanoic acid")))
    assert len(passage.breaks) == 1


def test_a_wide_gap_between_lines_parts_paragraphs() -> None:
    content = lines(*FILLER, FILLER[0]) + lines(*FILLER, y=700)
    assert len(passages(document(content))) == 2


def test_the_box_of_a_word_holds_it_and_no_more() -> None:
    content = show("Batch 7 was (2R)-2-aminobutane, pure", 72, 700, 10)
    (passage,) = passages(document(content))
    start = passage.text.index("(2R)")
    place = passage.at(start, start + len("(2R)-2-aminobutane"))
    assert place.span == (12, 30)
    assert place.box is not None
    left, top, right, bottom = place.box
    # Widths of Helvetica (Adobe Core 14 metrics), 1/1000 em: "Batch 7 was " is 5726, the name
    # with its comma, which the reader takes for one word, 8926.
    assert left == pytest.approx(72 + 57.26, abs=0.5)
    assert right == pytest.approx(72 + 57.26 + 89.26 - 2.78, abs=3)
    assert top < 842 - 700 < bottom


# --- reading order -------------------------------------------------------------------------


def test_columns_are_read_one_after_the_other() -> None:
    left = [f"left line number {n} of a narrow column" for n in range(1, 9)]
    right = [f"right line number {n} of the other one" for n in range(1, 9)]
    content = show("A title that stands over both of the columns of this page", 72, 800, 14)
    content += lines(*left, y=760) + lines(*right, x=320, y=760)
    text = "\n".join(body(document(content)))
    assert text.index("A title") < text.index("left line number 8")
    assert text.index("left line number 8") < text.index("right line number 1")


def test_a_paragraph_goes_on_in_the_next_column() -> None:
    left = [f"line {n} of a column that is full to its right" for n in range(1, 7)]
    content = lines(*left, "and it ends with (2R)-2-amino-3-methyl-", y=760)
    content += lines("butan-1-ol at the top of the next column of it", *left, x=320, y=760)
    found = [p for p in passages(document(content)) if "2-amino" in p.text]
    assert "methyl-\nbutan-1-ol" in found[0].text


def test_text_that_the_stream_gives_in_a_wrong_order() -> None:
    content = lines("The second paragraph stands below it.", y=600)
    content += lines("The first paragraph stands above it.", y=700)
    assert body(document(content)) == [
        "The first paragraph stands above it.",
        "The second paragraph stands below it.",
    ]


def test_a_paragraph_goes_on_over_the_page_end() -> None:
    first = lines(
        *FILLER, "It was crystallised as the hydrochloride of (2R)-2-amino-3-methyl-", y=90
    )
    second = lines("butan-1-ol, which is stable.", y=760)
    _, passage = passages(document(first, second))
    assert passage.text.endswith("methyl-\nbutan-1-ol, which is stable.")
    assert {stretch.page for stretch in passage.stretches} == {1, 2}
    start = passage.text.index("butan")
    assert passage.at(start, start + 5).page == 2


def test_a_page_turned_by_its_entry() -> None:
    made = Maker()
    # Turned by 90 degrees clockwise: upwards in the page's space is rightwards for the reader.
    made.page(
        "BT /F1 10 Tf 0 1 -1 0 100 72 Tm (Shown upright to the reader) Tj ET", more="/Rotate 90"
    )
    (passage,) = passages(read("a.pdf", made.bytes()))
    assert passage.text == "Shown upright to the reader"
    assert passage.place.box is not None
    left, top, right, bottom = passage.place.box
    assert left == pytest.approx(72, abs=1)
    assert right - left > bottom - top


def test_a_table_page_that_lies_on_its_side() -> None:
    content = "".join(
        f"BT /F1 10 Tf 0 1 -1 0 {100 + 12 * n} 72 Tm ({text}) Tj ET\n"
        for n, text in enumerate(FILLER)
    )
    (passage,) = passages(document(content))
    assert passage.text == "\n".join(FILLER)


# --- characters ----------------------------------------------------------------------------


def test_raised_digits_stay_raised_and_lowered_ones_are_digits() -> None:
    content = (
        "BT /F1 10 Tf 72 700 Td (tricyclo[3.3.1.1) Tj 6 Tf 4 Ts (3,7) Tj 10 Tf 0 Ts (]decane) Tj"
    )
    content += " ( is C) Tj 6 Tf -2 Ts (10) Tj 10 Tf 0 Ts (H) Tj ET"
    (passage,) = passages(document(content))
    assert passage.text == "tricyclo[3.3.1.1³,⁷]decane is C10H"


def test_greek_letters_of_the_symbol_font() -> None:
    content = "BT /FS 10 Tf 72 700 Td (a) Tj /F1 10 Tf (-methyl) Tj ET"
    (passage,) = passages(document(content))
    assert passage.text == "α-methyl"


def test_letter_spaced_words_are_words() -> None:
    content = show("Specification of", 72, 700, more="4 Tc")
    (passage,) = passages(document(content))
    assert passage.text == "Specification of"


def test_a_ligature_is_its_letters() -> None:
    made = Maker()
    table = b"1 beginbfchar <01> <FB01> endbfchar 1 beginbfchar <02> <006E> endbfchar"
    cmap = made.stream(
        b"/CIDInit begincmap 1 begincodespacerange <00> <FF> endcodespacerange "
        + table
        + b" endcmap"
    )
    made.page(
        "BT /F9 10 Tf 72 700 Td <010201> Tj ET",
        f"/Font << /F9 << /Type /Font /Subtype /Type1 /BaseFont /Helvetica /ToUnicode {cmap} 0 R >> >>",
    )
    (passage,) = passages(read("a.pdf", made.bytes()))
    assert passage.text == "finfi"


# --- tables --------------------------------------------------------------------------------


def test_a_ruled_table() -> None:
    content = ruled([72, 200, 400], [700, 680, 640])
    content += show("Item", 76, 686) + show("Name", 204, 686)
    content += show("Impurity B", 76, 666) + lines(
        "(2R)-2-amino-3-methylbutan-1-ol as the", "free base", x=204, y=666
    )
    (table,) = tables(document(content))
    assert texts(table) == [
        ["Item", "Name"],
        ["Impurity B", "(2R)-2-amino-3-methylbutan-1-ol as the\nfree base"],
    ]
    assert table.rows[1][1].breaks == (38,)
    assert table.rows[1][1].place.box == (200.0, 162.0, 400.0, 202.0)


def test_a_merged_cell_is_repeated_where_it_reaches() -> None:
    content = "0.5 w 72 700 m 400 700 l S 72 680 m 400 680 l S 72 660 m 400 660 l S\n"
    content += "72 700 m 72 660 l S 400 700 m 400 660 l S 200 680 m 200 660 l S\n"
    content += show("Over both", 76, 686) + show("left", 76, 666) + show("right", 204, 666)
    (table,) = tables(document(content))
    assert texts(table) == [["Over both", "Over both"], ["left", "right"]]
    assert table.rows[0][0] is table.rows[0][1]


def test_a_table_without_lines() -> None:
    rows = [("Test", "Method", "Result"), ("Assay", "HPLC", "99.8"), ("Water", "KF", "0.1")]
    content = "".join(
        show(text, 72 + 120 * column, 700 - 14 * row)
        for row, cells in enumerate(rows)
        for column, text in enumerate(cells)
    )
    (table,) = tables(document(content))
    assert texts(table) == [list(row) for row in rows]


def test_a_table_goes_on_over_the_page_and_its_headings_are_not_repeated() -> None:
    def page(top: float, rows: list[tuple[str, str]]) -> str:
        ys = [top - 20 * n for n in range(len(rows) + 1)]
        return ruled([72, 200, 400], ys) + "".join(
            show(a, 76, y - 14) + show(b, 204, y - 14) for (a, b), y in zip(rows, ys, strict=False)
        )

    head = ("Code", "Chemical name")
    first = page(160, [head, ("DX-101", "(2R)-2-aminobutane"), ("DX-102", "(2R)-2-[(4-chloro-")])
    second = page(780, [head, ("", "phenyl)methyl]butane"), ("DX-103", "(2S)-2-aminobutane")])
    (table,) = tables(document(first, second))
    assert [row[0] for row in texts(table)] == ["Code", "DX-101", "DX-102", "DX-103"]
    assert table.rows[2][1].text == "(2R)-2-[(4-chloro-\nphenyl)methyl]butane"
    assert table.rows[3][0].place.page == 2


# --- headings, running lines ---------------------------------------------------------------


def test_sections_from_the_file_name_and_from_headings() -> None:
    content = lines("3.2.S.1.2 Structure", y=760) + lines("It is a single enantiomer.", y=720)
    made = Maker()
    made.page(content)
    items = read("m3/3.2.S.1_general.pdf", made.bytes())
    assert [(p.place.section, p.headings) for p in passages(items)] == [
        ("3.2.S.1.2", ()),
        ("3.2.S.1.2", ("3.2.S.1.2 Structure",)),
    ]
    made = Maker()
    made.page(lines("It is a single enantiomer."))
    (passage,) = passages(read("m3/3.2.S.1_general.pdf", made.bytes()))
    assert passage.place.section == "3.2.S.1"


def test_bookmarks_make_headings() -> None:
    made = Maker()
    page = made.page(lines("Reference Standard", y=760) + lines("It was qualified.", y=720))
    mark = f"<< /Title (Reference Standard) /Parent 20 0 R /Dest [{page} 0 R /Fit] >>"
    number = made.add(mark)
    root = made.add(f"<< /First {number} 0 R /Last {number} 0 R /Count 1 >>")
    made.objects[number - 1] = mark.replace("20 0 R", f"{root} 0 R").encode()
    made.catalogue = f"/Outlines {root} 0 R".encode()
    found = passages(read("a.pdf", made.bytes()))
    assert found[1].headings == ("Reference Standard",)


def test_running_lines_are_told_once_and_apart() -> None:
    pages = [
        show("Marlet Works - 3.2.S.1 General", 72, 815, 8)
        + lines(*FILLER, y=760 - 20 * n)
        + show(f"Page {n} of 3", 280, 25, 8)
        for n in (1, 2, 3)
    ]
    items = document(*pages)
    aside = [p for p in passages(items) if (p.place.section or "").startswith("page ")]
    assert [p.text for p in aside] == ["Marlet Works - 3.2.S.1 General", "Page 1 of 3"]
    assert body(items) == ["\n".join(FILLER)] * 3


# --- what is not read ----------------------------------------------------------------------


def picture(made: Maker) -> int:
    return made.stream(
        b"\x00" * 300,
        "/Type /XObject /Subtype /Image /Width 10 /Height 10 /ColorSpace /DeviceRGB "
        "/BitsPerComponent 8",
    )


def test_a_picture_is_listed_with_its_place() -> None:
    made = Maker()
    image = picture(made)
    made.page(
        lines(*FILLER) + "q 200 0 0 100 72 500 cm /I1 Do Q",
        made.fonts() + f" /XObject << /I1 {image} 0 R >>",
    )
    (entry,) = unread(read("a.pdf", made.bytes()))
    assert (entry.reason, entry.place.page) == ("picture", 1)
    assert entry.place.box == (72.0, 242.0, 272.0, 342.0)


def test_a_drawing_is_listed_and_its_letters_are_no_text() -> None:
    ring = "1 w 100 500 m 120 511 l 140 500 l 140 477 l 120 466 l 100 477 l h S\n"
    ring += "140 500 m 160 511 l S\n"
    content = lines(*FILLER) + ring + show("OH", 162, 508)
    items = document(content)
    (entry,) = unread(items)
    assert (entry.reason, entry.text) == ("drawing", "OH")
    assert body(items) == ["\n".join(FILLER)]


def test_a_page_that_is_a_picture() -> None:
    made = Maker()
    image = picture(made)
    made.page("q 595 0 0 842 0 0 cm /I1 Do Q", f"/XObject << /I1 {image} 0 R >>")
    made.page(lines(*FILLER))
    items = read("a.pdf", made.bytes())
    assert "picture-page" in reasons(items)
    assert body(items) == ["\n".join(FILLER)]


def test_text_that_is_not_painted_is_not_read_as_text() -> None:
    items = document(lines(*FILLER) + show("unseen words", 72, 500, more="3 Tr"))
    assert body(items) == ["\n".join(FILLER)]
    (entry,) = unread(items)
    assert (entry.reason, entry.text) == ("hidden-text", "unseen words")


def test_a_note_on_the_page_is_listed() -> None:
    made = Maker()
    note = made.add("<< /Type /Annot /Subtype /Text /Rect [10 10 20 20] /Contents (why?) >>")
    made.page(lines(*FILLER), more=f"/Annots [{note} 0 R]")
    assert reasons(read("a.pdf", made.bytes())) == ["annotation"]


@pytest.mark.skipif(not REAL.is_dir(), reason="the real CTD files are not on this machine")
def test_real_ctd_documents() -> None:
    """Read by eye against the files; sections by ICH M4Q granularity."""
    found = {
        path.name[:9]: read(path.name, path.read_bytes()) for path in sorted(REAL.glob("*.pdf"))
    }
    general = tables(found["3.2.S.1.3"])
    assert [
        "Stereochemistry",
        "One asymmetric center and one axis of\nchirality; (S,M) - enantiomer",
    ] in [row for table in general for row in texts(table)]
    standards = found["3.2.S.5_R"]
    sections = {
        item.place.section
        for item in standards
        if isinstance(item, Passage | Table) and not str(item.place.section).startswith("page ")
    }
    assert sections == {"3.2.S.5"}
    assert any(
        "2.1 Primary Reference Standard Preparation" in p.headings for p in passages(standards)
    )
    first = next(t for t in tables(standards) if len(t.rows[0]) == 6)
    assert texts(first)[0][:4] == ["Test", "Acceptance Criteria", "Method", "Initial Results"]
    assert [reason for items in found.values() for reason in reasons(items)] == []


def test_one_page_is_enough() -> None:
    assert body(read("a.pdf", one_page(lines("Only this.")))) == ["Only this."]


def test_codes_at_the_top_of_pages_are_no_running_lines() -> None:
    """They differ in a number as page numbers do, but do not count on with the pages."""
    pages = [
        show(f"QX-{code}", 76, 806) + show("was tested", 204, 806) + lines(*FILLER, y=600)
        for code in (510, 829, 327)
    ]
    texts_ = "\n".join(body(document(*pages)))
    assert all(f"QX-{code}" in texts_ for code in (510, 829, 327))


def test_text_over_the_edge_of_the_page_is_listed() -> None:
    long = "a line that has no end on this page, " * 4
    items = document(lines(*FILLER) + show(long + "(2R)-2-amino", 72, 300))
    (entry,) = unread(items)
    assert entry.reason == "off-page"
    assert entry.text.startswith("a line that has no end")
