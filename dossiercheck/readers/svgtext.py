"""SVG drawings: the words in them. What is drawn is not read and is listed.

Scalable Vector Graphics 1.1: `text` with its `tspan` and `textPath`; what stands in `defs` and
the like is not shown where it stands, and `title`, `desc` and `metadata` not at all.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from typing import cast

from lxml import etree

from dossiercheck.model import Item, Passage, Place, Source, Unread
from dossiercheck.readers.htmlstyle import (
    Sheet,
    declarations,
    hides,
    is_symbol_font,
    read_sheets,
    tag_of,
)

SVG = "http://www.w3.org/2000/svg"

_SKIPPED = frozenset({"style", "script"})
_HELD = "defs symbol clippath mask marker pattern title desc metadata lineargradient"
_NOT_SHOWN = frozenset(_HELD.split())
_SHAPES = "path line polyline polygon rect circle ellipse image use"
_DRAWN = frozenset(_SHAPES.split())
_LOOKS = ("display", "visibility", "opacity", "font-size", "font-family")


def read_root(source: Source, root: etree._Element) -> Iterator[Item]:
    """The words of a drawing, each text element a passage, and the drawing as unread."""
    yield from svg_items(root, Place(source.path))


def _at(node: etree._Element, place: Place) -> Place:
    """The place with the line that the element begins in, where the parser counts so far."""
    line = cast("int | None", node.sourceline)
    return replace(place, line=line) if line and line < 65_535 else place


def svg_items(root: etree._Element, place: Place) -> Iterator[Item]:
    """As `read_root`, for an `svg` element at a place in a page."""
    styles = [
        "".join(map(str, one.itertext(etree.Element)))
        for one in root.iter(etree.Element)
        if tag_of(one) == "style"
    ]
    sheet = read_sheets(styles)
    drawn = sum(tag_of(one) in _DRAWN for one in root.iter(etree.Element))
    for selector in sheet.doubtful:
        detail = f"A style hides “{selector[:200]}” at times; it is read as shown."
        yield Unread(place, "style-sheet", detail)
    yield from _walk(root, sheet, place)
    if drawn:
        detail = f"A drawing of {drawn} lines and shapes, which is not read."
        yield Unread(place, "picture", detail)


def _walk(node: etree._Element, sheet: Sheet, place: Place) -> Iterator[Item]:
    for child in node.iterchildren(tag=etree.Element):
        tag = tag_of(child)
        bare = child.text is None and not len(child)
        if tag in _SKIPPED or (bare and tag in _DRAWN):
            continue
        where = _at(child, place)
        style = _style(child, tag, sheet)
        if tag in _NOT_SHOWN or hides(style):
            if text := _words(child):
                detail = "Text that the drawing holds and does not show."
                yield Unread(where, "hidden-text", detail, text[:2000])
        elif tag == "text":
            yield from _text(child, sheet, where)
        elif tag == "foreignobject":
            if text := _words(child):
                detail = "Text of another format set in the drawing, which is not read."
                yield Unread(where, "embedded-document", detail, text[:2000])
        else:
            yield from _walk(child, sheet, place)


def _text(node: etree._Element, sheet: Sheet, place: Place) -> Iterator[Item]:
    """A text element; a part that is hidden or in a symbol font leaves the whole unread."""
    for one in node.iter(etree.Element):
        style = _style(one, tag_of(one), sheet)
        if one is not node and hides(style):
            detail = "A part of the text is not shown."
            yield Unread(place, "hidden-text", detail, _words(node)[:2000])
            return
        if is_symbol_font(style.get("font-family", "")):
            detail = "Text in a symbol font: other characters may be shown, or these."
            yield Unread(place, "symbol-character", detail, _words(node)[:2000])
            return
    lines = [node.text or ""]
    for child in node.iterchildren(tag=etree.Element):
        # A part at a place of its own down the drawing is a line of its own.
        if child.get("y") is not None or (child.get("dy") and child.get("x") is not None):
            lines.append("")
        lines[-1] += "".join(map(str, child.itertext(etree.Element))) + (child.tail or "")
    text = "\n".join(line for line in (" ".join(one.split()) for one in lines) if line)
    if text:
        yield Passage(text, place)


def _style(node: etree._Element, tag: str, sheet: Sheet) -> dict[str, str]:
    own = ";".join(f"{name}:{node.get(name)}" for name in _LOOKS if node.get(name))
    return {**declarations(own), **sheet.style(node, tag)}


def _words(node: etree._Element) -> str:
    return " ".join("".join(map(str, node.itertext(etree.Element))).split())
