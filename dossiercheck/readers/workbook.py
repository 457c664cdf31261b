"""Spreadsheets: XLSX and XLSM, read from their parts (ECMA-376 part 1, clause 18).

Cells come as the sheet shows them, hidden sheets included. Only cells that are there cost
anything: a lone cell in the last row and column does not make a million rows.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from dossiercheck.limits import DEFAULT, Archive, Limits, Refused, iterate_xml, parse_xml
from dossiercheck.model import Item, Place, Source, Unread
from dossiercheck.readers.content import guarded
from dossiercheck.readers.grid import number_of
from dossiercheck.readers.numberformat import BUILT_IN
from dossiercheck.readers.package import (
    OLE,
    ZIP,
    Relation,
    attribute,
    child,
    legacy,
    local,
    main_part,
    open_package,
    relations,
)
from dossiercheck.readers.sheet import Style, read_sheet, text_of

SUFFIXES = frozenset({".xlsx", ".xlsm", ".xls"})


@dataclass(frozen=True, slots=True)
class _Sheet:
    name: str
    hidden: bool
    relation: Relation


@guarded(ZIP, OLE)
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield one `Table` a sheet, and `Unread` for what no text stands for."""
    yield from read_within(source, data, DEFAULT)


def read_within(source: Source, data: bytes, limits: Limits) -> Iterator[Item]:
    """As `read`, with budgets of the caller's choice; raises `Refused`."""
    old = legacy(source, data, "workbook")
    if old:
        yield old
        return
    archive = open_package(data, limits)
    part = main_part(archive, "workbook")
    root = parse_xml(archive.read(part))
    related = {relation.id: relation for relation in relations(archive, part)}
    kinds = {relation.kind: relation.target for relation in related.values()}
    strings = _strings(archive, kinds.get("sharedStrings", ""))
    properties = child(root, "workbookPr")
    epoch_1904 = properties is not None and attribute(properties, "date1904") in ("1", "true")
    style = Style(_formats(archive, kinds.get("styles", "")), epoch_1904)
    sheets = child(root, "sheets")
    for number, node in enumerate(sheets if sheets is not None else (), 1):
        hidden = attribute(node, "state", "visible") != "visible"
        name = attribute(node, "name") + (" (hidden)" if hidden else "")
        place = Place(source.path, sheet=name, table=number)
        relation = related.get(attribute(node, "id"))
        if relation is None or relation.external or relation.target not in archive:
            yield Unread(place, "missing-part", "The part of this sheet is not in the workbook.")
            continue
        if relation.kind != "worksheet":
            yield Unread(place, "chart-sheet", "The sheet is a chart or macro sheet.")
            continue
        try:
            yield from read_sheet(place, archive.read(relation.target), strings, style, limits)
            yield from _attached(archive, place, relation.target)
        except Refused as refused:
            yield Unread(place, refused.reason, refused.detail)


def _strings(archive: Archive, part: str) -> list[str]:
    if not part or part not in archive:
        return []
    return [text_of(node) for node in iterate_xml(archive.read(part), ("si",))]


def _formats(archive: Archive, part: str) -> list[str]:
    """The number format code of each cell style, in the order in which cells point to them."""
    if not part or part not in archive:
        return []
    root = parse_xml(archive.read(part))
    codes = dict(BUILT_IN)
    own = child(root, "numFmts")
    for node in own if own is not None else ():
        if local(node) == "numFmt":
            codes[number_of(attribute(node, "numFmtId", "0"), -1)] = attribute(node, "formatCode")
    styles = child(root, "cellXfs")
    return [
        codes.get(number_of(attribute(node, "numFmtId", "0"), -1), "General")
        for node in (styles if styles is not None else ())
    ]


_ATTACHED = {
    "image": ("picture", "The sheet holds a picture, which is not read."),
    "drawing": ("picture", "The sheet holds pictures, shapes or charts, which are not read."),
    "oleObject": ("drawing-object", "The sheet holds an embedded object, which is not read."),
    "package": ("drawing-object", "The sheet holds an embedded file, which is not read."),
    "comments": ("comment", "The sheet has comments, which are not read."),
    "threadedComment": ("comment", "The sheet has comments, which are not read."),
}


def _attached(archive: Archive, place: Place, part: str) -> Iterator[Unread]:
    """What lies on the sheet beside its cells, each kind once."""
    kinds = {relation.kind for relation in relations(archive, part)}
    for kind, (reason, detail) in _ATTACHED.items():
        if kind in kinds:
            yield Unread(place, reason, detail)
