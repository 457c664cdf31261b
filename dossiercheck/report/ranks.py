"""What a derivation marks in a drawing: the unit, the ranks of its ligands, the sense a → b → c.

Everything is told by shape and letter as well as by colour, so that it prints in black and white.
Lengths are in pixels of the drawing, y downwards, as in `depict`.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from math import atan2, cos, degrees, hypot, pi, radians, sin, tau

from dossiercheck.model import Drawing, RankPlace, Sight
from dossiercheck.report.bonds import number
from dossiercheck.report.labels import Box, Point, width_of
from dossiercheck.report.space import Segment, free_place, middle
from dossiercheck.report.visible import one_line

_LETTER, _NUMBER = 13.0, 8.5
_RADIUS = 15.5
_MOST_NUMBERS = 30
# Directions that cancel out to less than this leave no free side.
_LEAST_ASIDE = 0.3
_ENDS = ("near", "far")


@dataclass(slots=True)
class Overlay:
    """SVG to be put over a drawing, and the boxes that it covers."""

    parts: list[str] = field(default_factory=list)
    boxes: list[Box] = field(default_factory=list)


@dataclass(frozen=True, slots=True)
class Arc:
    """Part of a circle about a centre from one angle to another, in radians, y upwards; it runs
    counter-clockwise where `turn` is 1, clockwise where it is -1."""

    start: float
    stop: float
    turn: int

    @property
    def sweep(self) -> float:
        """How far it runs, in radians."""
        return ((self.stop - self.start) * self.turn) % tau


def part(drawing: Drawing, sight: Sight) -> tuple[Drawing, Sight]:
    """The connected part of a drawing with the unit in it, and no mark but the unit's own."""
    near: dict[int, list[int]] = {}
    for bond in drawing.bonds:
        near.setdefault(bond.begin, []).append(bond.end)
        near.setdefault(bond.end, []).append(bond.begin)
    reached = set(sight.atoms)
    waiting = list(reached)
    while waiting:
        new = [one for one in near.get(waiting.pop(), ()) if one not in reached]
        reached.update(new)
        waiting += new
    number = {atom: place for place, atom in enumerate(sorted(reached))}
    atoms = tuple(
        replace(drawing.atoms[atom], highlight=atom in sight.atoms, mark="") for atom in number
    )
    pair = set(sight.atoms) if len(sight.atoms) > 1 else set()
    bonds = tuple(
        replace(
            bond,
            begin=number[bond.begin],
            end=number[bond.end],
            highlight={bond.begin, bond.end} == pair,
        )
        for bond in drawing.bonds
        if bond.begin in number and bond.end in number
    )
    ranks = tuple(
        replace(one, atom=number.get(one.atom, -1), end=number[one.end]) for one in sight.ranks
    )
    numbers = tuple((number[atom], text) for atom, text in sight.numbers if atom in number)
    own = tuple(number[atom] for atom in sight.atoms)
    return (
        replace(drawing, atoms=atoms, bonds=bonds),
        replace(sight, atoms=own, ranks=ranks, numbers=numbers),
    )


def spoken_of(sight: Sight) -> set[int]:
    """The atoms that must be in the picture: the unit's, its ligands, those numbered."""
    found = {*sight.atoms, *(atom for atom, _ in _numbers(sight))}
    return found | {place.atom for place in sight.ranks if place.atom >= 0}


def overlay(
    sight: Sight,
    points: Sequence[Point],
    halos: dict[int, Box],
    taken: Sequence[Box],
    segments: Sequence[Segment],
    own: Sequence[tuple[Box, ...]],
) -> Overlay:
    """The letters, the arc and the numbers. `halos` are the rings about the unit's atoms, `own`
    the boxes of each atom's label; `taken` is what letters must keep clear of."""
    found = Overlay()
    taken = list(taken)
    for arc in arcs(sight, points):
        at = points[sight.atoms[0]]
        radius = _radius(halos[sight.atoms[0]])
        found.parts.append(_arc(at, radius, arc))
        taken += _along(at, radius, arc)
    found.boxes += taken[-1:]
    for place in sight.ranks:
        around = _around(place, sight, points, halos, own)
        text = f"{place.rank}[{place.held}]" if place.held else place.rank
        if place.atom < 0:
            text = f"{text} {place.label}"
        _put(found, text, around, taken, segments, circled=_is_mark(sight, place))
    if sight.kind == "axis":
        for atom, word in zip(sight.atoms, _ENDS, strict=False):
            _put(found, word, halos[atom], taken, segments, italic=True)
    for atom, text in _numbers(sight):
        around = halos.get(atom) or _box_of(points[atom], own[atom])
        _put(found, text, around, taken, segments, size=_NUMBER)
    return found


def arcs(sight: Sight, points: Sequence[Point]) -> tuple[Arc, ...]:
    """The way from a to b and from b to c about a centre, by the places they hold; none where the
    unit is not read so."""
    if not sight.turn:
        return ()
    at = points[sight.atoms[0]]
    angles = {
        place.held or place.rank: _angle(at, points[place.atom])
        for place in sight.ranks
        if place.atom >= 0
    }
    return tuple(_shortened(Arc(angles[one], angles[two], sight.turn)) for one, two in ("ab", "bc"))


def described(sight: Sight) -> str:
    """What is marked, for whoever does not see it."""
    told = [
        f"{place.rank} {place.label}{'' if place.atom >= 0 else ' (not drawn)'}"
        for place in sight.ranks
    ]
    parts = [f"Ranks: {', '.join(told)}."] if told else []
    if sight.turn:
        way = "counter-clockwise" if sight.turn > 0 else "clockwise"
        after = ", after two exchanges," if any(place.held for place in sight.ranks) else ""
        parts.append(f"As drawn{after} a, b and c run {way}.")
    return " ".join(parts)


