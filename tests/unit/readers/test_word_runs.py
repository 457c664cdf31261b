"""Runs as they are shown: fonts, raised text, fields, controls, objects. ECMA-376 part 1, 17.3,
17.5 and 17.16."""

from __future__ import annotations

import pytest

from dossiercheck.names.typography import clean
from tests.unit.readers.reading import passages, read, reasons, unread
from tests.unit.readers.wordparts import R, paragraph, run, with_body

RAISED = '<w:vertAlign w:val="superscript"/>'
SYMBOL = '<w:rFonts w:ascii="Symbol" w:hAnsi="Symbol"/>'


def line(*inner: str, parts: dict[str, str] | None = None) -> str:
    (found,) = passages(read("a.docx", with_body(paragraph(*inner), parts)))
    return found.text


@pytest.mark.parametrize(
    ("inner", "shown", "cleaned"),
    [
        ((run("N"), run("6", RAISED), run("-methyl")), "N⁶-methyl", "N6-methyl"),
        (
            (run("tricyclo[3.3.1.1"), run("3,7", RAISED), run("]decane")),
            "tricyclo[3.3.1.1³,⁷]decane",
            "tricyclo[3.3.1.1^{3,7}]decane",
        ),
        ((run("C"), run("4", '<w:vertAlign w:val="subscript"/>')), "C4", "C4"),
        ((run("Na"), run("+", RAISED)), "Na⁺", "Na+"),
        ((run("N"), run("6", '<w:position w:val="6"/>'), run("-")), "N⁶-", "N6-"),
        ((run("a", SYMBOL), run("-methyl")), "α-methyl", "alpha-methyl"),
        ((run("\uf062", SYMBOL), run("-D")), "β-D", "beta-D"),
        ((run("2-", SYMBOL),), "2−", "2-"),
        ((run("l", "<w:smallCaps/>"), run("-alanine")), "L-alanine", "L-alanine"),
        ((run("Chemical name", "<w:caps/>"),), "Chemical name", "Chemical name"),
    ],
)
def test_formatting_that_changes_what_is_read(
    inner: tuple[str, ...], shown: str, cleaned: str
) -> None:
    text = line(*inner)
    assert text == shown
    assert clean(text).text == cleaned


def test_a_style_of_the_run_counts_like_its_own_formatting() -> None:
    styles = (
        "<w:styles>"
        '<w:style w:type="character" w:styleId="Up"><w:rPr><w:vertAlign w:val="superscript"/>'
        "</w:rPr></w:style>"
        '<w:style w:type="character" w:styleId="Note"><w:basedOn w:val="Gone"/></w:style>'
        '<w:style w:type="character" w:styleId="Gone"><w:rPr><w:vanish/></w:rPr></w:style>'
        '<w:style w:type="paragraph" w:styleId="Aside"><w:rPr><w:vanish/></w:rPr></w:style>'
        "</w:styles>"
    )
    body = paragraph(
        run("N"),
        run("6", '<w:rStyle w:val="Up"/>'),
        run("hidden", '<w:rStyle w:val="Note"/>'),
        run("seen", '<w:rStyle w:val="Note"/><w:vanish w:val="0"/>'),
    )
    # Two styles that both hide turn each other back (17.7.3).
    body += paragraph(
        run("first"),
        run("twice", '<w:rStyle w:val="Gone"/>'),
        properties='<w:pStyle w:val="Aside"/>',
    )
    items = read("a.docx", with_body(body, {"styles": styles}))
    assert [p.text for p in passages(items)] == ["N⁶seen", "twice"]
    assert [e.text for e in unread(items)] == ["hidden", "first"]


@pytest.mark.parametrize(
    ("font", "code", "shown"),
    [("Symbol", "F062", "β"), ("Symbol", "F057", "Ω"), ("MS Gothic", "2612", "☒")],
)
def test_symbols(font: str, code: str, shown: str) -> None:
    inner = f'<w:r><w:sym w:font="{font}" w:char="{code}"/></w:r>'
    assert line(run("x"), inner) == f"x{shown}"


