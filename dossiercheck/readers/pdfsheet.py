"""One PDF page laid out: running lines apart, tables, paragraphs and drawings in reading order."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from dossiercheck.model import Place, Unread
from dossiercheck.readers import pdfmargins
from dossiercheck.readers.pdfaligned import aligned
from dossiercheck.readers.pdfflow import Block, blocks, in_order, numbered, set_limits
from dossiercheck.readers.pdfgrid import fill, grids
from dossiercheck.readers.pdfpage import Box, PdfPage, Piece
from dossiercheck.readers.pdfparagraphs import Paragraph, paragraphs
from dossiercheck.readers.pdftables import Draft, from_aligned, from_grid, rounded

_SMALL = 8.0  # points; a picture smaller than this is an ornament


@dataclass(frozen=True, slots=True)
class Sheet:
    """`things` are in reading order; a place in an `Unread` has page and box only."""

    number: int
    running: list[tuple[str, Piece]]
    pictures: list[Box]
    things: list[Paragraph | Draft | Unread]


@dataclass(frozen=True, slots=True)
class _Placed:
    """Something with its place on the page."""

    thing: Block | Draft | Unread
    box: Box


def lay_out(page: PdfPage, near: Iterable[pdfmargins.Running]) -> Sheet:
    """The page's contents; `near` are the edge lines of the pages around it."""
    found = grids(page.rules, page.pieces)
    running, pieces = pdfmargins.running(page, near, found)
    drawn = pdfmargins.drawings(page, [grid.box for grid in found])
    lettering, pieces = pdfmargins.labels(pieces, [box for box, _ in drawn])
    placed: list[_Placed] = []
    for grid in reversed(found):
        pieces = fill(grid, pieces)
        draft = from_grid(grid, page.number)
        if draft:
            placed.append(_Placed(draft, draft.box))
    loose, pieces = aligned(numbered(pieces))
    placed += [_Placed(from_aligned(table, page.number), table.box) for table in loose]
    flow = blocks(pieces)
    set_limits(flow, [one.box for one in placed], page.width)
    placed += [_Placed(block, block.box) for block in flow]
    for box, count in drawn:
        placed.append(_Placed(_drawing(page, box, count, lettering), box))
    pictures = [b for b in page.pictures if min(b[2] - b[0], b[3] - b[1]) > _SMALL]
    things: list[Paragraph | Draft | Unread] = []
    for index in in_order(placed):
        thing = placed[index].thing
        if isinstance(thing, Block):
            for paragraph in paragraphs(thing, page.number):
                last = things[-1] if things else None
                if (
                    isinstance(last, Paragraph)
                    and last.last not in thing.lines
                    and _next_column(last, paragraph)
                    and last.could_go_on(paragraph)
                ):
                    last.extend(paragraph)
                else:
                    things.append(paragraph)
        elif not (isinstance(thing, Draft) and _goes_on(things, thing)):
            things.append(thing)
    things += _aside(page)
    things += _unread(page, bool(things), pictures)
    return Sheet(page.number, running, pictures, things)


def _next_column(last: Paragraph, following: Paragraph) -> bool:
    """Whether a paragraph begins further up and to the right of the line before."""
    assert last.last is not None
    end = last.last.box
    return following.box[1] < end[1] and following.box[0] > end[0]


def _goes_on(things: list[Paragraph | Draft | Unread], table: Draft) -> bool:
    """Whether a table is the rest of the one before it, in the next column; then it is taken."""
    last = things[-1] if things else None
    if not isinstance(last, Draft):
        return False
    return table.box[0] >= last.box[2] and table.box[1] < last.box[3] and last.take(table)


def _drawing(page: PdfPage, box: Box, count: int, lettering: list[Piece]) -> Unread:
    near = pdfmargins.LETTER
    inside = [
        piece.text
        for piece in lettering
        if box[0] - near <= (piece.box[0] + piece.box[2]) / 2 <= box[2] + near
        and box[1] - near <= (piece.box[1] + piece.box[3]) / 2 <= box[3] + near
    ]
    detail = f"A drawing of {count} strokes, which is not read."
    return Unread(_at(page, box), "drawing", detail, " ".join(inside))


def _aside(page: PdfPage) -> list[Paragraph]:
    found = []
    for piece in page.aside:
        paragraph = Paragraph(limit=piece.box[2])
        paragraph.add(piece, page.number)
        found.append(paragraph)
    return found


def _is_off(page: PdfPage, box: Box) -> bool:
    return box[0] < -2 or box[1] < -4 or box[2] > page.width + 2 or box[3] > page.height + 4


def _at(page: PdfPage, box: Box | None = None) -> Place:
    return Place("", page=page.number, box=rounded(box) if box else None)


def _unread(page: PdfPage, has_text: bool, pictures: list[Box]) -> list[Unread]:
    found = [Unread(_at(page), reason, detail) for reason, detail in page.notes]
    if page.unmapped:
        count = sum(len(piece.text) for piece in page.unmapped)
        box = page.unmapped[0].box
        detail = (
            f"{count} characters in {len(page.unmapped)} lines of the page are of a font that "
            "does not say which letters they are."
        )
        found.append(Unread(_at(page, box), "unmapped-text", detail))
    if page.hidden:
        detail = "Text that the page does not show: under a picture, or left there unseen."
        text = "\n".join(piece.text for piece in page.hidden)[:2000]
        found.append(Unread(_at(page), "hidden-text", detail, text))
    off = [piece for piece in page.pieces if _is_off(page, piece.box)]
    if off:
        detail = "Text that runs over the edge of the page: what is not on it is not read."
        text = "\n".join(piece.text for piece in off)[:2000]
        found.append(Unread(_at(page, off[0].box), "off-page", detail, text))
    area = sum((b[2] - b[0]) * (b[3] - b[1]) for b in pictures)
    if not has_text and pictures and area > 0.3 * page.width * page.height:
        detail = "The page is a picture and has no text of its own: it is not read."
        found.append(Unread(_at(page), "picture-page", detail))
    return found
