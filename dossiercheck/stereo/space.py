"""All configurations that a constitution can have, as bits, and how its symmetry moves them.

A unit's bit says which of its two configurations it has. A symmetry of the constitution carries
one set of bits into another that stands for the same stereoisomer; so stereoisomers are the orbits
(Pólya's view of isomers, as in any textbook of combinatorics), and no descriptor is needed.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from rdkit import Chem

from dossiercheck.stereo.cages import cages
from dossiercheck.stereo.graph import (
    HYDROGEN,
    LONE_PAIR,
    Centre,
    Geometry,
    Graph,
    graph_of,
    same_centre,
    same_geometry,
)
from dossiercheck.stereo.structure import Structure, is_pyramidal_nitrogen
from dossiercheck.stereo.symmetry import generators

_ACIDIC = frozenset((15, 16, 33, 34))
_CHALCOGENS = frozenset((8, 16, 34))
_DONORS = _CHALCOGENS | {7}
# Rings with a double bond of either geometry: from twelve atoms on nothing stands in its way.
_WIDE_RING = 12


@dataclass(frozen=True, slots=True)
class Move:
    """A symmetry: unit u goes to `to[u]`, its bit turned where `turned` has bit u."""

    to: tuple[int, ...]
    turned: int

    def __call__(self, bits: int) -> int:
        """The configurations after the symmetry."""
        bits ^= self.turned
        moved = 0
        for unit, image in enumerate(self.to):
            if bits >> unit & 1:
                moved |= 1 << image
        return moved


@dataclass(frozen=True, slots=True)
class Space:
    """`units` by number, with the reference configuration (bit 0) of each. `moves` generate the
    symmetries; `ties` are pairs of units whose bits must be alike (0) or unlike (1), because small
    rings hold them. `unsure` says why some combinations may not exist, and `left_out` what might
    be taken for a unit and is not one here; "" for nothing."""

    graph: Graph
    units: tuple[Centre | Geometry, ...]
    atoms: tuple[tuple[int, ...], ...]
    moves: tuple[Move, ...]
    ties: tuple[tuple[int, int, int], ...]
    unsure: str
    left_out: tuple[tuple[int, ...], ...]

    @property
    def centres(self) -> int:
        """The bits of the centres, which a mirror turns."""
        return sum(1 << n for n, unit in enumerate(self.units) if isinstance(unit, Centre))

    @property
    def moved(self) -> frozenset[int]:
        """The units that some symmetry moves or turns, or that are tied; the others are free."""
        found = {unit for one, two, _ in self.ties for unit in (one, two)}
        for move in self.moves:
            found |= {u for u, image in enumerate(move.to) if image != u or move.turned >> u & 1}
        return frozenset(found)

    def exists(self, bits: int) -> bool:
        """Whether small rings allow this combination, as far as they are judged."""
        return all((bits >> one ^ bits >> two) & 1 == odd for one, two, odd in self.ties)

    def block(self, unit: int) -> int:
        """The bits that turn together with a unit's."""
        found, queue = {unit}, [unit]
        while queue:
            here = queue.pop()
            for one, two, _ in self.ties:
                if here in (one, two):
                    queue += {one, two} - found
                    found |= {one, two}
        return sum(1 << member for member in found)

    def orbit(self, bits: int) -> Iterator[int]:
        """All sets of bits that stand for the same stereoisomer."""
        seen, queue = {bits}, [bits]
        while queue:
            here = queue.pop()
            yield here
            for move in self.moves:
                there = move(here)
                if there not in seen:
                    seen.add(there)
                    queue.append(there)


def space_of(structure: Structure, within: frozenset[int] | None = None) -> Space:
    """The space of a structure's constitution, or of some of its atoms (whole components); what
    is marked in it has no influence. Raises `symmetry.TooSymmetric`."""
    bare = Chem.Mol(structure.mol)
    Chem.RemoveStereochemistry(bare)
    flat = Structure(bare, "")
    graph = part_of(graph_of(flat), within)
    found: list[tuple[tuple[int, ...], Centre | Geometry]] = []
    left_out: list[tuple[int, ...]] = []
    rings = _ring_neighbours(bare)
    for kind, atoms, near in flat.possible:
        if atoms[0] not in graph.near:
            continue
        unit = _centre(graph, atoms[0]) if kind == "centre" else _geometry(graph, atoms, near)
        if unit is None:
            continue
        pyramidal = kind == "centre" and is_pyramidal_nitrogen(flat, atoms[0])
        if pyramidal and len(rings[atoms[0]]) == 3:
            continue
        if pyramidal or _is_fluxional(graph, kind, atoms):
            left_out.append(atoms)
        else:
            found.append((atoms, unit))
    nitrogens = [a for a in graph.atoms if len(rings[a]) == 3 and is_pyramidal_nitrogen(flat, a)]
    caged = cages(graph, rings, [*(a[0] for a, _ in found if len(a) == 1), *nitrogens])
    fixed = {end for held in caged.held for end in held.ends}
    for atom in nitrogens:
        unit = _centre(graph, atom)
        if atom in fixed and unit is not None:
            found.append(((atom,), unit))
        else:
            left_out.append((atom,))
    units = tuple(unit for _, unit in found)
    atoms_of = tuple(atoms for atoms, _ in found)
    number = {frozenset(atoms): n for n, atoms in enumerate(atoms_of)}
    ties = []
    for held in caged.held:
        one, two = (number[frozenset((end,))] for end in held.ends)
        away = [_sense(units[n], first) for n, first in ((one, held.first), (two, held.last))]
        ties.append((one, two, int(away[0] == away[1])))
    return Space(
        graph,
        units,
        atoms_of,
        moves_of(graph, units, atoms_of),
        tuple(ties),
        _unsure(bare, atoms_of, caged.unsure, number),
        tuple(left_out),
    )


