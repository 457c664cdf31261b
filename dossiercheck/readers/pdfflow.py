"""From pieces of text to blocks of lines, and blocks in the order they are read.

The order is that of Breuel (High performance document layout analysis, 2003): what stands above
goes first where two blocks share a breadth, and what stands left goes first where no third block
parts them. Where neither tells, the order of the content stream stays.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, field
from itertools import pairwise
from typing import Protocol

from dossiercheck.readers.pdfpage import Box, Piece

_NUMBER = re.compile(r"(?:\d{1,2}\.(?:\d{1,2}\.?)*|[1-5](?:\.(?:\d{1,2}|[SPAR]))+|\(?[a-z]\))")
_MOST = 200  # blocks of one page that are put in order; beyond, the stream's order stays


@dataclass(eq=False, slots=True)
class Block:
    """Lines that stand under one another; `limit` is how far to the right they may reach."""

    lines: list[Piece] = field(default_factory=list)
    box: Box = (0.0, 0.0, 0.0, 0.0)
    limit: float = 0.0

    @property
    def size(self) -> float:
        """The height of its type."""
        return self.lines[0].size

    def add(self, piece: Piece) -> None:
        """Take a line in."""
        self.box = union(self.box, piece.box) if self.lines else piece.box
        self.lines.append(piece)


class Boxed(Protocol):
    """Anything with a box on the page."""

    @property
    def box(self) -> Box:
        """Left, top, right, bottom."""


def union(one: Box, two: Box) -> Box:
    """The box around two boxes."""
    return min(one[0], two[0]), min(one[1], two[1]), max(one[2], two[2]), max(one[3], two[3])


def beside(one: Piece, two: Piece, space: str = " ") -> Piece:
    """Two pieces of one line as one."""
    text = one.text + space + two.text
    shift = len(one.text) + len(space)
    first = one.known or ((0, len(one.text), one.box[0], one.box[2]),)
    second = two.known or ((0, len(two.text), two.box[0], two.box[2]),)
    known = (*first, *((a + shift, b + shift, x0, x1) for a, b, x0, x1 in second))
    return Piece(text, union(one.box, two.box), max(one.size, two.size), known)


def on_one_line(one: Piece, two: Piece) -> bool:
    """Whether two pieces share a line: most of the lower one's height is beside the other."""
    _, top, _, bottom = one.box
    _, other_top, _, other_bottom = two.box
    if other_top >= bottom or top >= other_bottom:  # the common case, quickly
        return False
    shared = min(bottom, other_bottom) - max(top, other_top)
    return shared > 0.55 * min(bottom - top, other_bottom - other_top)


def numbered(pieces: Sequence[Piece]) -> list[Piece]:
    """The pieces, with the number of a heading or list item joined to what it numbers."""
    found: list[Piece] = []
    for piece in pieces:
        last = found[-1] if found else None
        if (
            last
            and _NUMBER.fullmatch(last.text)
            and on_one_line(last, piece)
            and 0 < piece.box[0] - last.box[2] < 90
            and piece.text[:1].isalpha()
        ):
            found[-1] = beside(last, piece)
        else:
            found.append(piece)
    return found


def blocks(pieces: Sequence[Piece]) -> list[Block]:
    """Blocks of the pieces that follow one another in the stream and stand under one another."""
    found: list[Block] = []
    for piece in pieces:
        if found:
            lines = found[-1].lines
            last = lines[-1]
            gap = piece.box[0] - last.box[2]
            if (
                on_one_line(last, piece)
                and gap > -0.5 * piece.size
                and (gap < 3 * piece.size or _bridged(lines[-4:-1], last, piece))
            ):
                lines[-1] = beside(last, piece, " " if gap > 0.08 * last.size else "")
                found[-1].box = union(found[-1].box, piece.box)
                continue
            _mend(found, piece)
            last = found[-1].lines[-1]
            if _goes_on(found[-1], last, piece):
                found[-1].add(piece)
                continue
        block = Block()
        block.add(piece)
        found.append(block)
    return found


def _bridged(lines: Sequence[Piece], left: Piece, right: Piece) -> bool:
    """Whether a gap in a line is one of justified text: a line of the same block goes over it."""
    return any(line.box[0] < left.box[2] and line.box[2] > right.box[0] for line in lines)


def _mend(found: list[Block], piece: Piece) -> None:
    """Put together the first line of a paragraph that a gap of justified text cut in two, when
    the line under it goes over the gap."""
    while len(found) > 1 and len(found[-1].lines) == 1:
        left, right = found[-2].lines[-1], found[-1].lines[0]
        if not (
            on_one_line(left, right)
            and left.box[2] <= right.box[0]
            and _bridged([piece], left, right)
            and 0 < piece.box[3] - right.box[3] < 2.0 * piece.size
        ):
            return
        found[-2].lines[-1] = beside(left, right)
        found[-2].box = union(found[-2].box, right.box)
        found.pop()


def _goes_on(block: Block, last: Piece, piece: Piece) -> bool:
    step = piece.box[3] - last.box[3]
    larger, smaller = max(last.size, piece.size), min(last.size, piece.size)
    if not 0.3 * smaller < step <= 2.0 * larger or smaller < 0.8 * larger:
        return False
    return piece.box[0] < block.box[2] and piece.box[2] > block.box[0]


def in_order(things: Sequence[Boxed]) -> list[int]:
    """The positions of the things in the order they are read."""
    count = len(things)
    if count < 2 or count > _MOST:
        return list(range(count))
    boxes = [thing.box for thing in things]
    if all(two[1] >= one[3] - 3 for one, two in pairwise(boxes)):
        return list(range(count))
    before: list[set[int]] = [set() for _ in range(count)]
    for i, one in enumerate(boxes):
        for j, two in enumerate(boxes):
            if i != j and _comes_first(one, two, boxes):
                before[j].add(i)
    order: list[int] = []
    left = list(range(count))
    while left:
        ready = next((i for i in left if not before[i] & set(left)), left[0])
        order.append(ready)
        left.remove(ready)
    return order


def _comes_first(one: Box, two: Box, boxes: list[Box]) -> bool:
    if one[0] < two[2] - 1 and one[2] > two[0] + 1:
        return (one[1] + one[3]) < (two[1] + two[3])
    if one[2] > two[0] + 1:
        return False
    top, bottom = min(one[1], two[1]), max(one[3], two[3])
    return not any(
        third[0] < one[2] and third[2] > two[0] and third[3] > top and third[1] < bottom
        for third in boxes
        if third is not one and third is not two
    )


def set_limits(found: Sequence[Block], others: Sequence[Box], width: float) -> None:
    """Say for each block how far a line of it could have reached: to what stands beside it, or to
    a margin like the left one, or as far as the lines of its column do where that is nearly so."""
    if not found:
        return
    margin = min(block.box[0] for block in found)
    everything = [*(block.box for block in found), *others]
    for block in found:
        left, top, right, bottom = block.box
        bound = max(width - margin, right)
        for x0, y0, _, y1 in everything:
            if x0 >= right and y0 < bottom and y1 > top:
                bound = min(bound, x0 - 0.5 * block.size)
        ends = [
            line.box[2]
            for other in found
            if other.box[0] < right and other.box[2] > left and other.box[2] <= bound + 2
            for line in other.lines
        ]
        reach = max(ends)
        long = sum(end > reach - 0.15 * (reach - left) for end in ends)
        filled = len(ends) > 3 and long > len(ends) / 2
        block.limit = reach if filled or reach > bound - 0.15 * (bound - left) else bound
