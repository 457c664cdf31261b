"""Running headers and footers of a PDF, pictures that every page repeats, and drawings."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from typing import NamedTuple

from dossiercheck.readers.pdfflow import union
from dossiercheck.readers.pdfgrid import Grid
from dossiercheck.readers.pdfpage import Box, PdfPage, Piece

_ZONE = 0.14  # share of the page's height at the top and at the bottom
_SHIFT = 8.0  # points by which a running line may stand higher or lower on another page
_PAGE_NUMBER = re.compile(
    r"(?:page|p\.)?\s*[-–]?\s*(?:\d{1,4}|[ivxl]{1,6}|X+)\s*[-–]?\s*(?:(?:of|/)\s*(?:\d{1,4}|X+))?",
    re.IGNORECASE,
)
_CAPTION = re.compile(r"(?:table|figure|scheme)\s*\d", re.IGNORECASE)
_APART = 10.0  # points between strokes of one drawing
_STROKES = 4000
LETTER = 12.0  # points that the lettering of a drawing may stand out of its strokes


class EdgeLine(NamedTuple):
    """What stands near the top or the bottom of a page: `text` with its numbers made equal, the
    numbers, and the distance from the page's edge."""

    page: int
    zone: str
    text: str
    numbers: tuple[int, ...]
    distance: float


Running = list[EdgeLine]


def edge_lines(page: PdfPage) -> Running:
    """The lines in the zones of a page."""
    return [line for piece in page.pieces if (line := _edge_line(page, piece))]


def _edge_line(page: PdfPage, piece: Piece) -> EdgeLine | None:
    _, top, _, bottom = piece.box
    depth = _ZONE * page.height
    if bottom < depth:
        zone, distance = "header", top
    elif top > page.height - depth:
        zone, distance = "footer", page.height - bottom
    else:
        return None
    text = piece.text.casefold().replace(" ", "")
    numbers = tuple(int(number) for number in re.findall(r"\d{1,9}", text))
    return EdgeLine(page.number, zone, re.sub(r"\d+", "#", text), numbers, distance)


def _repeats(line: EdgeLine, other: EdgeLine) -> bool:
    """Whether two lines differ in nothing but a page number that counts on."""
    steps = {a - b for a, b in zip(line.numbers, other.numbers, strict=False)}
    return (
        (line.zone, line.text) == (other.zone, other.text)
        and abs(line.distance - other.distance) < _SHIFT
        and len(line.numbers) == len(other.numbers)
        and steps <= {0, line.page - other.page}
    )


def running(
    page: PdfPage, near: Iterable[Running], grids: Sequence[Grid]
) -> tuple[list[tuple[str, Piece]], list[Piece]]:
    """The running lines of a page (zone, piece) and its other pieces. A line runs when a page near
    by has it at the same place; page numbers in the zones run always, captions never, and what
    stands in a table only where the whole table does."""
    others = [line for lines in near for line in lines]
    found: list[tuple[str, Piece]] = []
    for piece in page.pieces:
        line = _edge_line(page, piece)
        if line is None or _CAPTION.match(piece.text):
            continue
        if _PAGE_NUMBER.fullmatch(piece.text) or any(_repeats(line, o) for o in others):
            found.append((line.zone, piece))
    run = {id(piece) for _, piece in found}
    for grid in grids:
        inside = [piece for piece in page.pieces if _inside(piece.box, [grid.box])]
        if not all(id(piece) in run for piece in inside):
            run -= {id(piece) for piece in inside}
    return (
        [(zone, piece) for zone, piece in found if id(piece) in run],
        [piece for piece in page.pieces if id(piece) not in run],
    )


def _inside(box: Box, others: Iterable[Box]) -> bool:
    middle = (box[1] + box[3]) / 2
    return any(b[0] - 2 <= box[0] <= b[2] and b[1] <= middle <= b[3] for b in others)


def drawings(page: PdfPage, tables: Sequence[Box]) -> list[tuple[Box, int]]:
    """Boxes of drawings, strokes near one another taken together, each with their number; those
    in the border of a table are its ornament."""
    strokes = [
        box
        for box in page.strokes
        if max(box[2] - box[0], box[3] - box[1]) > 1.5 and not _on_border(box, tables)
    ]
    if len(strokes) > _STROKES:
        box = strokes[0]
        for other in strokes:
            box = union(box, other)
        return [(box, len(strokes))]
    groups: list[tuple[Box, int]] = []
    for stroke in sorted(strokes, key=lambda box: (box[1], box[0])):
        box, count = stroke, 1
        merged = True
        while merged:
            merged = False
            for index, (other, number) in enumerate(groups):
                if _touch(box, other):
                    box, count = union(box, other), count + number
                    del groups[index]
                    merged = True
                    break
        groups.append((box, count))
    return [
        (box, count)
        for box, count in groups
        if box[2] - box[0] > 8 and box[3] - box[1] > 8 and (count > 1 or box[2] - box[0] > 20)
    ]


def _on_border(box: Box, tables: Sequence[Box]) -> bool:
    return max(box[2] - box[0], box[3] - box[1]) <= 4 and any(
        t[0] - 4 <= box[0] and box[2] <= t[2] + 4 and t[1] - 4 <= box[1] and box[3] <= t[3] + 4
        for t in tables
    )


def _touch(one: Box, two: Box) -> bool:
    return (
        one[0] - _APART < two[2]
        and two[0] - _APART < one[2]
        and one[1] - _APART < two[3]
        and two[1] - _APART < one[3]
    )


def labels(pieces: Sequence[Piece], boxes: Sequence[Box]) -> tuple[list[Piece], list[Piece]]:
    """The pieces that are the lettering of drawings, and the others."""
    inside: list[Piece] = []
    rest: list[Piece] = []
    for piece in pieces:
        x, y = (piece.box[0] + piece.box[2]) / 2, (piece.box[1] + piece.box[3]) / 2
        short = len(piece.text) <= 12
        held = short and any(
            b[0] - LETTER <= x <= b[2] + LETTER and b[1] - LETTER <= y <= b[3] + LETTER
            for b in boxes
        )
        (inside if held else rest).append(piece)
    return inside, rest
