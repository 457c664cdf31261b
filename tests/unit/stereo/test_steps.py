"""Retention and inversion by arrangement. The compounds are simple ones; the outcome follows from
the SMILES: equal marks with the exchanged ligand in the same place of the text are retention."""

from __future__ import annotations

import pytest

from dossiercheck.stereo.perception import from_smiles
from dossiercheck.stereo.steps import compare_step


@pytest.mark.parametrize(
    ("before", "after", "expected", "letters"),
    [
        ("CC[C@H](C)Br", "CC[C@H](C)N", "retention", "SS"),
        ("CC[C@H](C)Br", "CC[C@@H](C)N", "inversion", "SR"),
        ("C[C@H](O)c1ccccc1", "C[C@@H](Cl)c1ccccc1", "inversion", "SR"),
        # Only the rank changes: bromine on the neighbouring carbon.
        ("C[C@H](CO)COc1ccccc1", "C[C@H](CBr)COc1ccccc1", "retention", "RS"),
        # And here the letter stays although the centre is inverted.
        ("C[C@H](CO)COc1ccccc1", "C[C@@H](CBr)COc1ccccc1", "inversion", "RR"),
        ("C[C@H](O)c1ccccc1", "C[C@H](OC(C)=O)c1ccccc1", "retention", "SS"),
    ],
)
def test_outcomes(before: str, after: str, expected: str, letters: str) -> None:
    one, two = from_smiles(before), from_smiles(after)
    assert "".join(unit.descriptor for s in (one, two) for unit in s.units) == letters
    assert compare_step(one, two).kind == expected


@pytest.mark.parametrize(
    ("before", "after"),
    [
        ("CC(O)CC", "C[C@@H](Br)CC"),
        ("C[C@H](O)CC |&1:1|", "C[C@@H](Br)CC"),
        ("C[C@H](O)C(=O)O", "c1ccncc1"),
        ("C[C@H](O)[C@H](C)Br", "C[C@H](N)[C@H](C)I"),
    ],
)
def test_undetermined_where_nothing_can_be_laid_on(before: str, after: str) -> None:
    found = compare_step(from_smiles(before), from_smiles(after))
    assert found.kind == ""
    assert found.note
