"""The pieces of text on one PDF page, as they stand in its content stream.

A call into the PDF library costs about as much as it takes to read one character of bare text, so
only the first and the last character of a line are asked for their boxes. Word by word goes what
is made of several text objects (table rows, raised and lowered text), has wide gaps or spaced
letters, and what may be a systematic name.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from ctypes import byref, c_double, c_ushort
from dataclasses import dataclass
from itertools import pairwise
from math import hypot, pi
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
_NAME_SIGN = re.compile(r"\d[-‐‑–,(\[]|[-‐‑–,(\[]\d")
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
_WIDE = 0.7  # mean width of a character over the size of the type, above which gaps are likely


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
        self._x, self._y, self._matrix = c_double(), c_double(), pdfium.FS_MATRIX()
        self._to_x, self._to_y = byref(self._x), byref(self._y)
        self._to_matrix = byref(self._matrix)
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

    def baseline(self, index: int) -> float:
        pdfium.FPDFText_GetCharOrigin(self.page, index, self._to_x, self._to_y)
        return self._y.value

    def size(self, index: int) -> float:
        """The size of the type as it is shown, in points."""
        size: float = pdfium.FPDFText_GetFontSize(self.page, index)
        if not pdfium.FPDFText_GetMatrix(self.page, index, self._to_matrix):
            return max(size, 0.1)
        return max(size * hypot(self._matrix.c, self._matrix.d), 0.1)

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
    size = characters.size(start)
    if _is_broken(characters, text, start, end):
        found.unmapped.append(((_shown(text), _union(first, last), size, ()), turn))
        return
    baseline = characters.baseline(start)
    plain = (
        last[2] - first[0] < _WIDE * size * (end - start)
        and characters.objects(start, end) <= 1
        and abs(characters.baseline(end - 1) - baseline) < 0.5 * size  # it is one line, not two
    )
    if turn:
        found.pieces.append(((_shown(text), _union(first, last), size, ()), turn))
    elif plain and not _is_spaced(text):
        box = _type_box(first[0], last[2], baseline, size)
        found.pieces.append(((_shown(text), box, size, _known(characters, text, start)), 0))
    else:
        found.pieces += [(piece, 0) for piece in _by_words(characters, text, start)]


def _type_box(left: float, right: float, baseline: float, size: float) -> Box:
    """As high as type of that size is, whatever the font says of itself: many say nothing."""
    return left, baseline - 0.22 * size, right, baseline + 0.8 * size


def _seems_turned(first: Box, last: Box, count: int) -> bool:
    across, up = last[0] - first[0], last[1] - first[1]
    return count > 1 and (across < -0.01 or abs(up) > across)


def _is_broken(characters: _Characters, text: str, start: int, end: int) -> bool:
    """Whether characters have no place in Unicode: a text object has one font, so its first and
    last character speak for it, and every one is asked where something looks strange."""
    if not characters.sure or _STRANGE.search(text):
        wrong = any(characters.unmapped(i) for i in range(start, end) if characters.text[i] != " ")
        return wrong or _STRANGE.search(text.translate(_UNFOLD)) is not None
    return characters.unmapped(start) or characters.unmapped(end - 1)


def _shown(text: str) -> str:
    """Ligatures taken apart, symbol characters by their meaning, and the line-end hyphen."""
    if "\ufffe" in text or "\u2060" in text:
        text = text.replace("\ufffe", "-").replace("\u2060", "")
    return text.translate(_UNFOLD) if _FOLDED.search(text) else text


def _known(
    characters: _Characters, text: str, start: int
) -> tuple[tuple[int, int, float, float], ...]:
    """Where the words stand that may be names."""
    if not _NAME_SIGN.search(text) or _FOLDED.search(text) or "\u2060" in text:
        return ()
    return tuple(
        (
            word.start(),
            word.end(),
            characters.box(start + word.start())[0],
            characters.box(start + word.end() - 1)[2],
        )
        for word in _NAMELIKE.finditer(text)
    )


def _union(one: Box, two: Box) -> Box:
    return min(one[0], two[0]), min(one[1], two[1]), max(one[2], two[2]), max(one[3], two[3])


@dataclass(slots=True)
class _Word:
    """A word from `start` to `end` of the page's characters, where it stands and how large."""

    text: str
    start: int
    end: int
    left: float
    right: float
    baseline: float
    size: float


def _by_words(characters: _Characters, text: str, start: int) -> Iterator[Piece]:
    """A line of several text objects: cut where a gap is wide, raised digits marked."""
    spaced = _is_spaced(text)
    for row in _rows(list(_runs(characters, text, start, spaced))):
        base = _base(row)
        parts = [part for run in row for part in _parts(characters, run, base)]
        parts = _letters_joined(parts) if spaced else parts
        group: list[_Word] = []
        for part in parts:
            if group and part.left - group[-1].right > 1.1 * base.size:
                yield _joined(characters, group, base)
                group = []
            group.append(part)
        yield _joined(characters, group, base)


