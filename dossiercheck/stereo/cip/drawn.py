"""Configurations as a drawing shows them, or as coordinates in space have them.

How wedges are read follows "Graphical Representation of Stereochemical Configuration" (IUPAC
Recommendations 2006, Pure Appl. Chem. 78, 1897): a wedge speaks of the atom at its narrow end.
What that recommendation calls ambiguous or contradictory gives no configuration here.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence

from dossiercheck.stereo.cip.helices import helices
from dossiercheck.stereo.cip.linear import cumulated, double_chains
from dossiercheck.stereo.cip.molecule import (
    HYDROGEN,
    LONE_PAIR,
    Molecule,
    holds_lone_pair,
    others,
)
from dossiercheck.stereo.cip.units import AXIS, CENTRE, DOUBLE_BOND, Marked
from dossiercheck.stereo.cip.vectors import (
    Vector,
    cross,
    dot,
    minus,
    sine,
    unit,
    volume,
)

# Smallest signed volume of four unit vectors, and smallest sine of an angle (about 5 degrees),
# that still say something.
_LEAST_VOLUME = 0.15
_LEAST_SINE = 0.09
_RAISED = {"wedge": 1.0, "hash": -1.0}

Raised = Mapping[int, float]


class Drawn:
    """Coordinates of all atoms, y upwards, in one unit of length; `marks` are (narrow end, other
    end, style) of a flat drawing, none in space."""

    def __init__(
        self,
        molecule: Molecule,
        points: Sequence[Vector],
        marks: Sequence[tuple[int, int, str]],
        flat: bool,
    ) -> None:
        """Sort the marks by the atom they speak of. `unclear` says, once `marked` has run, why a
        unit that the drawing means to give a configuration has none."""
        self.molecule = molecule
        self.points = points
        self.flat = flat
        self.raised: dict[int, dict[int, float]] = {}
        self.vague: set[int] = set()
        self.crossed: set[frozenset[int]] = set()
        self.unclear: dict[tuple[int, ...], str] = {}
        for begin, end, style in marks:
            if style in _RAISED:
                self.raised.setdefault(begin, {})[end] = _RAISED[style]
            elif style == "wavy":
                self.vague.add(begin)
            else:
                self.crossed.add(frozenset((begin, end)))

    def toward(self, atom: int, other: int, height: float = 0.0) -> Vector:
        """The unit vector from an atom to another; in a drawing raised by a wedge."""
        x, y, z = unit(minus(self.points[other], self.points[atom]))
        return (x, y, height) if self.flat else (x, y, z)

    def marked(self) -> Iterator[Marked]:
        """Every unit that the drawing gives a configuration, stereogenic or not."""
        for atom in sorted(self.raised) if self.flat else range(len(self.molecule.near)):
            if atom not in self.vague and can_be_centre(self.molecule, atom):
                found = self._centre(atom)
                if found:
                    yield found
        for chain in double_chains(self.molecule):
            found = self._plane(chain)
            if found:
                yield found
        wound = list(helices(self.molecule, self.points, self.raised)) if self.flat else []
        yield from wound
        yield from self._axes({atom for helix in wound for atom in helix.chain})

    def ambiguous(self, centres: Iterable[int]) -> dict[int, str]:
        """Which of these wedged stereogenic centres can be read in two ways, or have wedges that
        contradict each other, with the reason."""
        for atom in sorted(centres):
            if atom not in self.vague and len(self.molecule.near[atom]) in (3, 4):
                self._centre(atom)
        return {atoms[0]: why for atoms, why in self.unclear.items()}

    # --- centres -----------------------------------------------------------------------------

    def _centre(self, atom: int) -> Marked | None:
        molecule = self.molecule
        around = list(molecule.near[atom])
        raised = self.raised.get(atom, {})
        vectors = [self.toward(atom, other, raised.get(other, 0.0)) for other in around]
        if len(around) == 4:
            size = volume(*vectors)
            ligands = tuple(around)
        else:
            bridgehead = all(molecule.in_ring(atom, other) for other in around)
            if self.flat and self._reentrant(vectors, raised, around, bridgehead):
                self.unclear[atom,] = "the wedge stands where it can be read in two ways"
                return None
            size = dot(vectors[0], cross(vectors[1], vectors[2]))
            # The fourth ligand lies opposite the other three: seen from it they turn the other way.
            size = -size
            ligands = (HYDROGEN if molecule.hydrogens[atom] else LONE_PAIR, *around)
        if abs(size) < _LEAST_VOLUME:
            self.unclear[atom,] = (
                "the wedges contradict each other or cancel out"
                if self.flat
                else "the ligands lie almost in one plane"
            )
            return None
        return Marked(CENTRE, (atom,), ligands, 1 if size > 0 else -1)

    @staticmethod
    def _reentrant(
        vectors: Sequence[Vector], raised: Raised, around: Sequence[int], bridgehead: bool
    ) -> bool:
        """Three bonds on one side with only the middle one marked, or two in a straight line and
        the third marked: not acceptable (ST-1.1.3, ST-1.1.10). The first is how a bridge inside a
        ring is drawn, and there has one meaning."""
        if len(raised) != 1:
            return False
        middle = around.index(next(iter(raised)))
        one, two = (vectors[number] for number in range(3) if number != middle)
        bend = one[0] * two[1] - one[1] * two[0]
        if abs(bend) < _LEAST_SINE:
            return True
        if bridgehead:
            return False
        stem = vectors[middle]
        left = one[0] * stem[1] - one[1] * stem[0]
        right = stem[0] * two[1] - stem[1] * two[0]
        return left * bend > 0 and right * bend > 0

    # --- double bonds and cumulenes ------------------------------------------------------------

    def _plane(self, chain: tuple[int, ...]) -> Marked | None:
        begin, end = chain[0], chain[-1]
        if frozenset(chain[:2]) in self.crossed or frozenset(chain[-2:]) in self.crossed:
            return None
        if self.vague & {begin, end}:
            return None
        near, far = self._side(begin, chain[1]), self._side(end, chain[-2])
        if not near or not far:
            return None
        along = minus(self.points[end], self.points[begin])
        one = cross(along, self.toward(begin, near[0]))
        two = cross(along, self.toward(end, far[0]))
        length = dot(along, along) ** 0.5
        if min(dot(one, one), dot(two, two)) ** 0.5 < _LEAST_SINE * length:
            self.unclear[begin, end] = "a ligand lies in line with the double bond"
            return None
        if not self._opposed(along, begin, near) or not self._opposed(along, end, far):
            self.unclear[begin, end] = "both ligands of one end lie on the same side"
            return None
        return Marked(DOUBLE_BOND, chain, (*near, *far), 1 if dot(one, two) > 0 else -1)

    def _side(self, atom: int, inward: int) -> tuple[int, int] | None:
        """The two ligands at one end, one that is drawn first; None where there is no choice."""
        outer = others(self.molecule.near[atom], inward)
        hydrogens = self.molecule.hydrogens[atom]
        if len(outer) == 2 and not hydrogens and not _twins(self.molecule, outer):
            return outer[0], outer[1]
        if len(outer) == 1 and hydrogens <= 1:
            if hydrogens == 1:
                return outer[0], HYDROGEN
            if hydrogens == 0 and self.molecule.number[atom] in _LONE_PAIRED:
                return outer[0], LONE_PAIR
        return None

    def _opposed(self, along: Vector, atom: int, ligands: tuple[int, int]) -> bool:
        """Whether two drawn ligands of one end stand on different sides of the bond."""
        if ligands[1] < 0:
            return True
        one = cross(along, self.toward(atom, ligands[0]))
        two = cross(along, self.toward(atom, ligands[1]))
        return dot(one, two) < 0

    # --- axes --------------------------------------------------------------------------------

    def _axes(self, wound: set[int]) -> Iterator[Marked]:
        """Allenes and longer cumulenes; in a drawing also single bonds between trigonal atoms of
        which one has a wedge to a neighbour in its own plane (IUPAC 2013, P-92.1.2.2.2)."""
        seen: set[tuple[int, ...]] = set()
        for atom in range(len(self.molecule.near)):
            chain = cumulated(self.molecule, atom)
            if len(chain) > 2 and len(chain) % 2 and chain not in seen:
                seen.add(chain)
                yield from self._axis(chain)
        for atom in sorted(self.raised):
            if (
                atom not in wound
                and is_trigonal(self.molecule, atom)
                and not can_be_centre(self.molecule, atom)
            ):
                for other, order in self.molecule.near[atom].items():
                    if order == 1 and other not in self.raised[atom]:
                        chain = (min(atom, other), max(atom, other))
                        if chain not in seen and is_trigonal(self.molecule, other):
                            seen.add(chain)
                            if not self.molecule.in_ring(*chain) or self._bridged(chain):
                                yield from self._axis(chain)

    def _bridged(self, chain: tuple[int, ...]) -> bool:
        """Whether a ring bond joins two other rings, as in a bridged biaryl: each end has a ring
        that the bond is not part of."""
        near = self.molecule.near
        return all(_ring_without(near, end, other) for end, other in (chain, chain[::-1]))

    def _axis(self, chain: tuple[int, ...]) -> Iterator[Marked]:
        begin, end = chain[0], chain[-1]
        near, far = self._side(begin, chain[1]), self._side(end, chain[-2])
        if not near or not far or self.vague & {begin, end}:
            return
        along = unit(minus(self.points[end], self.points[begin]))
        signs = set()
        if self.flat:
            for atom, own, other_end, other in ((begin, near, end, far), (end, far, begin, near)):
                heights = self.raised.get(atom, {})
                height = heights.get(own[0], 0.0) - heights.get(own[1], 0.0)
                side = sine(along, self.toward(other_end, other[0]))
                if height and abs(side) >= _LEAST_SINE:
                    # Seen along the axis from its near end: own[0] up, other[0] to one side.
                    turn = height * side * (1 if atom == begin else -1)
                    signs.add(1 if turn < 0 else -1)
        else:
            size = dot(along, cross(self.toward(begin, near[0]), self.toward(end, far[0])))
            if abs(size) >= _LEAST_SINE:
                signs.add(1 if size > 0 else -1)
        if len(signs) > 1:
            self.unclear[begin, end] = "the wedges at the two ends contradict each other"
        if len(signs) == 1:
            yield Marked(AXIS, chain, (*near, *far), signs.pop())


# Elements whose four (or three and a lone pair) ligands hold their places (IUPAC 2013, P-93.2 and
# P-93.3); the geometries of metals are more than tetrahedral and are not read.
_TETRAHEDRAL = frozenset((5, 6, 7, 14, 15, 16, 32, 33, 34, 50, 51, 52))
_LONE_PAIRED = frozenset((7, 15, 16, 33, 34))
_PYRAMIDAL = frozenset((15, 16, 33, 34, 51, 52))


def can_be_centre(molecule: Molecule, atom: int) -> bool:
    """Whether an atom with these ligands holds a configuration.

    Four ligands; or three with a hydrogen; or three with a lone pair that does not swing over: on
    sulfur, phosphorus and heavier, and on nitrogen at the head of a bridge or in a ring of three.
    """
    near, hydrogens = molecule.near[atom], molecule.hydrogens[atom]
    number = molecule.number[atom]
    if number not in _TETRAHEDRAL or any(order > 1 for order in near.values()):
        return False
    if _twins(molecule, near):
        return False
    if len(near) + hydrogens == 4:
        return hydrogens <= 1 and (number != 7 or molecule.charge[atom] == 1)
    if len(near) != 3 or hydrogens:
        return False
    if number == 7:
        return molecule.charge[atom] == 0 and holds_lone_pair(molecule, atom)
    return number in _PYRAMIDAL


def _twins(molecule: Molecule, ligands: Iterable[int]) -> bool:
    """Whether two of the ligands are the same single atom."""
    single = [
        (molecule.number[other], molecule.isotope[other], molecule.hydrogens[other])
        for other in ligands
        if len(molecule.near[other]) == 1
    ]
    return len(single) > len(set(single))


def is_trigonal(molecule: Molecule, atom: int) -> bool:
    """Three neighbours and a double bond to one of them; or a nitrogen whose lone pair is part of
    such a system next to it."""
    near = molecule.near[atom]
    if len(near) != 3:
        return False
    orders = sorted(near.values())
    if orders == [1, 1, 2]:
        return True
    return (
        orders == [1, 1, 1]
        and molecule.number[atom] == 7
        and molecule.charge[atom] == 0
        and any(2 in molecule.near[other].values() for other in near)
    )


def _ring_without(near: Sequence[Mapping[int, int]], atom: int, barred: int) -> bool:
    """Whether an atom is in a ring of at most eight that does not pass through another atom."""
    starts = others(near[atom], barred)
    reached, seen = set(starts[:1]), {atom, barred, *starts[:1]}
    for _ in range(6):
        reached = {n for at in reached for n in near[at] if n not in seen}
        if starts[1] in reached:
            return True
        seen |= reached
    return False
