"""A small graph of our own: heavy atoms, hydrogens folded into counts, parities as numbers."""

from __future__ import annotations

from dataclasses import dataclass

from rdkit import Chem

from dossiercheck.stereo.cip.molecule import HYDROGEN, LONE_PAIR
from dossiercheck.stereo.cip.units import parity
from dossiercheck.stereo.structure import Structure, geometry


@dataclass(frozen=True, slots=True)
class Centre:
    """Seen from `order[0]`, the others follow counter-clockwise where `sign` is +1, else
    clockwise. Neighbours are atoms, or HYDROGEN or LONE_PAIR."""

    order: tuple[int, ...]
    sign: int


@dataclass(frozen=True, slots=True)
class Geometry:
    """`near` are one neighbour at each end, on one side (`sign` +1) or on opposite sides (-1)."""

    ends: tuple[int, int]
    near: tuple[int, int]
    sign: int


@dataclass(frozen=True, slots=True)
class Graph:
    """Atom numbers are the structure's own; folded hydrogens are simply not in `atoms`."""

    atoms: tuple[int, ...]
    element: dict[int, int]
    isotope: dict[int, int]
    charge: dict[int, int]
    hydrogens: dict[int, int]
    near: dict[int, dict[int, float]]
    centres: dict[int, Centre]
    bonds: dict[frozenset[int], Geometry]

    def components(self) -> list[tuple[int, ...]]:
        """The connected parts, each in ascending atom order, in order of their first atom."""
        seen: set[int] = set()
        parts = []
        for atom in self.atoms:
            if atom in seen:
                continue
            part, queue = {atom}, [atom]
            while queue:
                for other in self.near[queue.pop()]:
                    if other not in part:
                        part.add(other)
                        queue.append(other)
            seen |= part
            parts.append(tuple(sorted(part)))
        return parts


def graph_of(structure: Structure) -> Graph:
    """The structure's graph with all stereo marks, meaningful or not."""
    mol = structure.mol
    folded = {
        atom.GetIdx()
        for atom in mol.GetAtoms()
        if atom.GetAtomicNum() == 1
        and atom.GetIsotope() == 0
        and atom.GetDegree() == 1
        and atom.GetNeighbors()[0].GetAtomicNum() > 1
    }
    element, isotope, charge, hydrogens = {}, {}, {}, {}
    near: dict[int, dict[int, float]] = {}
    centres = {}
    for atom in mol.GetAtoms():
        index = atom.GetIdx()
        if index in folded:
            continue
        element[index] = atom.GetAtomicNum()
        isotope[index] = atom.GetIsotope()
        charge[index] = atom.GetFormalCharge()
        around = [other.GetIdx() for other in atom.GetNeighbors()]
        hydrogens[index] = atom.GetTotalNumHs() + sum(1 for other in around if other in folded)
        near[index] = {}
        tag = atom.GetChiralTag()
        if tag in (Chem.ChiralType.CHI_TETRAHEDRAL_CCW, Chem.ChiralType.CHI_TETRAHEDRAL_CW):
            order = [HYDROGEN if other in folded else other for other in around]
            # The library keeps the tag of three drawn neighbours as if the fourth, hydrogen or
            # lone pair, came last.
            if len(order) == 3:
                order.append(HYDROGEN if atom.GetTotalNumHs() else LONE_PAIR)
            if len(order) == 4 and len(set(order)) == 4:
                sign = 1 if tag == Chem.ChiralType.CHI_TETRAHEDRAL_CCW else -1
                centres[index] = Centre(tuple(order), sign)
    bonds = {}
    for bond in mol.GetBonds():
        begin, end = bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()
        if begin in folded or end in folded:
            continue
        near[begin][end] = near[end][begin] = bond.GetBondTypeAsDouble()
        shown = geometry(mol, (begin, end)) if bond.GetStereo() else None
        if shown:
            one, two = (HYDROGEN if atom in folded else atom for atom in shown[:2])
            bonds[frozenset((begin, end))] = Geometry((begin, end), (one, two), shown[2])
    return Graph(tuple(element), element, isotope, charge, hydrogens, near, centres, bonds)


def same_centre(one: Centre, two: Centre, mapping: dict[int, int]) -> bool | None:
    """Whether two centres have one configuration under a mapping; None where their ligands
    do not correspond."""
    carried = [mapping.get(atom, atom) if atom >= 0 else atom for atom in one.order]
    if set(carried) != set(two.order):
        return None
    return one.sign * parity(carried, two.order) == two.sign


def same_geometry(one: Geometry, two: Geometry, mapping: dict[int, int]) -> bool:
    """Whether two double bonds have one configuration under a mapping."""
    sign = one.sign
    other = dict(zip(two.ends, two.near, strict=True))
    for end, neighbour in zip(one.ends, one.near, strict=True):
        carried = mapping.get(neighbour, neighbour) if neighbour >= 0 else neighbour
        if other[mapping[end]] != carried:
            sign = -sign
    return sign == two.sign
