"""Each sequence rule on one structure that needs it, and on one that the rule before decides.

Ranked by hand; sections of IUPAC 2013. The hand-ranked cases of `tests/cases/descriptors.toml`
show the letters; here it is the ranks and the rule that parts them.
"""

from __future__ import annotations

import pytest

from dossiercheck.stereo.cip.engine import Ranked, rank_all
from dossiercheck.stereo.cip.ranking import first_difference
from dossiercheck.stereo.cip.source import source_of
from dossiercheck.stereo.perception import from_smiles


def ranked(smiles: str, *atoms: int) -> Ranked:
    """The unit whose ends have these positions, from 1."""
    found = rank_all(source_of(from_smiles(smiles)))
    (one,) = [r for r in found if tuple(a + 1 for a in r.unit.ends) == atoms]
    return one


def order(smiles: str, *atoms: int) -> list[list[int]]:
    """Ligands by rank at each end, as positions; 0 for a hydrogen that is not written."""
    return [[b.node.atom + 1 for b in o.ranked] for o in ranked(smiles, *atoms).orders]


def rules(smiles: str, *atoms: int) -> list[tuple[str, int]]:
    """Rule and sphere of each step down the ranks."""
    return [(s.rule, s.depth) for o in ranked(smiles, *atoms).orders for s in o.steps]


@pytest.mark.parametrize(
    ("smiles", "atom", "ranks", "steps"),
    [
        # 1a, sphere 1: I > Br > Cl > H (P-92.2.1.1.1).
        ("Cl[C@H](Br)I", 2, [4, 3, 1, 0], [("1a", 1)] * 3),
        # 1a, sphere 2: {O,O,O} > {O,H,H} (P-92.2.1.1.2).
        ("N[C@@H](CO)C(=O)O", 2, [1, 5, 3, 0], [("1a", 1), ("1a", 2), ("1a", 1)]),
        # The first point of difference decides: {S,H,H} > {O,O,O}.
        ("N[C@@H](CS)C(=O)O", 2, [1, 3, 5, 0], [("1a", 1), ("1a", 2), ("1a", 1)]),
        # Sphere 3: {Cl,H,H} at one arm, {C,H,H} at the other, after {C,H,H} at both.
        ("CCC[C@H](O)CCCl", 4, [5, 6, 3, 0], [("1a", 1), ("1a", 3), ("1a", 1)]),
        # Sphere 4: two ethoxy arms of which one ends in bromine.
        ("CCO[C@H](C)OCCBr", 4, [6, 3, 5, 0], [("1a", 4), ("1a", 1), ("1a", 1)]),
        # Duplicates count: a vinyl group {C,C,H} ties with isopropyl {C,C,H} in sphere 2 and loses
        # in sphere 3: its sets are {C,H,H} and that of the duplicate, three phantoms, while
        # isopropyl has {H,H,H} twice: {C,H,H} is compared first and is higher.
        ("CC(C)[C@H](O)C=C", 4, [5, 6, 2, 0], [("1a", 1), ("1a", 3), ("1a", 1)]),
    ],
)
def test_atomic_number(
    smiles: str, atom: int, ranks: list[int], steps: list[tuple[str, int]]
) -> None:
    assert order(smiles, atom) == [ranks]
    assert rules(smiles, atom) == steps


def test_root_distance() -> None:
    # 1b, bicyclo[3.1.0]hex-2-ene at the bridgehead beside CH2 (P-92.2.2): {C,H,H} and {C,C,H} tie
    # in both arms. In sphere 3 the arm of the small ring has the root again, at distance 0; the
    # other has the duplicate of a double bond, which counts from its carbon in sphere 2.
    smiles = "C1C=C[C@@H]2[C@H]1C2"
    assert order(smiles, 5) == [[4, 6, 1, 0]]
    assert rules(smiles, 5) == [("1a", 2), ("1b", 3), ("1a", 1)]


@pytest.mark.parametrize(
    ("smiles", "atom", "ranks", "step"),
    [
        # 2: only between isotopes (P-92.3): 2H above H, 13C above C, in sphere 1 and further out.
        ("C[C@H](O)[2H]", 2, [3, 1, 4, 0], ("2", 1)),
        ("C[C@@H](O)[13CH3]", 2, [3, 4, 1, 0], ("2", 1)),
        ("C[C@@H](O)C[2H]", 2, [3, 4, 1, 0], ("2", 2)),
        # 18O below the atomic number of F: mass does not come first.
        ("[18OH][C@H](F)Cl", 2, [4, 3, 1, 0], ("1a", 1)),
        # A heavy isotope in a far sphere does not make up for atomic number in a nearer one.
        ("CC[C@H](O)C([2H])([2H])[2H]", 3, [4, 2, 5, 0], ("1a", 2)),
    ],
)
def test_mass(smiles: str, atom: int, ranks: list[int], step: tuple[str, int]) -> None:
    assert order(smiles, atom) == [ranks]
    assert step in rules(smiles, atom)


@pytest.mark.parametrize(
    ("smiles", "atoms", "ranks", "rule"),
    [
        # 3: Z before E (P-92.4.2).
        ("C/C=C\\[C@@H](O)/C=C/C", (4,), [[5, 3, 6, 0]], "3"),
        # 4b: like before unlike (P-92.5.2): in pentane-2,3,4-triol's homologue C4 of seven.
        ("C[C@@H](F)[C@@H](F)[C@@H](O)[C@@H](F)[C@H](F)C", (6,), None, "4b"),
        # 5: R before S (P-92.6): the middle of a meso triol.
        ("C[C@@H](O)[C@H](O)[C@@H](O)C", (4,), [[5, 2, 6, 0]], "5"),
        # 5 at a double bond: R before S gives e or z.
        ("C[C@H](F)/C(=C/Cl)[C@@H](C)F", (4, 5), None, "5"),
    ],
)
def test_stereogenic_units_in_the_branches(
    smiles: str, atoms: tuple[int, ...], ranks: list[list[int]] | None, rule: str
) -> None:
    assert rule in [step for step, _ in rules(smiles, *atoms)]
    if ranks is not None:
        assert order(smiles, *atoms) == ranks


def test_r_before_s_by_the_letters_of_the_branches() -> None:
    one = ranked("C[C@@H](O)[C@H](O)[C@@H](O)C", 4)
    (ligands,) = one.orders
    assert [b.node.aux for b in ligands.ranked] == ["", "R", "S", ""]


def test_a_lone_pair_is_last_and_not_in_the_order() -> None:
    one = ranked("C[S@](=O)CC", 2)
    assert [b.node.atom + 1 for b in one.orders[0].ranked] == [3, 4, 1]
    assert len(one.unit.ligands) == 4


def test_ligands_that_tie_stay_in_one_group_and_give_no_letter() -> None:
    one = ranked("C[C@H](O)C", 2)
    assert [len(group) for group in one.orders[0].groups] == [1, 2, 1]
    assert not one.orders[0].unique
    assert (one.descriptor, one.doubt) == ("", "")


def test_the_sphere_of_a_first_difference() -> None:
    assert first_difference(2.0, 1.0) == 1
    assert first_difference([1, 2, 3], [1, 2, 0]) == 3
    assert first_difference([1, 2, 3], [0, 2, 3]) == 1
