"""The pieces of text on one PDF page, as they stand in its content stream.

A call into the PDF library costs about as much as it takes to read one character of bare text, so
only the first and the last character of a line are asked for their boxes. Word by word goes what
is made of several text objects (table rows, raised and lowered text), has wide gaps or spaced
letters, and what may be a systematic name.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from ctypes import byref, c_ushort
from dataclasses import dataclass
from itertools import pairwise
from math import pi
from statistics import median
from typing import Any

import pypdfium2.raw as pdfium

Box = tuple[float, float, float, float]
# text, box (left, bottom, right, top in the page's own space), the height of its type, and the
# words whose places are known: (first character, end, left, right).
Piece = tuple[str, Box, float, tuple[tuple[int, int, float, float], ...]]

# A hyphen at the end of a line comes as U+FFFE, and what follows without a line feed.
_LINE = re.compile("(.*?)(\r\n|\ufffe\r?\n?|$)", re.DOTALL)
_WORD = re.compile(r"[^ \u00a0\t]+")
_NAMELIKE = re.compile(r"(?=[^ ]*\d)(?=[^ ]*[-(\[,‐‑–])(?=[^ ]*[A-Za-z])[^ ]{5,}")
_SPACED = re.compile(r"(?:[^\W\d_] ){5,}[^\W\d_]")
_STRANGE = re.compile("[\x00-\x08\x0b\x0c\x0e-\x1f\x7f-\x9f\ue000-\uf8ff\ufffd\uffff]")
_RAISED = str.maketrans(
    "0123456789abcdefghijklmnoprstuvwxyz+", "⁰¹²³⁴⁵⁶⁷⁸⁹ᵃᵇᶜᵈᵉᶠᵍʰⁱʲᵏˡᵐⁿᵒᵖʳˢᵗᵘᵛʷˣʸᶻ⁺"
)
# The Symbol font's places in the private area, as word processors write them.
_SYMBOLS = {
    **dict(zip(range(0xF061, 0xF07B), "αβχδεφγηιϕκλμνοπθρστυϖωξψζ", strict=True)),
    **dict(zip(range(0xF030, 0xF03A), "0123456789", strict=True)),
    **{0xF000 + ord(c): c for c in "()[]{}+,./:;<=>%&"},
    0xF02D: "−",
    0xF0B4: "×",
    0xF0A2: "′",
    0xF0B2: "″",
    0xF0A3: "≤",
    0xF0B3: "≥",
    0xF0B0: "°",
    0xF0B1: "±",
    0xF0B7: "•",
    0xF0AE: "→",
    0xF020: " ",
}
_LIGATURES = {0xFB00: "ff", 0xFB01: "fi", 0xFB02: "fl", 0xFB03: "ffi", 0xFB04: "ffl"}
_UNFOLD = str.maketrans({**_SYMBOLS, **_LIGATURES})
_FOLDED = re.compile("[\uf000-\uf0ff\ufb00-\ufb04]")
# Text that is neither filled nor stroked: under the picture of a scanned page, mostly.
HIDDEN = (pdfium.FPDF_TEXTRENDERMODE_INVISIBLE, pdfium.FPDF_TEXTRENDERMODE_CLIP)
_WIDE = 0.62  # mean width of a character over the height of its box, above which gaps are likely


_Found = tuple[re.Match[str], Box, Box]  # a word, the boxes of its first and last character


@dataclass(slots=True)
class PageText:
    """`pieces` in the order of the content stream, each with the direction it runs: 0 rightwards,
    then in quarter turns anticlockwise; `turned` counts characters by direction. `unmapped` are
    pieces whose characters have no sure meaning, `hidden` those that are not painted."""

    pieces: list[tuple[Piece, int]]
    unmapped: list[tuple[Piece, int]]
    hidden: list[tuple[Piece, int]]
    turned: list[int]


class _Characters:
    """Access to the characters of one text page."""

    def __init__(self, textpage: Any) -> None:
        self.page = textpage
        self.count: int = pdfium.FPDFText_CountChars(textpage)
        self._rect = pdfium.FS_RECTF()
        self._reference = byref(self._rect)
        self.text, self.sure = self._read()

    def _read(self) -> tuple[str, bool]:
        """The text, one character for each index; False where the library's own text has another
        length, because characters without a meaning are missing in it."""
        if self.count <= 0:
            return "", True
        buffer = (c_ushort * (self.count + 1))()
        got = pdfium.FPDFText_GetText(self.page, 0, self.count, buffer)
        text = bytes(buffer)[: 2 * max(got - 1, 0)].decode("utf-16-le", "replace")
        if len(text) == self.count:
            return text, True
        codes = [pdfium.FPDFText_GetUnicode(self.page, i) for i in range(self.count)]
        for i, (high, low) in enumerate(pairwise(codes)):
            if 0xD800 <= high < 0xDC00 <= low < 0xE000:
                # The second half keeps its place as a character without width.
                codes[i : i + 2] = 0x10000 + (high - 0xD800) * 0x400 + low - 0xDC00, 0x2060
        return "".join(map(_character, codes)), False

    def box(self, index: int) -> Box:
        """Left, bottom, right, top: as wide as the advance, as high as the font."""
        rect = self._rect
        pdfium.FPDFText_GetLooseCharBox(self.page, index, self._reference)
        return rect.left, rect.bottom, rect.right, rect.top

    def objects(self, start: int, end: int) -> int:
        """How many text objects the characters come from."""
        return int(pdfium.FPDFText_CountRects(self.page, start, end - start))

    def direction(self, index: int) -> int:
        """Quarter turns anticlockwise; the library counts clockwise."""
        angle: float = pdfium.FPDFText_GetCharAngle(self.page, index)
        return -round(angle / (pi / 2)) % 4

    def hidden(self, index: int) -> bool:
        thing = pdfium.FPDFText_GetTextObject(self.page, index)
        return bool(thing) and pdfium.FPDFTextObj_GetTextRenderMode(thing) in HIDDEN

    def unmapped(self, index: int) -> bool:
        return bool(pdfium.FPDFText_HasUnicodeMapError(self.page, index) == 1)


def _character(code: int) -> str:
    return chr(code) if 0 < code < 0xD800 or 0xE000 <= code < 0x110000 else "\ufffd"


def page_text(textpage: Any, some_hidden: bool) -> PageText:
    """The pieces of a page, given the library's handle of its text; `some_hidden` says that not
    all of it is painted."""
    characters = _Characters(textpage)
    found = PageText([], [], [], [0, 0, 0, 0])
    for match in _LINE.finditer(characters.text):
        start, end = match.span(1)
        if match[2][:1] == "\ufffe":
            end += 1
        text = characters.text
        while start < end and text[start] in " \u00a0\t\r\n":
            start += 1
        while start < end and text[end - 1] in " \u00a0\t\r\n":
            end -= 1
        if start < end and some_hidden and characters.hidden(start):
            box = _union(characters.box(start), characters.box(end - 1))
            found.hidden.append(((_shown(text[start:end]), box, box[3] - box[1], ()), 0))
        elif start < end:
            _line(characters, start, end, found)
    return found


def _line(characters: _Characters, start: int, end: int, found: PageText) -> None:
    first, last = characters.box(start), characters.box(end - 1)
    turn = characters.direction(start) if _seems_turned(first, last, end - start) else 0
    found.turned[turn] += end - start
    text = characters.text[start:end]
    if _is_broken(characters, text, start, end):
        box = _union(first, last)
        found.unmapped.append(((_shown(text), box, first[3] - first[1], ()), turn))
        return
    height = first[3] - first[1]
    plain = (
        turn == 0
        and last[2] - first[0] < _WIDE * height * (end - start)
        and characters.objects(start, end) <= 1
    )
    if turn:
        height = abs(first[2] - first[0]) if turn % 2 else height
        found.pieces.append(((_shown(text), _union(first, last), height, ()), turn))
    elif plain and not _SPACED.search(text):
        found.pieces.append((_simple(characters, text, start, first, last), 0))
    else:
        found.pieces += [(piece, 0) for piece in _by_words(characters, text, start)]


def _seems_turned(first: Box, last: Box, count: int) -> bool:
    across, up = last[0] - first[0], last[1] - first[1]
    return count > 1 and (across < -0.01 or abs(up) > across)


def _is_broken(characters: _Characters, text: str, start: int, end: int) -> bool:
    """Whether characters have no place in Unicode: a text object has one font, so its first and
    last character speak for it, and every one is asked where something looks strange."""
    if not characters.sure or _STRANGE.search(text.translate(_UNFOLD)):
        wrong = sum(characters.unmapped(i) for i in range(start, end) if characters.text[i] != " ")
        strange = len(_STRANGE.findall(text.translate(_UNFOLD)))
        return wrong > 0 or strange > 0
    return characters.unmapped(start) or characters.unmapped(end - 1)


def _shown(text: str) -> str:
    """Ligatures taken apart, symbol characters by their meaning, and the line-end hyphen."""
    if "\ufffe" in text or "\u2060" in text:
        text = text.replace("\ufffe", "-").replace("\u2060", "")
    return text.translate(_UNFOLD) if _FOLDED.search(text) else text


def _simple(characters: _Characters, text: str, start: int, first: Box, last: Box) -> Piece:
    words = []
    if _NAMELIKE.search(text) and not _FOLDED.search(text):
        for word in _NAMELIKE.finditer(text):
            left = characters.box(start + word.start())[0]
            right = characters.box(start + word.end() - 1)[2]
            words.append((word.start(), word.end(), left, right))
    return _shown(text), _union(first, last), first[3] - first[1], tuple(words)


def _union(one: Box, two: Box) -> Box:
    return min(one[0], two[0]), min(one[1], two[1]), max(one[2], two[2]), max(one[3], two[3])


def _by_words(characters: _Characters, text: str, start: int) -> Iterator[Piece]:
    """A line of several text objects: cut where a gap is wide, raised digits marked."""
    boxes: list[_Found] = []
    for match in _WORD.finditer(text):
        first = characters.box(start + match.start())
        last = characters.box(start + match.end() - 1)
        boxes.append((match, first, last))
    for row in _rows(boxes):
        base = _base(row)
        height = base[3] - base[1]
        words: list[tuple[str, Box]] = []
        for match, first, last in row:
            words += _word(characters, match, start, first, last, base)
        words = _letters_joined(words) if _SPACED.search(text) else words
        group: list[tuple[str, Box]] = []
        for word in words:
            if group and word[1][0] - group[-1][1][2] > height:
                yield _joined(group, height)
                group = []
            group.append(word)
        yield _joined(group, height)


def _rows(words: list[_Found]) -> Iterator[list[_Found]]:
    """The library may take two lines for one: where it goes back to the left, one ends."""
    row: list[_Found] = []
    for word in words:
        if row and word[1][0] < row[-1][1][0] - 0.5:
            yield row
            row = []
        row.append(word)
    if row:
        yield row


def _base(words: list[_Found]) -> Box:
    """The box that speaks for the line: of the height that most of its characters have."""
    weights: dict[int, int] = {}
    for match, first, _ in words:
        height = round(first[3] - first[1])
        weights[height] = weights.get(height, 0) + len(match[0])
    usual = max(weights, key=lambda height: (weights[height], height))
    return next(box for _, box, _ in words if round(box[3] - box[1]) == usual)


def _word(
    characters: _Characters, match: re.Match[str], start: int, first: Box, last: Box, base: Box
) -> Iterator[tuple[str, Box]]:
    """One word, or several where a wide gap inside it has no space."""
    text = match[0]
    begin, end = start + match.start(), start + match.end()
    height = base[3] - base[1]
    small = min(first[3] - first[1], last[3] - last[1]) < 0.9 * height
    if not small and characters.objects(begin, end) <= 1:
        yield _shown(text), _union(first, last)
        return
    part, box, previous = "", None, None
    for index in range(begin, end):
        here = characters.box(index)
        character = _shown(characters.text[index])
        if here[3] - here[1] < 0.9 * height and here[1] > base[1] + 0.15 * height:
            character = character.translate(_RAISED)
        if previous and box and not -height < here[0] - previous[2] <= height:
            yield part, box
            part, box = "", None
        part += character
        box = _union(box, here) if box else here
        previous = here
    if box:
        yield part, box


def _letters_joined(words: list[tuple[str, Box]]) -> list[tuple[str, Box]]:
    """Letter-spaced words put together: the usual gap is that between letters, a wider one that
    between words."""
    gaps = [two[1][0] - one[1][2] for one, two in pairwise(words)]
    singles = [
        gap
        for gap, one, two in zip(gaps, words, words[1:], strict=False)
        if len(one[0]) == 1 == len(two[0])
    ]
    usual = median(singles) if singles else 0.0
    joined = words[:1]
    for gap, one, two in zip(gaps, words, words[1:], strict=False):
        if len(one[0]) == 1 == len(two[0]) and gap < 1.5 * usual + 0.1:
            joined[-1] = (joined[-1][0] + two[0], _union(joined[-1][1], two[1]))
        else:
            joined.append(two)
    return joined


def _joined(words: list[tuple[str, Box]], height: float) -> Piece:
    """A piece of words, with a space between those that a gap parts."""
    text = ""
    known = []
    box = words[0][1]
    right = None
    for word, place in words:
        if right is not None and (place[0] - right > 0.08 * height or text[-1:].isalnum()):
            text += " "
        known.append((len(text), len(text) + len(word), place[0], place[2]))
        text += word
        right = place[2]
        box = _union(box, place)
    tall = max(place[3] - place[1] for _, place in words)
    return text, box, min(tall, height), tuple(known)
