"""Words for relative arrangement.

Ephedrine (1R,2S) is erythro, pseudoephedrine threo; D- and L-alanine, (R) and (S); but-2-ene:
textbook values, from memory. A ring's cis and trans follow from the drawing of the SMILES.
"""

from __future__ import annotations

import pytest

from dossiercheck.stereo.arrangement import arrangement
from dossiercheck.stereo.perception import from_smiles


@pytest.mark.parametrize(
    ("smiles", "word", "expected"),
    [
        ("CN[C@@H](C)[C@H](O)c1ccccc1", "threo", "erythro"),
        ("CN[C@@H](C)[C@@H](O)c1ccccc1", "threo", "threo"),
        ("CN[C@H](C)[C@@H](O)c1ccccc1", "erythro", "erythro"),
        ("N[C@@H](C)C(=O)O", "D", "L"),
        ("N[C@H](C)C(=O)O", "D", "D"),
        ("N[C@@H](CS)C(=O)O", "L", "L"),
        ("C/C=C/C", "cis", "trans"),
        ("C/C=C\\C", "cis", "cis"),
        ("C[C@@H]1CCCC[C@@H]1O", "cis", "cis"),
        ("C[C@@H]1CCCC[C@H]1O", "cis", "trans"),
        ("OC(=O)[C@@H]1C[C@H]1C(=O)O", "trans", "trans"),
    ],
)
def test_decided(smiles: str, word: str, expected: str) -> None:
    assert arrangement(from_smiles(smiles), word)[0] == expected


def test_the_mirror_image_is_as_cis_as_the_other() -> None:
    for smiles in ("C[C@@H]1CCCC[C@@H]1O", "C[C@H]1CCCC[C@H]1O"):
        assert arrangement(from_smiles(smiles), "trans")[0] == "cis"


@pytest.mark.parametrize(
    ("smiles", "word"),
    [
        ("CC1CCCCC1O", "cis"),
        ("C[C@@H]1C[C@H](C)C[C@@H](O)C1", "cis"),
        ("C/C=C/[C@@H]1CCCC[C@@H]1O", "cis"),
        ("C/C(F)=C/C", "cis"),
        ("C[C@@]1(F)CCCC[C@@H]1O", "cis"),
        ("CC(O)C(N)C", "threo"),
        ("C[C@@H](O)C[C@@H](N)C", "threo"),
        ("N[C@@H](C)C(=O)N[C@@H](C)C(=O)O", "L"),
        ("C[C@@H](O)CC", "D"),
        ("O[C@@H]1[C@@H](O)[C@H](O)OC[C@H]1O", "β"),
    ],
)
def test_left_open(smiles: str, word: str) -> None:
    assert arrangement(from_smiles(smiles), word) == ("", ())