def _angle(at: Point, other: Point) -> float:
    return atan2(at[1] - other[1], other[0] - at[0])


def _shortened(arc: Arc) -> Arc:
    """The arc kept off the bonds at its ends."""
    gap = min(radians(11), arc.sweep / 4)
    return Arc(arc.start + gap * arc.turn, arc.stop - gap * arc.turn, arc.turn)


def _radius(halo: Box) -> float:
    return max(_RADIUS, hypot(halo[2] - halo[0], halo[3] - halo[1]) / 2 + 2)


def _at(centre: Point, radius: float, angle: float) -> Point:
    return centre[0] + radius * cos(angle), centre[1] - radius * sin(angle)


def _arc(centre: Point, radius: float, arc: Arc) -> str:
    """The arc and its arrowhead, which lies along the circle."""
    begin, end = _at(centre, radius, arc.start), _at(centre, radius, arc.stop)
    large = int(arc.sweep > pi)
    clockwise = int(arc.turn < 0)
    path = (
        f"M{number(begin[0])} {number(begin[1])}A{number(radius)} {number(radius)} 0 {large} "
        f"{clockwise} {number(end[0])} {number(end[1])}"
    )
    # The head's back lies this far back on the circle.
    back = arc.stop - arc.turn * min(5.5 / radius, arc.sweep * 0.7)
    corners = (end, _at(centre, radius + 2.6, back), _at(centre, radius - 2.6, back))
    head = "L".join(f"{number(x)} {number(y)}" for x, y in corners)
    return (
        f'<path class="turn" d="{path}" fill="none" stroke="#8a1c1c" stroke-width="1.3"/>'
        f'<path class="head" d="M{head}Z" fill="#8a1c1c" stroke="#8a1c1c" stroke-width="0.6"/>'
    )


def _along(centre: Point, radius: float, arc: Arc) -> list[Box]:
    steps = max(2, round(degrees(arc.sweep) / 15))
    found = []
    for step in range(steps + 1):
        x, y = _at(centre, radius, arc.start + arc.turn * arc.sweep * step / steps)
        found.append((x - 2.5, y - 2.5, x + 2.5, y + 2.5))
    return found


def _around(
    place: RankPlace,
    sight: Sight,
    points: Sequence[Point],
    halos: dict[int, Box],
    own: Sequence[tuple[Box, ...]],
) -> Box:
    """What a rank's letter stands beside: its atom, or where a ligand that is not drawn would
    stand, opposite the others."""
    if place.atom >= 0:
        return halos.get(place.atom) or _box_of(points[place.atom], own[place.atom])
    at = points[place.end]
    drawn = [one.atom for one in sight.ranks if one.end == place.end and one.atom >= 0]
    drawn += [atom for atom in sight.atoms if atom != place.end]
    angles = [_angle(at, points[atom]) for atom in drawn]
    across, up = -sum(map(cos, angles)), -sum(map(sin, angles))
    if hypot(across, up) < _LEAST_ASIDE:
        return halos[place.end]
    return _box_of(_at(at, _RADIUS, atan2(up, across)), ())


def _box_of(at: Point, label: tuple[Box, ...]) -> Box:
    if not label:
        return at[0] - 1.5, at[1] - 1.5, at[0] + 1.5, at[1] + 1.5
    return (
        min(box[0] for box in label),
        min(box[1] for box in label),
        max(box[2] for box in label),
        max(box[3] for box in label),
    )


def _is_mark(sight: Sight, place: RankPlace) -> bool:
    """Whether a letter is ringed: the two a's by which a double bond or an axis is read."""
    return sight.kind != "centre" and place.rank == "a"


def _numbers(sight: Sight) -> tuple[tuple[int, str], ...]:
    """The atoms to be numbered: those cited, or where these are many the ligands alone."""
    if len(sight.numbers) <= _MOST_NUMBERS:
        return sight.numbers
    near = {*sight.atoms, *(place.atom for place in sight.ranks)}
    return tuple(entry for entry in sight.numbers if entry[0] in near)


def _put(
    found: Overlay,
    text: str,
    around: Box,
    taken: list[Box],
    segments: Sequence[Segment],
    *,
    size: float = _LETTER,
    circled: bool = False,
    italic: bool = False,
) -> None:
    """Place one text near a box where it covers least, and take its room."""
    text = one_line(text)[:24]
    margin = 3.5 if circled else 0.0
    width = width_of(text, size) * 1.06 + 2 * margin
    box = free_place(around, (width, size * 0.86 + 2 * margin), taken, segments)
    taken.append(box)
    found.boxes.append(box)
    x, y = middle(box)
    if circled:
        found.parts.append(
            f'<circle class="mark" cx="{number(x)}" cy="{number(y)}" r="{number(size * 0.62)}"'
            ' fill="none" stroke="#8a1c1c" stroke-width="1.2"/>'
        )
    kind = "cite" if size == _NUMBER else "rank"
    style = ' font-style="italic"' if italic else ' font-weight="700"' if kind == "rank" else ""
    colour = "currentColor" if kind == "cite" else "#8a1c1c"
    found.parts.append(
        f'<text class="{kind}" x="{number(x)}" y="{number(y + size * 0.33)}" text-anchor="middle"'
        f' font-size="{size:g}" fill="{colour}"{style}>{_escaped(text)}</text>'
    )


def _escaped(text: str) -> str:
    return text.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;")
