"""Tables of a PDF page without ruled columns: rows whose cells stand under one another.

A page of two columns of text is told from a table by the content stream: that of a table goes
back up, or on to the right, for each row; that of a column runs to its foot first.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from dossiercheck.readers.pdfflow import on_one_line, union
from dossiercheck.readers.pdfpage import Box, Piece

_LINES = 12  # of one cell; what has more is a column of text


@dataclass(slots=True)
class Row:
    """Cells side by side, each the pieces of its lines."""

    cells: list[list[Piece]]

    @property
    def box(self) -> Box:
        """Left, top, right, bottom."""
        box = self.cells[0][0].box
        for cell in self.cells:
            for piece in cell:
                box = union(box, piece.box)
        return box


@dataclass(slots=True)
class Aligned:
    """`columns` are the breadths (left, right); `rows[row][column]` the pieces of a cell."""

    columns: list[tuple[float, float]]
    rows: list[list[list[Piece]]] = field(default_factory=list)
    box: Box = (0.0, 0.0, 0.0, 0.0)


def aligned(pieces: Sequence[Piece]) -> tuple[list[Aligned], list[Piece]]:
    """The tables among the pieces, and the pieces that are in none, in their order."""
    rows = _rows(pieces)
    tables: list[Aligned] = []
    rest: list[Piece] = []
    at = 0
    while at < len(rows):
        end = _run(rows, at) if len(rows[at].cells) > 1 else at
        table = _table(rows[at:end]) if end - at > 1 else None
        if table:
            tables.append(table)
            at = end
        else:
            rest += [piece for cell in rows[at].cells for piece in cell]
            at += 1
    return tables, rest


def _rows(pieces: Sequence[Piece]) -> list[Row]:
    rows: list[Row] = []
    for piece in pieces:
        if rows and _is_beside(rows[-1], piece):
            if len(rows[-1].cells) == 1 and len(rows[-1].cells[0]) > 1:
                rows += _without_lead(rows.pop(), piece)
            rows[-1].cells.append([piece])
        elif rows and _is_below(rows[-1].cells[-1][-1], piece):
            rows[-1].cells[-1].append(piece)
        else:
            rows.append(Row([[piece]]))
    return rows


def _is_beside(row: Row, piece: Piece) -> bool:
    """Right of the row's last cell and no higher or lower than the row."""
    cell = row.cells[-1]
    if len(cell) > _LINES:
        return False
    near = [line for line in cell if on_one_line(line, piece)]
    if near:
        return all(piece.box[0] > line.box[2] + 0.4 * piece.size for line in near)
    if len(row.cells) == 1:
        return False
    return piece.box[0] > max(line.box[2] for line in cell) and any(
        on_one_line(line, piece) for other in row.cells for line in other
    )


def _is_below(last: Piece, piece: Piece) -> bool:
    step = piece.box[3] - last.box[3]
    if not 0.3 * piece.size < step < 1.6 * max(last.size, piece.size):
        return False
    left = abs(piece.box[0] - last.box[0]) < 2.5
    middle = abs(piece.box[0] + piece.box[2] - last.box[0] - last.box[2]) < 3
    return left or middle or abs(piece.box[2] - last.box[2]) < 1.5


def _without_lead(row: Row, piece: Piece) -> list[Row]:
    """What stands above a row's first cell in line with it is no part of the row where the next
    cell begins level with the last line only."""
    lines = row.cells[0]
    if on_one_line(lines[-1], piece) and not on_one_line(lines[0], piece):
        return [Row([lines[:-1]]), Row([lines[-1:]])]
    return [row]


def _run(rows: list[Row], at: int) -> int:
    """The end of the rows from `at` on that may be one table."""
    end = at + 1
    breadths = [_breadth(cell) for cell in rows[at].cells]
    while end < len(rows):
        here, last = rows[end], rows[end - 1]
        size = here.cells[0][0].size
        gap = here.box[1] - last.box[3]
        if not -0.5 * size < gap < 2.5 * size:
            break
        if len(here.cells) == 1:
            left, right = _breadth(here.cells[0])
            inside = sum(left < b[1] and right > b[0] for b in breadths) == 1
            if not inside or len(here.cells[0]) > 3:
                break
        else:
            breadths = breadths if len(breadths) >= len(here.cells) else []
            breadths = breadths or [_breadth(cell) for cell in here.cells]
        end += 1
    while end > at and len(rows[end - 1].cells) == 1:
        end -= 1
    return end


def _breadth(cell: list[Piece]) -> tuple[float, float]:
    return min(piece.box[0] for piece in cell), max(piece.box[2] for piece in cell)


def _table(rows: list[Row]) -> Aligned | None:
    """The rows as a table when their cells fall into columns, each row's into different ones."""
    full = [row for row in rows if len(row.cells) > 1]
    if len(full) < 2:
        return None
    columns: list[tuple[float, float]] = []
    for left, right in sorted(_breadth(cell) for row in full for cell in row.cells):
        if columns and left < columns[-1][1]:
            columns[-1] = (columns[-1][0], max(columns[-1][1], right))
        else:
            columns.append((left, right))
    if len(columns) < 2:
        return None
    table = Aligned(columns, box=full[0].box)
    for row in rows:
        cells: list[list[Piece]] = [[] for _ in columns]
        for cell in row.cells:
            left, right = _breadth(cell)
            shared = [min(right, b) - max(left, a) for a, b in columns]
            index = max(range(len(columns)), key=lambda i: (shared[i], -i))
            if cells[index]:
                return None
            cells[index] = cell
        table.rows.append(cells)
        table.box = union(table.box, row.box)
    return table
