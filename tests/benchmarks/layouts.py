"""One and the same content laid out as PDF by engines that have nothing in common.

A page library (reportlab, which knows nothing of chemistry and breaks lines at spaces), another
one (fpdf2, which also breaks at soft hyphens), an HTML printer (Chromium) and a word processor
(LibreOffice, from DOCX). Two columns or one, 9 or 11 point, paragraphs, labelled fields and
ruled tables; hyphenation by pyphen's patterns as soft hyphens, or by the engine itself.
"""

from __future__ import annotations

import html
import shutil
import subprocess
import tempfile
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

FONT = Path("/usr/share/fonts/truetype/liberation/LiberationSerif-Regular.ttf")


@dataclass(frozen=True, slots=True)
class Content:
    """Paragraphs, labelled fields one below the other, and rows of a table with its headings."""

    paragraphs: tuple[str, ...]
    fields: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]


@dataclass(frozen=True, slots=True)
class Style:
    """How it is laid out."""

    columns: int
    size: float
    hyphenate: bool


@cache
def _patterns() -> Any:
    import pyphen

    return pyphen.Pyphen(lang="en_US")


def hyphenated(text: str) -> str:
    """Soft hyphens in the letters of every word where English patterns allow them."""
    words = []
    word = ""
    for character in text + " ":
        if character.isalpha() and character.isascii():
            word += character
            continue
        words.append(_patterns().inserted(word, "\u00ad") if len(word) > 5 else word)
        words.append(character)
        word = ""
    return "".join(words)[:-1]


def reportlab(content: Content, style: Style, path: Path) -> None:
    """A page library; its own hyphenation."""
    from reportlab.lib import colors
    from reportlab.lib.pagesizes import A4
    from reportlab.lib.styles import ParagraphStyle
    from reportlab.platypus import (
        BaseDocTemplate,
        Frame,
        PageTemplate,
        Paragraph,
        Spacer,
        Table,
        TableStyle,
    )

    base = ParagraphStyle(
        "base",
        fontName="Times-Roman",
        fontSize=style.size,
        leading=style.size * 1.25,
        alignment=4,
        hyphenationLang="en_US" if style.hyphenate else None,
        embeddedHyphenation=1,
        spaceAfter=style.size * 0.6,
    )
    plain = ParagraphStyle("plain", parent=base, alignment=0, hyphenationLang=None)
    width = (A4[0] - 120 - 20 * (style.columns - 1)) / style.columns
    frames = [
        Frame(60 + n * (width + 20), 60, width, A4[1] - 130, 0, 0, 0, 0)
        for n in range(style.columns)
    ]

    def running(canvas: Any, document: Any) -> None:
        canvas.setFont("Times-Roman", 8)
        canvas.drawString(60, A4[1] - 40, "Marlet Works · 3.2.S General")
        canvas.drawRightString(A4[0] - 60, 30, f"Page {document.page}")

    document = BaseDocTemplate(str(path), pagesize=A4)
    document.addPageTemplates([PageTemplate("all", frames, onPage=running)])
    story: list[Any] = [Paragraph(html.escape(text), base) for text in content.paragraphs]
    story += [Paragraph(html.escape(text), plain) for text in content.fields]
    story.append(Spacer(1, 8))
    cells = [[Paragraph(html.escape(text), plain) for text in row] for row in content.rows]
    grid = TableStyle(
        [("GRID", (0, 0), (-1, -1), 0.5, colors.black), ("VALIGN", (0, 0), (-1, -1), "TOP")]
    )
    story.append(Table(cells, [0.25 * width, 0.75 * width], repeatRows=1, style=grid))
    document.build(story)


def fpdf(content: Content, style: Style, path: Path) -> None:
    """Another page library, with an embedded font and soft hyphens in the text."""
    from fpdf import FPDF

    def set_(text: str) -> str:
        return hyphenated(text) if style.hyphenate else text

    document = FPDF(format="A4", unit="pt")
    document.set_auto_page_break(True, 60)
    document.set_margins(60, 60)
    document.add_page()
    document.add_font("serif", fname=str(FONT))
    document.set_font("serif", size=style.size)
    with document.text_columns(ncols=style.columns, gutter=20, text_align="J") as columns:
        for text in content.paragraphs:
            with columns.paragraph(bottom_margin=6) as paragraph:
                paragraph.write(set_(text))
    for text in content.fields:
        document.multi_cell(w=0, text=set_(text), align="L", new_x="LMARGIN", new_y="NEXT")
    document.ln(8)
    with document.table(
        col_widths=(25, 75), text_align="LEFT", width=330, first_row_as_headings=False
    ) as table:
        for row in content.rows:
            line = table.row()
            for text in row:
                line.cell(set_(text))
    document.output(str(path))


