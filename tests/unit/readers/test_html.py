"""HTML as it is shown: text, headings, tables; what is hidden or no text is listed."""

from __future__ import annotations

import pytest

from dossiercheck.model import Item
from dossiercheck.readers.htmlstyle import read_sheets
from tests.unit.readers.reading import passages, read, reasons, tables, texts, unread

NAME = "(2R)-2-aminopropanoic acid"


def page(body: str, head: str = "", name: str = "a.html") -> list[Item]:
    text = f"<!DOCTYPE html><html><head>{head}</head><body>{body}</body></html>"
    return read(name, text.encode())


def lines(items: list[Item]) -> list[str]:
    return [one.text for one in passages(items)]


def test_blocks_are_passages_and_inline_marks_are_not_seen() -> None:
    items = page(
        "<p>The <b>(2<i>R</i>)</b>-2-amino<wbr>propanoic\n   acid &amp; <span>its</span> salt</p>"
        "<div>one<p>two</p>three<ul><li>four<li>five</ul></div>six<br>seven"
    )
    assert lines(items) == [
        "The (2R)-2-aminopropanoic acid & its salt",
        "one",
        "two",
        "three",
        "four",
        "five",
        "six\nseven",
    ]
    assert [one.place.paragraph for one in passages(items)] == [1, 2, 3, 4, 5, 6, 7]
    assert reasons(items) == []


def test_headings_give_the_section() -> None:
    items = page(
        f"<h1>3.2.S.1 General Information</h1><h2>3.2.S.1.2 Structure</h2><p>{NAME}</p>"
        "<h2>Other</h2><p>b</p><p>3.2.S.2 Manufacture</p><p>c</p>"
    )
    found = {one.text: (one.place.section, one.headings) for one in passages(items)}
    assert found[NAME] == (
        "3.2.S.1.2",
        ("3.2.S.1 General Information", "3.2.S.1.2 Structure"),
    )
    assert found["b"][0] == "3.2.S.1"
    assert found["c"][0] == "3.2.S.2"


@pytest.mark.parametrize(
    ("markup", "shown"),
    [
        ("&alpha;-D-gluc&#111;se &Prime; &lsqb;2&rsqb; &minus;&nbsp;x", "α-D-glucose ″ [2] −\xa0x"),
        ("&amp;alpha;", "&alpha;"),
        ("&bogus;", "&bogus;"),
        ("0<sup>2,7</sup>", "0²,⁷"),
        ('0<span style="vertical-align: super">2</span>', "0²"),
        ("C<sub>3</sub>H<sub>7</sub>", "C3H7"),
        ('(2<span style="text-transform:uppercase">r</span>)', "(2R)"),
        ("a&shy;b", "a\u00adb"),
        ("a<!-- no -->b<?x no?>c", "abc"),
        ("<ins>new</ins> text", "new text"),
        ("<pre>a\n  b</pre>", "a\nb"),
    ],
)
def test_characters(markup: str, shown: str) -> None:
    items = page(f"<p>{markup}</p>" if "<pre>" not in markup else markup)
    assert lines(items) == [shown]


def test_a_table_with_spans() -> None:
    items = page(
        "<table><caption>Table 1. <b>Names</b></caption><thead><tr><th>Code<th colspan=2>Names"
        "<tbody><tr><td rowspan=2>A<td>x<td>y</tr><tr><td>z<p>w</p></td></tr></table><p>after</p>"
    )
    (table,) = tables(items)
    assert texts(table) == [["Code", "Names", "Names"], ["A", "x", "y"], ["A", "z\nw", ""]]
    assert table.caption == "Table 1. Names"
    assert table.rows[2][0].place == table.rows[1][0].place
    assert (table.rows[2][1].place.row, table.rows[2][1].place.column) == (3, "B")
    assert lines(items) == ["after"]


def test_a_table_in_a_table_comes_after_it() -> None:
    items = page("<table><tr><td>a<table><tr><td>b</td></tr></table>c</td></tr></table>")
    assert [texts(one) for one in tables(items)] == [[["ac"]], [["b"]]]


def test_text_that_stands_in_a_table_and_in_no_cell_is_not_lost() -> None:
    items = page("<table>loose<tr>free<td>a</td><div>stray</div></tr></table>")
    assert sorted(" ".join(lines(items)).split()) == ["free", "loose", "stray"]
    assert [texts(one) for one in tables(items)] == [[["a"]]]