@pytest.mark.parametrize(
    "inner",
    [
        '<w:r><w:sym w:font="Wingdings" w:char="F0E0"/></w:r>',
        '<w:r><w:sym w:font="Symbol" w:char="zz"/></w:r>',
        run("\uf061", '<w:rFonts w:ascii="Dingbats"/>'),
        run("\uf061"),
    ],
)
def test_a_character_whose_shape_is_not_known_is_unread(inner: str) -> None:
    items = read("a.docx", with_body(paragraph(run("x"), inner)))
    assert [p.text for p in passages(items)] == ["x\ufffd"]
    assert reasons(items) == ["symbol-character"]


def char(kind: str) -> str:
    return f'<w:r><w:fldChar w:fldCharType="{kind}"/></w:r>'


def code(text: str) -> str:
    return f"<w:r><w:instrText>{text}</w:instrText></w:r>"


def test_a_field_shows_its_result_and_not_its_instruction() -> None:
    inner = (
        run("see "),
        char("begin"),
        code(" IF "),
        char("begin"),
        code("DOCPROPERTY x"),
        char("separate"),
        run("inner"),
        char("end"),
        char("separate"),
        run("(2S)-butan-2-ol"),
        char("end"),
        run(" here"),
    )
    assert line(*inner) == "see (2S)-butan-2-ol here"
    simple = f'<w:fldSimple w:instr="REF x">{run("B")}</w:fldSimple>'
    assert line(run("Impurity "), simple) == "Impurity B"


def test_a_field_may_reach_over_paragraphs() -> None:
    body = paragraph(char("begin"), code("TOC"), char("separate"), run("one"))
    body += paragraph(run("two"), char("end"))
    assert [p.text for p in passages(read("a.docx", with_body(body)))] == ["one", "two"]


def test_a_field_that_shows_what_is_not_stored_is_unread() -> None:
    inner = (char("begin"), code(r"EQ \o(a,b)"), char("end"), run("x"))
    items = read("a.docx", with_body(paragraph(*inner)))
    assert [(e.reason, e.text) for e in unread(items)] == [("field", r"EQ \o(a,b)")]


def test_the_entry_chosen_in_a_form_is_read() -> None:
    entries = "".join(f'<w:listEntry w:val="{text}"/>' for text in ("racemate", "(S)-form"))
    begin = (
        '<w:r><w:fldChar w:fldCharType="begin"><w:ffData><w:ddList><w:result w:val="1"/>'
        f"{entries}</w:ddList></w:ffData></w:fldChar></w:r>"
    )
    assert line(run("Form: "), begin, code("FORMDROPDOWN"), char("end")) == "Form: (S)-form"


def test_a_control_gives_its_text_and_an_empty_one_is_listed() -> None:
    prompt = "<w:sdtPr><w:showingPlcHdr/></w:sdtPr>"
    filled = f"<w:sdt><w:sdtPr/><w:sdtContent>{run('DX-101')}</w:sdtContent></w:sdt>"
    empty = f"<w:sdt>{prompt}<w:sdtContent>{run('Click here')}</w:sdtContent></w:sdt>"
    block = f"<w:sdt>{prompt}<w:sdtContent>{paragraph(run('Enter a name'))}</w:sdtContent></w:sdt>"
    items = read("a.docx", with_body(paragraph(run("Code: "), filled, empty) + block))
    assert [p.text for p in passages(items)] == ["Code: DX-101"]
    assert [(e.reason, e.text) for e in unread(items)] == [
        ("placeholder", "Click here"),
        ("placeholder", "Enter a name"),
    ]


def test_ruby_is_read_once() -> None:
    inner = f"<w:ruby><w:rt>{run('above')}</w:rt><w:rubyBase>{run('base')}</w:rubyBase></w:ruby>"
    assert line(f"<w:r>{inner}</w:r>") == "base"


BOX = f"<w:txbxContent>{paragraph(run('in the box'))}</w:txbxContent>"
PICTURE = '<pic:pic><pic:blipFill><a:blip r:embed="rIdp"/></pic:blipFill></pic:pic>'
PART = f'<Relationship Id="rIdp" Type="{R}/image" Target="media/one.png"/>'


