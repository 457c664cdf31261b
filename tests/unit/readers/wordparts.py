"""Word documents made for tests: python-docx writes the package, XML is put in by hand."""

from __future__ import annotations

import io
import zipfile
from collections.abc import Callable, Mapping
from typing import Any

import docx

SPACE = "http://schemas.openxmlformats.org/"
W = f"{SPACE}wordprocessingml/2006/main"
R = f"{SPACE}officeDocument/2006/relationships"
NAMESPACES = (
    f'xmlns:w="{W}" xmlns:r="{R}" xmlns:v="urn:schemas-microsoft-com:vml"'
    ' xmlns:o="urn:schemas-microsoft-com:office:office"'
    f' xmlns:wp="{SPACE}drawingml/2006/wordprocessingDrawing" xmlns:a="{SPACE}drawingml/2006/main"'
    f' xmlns:pic="{SPACE}drawingml/2006/picture" xmlns:m="{SPACE}officeDocument/2006/math"'
    f' xmlns:mc="{SPACE}markup-compatibility/2006"'
    ' xmlns:wps="http://schemas.microsoft.com/office/word/2010/wordprocessingShape"'
)


def document(fill: Callable[[Any], None]) -> bytes:
    made = docx.Document()
    fill(made)
    stream = io.BytesIO()
    made.save(stream)
    return stream.getvalue()


def with_body(body: str, parts: Mapping[str, str] | None = None) -> bytes:
    """A document of that body; `parts` are further parts by kind ("comments", "numbering",
    "styles", "footnotes", …), each related to the document as "rId<kind>", and files by path."""
    package = {"document.xml": f"<w:document {NAMESPACES}><w:body>{body}</w:body></w:document>"}
    related = ""
    for kind, content in (parts or {}).items():
        if content.startswith("<Relationship"):
            related += content
        else:
            package[f"{kind}.xml"] = content.replace(">", f" {NAMESPACES}>", 1)
            related += f'<Relationship Id="rId{kind}" Type="{R}/{kind}" Target="{kind}.xml"/>'
    relations = '<Relationships xmlns="x">{}</Relationships>'
    stream = io.BytesIO()
    with zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as archive:
        archive.writestr("[Content_Types].xml", "<Types/>")
        main = f'<Relationship Id="a" Type="{R}/officeDocument" Target="word/document.xml"/>'
        archive.writestr("_rels/.rels", relations.format(main))
        archive.writestr("word/_rels/document.xml.rels", relations.format(related))
        for name, content in package.items():
            archive.writestr(f"word/{name}", content)
    return stream.getvalue()


def run(text: str, properties: str = "") -> str:
    return f'<w:r><w:rPr>{properties}</w:rPr><w:t xml:space="preserve">{text}</w:t></w:r>'


def paragraph(*inner: str, properties: str = "") -> str:
    return f"<w:p><w:pPr>{properties}</w:pPr>{''.join(inner)}</w:p>"


def put_in(*inner: str) -> str:
    return f'<w:ins w:id="1" w:author="x">{"".join(inner)}</w:ins>'


def taken_out(text: str) -> str:
    return f'<w:del w:id="2" w:author="x"><w:r><w:delText>{text}</w:delText></w:r></w:del>'


def table(*rows: str) -> str:
    return f"<w:tbl>{''.join(rows)}</w:tbl>"


def row(*cells: str, properties: str = "") -> str:
    body = "".join(
        cell if cell.startswith("<w:tc>") else f"<w:tc><w:p>{run(cell)}</w:p></w:tc>"
        for cell in cells
    )
    return f"<w:tr><w:trPr>{properties}</w:trPr>{body}</w:tr>"
