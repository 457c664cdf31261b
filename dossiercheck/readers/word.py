"""Word documents: DOCX, read from their parts (ECMA-376 part 1, clause 17).

The text is the document as it reads with its tracked insertions taken and its tracked deletions
left out. Pictures and embedded objects are listed as unread, each at its paragraph.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

from lxml import etree

from dossiercheck.limits import DEFAULT, Archive, Limits, parse_xml
from dossiercheck.model import Item, Passage, Place, Source, Unread
from dossiercheck.readers.content import guarded
from dossiercheck.readers.package import (
    OLE,
    ZIP,
    attribute,
    child,
    legacy,
    local,
    main_part,
    open_package,
    relations,
)
from dossiercheck.readers.runs import ParagraphText, gather_runs
from dossiercheck.readers.sections import Heading, Outline, number_of, numbered_heading
from dossiercheck.readers.wordtable import Grid, lay_out

SUFFIXES = frozenset({".docx", ".docm", ".doc"})

# Parts beside the body, in the order read, with what a place in them is called.
_BESIDE = (
    ("header", "page header"),
    ("footer", "page footer"),
    ("footnotes", "footnotes"),
    ("endnotes", "endnotes"),
)
_CONTAINERS = {"sdt", "sdtContent", "customXml", "ins", "moveTo", "smartTag", "footnote", "endnote"}


@dataclass(slots=True)
class _Story:
    """One part on its way through: what has been counted and which headings stand above."""

    source: str
    where: str = ""
    styles: dict[str, int] = field(default_factory=dict)
    outline: Outline = field(default_factory=Outline)
    paragraphs: int = 0
    tables: int = 0
    last_text: str = ""

    def place(self) -> Place:
        """The present paragraph."""
        section = self.where or self.outline.section
        return Place(self.source, section=section, paragraph=self.paragraphs)


@guarded(ZIP, OLE)
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield passages and tables in the order of the document, then headers, footers, notes."""
    yield from read_within(source, data, DEFAULT)


def read_within(source: Source, data: bytes, limits: Limits) -> Iterator[Item]:
    """As `read`, with budgets of the caller's choice; raises `Refused`."""
    old = legacy(source, data, "document")
    if old:
        yield old
        return
    archive = open_package(data, limits)
    part = main_part(archive, "document")
    related = [relation for relation in relations(archive, part) if not relation.external]
    styles = _heading_styles(archive, [r.target for r in related if r.kind == "styles"])
    body = child(parse_xml(archive.read(part)), "body")
    if body is not None:
        yield from _blocks(body, _Story(source.path, styles=styles))
    for kind, where in _BESIDE:
        for number, relation in enumerate((r for r in related if r.kind == kind), 1):
            name = f"{where} {number}" if kind in ("header", "footer") else where
            if relation.target not in archive:
                yield Unread(Place(source.path, name), "missing-part", "The part is missing.")
                continue
            root = parse_xml(archive.read(relation.target))
            yield from _blocks(root, _Story(source.path, where=name, styles=styles))
    for relation in related:
        if relation.kind == "comments":
            yield Unread(Place(source.path), "comment", "The document has comments: not read.")
        elif relation.kind == "aFChunk":
            detail = f"The document embeds {relation.target}, which is not read."
            yield Unread(Place(source.path), "embedded-document", detail)


def _blocks(parent: etree._Element, story: _Story) -> Iterator[Item]:
    for node in parent:
        name = local(node)
        if name == "p":
            yield from _paragraph(node, story)
        elif name == "tbl":
            yield from _table(node, story)
        elif name in _CONTAINERS:
            yield from _blocks(node, story)


def _paragraph(node: etree._Element, story: _Story) -> Iterator[Item]:
    story.paragraphs += 1
    content = gather_runs(node)
    text = content.text
    heading = None if story.where else _heading(node, text, story.styles)
    above = story.outline.headings
    if heading:
        story.outline.enter(heading)
        above = story.outline.headings[:-1]
    place = story.place()
    if text.strip():
        yield Passage(text, place, above)
        story.last_text = text.strip()
    yield from _beside_text(content, story, place)


def _beside_text(content: ParagraphText, story: _Story, place: Place) -> Iterator[Item]:
    """What a paragraph holds that is not its text: things unread, and text boxes."""
    for reason, detail, text in content.unread:
        yield Unread(place, reason, detail, text)
    for box in content.boxes:
        yield from _blocks(box, story)


def _table(node: etree._Element, story: _Story) -> Iterator[Item]:
    story.tables += 1
    caption = story.last_text if story.last_text.lower().startswith("table") else ""
    place = Place(story.source, section=story.where or story.outline.section, table=story.tables)
    grid: Grid = lay_out(node, place, story.outline.headings, caption)
    if grid.table.rows:
        yield grid.table
    for where, content in grid.contents:
        story_place = where
        yield from _beside_text(content, story, story_place)
    for nested in grid.nested:
        yield from _table(nested, story)


def _heading(node: etree._Element, text: str, styles: dict[str, int]) -> Heading | None:
    if not text.strip():
        return None
    properties = child(node, "pPr")
    level = None
    if properties is not None:
        direct = child(properties, "outlineLvl")
        style = child(properties, "pStyle")
        if direct is not None:
            level = _level(attribute(direct, "val"))
        elif style is not None:
            level = styles.get(attribute(style, "val"))
    shown = " ".join(text.split())
    if level is not None:
        return Heading(shown, level, number_of(shown))
    return numbered_heading(shown)


def _level(value: str) -> int | None:
    """Outline levels count from 0; 9 is body text."""
    return int(value) + 1 if value.isdigit() and int(value) < 9 else None


def _heading_styles(archive: Archive, parts: list[str]) -> dict[str, int]:
    """Style id -> heading level, through the styles that a style is based on."""
    levels: dict[str, int] = {}
    based: dict[str, str] = {}
    for part in parts:
        if part not in archive:
            continue
        for style in parse_xml(archive.read(part)):
            if local(style) != "style" or attribute(style, "type") != "paragraph":
                continue
            identity = attribute(style, "styleId")
            level = _style_level(style)
            if level is not None:
                levels[identity] = level
            parent = child(style, "basedOn")
            if parent is not None:
                based[identity] = attribute(parent, "val")
    for identity in list(based):
        ancestor, steps = identity, 0
        while ancestor not in levels and ancestor in based and steps < 50:
            ancestor, steps = based[ancestor], steps + 1
        if ancestor in levels:
            levels.setdefault(identity, levels[ancestor])
    return levels


def _style_level(style: etree._Element) -> int | None:
    properties = child(style, "pPr")
    outline = child(properties, "outlineLvl") if properties is not None else None
    if outline is not None:
        return _level(attribute(outline, "val"))
    name_node = child(style, "name")
    name = attribute(name_node, "val").lower() if name_node is not None else ""
    if name.startswith("heading ") and name[8:].isdigit():
        return int(name[8:])
    return 1 if name == "title" else None
