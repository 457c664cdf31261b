"""The asymmetric unit completed by symmetry to whole molecules and ions.

Bonds are found by distance between all images of the sites. A molecule is grown from one site by
carrying each bond along with the symmetry operation of its beginning; one that comes back to
itself moved by a lattice vector has no end and is a polymer.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import product
from typing import Any

import gemmi
import numpy as np
import numpy.typing as npt

from dossiercheck.limits import Refused
from dossiercheck.stereo.crystal import Species
from dossiercheck.stereo.lewis import ELEMENTS, HYDROGENS, IONS

Array = npt.NDArray[np.float64]

# Distances in ångström; radii are those of B. Cordero et al., Dalton Trans. 2008, 2832, as the
# library tabulates them. Tolerances: common practice.
_SAME = 0.1
_BOND = 0.25
_DOUBT = 0.40
_HYDROGEN_BOND = 0.30
_SHARED = 0.35
_OVERLAP = 0.70
_LEAST_HH = 1.0
_MOST_HEIGHTS = 1_000.0
_LEAST_HEIGHT = 2.0
_REACH = 3.2
_MOST_ATOMS = 2_000
_MOST_IMAGES = 1_500_000


@dataclass(frozen=True, slots=True)
class Site:
    """One line of the atom list: fractional coordinates, chemical occupancy, and the disorder
    assembly and group ("" and 0 where ordered)."""

    label: str
    element: str
    fract: tuple[float, float, float]
    occupancy: float = 1.0
    assembly: str = ""
    group: int = 0


@dataclass(frozen=True, slots=True)
class Crystal:
    """`cell`: a, b, c in ångström and α, β, γ in degrees; `operations` all of the space group's,
    centring included."""

    cell: tuple[float, float, float, float, float, float]
    operations: tuple[gemmi.Op, ...]
    sites: tuple[Site, ...]


@dataclass(frozen=True, slots=True)
class _Bond:
    """From a site to an image of another: rotation and translation of that image."""

    to: int
    rotation: Array
    shift: Array


@dataclass(frozen=True, slots=True)
class _Node:
    site: int
    rotation: Array
    shift: Array
    position: Array


def species(crystal: Crystal, sites: Sequence[Site]) -> list[Species]:
    """The discrete molecules and ions that `sites`, one part of any disorder, make up.

    Raises `Refused`: "cell-not-possible", "element-not-covered", "unresolved-disorder",
    "bonds-ambiguous", "polymeric", "size-budget".
    """
    for site in sites:
        if site.element not in ELEMENTS:
            detail = f"The bonding of {site.element} is not judged ({site.label})."
            raise Refused("element-not-covered", detail)
    space = _Space(crystal, sites)
    near = [space.bonds(number) for number in range(len(sites))]
    bonds = [
        [b for b in own if not space.hydrogen[b.to] or space.belongs(b, number, near[b.to])]
        for number, own in enumerate(near)
    ]
    seen: set[int] = set()
    found = []
    for start in range(len(sites)):
        if start not in seen:
            one, inside = space.grow(start, bonds)
            seen |= inside
            found.append(one)
    return found


class _Space:
    """The cell with all images of the sites in it."""

    def __init__(self, crystal: Crystal, sites: Sequence[Site]) -> None:
        self.sites = sites
        self.orth = orthogonal(crystal.cell)
        self.rotations = [np.array(op.rot, float) / op.DEN for op in crystal.operations]
        self.shifts = [np.array(op.tran, float) / op.DEN for op in crystal.operations]
        self.fract: Array = np.array([site.fract for site in sites], float)
        self.images: Array = np.array(
            [self.fract @ r.T + t for r, t in zip(self.rotations, self.shifts, strict=True)]
        )
        heights = 1.0 / np.linalg.norm(np.linalg.inv(self.orth), axis=1)
        steps = [range(-k, k + 1) for k in (int(_REACH / h + 0.5) for h in heights)]
        self.around: Array = np.array(list(product(*steps)), float)
        if self.images.size * len(self.around) > _MOST_IMAGES:
            raise Refused("size-budget", "The cell has too many atoms to be gone through.")
        self.radii: Array = np.array([gemmi.Element(s.element).covalent_r for s in sites], float)
        self.hydrogen = np.array([site.element in HYDROGENS for site in sites])
        self.ion = np.array([site.element in IONS for site in sites])
        self.stabiliser = [0] * len(sites)

    def bonds(self, number: int) -> list[_Bond]:
        """The bonds of one site; special positions are noticed on the way."""
        difference = self.images - self.fract[number]
        nearest = difference - np.round(difference)
        home = -np.round(difference)
        vectors = (nearest[:, :, None, :] + self.around) @ self.orth.T
        lengths = np.linalg.norm(vectors, axis=3)
        heavy: list[tuple[float, _Bond, Array]] = []
        for op, to, cell in zip(*np.nonzero(lengths < _REACH), strict=True):
            length = float(lengths[op, to, cell])
            if length < _SAME:
                if to != number:
                    raise self._overlap(number, int(to), length)
                self.stabiliser[number] += 1
                continue
            shift = self.shifts[op] + home[op, to] + self.around[cell]
            bond = _Bond(int(to), self.rotations[op], shift)
            if self._joined(number, bond, length, op):
                heavy.append((length, bond, vectors[op, to, cell]))
        distinct: list[tuple[float, _Bond, Array]] = []
        for length, bond, vector in sorted(heavy, key=lambda entry: entry[0]):
            if not any(
                bond.to == other.to and np.linalg.norm(vector - there) < _SAME
                for _, other, there in distinct
            ):
                distinct.append((length, bond, vector))
        if self.hydrogen[number]:
            return self._of_hydrogen(number, distinct)
        return [bond for _, bond, _ in distinct]

    def _joined(self, number: int, bond: _Bond, length: float, op: Any) -> bool:
        """Whether two images are bonded. Raises `Refused` where the distance leaves it open."""
        to = bond.to
        one, two = self.sites[number], self.sites[to]
        own_image = not (np.array_equal(bond.rotation, np.eye(3)) and not bond.shift.any())
        if own_image and (one.group < 0 or two.group < 0):
            # A part that is disordered over a symmetry element does not meet its own image.
            return False
        radii = float(self.radii[number] + self.radii[to])
        hydrogens = int(self.hydrogen[number]) + int(self.hydrogen[to])
        if hydrogens == 2:
            if length < _LEAST_HH:
                raise self._overlap(number, to, length)
            return False
        if length < _OVERLAP * radii:
            raise self._overlap(number, to, length)
        if self.ion[number] or self.ion[to]:
            return False
        if hydrogens:
            return length < radii + _HYDROGEN_BOND
        if length > radii + _DOUBT:
            return False
        if length > radii + _BOND:
            raise Refused(
                "bonds-ambiguous",
                f"{one.label} and {two.label} stand {length:.2f} Å apart: too far for a sure"
                " bond, too near for none.",
            )
        return True

    def _overlap(self, number: int, to: int, length: float) -> Refused:
        one, two = self.sites[number].label, self.sites[to].label
        return Refused(
            "unresolved-disorder",
            f"{one} and {'its own image' if one == two else two} stand {length:.2f} Å apart,"
            " where only one of them can be.",
        )

    def _of_hydrogen(self, number: int, near: list[tuple[float, _Bond, Array]]) -> list[_Bond]:
        label = self.sites[number].label
        if not near:
            raise Refused("bonds-ambiguous", f"The hydrogen {label} is bonded to nothing.")
        if len(near) > 1 and near[1][0] - near[0][0] < _SHARED:
            raise Refused("bonds-ambiguous", f"The hydrogen {label} stands between two atoms.")
        return [near[0][1]]

    def grow(self, start: int, bonds: Sequence[Sequence[_Bond]]) -> tuple[Species, set[int]]:
        """The species that a site belongs to, and the sites in it."""
        first = _Node(start, np.eye(3), np.zeros(3), self.orth @ self.fract[start])
        nodes = [first]
        by_site: dict[int, list[int]] = {start: [0]}
        pairs: set[tuple[int, int]] = set()
        for number in _growing(nodes):
            node = nodes[number]
            for bond in bonds[node.site]:
                other = self._carried(node, bond)
                known = by_site.setdefault(bond.to, [])
                index = next(
                    (
                        n
                        for n in known
                        if np.linalg.norm(nodes[n].position - other.position) < _SAME
                    ),
                    -1,
                )
                if index < 0:
                    self._finite(other, [nodes[n] for n in known])
                    index = len(nodes)
                    nodes.append(other)
                    known.append(index)
                if len(nodes) > _MOST_ATOMS:
                    raise Refused("size-budget", f"A molecule has more than {_MOST_ATOMS} atoms.")
                pairs.add((min(number, index), max(number, index)))
        return self._species(nodes, pairs, by_site), set(by_site)

    def belongs(self, bond: _Bond, site: int, back: Sequence[_Bond]) -> bool:
        """Whether a hydrogen near an atom is its own, and not another's that is nearer."""
        for own in back:
            if own.to == site:
                there = bond.rotation @ (own.rotation @ self.fract[site] + own.shift) + bond.shift
                if np.linalg.norm(self.orth @ (there - self.fract[site])) < _SAME:
                    return True
        return False

    def _carried(self, node: _Node, bond: _Bond) -> _Node:
        rotation = node.rotation @ bond.rotation
        shift = node.rotation @ bond.shift + node.shift
        return _Node(bond.to, rotation, shift, self.orth @ (rotation @ self.fract[bond.to] + shift))

    def _finite(self, new: _Node, known: Sequence[_Node]) -> None:
        for node in known:
            if np.array_equal(node.rotation, new.rotation):
                raise self._endless(new)
        if len(known) >= len(self.rotations):
            raise self._endless(new)

    def _endless(self, node: _Node) -> Refused:
        label = self.sites[node.site].label
        return Refused("polymeric", f"Bonds lead from {label} to its own image without an end.")

    def _species(
        self, nodes: Sequence[_Node], pairs: set[tuple[int, int]], by_site: dict[int, list[int]]
    ) -> Species:
        copies: set[float] = set()
        for site, numbers in by_site.items():
            each = len(self.rotations) / self.stabiliser[site] / len(numbers)
            if self.sites[site].group < 0:
                each *= self.sites[site].occupancy
            copies.add(round(each, 2))
        count = copies.pop()
        if copies or count < 1 or abs(count - round(count)) > 0.02:
            label = self.sites[nodes[0].site].label
            detail = f"The molecule of {label} is disordered over a symmetry element."
            raise Refused("unresolved-disorder", detail)
        return Species(
            tuple(self.sites[node.site].element for node in nodes),
            tuple((float(x), float(y), float(z)) for x, y, z in (n.position for n in nodes)),
            tuple(sorted(pairs)),
            round(count),
        )


