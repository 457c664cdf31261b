"""The hierarchical digraph: duplicates, spheres, root distances (IUPAC 2013, P-92.1.4)."""

from __future__ import annotations

import pytest
from rdkit import Chem

from dossiercheck.stereo.cip.molecule import HYDROGEN, molecule_of
from dossiercheck.stereo.cip.ranking import extend
from dossiercheck.stereo.cip.tree import MULTIPLE, REAL, RING, Branch, Node, TooLarge, Tree

KINDS = {REAL: "", RING: "ring", MULTIPLE: "multiple"}


def tree(smiles: str, root: int, budget: int = 1000) -> Tree:
    return Tree(molecule_of(Chem.MolFromSmiles(smiles)), root, budget)


def nodes(branches: list[Branch]) -> list[tuple[int, str, float]]:
    """Atom, kind, atomic number."""
    return [(b.node.atom, KINDS[b.node.kind], b.number) for b in branches]


def child(branch: Branch, atom: int) -> Node:
    return next(b for b in branch.below() if isinstance(b, Node) and b.atom == atom and not b.kind)


def test_what_hangs_from_an_atom() -> None:
    # Lactic acid from its centre: C, O, C and one hydrogen.
    root = tree("CC(O)C(=O)O", 1).root
    assert nodes(root.below()) == [(0, "", 6), (2, "", 8), (3, "", 6), (HYDROGEN, "", 1)]
    # The acid's carbon has the doubly bonded oxygen twice, the oxygen its carbon again.
    acid = child(root, 3)
    assert nodes(acid.below()) == [(4, "", 8), (4, "multiple", 8), (5, "", 8)]
    assert nodes(child(acid, 4).below()) == [(3, "multiple", 6)]
    assert acid.sphere == 1
    assert child(acid, 4).sphere == 2


def test_a_triple_bond_has_two_duplicates_at_each_end() -> None:
    root = tree("CC(O)C#N", 1).root
    nitrile = child(root, 3)
    assert nodes(nitrile.below()) == [(4, "", 7), (4, "multiple", 7), (4, "multiple", 7)]
    assert nodes(child(nitrile, 4).below()) == [(3, "multiple", 6)] * 2


def test_a_ring_is_cut_where_it_closes_and_a_duplicate_has_nothing_below() -> None:
    # Cyclopropane from C0: C1, C2 and then C0 again.
    root = tree("C1CC1", 0).root
    last = child(child(root, 1), 2)
    (closing,) = [b for b in last.below() if b.node.atom == 0]
    assert closing.node.kind == RING
    assert closing.node.sphere == 3
    assert closing.below() == []
    # Its root distance is that of the atom it repeats, the root's (Rule 1b, Hanson et al. 2018).
    assert closing.node.nearness == 0


def test_root_distances_of_duplicates() -> None:
    # A ring that closes on an atom away from the root: C1 stands in sphere 1.
    root = tree("CC1CC1", 0).root
    far = child(child(child(root, 1), 2), 3)
    (closing,) = [b for b in far.below() if b.node.atom == 1]
    assert (closing.node.kind, closing.node.nearness, closing.node.sphere) == (RING, 1, 4)
    # A multiple bond's duplicate counts from the atom it is attached to.
    ene = child(tree("CC=C", 0).root, 1)
    (copy,) = [b for b in ene.below() if b.node.kind == MULTIPLE]
    assert (copy.node.nearness, copy.node.sphere) == (1, 2)


def test_a_mancude_atom_has_one_mean_duplicate() -> None:
    ring = child(tree("Cc1ccccn1", 0).root, 1)
    assert nodes(ring.below()) == [(2, "", 6), (6, "", 7), (1, "multiple", 6.5)]


def test_d_orbitals_are_left_out() -> None:
    # Sulfoxides and phosphates count as singly bonded (P-92.1.4.2).
    for smiles, root, expected in (("CS(=O)C", 0, 2), ("COP(=O)(O)O", 1, 3)):
        branch = child(tree(smiles, root).root, root + 1)
        assert [b.node.kind for b in branch.below()] == [REAL] * expected


def test_the_way_back_up_is_a_branch_too() -> None:
    root = tree("CC(O)C(N)C", 1).root
    up = child(root, 3).up()
    assert up.node is root
    assert nodes(up.below()) == [(0, "", 6), (2, "", 8), (HYDROGEN, "", 1)]
    # From two steps down it goes on over the step before.
    further = child(child(root, 3), 5).up()
    assert {b.node.atom for b in further.below()} == {4, HYDROGEN, 1}


def test_spheres_are_sets_in_order_of_rank() -> None:
    # Beta-alanine's C3 arm seen from the nitrogen: {C,H,H}, {C,H,H}, {O,O,O}, {C,H}.
    branch = child(tree("NCCC(=O)O", 0).root, 1)
    extend(branch, 5)
    assert branch.levels == [
        ((6,),),
        ((6, 1, 1),),
        ((6, 1, 1), (), ()),
        ((8, 8, 8), (), ()),
        ((6,), (1,), ()),
        ((), ()),
    ]


def test_the_budget_counts_what_is_unfolded() -> None:
    small = tree("CCCCCCCCCC", 0, budget=8)
    with pytest.raises(TooLarge):
        small.unfold_all()
    assert len(tree("CCCCCCCCCC", 0).unfold_all()) == 10
