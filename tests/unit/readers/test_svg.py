"""SVG: words are passages, the drawing is unread; and XML that nobody knows."""

from __future__ import annotations

import pytest

from dossiercheck.model import Item
from tests.unit.readers.reading import passages, read, reasons, unread


def drawing(inside: str, name: str = "a.svg") -> list[Item]:
    text = f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 9 9">{inside}</svg>'
    return read(name, text.encode())


def lines(items: list[Item]) -> list[str]:
    return [one.text for one in passages(items)]


@pytest.mark.parametrize("name", ["a.svg", "a.xml"])
def test_words_are_read_and_the_drawing_is_listed(name: str) -> None:
    items = drawing(
        '<g><text x="1">(2<tspan font-style="italic">R</tspan>)-x</text><path d="M0 0"/></g>'
        '<text><tspan x="0" y="1">one</tspan><tspan x="0" y="2">two</tspan></text>'
        '<line/><image href="http://x.invalid/a.png"/><script>x</script>',
        name,
    )
    assert lines(items) == ["(2R)-x", "one\ntwo"]
    (entry,) = unread(items)
    assert (entry.reason, entry.detail) == (
        "picture",
        "A drawing of 3 lines and shapes, which is not read.",
    )


@pytest.mark.parametrize(
    "inside",
    [
        "<desc>secret</desc>",
        "<metadata><mol>secret</mol></metadata>",
        "<defs><text>secret</text></defs>",
        '<text display="none">secret</text>',
        '<g visibility="hidden"><text>secret</text></g>',
        '<text style="opacity:0">secret</text>',
        "<style>.h{display:none}</style><text class='h'>secret</text>",
        "<text>sec<tspan font-size='0'>ret</tspan></text>",
    ],
)
def test_hidden_words_are_listed(inside: str) -> None:
    items = drawing(f"{inside}<text>shown</text>")
    assert lines(items) == ["shown"]
    assert [(one.reason, one.text) for one in unread(items)] == [("hidden-text", "secret")]


def test_words_in_a_symbol_font_and_in_other_formats() -> None:
    items = drawing(
        '<text font-family="Symbol">a</text><foreignObject><p>words</p></foreignObject>'
    )
    assert lines(items) == []
    assert reasons(items) == ["symbol-character", "embedded-document"]


@pytest.mark.parametrize(
    ("data", "reason"),
    [
        (b"", "empty"),
        (b"<svg", "damaged-xml"),
        (b"<html/>", "content-mismatch"),
        (b'<!DOCTYPE svg [<!ENTITY x "y">]><svg>&x;</svg>', "entities"),
        (b"<svg>" + b"<g>" * 1000 + b"</g>" * 1000 + b"</svg>", "damaged-xml"),
        (b"<svg>" + b" " * 20_000_001 + b"</svg>", "size-budget"),
        (b"\x1f\x8b\x08\0", "content-mismatch"),
    ],
)
def test_what_is_not_read_says_why(data: bytes, reason: str) -> None:
    assert reasons(read("a.svg", data)) == [reason]


def test_the_words_of_xml_that_nobody_knows() -> None:
    text = (
        '<list xmlns="urn:x"><entry code="A"><name>(2R)-2-amino<i>propanoic</i> acid</name>'
        "<note><!-- c -->one <term>two</term> 0<sup>2</sup></note></entry>\n<entry/></list>"
    )
    items = read("a.xml", text.encode())
    (entry,) = unread(items)
    assert entry.reason == "no-reader"
    assert "the root list in the namespace urn:x" in entry.detail
    assert "running text" in entry.detail
    assert lines(items) == ["(2R)-2-aminopropanoic acid", "one two 0²"]
    assert [one.place.paragraph for one in passages(items)] == [1, 2]


@pytest.mark.parametrize(
    "inside",
    [
        "propanoic acid<x>one</x> of",
        "a <y><x>propan</x>oic</y> acid",
        "propan<x/>ol",
        "of <x>a</x>b",
    ],
)
def test_an_element_that_may_part_a_word_leaves_the_passage_unread(inside: str) -> None:
    items = read("a.xml", f"<list><entry>{inside}</entry><entry>sound</entry></list>".encode())
    assert reasons(items) == ["no-reader", "mixed-content"]
    assert lines(items) == ["sound"]
