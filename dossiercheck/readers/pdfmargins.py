"""Running headers and footers of a PDF, pictures that every page repeats, and drawings."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence

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

Running = list[tuple[str, str, float]]


def edge_lines(page: PdfPage) -> Running:
    """What stands in the zones: zone, text with its digits made equal, distance from the edge."""
    return [line for piece in page.pieces if (line := _edge_line(page, piece))]


def _edge_line(page: PdfPage, piece: Piece) -> tuple[str, str, float] | None:
    _, top, _, bottom = piece.box
    depth = _ZONE * page.height
    if bottom < depth:
        zone, distance = "header", top
    elif top > page.height - depth:
        zone, distance = "footer", page.height - bottom
    else:
        return None
    return zone, re.sub(r"\d+|\bX+\b", "#", piece.text.casefold()).replace(" ", ""), distance


def running(
    page: PdfPage, near: Iterable[Running], grids: Sequence[Grid]
) -> tuple[list[tuple[str, Piece]], list[Piece]]:
    """The running lines of a page (zone, piece) and its other pieces. A line runs when a page near
    by has it at the same place; page numbers in the zones run always, captions and what stands in
    a table that leaves the zone never."""
    known: dict[tuple[str, str], list[float]] = {}
    for lines in near:
        for zone, text, distance in lines:
            known.setdefault((zone, text), []).append(distance)
    found: list[tuple[str, Piece]] = []
    rest: list[Piece] = []
    depth = 1.5 * _ZONE * page.height
    bodies = [g.box for g in grids if g.box[3] > depth and g.box[1] < page.height - depth]
    for piece in page.pieces:
        line = _edge_line(page, piece)
        if line and not _CAPTION.match(piece.text) and not _inside(piece.box, bodies):
            zone, text, distance = line
            again = any(abs(distance - other) < _SHIFT for other in known.get((zone, text), ()))
            if again or _PAGE_NUMBER.fullmatch(piece.text):
                found.append((zone, piece))
                continue
        rest.append(piece)
    return found, rest


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
