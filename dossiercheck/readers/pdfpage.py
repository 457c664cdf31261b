"""A PDF page as it is handed on: its pieces of text and its shapes, in the page's view."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, NamedTuple

Box = tuple[float, float, float, float]


class Piece(NamedTuple):
    """Text of one line without a wide gap. `box` is left, top, right, bottom in points from the
    top left of the page as shown, as high as the font; `size` is the height of the type; `known`
    are words whose places were asked for: (first character, end, left, right).

    A named tuple, because a long document has some hundred thousand of them.
    """

    text: str
    box: Box
    size: float
    known: tuple[tuple[int, int, float, float], ...] = ()


@dataclass(frozen=True, slots=True)
class PdfPage:
    """`number` from 1. `pieces` are in the order of the content stream, `aside` run in another
    direction than most of the page; `unmapped` are of characters without a sure meaning, `hidden`
    not painted. `rules` are thin boxes, `strokes` parts of drawings. `notes` are (reason,
    detail)."""

    number: int
    width: float
    height: float
    pieces: list[Piece]
    aside: list[Piece]
    unmapped: list[Piece]
    hidden: list[Piece]
    rules: list[Box]
    pictures: list[Box]
    strokes: list[Box]
    notes: list[tuple[str, str]]


class View(NamedTuple):
    """How the page's own space becomes what a reader sees: `box` is its visible part there,
    `turns` the quarter turns clockwise, of the page and of its text together."""

    box: Box
    turns: int

    @property
    def size(self) -> tuple[float, float]:
        """Width and height as shown."""
        width, height = self.box[2] - self.box[0], self.box[3] - self.box[1]
        return (height, width) if self.turns % 2 else (width, height)

    def shown(self, box: Box) -> Box:
        """A box (left, bottom, right, top) of the page's space as (left, top, right, bottom)."""
        x0, y0, x1, y1 = box
        left, bottom, right, top = self.box
        if self.turns == 0:
            return x0 - left, top - y1, x1 - left, top - y0
        if self.turns == 1:
            return y0 - bottom, x0 - left, y1 - bottom, x1 - left
        if self.turns == 2:
            return right - x1, y0 - bottom, right - x0, y1 - bottom
        return top - y1, right - x1, top - y0, right - x0


def pack(page: PdfPage) -> tuple[Any, ...]:
    """Plain tuples and lists, fit for `marshal`."""
    lists = (page.pieces, page.aside, page.unmapped, page.hidden)
    texts = [list(map(tuple, pieces)) for pieces in lists]
    shapes = (page.rules, page.pictures, page.strokes, page.notes)
    return (page.number, page.width, page.height, *texts, *shapes)


def unpack(packed: tuple[Any, ...]) -> PdfPage:
    """The page that was packed."""
    number, width, height, *rest = packed
    texts: list[Any] = [list(map(Piece._make, pieces)) for pieces in rest[:4]]
    return PdfPage(number, width, height, *texts, *rest[4:])
