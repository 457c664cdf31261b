"""The engine's budget, and letters as ranks and marks give them."""

from __future__ import annotations

from itertools import permutations

import pytest

from dossiercheck.stereo.cip.engine import BUDGET, MOLECULE_BUDGET, Ranked, rank_all
from dossiercheck.stereo.cip.source import source_of
from dossiercheck.stereo.cip.units import CENTRE, DOUBLE_BOND, Marked, parity
from dossiercheck.stereo.perception import from_smiles
from tests.benchmarks.descriptors import HARD

TOO_LARGE = "its digraph takes more steps than the budget allows"


def ranked(smiles: str, budget: int = BUDGET) -> list[Ranked]:
    return rank_all(source_of(from_smiles(smiles)), budget)


def test_the_stated_budget() -> None:
    """Steps of one tree, and of all trees of a molecule."""
    assert (BUDGET, MOLECULE_BUDGET) == (200_000, 600_000)


def test_a_cage_with_every_centre_marked_ends_in_doubt() -> None:
    found = ranked(HARD["dodecahedrane, every centre marked"])
    assert len(found) == 20
    # Whatever is not given up has a letter or ties; nothing is spent beyond the budget.
    assert any(one.doubt for one in found)
    assert {one.doubt for one in found} <= {"", TOO_LARGE}
    assert not any(one.descriptor and one.doubt for one in found)
    spent = sum(BUDGET - max(tree.left, 0) for one in found for tree in one.trees)
    assert spent <= len(found) * BUDGET
    assert all(tree.left <= BUDGET for one in found for tree in one.trees)


def test_a_peptide_of_sixty_residues_is_ranked_in_full() -> None:
    found = ranked(HARD["peptide of 60 residues"])
    assert [one.descriptor for one in found] == ["S"] * 60
    assert not any(one.doubt for one in found)


def test_a_small_budget_gives_up_and_a_larger_one_does_not() -> None:
    smiles = "CCCCCCCC[C@H](O)CCCCCCC"
    (given_up,) = ranked_within(smiles, 10)
    assert (given_up.descriptor, given_up.doubt) == ("", TOO_LARGE)
    (found,) = ranked(smiles)
    assert found.descriptor
    assert not found.doubt


def ranked_within(smiles: str, steps: int) -> list[Ranked]:
    return ranked(smiles, steps)


def test_a_long_chain_of_ties_does_not_recurse_too_deep() -> None:
    (one,) = ranked("C" * 1500 + "[C@H](O)" + "C" * 1500 + "F")
    assert one.descriptor or one.doubt == TOO_LARGE


@pytest.mark.parametrize(
    ("smiles", "why"),
    [
        ("C[C@H](C)O", "two ligands alike"),
        ("C[C@@H](O)[C@H](O)[C@H](O)C", "C3 between two R"),
        ("C/C=C(/C)C", "two ligands alike at one end"),
    ],
)
def test_a_mark_without_a_unit_has_no_letter_and_no_doubt(smiles: str, why: str) -> None:
    ties = [one for one in ranked(smiles) if not one.descriptor]
    assert len(ties) == 1, why
    assert not ties[0].doubt


def test_parity_is_that_of_exchanges() -> None:
    for order in permutations(range(4)):
        for one in range(4):
            for two in range(one):
                exchanged = list(order)
                exchanged[one], exchanged[two] = exchanged[two], exchanged[one]
                assert parity(order, range(4)) == -parity(exchanged, range(4))
    assert parity(range(4), range(4)) == 1


def test_ends_and_ligands_of_a_unit() -> None:
    centre = Marked(CENTRE, (3,), (0, 1, 2, -1), 1)
    assert (centre.ends, centre.at(3)) == ((3,), (0, 1, 2, -1))
    bond = Marked(DOUBLE_BOND, (1, 2), (0, -1, 3, -1), 1)
    assert (bond.ends, bond.at(1), bond.at(2)) == ((1, 2), (0, -1), (3, -1))
