"""A page walked in the order in which it is shown, block by block."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field, replace
from typing import cast

from lxml import etree

from dossiercheck.model import Item, Passage, Place, Table, Unread
from dossiercheck.readers.htmlgrid import Grid, Layout, list_layout, table_layout
from dossiercheck.readers.htmlstyle import (
    Sheet,
    Style,
    hides,
    in_case,
    is_symbol_font,
    raised,
    raises,
    tag_of,
)
from dossiercheck.readers.sections import Heading, Outline, number_of, numbered_heading
from dossiercheck.readers.svgtext import svg_items
from dossiercheck.readers.symbolfont import UNKNOWN

_NO_TEXT = "script style link meta base param source track col colgroup area"
_SKIPPED = frozenset(_NO_TEXT.split())
_OWN_LINES = (
    "address article aside blockquote body button caption center dd details dialog dir div dl dt"
    " fieldset figcaption figure footer form frameset h1 h2 h3 h4 h5 h6 head header hgroup hr html"
    " legend li main menu nav ol optgroup option p pre section select summary table tbody td"
    " textarea tfoot th thead title tr ul"
)
_BLOCKS = frozenset(_OWN_LINES.split())
_HIDDEN = {
    "template": "Text in a template, which is not shown.",
    "dialog": "Text of a dialogue that is not open.",
    "datalist": "Text offered for a field, which is not shown.",
    "noscript": "Text that is shown only where scripts are not run.",
    "noframes": "Text that is shown only where there are no frames.",
}
_LEVELS = {f"h{level}": level for level in range(1, 7)}
_STRUCK = {"del": "deleted in a revision", "s": "struck out", "strike": "struck out"}
_OBJECTS = {
    "img": ("picture", "A picture, which is not read."),
    "picture": ("picture", "A picture, which is not read."),
    "canvas": ("picture", "A drawing made by a script, which is not read."),
    "map": ("picture", "Areas of a picture, which are not read."),
    "math": ("equation", "An equation, which is not read."),
    "iframe": ("embedded-document", "An embedded page, which is not loaded."),
    "frame": ("embedded-document", "An embedded page, which is not loaded."),
    "object": ("embedded-document", "An embedded object, which is not read."),
    "embed": ("embedded-document", "An embedded object, which is not read."),
    "applet": ("embedded-document", "An embedded object, which is not read."),
    "video": ("embedded-document", "A recording, which is not read."),
    "audio": ("embedded-document", "A recording, which is not read."),
}
_TYPED = {"", "text", "search", "email", "url", "tel", "number", "submit", "button", "reset"}
_BREAK = "\0"  # a line end that is shown; those of the source are white space
_HIDDEN_DETAIL = "Text that the page holds and does not show."
_LAST_LINE = 65_535  # the parser counts no further


@dataclass(frozen=True, slots=True)
class _Look:
    """What is in force on text: set by an element, kept by those in it."""

    raised: bool = False
    kept: bool = False  # white space as it stands
    transform: str = ""
    symbols: bool = False
    level: int = 0  # of the heading it stands in


@dataclass(slots=True)
class Page:
    """A page on its way through. `said` counts passages and tables."""

    source: str
    sheet: Sheet
    outline: Outline = field(default_factory=Outline)
    said: int = 0
    _paragraphs: int = 0
    _tables: int = 0
    _words: list[str] = field(default_factory=list)
    _begin: etree._Element | None = None
    _in_cell: bool = False
    _made: list[Item] = field(default_factory=list)
    _asides: list[Unread] = field(default_factory=list)
    _waiting: list[etree._Element] = field(default_factory=list)

    def place(self, element: etree._Element) -> Place:
        """An element's place, before any paragraph is counted."""
        line = cast("int | None", element.sourceline)
        known = line if line and line < _LAST_LINE else None
        return Place(self.source, section=self.outline.section, line=known)

    def read(self, root: etree._Element) -> Iterator[Item]:
        """Everything under the root."""
        self._element(root, _Look())
        self._flush()
        yield from self._made

    # --- the walk ------------------------------------------------------------------------

    def _inside(self, node: etree._Element, look: _Look) -> None:
        self._say(node, node.text, look)
        for child in node.iterchildren(tag=etree.Element):
            self._element(child, look)
            self._say(node, child.tail, look)

    def _element(self, node: etree._Element, look: _Look) -> None:
        tag = tag_of(node)
        if tag in _SKIPPED:
            return
        style = self.sheet.style(node, tag)
        if self._is_aside(node, tag, style):
            return
        outer, look = look, _look(node, tag, style, look)
        if tag == "br":
            self._words.append(_BREAK)
        elif tag == "input":
            if (node.get("type") or "").lower() in _TYPED:
                self._say(node, node.get("value"), look)
        elif tag == "table" and self._in_cell:
            self._waiting.append(node)
        elif tag == "table":
            self._flush()
            self._table(node, table_layout(node), look)
        elif tag == "dl" and not self._in_cell:
            self._flush()
            self._table(node, list_layout(node), look)
        elif tag in _BLOCKS:
            self._flush(outer.level)
            self._inside(node, look)
            self._flush(look.level)
        else:
            self._inside(node, look)

    def _is_aside(self, node: etree._Element, tag: str, style: Style) -> bool:
        """List what is not shown or is no text; true where nothing of it is to be read."""
        closed = tag in _HIDDEN and (tag != "dialog" or node.get("open") is None)
        if closed or node.get("hidden") is not None or hides(style):
            if text := _words(node):
                detail = _HIDDEN.get(tag, _HIDDEN_DETAIL)
                self._asides.append(Unread(self.place(node), "hidden-text", detail, text))
            return True
        if tag in _STRUCK:
            detail = f"Text {_STRUCK[tag]}, which is not read."
            self._asides.append(Unread(self.place(node), "struck-text", detail, _words(node)))
            return True
        if tag in _OBJECTS:
            reason, detail = _OBJECTS[tag]
            text = (node.get("alt") or _words(node))[:2000]
            self._asides.append(Unread(self.place(node), reason, detail, text))
            return True
        if tag == "svg":
            self._flush()
            for item in svg_items(node, self.place(node)):
                if isinstance(item, Unread):
                    self._asides.append(item)
                elif isinstance(item, Passage):
                    self._passage(item.text, item.place)
            return True
        return False

    # --- text ----------------------------------------------------------------------------

    def _say(self, node: etree._Element, text: str | None, look: _Look) -> None:
        if not text:
            return
        if look.symbols and text.strip():
            detail = "Text in a symbol font: a browser may show other characters, or these."
            self._asides.append(Unread(self.place(node), "symbol-character", detail, text[:2000]))
            text = re.sub(r"\S", UNKNOWN, text)
        if look.kept:
            text = text.replace("\r\n", _BREAK).replace("\n", _BREAK)
        if look.raised:
            text = raised(text)
        if text.strip() and self._begin is None:
            self._begin = node
        self._words.append(in_case(text, look.transform))

    def _text(self) -> str:
        """What has been said since the last block, white space collapsed as browsers do."""
        lines = "".join(self._words).split(_BREAK)
        self._words = []
        return "\n".join(re.sub(r"[ \t\r\n\f]+", " ", line).strip(" ") for line in lines).strip()

    def _flush(self, level: int = 0) -> None:
        """End a block; inside a cell blocks are lines."""
        if self._in_cell:
            self._words.append(_BREAK)
            return
        begin, self._begin = self._begin, None
        text = self._text()
        if text and begin is not None:
            heading = self._heading(text, level)
            self._passage(text, self.place(begin), heading)
        self._made += self._asides
        self._asides = []

    def _heading(self, text: str, level: int) -> Heading | None:
        shown = " ".join(text.split())
        return Heading(shown, level, number_of(shown)) if level else numbered_heading(shown)

    def _passage(self, text: str, place: Place, heading: Heading | None = None) -> None:
        above = self.outline.headings
        if heading:
            self.outline.enter(heading)
            above = self.outline.headings[:-1]
        self._paragraphs += 1
        self.said += 1
        section = self.outline.section
        self._made.append(
            Passage(text, replace(place, section=section, paragraph=self._paragraphs), above)
        )

    # --- tables --------------------------------------------------------------------------

    def _table(self, node: etree._Element, layout: Layout, look: _Look) -> None:
        self._tables += 1
        place = replace(self.place(node), table=self._tables)
        for loose in filter(str.strip, layout.loose):
            self._say(node, loose, look)
            self._words.append(_BREAK)
        for stray in layout.strays:
            self._element(stray, look)
        self._flush()
        caption = " ".join(self._cell(one, look) for one in layout.captions)
        grid = Grid(place)
        for row in layout.rows:
            grid.next_row()
            for cell in row:
                if not grid.put(self._shown(cell, node, look), cell):
                    layout.past = True
                    break
            if layout.past:
                break
        if layout.past:
            detail = "The table has more cells than are read: none of it is."
            self._asides.append(Unread(place, "cell-budget", detail))
        elif made := grid.rows():
            self.said += 1
            self._made.append(Table(made, place, self.outline.headings, caption))
        self._made += self._asides
        self._asides = []
        waiting, self._waiting = self._waiting, []
        for nested in waiting:
            self._element(nested, look)

    def _shown(self, cell: etree._Element, table: etree._Element, look: _Look) -> str:
        """A cell's text; none where the cell, its row or its group is not shown."""
        for node in (cell, *cell.iterancestors()):
            if node is table:
                return self._cell(cell, look)
            style = self.sheet.style(node, tag_of(node))
            if hides(style) or node.get("hidden") is not None:
                self._is_aside(cell, tag_of(cell), {"display": "none"})
                return ""
        return ""

    def _cell(self, node: etree._Element, look: _Look) -> str:
        outer, self._words = self._words, []
        self._in_cell = True
        self._inside(node, _look(node, tag_of(node), self.sheet.style(node, tag_of(node)), look))
        self._in_cell = False
        text = self._text()
        self._words, self._begin = outer, None
        return re.sub(r"\n{2,}", "\n", text)


def _words(node: etree._Element) -> str:
    return " ".join("".join(map(str, node.itertext(etree.Element))).split())[:2000]


def _look(node: etree._Element, tag: str, style: Style, above: _Look) -> _Look:
    """What is in force inside an element."""
    level = _LEVELS.get(tag, above.level)
    if not style and not level and tag not in ("sup", "pre", "textarea", "font"):
        return above
    font = style.get("font-family") or style.get("font", "").split(",")[0].rpartition(" ")[2]
    font = font or (node.get("face") or "")
    return _Look(
        above.raised or tag == "sup" or raises(style),
        above.kept or tag in ("pre", "textarea"),
        style.get("text-transform", above.transform),
        is_symbol_font(font) if font else above.symbols,
        level,
    )