def _is_spaced(text: str) -> bool:
    return 3 * text.count(" ") > len(text) and _SPACED.search(text) is not None


def _runs(characters: _Characters, text: str, start: int, spaced: bool) -> Iterator[_Word]:
    """Words of one text object in a row as one, found by halving: the library tells how many
    objects a stretch has, and each question costs the same. Runs with gaps come word by word."""
    words = [match.span() for match in _WORD.finditer(text)]
    at = 0
    while at < len(words):
        begin = words[at][0]
        last, beyond = at, len(words)
        while not spaced and beyond - last > 1:
            middle = beyond - 1 if beyond == len(words) else (last + beyond) // 2
            if characters.objects(start + begin, start + words[middle][1]) <= 1:
                last = middle
            else:
                beyond = middle
        run = _run(characters, text, start, begin, words[last][1])
        count = run.end - run.start
        if last > at and not 0 < run.right - run.left < _WIDE * run.size * count:
            yield from (_run(characters, text, start, *word) for word in words[at : last + 1])
        else:
            yield run
        at = last + 1


def _run(characters: _Characters, text: str, start: int, begin: int, end: int) -> _Word:
    return _Word(
        text[begin:end],
        start + begin,
        start + end,
        characters.box(start + begin)[0],
        characters.box(start + end - 1)[2],
        characters.baseline(start + begin),
        characters.size(start + begin),
    )


def _rows(words: list[_Word]) -> Iterator[list[_Word]]:
    """The library may take two lines for one: where it goes back to the left, one ends."""
    row: list[_Word] = []
    for word in words:
        if row and word.left < row[-1].left - 0.5:
            yield row
            row = []
        row.append(word)
    if row:
        yield row


def _base(words: list[_Word]) -> _Word:
    """The word that speaks for the line: of the size that most of its characters have."""
    weights: dict[int, int] = {}
    for word in words:
        size = round(10 * word.size)
        weights[size] = weights.get(size, 0) + len(word.text)
    usual = max(weights, key=lambda size: (weights[size], size))
    return next(word for word in words if round(10 * word.size) == usual)


def _parts(characters: _Characters, word: _Word, base: _Word) -> Iterator[_Word]:
    """One word, or several where a wide gap inside it has no space."""
    if characters.objects(word.start, word.end) <= 1:
        text = _raised(_shown(word.text), word.baseline, word.size, base)
        yield _Word(text, word.start, word.end, word.left, word.right, word.baseline, word.size)
        return
    part: _Word | None = None
    for index in range(word.start, word.end):
        left, _, right, _ = characters.box(index)
        baseline = characters.baseline(index)
        level = abs(baseline - base.baseline) < 0.1 * base.size
        size = base.size if level else characters.size(index)
        text = _raised(_shown(characters.text[index]), baseline, size, base)
        if part and -base.size < left - part.right <= base.size:
            part.text += text
            part.end, part.right = index + 1, max(part.right, right)
            continue
        if part:
            yield part
        part = _Word(text, index, index + 1, left, right, baseline, size)
    if part:
        yield part


def _raised(text: str, baseline: float, size: float, base: _Word) -> str:
    """Small type above the baseline as superscripts where Unicode has them."""
    if size < 0.93 * base.size and baseline > base.baseline + 0.12 * base.size:
        return text.translate(_RAISED)
    return text


def _letters_joined(words: list[_Word]) -> list[_Word]:
    """Letter-spaced words put together: the usual gap is that between letters, a wider one that
    between words."""
    gaps = [two.left - one.right for one, two in pairwise(words)]
    singles = [
        gap
        for gap, (one, two) in zip(gaps, pairwise(words), strict=True)
        if len(one.text) == 1 == len(two.text)
    ]
    usual = median(singles) if singles else 0.0
    joined = words[:1]
    for gap, (one, two) in zip(gaps, pairwise(words), strict=True):
        if len(one.text) == 1 == len(two.text) and gap < 1.5 * usual + 0.1:
            last = joined[-1]
            last.text, last.end, last.right = last.text + two.text, two.end, two.right
        else:
            joined.append(two)
    return joined


def _joined(characters: _Characters, words: list[_Word], base: _Word) -> Piece:
    """A piece of words, with a space between those that a gap parts."""
    text = ""
    known = []
    for number, word in enumerate(words):
        if number:
            gap = word.left - words[number - 1].right
            if gap > 0.08 * base.size or text[-1:].isalnum():
                text += " "
        shift = len(text)
        text += word.text
        left = word.left
        at = shift
        if len(word.text) == word.end - word.start:
            for first, last, x0, x1 in _known(characters, word.text, word.start):
                if first + shift > at:
                    known.append((at, first + shift, left, x0))
                known.append((first + shift, last + shift, x0, x1))
                at, left = last + shift, x1
        if len(text) > at:
            known.append((at, len(text), left, word.right))
    size = base.size if len(words) > 1 else words[0].size
    baseline = base.baseline if len(words) > 1 else words[0].baseline
    box = _type_box(words[0].left, max(word.right for word in words), baseline, size)
    return text, box, size, tuple(known)
