"""A Word table as a grid: spanned and merged cells repeated where they reach."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field, replace

from lxml import etree

from dossiercheck.limits import DEFAULT, Refused
from dossiercheck.model import Cell, Pending, Place, Table
from dossiercheck.readers.grid import column_letter, number_of
from dossiercheck.readers.package import attribute, child, local
from dossiercheck.readers.paragraph import ParagraphText, joined, shifted
from dossiercheck.readers.runs import Surroundings, gather_runs

_CONTAINERS = {"sdt", "sdtContent", "customXml", "ins", "moveTo"}
_REMOVED = "A tracked change takes this {} out: it is not there as the document reads now."


@dataclass(frozen=True, slots=True)
class Grid:
    """`table`, and what its cells hold beside text, each with its cell's place."""

    table: Table
    contents: tuple[tuple[Place, ParagraphText], ...]
    nested: tuple[etree._Element, ...]


@dataclass(slots=True)
class _Layout:
    around: Surroundings
    place: Place
    rows: list[tuple[Cell, ...]] = field(default_factory=list)
    contents: list[tuple[Place, ParagraphText]] = field(default_factory=list)
    nested: list[etree._Element] = field(default_factory=list)


def lay_out(
    node: etree._Element,
    place: Place,
    headings: tuple[str, ...],
    caption: str,
    around: Surroundings,
) -> Grid:
    """The grid of a `tbl` element. Rows and cells of tracked deletion are left out and listed.

    Raises `Refused` past the budget of cells.
    """
    made = _Layout(around, place)
    for row in _inner(node, "tr"):
        properties = child(row, "trPr")
        if properties is not None and child(properties, "del") is not None:
            where = replace(place, row=len(made.rows) + 1)
            made.contents.append((where, _gone(row, "row")))
            continue
        _row(row, properties, made)
        if len(made.rows[-1]) > DEFAULT.columns or len(made.rows) > DEFAULT.rows:
            raise Refused("cell-budget", "The table has more cells than are read.")
    width = max((len(row) for row in made.rows), default=0)
    if width * len(made.rows) > DEFAULT.cells:
        raise Refused("cell-budget", "The table has more cells than are read.")
    padded = tuple(_pad(row, width, replace(place, row=n)) for n, row in enumerate(made.rows, 1))
    return Grid(Table(padded, place, headings, caption), tuple(made.contents), tuple(made.nested))


def _row(row: etree._Element, properties: etree._Element | None, made: _Layout) -> None:
    place = replace(made.place, row=len(made.rows) + 1)
    above = made.rows[-1] if made.rows else ()
    put_in = properties is not None and child(properties, "ins") is not None
    cells: list[Cell] = []
    cells += _skipped(properties, "gridBefore", place, 0)
    for tc in _inner(row, "tc"):
        own = child(tc, "tcPr")
        index = len(cells)
        where = replace(place, column=column_letter(index))
        if own is not None and child(own, "cellDel") is not None:
            made.contents.append((where, _gone(tc, "cell")))
            continue
        span, merged, leftwards = _spans(own)
        paragraphs = joined(gather_runs(p, made.around) for p in _inner(tc, "p"))
        made.contents += [(where, p) for p in paragraphs if p.unread or p.boxes]
        made.nested += _inner(tc, "tbl")
        cell = _cell(paragraphs, where)
        if put_in or (own is not None and child(own, "cellIns") is not None):
            cell = replace(cell, pending=(Pending(0, len(cell.text)),))
        if merged and index < len(above):
            cell = above[index]
        elif leftwards and cells:
            cell = cells[-1]
        cells += [cell] * span
    made.rows.append(tuple(cells))


def _cell(paragraphs: list[ParagraphText], place: Place) -> Cell:
    """The paragraphs as lines of one text, the changes where they stand in it."""
    text = ""
    pending: list[Pending] = []
    for paragraph in paragraphs:
        begin = len(text) + 1 if text else 0
        pending += shifted(paragraph.pending, begin)
        if paragraph.text.strip():
            text = f"{text}\n{paragraph.text}" if text else paragraph.text
    lead = len(text) - len(text.lstrip())
    text = text.strip()
    kept = (
        replace(one, start=min(max(one.start, 0), len(text)), end=min(max(one.end, 0), len(text)))
        for one in shifted(pending, -lead)
    )
    return Cell(text, place, tuple(kept))


def _gone(node: etree._Element, what: str) -> ParagraphText:
    text = " ".join(one.text or "" for one in node.iter() if local(one) in ("t", "delText"))
    unread = [("pending-deletion", _REMOVED.format(what), text)] if text.strip() else []
    return ParagraphText(unread=unread)


def _inner(node: etree._Element, wanted: str) -> Iterator[etree._Element]:
    """Children of that name, also inside content controls and insertions."""
    for inner in node:
        name = local(inner)
        if name == wanted:
            yield inner
        elif name in _CONTAINERS:
            yield from _inner(inner, wanted)


def _spans(properties: etree._Element | None) -> tuple[int, bool, bool]:
    """Columns the cell spans, and whether it continues the cell above or the one to its left."""
    if properties is None:
        return 1, False, False
    span = child(properties, "gridSpan")
    columns = attribute(span, "val") if span is not None else ""
    count = min(max(number_of(columns, 1), 1), 200)
    return count, _continues(properties, "vMerge"), _continues(properties, "hMerge")


def _continues(properties: etree._Element, name: str) -> bool:
    merge = child(properties, name)
    return merge is not None and attribute(merge, "val", "continue") != "restart"


def _skipped(properties: etree._Element | None, name: str, place: Place, index: int) -> list[Cell]:
    node = child(properties, name) if properties is not None else None
    value = attribute(node, "val") if node is not None else ""
    count = min(number_of(value, 0), 200)
    return [Cell("", replace(place, column=column_letter(index + n))) for n in range(count)]


def _pad(row: tuple[Cell, ...], width: int, place: Place) -> tuple[Cell, ...]:
    missing = range(len(row), width)
    return row + tuple(Cell("", replace(place, column=column_letter(n))) for n in missing)
