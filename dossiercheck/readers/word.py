"""Word documents: DOCX, read from their parts (ECMA-376 part 1, clause 17).

The text is the document as it reads now: tracked insertions are in and marked as pending,
tracked deletions are out and listed. What is no text of the document, or is not read (comments,
hidden text, pictures, drawing objects), is listed at its paragraph.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

from lxml import etree

from dossiercheck.limits import DEFAULT, Archive, Limits, Refused, parse_xml
from dossiercheck.model import Item, Passage, Place, Source, Unread
from dossiercheck.readers.content import guarded
from dossiercheck.readers.numbering import Numbering, read_numbering
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
from dossiercheck.readers.paragraph import ParagraphText, continued, mark_removed
from dossiercheck.readers.runs import Surroundings, gather_runs, unclosed
from dossiercheck.readers.sections import Heading, Outline, number_of, numbered_heading
from dossiercheck.readers.wordstyles import Styles, outline_level, read_styles
from dossiercheck.readers.wordtable import Grid, lay_out

SUFFIXES = frozenset({".docx", ".docm", ".dotx", ".dotm", ".doc", ".dot"})

# Parts beside the body, in the order read, with what a place in them is called.
_BESIDE = (
    ("header", "page header"),
    ("footer", "page footer"),
    ("footnotes", "footnotes"),
    ("endnotes", "endnotes"),
)
_EMBEDDED = ("oleObject", "package", "aFChunk", "subDocument")
_NO_CONTENT = {"", "sectPr", "sdtPr", "sdtEndPr", "customXmlPr", "tblPr", "tcPr", "pPr"}
_TEXT = ("t", "delText")
_CONTAINERS = {"sdt", "sdtContent", "customXml", "ins", "moveTo", "smartTag", "footnote", "endnote"}


@dataclass(slots=True)
class _Story:
    """One part on its way through: what has been counted and which headings stand above. `open`
    is a paragraph whose end a tracked change takes out, waiting for the next one."""

    source: str
    around: Surroundings
    where: str = ""
    outline: Outline = field(default_factory=Outline)
    paragraphs: int = 0
    tables: int = 0
    last_text: str = ""
    open: ParagraphText | None = None

    def place(self) -> Place:
        """The present paragraph."""
        section = self.where or self.outline.section
        return Place(self.source, section=section, paragraph=self.paragraphs)


@dataclass(frozen=True, slots=True)
class _Shared:
    """What all parts of one document have in common."""

    archive: Archive
    source: str
    styles: Styles
    numbering: Numbering
    comments: dict[str, str]


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
    main = main_part(archive, "document")
    related = [one for one in relations(archive, main) if not one.external]
    styles = read_styles(archive, [one.target for one in related if one.kind == "styles"])
    lists = [one.target for one in related if one.kind == "numbering"]
    comments = _comments(archive, [one.target for one in related if one.kind == "comments"])
    shared = _Shared(archive, source.path, styles, read_numbering(archive, lists, styles), comments)
    placed: set[str] = set()
    yield from _part(shared, main, "", placed)
    for kind, where in _BESIDE:
        for number, relation in enumerate((r for r in related if r.kind == kind), 1):
            name = f"{where} {number}" if kind in ("header", "footer") else where
            if relation.target not in archive:
                yield Unread(Place(source.path, name), "missing-part", "The part is missing.")
                continue
            try:
                yield from _part(shared, relation.target, name, placed)
            except Refused as refused:
                yield Unread(Place(source.path, name), refused.reason, refused.detail)
    for identity, text in comments.items():
        if identity not in placed:
            detail = "A comment that is anchored nowhere in the text."
            yield Unread(Place(source.path), "comment", detail, text)


def _part(shared: _Shared, part: str, where: str, placed: set[str]) -> Iterator[Item]:
    """A part from its first paragraph to its last, and what it refers to and nowhere shows."""
    related = {one.id: one for one in relations(shared.archive, part)}
    root = parse_xml(shared.archive.read(part))
    around = Surroundings(
        shared.styles,
        related,
        shared.comments,
        shared.numbering.labels(_counted(root)),
        frozenset(_prompts(root)),
        placed=placed,
    )
    story = _Story(shared.source, around, where)
    main = root if where else child(root, "body")
    if main is not None:
        yield from _blocks(main, story)
        yield from _flush(story)
    left_open = unclosed(around)
    if left_open:
        yield Unread(story.place(), *left_open)
    for one in related.values():
        if one.target in around.parts or one.kind == "hyperlink":
            continue
        place = Place(shared.source, where or None)
        if one.external:
            detail = f"The document points to {one.target}, which is not fetched."
            yield Unread(place, "external-part", detail)
        elif one.kind in _EMBEDDED:
            detail = f"The document carries {one.target}, which stands nowhere in its text."
            yield Unread(place, "embedded-document", detail)


def _counted(root: etree._Element) -> Iterator[etree._Element]:
    """The paragraphs that lists count: not those taken out, nor the second form of text boxes."""
    for paragraph in root.iter("{*}p"):
        if mark_removed(paragraph):
            continue
        if not any(local(above) == "Fallback" for above in paragraph.iterancestors()):
            yield paragraph


def _prompts(root: etree._Element) -> Iterator[etree._Element]:
    """The controls that still show their prompt."""
    for control in root.iter("{*}sdt"):
        properties = child(control, "sdtPr")
        mark = child(properties, "showingPlcHdr") if properties is not None else None
        if mark is not None and attribute(mark, "val", "1") not in ("0", "false", "off"):
            yield control


def _blocks(parent: etree._Element, story: _Story) -> Iterator[Item]:
    for node in parent:
        name = local(node)
        if name == "p":
            yield from _paragraph(node, story)
        elif name == "tbl":
            yield from _flush(story)
            yield from _table(node, story)
        elif name in _CONTAINERS:
            yield from _blocks(node, story)
        elif name == "AlternateContent":
            chosen = child(node, "Choice")
            chosen = child(node, "Fallback") if chosen is None else chosen
            if chosen is not None:
                yield from _blocks(chosen, story)
        elif name == "altChunk":
            relation = story.around.relations.get(attribute(node, "id"))
            target = relation.target if relation else "a part"
            story.around.parts.add(target)
            detail = f"The document embeds {target}, which is not read."
            yield Unread(story.place(), "embedded-document", detail)
        elif name not in _NO_CONTENT:
            text = "".join(one.text or "" for one in node.iter() if local(one) in _TEXT)
            if text.strip():
                detail = f"Text in an element “{name}” where none is expected is not read."
                yield Unread(story.place(), "unexpected-content", detail, text)


def _paragraph(node: etree._Element, story: _Story) -> Iterator[Item]:
    content = gather_runs(node, story.around)
    if story.open is not None:
        content = continued(story.open, content)
        story.open = None
    if content.joins:
        story.open = content
        return
    yield from _said(content, story, node)


def _flush(story: _Story) -> Iterator[Item]:
    """A paragraph that waits for one to join, where none comes."""
    if story.open is not None:
        content, story.open = story.open, None
        yield from _said(content, story, None)


def _said(content: ParagraphText, story: _Story, node: etree._Element | None) -> Iterator[Item]:
    story.paragraphs += 1
    text = content.text
    heading = None if story.where or node is None else _heading(node, text, story.around.styles)
    above = story.outline.headings
    if heading:
        story.outline.enter(heading)
        above = story.outline.headings[:-1]
    place = story.place()
    if text.strip():
        yield Passage(text, place, above, content.pending)
        story.last_text = text.strip()
    yield from _beside_text(content, story, place)


def _beside_text(content: ParagraphText, story: _Story, place: Place) -> Iterator[Item]:
    """What a paragraph holds that is not its text: things unread, and text boxes."""
    for reason, detail, text in content.unread:
        yield Unread(place, reason, detail, text)
    for box in content.boxes:
        yield from _blocks(box, story)
        yield from _flush(story)


def _table(node: etree._Element, story: _Story) -> Iterator[Item]:
    story.tables += 1
    caption = story.last_text if story.last_text.lower().startswith("table") else ""
    place = Place(story.source, section=story.where or story.outline.section, table=story.tables)
    try:
        grid: Grid = lay_out(node, place, story.outline.headings, caption, story.around)
    except Refused as refused:
        yield Unread(place, refused.reason, refused.detail)
        return
    if grid.table.rows:
        yield grid.table
    for where, content in grid.contents:
        yield from _beside_text(content, story, where)
    for nested in grid.nested:
        yield from _table(nested, story)


def _heading(node: etree._Element, text: str, styles: Styles) -> Heading | None:
    if not text.strip():
        return None
    properties = child(node, "pPr")
    level = None
    if properties is not None:
        direct = child(properties, "outlineLvl")
        style = child(properties, "pStyle")
        if direct is not None:
            level = outline_level(attribute(direct, "val"))
        elif style is not None:
            level = styles.levels.get(attribute(style, "val"))
    shown = " ".join(text.split())
    if level is not None:
        return Heading(shown, level, number_of(shown))
    return numbered_heading(shown)


def _comments(archive: Archive, parts: list[str]) -> dict[str, str]:
    """The text of each comment by its id."""
    found: dict[str, str] = {}
    for part in parts:
        if part in archive:
            for node in parse_xml(archive.read(part)):
                lines = [gather_runs(one).text for one in node.iter("{*}p")]
                told = [found.get(attribute(node, "id"), ""), *lines]
                found[attribute(node, "id")] = "\n".join(line for line in told if line.strip())
    return found
