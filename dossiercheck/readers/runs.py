"""The text of one Word paragraph, its runs joined across formatting and tracked changes."""

from __future__ import annotations

import re
from dataclasses import dataclass, field

from lxml import etree

from dossiercheck.readers.package import attribute, child, local

# Characters of the Symbol font by code (Adobe symbol encoding, lower-case Greek and the signs a
# name may hold); a symbol outside this list is shown as U+FFFD and listed as unread.
_SYMBOL = {
    **dict(zip(range(0x61, 0x7B), "αβχδεφγηιϕκλμνοπθρστυϖωξψζ", strict=True)),
    0x28: "(",
    0x29: ")",
    0x2B: "+",
    0x2D: "−",
    0xA2: "′",
    0xB0: "°",
    0xB1: "±",
    0xB2: "″",
    0xB7: "·",
}
_SKIPPED = {
    "del",
    "moveFrom",
    "instrText",
    "delText",
    "delInstrText",
    "pPr",
    "rPr",
    "annotationRef",
}
_CHARACTERS = {
    "tab": "\t",
    "ptab": "\t",
    "br": "\n",
    "cr": "\n",
    "noBreakHyphen": "\u2011",
    "softHyphen": "\u00ad",
}
_OBJECTS = {
    "object": ("drawing-object", "An embedded object, which is not read."),
    "drawing": ("picture", "A picture or shape, which is not read."),
    "pict": ("picture", "A picture or shape, which is not read."),
    "oMath": ("equation", "An equation, which is not read."),
}


@dataclass(slots=True)
class ParagraphText:
    """`text` of the paragraph; `unread` as (reason, detail, text); `boxes` are the contents of
    text boxes anchored in it."""

    text: str = ""
    unread: list[tuple[str, str, str]] = field(default_factory=list)
    boxes: list[etree._Element] = field(default_factory=list)


def gather_runs(paragraph: etree._Element) -> ParagraphText:
    """The paragraph's text: inserted text is in, deleted text is out, hidden text is unread."""
    content = ParagraphText()
    parts: list[str] = []
    _walk(paragraph, content, parts)
    content.text = "".join(parts)
    return content


def _walk(node: etree._Element, content: ParagraphText, parts: list[str]) -> None:
    for inner in node:
        name = local(inner)
        if name in _SKIPPED:
            continue
        if name == "t":
            parts.append(inner.text or "")
        elif name in _CHARACTERS:
            parts.append(_CHARACTERS[name])
        elif name == "sym":
            parts.append(_symbol(inner, content))
        elif name in _OBJECTS:
            _object(inner, name, content)
        elif name == "AlternateContent":
            choice = child(inner, "Choice")
            if choice is not None:
                _walk(choice, content, parts)
        elif name == "r" and _is_hidden(inner):
            aside = ParagraphText()
            hidden: list[str] = []
            _walk(inner, aside, hidden)
            content.unread += aside.unread
            if "".join(hidden).strip():
                detail = "Text formatted as hidden, which is not taken as part of the document."
                content.unread.append(("hidden-text", detail, "".join(hidden)))
        elif name not in ("p", "tbl"):
            _walk(inner, content, parts)


def _is_hidden(run: etree._Element) -> bool:
    properties = child(run, "rPr")
    mark = child(properties, "vanish") if properties is not None else None
    return mark is not None and attribute(mark, "val", "1") not in ("0", "false", "off")


def _symbol(node: etree._Element, content: ParagraphText) -> str:
    code = attribute(node, "char")
    font = attribute(node, "font")
    # Symbol fonts keep their characters in the private area from F000 on.
    number = int(code, 16) & 0x0FFF if re.fullmatch(r"[0-9A-Fa-f]{1,4}", code) else 0
    if font.lower() == "symbol" and number in _SYMBOL:
        return _SYMBOL[number]
    detail = f"Character {code} of the font {font} has no known meaning."
    content.unread.append(("symbol-character", detail, ""))
    return "\ufffd"


def _object(node: etree._Element, name: str, content: ParagraphText) -> None:
    boxes = [inner for inner in node.iter() if local(inner) == "txbxContent"]
    if boxes:
        outer = [box for box in boxes if not any(box in other.iterdescendants() for other in boxes)]
        content.boxes += outer
        return
    reason, detail = _OBJECTS[name]
    content.unread.append((reason, detail, ""))
