"""XML of a format that nobody here knows: its words as running text, and no more.

What its elements and attributes mean is not guessed at, and that is said. An element with words
of its own is a passage with all that is in it; elements that only hold others are gone into.
Whether an element in the middle of a word belongs to the word is known of emphasis and of raised
and lowered text by the names that most formats give them; with any other the passage is unread.
"""

from __future__ import annotations

from collections.abc import Iterator
from typing import cast

from lxml import etree

from dossiercheck.model import Item, Passage, Place, Source, Unread
from dossiercheck.readers.htmlstyle import raised

_EMPHASIS = "b bold em emph emphasis hi i it italic roman sc small span strong sub subscript u"
_INLINE = frozenset(_EMPHASIS.split())
_RAISED = frozenset({"sup", "superscript"})
_LAST_LINE = 65_535  # the parser counts no further


def read_root(source: Source, root: etree._Element) -> Iterator[Item]:
    """Say that the format is not known, then the words."""
    name = etree.QName(root)
    where = f" in the namespace {name.namespace}" if name.namespace else ""
    detail = f"No reader for XML with the root {name.localname}{where}"
    passages = list(_passages(source.path, root))
    rest = ": its words are read as running text, its elements and attributes are not"
    yield Unread(Place(source.path), "no-reader", f"{detail}{rest if passages else ''}.")
    yield from passages


def _passages(path: str, root: etree._Element) -> Iterator[Item]:
    waiting = [root]
    number = 0
    while waiting:
        node = waiting.pop()
        children = list(node.iterchildren(tag=etree.Element))
        own = [node.text, *(child.tail for child in node)]  # comments have tails too
        if not any(text and text.strip() for text in own):
            waiting += reversed(children)
            continue
        parts: list[str] = []
        doubtful = _gather(node, parts)
        words = " ".join("".join(parts).split())
        number += 1
        line = cast("int | None", node.sourceline)
        place = Place(path, paragraph=number, line=line if line and line < _LAST_LINE else None)
        if doubtful:
            detail = f"Whether the element {doubtful} stands in a word or ends it is not known."
            yield Unread(place, "mixed-content", detail, words[:2000])
        else:
            yield Passage(words, place)


def _gather(node: etree._Element, parts: list[str]) -> str:
    """Collect an element's words; the name of an element that may or may not part a word."""
    doubtful = ""
    name = etree.QName(node).localname.lower()
    parts.append(raised(node.text or "") if name in _RAISED else node.text or "")
    for child in node:
        if isinstance(child.tag, str):
            inside: list[str] = []
            doubtful = _gather(child, inside) or doubtful
            name = etree.QName(child).localname.lower()
            words, tail = "".join(inside), child.tail or ""
            if name not in _INLINE | _RAISED and (
                _meet("".join(parts[-1:]), words or tail) or _meet(words, tail)
            ):
                doubtful = name
            parts += [words]
        parts.append(child.tail or "")
    return doubtful


def _meet(before: str, after: str) -> bool:
    """Whether no white space stands between two texts."""
    return bool(before and after) and not (before[-1].isspace() or after[0].isspace())
