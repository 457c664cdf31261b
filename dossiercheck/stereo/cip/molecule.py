"""The molecule as the engine sees it: plain lists, Kekulé bond orders, averaged duplicates."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from rdkit import Chem

from dossiercheck.stereo.cip.mancude import averaged

HYDROGEN = -1  # a hydrogen that is counted and not an atom of its own
LONE_PAIR = -2

_AROMATIC = Chem.BondType.AROMATIC
_ORDERS = {
    Chem.BondType.SINGLE: 1,
    Chem.BondType.DOUBLE: 2,
    Chem.BondType.TRIPLE: 3,
    Chem.BondType.QUADRUPLE: 4,
}
_WEIGHTS = Chem.GetPeriodicTable()


@dataclass(frozen=True, slots=True)
class Molecule:
    """Atoms are 0-based; `near[a]` maps each neighbour of a to the bond's order (1 to 4); `ring`
    has the ring bonds, lower atom first; `aromatic` the atoms of aromatic rings.

    `duplicate[a]` is the averaged atomic number of a's one duplicate atom where a is part of a
    mancude ring whose double bonds can be placed in more than one way, 0 elsewhere
    (IUPAC 2013, P-92.1.4.4). A multiple bond at an atom of the third period or below that has
    three ligands or more counts as single: d orbitals are left out (IUPAC 2013, P-92.1.4.2).
    """

    symbol: list[str]
    number: list[int]
    isotope: list[int]
    charge: list[int]
    hydrogens: list[int]
    near: list[dict[int, int]]
    ring: frozenset[tuple[int, int]]
    aromatic: frozenset[int]
    duplicate: list[float]

    def mass(self, atom: int) -> float:
        """Mass of the isotope of a labelled atom, standard atomic weight of another, in daltons."""
        if atom < 0:
            return float(_WEIGHTS.GetAtomicWeight(1)) if atom == HYDROGEN else 0.0
        number, isotope = self.number[atom], self.isotope[atom]
        if isotope:
            return float(_WEIGHTS.GetMassForIsotope(number, isotope) or isotope)
        return float(_WEIGHTS.GetAtomicWeight(number))

    def in_ring(self, one: int, two: int) -> bool:
        """Whether the bond between two atoms is a ring bond."""
        return (min(one, two), max(one, two)) in self.ring

    def name(self, atom: int) -> str:
        """Element symbol, with the mass number of an isotope."""
        if atom < 0:
            return "H" if atom == HYDROGEN else "lone pair"
        return f"{self.isotope[atom] or ''}{self.symbol[atom]}"


def molecule_of(mol: Chem.Mol) -> Molecule:
    """The library's molecule in the engine's terms; its stereo marks are left behind."""
    # The library's own sequences of atoms and bonds are slow to walk.
    atoms = [mol.GetAtomWithIdx(number) for number in range(mol.GetNumAtoms())]
    bonds = [
        (bond.GetBeginAtomIdx(), bond.GetEndAtomIdx(), bond.GetBondType(), bond.IsInRing())
        for bond in map(mol.GetBondWithIdx, range(mol.GetNumBonds()))
    ]
    kekule: dict[tuple[int, int], int] = {}
    if any(bond[2] == _AROMATIC for bond in bonds):
        copy = Chem.Mol(mol)
        Chem.Kekulize(copy)
        kekule = {
            (bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()): _ORDERS.get(bond.GetBondType(), 1)
            for bond in map(copy.GetBondWithIdx, range(copy.GetNumBonds()))
        }
    number = [atom.GetAtomicNum() for atom in atoms]
    near: list[dict[int, int]] = [{} for _ in atoms]
    ring = set()
    crowded = {atom.GetIdx() for atom in atoms if atom.GetAtomicNum() > 13 and atom.GetDegree() > 2}
    for begin, end, kind, cyclic in bonds:
        order = kekule[begin, end] if kekule else _ORDERS.get(kind, 1)
        if begin in crowded or end in crowded:
            order = 1
        near[begin][end] = near[end][begin] = order
        if cyclic:
            ring.add((min(begin, end), max(begin, end)))
    frozen = frozenset(ring)
    return Molecule(
        symbol=[atom.GetSymbol() for atom in atoms],
        number=number,
        isotope=[atom.GetIsotope() for atom in atoms],
        charge=[atom.GetFormalCharge() for atom in atoms],
        hydrogens=[atom.GetTotalNumHs() for atom in atoms],
        near=near,
        ring=frozen,
        aromatic=frozenset(atom.GetIdx() for atom in atoms if atom.GetIsAromatic()),
        duplicate=averaged(number, near, frozen),
    )


def around(mol: Chem.Mol, atoms: Iterable[int]) -> Molecule:
    """The same, cheaply, for what stands around the given atoms only; the rest is left empty and
    every bond counts as single."""
    size = mol.GetNumAtoms()
    near: list[dict[int, int]] = [{} for _ in range(size)]
    hydrogens, ring = [0] * size, set()
    for index in atoms:
        atom = mol.GetAtomWithIdx(index)
        hydrogens[index] = atom.GetTotalNumHs()
        for bond in atom.GetBonds():
            other = bond.GetOtherAtomIdx(index)
            near[index][other] = 1
            if bond.IsInRing():
                ring.add((min(index, other), max(index, other)))
    nothing: list[int] = []
    return Molecule(
        [], nothing, nothing, nothing, hydrogens, near, frozenset(ring), frozenset(), []
    )


def others(near: Iterable[int], *taken: int) -> list[int]:
    """Neighbours without those already taken."""
    return [atom for atom in near if atom not in taken]


def holds_lone_pair(molecule: Molecule, atom: int) -> bool:
    """Whether a nitrogen cannot invert: in a ring of three, or at the head of a bridge, where two
    of its rings run on together; where two rings only share a bond it inverts freely."""
    near = list(molecule.near[atom])
    if not all(molecule.in_ring(atom, other) for other in near):
        return any(two in molecule.near[one] for one in near for two in near if one < two)
    ways = (_way_round(molecule, atom, one, two) for one in near for two in near if one < two)
    smallest, next_one, _ = sorted((set(way) for way in ways), key=len)
    return len(smallest) == 2 or len(smallest & next_one) > 1


def _way_round(molecule: Molecule, atom: int, start: int, goal: int) -> list[int]:
    """A shortest path between two neighbours of an atom that does not pass through it."""
    paths, seen = [[start]], {atom, start}
    while paths:
        onward = []
        for path in paths:
            if path[-1] == goal:
                return path
            for other in molecule.near[path[-1]]:
                if other not in seen:
                    seen.add(other)
                    onward.append([*path, other])
        paths = onward
    return []
