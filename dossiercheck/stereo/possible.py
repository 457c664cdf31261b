"""Which atoms and double bonds of a constitution can be stereogenic, and what holds them."""

from __future__ import annotations

from collections.abc import Mapping

from rdkit import Chem

from dossiercheck.stereo.cages import cages
from dossiercheck.stereo.cip.molecule import HYDROGEN, LONE_PAIR
from dossiercheck.stereo.graph import (
    Centre,
    Geometry,
    Graph,
    graph_of,
    same_centre,
)
from dossiercheck.stereo.space import Space, moves_of, part_of
from dossiercheck.stereo.structure import Structure, is_pyramidal_nitrogen

_ACIDIC = frozenset((15, 16, 33, 34, 51, 52))
_CHALCOGENS = frozenset((8, 16, 34))
_DONORS = _CHALCOGENS | {7}
# B, C, N, Si, P, S, Ge, As, Se: tetrahedral, or pyramidal with a lone pair.
_USUAL = frozenset((5, 6, 7, 14, 15, 16, 32, 33, 34))
# Rings with a double bond of either geometry: from twelve atoms on nothing stands in its way.
_WIDE_RING = 12


def space_of(structure: Structure, within: frozenset[int] | None = None) -> Space:
    """The space of a structure's constitution, or of some of its atoms (whole components); what
    is marked in it has no influence. Raises `symmetry.TooSymmetric`."""
    bare = Chem.Mol(structure.mol)
    Chem.RemoveStereochemistry(bare)
    flat = Structure(bare, "")
    graph = part_of(graph_of(flat), within)
    found: list[tuple[tuple[int, ...], Centre | Geometry]] = []
    left_out: list[tuple[int, ...]] = []
    imines: list[Geometry] = []
    rings = _ring_neighbours(bare)
    for kind, atoms, near in flat.possible:
        if atoms[0] not in graph.near:
            continue
        unit = _centre(graph, atoms[0]) if kind == "centre" else _geometry(graph, atoms, near)
        if unit is None:
            continue
        if kind != "centre" and _is_imine(graph, atoms):
            assert isinstance(unit, Geometry)
            imines.append(unit)
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
        tuple(imines),
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
    """A unit that proton transfer undoes: N⁺–H, P or S with two oxygens of which one is acidic, C=N
    beside N–H, O–H or S–H or with both N–H and N, as in the standard InChI's mobile hydrogen."""
    if kind == "centre":
        atom = atoms[0]
        if graph.element[atom] == 7 and graph.hydrogens[atom]:
            return True
        ends = [b for b in graph.near[atom] if len(graph.near[b]) == 1]
        ends = [b for b in ends if graph.element[b] in _CHALCOGENS]
        repeated = len({graph.element[b] for b in ends}) < len(ends)
        return graph.element[atom] in _ACIDIC and repeated
    return any(
        graph.element[nitrogen] == 7
        and any(
            graph.hydrogens[nitrogen] or graph.hydrogens[donor]
            for donor in graph.near[carbon]
            if donor != nitrogen and graph.element[donor] in _DONORS
        )
        for nitrogen, carbon in (atoms, atoms[::-1])
    )


def _is_imine(graph: Graph, atoms: tuple[int, ...]) -> bool:
    """=N–H with no atom beside it to which the hydrogen could go: it turns over freely, and is
    not counted (common practice)."""
    return not _is_fluxional(graph, "double bond", atoms) and any(
        graph.element[a] == 7 and graph.hydrogens[a] and not graph.charge[a] for a in atoms
    )


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
    if any(len(a) == 1 and mol.GetAtomWithIdx(a[0]).GetAtomicNum() not in _USUAL for a in atoms):
        said.append("a centre at an element whose geometry may be another")
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
