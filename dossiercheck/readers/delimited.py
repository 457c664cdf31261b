"""Delimited text: CSV, TSV and their semicolon and pipe variants.

Rows are numbered as a spreadsheet counts them: every row, blank ones too, a quoted cell of
several lines being one row. Quoting is read strictly (RFC 4180): a quote that is never closed
swallows all that follows, so from its row on nothing is taken.
"""

from __future__ import annotations

import csv
import io
from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass

from dossiercheck.limits import DEFAULT, Limits, decode, unify_line_ends
from dossiercheck.model import Cell, Item, Place, Source, Table, Unread
from dossiercheck.readers.content import guarded, whole
from dossiercheck.readers.grid import column_letter

SUFFIXES = frozenset({".csv", ".tsv", ".tab"})

_SAMPLE_ROWS = 200
_HEADING_ROWS = 5


@guarded("")
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield one `Table`, and an `Unread` for each row that does not fit it."""
    text, _ = decode(data)
    yield from read_text(source, unify_line_ends(text), DEFAULT)


def read_text(source: Source, text: str, limits: Limits) -> Iterator[Item]:
    """As `read`, from text with LF line ends and with budgets of the caller's choice."""
    shape = _shape(text, source.path.lower().endswith((".tsv", ".tab")))
    if shape is None:
        yield whole(source, "empty", "The file has no rows.")
        return
    if shape.width > limits.columns:
        yield whole(source, "column-budget", f"The file has {shape.width} columns.")
        return
    heading: list[str] = []
    names: list[str] = []
    kept: list[tuple[Cell, ...]] = []
    for number, row in _rows(source, text, shape.delimiter, limits):
        if isinstance(row, Unread):
            yield row
            continue
        if not any(cell.strip() for cell in row) or (number == 1 and row[0].startswith("sep=")):
            continue
        fitted = _fit(row, shape.width)
        before = number < shape.heading_row
        if fitted is None and before and len(row) < shape.width:
            fitted = row + [""] * (shape.width - len(row))
        if fitted is None:
            yield Unread(
                Place(source.path, row=number),
                "ragged-row",
                f"The row has {len(row)} cells where the table has {shape.width} columns.",
                shape.delimiter.join(row)[:2000],
            )
            continue
        if not before and not heading:
            heading = fitted
            names = _column_names(heading)
        letters = names or [column_letter(index) for index in range(shape.width)]
        kept.append(
            tuple(
                Cell(cell.strip(), Place(source.path, row=number, column=letters[index]))
                for index, cell in enumerate(fitted)
            )
        )
    if kept:
        yield Table(tuple(kept), Place(source.path))


def _rows(
    source: Source, text: str, delimiter: str, limits: Limits
) -> Iterator[tuple[int, list[str] | Unread]]:
    """Rows with their numbers; a row whose quoting is wrong as `Unread`."""
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=delimiter, strict=True)
    number = 0
    while True:
        number += 1
        line = reader.line_num + 1
        place = Place(source.path, row=number, line=line)
        try:
            row = next(reader)
        except StopIteration:
            return
        except csv.Error as error:
            spans_lines = reader.line_num > line
            if "unexpected end of data" in str(error) or spans_lines:
                detail = "A quote opened in this row is not closed; nothing from here on was read."
                yield number, Unread(place, "unclosed-quote", detail)
                return
            yield number, Unread(place, "quoting", f"The row is not properly quoted: {error}.")
            continue
        if number > limits.rows:
            detail = f"Only the first {limits.rows} rows were read."
            yield number, Unread(place, "row-budget", detail)
            return
        if any("\n" in cell and _swallowed(cell, delimiter, len(row)) for cell in row):
            detail = "A quote seems to have swallowed whole rows; nothing from here on was read."
            yield number, Unread(place, "unclosed-quote", detail)
            return
        yield number, row


def _swallowed(cell: str, delimiter: str, width: int) -> bool:
    """True when a line inside the cell is itself laid out like a row of the table."""
    return width > 1 and any(line.count(delimiter) >= width - 1 for line in cell.split("\n")[1:])


def _fit(row: list[str], width: int) -> list[str] | None:
    while len(row) > width and not row[-1].strip():
        row = row[:-1]
    return row if len(row) == width else None


def _column_names(heading: list[str]) -> list[str]:
    """What to call each column: its heading, or its letter where that is empty or repeated."""
    counts = Counter(cell.strip() for cell in heading)
    usable = all(len(cell) <= 80 and "\n" not in cell for cell in heading)
    return [
        cell.strip() if usable and cell.strip() and counts[cell.strip()] == 1 else column_letter(i)
        for i, cell in enumerate(heading)
    ]


@dataclass(frozen=True, slots=True)
class _Shape:
    """How a text is laid out: `heading_row` is the 1-based row that fixes the `width`."""

    delimiter: str
    width: int
    heading_row: int
    match: float
    score: float


def _shape(text: str, tabbed: bool) -> _Shape | None:
    """The layout that most rows agree on; None for a text without rows.

    The row that first has more than one cell fixes the width. Rows above it (a title) count
    against a layout a little, rows of another width a lot: commas inside chemical names vary
    from row to row, the true delimiter does not.
    """
    first = text.partition("\n")[0].strip().strip('"')
    if first.lower().startswith("sep=") and len(first) == 5:
        delimiters: tuple[str, ...] = (first[4],)
    else:
        delimiters = ("\t", ",", ";", "|") if tabbed else (",", ";", "\t", "|")
    shapes = [shape for mark in delimiters if (shape := _shape_with(text, mark))]
    wide = [shape for shape in shapes if shape.width > 1]
    if wide:
        best = max(wide, key=lambda shape: (round(shape.score, 2), shape.width))
        if best.score == best.match or best.match > 0.5:
            return best
    return _Shape(delimiters[0] if len(delimiters) == 1 else "\t", 1, 1, 1, 1) if shapes else None


def _shape_with(text: str, delimiter: str) -> _Shape | None:
    widths: list[tuple[int, int]] = []
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=delimiter, strict=False)
    broken = False
    for number in range(1, _SAMPLE_ROWS + 1):
        try:
            row = next(reader)
        except StopIteration:
            break
        except csv.Error:
            broken = True  # the strict reading reports it; the other rows decide the layout
            continue
        if any(cell.strip() for cell in row) and not (number == 1 and row[0][:4] == "sep="):
            widths.append((number, len(row)))
    if not widths:
        return _Shape(delimiter, 1, 1, 0, 0) if broken else None
    above = next((i for i, (_, width) in enumerate(widths[:_HEADING_ROWS]) if width > 1), None)
    if above is None:
        return _Shape(delimiter, 1, 1, 0, 0)
    heading_row, width = widths[above]
    match = sum(1 for _, other in widths[above:] if other == width) / (len(widths) - above)
    return _Shape(delimiter, width, heading_row, match, match * 0.9**above)