def _growing(nodes: list[_Node]) -> Iterator[int]:
    """The numbers of a list that grows while it is gone through."""
    number = 0
    while number < len(nodes):
        yield number
        number += 1


def orthogonal(cell: tuple[float, ...]) -> Array:
    """The matrix from fractional to right-handed Cartesian coordinates in ångström.

    Raises `Refused` ("cell-not-possible") for lengths or angles that make no cell.
    """
    lengths, angles = cell[:3], cell[3:]
    finite = all(np.isfinite(cell)) and min(lengths) > 0 and max(lengths) < _MOST_HEIGHTS
    if not finite or not all(20 < angle < 160 for angle in angles):
        raise Refused("cell-not-possible", f"The cell {_text(cell)} is not possible.")
    unit = gemmi.UnitCell(*cell)
    orth: Array = np.array(unit.orth.mat.tolist(), float)
    if not np.isfinite(orth).all() or np.linalg.det(orth) <= 1.0:
        raise Refused("cell-not-possible", f"The cell {_text(cell)} has no volume.")
    if min(1.0 / np.linalg.norm(np.linalg.inv(orth), axis=1)) < _LEAST_HEIGHT:
        raise Refused("cell-not-possible", f"The cell {_text(cell)} is too narrow for an atom.")
    return orth


def _text(cell: tuple[float, ...]) -> str:
    return ", ".join(f"{value:g}" for value in cell)
