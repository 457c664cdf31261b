"""The running text of an SPL section: paragraphs, lists and tables under their titles.

The text block of HL7 CDA and SPL is a small mark-up of its own (`paragraph`, `list` and `item`,
`table`, `content`, `sub`, `sup`, `br`, `renderMultiMedia`). Words marked as deleted in a revision
are not part of the text as it reads now; they are listed and not read.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field, replace
from itertools import islice

from lxml import etree

from dossiercheck.limits import DEFAULT
from dossiercheck.model import Cell, Item, Passage, Place, Source, Table, Unread
from dossiercheck.readers.grid import column_letter
from dossiercheck.readers.xmlpath import path_of

HL7 = "urn:hl7-org:v3"
_BLOCKS = {"paragraph", "item", "caption", "list", "table"}
_SPAN = 200
_CELLS = 200_000
_ELEMENTS = 10_000  # each is found by counting those beside it


@dataclass(eq=False, slots=True)
class _Words:
    """The words of a block, and the elements in it that are not words."""

    parts: list[str] = field(default_factory=list)
    aside: list[etree._Element] = field(default_factory=list)

    @property
    def text(self) -> str:
        """White space is one space, as XML indents; a break begins a line."""
        lines = "".join(self.parts).split("\0")
        return "\n".join(
            line for line in (re.sub(r"[ \t\r\n]+", " ", x).strip() for x in lines) if line
        )


def section_items(
    source: Source, section: etree._Element, numbers: Iterator[int], above: tuple[str, ...] = ()
) -> Iterator[Item]:
    """The section's text and that of the sections in it. `numbers` counts paragraphs."""
    title = _title(section)
    headings = (*above, title) if title else above
    place = Place(source.path, section=title or None)
    for text in section.iterchildren(f"{{{HL7}}}text"):
        if sum(1 for _ in islice(text.iter(), _ELEMENTS + 1)) > _ELEMENTS:
            detail = f"The section has more than {_ELEMENTS} elements; its text is not read."
            yield Unread(replace(place, path=path_of(text)), "size-budget", detail)
            continue
        yield from _blocks(text, place, headings, numbers)
    for inner in section.iterfind(f"{{{HL7}}}component/{{{HL7}}}section"):
        yield from section_items(source, inner, numbers, headings)


def _title(section: etree._Element) -> str:
    title = section.find(f"{{{HL7}}}title")
    if title is not None:
        words = _Words()
        _gather(title, words)
        if words.text:
            return " ".join(words.text.split())
    code = section.find(f"{{{HL7}}}code")
    return (code.get("displayName") or "") if code is not None else ""


def _blocks(
    node: etree._Element, place: Place, headings: tuple[str, ...], numbers: Iterator[int]
) -> Iterator[Item]:
    """Blocks in order; words that stand between them make a passage of their own."""
    if _is_deleted(node):
        yield _deleted(node, place)
        return
    words = _Words([node.text or ""])
    for child in node.iterchildren(tag=etree.Element):
        name = _local(child)
        if name in _BLOCKS:
            yield from _passage(node, words, place, headings, numbers)
            words = _Words()
            if name == "table":
                yield from _table(child, place, headings, next(numbers))
            else:
                yield from _blocks(child, place, headings, numbers)
        else:
            _inline(child, words)
        words.parts.append(child.tail or "")
    yield from _passage(node, words, place, headings, numbers)


def _passage(
    node: etree._Element,
    words: _Words,
    place: Place,
    headings: tuple[str, ...],
    numbers: Iterator[int],
) -> Iterator[Item]:
    text = words.text
    where = replace(place, path=path_of(node))
    if text:
        where = replace(where, paragraph=next(numbers))
        yield Passage(text, where, headings)
    yield from _asides(words, where, headings, numbers)


def _asides(
    words: _Words, place: Place, headings: tuple[str, ...], numbers: Iterator[int]
) -> Iterator[Item]:
    for element in words.aside:
        where = replace(place, path=path_of(element))
        if _is_deleted(element):
            yield _deleted(element, where)
        elif _local(element) == "footnote":
            yield from _blocks(element, where, headings, numbers)
        else:
            what = element.get("referencedObject") or "without a name"
            yield Unread(where, "picture", f"The picture {what} is not read.")


def _gather(node: etree._Element, words: _Words) -> None:
    words.parts.append(node.text or "")
    for child in node.iterchildren(tag=etree.Element):
        _inline(child, words)
        words.parts.append(child.tail or "")


def _inline(child: etree._Element, words: _Words) -> None:
    name = _local(child)
    if name in ("renderMultiMedia", "footnote") or _is_deleted(child):
        words.aside.append(child)
    elif name == "br":
        words.parts.append("\0")
    elif name in _BLOCKS:
        words.parts.append("\0")
        _gather(child, words)
        words.parts.append("\0")
    else:
        _gather(child, words)


def _is_deleted(node: etree._Element) -> bool:
    return node.get("revised") == "delete"


def _deleted(node: etree._Element, place: Place) -> Unread:
    words = " ".join(words_in(node).split())
    detail = "Words deleted in a revision are still in the file; they are not read."
    return Unread(replace(place, path=path_of(node)), "tracked-change", detail, words[:2000])


def _table(
    node: etree._Element, place: Place, headings: tuple[str, ...], number: int
) -> Iterator[Item]:
    """A table as it is laid out; a cell that spans rows or columns is repeated where it reaches."""
    where = replace(place, paragraph=number, path=path_of(node))
    grid: dict[tuple[int, int], Cell] = {}
    words = _Words()
    height = 0
    for row, line in enumerate(node.iter(f"{{{HL7}}}tr")):
        column = 0
        height = row + 1
        for td in line.iterchildren(f"{{{HL7}}}td", f"{{{HL7}}}th"):
            while (row, column) in grid:
                column += 1
            inner = _Words()
            _gather(td, inner)
            words.aside += inner.aside
            at = replace(where, row=row + 1, column=column_letter(column))
            cell = Cell(inner.text, at)
            wide, high = _spans(td)
            if column + wide > DEFAULT.columns or len(grid) > _CELLS:
                yield Unread(at, "size-budget", "The table is larger than the budget allows.")
                return
            for y in range(high):
                for x in range(wide):
                    grid.setdefault((row + y, column + x), cell)
    width = max((x for _, x in grid), default=-1) + 1
    rows = tuple(
        tuple(
            grid.get((y, x)) or Cell("", replace(where, row=y + 1, column=column_letter(x)))
            for x in range(width)
        )
        for y in range(height)
    )
    caption = node.find(f"{{{HL7}}}caption")
    title = _Words()
    if caption is not None:
        _gather(caption, title)
    if rows:
        yield Table(rows, where, headings, title.text)
    yield from _asides(words, where, headings, iter(range(number, number + 1_000_000)))


def _spans(cell: etree._Element) -> tuple[int, int]:
    found = []
    for name in ("colspan", "rowspan"):
        text = cell.get(name) or "1"
        found.append(min(max(int(text), 1), _SPAN) if text.isdecimal() and len(text) < 6 else 1)
    return found[0], found[1]


def _local(node: etree._Element) -> str:
    return etree.QName(node).localname


def words_in(node: etree._Element) -> str:
    """All text under an element as it stands, comments left out."""
    return "".join(text for text in node.itertext(etree.Element) if isinstance(text, str))
