"""Atom labels of a structure drawing: which atoms carry one, what it says, and where it stands.

Placement follows common practice: hydrogens go where no bond is, first to the right, then to the
left, then above or below; charges and isotopes are raised, counts lowered. Lengths are in pixels
of the drawing, y downwards.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import hypot

from dossiercheck.model import DrawnAtom
from dossiercheck.report.visible import one_line

FONT = 14.0
SMALL = 10.0

Point = tuple[float, float]
Box = tuple[float, float, float, float]

# Helvetica's advance widths in thousandths of the font size (Adobe Core 14 metrics, from memory);
# a reader's sans-serif face may differ by some percent, which the paddings allow for.
_NARROW = {"i": 222, "j": 222, "l": 222, "f": 278, "t": 278, "I": 278, " ": 278, ".": 278, ",": 278}
_MEDIUM = dict.fromkeys("()-[]r", 333) | dict.fromkeys("cksvxyzJ", 500) | dict.fromkeys("FTZ", 611)
_WIDE = dict.fromkeys("CDHNRUw", 722) | dict.fromkeys("GOQ", 778) | {"M": 833, "m": 833, "W": 944}
_MINUS = "\u2212"
_WIDTHS = _NARROW | _MEDIUM | _WIDE | {"→": 1000, "≠": 600, "+": 584, _MINUS: 584}
_DEFAULT = {True: 667, False: 556}
_LEADING_HYDROGEN = frozenset({"O", "S", "Se", "Te", "F", "Cl", "Br", "I"})


@dataclass(frozen=True, slots=True)
class Run:
    """A piece of text of one size; `x` is its left edge, `y` its baseline."""

    text: str
    x: float
    y: float
    size: float


@dataclass(frozen=True, slots=True)
class Label:
    """The runs of one atom's label and the boxes that bonds must keep out of."""

    runs: tuple[Run, ...]
    boxes: tuple[Box, ...]


def width_of(text: str, size: float) -> float:
    """An estimate of the advance width of the text in pixels."""
    units = sum(
        _WIDTHS.get(letter, 1000 if ord(letter) > 0x2E7F else _DEFAULT[letter.isupper()])
        for letter in text
    )
    return units * size / 1000


def label_of(atom: DrawnAtom, at: Point, neighbours: Sequence[Point]) -> Label | None:
    """The label of an atom, or None for a carbon that its bonds already show."""
    plain = atom.element == "C" and not atom.charge and not atom.isotope
    if plain and neighbours:
        return None
    x, y = at
    name = one_line(atom.element)[:12] or "?"
    half = width_of(name, FONT) / 2
    base = y + FONT * 0.36
    runs = [Run(name, x - half, base, FONT)]
    left, right = x - half, x + half
    if atom.isotope:
        text = str(atom.isotope)
        left -= width_of(text, SMALL)
        runs.append(Run(text, left, base - 5, SMALL))
    if atom.hydrogens > 0:
        side = _free_side(atom.element, at, neighbours)
        count = str(atom.hydrogens) if atom.hydrogens > 1 else ""
        length = width_of("H", FONT) + width_of(count, SMALL)
        if side == "right":
            start, line = right, base
            right += length
        elif side == "left":
            left -= length
            start, line = left, base
        else:
            start = x - width_of("H", FONT) / 2
            line = base + (FONT * 0.92 if side == "down" else -FONT * 0.92)
        runs.append(Run("H", start, line, FONT))
        if count:
            runs.append(Run(count, start + width_of("H", FONT), line + 3, SMALL))
    if atom.charge:
        text = _charge(atom.charge)
        runs.append(Run(text, right + 0.5, base - 5, SMALL))
    return Label(tuple(runs), tuple(_box(run) for run in runs))


def _box(run: Run) -> Box:
    """What a run covers: capital height above the baseline, a little below it."""
    width = width_of(run.text, run.size)
    return run.x, run.y - run.size * 0.74, run.x + width, run.y + run.size * 0.04


def _charge(charge: int) -> str:
    sign = "+" if charge > 0 else _MINUS
    return sign if abs(charge) == 1 else f"{abs(charge)}{sign}"


def _free_side(element: str, at: Point, neighbours: Sequence[Point]) -> str:
    """The side on which hydrogens cross no bond."""
    directions = []
    for x, y in neighbours:
        length = hypot(x - at[0], y - at[1])
        if length > 0:
            directions.append(((x - at[0]) / length, (y - at[1]) / length))
    if not directions:
        return "left" if element in _LEADING_HYDROGEN else "right"
    crowding = {
        "right": max(x for x, _ in directions),
        "left": max(-x for x, _ in directions),
        "down": max(y for _, y in directions),
        "up": max(-y for _, y in directions),
    }
    # 0.35: a bond that leaves less steeply than about 70 degrees would run into the hydrogens.
    for pair in (("right", "left"), ("down", "up")):
        side = min(pair, key=lambda one: round(crowding[one], 6))
        if crowding[side] <= 0.35:
            return side
    return min(crowding, key=lambda one: round(crowding[one], 6))