def chromium(content: Content, style: Style, path: Path) -> None:
    """An HTML printer; words too long for a table column are cut anywhere, as browsers do."""
    from playwright.sync_api import sync_playwright

    def set_(text: str) -> str:
        return html.escape(hyphenated(text) if style.hyphenate else text)

    rows = "".join("<tr>" + "".join(f"<td>{set_(t)}" for t in row) for row in content.rows)
    page = (
        f"<!doctype html><html lang=en><style>main{{font:{style.size}pt serif;columns:{style.columns};"
        "text-align:justify;column-gap:20pt} td{border:0.5pt solid;padding:2pt;text-align:left;"
        "overflow-wrap:anywhere} table{border-collapse:collapse;width:100%;table-layout:fixed}"
        "td:first-child{width:25%} div{text-align:left}</style>"
        + "<main>"
        + "".join(f"<p>{set_(text)}" for text in content.paragraphs)
        + "".join(f"<div>{set_(text)}</div>" for text in content.fields)
        + f"</main><br><table>{rows}</table>"
    )
    with sync_playwright() as driver:
        browser = driver.chromium.launch(
            executable_path=shutil.which("chromium"), args=["--no-sandbox"]
        )
        sheet = browser.new_page()
        sheet.set_content(page)
        sheet.pdf(
            path=str(path),
            format="A4",
            margin={"top": "80px", "bottom": "80px", "left": "80px", "right": "80px"},
        )
        browser.close()


def libreoffice(content: Content, style: Style, path: Path) -> None:
    """A word processor's export, from the DOCX that `docx` writes; its own hyphenation."""
    with tempfile.TemporaryDirectory() as folder:
        source = Path(folder) / (path.stem + ".docx")
        docx(content, style, source)
        subprocess.run(
            [
                "soffice",
                "--headless",
                f"-env:UserInstallation=file://{folder}/profile",
                "--convert-to",
                "pdf",
                "--outdir",
                folder,
                str(source),
            ],
            check=True,
            stdout=subprocess.DEVNULL,
            stderr=subprocess.DEVNULL,
            timeout=180,
        )
        shutil.copy(source.with_suffix(".pdf"), path)


def docx(content: Content, style: Style, path: Path) -> None:
    """The content as DOCX, with hyphenation on where asked for."""
    from docx import Document
    from docx.enum.text import WD_ALIGN_PARAGRAPH
    from docx.oxml import OxmlElement
    from docx.oxml.ns import qn
    from docx.shared import Pt

    document = Document()
    normal = document.styles["Normal"]
    normal.font.name, normal.font.size = "Liberation Serif", Pt(style.size)
    columns = document.sections[0]._sectPr.find(qn("w:cols"))
    columns.set(qn("w:num"), str(style.columns))
    if style.hyphenate:
        mark = OxmlElement("w:autoHyphenation")
        mark.set(qn("w:val"), "true")
        document.settings.element.insert(0, mark)
    document.sections[0].header.paragraphs[0].text = "Marlet Works · 3.2.S General"
    for text in content.paragraphs:
        paragraph = document.add_paragraph(text)
        paragraph.alignment = WD_ALIGN_PARAGRAPH.JUSTIFY
    for text in content.fields:
        document.add_paragraph(text).paragraph_format.space_after = Pt(0)
    table = document.add_table(len(content.rows), len(content.rows[0]), style="Table Grid")
    table.autofit = False
    width = (430 - 36 * (style.columns - 1)) / style.columns
    for row, texts in zip(table.rows, content.rows, strict=True):
        for cell, text, share in zip(row.cells, texts, (0.25, 0.75), strict=True):
            cell.text, cell.width = text, Pt(width * share)
    for column, share in zip(table.columns, (0.25, 0.75), strict=True):
        column.width = Pt(width * share)
    document.save(str(path))


Engine = Callable[[Content, Style, Path], None]


def engines() -> dict[str, Engine]:
    """Those that this machine has."""
    found: dict[str, Engine] = {"reportlab": reportlab, "fpdf2": fpdf}
    if shutil.which("chromium"):
        found["chromium"] = chromium
    if shutil.which("soffice"):
        found["libreoffice"] = libreoffice
    return found


def styles() -> Sequence[Style]:
    """The four that are measured."""
    return (
        Style(2, 9, True),
        Style(1, 11, True),
        Style(2, 11, False),
        Style(1, 9, False),
    )
