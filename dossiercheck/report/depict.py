"""A structure as SVG, in the coordinates its source drew it in.

Nothing is laid out anew: a reviewer must recognise the drawing of the dossier. It is only scaled
so that a typical bond has 28 pixels, and turned to SVG's downward y. Marked atoms carry a ring and
a text beside it. Strokes take the colour of the surrounding text, so print and dark screens work.
"""

from __future__ import annotations

from collections.abc import Sequence
from html import escape
from math import isfinite
from statistics import median

from dossiercheck.model import Drawing, DrawnAtom, DrawnBond, Sight
from dossiercheck.report.bonds import BOND, Ends, number, strokes
from dossiercheck.report.labels import FONT, Box, Label, Point, label_of, width_of
from dossiercheck.report.ranks import described, overlay, part, spoken_of
from dossiercheck.report.rings import neighbours_of, ring_of_each
from dossiercheck.report.space import Segment, apart, free_place, leave, middle
from dossiercheck.report.visible import one_line

_MAX_WIDTH, _MAX_HEIGHT = 360.0, 280.0
_MAX_ATOMS = 1000
_MARK = 12.0
_RING = 9.5
# Below this scale the small numbers of a derivation can no longer be read.
_LEGIBLE = 0.8
_ENLARGED = 1.4


def svg(drawing: Drawing, title: str, sight: Sight | None = None) -> str:
    """The drawing as one `<svg>` element with a title and a description; with `sight` a unit is
    marked as a derivation reads it, and nothing else.

    Coordinates that cannot be shown (not numbers, all the same, without bound) give a note in
    place of a structure: a drawing that is not the source's would be worse than none.
    """
    if sight is not None:
        drawing, sight = part(drawing, sight)
    atoms = drawing.atoms
    bonds = [one for one in drawing.bonds if _usable(one, len(atoms))]
    points = _pixels(atoms, bonds)
    if points is None:
        return _note(drawing, title)
    neighbours = neighbours_of(len(atoms), bonds)
    labels = [
        label_of(atom, points[index], [points[one] for one in neighbours[index]])
        for index, atom in enumerate(atoms)
    ]
    halos = {
        index: _halo(points[index], labels[index])
        for index, atom in enumerate(atoms)
        if atom.highlight or atom.mark
    }
    segments: list[Segment] = [(points[one.begin], points[one.end]) for one in bonds]
    taken = [box for label in labels if label for box in label.boxes]
    taken += halos.values()
    body = [f'<g class="halo" fill="none">{_under(bonds, points, halos)}</g>']
    body.append(
        '<g fill="none" stroke="currentColor" stroke-width="1.35" stroke-linecap="round"'
        f' stroke-linejoin="round">{_bonds(bonds, points, neighbours, labels)}</g>'
    )
    body.append(f'<g fill="currentColor" font-size="{FONT:g}">{_labels(labels)}</g>')
    marks, mark_boxes = _marks(atoms, halos, taken, segments)
    if marks:
        body.append(f'<g class="marktext" font-size="{_MARK:g}" font-weight="700">{marks}</g>')
    told = _description(drawing)
    if sight is not None:
        own = [label.boxes if label else () for label in labels]
        over = overlay(sight, points, halos, taken, segments, own)
        body.append(f'<g class="sight">{"".join(over.parts)}</g>')
        mark_boxes += over.boxes
        told = f"{told} {described(sight)}"
    frame = _frame([(x, y, x, y) for x, y in points] + taken + mark_boxes)
    if sight is not None and _shrink(frame) < _LEGIBLE:
        near = [points[atom] for atom in spoken_of(sight)]
        frame = _cut(frame, _frame([(x, y, x, y) for x, y in near] + over.boxes, BOND))
        told = f"{told} Cut to the surroundings of the unit."
    largest = 1.0 if sight is None else _ENLARGED
    return _element(frame, title, told, "".join(body), largest)


def _usable(bond: DrawnBond, atoms: int) -> bool:
    return 0 <= bond.begin < atoms and 0 <= bond.end < atoms and bond.begin != bond.end


