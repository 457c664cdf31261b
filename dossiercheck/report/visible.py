"""Makes characters visible that would otherwise act on the reader or hide from them.

A name in a dossier may hold controls that reorder text (Unicode Standard Annex 9, section 2),
characters of no width, terminal escapes, or halves of a surrogate pair. Shown raw, they could
make a report read otherwise than the source does. Each is set as its code point in
angle quotation marks, as U+202E.
"""

from __future__ import annotations

import re

_HIDDEN = re.compile(
    "["
    "\x00-\x08\x0b-\x1f\x7f-\x9f"  # controls, save tab and line feed
    "\u00ad\u034f\u061c\u115f\u1160\u17b4\u17b5\u180b-\u180e"  # no width of their own
    "\u200b-\u200f\u2028-\u202e\u2060-\u206f"  # joiners, separators, bidirectional controls
    "\u3164\ufe00-\ufe0f\ufeff\uffa0\ufff0-\ufffb\ufffe\uffff"
    "\ud800-\udfff"  # halves of a surrogate pair
    "\U000e0000-\U000e0fff"  # tags and variation selectors
    "]"
)


def visible(text: str) -> str:
    """The text with every hidden or controlling character set as its code point.

    A carriage return before a line feed is a line ending and is dropped.
    """
    if text.isascii() and text.isprintable():
        return text
    return _HIDDEN.sub(_code_point, text.replace("\r\n", "\n"))


def one_line(text: str) -> str:
    """The visible text with line breaks and tabs as single spaces, for a sentence or a cell."""
    return " ".join(visible(text).split())


def runs(text: str, marks: list[list[int]]) -> list[tuple[str, bool, bool]]:
    """The text cut into runs of (visible text, marked, stands for a hidden character).

    `marks` are 0-based spans of `text`, end excluded; what reaches past the text is cut off,
    spans may overlap. The runs joined are the visible text.
    """
    marked = bytearray(len(text))
    for begin, end in marks:
        low, high = max(begin, 0), min(end, len(text))
        if low < high:
            marked[low:high] = b"\x01" * (high - low)
    found: list[tuple[str, bool, bool]] = []
    for index, character in enumerate(text):
        if character == "\r" and text[index + 1 : index + 2] == "\n":
            continue
        hidden = _HIDDEN.match(character) is not None
        shown = _code_point_of(character) if hidden else character
        kind = (bool(marked[index]), hidden)
        if found and found[-1][1:] == kind:
            found[-1] = (found[-1][0] + shown, *kind)
        else:
            found.append((shown, *kind))
    return found


def _code_point(match: re.Match[str]) -> str:
    return _code_point_of(match.group())


def _code_point_of(character: str) -> str:
    return f"\u2039U+{ord(character):04X}\u203a"
