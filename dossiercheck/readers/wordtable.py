"""A Word table as a grid: spanned and merged cells repeated where they reach."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace

from lxml import etree

from dossiercheck.model import Cell, Place, Table
from dossiercheck.readers.grid import column_letter
from dossiercheck.readers.package import attribute, child, local
from dossiercheck.readers.runs import ParagraphText, gather_runs

_CONTAINERS = {"sdt", "sdtContent", "customXml", "ins", "moveTo"}


@dataclass(frozen=True, slots=True)
class Grid:
    """`table`, and what its cells hold beside text, each with its cell's place."""

    table: Table
    contents: tuple[tuple[Place, ParagraphText], ...]
    nested: tuple[etree._Element, ...]


def lay_out(node: etree._Element, place: Place, headings: tuple[str, ...], caption: str) -> Grid:
    """The grid of a `tbl` element. Rows of tracked deletion are left out."""
    rows: list[tuple[Cell, ...]] = []
    contents: list[tuple[Place, ParagraphText]] = []
    nested: list[etree._Element] = []
    number = 0
    for row in _inner(node, "tr"):
        properties = child(row, "trPr")
        if properties is not None and child(properties, "del") is not None:
            continue
        number += 1
        above = rows[-1] if rows else ()
        cells: list[Cell] = []
        cells += _skipped(properties, "gridBefore", replace(place, row=number), 0)
        for tc in _inner(row, "tc"):
            span, merged = _spans(tc)
            index = len(cells)
            where = replace(place, row=number, column=column_letter(index))
            paragraphs = [gather_runs(p) for p in _inner(tc, "p")]
            cell = Cell("\n".join(p.text for p in paragraphs if p.text.strip()).strip(), where)
            contents += [(where, p) for p in paragraphs if p.unread or p.boxes]
            nested += _inner(tc, "tbl")
            if merged and index < len(above):
                cell = above[index]
            cells += [cell] * span
        rows.append(tuple(cells))
    width = max((len(row) for row in rows), default=0)
    padded = tuple(_pad(row, width, replace(place, row=n)) for n, row in enumerate(rows, 1))
    return Grid(Table(padded, place, headings, caption), tuple(contents), tuple(nested))


def _inner(node: etree._Element, wanted: str) -> Iterator[etree._Element]:
    """Children of that name, also inside content controls and insertions."""
    for inner in node:
        name = local(inner)
        if name == wanted:
            yield inner
        elif name in _CONTAINERS:
            yield from _inner(inner, wanted)


def _spans(tc: etree._Element) -> tuple[int, bool]:
    """Columns the cell spans, and whether it continues the cell above."""
    properties = child(tc, "tcPr")
    if properties is None:
        return 1, False
    span = child(properties, "gridSpan")
    merge = child(properties, "vMerge")
    columns = attribute(span, "val") if span is not None else ""
    continues = merge is not None and attribute(merge, "val", "continue") != "restart"
    return (min(max(int(columns), 1), 200) if columns.isdigit() else 1), continues


def _skipped(properties: etree._Element | None, name: str, place: Place, index: int) -> list[Cell]:
    node = child(properties, name) if properties is not None else None
    value = attribute(node, "val") if node is not None else ""
    count = min(int(value), 200) if value.isdigit() else 0
    return [Cell("", replace(place, column=column_letter(index + n))) for n in range(count)]


def _pad(row: tuple[Cell, ...], width: int, place: Place) -> tuple[Cell, ...]:
    missing = range(len(row), width)
    return row + tuple(Cell("", replace(place, column=column_letter(n))) for n in missing)