def _pixels(atoms: Sequence[DrawnAtom], bonds: Sequence[DrawnBond]) -> list[Point] | None:
    """Where each atom stands, or None where the coordinates give no picture."""
    if not atoms or len(atoms) > _MAX_ATOMS:
        return None
    if not all(isfinite(one.x) and isfinite(one.y) for one in atoms):
        return None
    raw = [(one.x, one.y) for one in atoms]
    if len(raw) == 1:
        return [(0.0, 0.0)]
    lengths = [apart(raw[one.begin], raw[one.end]) for one in bonds]
    if not lengths:
        lengths = [apart(raw[0], one) for one in raw[1:]]
    lengths = [one for one in lengths if isfinite(one) and one > 1e-6]
    if not lengths:
        return None
    scale = BOND / median(lengths)
    left, top = min(x for x, _ in raw), max(y for _, y in raw)
    found = [((x - left) * scale, (top - y) * scale) for x, y in raw]
    return found if all(x < 2e4 and y < 2e4 for x, y in found) else None


def _halo(at: Point, label: Label | None) -> Box:
    """The ring about an atom, or about the whole of its label."""
    if label is None:
        return at[0] - _RING, at[1] - _RING, at[0] + _RING, at[1] + _RING
    left, top = (min(one[side] for one in label.boxes) for side in (0, 1))
    right, bottom = (max(one[side] for one in label.boxes) for side in (2, 3))
    across = max(2 * _RING, right - left + 9) / 2
    upright = max(2 * _RING, bottom - top + 8) / 2
    x, y = (left + right) / 2, (top + bottom) / 2
    return x - across, y - upright, x + across, y + upright


def _under(bonds: Sequence[DrawnBond], points: Sequence[Point], halos: dict[int, Box]) -> str:
    """What lies below the strokes: thick lines of marked bonds, rings of marked atoms."""
    parts = []
    for bond in bonds:
        if bond.highlight:
            (a, b), (c, d) = points[bond.begin], points[bond.end]
            parts.append(
                f'<path class="halobond" d="M{number(a)} {number(b)}L{number(c)} {number(d)}"'
                ' stroke="#8a1c1c" stroke-opacity="0.3" stroke-width="9" stroke-linecap="round"/>'
            )
    for _, (left, top, right, bottom) in sorted(halos.items()):
        width, height = right - left, bottom - top
        parts.append(
            f'<rect x="{number(left)}" y="{number(top)}" width="{number(width)}"'
            f' height="{number(height)}" rx="{number(min(width, height) / 2)}"'
            ' fill="#8a1c1c" fill-opacity="0.1" stroke="#8a1c1c" stroke-width="1.6"/>'
        )
    return "".join(parts)


def _bonds(
    bonds: Sequence[DrawnBond],
    points: Sequence[Point],
    neighbours: Sequence[Sequence[int]],
    labels: Sequence[Label | None],
) -> str:
    rings = ring_of_each(bonds, neighbours)
    parts = []
    for index, bond in enumerate(bonds):
        begin, end = labels[bond.begin], labels[bond.end]
        ends = Ends(
            points[bond.begin],
            points[bond.end],
            begin.boxes if begin else (),
            end.boxes if end else (),
            tuple(points[one] for one in neighbours[bond.begin] if one != bond.end),
            tuple(points[one] for one in neighbours[bond.end] if one != bond.begin),
        )
        ring = rings.get(index)
        parts += strokes(bond, ends, [points[one] for one in ring] if ring else None)
    return "".join(parts)


def _labels(labels: Sequence[Label | None]) -> str:
    parts = []
    for label in labels:
        for run in label.runs if label else ():
            small = "" if run.size == FONT else f' font-size="{run.size:g}"'
            parts.append(
                f'<text x="{number(run.x)}" y="{number(run.y)}"{small}>{_safe(run.text)}</text>'
            )
    return "".join(parts)


