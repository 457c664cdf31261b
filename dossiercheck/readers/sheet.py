"""One worksheet's cells, merged ranges and budgets."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, replace

from lxml import etree

from dossiercheck.limits import Limits, iterate_xml
from dossiercheck.model import Cell, Item, Place, Table, Unread
from dossiercheck.readers.grid import column_index, column_letter, number_of
from dossiercheck.readers.numberformat import shown
from dossiercheck.readers.package import attribute, child, local
from dossiercheck.readers.symbolfont import UNKNOWN

_REFERENCE = re.compile(r"\$?([A-Z]{1,3})\$?(\d{1,7})")

Grid = dict[int, dict[int, Cell]]


@dataclass(frozen=True, slots=True)
class Style:
    """Number format codes by cell style, and the day from which dates count."""

    formats: list[str]
    epoch_1904: bool = False

    def code(self, style: str) -> str:
        """The format of a cell's style number as written, General where it has none."""
        number = number_of(style, 0)
        return self.formats[number] if number < len(self.formats) else "General"


@dataclass(frozen=True, slots=True)
class _Area:
    top: int
    left: int
    bottom: int
    right: int


def text_of(element: etree._Element) -> str:
    """The text of a string item: plain or in runs, without the phonetic guide."""
    parts = []
    for node in element:
        if local(node) == "t":
            parts.append(node.text or "")
        elif local(node) == "r":
            inner = child(node, "t")
            parts.append((inner.text or "") if inner is not None else "")
    text = re.sub(r"_x([0-9A-Fa-f]{4})_", lambda match: chr(int(match[1], 16)), "".join(parts))
    if not any("\ud800" <= c <= "\udfff" or c == "\0" for c in text):
        return text
    # Two halves make a character; one alone, or a NUL, is a character that nobody knows.
    paired = text.encode("utf-16-le", "surrogatepass").decode("utf-16-le", "replace")
    return paired.replace("\0", UNKNOWN)


def read_sheet(
    place: Place, data: bytes, strings: list[str], style: Style, limits: Limits
) -> Iterator[Item]:
    """Yield the sheet's `Table` (none for an empty sheet) and its unread cells.

    A row between two rows that hold something comes as one row of empty cells, however many
    rows are empty there. Raises `Refused` where the XML is refused.
    """
    grid: Grid = {}
    areas: list[_Area] = []
    unread: list[Unread] = []
    beyond = cells = row_number = 0
    full = False
    for element in iterate_xml(data, ("row", "mergeCell")):
        if local(element) == "mergeCell":
            area = _area(attribute(element, "ref"))
            if area and len(areas) < limits.cells:
                areas.append(area)
            continue
        if full:
            continue
        given = attribute(element, "r")
        row_number = number_of(given, row_number + 1)
        row: dict[int, Cell] = {}
        column = -1
        for node in element:
            if local(node) != "c":
                continue
            match = _REFERENCE.fullmatch(attribute(node, "r"))
            column = column_index(match[1]) if match else column + 1
            where = replace(place, row=row_number, column=column_letter(column))
            text = _value(node, where, strings, style, unread)
            if not text.strip():
                continue
            if column >= limits.columns:
                beyond += 1
                continue
            row[column] = Cell(text.strip(), where)
        cells += len(row)
        if row:
            grid[row_number] = row
        full = len(grid) >= limits.rows or cells >= limits.cells
    if full:
        detail = f"Only the rows down to {row_number} were read."
        unread.append(Unread(place, "row-budget", detail))
    if beyond:
        last = column_letter(limits.columns - 1)
        unread.append(
            Unread(place, "column-budget", f"{beyond} cells right of column {last} were not read.")
        )
    _spread(grid, areas)
    rows = tuple(_rows(place, grid))
    if rows:
        yield Table(rows, place)
    yield from unread


def _value(
    node: etree._Element, where: Place, strings: list[str], style: Style, unread: list[Unread]
) -> str:
    """The text a cell shows; what cannot be known goes to `unread`."""
    kind = attribute(node, "t", "n")
    if kind == "inlineStr":
        inline = child(node, "is")
        return text_of(inline) if inline is not None else ""
    value = child(node, "v")
    raw = (value.text or "") if value is not None else ""
    if not raw:
        formula = child(node, "f")
        if formula is not None and kind != "str":
            detail = "The cell holds a formula whose result is not stored in the file."
            unread.append(Unread(where, "formula-without-value", detail, formula.text or ""))
        return ""
    if kind == "s":
        index = number_of(raw, len(strings))
        if index < len(strings):
            return strings[index]
        unread.append(Unread(where, "missing-text", "The text of the cell is not in the file."))
        return ""
    if kind == "e":
        unread.append(Unread(where, "cell-error", f"The cell shows the error {raw}.", raw))
        return ""
    if kind == "b":
        return "TRUE" if raw == "1" else "FALSE"
    if kind == "n":
        return shown(raw, style.code(attribute(node, "s", "0")), epoch_1904=style.epoch_1904)
    return raw


def _area(reference: str) -> _Area | None:
    first, _, last = reference.partition(":")
    start, end = _REFERENCE.fullmatch(first), _REFERENCE.fullmatch(last)
    if not start or not end:
        return None
    return _Area(int(start[2]), column_index(start[1]), int(end[2]), column_index(end[1]))


def _spread(grid: Grid, areas: list[_Area]) -> None:
    """Repeat a merged cell where it reaches, inside the part of the sheet that is used."""
    width = max((column for row in grid.values() for column in row), default=-1) + 1
    used = sorted(grid)
    for area in areas:
        source = grid.get(area.top, {}).get(area.left)
        if source is None:
            continue
        for number in used:
            if not area.top <= number <= area.bottom:
                continue
            for column in range(area.left, min(area.right + 1, width)):
                grid[number].setdefault(column, source)


def _rows(place: Place, grid: Grid) -> Iterator[tuple[Cell, ...]]:
    width = max((column for row in grid.values() for column in row), default=-1) + 1
    previous = 0
    for number in sorted(grid):
        if previous and number > previous + 1:
            yield _row(place, number - 1, {}, width)
        yield _row(place, number, grid[number], width)
        previous = number


def _row(place: Place, number: int, row: dict[int, Cell], width: int) -> tuple[Cell, ...]:
    return tuple(
        row.get(column) or Cell("", replace(place, row=number, column=column_letter(column)))
        for column in range(width)
    )
