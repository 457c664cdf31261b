"""The strokes of one bond: lines, wedges, hashes, waves, crosses."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import hypot

from dossiercheck.model import DrawnBond
from dossiercheck.report.labels import Box, Point
from dossiercheck.report.space import leave

BOND = 28.0
_GAP = 4.2
_WEDGE = 3.3
_DASHED = ' stroke-dasharray="3 2.6"'


@dataclass(frozen=True, slots=True)
class Ends:
    """The two atoms of a bond on the drawing: where they are, what their labels cover, and what
    is bonded to them besides."""

    begin: Point
    end: Point
    begin_boxes: tuple[Box, ...]
    end_boxes: tuple[Box, ...]
    begin_others: tuple[Point, ...]
    end_others: tuple[Point, ...]


def number(value: float) -> str:
    """A coordinate with one decimal, never a negative zero."""
    text = f"{value:.1f}"
    return "0.0" if text == "-0.0" else text


def strokes(bond: DrawnBond, ends: Ends, ring: Sequence[Point] | None) -> list[str]:
    """The SVG elements of a bond; `ring` are the corners of the ring it is drawn into."""
    along = (ends.end[0] - ends.begin[0], ends.end[1] - ends.begin[1])
    length = hypot(*along)
    if length < 0.05:
        return []
    normal = (-along[1] / length, along[0] / length)
    if bond.style == "crossed" or (bond.style == "wavy" and bond.order == 2):
        half = (normal[0] * _GAP / 2, normal[1] * _GAP / 2)
        start, stop = _clipped(ends, (0.0, 0.0))
        return [
            _line(_moved(start, half, 1), _moved(stop, half, -1)),
            _line(_moved(start, half, -1), _moved(stop, half, 1)),
        ]
    if bond.order == 1 and bond.style in ("wedge", "hash", "wavy"):
        start, stop = _clipped(ends, (0.0, 0.0))
        return _SINGLE[bond.style](start, stop, normal)
    aromatic = bond.order == 4 or bond.style == "aromatic"
    if aromatic or bond.order == 2:
        return _double(ends, normal, ring, _DASHED if aromatic else "")
    if bond.order == 3:
        shift = (normal[0] * _GAP, normal[1] * _GAP)
        back = (-shift[0], -shift[1])
        return [_line(*_clipped(ends, one)) for one in ((0.0, 0.0), shift, back)]
    # Query and coordination bonds (orders 0 and from 5 in connection tables) are dashed.
    return [_line(*_clipped(ends, (0.0, 0.0)), "" if bond.order == 1 else _DASHED)]


def _double(ends: Ends, normal: Point, ring: Sequence[Point] | None, inner_style: str) -> list[str]:
    """A main line and a second one: inside the ring, or on the side with more substituents; both
    beside the axis where one end is terminal."""
    terminal = not ends.begin_others or not ends.end_others
    if ring is None and terminal:
        half = (normal[0] * _GAP / 2, normal[1] * _GAP / 2)
        back = (-half[0], -half[1])
        return [_line(*_clipped(ends, half)), _line(*_clipped(ends, back), inner_style)]
    towards = ring if ring is not None else (*ends.begin_others, *ends.end_others)
    tally = sum(_side(ends.begin, normal, one) for one in towards)
    sign = -1.0 if tally < 0 else 1.0
    shift = (normal[0] * _GAP * sign, normal[1] * _GAP * sign)
    begin, end = ends.begin, ends.end
    inset = 0.13 if not terminal else 0.0
    start = (begin[0] + (end[0] - begin[0]) * inset, begin[1] + (end[1] - begin[1]) * inset)
    stop = (end[0] - (end[0] - begin[0]) * inset, end[1] - (end[1] - begin[1]) * inset)
    inner = Ends(start, stop, ends.begin_boxes, ends.end_boxes, (), ())
    return [_line(*_clipped(ends, (0.0, 0.0))), _line(*_clipped(inner, shift), inner_style)]


def _side(origin: Point, normal: Point, point: Point) -> int:
    across = (point[0] - origin[0]) * normal[0] + (point[1] - origin[1]) * normal[1]
    return (across > 0.5) - (across < -0.5)


def _clipped(ends: Ends, shift: Point) -> tuple[Point, Point]:
    """Both ends of the line moved by `shift`, drawn back from the labels."""
    begin, end = _moved(ends.begin, shift, 1), _moved(ends.end, shift, 1)
    first = leave(begin, end, ends.begin_boxes)
    last = leave(end, begin, ends.end_boxes)
    if first + last > 0.9:
        # Labels that leave no room between them: a stub is better than a bond not shown.
        first, last = 0.45, 0.45
    step = (end[0] - begin[0], end[1] - begin[1])
    return (
        (begin[0] + step[0] * first, begin[1] + step[1] * first),
        (end[0] - step[0] * last, end[1] - step[1] * last),
    )


def _moved(point: Point, shift: Point, sign: int) -> Point:
    return point[0] + shift[0] * sign, point[1] + shift[1] * sign


def _line(start: Point, stop: Point, style: str = "") -> str:
    a, b = map(number, start)
    c, d = map(number, stop)
    return f'<path d="M{a} {b}L{c} {d}"{style}/>'


def _wedge(start: Point, stop: Point, normal: Point) -> list[str]:
    wide = (normal[0] * _WEDGE, normal[1] * _WEDGE)
    corners = (start, _moved(stop, wide, 1), _moved(stop, wide, -1))
    points = "L".join(f"{number(x)} {number(y)}" for x, y in corners)
    return [f'<path d="M{points}Z" fill="currentColor" stroke-width="0.8"/>']


def _hash(start: Point, stop: Point, normal: Point) -> list[str]:
    step = (stop[0] - start[0], stop[1] - start[1])
    count = max(4, round(hypot(*step) / 3.2))
    parts = []
    for index in range(count):
        part = (index + 0.35) / (count - 0.65)
        half = 0.5 + (_WEDGE - 0.5) * part
        at = (start[0] + step[0] * part, start[1] + step[1] * part)
        one, other = _moved(at, normal, 1), _moved(at, normal, -1)
        one = (at[0] + (one[0] - at[0]) * half, at[1] + (one[1] - at[1]) * half)
        other = (at[0] + (other[0] - at[0]) * half, at[1] + (other[1] - at[1]) * half)
        parts.append(f"M{number(one[0])} {number(one[1])}L{number(other[0])} {number(other[1])}")
    return [f'<path d="{"".join(parts)}" stroke-linecap="butt"/>']


def _wave(start: Point, stop: Point, normal: Point) -> list[str]:
    step = (stop[0] - start[0], stop[1] - start[1])
    count = max(4, 2 * round(hypot(*step) / 8))
    parts = [f"M{number(start[0])} {number(start[1])}"]
    for index in range(count):
        swing = 4.4 if index % 2 else -4.4
        half, whole = (index + 0.5) / count, (index + 1) / count
        x = start[0] + step[0] * half + normal[0] * swing
        y = start[1] + step[1] * half + normal[1] * swing
        end_x, end_y = start[0] + step[0] * whole, start[1] + step[1] * whole
        parts.append(f"Q{number(x)} {number(y)} {number(end_x)} {number(end_y)}")
    return [f'<path d="{"".join(parts)}"/>']


_SINGLE = {"wedge": _wedge, "hash": _hash, "wavy": _wave}