def _marks(
    atoms: Sequence[DrawnAtom],
    halos: dict[int, Box],
    taken: Sequence[Box],
    segments: Sequence[Segment],
) -> tuple[str, list[Box]]:
    """The texts beside the rings, each where it covers nothing, with a thin line when far off."""
    parts: list[str] = []
    placed: list[Box] = []
    for index, halo in sorted(halos.items()):
        text = one_line(atoms[index].mark)
        if not text:
            continue
        text = text if len(text) <= 48 else text[:47] + "…"
        size = (width_of(text, _MARK) * 1.08, _MARK)
        box = free_place(halo, size, [*taken, *placed], segments)
        placed.append(box)
        centre = middle(box)
        parts.append(_leader(halo, box))
        parts.append(
            f'<text x="{number(centre[0])}" y="{number(box[3] - _MARK * 0.15)}"'
            f' text-anchor="middle" fill="#8a1c1c">{_safe(text)}</text>'
        )
    return "".join(parts), placed


def _leader(halo: Box, box: Box) -> str:
    """A thin line from a ring to its text, where the two are apart."""
    at = middle(halo)
    near = (min(max(at[0], box[0]), box[2]), min(max(at[1], box[1]), box[3]))
    free = 1 - leave(at, near, [halo], 0.0)
    if apart(at, near) * free < 9:
        return ""
    x = near[0] + (at[0] - near[0]) * free
    y = near[1] + (at[1] - near[1]) * free
    return (
        f'<path d="M{number(near[0])} {number(near[1])}L{number(x)} {number(y)}"'
        ' fill="none" stroke="#8a1c1c" stroke-width="0.8"/>'
    )


def _cut(frame: Box, window: Box) -> Box:
    """What a window shows of a frame."""
    return (
        max(frame[0], window[0]),
        max(frame[1], window[1]),
        min(frame[2], window[2]),
        min(frame[3], window[3]),
    )


def _shrink(frame: Box, largest: float = 1.0) -> float:
    """The scale at which a frame fits the largest size."""
    return min(largest, _MAX_WIDTH / (frame[2] - frame[0]), _MAX_HEIGHT / (frame[3] - frame[1]))


def _frame(boxes: Sequence[Box], margin: float = 5.0) -> Box:
    return (
        min(one[0] for one in boxes) - margin,
        min(one[1] for one in boxes) - margin,
        max(one[2] for one in boxes) + margin,
        max(one[3] for one in boxes) + margin,
    )


def _element(frame: Box, title: str, description: str, body: str, largest: float = 1.0) -> str:
    left, top = frame[0], frame[1]
    width, height = frame[2] - left, frame[3] - top
    shrink = _shrink(frame, largest)
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" class="structure" role="img"'
        f' width="{number(width * shrink)}" height="{number(height * shrink)}"'
        f' viewBox="{number(left)} {number(top)} {number(width)} {number(height)}"'
        " font-family=\"Helvetica, Arial, 'Liberation Sans', sans-serif\">"
        f"<title>{_safe(title)}</title><desc>{_safe(description)}</desc>{body}</svg>"
    )


def _description(drawing: Drawing) -> str:
    atoms, bonds = len(drawing.atoms), len(drawing.bonds)
    parts = [f"Structure of {atoms} drawn atom{'' if atoms == 1 else 's'} and {bonds}"]
    parts[0] += f" bond{'' if bonds == 1 else 's'}."
    if drawing.laid_out:
        parts.append("Placed by the program; the source has no coordinates for it.")
    marked = [
        f"{atom.element} {index} ({atom.mark})" if atom.mark else f"{atom.element} {index}"
        for index, atom in enumerate(drawing.atoms, 1)
        if atom.highlight or atom.mark
    ]
    if marked:
        parts.append(f"Marked: {', '.join(marked)}.")
    return " ".join(parts)


def _note(drawing: Drawing, title: str) -> str:
    """In place of a picture: why there is none."""
    atoms = len(drawing.atoms)
    reason = "is too large to be shown" if atoms > _MAX_ATOMS else "has no usable coordinates"
    if not atoms:
        reason = "has no atoms"
    text = f"This drawing {reason}."
    body = (
        f'<text x="0" y="14" font-size="13" fill="currentColor">{text}</text>'
        f'<text x="0" y="32" font-size="13" fill="currentColor">Atoms in the source: {atoms}</text>'
    )
    return _element((-5.0, -3.0, 245.0, 42.0), title, f"{text} {_description(drawing)}", body)


def _safe(text: str) -> str:
    return escape(one_line(text))
