"""Lines to paragraphs, with the places where the layout alone ended a line.

A line was ended by the layout when the first word of the next line had no room on it; where that
word would have fitted, the author ended it.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from itertools import pairwise
from statistics import median

from dossiercheck.model import Stretch
from dossiercheck.readers.pdfflow import Block, beside, on_one_line, union
from dossiercheck.readers.pdfpage import Box, Piece
from dossiercheck.readers.sections import numbered_heading

_HYPHEN = re.compile(r"[\w)\]}'′’][-‐‑\u00ad]$")
_ENDED = re.compile(r"[.:;!?][)\]”\"']*$")
_ITEM = re.compile(r"(?:[•·▪‣●○◦\uf0b7–—-]|\(?(?:\d{1,2}|[a-z]|[ivx]{1,4})[.)])\s")
# "Molecular formula: …": the beginning of a labelled value.
_LABEL = re.compile(r"[A-Z][^:.;,()\[\]]{1,45}:(?:\s|$)")


@dataclass(eq=False, slots=True)
class Paragraph:
    """Text with the line feeds of its layout; `breaks` are their offsets. `full` says that its
    last line has no room for what may come next."""

    text: str = ""
    breaks: list[int] = field(default_factory=list)
    stretches: list[Stretch] = field(default_factory=list)
    box: Box = (0.0, 0.0, 0.0, 0.0)
    page: int = 0
    size: float = 0.0
    lines: int = 0
    limit: float = 0.0
    last: Piece | None = None

    def add(self, line: Piece, page: int, soft: bool = True) -> None:
        """Put a line at the end; `soft` where the layout ended the line before."""
        if self.lines:
            if soft:
                self.breaks.append(len(self.text))
            self.text += "\n"
            if page == self.page:
                self.box = union(self.box, line.box)
        else:
            self.box, self.page, self.size = line.box, page, line.size
        self.stretches += _stretches(line, len(self.text), page)
        self.text += line.text
        self.lines += 1
        self.last = line

    def extend(self, other: Paragraph) -> None:
        """Go on with a paragraph of another column or page."""
        shift = len(self.text) + 1
        self.breaks.append(len(self.text))
        self.breaks += [at + shift for at in other.breaks]
        self.stretches += [
            Stretch(s.start + shift, s.end + shift, s.page, s.box) for s in other.stretches
        ]
        self.text += "\n" + other.text
        self.lines += other.lines
        self.last, self.limit = other.last, other.limit

    def could_go_on(self, other: Paragraph) -> bool:
        """Whether a paragraph at the top of the next column or page may be the rest of this one."""
        if self.last is None or abs(self.size - other.size) > 0.06 * self.size:
            return False
        if _HYPHEN.search(self.text) or _open(self.text):
            return True
        first = other.text.split("\n", 1)[0]
        if _ENDED.search(self.text) and not first[:1].islower():
            return False
        line = Piece(first, other.box, other.size)
        return not has_room(self.last, line, self.limit, other.stretches[0].box[2])


def _stretches(line: Piece, at: int, page: int) -> Iterator[Stretch]:
    left, top, right, bottom = line.box
    end = len(line.text)
    if not line.known:
        yield Stretch(at, at + end, page, line.box)
        return
    here, x = 0, left
    for start, stop, x0, x1 in line.known:
        if start > here:
            yield Stretch(at + here, at + start, page, (x, top, max(x, x0), bottom))
        if stop > start:
            yield Stretch(at + start, at + stop, page, (x0, top, x1, bottom))
        here, x = stop, x1
    if end > here:
        yield Stretch(at + here, at + end, page, (x, top, max(x, right), bottom))


def has_room(line: Piece, following: Piece, limit: float, right: float | None = None) -> bool:
    """Whether the first word of the following line would have fitted on this one."""
    word = following.text.split(" ", 1)[0]
    if following.known and following.known[0][0] == 0 and following.known[0][1] == len(word):
        width = following.known[0][3] - following.known[0][2]
    else:
        whole = (right or following.box[2]) - following.box[0]
        width = whole * len(word) / max(len(following.text), 1)
    return line.box[2] + 0.2 * line.size + width < limit - 0.5


def _open(text: str) -> bool:
    tail = text[-300:]
    return sum(tail.count(c) for c in "([{") > sum(tail.count(c) for c in ")]}")


def paragraphs(block: Block, page: int) -> list[Paragraph]:
    """The paragraphs of a block."""
    lines = block.lines
    steps = [b.box[3] - a.box[3] for a, b in pairwise(lines)]
    usual = median(steps) if len(steps) > 2 else (min(steps) if steps else 0.0)
    found = [Paragraph(limit=block.limit)]
    found[0].add(lines[0], page)
    for step, last, line in zip(steps, lines, lines[1:], strict=False):
        if not _same_paragraph(found[-1], last, line, block, step > 1.25 * usual + 1):
            found.append(Paragraph(limit=block.limit))
        found[-1].add(line, page)
    return found


def _same_paragraph(so_far: Paragraph, last: Piece, line: Piece, block: Block, apart: bool) -> bool:
    if _HYPHEN.search(last.text):
        return True
    if _LABEL.match(line.text) and (_ENDED.search(last.text) or _LABEL.match(so_far.text)):
        return False
    if apart or (abs(last.size - line.size) > 0.2 and numbered_heading(so_far.text)):
        return False
    if _open(so_far.text) and not _ITEM.match(line.text):
        return True
    if line.text[0].islower() and not _ENDED.search(last.text) and not _ITEM.match(line.text):
        return True  # no paragraph begins so, however much room there was
    if _ENDED.search(last.text) and (
        _ITEM.match(line.text) or line.box[0] > block.box[0] + 0.8 * line.size
    ):
        return False
    return not has_room(last, line, block.limit)


def cell_paragraph(pieces: Sequence[Piece], limit: float, page: int) -> Paragraph:
    """The text of a table cell whose lines may reach as far as `limit`."""
    lines: list[Piece] = []
    for piece in sorted(pieces, key=lambda piece: (round(piece.box[3]), piece.box[0])):
        if lines and on_one_line(lines[-1], piece) and piece.box[0] >= lines[-1].box[0]:
            lines[-1] = _beside(lines[-1], piece)
        else:
            lines.append(piece)
    content = Paragraph(limit=limit)
    for line in lines:
        last = content.last
        soft = last is not None and (
            bool(_HYPHEN.search(last.text))
            or _open(content.text)
            or not has_room(last, line, limit)
        )
        content.add(line, page, soft)
    return content


def _beside(one: Piece, two: Piece) -> Piece:
    gap = two.box[0] - one.box[2]
    return beside(one, two, " " if gap > 0.08 * one.size else "")