def test_text_given_in_two_forms_is_read_once() -> None:
    inner = (
        "<w:r><mc:AlternateContent><mc:Choice Requires='wps'><w:drawing><wp:inline><wps:wsp>"
        f"<wps:txbx>{BOX}</wps:txbx></wps:wsp></wp:inline></w:drawing></mc:Choice>"
        f"<mc:Fallback><w:pict><v:shape><v:textbox>{BOX}</v:textbox></v:shape></w:pict>"
        "</mc:Fallback></mc:AlternateContent></w:r>"
    )
    items = read(
        "a.docx",
        with_body(
            paragraph(inner) + f"<mc:AlternateContent><mc:Fallback>"
            f"{paragraph(run('second'))}</mc:Fallback></mc:AlternateContent>"
        ),
    )
    assert [p.text for p in passages(items)] == ["in the box", "second"]
    assert reasons(items) == []


def test_a_picture_beside_a_text_box_does_not_vanish() -> None:
    inner = (
        '<w:r><w:drawing><wp:docPr descr="the structure of DX-101"/>'
        f"{PICTURE}<wps:wsp><wps:txbx>{BOX}</wps:txbx></wps:wsp></w:drawing></w:r>"
    )
    items = read("a.docx", with_body(paragraph(inner), {"p": PART}))
    assert [p.text for p in passages(items)] == ["in the box"]
    (entry,) = unread(items)
    assert entry.reason == "picture"
    assert entry.text == "the structure of DX-101"
    assert "word/media/one.png" in entry.detail


def test_shapes_drawn_in_place_are_listed() -> None:
    inner = '<w:r><w:pict><v:line from="0,0" to="9,9"/><v:line from="0,0" to="9,0"/></w:pict></w:r>'
    assert reasons(read("a.docx", with_body(paragraph(inner)))) == ["picture"]
    rule = '<w:r><w:pict><v:rect o:hr="t"/></w:pict></w:r>'
    assert reasons(read("a.docx", with_body(paragraph(run("x"), rule)))) == []


@pytest.mark.parametrize(
    ("name", "reason"),
    [
        ("Sketcher.Document.6", "drawing-object"),
        ("", "drawing-object"),
        ("Excel.Sheet.12", "embedded-document"),
        ("Equation.3", "equation"),
    ],
)
def test_embedded_objects_are_listed_with_their_part(name: str, reason: str) -> None:
    inner = (
        '<w:r><w:object><v:shape><v:imagedata r:id="rIdp"/></v:shape>'
        f'<o:OLEObject Type="Embed" ProgID="{name}" r:id="rIdo"/></w:object></w:r>'
    )
    part = f'<Relationship Id="rIdo" Type="{R}/oleObject" Target="embeddings/o1.bin"/>'
    (entry,) = unread(read("a.docx", with_body(paragraph(inner), {"p": PART, "o": part})))
    assert (entry.reason, entry.place.paragraph) == (reason, 1)
    assert "word/embeddings/o1.bin" in entry.detail


def test_an_object_that_stands_nowhere_is_listed() -> None:
    part = f'<Relationship Id="rIdo" Type="{R}/oleObject" Target="embeddings/o1.bin"/>'
    assert reasons(read("a.docx", with_body(paragraph(run("x")), {"o": part}))) == [
        "embedded-document"
    ]


@pytest.mark.parametrize(
    "inner",
    [
        '<w:r><w:pict><v:shape><v:imagedata r:link="rIdx"/></v:shape></w:pict></w:r>',
        run("x"),
    ],
)
def test_parts_outside_the_file_are_refused(inner: str) -> None:
    part = (
        f'<Relationship Id="rIdx" Type="{R}/image" Target="file:///etc/hostname"'
        ' TargetMode="External"/>'
    )
    items = read("a.docx", with_body(paragraph(inner), {"x": part}))
    assert [e.reason for e in unread(items) if "hostname" in e.detail] == ["external-part"]


def test_a_link_to_a_page_is_no_part() -> None:
    part = f'<Relationship Id="rIdx" Type="{R}/hyperlink" Target="http://a" TargetMode="External"/>'
    inner = f'<w:hyperlink r:id="rIdx">{run("text")}</w:hyperlink>'
    items = read("a.docx", with_body(paragraph(inner), {"x": part}))
    assert [p.text for p in passages(items)] == ["text"]
    assert reasons(items) == []


def test_text_where_none_is_expected_is_listed() -> None:
    items = read("a.docx", with_body(f"<w:strange>{run('lost')}</w:strange>"))
    assert [(e.reason, e.text) for e in unread(items)] == [("unexpected-content", "lost")]