def test_terms_and_definitions_are_a_table() -> None:
    items = page(f"<dl><dt>Code<dd>A</dd><div><dt>Name<dt>Synonym<dd>{NAME}</div></dl>")
    (table,) = tables(items)
    assert texts(table) == [["Code", "A"], ["Name", NAME], ["Synonym", NAME]]


def test_end_tags_that_may_be_left_out() -> None:
    """HTML Standard, 13.1.2.4 (optional tags)."""
    items = page("<dl><dt>a<dt>b<dd>c<dd>d<dd>e<dt>f<dd>g</dl>")
    assert texts(tables(items)[0]) == [
        ["a", "c"], ["b", "c"], ["a", "d"], ["b", "d"], ["a", "e"], ["b", "e"], ["f", "g"],
    ]  # fmt: skip
    assert texts(tables(page("<table><td>a<td>b<tr><td>c<td>d</table>"))[0]) == [
        ["a", "b"],
        ["c", "d"],
    ]
    items = page("<h1>1.1 One<h2>1.1.1 Two</h2><p>text<p>more")
    assert lines(items) == ["1.1 One", "1.1.1 Two", "text", "more"]
    assert [one.place.section for one in passages(items)] == ["1.1", "1.1.1", "1.1.1", "1.1.1"]


def test_a_row_span_to_the_end_and_spans_past_the_table() -> None:
    items = page("<table><tr><td rowspan=0>a<td>b<tr><td rowspan=9 colspan=abc>c<tr><td>d</table>")
    assert texts(tables(items)[0]) == [["a", "b", ""], ["a", "c", ""], ["a", "c", "d"]]


HIDDEN = [
    "<p hidden>secret</p>",
    '<p style="color:red; display:none">secret</p>',
    '<div style="VISIBILITY: Hidden !important"><p>secret</p></div>',
    '<span style="font-size:0px">secret</span>',
    '<span style="opacity:0.0">secret</span>',
    '<p class="x off y">secret</p>',
    '<p id="gone">secret</p>',
    "<aside>secret</aside>",
    "<template><p>secret</p></template>",
    "<noscript>secret</noscript>",
    "<dialog>secret</dialog>",
    "<table><tr class=off><td>secret</td></tr></table>",
    "<table><tr><td hidden>secret</td></tr></table>",
]


@pytest.mark.parametrize("markup", HIDDEN)
def test_hidden_text_is_listed_and_not_read(markup: str) -> None:
    style = "<style>/* a */ .off, #gone {display:none} aside{visibility:hidden}</style>"
    items = page(f"<p>shown</p>{markup}", style)
    assert lines(items) == ["shown"]
    (entry,) = unread(items)
    assert (entry.reason, entry.text) == ("hidden-text", "secret")
    assert not [cell for one in tables(items) for row in one.rows for cell in row if cell.text]


def test_text_that_only_looks_hidden_is_read() -> None:
    style = "<style>.a{display:none} .a{display:block} p{opacity:0.5;font-size:0.8em}</style>"
    items = page("<p class=a>one</p><p style='opacity:1'>two</p><dialog open>three</dialog>", style)
    assert lines(items) == ["one", "two", "three"]
    assert reasons(items) == []


def test_a_style_that_cannot_be_followed_is_told() -> None:
    style = (
        "<style>div > p.b {display:none} @media print {.c{display:none}} a:hover{color:red}</style>"
    )
    items = page("<div><p class=b>shown</p></div>", f"{style}<link rel=stylesheet href=x.css>")
    assert lines(items) == ["shown"]
    assert reasons(items) == ["style-sheet"] * 3
    assert read_sheets(["a{display:none"]).rules == {}


def test_what_is_no_text_is_listed() -> None:
    items = page(
        '<p>a<img src="http://x.invalid/a.png" alt="Structure of A"></p><iframe src=x></iframe>'
        "<math><mi>x</mi></math><object data=x></object><p>b <del>old</del> <s>older</s></p>"
        '<svg><title>T</title><text>OH</text><path d="M0 0"/></svg>'
    )
    assert lines(items) == ["a", "b", "OH"]
    assert sorted((one.reason, one.text) for one in unread(items)) == [
        ("embedded-document", ""),
        ("embedded-document", ""),
        ("equation", "x"),
        ("hidden-text", "T"),
        ("picture", ""),
        ("picture", "Structure of A"),
        ("struck-text", "old"),
        ("struck-text", "older"),
    ]


