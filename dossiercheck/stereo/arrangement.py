"""Words for relative arrangement, decided by geometry: cis and trans, threo and erythro, D and L.

IUPAC Basic Terminology of Stereochemistry (1996): "cis, trans" for ligands on the sides of a ring
or double bond, "erythro, threo" for two adjacent centres in a Fischer projection; D and L of an
α-amino acid by the IUPAC-IUB recommendations 3AA-3 (1983). Decided only where one pair of units,
or one centre, can be meant and each of its ends has a hydrogen; else "" is returned.
"""

from __future__ import annotations

from dossiercheck.stereo.cip.molecule import HYDROGEN
from dossiercheck.stereo.cip.units import parity
from dossiercheck.stereo.graph import Centre, Graph, graph_of
from dossiercheck.stereo.structure import Structure

PAIRS = (frozenset(("cis", "trans")), frozenset(("threo", "erythro")), frozenset("DL"))


def arrangement(structure: Structure, word: str) -> tuple[str, tuple[int, ...]]:
    """What the structure is where `word` is one of two opposites, and the atoms (0-based) that
    decide; ("", ()) where geometry alone does not decide for certain."""
    if structure.doubt or (structure.groups and word in "DL"):
        return "", ()
    graph = graph_of(structure)
    units = {unit.atoms[0] for unit in structure.units if unit.kind == "centre"}
    open_ones = {unit.atoms[0] for unit in structure.undefined if unit.kind == "centre"}
    if word in ("cis", "trans"):
        return _cis_or_trans(structure, graph, units | open_ones)
    if word in ("threo", "erythro"):
        return _threo_or_erythro(structure, graph, units | open_ones)
    if word in ("D", "L"):
        return _amino_acid(structure, graph)
    return "", ()


def sense(centre: Centre, order: tuple[int, ...]) -> int:
    """+1 where seen from the first of `order` the others follow counter-clockwise, -1 where
    clockwise. `order` holds the centre's own neighbours."""
    return centre.sign * parity(order, centre.order)


def _cis_or_trans(
    structure: Structure, graph: Graph, centres: set[int]
) -> tuple[str, tuple[int, ...]]:
    bonds = [unit for unit in (*structure.units, *structure.undefined) if unit.kind != "centre"]
    rings = [tuple(ring) for ring in structure.mol.GetRingInfo().AtomRings()]
    pairs = []
    for ring in rings:
        inside = [atom for atom in ring if atom in centres]
        if len(inside) >= 2:
            pairs.append((ring, inside))
    if len(pairs) + len(bonds) != 1:
        return "", ()
    if bonds:
        found = graph.bonds.get(frozenset(bonds[0].atoms))
        heavy = [
            sum(graph.element[b] > 1 for b in graph.near[a]) + graph.hydrogens[a]
            for a in bonds[0].atoms
        ]
        single = all(graph.hydrogens[a] == 1 for a in bonds[0].atoms)
        if found is None or not single or heavy != [3, 3]:
            return "", ()
        return ("cis" if found.sign > 0 else "trans"), bonds[0].atoms
    ring, inside = pairs[0]
    if len(inside) != 2:
        return "", ()
    senses = [_over_ring(graph, ring, atom) for atom in inside]
    if 0 in senses:
        return "", ()
    return ("cis" if senses[0] == senses[1] else "trans"), tuple(inside)


def _over_ring(graph: Graph, ring: tuple[int, ...], atom: int) -> int:
    """On which side of the ring, walked in its order, the one substituent beside H stands."""
    at = ring.index(atom)
    before, after = ring[at - 1], ring[(at + 1) % len(ring)]
    return _beside(graph, atom, before, after)


def _beside(graph: Graph, atom: int, before: int, after: int) -> int:
    """The side of the substituent at a centre with a hydrogen, between two others; 0 for none."""
    centre = graph.centres.get(atom)
    if centre is None or HYDROGEN not in centre.order:
        return 0
    others = [ligand for ligand in centre.order if ligand not in (before, after, HYDROGEN)]
    if len(others) != 1:
        return 0
    return sense(centre, (before, others[0], after, HYDROGEN))


def _threo_or_erythro(
    structure: Structure, graph: Graph, centres: set[int]
) -> tuple[str, tuple[int, ...]]:
    if len(centres) != 2:
        return "", ()
    one, two = sorted(centres)
    if two not in graph.near[one] or structure.mol.GetBondBetweenAtoms(one, two).IsInRing():
        return "", ()
    ends = []
    for atom, partner in ((one, two), (two, one)):
        carbons = [b for b in graph.near[atom] if b != partner and graph.element[b] == 6]
        others = [b for b in graph.near[atom] if graph.element[b] not in (1, 6)]
        if len(carbons) != 1 or len(others) != 1:
            return "", ()
        ends.append(carbons[0])
    senses = _beside(graph, one, ends[0], two), _beside(graph, two, one, ends[1])
    if 0 in senses:
        return "", ()
    return ("erythro" if senses[0] == senses[1] else "threo"), (one, two)


def _amino_acid(structure: Structure, graph: Graph) -> tuple[str, tuple[int, ...]]:
    found = []
    for atom, centre in graph.centres.items():
        if HYDROGEN not in centre.order:
            continue
        heavy = [ligand for ligand in centre.order if ligand >= 0]
        nitrogen = [b for b in heavy if graph.element[b] == 7]
        carboxyl = [b for b in heavy if _is_carboxyl(graph, b)]
        rest = [b for b in heavy if b not in nitrogen and b not in carboxyl]
        if len(nitrogen) == len(carboxyl) == len(rest) == 1 and graph.element[rest[0]] == 6:
            order = (HYDROGEN, carboxyl[0], rest[0], nitrogen[0])
            found.append((atom, "L" if sense(centre, order) < 0 else "D"))
    if len(found) != 1 or sum(unit.kind == "centre" for unit in structure.units) != 1:
        return "", ()
    return found[0][1], (found[0][0],)


def _is_carboxyl(graph: Graph, atom: int) -> bool:
    if graph.element[atom] != 6:
        return False
    oxygens = [order for b, order in graph.near[atom].items() if graph.element[b] == 8]
    return len(oxygens) == 2 and 2.0 in oxygens
