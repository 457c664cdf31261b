"""Plane geometry of a structure drawing: clipping bonds at labels, free space for a mark."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from math import cos, hypot, pi, sin

from dossiercheck.report.labels import Box, Point

Segment = tuple[Point, Point]

_PAD = 1.8


def leave(start: Point, towards: Point, boxes: Iterable[Box], pad: float = _PAD) -> float:
    """The fraction of the way from `start` at which a line is clear of the boxes around it."""
    spans = sorted(
        span for box in boxes if (span := _crossing(start, towards, _grown(box, pad))) is not None
    )
    reached = 0.0
    for low, high in spans:
        # A box further along the line than where we already are belongs to another atom.
        if low <= reached + 0.02:
            reached = max(reached, high)
    return min(reached, 1.0)


def free_place(around: Box, size: Point, boxes: Sequence[Box], segments: Sequence[Segment]) -> Box:
    """A box of the given size near another, where it covers least of boxes and segments.

    The nearest of the best places wins; equal ones are taken in a fixed order, so the same
    drawing gives the same place.
    """
    width, height = size
    centre = middle(around)
    clear = (around[2] - centre[0], around[3] - centre[1])
    best: tuple[float, Box] | None = None
    for gap in (3.0, 10.0, 19.0, 30.0, 44.0, 62.0):
        for step in range(24):
            # Starting at upper right, going round anticlockwise, as a hand would try it.
            angle = pi / 4 + step * pi / 12
            reach_x = clear[0] + gap + width / 2
            reach_y = clear[1] + gap + height / 2
            x = centre[0] + reach_x * cos(angle)
            y = centre[1] - reach_y * sin(angle)
            box = (x - width / 2, y - height / 2, x + width / 2, y + height / 2)
            cost = round(gap * 0.4 + _covered(box, boxes, segments), 3)
            if best is None or cost < best[0]:
                best = (cost, box)
        if best is not None and best[0] <= gap * 0.4:
            break
    assert best is not None
    return best[1]


def middle(box: Box) -> Point:
    """The centre of a box."""
    return (box[0] + box[2]) / 2, (box[1] + box[3]) / 2


def apart(one: Point, other: Point) -> float:
    """The distance of two points."""
    return hypot(one[0] - other[0], one[1] - other[1])


def _covered(box: Box, boxes: Sequence[Box], segments: Sequence[Segment]) -> float:
    grown = _grown(box, 2.0)
    cost = 0.0
    for other in boxes:
        width = min(grown[2], other[2]) - max(grown[0], other[0])
        height = min(grown[3], other[3]) - max(grown[1], other[1])
        if width > 0 and height > 0:
            cost += 20 + width * height
    for start, end in segments:
        span = _crossing(start, end, grown)
        if span is not None and span[1] > span[0]:
            cost += 10 + apart(start, end) * (span[1] - span[0])
    return cost


def _grown(box: Box, pad: float) -> Box:
    return box[0] - pad, box[1] - pad, box[2] + pad, box[3] + pad


def _crossing(start: Point, end: Point, box: Box) -> tuple[float, float] | None:
    """The part of a segment inside a box, as fractions of its length (slab method)."""
    low, high = 0.0, 1.0
    for axis in (0, 1):
        step = end[axis] - start[axis]
        near, far = box[axis] - start[axis], box[axis + 2] - start[axis]
        if abs(step) < 1e-9:
            if near > 0 or far < 0:
                return None
            continue
        first, last = near / step, far / step
        if first > last:
            first, last = last, first
        low, high = max(low, first), min(high, last)
        if low > high:
            return None
    return low, high
