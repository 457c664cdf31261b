"""The process that opens a PDF: one document in, its pages out one by one, over pipes.

Only this process loads the PDF library, so that a file which crashes it, hangs it or makes it
ask for too much memory ends a child and not the review. Run as
`python -m dossiercheck.readers.pdfserver FIRST_PAGE MEMORY`, the document on standard input; the
answers on standard output are `marshal` objects, each after its length in eight bytes.
"""

from __future__ import annotations

import gc
import marshal
import sys
from contextlib import suppress
from ctypes import byref
from itertools import islice
from typing import Any, BinaryIO

import pypdfium2 as pypdfium
import pypdfium2.raw as pdfium

from dossiercheck.readers.pdfchars import Piece as Raw
from dossiercheck.readers.pdfchars import page_text
from dossiercheck.readers.pdfpage import PdfPage, Piece, View, pack
from dossiercheck.readers.pdfshapes import page_shapes

_BOOKMARKS = 20_000
# Annotations that add no words to a page: links, form fields are named apart, pop-ups repeat.
_SILENT = {pdfium.FPDF_ANNOT_LINK, pdfium.FPDF_ANNOT_POPUP}


def main(first: int, memory: int) -> None:
    """Serve the pages from `first` (0-based) on; `memory` bytes at most, 0 for no bound."""
    if memory:
        with suppress(ImportError, ValueError, OSError):
            import resource

            resource.setrlimit(resource.RLIMIT_AS, (memory, memory))
    gc.disable()  # a short-lived process that makes no rings
    data = sys.stdin.buffer.read()
    out = sys.stdout.buffer
    try:
        document = pypdfium.PdfDocument(data)
    except pypdfium.PdfiumError as error:
        send(out, ("refused", *_why(error)))
        return
    count = len(document)
    send(out, ("opened", count, _bookmarks(document) if not first else [], _aside(document)))
    for index in range(first, count):
        send(out, ("page", index))
        send(out, _page(document, index))
    send(out, ("end",))


def send(out: BinaryIO, message: tuple[Any, ...]) -> None:
    """Write one message."""
    data = marshal.dumps(message)
    out.write(len(data).to_bytes(8, "little") + data)
    out.flush()


def _why(error: pypdfium.PdfiumError) -> tuple[str, str]:
    code = getattr(error, "err_code", None)
    if code == pdfium.FPDF_ERR_PASSWORD:
        return "encrypted", "The document is encrypted and asks for a password."
    if code == pdfium.FPDF_ERR_SECURITY:
        return "encrypted", "The document is encrypted in a way that is not supported."
    return "damaged", "The document does not open: its structure is damaged."


def _bookmarks(document: Any) -> list[tuple[int, str, int]]:
    """Level, title and page (0-based, -1 where it leads nowhere) of each bookmark."""
    found = []
    try:
        for mark in islice(document.get_toc(max_depth=12), _BOOKMARKS):
            target = mark.get_dest()
            index = target.get_index() if target else None
            found.append((mark.level, mark.get_title(), -1 if index is None else index))
    except (pypdfium.PdfiumError, RecursionError):
        return found
    return found


def _aside(document: Any) -> list[tuple[str, str]]:
    notes = []
    attached = pdfium.FPDFDoc_GetAttachmentCount(document.raw)
    if attached > 0:
        notes.append(("attachment", f"The document has {attached} files attached: not read."))
    if pdfium.FPDF_GetFormType(document.raw) in (
        pdfium.FORMTYPE_XFA_FULL,
        pdfium.FORMTYPE_XFA_FOREGROUND,
    ):
        notes.append(("dynamic-form", "The document is a dynamic form, which is not read."))
    return notes


def _page(document: Any, index: int) -> tuple[Any, ...]:
    page = pdfium.FPDF_LoadPage(document.raw, index)
    if not page:
        return "unread", "damaged-page", "The page does not load: it is damaged."
    textpage = pdfium.FPDFText_LoadPage(page)
    try:
        if not textpage:
            return "unread", "damaged-page", "The text of the page does not load."
        return "content", pack(_content(page, textpage, index))
    finally:
        if textpage:
            pdfium.FPDFText_ClosePage(textpage)
        pdfium.FPDF_ClosePage(page)


def _content(page: Any, textpage: Any, index: int) -> PdfPage:
    shapes = page_shapes(page)
    text = page_text(textpage, shapes.hidden > 0)
    rect = pdfium.FS_RECTF()
    pdfium.FPDF_GetPageBoundingBox(page, byref(rect))
    upright = max(range(4), key=lambda turn: (text.turned[turn], -turn))
    turns = pdfium.FPDFPage_GetRotation(page)
    view = View((rect.left, rect.bottom, rect.right, rect.top), turns)
    if turns != upright and text.turned[upright]:
        # Most of the page reads sideways: it is turned as a reader would turn the sheet.
        view = View(view.box, upright % 4)
    width, height = view.size
    shown = view.shown
    return PdfPage(
        number=index + 1,
        width=width,
        height=height,
        pieces=[_seen(piece, view) for piece, turn in text.pieces if turn == upright],
        aside=[_seen(piece, view) for piece, turn in text.pieces if turn != upright],
        unmapped=[_seen(piece, view) for piece, _ in text.unmapped],
        hidden=[_seen(piece, view) for piece, _ in text.hidden],
        rules=[shown(box) for box in shapes.rules],
        pictures=[shown(box) for box in shapes.pictures],
        strokes=[shown(box) for box in shapes.strokes],
        notes=_notes(page, shapes.objects),
    )


def _seen(raw: Raw, view: View) -> Piece:
    text, box, size, known = raw
    if known and (view.turns or view.box[0]):
        if view.turns:
            known = ()
        else:
            left = view.box[0]
            known = tuple((start, end, x0 - left, x1 - left) for start, end, x0, x1 in known)
    return Piece(text, view.shown(box), size, known)


def _notes(page: Any, objects: int) -> list[tuple[str, str]]:
    notes = []
    if objects == 0:
        notes.append(("blank-page", "The page shows nothing, or what it shows does not decode."))
    kinds: dict[str, int] = {}
    for number in range(min(pdfium.FPDFPage_GetAnnotCount(page), 5000)):
        annotation = pdfium.FPDFPage_GetAnnot(page, number)
        if not annotation:
            continue
        kind = pdfium.FPDFAnnot_GetSubtype(annotation)
        pdfium.FPDFPage_CloseAnnot(annotation)
        if kind not in _SILENT:
            name = "form-field" if kind == pdfium.FPDF_ANNOT_WIDGET else "annotation"
            kinds[name] = kinds.get(name, 0) + 1
    for name, count in kinds.items():
        what = "form fields" if name == "form-field" else "annotations (notes, stamps, marks)"
        notes.append((name, f"The page has {count} {what}, which are not read."))
    return notes


if __name__ == "__main__":
    main(int(sys.argv[1]), int(sys.argv[2]))
