"""The text of one Word paragraph, its runs joined across formatting and tracked changes."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, field, replace

from lxml import etree

from dossiercheck.model import Pending
from dossiercheck.readers.grid import number_of
from dossiercheck.readers.package import Relation, attribute, child, local
from dossiercheck.readers.paragraph import ParagraphText, mark_removed, shifted
from dossiercheck.readers.symbolfont import FONTS, UNKNOWN, is_private, symbol
from dossiercheck.readers.wordobjects import OBJECTS, examine
from dossiercheck.readers.wordstyles import Run, Styles

_SKIPPED = {"pPr", "rPr", "sdtPr", "sdtEndPr", "annotationRef", "rt", "Fallback", "p", "tbl"}
_CHARACTERS = {
    "tab": "\t",
    "ptab": "\t",
    "br": "\n",
    "cr": "\n",
    "noBreakHyphen": "\u2011",
    "softHyphen": "\u00ad",
}
_RAISED = str.maketrans(
    "0123456789+-−()abcdefghijklmnoprstuvwxyz", "⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻⁻⁽⁾ᵃᵇᶜᵈᵉᶠᵍʰⁱʲᵏˡᵐⁿᵒᵖʳˢᵗᵘᵛʷˣʸᶻ"
)
_EMPTY = "The prompt of a control that nobody has filled in."
# Half points from which moved text is read as raised (common practice: about a third of a line).
_RAISED_BY = 4
# Fields that show something, and whose result may not be stored with the document.
_SHOWING = re.compile(r"\s*(SYMBOL|EQ|INCLUDETEXT|INCLUDEPICTURE|LINK|EMBED|QUOTE|REF)\b")


@dataclass(slots=True)
class _Field:
    """A field being walked through: its instruction, then what it shows."""

    code: list[str] = field(default_factory=list)
    in_code: bool = True
    shown: bool = False
    passed_over: list[str] = field(default_factory=list)


@dataclass(slots=True)
class Surroundings:
    """What a part's paragraphs refer to: styles, relationships by id, comments by id, list
    numbers and controls that show a placeholder by element. `fields` are those open, outermost
    first; `placed` the comments met and `parts` the package parts."""

    styles: Styles = field(default_factory=Styles)
    relations: Mapping[str, Relation] = field(default_factory=dict)
    comments: Mapping[str, str] = field(default_factory=dict)
    numbers: Mapping[etree._Element, str] = field(default_factory=dict)
    placeholders: frozenset[etree._Element] = frozenset()
    fields: list[_Field] = field(default_factory=list)
    placed: set[str] = field(default_factory=set)
    parts: set[str] = field(default_factory=set)


def gather_runs(paragraph: etree._Element, around: Surroundings | None = None) -> ParagraphText:
    """The paragraph's text: inserted text is in, deleted text is out, hidden text is unread."""
    walk = _Walk(around or Surroundings(), _style(paragraph))
    number = walk.around.numbers.get(paragraph, "")
    if UNKNOWN in number:
        walk.unread.append(("list-number", "The list's number is in an unknown format.", number))
    if walk.around.placeholders and any(
        above in walk.around.placeholders for above in paragraph.iterancestors()
    ):
        walk.aside(paragraph, "", "placeholder", _EMPTY)
    else:
        walk.through(paragraph, "", {})
    text = "".join(walk.said)
    pending = tuple(walk.pending)
    if number and text.strip():
        text = f"{number} {text}"
        pending = shifted(pending, len(number) + 1)
    if any(change.removed.strip() for change in pending):
        removed = " … ".join(change.removed for change in pending if change.removed.strip())
        detail = "A tracked change takes this text out: it is not there as the document reads now."
        walk.unread.append(("pending-deletion", detail, removed))
    return ParagraphText(text, walk.unread, walk.boxes, pending, mark_removed(paragraph))