def test_letters_in_a_symbol_font_are_not_taken_for_latin_ones() -> None:
    items = page('<p>17<font face="Symbol">a</font>-ol</p><p style="font: 9pt symbol">b</p>')
    assert lines(items) == ["17\ufffd-ol", "\ufffd"]
    assert reasons(items) == ["symbol-character"] * 2


def test_scripts_are_not_text_and_a_page_made_by_one_says_so() -> None:
    items = page(f"<script>document.write('<p>{NAME}</p>')</script><style>p{{}}</style>")
    assert reasons(items) == ["script"]
    assert lines(items) == []
    assert reasons(page("<p>text</p><script>x</script>")) == []


def test_form_fields_show_their_text() -> None:
    items = page(
        "<form><input value='typed'><input type=hidden value=no><textarea>t</textarea></form>"
    )
    assert lines(items) == ["typed", "t"]


@pytest.mark.parametrize(
    ("data", "shown"),
    [
        ('<meta charset="windows-1253"><p>α-x</p>'.encode("cp1253"), "α-x"),
        (
            '<meta http-equiv=a content="text/html; charset=iso-8859-7"><p>β</p>'.encode(
                "iso8859-7"
            ),
            "β",
        ),
        ('<?xml version="1.0" encoding="utf-8"?><html><p>α</p></html>'.encode(), "α"),
        ("<p>α</p>".encode("utf-16"), "α"),
        ('<meta charset="iso-8859-1"><p>±</p>'.encode("cp1252"), "±"),
        ("\ufeff<meta charset=windows-1252><p>α</p>".encode(), "α"),
    ],
)
def test_encodings(data: bytes, shown: str) -> None:
    assert lines(read("a.htm", data)) == [shown]


@pytest.mark.parametrize(
    ("data", "reason"),
    [
        (b"", "empty"),
        (b"  \n", "empty"),
        (b'<meta charset="utf-7"><p>+AGE-</p>', "encoding"),
        (b'<meta charset="utf-8"><p>\xff</p>', "encoding"),
        (b'<!DOCTYPE html [<!ENTITY x SYSTEM "file:///etc/passwd">]><p>&x;</p>', "entities"),
        (b"<div>" * 5000 + b"deep", "size-budget"),
        (b"<p title='" + b"a" * 11_000_000 + b"'>x</p><p>after</p>", "size-budget"),
        (b"<p>" + b"a" * 21_000_000, "size-budget"),
        (b"<p>\0\0</p>", "binary"),
        (b"%PDF-1.7", "content-mismatch"),
    ],
)
def test_what_is_not_read_says_why(data: bytes, reason: str) -> None:
    assert reasons(read("a.html", data)) == [reason]


def test_a_page_that_is_cut_says_so() -> None:
    items = read("a.html", b"<html><body><p>one</p><p>two")
    assert lines(items) == ["one", "two"]
    assert reasons(items) == ["truncated"]


@pytest.mark.parametrize(
    "cell",
    [
        "<td colspan=1000>",
        "<td rowspan=65534 colspan=500>",
        "<td rowspan=99999999999 colspan=1000>",
    ],
)
def test_a_table_of_enormous_cells(cell: str) -> None:
    items = page("<table>" + f"<tr>{cell}a" * 20_000 + "</table><p>after</p>")
    assert "cell-budget" in reasons(items)
    assert lines(items) == ["after"]


def test_terms_and_definitions_that_multiply() -> None:
    items = page("<dl>" + "<dt>a</dt>" * 2000 + "<dd>b</dd>" * 2000 + "</dl><p>after</p>")
    assert reasons(items) == ["cell-budget"]
    assert lines(items) == ["after"]


@pytest.mark.parametrize("tag", ["td<rowspan=2", 't"a', "fq[ƒ", "a:b:c"])
def test_names_that_are_none_in_xml(tag: str) -> None:
    """Found by mutation: such names break the parser's own splitting of names."""
    items = page(f"<p>one</p><table><tr><{tag}>two</td></tr></table><svg><{tag}>x</svg>")
    assert lines(items)[0] == "one"


def test_xhtml_in_an_xml_file() -> None:
    text = f'<html xmlns="http://www.w3.org/1999/xhtml"><body><h1>1.1 Head</h1><p>{NAME}</p></body></html>'
    items = read("a.xml", text.encode())
    assert lines(items) == ["1.1 Head", NAME]
    assert passages(items)[1].place.section == "1.1"
    assert lines(read("a.xhtml", text.encode())) == ["1.1 Head", NAME]
