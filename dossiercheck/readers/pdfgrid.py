"""Ruled tables of a PDF page: from ruled lines to grids, and from grids to cells.

Lines that meet form a grid; where a line is missing between two of its fields these are one cell.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from itertools import pairwise

from dossiercheck.readers.pdfpage import Box, Piece

_NEAR = 3.0  # points within which two lines are one, or meet
_LEAST = 5.0  # points of the smallest row or column
_FIELDS = 20_000


@dataclass(frozen=True, slots=True)
class Bar:
    """A ruled line: at `at` across, from `start` to `end` along."""

    at: float
    start: float
    end: float


@dataclass(eq=False, slots=True)
class Grid:
    """`cells[row][column]` is the number of the cell that the field belongs to; `boxes` and
    `pieces` are by that number."""

    box: Box
    xs: list[float]
    ys: list[float]
    cells: list[list[int]]
    boxes: list[Box]
    pieces: list[list[Piece]] = field(default_factory=list)


def bars(rules: Iterable[Box]) -> tuple[list[Bar], list[Bar]]:
    """The level and the upright lines, pieces of one line put together."""
    level, upright = [], []
    for left, top, right, bottom in rules:
        if right - left >= bottom - top:
            level.append(Bar((top + bottom) / 2, left, right))
        else:
            upright.append(Bar((left + right) / 2, top, bottom))
    return _merged(level), _merged(upright)


def _merged(found: list[Bar]) -> list[Bar]:
    merged: list[Bar] = []
    for group in _clusters(found):
        at = sum(bar.at for bar in group) / len(group)
        group.sort(key=lambda bar: bar.start)
        start, end = group[0].start, group[0].end
        for bar in group[1:]:
            if bar.start <= end + _NEAR:
                end = max(end, bar.end)
            else:
                merged.append(Bar(at, start, end))
                start, end = bar.start, bar.end
        merged.append(Bar(at, start, end))
    return merged


def _clusters(found: list[Bar]) -> list[list[Bar]]:
    clusters: list[list[Bar]] = []
    for bar in sorted(found, key=lambda bar: bar.at):
        if clusters and bar.at - clusters[-1][0].at < _NEAR:
            clusters[-1].append(bar)
        else:
            clusters.append([bar])
    return clusters


def grids(rules: Sequence[Box], pieces: Sequence[Piece]) -> list[Grid]:
    """The grids that ruled lines form, from top to bottom: at least two rows or columns.

    Word processors draw the border of each cell by itself: where a drawn line is pieced together
    a cell ends, though no line may be drawn between it and the next. `pieces` tell in which rows
    text runs over such a place.
    """
    level, upright = bars(rules)
    if len(level) < 2 or not upright:
        return []
    found = []
    for lines in _meeting(level, upright):
        box = _around(*lines)
        inside = [rule for rule in rules if _within(rule, box)]
        if box and (grid := _grid(*lines, *_seams(inside), pieces)):
            found.append(grid)
    return sorted(found, key=lambda grid: (grid.box[1], grid.box[0]))


def _meeting(level: list[Bar], upright: list[Bar]) -> list[tuple[list[Bar], list[Bar]]]:
    """Lines grouped by whether they meet, directly or through others."""
    parent = list(range(len(level) + len(upright)))

    def root(one: int) -> int:
        while parent[one] != one:
            parent[one] = parent[parent[one]]
            one = parent[one]
        return one

    for j, bar in enumerate(upright):
        for i, line in enumerate(level):
            if (
                bar.start - _NEAR <= line.at <= bar.end + _NEAR
                and line.start - _NEAR <= bar.at <= line.end + _NEAR
            ):
                parent[root(i)] = root(len(level) + j)
    groups: dict[int, tuple[list[Bar], list[Bar]]] = {}
    for i, line in enumerate(level):
        groups.setdefault(root(i), ([], []))[0].append(line)
    for j, bar in enumerate(upright):
        groups.setdefault(root(len(level) + j), ([], []))[1].append(bar)
    return list(groups.values())


def _around(level: list[Bar], upright: list[Bar]) -> Box | None:
    if len(level) < 2 or not upright:
        return None
    (left, right), (top, bottom) = _ends(level), _ends(upright)
    xs, ys = [b.at for b in upright], [b.at for b in level]
    return min(left, *xs), min(top, *ys), max(right, *xs), max(bottom, *ys)


def _within(rule: Box, box: Box | None) -> bool:
    return (
        box is not None
        and box[0] - _NEAR <= rule[0]
        and rule[2] <= box[2] + _NEAR
        and box[1] - _NEAR <= rule[1]
        and rule[3] <= box[3] + _NEAR
    )


def _seams(rules: Sequence[Box]) -> tuple[list[float], list[float]]:
    """Where level and where upright lines are pieced together: places across, places down."""
    across: list[float] = []
    down: list[float] = []
    for rule in rules:
        if rule[2] - rule[0] >= rule[3] - rule[1]:
            across += (rule[0], rule[2])
        else:
            down += (rule[1], rule[3])
    return _repeated(across), _repeated(down)


def _repeated(places: list[float]) -> list[float]:
    """Places at which two pieces end at least twice."""
    counted: list[tuple[float, int]] = []
    for place in sorted(places):
        if counted and place - counted[-1][0] < 1.5:
            counted[-1] = (counted[-1][0], counted[-1][1] + 1)
        else:
            counted.append((place, 1))
    return [place for place, count in counted if count >= 4]


def _grid(
    level: list[Bar],
    upright: list[Bar],
    across: list[float],
    down: list[float],
    pieces: Sequence[Piece],
) -> Grid | None:
    drawn_xs = _positions([*(b.at for b in upright), *_ends(level)])
    drawn_ys = _positions([*(b.at for b in level), *_ends(upright)])
    xs, ys = (
        _positions(drawn_xs + _new(across, drawn_xs)),
        _positions(drawn_ys + _new(down, drawn_ys)),
    )
    rows, columns = len(ys) - 1, len(xs) - 1
    if rows * columns < 2 or rows * columns > _FIELDS:
        return None
    walls = _covered(upright, xs, ys)
    floors = _covered(level, ys, xs)
    for number, x in enumerate(xs):
        if x not in drawn_xs:
            walls[number] = [not _crossed(x, a, b, pieces) for a, b in pairwise(ys)]
    for number, y in enumerate(ys):
        if y not in drawn_ys:
            floors[number] = [True] * columns
    cells = [[-1] * columns for _ in range(rows)]
    boxes: list[Box] = []
    for row in range(rows):
        for column in range(columns):
            if cells[row][column] >= 0:
                continue
            right = column + 1
            while right < columns and not walls[right][row] and cells[row][right] < 0:
                right += 1
            below = row + 1
            while below < rows and not any(floors[below][c] for c in range(column, right)):
                below += 1
            for r in range(row, below):
                for c in range(column, right):
                    if cells[r][c] < 0:
                        cells[r][c] = len(boxes)
            boxes.append((xs[column], ys[row], xs[right], ys[below]))
    if len(boxes) < 2:
        return None
    box = (xs[0], ys[0], xs[-1], ys[-1])
    return Grid(box, xs, ys, cells, boxes, [[] for _ in boxes])


def _new(seams: list[float], drawn: list[float]) -> list[float]:
    return [at for at in seams if all(abs(at - other) > _LEAST for other in drawn)]


def _crossed(x: float, top: float, bottom: float, pieces: Sequence[Piece]) -> bool:
    return any(
        left < x - 3 and right > x + 3
        for p in pieces
        if top <= (p.box[1] + p.box[3]) / 2 <= bottom
        for left, right in ([(w[2], w[3]) for w in p.known] or [(p.box[0], p.box[2])])
    )


def _ends(found: list[Bar]) -> tuple[float, float]:
    return min(bar.start for bar in found), max(bar.end for bar in found)


def _positions(found: Iterable[float]) -> list[float]:
    positions: list[float] = []
    for at in sorted(found):
        if not positions or at - positions[-1] >= _LEAST:
            positions.append(at)
    return positions


def _covered(found: list[Bar], across: list[float], along: list[float]) -> list[list[bool]]:
    """For each position and each interval between its crossings, whether a line lies there."""
    covered = [[False] * (len(along) - 1) for _ in across]
    middles = [(a + b) / 2 for a, b in pairwise(along)]
    for bar in found:
        index = min(range(len(across)), key=lambda i: abs(across[i] - bar.at))
        if abs(across[index] - bar.at) > _LEAST:
            continue
        row = covered[index]
        for number, middle in enumerate(middles):
            if bar.start <= middle <= bar.end:
                row[number] = True
    return covered


def fill(grid: Grid, pieces: Iterable[Piece]) -> list[Piece]:
    """Put the pieces that lie in the grid into its cells; return the others."""
    left, top, right, bottom = grid.box
    others = []
    for piece in pieces:
        x0, y0, _, y1 = piece.box
        middle = (y0 + y1) / 2
        if not (top <= middle <= bottom and left - 2 <= x0 and x0 < right):
            others.append(piece)
            continue
        row = _index(grid.ys, middle)
        for part in _parts(grid, piece, row):
            column = _index(grid.xs, min(part.box[0] + 1, (part.box[0] + part.box[2]) / 2))
            grid.pieces[grid.cells[row][column]].append(part)
    return others


def _index(positions: list[float], at: float) -> int:
    for index in range(len(positions) - 2, 0, -1):
        if at >= positions[index]:
            return index
    return 0


def _parts(grid: Grid, piece: Piece, row: int) -> list[Piece]:
    """A piece cut at the walls that stand between its words."""
    x0, _, x1, _ = piece.box
    cells = grid.cells[row]
    walls = [
        x
        for number, x in enumerate(grid.xs[1:-1], 1)
        if x0 + 2 < x < x1 - 2 and cells[number - 1] != cells[number]
    ]
    if not walls or len(piece.known) < 2:
        return [piece]
    parts: list[list[tuple[int, int, float, float]]] = []
    before = -1
    for word in piece.known:
        wall = sum(x < (word[2] + word[3]) / 2 for x in walls)
        if wall != before:
            parts.append([])
            before = wall
        parts[-1].append(word)
    return [cut(piece, part) for part in parts]


def cut(piece: Piece, words: list[tuple[int, int, float, float]]) -> Piece:
    """The part of a piece from the first to the last of some of its words."""
    start, end = words[0][0], words[-1][1]
    box = (words[0][2], piece.box[1], words[-1][3], piece.box[3])
    known = tuple((a - start, b - start, x0, x1) for a, b, x0, x1 in words)
    return Piece(piece.text[start:end], box, piece.size, known)