def unclosed(around: Surroundings) -> tuple[str, str, str] | None:
    """A field that is open at the end of its part, as (reason, detail, text passed over)."""
    if not any(one.in_code for one in around.fields):
        return None
    text = "".join(text for one in around.fields for text in one.passed_over)
    return "field", "A field is never closed: the text after it is not read.", text


def _style(paragraph: etree._Element) -> str:
    properties = child(paragraph, "pPr")
    style = child(properties, "pStyle") if properties is not None else None
    return attribute(style, "val") if style is not None else ""


class _Walk:
    """One paragraph on its way through; `change` is "in" or "out" inside a tracked change."""

    def __init__(self, around: Surroundings, style: str) -> None:
        self.around = around
        self.style = style
        self.said: list[str] = []
        self.length = 0
        self.unread: list[tuple[str, str, str]] = []
        self.boxes: list[etree._Element] = []
        self.pending: list[Pending] = []
        self.unknown: set[tuple[str, str]] = set()

    def through(self, node: etree._Element, change: str, form: Run) -> None:
        """Take in the content of a paragraph, a run, or what stands around runs."""
        for inner in node:
            name = local(inner)
            if name in _SKIPPED:
                continue
            if name == "r":
                # A run of mathematics has the same name and stands inside an equation only.
                self._run(inner, change)
            elif name in ("t", "delText"):
                self._say(inner.text or "", change, form)
            elif name in _CHARACTERS:
                self._say(_CHARACTERS[name], change, form)
            elif name == "sym":
                self._symbol(inner, change, form)
            elif name in ("instrText", "delInstrText"):
                if self.around.fields:
                    self.around.fields[-1].code.append(inner.text or "")
            elif name == "fldChar":
                self._field(inner, change)
            elif name in ("ins", "moveTo"):
                self.through(inner, change or "in", form)
            elif name in ("del", "moveFrom"):
                # What is put in and taken out again stands in neither reading.
                self.through(inner, "never" if change == "in" else "out", form)
            elif name in OBJECTS:
                self._object(inner, name)
            elif name == "commentReference":
                self._comment(attribute(inner, "id"))
            elif name == "AlternateContent":
                self._alternative(inner, change, form)
            elif name == "sdt" and inner in self.around.placeholders:
                self.aside(inner, change, "placeholder", _EMPTY)
            elif name == "subDoc":
                detail = "A document set in by reference, which is not read."
                self.unread.append(("external-part", detail, ""))
            else:
                self.through(inner, change, form)

    def _run(self, node: etree._Element, change: str) -> None:
        form = self.around.styles.shown(node, self.style)
        if form.get("vanish") == "1":
            detail = "Text formatted as hidden, which is not taken as part of the document."
            self.aside(node, change, "hidden-text", detail)
        else:
            self.through(node, change, form)

    def aside(self, node: etree._Element, change: str, reason: str, detail: str) -> None:
        """Text that is no part of the document as it reads, listed instead."""
        aside = _Walk(self.around, self.style)
        aside.through(node, "", {})
        self.unread += aside.unread
        boxed = [one.text or "" for box in aside.boxes for one in box.iter() if local(one) == "t"]
        text = "".join((*aside.said, *boxed))
        if text.strip() and change not in ("out", "never"):
            self.unread.append((reason, detail, text))

    def _say(self, text: str, change: str, form: Run) -> None:
        fields = self.around.fields
        if not text:
            return
        if any(one.in_code for one in fields):
            fields[0].passed_over.append(text)
            return
        for one in fields:
            one.shown = True
        text = self._shown(text, form)
        if change == "out":
            self._removed(text)
        elif change != "never":
            if change == "in":
                self._inserted(len(text))
            self.said.append(text)
            self.length += len(text)

    def _removed(self, text: str) -> None:
        last = self.pending[-1] if self.pending else None
        if last and last.removed and last.end == self.length:
            self.pending[-1] = replace(last, removed=last.removed + text)
        else:
            self.pending.append(Pending(self.length, self.length, text))

    def _inserted(self, length: int) -> None:
        last = self.pending[-1] if self.pending else None
        end = self.length + length
        if last and not last.removed and last.end == self.length:
            self.pending[-1] = replace(last, end=end)
        else:
            self.pending.append(Pending(self.length, end))

    def _shown(self, text: str, form: Run) -> str:
        """A run's text as its font and formatting show it."""
        font = form.get("font", "")
        if font.strip().lower() in FONTS or any(is_private(ord(c)) for c in text):
            text = "".join(self._character(c, font) for c in text)
        position = form.get("position", "")
        raised = form.get("vertAlign") == "superscript" or (number_of(position, 0) >= _RAISED_BY)
        if raised:
            return text.translate(_RAISED)
        if "1" in (form.get("caps"), form.get("smallCaps")):
            # The letter of a descriptor; a whole title in capitals is read as it was typed.
            letters = [c for c in text if c.isalpha()]
            return text.upper() if len(letters) < 3 else text
        return text

    def _character(self, character: str, font: str) -> str:
        shown = symbol(ord(character), font) if character >= " " else character
        if shown == UNKNOWN:
            self._no_meaning(f"{ord(character):04X}", font)
        return shown

    def _symbol(self, node: etree._Element, change: str, form: Run) -> None:
        code, font = attribute(node, "char"), attribute(node, "font")
        sound = re.fullmatch(r"[0-9A-Fa-f]{1,4}", code)
        shown = symbol(int(code, 16), font) if sound else UNKNOWN
        if shown == UNKNOWN:
            self._no_meaning(code, font)
        self._say(shown, change, {name: value for name, value in form.items() if name != "font"})

    def _no_meaning(self, code: str, font: str) -> None:
        if (code, font) not in self.unknown:
            self.unknown.add((code, font))
            detail = f"Character {code} of the font “{font}” has no known meaning."
            self.unread.append(("symbol-character", detail, ""))

    def _field(self, node: etree._Element, change: str) -> None:
        kind = attribute(node, "fldCharType")
        fields = self.around.fields
        if kind == "begin":
            fields.append(_Field())
            chosen = _chosen(node)
            if chosen:
                fields[-1].in_code = False
                self._say(chosen, change, {})
                fields[-1].in_code = True
        elif kind == "separate" and fields:
            fields[-1].in_code = False
        elif kind == "end" and fields:
            ended = fields.pop()
            code = "".join(ended.code).strip()
            if not ended.shown and _SHOWING.match(code):
                self.unread.append(("field", "A field whose result is not stored.", code))

    def _object(self, node: etree._Element, name: str) -> None:
        for one in self.around.fields:
            one.shown = True
        found = examine(node, name, self.around.relations)
        self.unread += found.unread
        self.boxes += found.boxes
        self.around.parts.update(found.parts)

    def _comment(self, identity: str) -> None:
        if identity in self.around.comments and identity not in self.around.placed:
            self.around.placed.add(identity)
            detail = "A comment, which is no part of the document's own text."
            self.unread.append(("comment", detail, self.around.comments[identity]))

    def _alternative(self, node: etree._Element, change: str, form: Run) -> None:
        chosen = child(node, "Choice")
        if chosen is None:
            chosen = child(node, "Fallback")
        if chosen is not None:
            self.through(chosen, change, form)


def _chosen(node: etree._Element) -> str:
    """The entry that a drop-down form field shows."""
    found = next((one for one in node.iter() if local(one) == "ddList"), None)
    if found is None:
        return ""
    entries = [attribute(one, "val") for one in found if local(one) == "listEntry"]
    result = child(found, "result")
    if result is None:
        result = child(found, "default")
    at = attribute(result, "val") if result is not None else "0"
    chosen = number_of(at, len(entries))
    return entries[chosen] if chosen < len(entries) else ""