def moves_of(
    graph: Graph,
    units: tuple[Centre | Geometry, ...],
    atoms: tuple[tuple[int, ...], ...],
    *,
    exact: bool = True,
) -> tuple[Move, ...]:
    """What the graph's symmetries (of its skeleton, where not `exact`) do to the units. A
    symmetry that does not carry units into units is left out."""
    number = {frozenset(a): n for n, a in enumerate(atoms)}
    found = []
    for symmetry in generators(graph, exact=exact):
        to, turned = [], 0
        for n, unit in enumerate(units):
            image = number.get(frozenset(symmetry[a] for a in atoms[n]))
            same = None if image is None else alike(unit, units[image], symmetry)
            if image is None or same is None:
                break
            to.append(image)
            turned |= (not same) << n
        else:
            if turned or to != sorted(to):
                found.append(Move(tuple(to), turned))
    return tuple(dict.fromkeys(found))


def alike(
    one: Centre | Geometry, two: Centre | Geometry, mapping: Mapping[int, int]
) -> bool | None:
    """Whether two units have one configuration under a mapping; None where they do not
    correspond."""
    if isinstance(one, Centre) and isinstance(two, Centre):
        return same_centre(one, two, dict(mapping))
    if isinstance(one, Geometry) and isinstance(two, Geometry):
        return same_geometry(one, two, dict(mapping))
    return None


def part_of(graph: Graph, within: frozenset[int] | None) -> Graph:
    """The graph of some whole components."""
    if within is None:
        return graph
    kept = tuple(a for a in graph.atoms if a in within)
    return Graph(
        kept,
        graph.element,
        graph.isotope,
        graph.charge,
        graph.hydrogens,
        {a: graph.near[a] for a in kept},
        {a: c for a, c in graph.centres.items() if a in within},
        {b: g for b, g in graph.bonds.items() if b <= within},
    )


def _centre(graph: Graph, atom: int) -> Centre | None:
    order = list(graph.near[atom])
    if len(order) == 3:
        order.append(HYDROGEN if graph.hydrogens[atom] else LONE_PAIR)
    return Centre(tuple(order), 1) if len(order) == 4 else None


def _geometry(graph: Graph, atoms: tuple[int, ...], near: tuple[int, int]) -> Geometry | None:
    if any(atom not in graph.near for atom in atoms):
        return None
    one, two = (a if a in graph.near else HYDROGEN for a in near)
    return Geometry((atoms[0], atoms[1]), (one, two), 1)


def _sense(unit: Centre | Geometry, first: tuple[int, int, int]) -> bool | None:
    """How the three bridges follow each other seen from the fourth ligand."""
    assert isinstance(unit, Centre)
    fourth = next(a for a in unit.order if a not in first)
    return same_centre(unit, Centre((fourth, *first), 1), {})


def _is_fluxional(graph: Graph, kind: str, atoms: tuple[int, ...]) -> bool:
    """A unit that proton transfer undoes: P or S with two oxygens of which one is acidic, =N–H,
    and C=N beside N–H, O–H or S–H, as in the standard InChI's mobile hydrogen."""
    if kind == "centre":
        atom = atoms[0]
        ends = [b for b in graph.near[atom] if len(graph.near[b]) == 1]
        ends = [b for b in ends if graph.element[b] in _CHALCOGENS]
        repeated = len({graph.element[b] for b in ends}) < len(ends)
        return graph.element[atom] in _ACIDIC and repeated
    for nitrogen, carbon in (atoms, atoms[::-1]):
        if graph.element[nitrogen] == 7:
            donors = [b for b in graph.near[carbon] if graph.element[b] in _DONORS]
            if graph.hydrogens[nitrogen] or any(graph.hydrogens[b] for b in donors):
                return True
    return False


def _ring_neighbours(mol: Chem.Mol) -> dict[int, frozenset[int]]:
    near: dict[int, set[int]] = {a.GetIdx(): set() for a in mol.GetAtoms()}
    for bond in mol.GetBonds():
        if bond.IsInRing():
            one, two = bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()
            near[one].add(two)
            near[two].add(one)
    return {atom: frozenset(others) for atom, others in near.items()}


def _unsure(
    mol: Chem.Mol,
    atoms: tuple[tuple[int, ...], ...],
    pairs: tuple[tuple[int, int], ...],
    number: Mapping[frozenset[int], int],
) -> str:
    said = []
    if any(frozenset((a,)) in number and frozenset((b,)) in number for a, b in pairs):
        said.append("small or bridged rings may not allow every combination")
    info = mol.GetRingInfo()
    for pair in atoms:
        if len(pair) == 2:
            bond = mol.GetBondBetweenAtoms(*pair)
            if bond.IsInRing() and info.MinBondRingSize(bond.GetIdx()) < _WIDE_RING:
                said.append("a double bond in a ring may not allow both geometries")
                break
            if any(_is_amidine(mol.GetAtomWithIdx(a)) for a in pair) and any(
                mol.GetAtomWithIdx(a).GetSymbol() == "N" for a in pair
            ):
                said.append("the geometry of an amidine's C=N is often not counted")
                break
    return "; ".join(said)


def _is_amidine(atom: Chem.Atom) -> bool:
    return atom.GetSymbol() == "C" and any(
        bond.GetBondTypeAsDouble() == 1 and bond.GetOtherAtom(atom).GetSymbol() == "N"
        for bond in atom.GetBonds()
    )
