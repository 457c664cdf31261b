"""Word and Excel files whose bytes depend on their content alone: fixed dates, nothing compressed."""

from __future__ import annotations

import io
import re
import zipfile
from collections.abc import Iterable, Mapping, Sequence
from datetime import datetime
from xml.sax.saxutils import escape

from openpyxl import Workbook
from openpyxl.styles import Alignment, Font

_WHEN = datetime(2024, 1, 1)
_W = 'xmlns:w="http://schemas.openxmlformats.org/wordprocessingml/2006/main"'
_HEAD = '<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n'
_OFFICE = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
_PACKAGE = "http://schemas.openxmlformats.org/package/2006"
_TYPES = "application/vnd.openxmlformats-officedocument.wordprocessingml"
_PARTS = {
    "[Content_Types].xml": (
        f'{_HEAD}<Types xmlns="{_PACKAGE}/content-types"><Default Extension="rels" '
        'ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
        f'<Override PartName="/word/document.xml" ContentType="{_TYPES}.document.main+xml"/>'
        f'<Override PartName="/word/styles.xml" ContentType="{_TYPES}.styles+xml"/></Types>'
    ),
    "_rels/.rels": (
        f'{_HEAD}<Relationships xmlns="{_PACKAGE}/relationships"><Relationship Id="rId1" '
        f'Type="{_OFFICE}/officeDocument" Target="word/document.xml"/></Relationships>'
    ),
    "word/_rels/document.xml.rels": (
        f'{_HEAD}<Relationships xmlns="{_PACKAGE}/relationships"><Relationship Id="rId1" '
        f'Type="{_OFFICE}/styles" Target="styles.xml"/></Relationships>'
    ),
    "word/styles.xml": (
        f"{_HEAD}<w:styles {_W}>"
        '<w:style w:type="paragraph" w:default="1" w:styleId="Normal"><w:name w:val="Normal"/>'
        "</w:style>"
        + "".join(
            f'<w:style w:type="paragraph" w:styleId="Heading{n}"><w:name w:val="heading {n}"/>'
            f'<w:basedOn w:val="Normal"/><w:pPr><w:outlineLvl w:val="{n - 1}"/></w:pPr>'
            "<w:rPr><w:b/></w:rPr></w:style>"
            for n in (1, 2)
        )
        + "</w:styles>"
    ),
}


def heading(text: str, level: int = 1) -> str:
    """A heading paragraph."""
    return f'<w:p><w:pPr><w:pStyle w:val="Heading{level}"/></w:pPr>{_run(text)}</w:p>'


def paragraph(text: str) -> str:
    """A paragraph set as a chemist's word processor leaves it: descriptors and N-locants in
    italics, each in a run of its own, and U+2011 as the no-break hyphen element."""
    pieces = re.split(r"((?<=\d)[RSEZ](?=[,)])|(?<![A-Za-z])N(?=-))", text)
    return f"<w:p>{''.join(_run(piece, italic=n % 2 == 1) for n, piece in enumerate(pieces))}</w:p>"


def formula_paragraph(text: str) -> str:
    """A paragraph with the digits of its formula as subscripts."""
    pieces = re.split(r"((?<=[A-Z])\d+)", text)
    return f"<w:p>{''.join(_run(piece, sub=n % 2 == 1) for n, piece in enumerate(pieces))}</w:p>"


def table(rows: Iterable[Sequence[str]]) -> str:
    """A table; the cells are ready paragraphs."""
    body = "".join(
        f"<w:tr>{''.join(f'<w:tc><w:tcPr/>{cell}</w:tc>' for cell in row)}</w:tr>" for row in rows
    )
    return f"<w:tbl><w:tblPr/><w:tblGrid/>{body}</w:tbl>"


def document(blocks: Iterable[str]) -> bytes:
    """A .docx file of the blocks given."""
    body = f"{_HEAD}<w:document {_W}><w:body>{''.join(blocks)}<w:sectPr/></w:body></w:document>"
    return _archive({**_PARTS, "word/document.xml": body})


def workbook(
    title: str, rows: Sequence[Sequence[str]], merged: Sequence[str], widths: Mapping[str, int]
) -> bytes:
    """An .xlsx file of one sheet, the first row being the heading."""
    book = Workbook()
    book.properties.creator = "Brindlequay Therapeutics (invented)"
    book.properties.created = book.properties.modified = _WHEN
    sheet = book.worksheets[0]
    sheet.title = title
    for row in rows:
        sheet.append([cell or None for cell in row])
    for cells in sheet.iter_rows():
        for cell in cells:
            cell.alignment = Alignment(wrap_text=True, vertical="top")
    for cell in sheet[1]:
        cell.font = Font(bold=True)
    for reach in merged:
        sheet.merge_cells(reach)
    for column, width in widths.items():
        sheet.column_dimensions[column].width = width
    buffer = io.BytesIO()
    book.save(buffer)
    with zipfile.ZipFile(buffer) as archive:
        parts = {name: archive.read(name).decode("utf-8") for name in archive.namelist()}
    # the writer stamps the moment of saving over the date given
    core = "docProps/core.xml"
    parts[core] = re.sub(r"\d{4}-\d\d-\d\dT\d\d:\d\d:\d\dZ", "2024-01-01T00:00:00Z", parts[core])
    return _archive(parts)


def _run(text: str, *, italic: bool = False, sub: bool = False) -> str:
    if not text:
        return ""
    marks = ("<w:i/>" if italic else "") + ('<w:vertAlign w:val="subscript"/>' if sub else "")
    content = "<w:noBreakHyphen/>".join(
        f'<w:t xml:space="preserve">{escape(piece)}</w:t>' if piece else ""
        for piece in text.split("\u2011")
    )
    return f"<w:r>{f'<w:rPr>{marks}</w:rPr>' if marks else ''}{content}</w:r>"


def _archive(parts: Mapping[str, str]) -> bytes:
    buffer = io.BytesIO()
    with zipfile.ZipFile(buffer, "w", zipfile.ZIP_STORED) as archive:
        for name, text in parts.items():
            entry = zipfile.ZipInfo(name, (1980, 1, 1, 0, 0, 0))
            entry.create_system = 3
            archive.writestr(entry, text.encode("utf-8"))
    return buffer.getvalue()
