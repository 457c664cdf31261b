"""What styles do to the text of a page: hide it, raise it, change its letters or its font.

Cascading Style Sheets level 2.1, as far as it decides what a person reads. Inline styles and
rules for one tag, class or id are followed. Rules with any other selector, or under a condition,
are not: those that hide something are told, so that nobody takes hidden text for shown.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, field

from lxml import etree

from dossiercheck.readers.symbolfont import FONTS

_COMMENT = re.compile(r"/\*.*?(?:\*/|$)|<!--|-->", re.DOTALL)
_PIECE = re.compile(r"([^{};]*)([{};])")
_SIMPLE = re.compile(r"(\*|[a-z][a-z0-9-]*)?(?:([.#])([\w-]+))?", re.IGNORECASE | re.ASCII)
_ZERO = re.compile(r"0+(?:\.0*)?(?:[a-z]*|%)$")
_DECIDING = "display visibility opacity font-size vertical-align text-transform font-family font"
_KEPT = frozenset(_DECIDING.split())
_RAISED = str.maketrans(
    "0123456789+-−()abcdefghijklmnoprstuvwxyz", "⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻⁻⁽⁾ᵃᵇᶜᵈᵉᶠᵍʰⁱʲᵏˡᵐⁿᵒᵖʳˢᵗᵘᵛʷˣʸᶻ"
)

Style = Mapping[str, str]


@dataclass(slots=True)
class Sheet:
    """The rules of a document: by (tag, mark, name), where mark is ".", "#" or "" and tag may be
    "". `doubtful` are selectors of rules that hide something and were not followed."""

    rules: dict[tuple[str, str, str], dict[str, str]] = field(default_factory=dict)
    doubtful: list[str] = field(default_factory=list)

    def style(self, element: etree._Element, tag: str) -> Style:
        """What is declared for the element itself; weightier rules win (6.4.3)."""
        inline = element.get("style")
        if not self.rules:
            return declarations(inline) if inline else {}
        found: dict[str, str] = {}
        classes = (element.get("class") or "").split()
        wanted = [("", "", ""), (tag, "", "")]
        wanted += [(owner, ".", name) for owner in ("", tag) for name in classes]
        wanted += [(owner, "#", element.get("id") or "") for owner in ("", tag)]
        for key in wanted:
            found.update(self.rules.get(key, {}))
        return {**found, **declarations(inline)} if inline else found


def read_sheets(texts: Iterable[str]) -> Sheet:
    """The style elements of a document, in their order."""
    sheet = Sheet()
    for text in texts:
        for selectors, body, conditional in _rules(_COMMENT.sub(" ", text)):
            found = declarations(body)
            for selector in (one.strip() for one in selectors.split(",")):
                match = _SIMPLE.fullmatch(selector)
                if match and selector and not conditional:
                    tag = "" if match[1] in (None, "*") else match[1].lower()
                    sheet.rules.setdefault((tag, match[2] or "", match[3] or ""), {}).update(found)
                elif hides(found):
                    sheet.doubtful.append(selector)
    return sheet


def _rules(text: str) -> Iterator[tuple[str, str, bool]]:
    """Selectors, declarations, and whether a condition stands over the rule."""
    open_blocks: list[str] = []
    body: list[str] = []
    for match in _PIECE.finditer(f"{text};"):
        if match[2] == "{":
            open_blocks.append(match[1].strip())
            body = []
            continue
        body.append(match[1])
        if match[2] == "}" and open_blocks:
            selectors = open_blocks.pop()
            if not selectors.startswith("@"):
                yield selectors, ";".join(body), bool(open_blocks)
            body = []


def declarations(text: str) -> dict[str, str]:
    """Property and value of each declaration that matters here, in small letters."""
    found = {}
    for one in text.split(";"):
        name, _, value = one.partition(":")
        name = name.strip().lower()
        if name in _KEPT:
            found[name] = value.replace("!important", "").strip().lower()
    return found


def tag_of(node: etree._Element) -> str:
    """The local name in small letters; damaged pages have names that are none in XML."""
    return str(node.tag).rpartition("}")[2].lower()


def hides(style: Style) -> bool:
    """Whether what is declared takes the text out of sight."""
    return bool(style) and (
        style.get("display") == "none"
        or style.get("visibility") in ("hidden", "collapse")
        or _ZERO.match(style.get("opacity", "1")) is not None
        or _ZERO.match(style.get("font-size", "1")) is not None
    )


def raises(style: Style) -> bool:
    """Whether the text is set as a superscript."""
    return style.get("vertical-align") in ("super", "text-top")


def is_symbol_font(family: str) -> bool:
    """Whether the first font asked for is one whose letters are shown as other characters."""
    return family.split(",")[0].strip().strip("'\"").lower() in FONTS


def raised(text: str) -> str:
    """Digits, signs and small letters as superscript characters, as the other readers have them."""
    return text.translate(_RAISED)


def in_case(text: str, transform: str) -> str:
    """The letter of a descriptor as it is shown; a whole title in capitals as it was typed."""
    if transform not in ("uppercase", "lowercase") or sum(c.isalpha() for c in text) > 2:
        return text
    return text.upper() if transform == "uppercase" else text.lower()
