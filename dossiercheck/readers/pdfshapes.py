"""What a PDF page shows beside text: ruled lines, pictures and drawings."""

from __future__ import annotations

import ctypes
from ctypes import byref
from dataclasses import dataclass, field
from typing import Any

import pypdfium2.raw as pdfium

from dossiercheck.readers.pdfchars import HIDDEN

Box = tuple[float, float, float, float]
_THIN = 2.5  # points; what is thinner is a line
_SEGMENTS = 400  # of one path; a path of more is taken for a drawing without a closer look
_OBJECTS = 60_000  # of one page
_DEPTH = 6


@dataclass(slots=True)
class Shapes:
    """Boxes as (left, bottom, right, top) in the page's own space. `rules` are thin and upright or
    level; `strokes` are what drawings are made of; `hidden` counts text objects that the page does
    not show, `texts` all of them."""

    rules: list[Box] = field(default_factory=list)
    pictures: list[Box] = field(default_factory=list)
    strokes: list[Box] = field(default_factory=list)
    texts: int = 0
    hidden: int = 0
    objects: int = 0


def page_shapes(page: Any) -> Shapes:
    """The shapes of a page, given the library's handle of it."""
    found = Shapes()
    count = pdfium.FPDFPage_CountObjects(page)
    for index in range(min(count, _OBJECTS)):
        _object(pdfium.FPDFPage_GetObject(page, index), None, found, 0)
    found.objects = count
    return found


Matrix = tuple[float, float, float, float, float, float]


def _object(thing: Any, outer: Matrix | None, found: Shapes, depth: int) -> None:
    kind = pdfium.FPDFPageObj_GetType(thing)
    if kind == pdfium.FPDF_PAGEOBJ_TEXT:
        found.texts += 1
        mode = pdfium.FPDFTextObj_GetTextRenderMode(thing)
        found.hidden += mode in HIDDEN
    elif kind == pdfium.FPDF_PAGEOBJ_PATH:
        _path(thing, outer, found)
    elif kind in (pdfium.FPDF_PAGEOBJ_IMAGE, pdfium.FPDF_PAGEOBJ_SHADING):
        box = _bounds(thing, outer)
        if box and kind == pdfium.FPDF_PAGEOBJ_IMAGE:
            found.pictures.append(box)
    elif kind == pdfium.FPDF_PAGEOBJ_FORM and depth < _DEPTH:
        matrix = _times(_matrix(thing), outer)
        for index in range(min(pdfium.FPDFFormObj_CountObjects(thing), _OBJECTS)):
            found.objects += 1
            if found.objects > _OBJECTS:
                return
            _object(pdfium.FPDFFormObj_GetObject(thing, index), matrix, found, depth + 1)


def _matrix(thing: Any) -> Matrix:
    matrix = pdfium.FS_MATRIX()
    pdfium.FPDFPageObj_GetMatrix(thing, byref(matrix))
    return matrix.a, matrix.b, matrix.c, matrix.d, matrix.e, matrix.f


def _times(one: Matrix, two: Matrix | None) -> Matrix:
    if two is None:
        return one
    a, b, c, d, e, f = one
    p, q, r, s, t, u = two
    return (
        a * p + b * r,
        a * q + b * s,
        c * p + d * r,
        c * q + d * s,
        e * p + f * r + t,
        e * q + f * s + u,
    )


def _through(matrix: Matrix | None, points: list[tuple[float, float]]) -> Box:
    if matrix:
        a, b, c, d, e, f = matrix
        points = [(a * x + c * y + e, b * x + d * y + f) for x, y in points]
    xs, ys = [x for x, _ in points], [y for _, y in points]
    return min(xs), min(ys), max(xs), max(ys)


_EDGES = [ctypes.c_float() for _ in range(4)]
_BY = [byref(edge) for edge in _EDGES]


def _bounds(thing: Any, outer: Matrix | None) -> Box | None:
    if not pdfium.FPDFPageObj_GetBounds(thing, *_BY):
        return None
    left, bottom, right, top = (edge.value for edge in _EDGES)
    if outer is None:
        return left, bottom, right, top
    return _through(outer, [(left, bottom), (right, bottom), (left, top), (right, top)])


def _path(thing: Any, outer: Matrix | None, found: Shapes) -> None:
    box = _bounds(thing, outer)
    if box is None:
        return
    width, height = box[2] - box[0], box[3] - box[1]
    if (width <= _THIN and height > 3) or (height <= _THIN and width > 3):
        found.rules.append(box)
        return
    if width <= 3 and height <= 3:
        found.strokes.append(box)
        return
    count = pdfium.FPDFPath_CountSegments(thing)
    if not 0 < count <= _SEGMENTS:
        found.strokes.append(box)
        return
    edges = _straight(thing, _times(_matrix(thing), outer), count)
    if edges is None:
        found.strokes.append(box)
    else:
        found.rules += edges


def _straight(thing: Any, matrix: Matrix, count: int) -> list[Box] | None:
    """The edges of a path when all are level or upright, else None."""
    x, y = ctypes.c_float(), ctypes.c_float()
    to_x, to_y = byref(x), byref(y)
    edges: list[Box] = []
    here: tuple[float, float] | None = None
    begin: tuple[float, float] | None = None
    for index in range(count):
        segment = pdfium.FPDFPath_GetPathSegment(thing, index)
        kind = pdfium.FPDFPathSegment_GetType(segment)
        if kind == pdfium.FPDF_SEGMENT_BEZIERTO:
            return None
        pdfium.FPDFPathSegment_GetPoint(segment, to_x, to_y)
        there = (x.value, y.value)
        if kind == pdfium.FPDF_SEGMENT_MOVETO:
            begin = there
        elif here is not None:
            edges.append(_through(matrix, [here, there]))
        if pdfium.FPDFPathSegment_GetClose(segment) and begin is not None:
            edges.append(_through(matrix, [there, begin]))
        here = there
    if any(min(box[2] - box[0], box[3] - box[1]) > _THIN for box in edges):
        return None
    return [box for box in edges if max(box[2] - box[0], box[3] - box[1]) > 3]
