"""Tables of a PDF as they are put together: grids or aligned rows, over pages where they go on."""

from __future__ import annotations

from dataclasses import dataclass, field

from dossiercheck.model import Cell, Place, Table
from dossiercheck.readers.grid import column_letter
from dossiercheck.readers.pdfaligned import Aligned
from dossiercheck.readers.pdfgrid import Grid
from dossiercheck.readers.pdfpage import Box
from dossiercheck.readers.pdfparagraphs import Paragraph, cell_paragraph

_PADDING = 12.0  # points; the most that is taken for the space between a cell's wall and its text


@dataclass(eq=False, slots=True)
class DraftCell:
    """One cell, on the page where it begins."""

    content: Paragraph
    box: Box
    page: int


@dataclass(eq=False, slots=True)
class Draft:
    """`rows[row][column]`; a merged cell is repeated. `edges` are the columns' left edges, `ruled`
    whether they are drawn; `bottom` where it ends on its last page."""

    rows: list[list[DraftCell]]
    box: Box
    page: int
    edges: list[float]
    ruled: bool
    caption: str = ""
    headings: tuple[str, ...] = ()
    section: str | None = None
    continued: bool = field(default=False)

    def table(self, source: str, number: int) -> Table:
        """The table, numbered in its document."""
        place = Place(
            source, section=self.section, table=number, page=self.page, box=rounded(self.box)
        )
        made: dict[int, Cell] = {}
        rows = []
        for r, row in enumerate(self.rows, 1):
            cells = []
            for c, draft in enumerate(row):
                if id(draft) not in made:
                    where = Place(
                        source,
                        section=self.section,
                        table=number,
                        row=r,
                        column=column_letter(c),
                        page=draft.page,
                        box=draft.box,
                    )
                    text = draft.content
                    made[id(draft)] = Cell(
                        text.text, where, (), tuple(text.breaks), tuple(text.stretches)
                    )
                cells.append(made[id(draft)])
            rows.append(tuple(cells))
        return Table(tuple(rows), place, self.headings, self.caption)

    def take(self, other: Draft) -> bool:
        """Go on with a table from the next page when that has the same columns; its heading row
        is left out where it repeats. False when it is another table."""
        if self.ruled != other.ruled or len(self.rows[0]) != len(other.rows[0]):
            return False
        if len(self.edges) != len(other.edges):
            return False
        shift = other.edges[0] - self.edges[0]  # it may go on in the next column of the page
        pairs = zip(self.edges, other.edges, strict=True)
        if any(abs(b - a - shift) > 4 for a, b in pairs):
            return False
        rows = other.rows
        heads = 0
        while heads < min(3, len(rows), len(self.rows)) and _same(self.rows[heads], rows[heads]):
            heads += 1
        rows = rows[heads:]
        if rows and self.rows and _is_rest(self.rows[-1], rows[0]):
            _join(self.rows[-1], rows[0])
            rows = rows[1:]
        self.rows += rows
        return True


def rounded(box: Box) -> Box:
    """The box to a tenth of a point."""
    return round(box[0], 1), round(box[1], 1), round(box[2], 1), round(box[3], 1)


def _same(one: list[DraftCell], two: list[DraftCell]) -> bool:
    texts = [cell.content.text.split() for cell in one]
    return any(texts) and texts == [cell.content.text.split() for cell in two]


def _is_rest(row: list[DraftCell], following: list[DraftCell]) -> bool:
    """Whether a row goes on with what the row above breaks off: its filled cells, and only they,
    stand under cells that could go on, and the first cell is not one of them."""
    filled = [i for i, cell in enumerate(following) if cell.content.text]
    if not filled or (0 in filled and len(following) > 1):
        return False
    return all(
        row[i].content.text and row[i].content.could_go_on(following[i].content) for i in filled
    )


def _join(row: list[DraftCell], following: list[DraftCell]) -> None:
    done: set[int] = set()
    for above, below in zip(row, following, strict=True):
        if below.content.text and id(below) not in done:
            done.add(id(below))
            above.content.extend(below.content)


def from_grid(grid: Grid, page: int) -> Draft | None:
    """A ruled table; None where it has no text."""
    if not any(grid.pieces):
        return None
    cells = []
    for number, box in enumerate(grid.boxes):
        pieces = grid.pieces[number]
        left = min((piece.box[0] for piece in pieces), default=box[0])
        reach = max((piece.box[2] for piece in pieces), default=box[2])
        padding = min(max(left - box[0], 0.0), _PADDING)
        limit = max(box[2] - padding, reach)
        cells.append(DraftCell(cell_paragraph(pieces, limit, page), rounded(box), page))
    rows = [[cells[number] for number in row] for row in grid.cells]
    rows = _without_empty(rows)
    _mend(rows)
    return Draft(rows, grid.box, page, grid.xs[:-1], True)


def from_aligned(found: Aligned, page: int) -> Draft:
    """A table whose columns are told by their alignment."""
    rows = []
    for row in found.rows:
        cells = []
        for pieces, (left, right) in zip(row, found.columns, strict=True):
            content = cell_paragraph(pieces, right, page)
            box = content.box if pieces else (left, 0.0, right, 0.0)
            cells.append(DraftCell(content, rounded(box), page))
        rows.append(cells)
    _mend(rows)
    edges = [left for left, _ in found.columns]
    return Draft(rows, found.box, page, edges, False)


def _without_empty(rows: list[list[DraftCell]]) -> list[list[DraftCell]]:
    kept = [row for row in rows if any(cell.content.text for cell in row)]
    wanted = [
        column for column in range(len(rows[0])) if any(row[column].content.text for row in kept)
    ]
    return [[row[column] for column in wanted] for row in kept]


def _mend(rows: list[list[DraftCell]]) -> None:
    """Put a row that is only the rest of one broken-off cell into the row above."""
    at = 1
    while at < len(rows):
        filled = [cell for cell in rows[at] if cell.content.text]
        above = rows[at - 1]
        if (
            len(filled) == 1
            and len(rows[at]) > 1
            and (index := rows[at].index(filled[0])) > 0
            and above[index].content.text
            and _breaks_off(above[index].content)
        ):
            above[index].content.extend(filled[0].content)
            del rows[at]
        else:
            at += 1


def _breaks_off(content: Paragraph) -> bool:
    text = content.text
    opened = sum(text.count(c) for c in "([{") > sum(text.count(c) for c in ")]}")
    return opened or text.endswith(("-", "‐", "‑", "\u00ad"))
