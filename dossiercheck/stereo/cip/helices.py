"""Helices drawn with wedges: ortho-fused rings whose two ends lie over each other."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from itertools import pairwise
from math import atan2, pi

from dossiercheck.stereo.cip.molecule import Molecule
from dossiercheck.stereo.cip.units import HELIX, Marked
from dossiercheck.stereo.cip.vectors import Vector, minus

# The inner rim of a helix turns through more than this on its way from end to end.
_LEAST_TURN = 1.2 * pi


def helices(
    molecule: Molecule, points: Sequence[Vector], raised: Mapping[int, Mapping[int, float]]
) -> Iterator[Marked]:
    """Helical units: a trigonal ring atom with a raised neighbour, another with a lowered one,
    and between the two an inner rim that turns one way all along (IUPAC 2013, P-92.1.2.2.1).

    The sign is +1 for P: away from the observer the helix turns clockwise.
    """
    ends = [
        (other, atom, height)
        for atom, marks in sorted(raised.items())
        if sorted(molecule.near[atom].values()) == [1, 1, 2]
        for other, height in marks.items()
        if molecule.in_ring(atom, other) and other not in raised
    ]
    for front, inner, height in ends:
        for back, innermost, depth in ends:
            if height > 0 > depth:
                rim = _rim(molecule, front, inner, innermost, back)
                turn = _turn([points[atom] for atom in rim])
                if abs(turn) > _LEAST_TURN:
                    sign = -1 if turn > 0 else 1
                    chain = tuple(rim) if rim[0] < rim[-1] else tuple(rim[::-1])
                    yield Marked(HELIX, chain, (), sign)


def _rim(molecule: Molecule, front: int, inner: int, innermost: int, back: int) -> list[int]:
    """The shortest way from end to end through the two marked atoms; [] where there is none."""
    paths = [[front, inner]]
    seen = {front, inner}
    while paths:
        onward = []
        for path in paths:
            if path[-1] == innermost:
                return [*path, back]
            for other in molecule.near[path[-1]]:
                if other not in seen and other != back and molecule.in_ring(path[-1], other):
                    seen.add(other)
                    onward.append([*path, other])
        paths = onward
    return []


def _turn(points: Sequence[Vector]) -> float:
    """The angle through which a path turns, in radians, counter-clockwise positive; 0 where it
    does not turn one way only."""
    turns = []
    steps = [minus(two, one) for one, two in pairwise(points)]
    for one, two in pairwise(steps):
        turns.append(atan2(one[0] * two[1] - one[1] * two[0], one[0] * two[0] + one[1] * two[1]))
    return sum(turns) if len({turn > 0 for turn in turns}) == 1 else 0.0
