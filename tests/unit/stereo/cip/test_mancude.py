"""Mean duplicates of mancude rings (IUPAC 2013, P-92.1.4.4), and where there are none."""

from __future__ import annotations

import pytest
from rdkit import Chem

from dossiercheck.stereo.cip.molecule import molecule_of
from tests.property.pool import dictionary, handbook
from tests.unit.stereo.anew import prepared


def means(smiles: str) -> list[float]:
    return molecule_of(Chem.MolFromSmiles(smiles)).duplicate


@pytest.mark.parametrize(
    ("smiles", "expected"),
    [
        # Benzene: carbon on either side.
        ("c1ccccc1", [6, 6, 6, 6, 6, 6]),
        # Pyridine: at C2 and C6 the double bond goes to N or C, 6½; at N to C on either side.
        ("n1ccccc1", [6, 6.5, 6, 6, 6, 6.5]),
        # Pyrimidine: at C2 to N either way, 7; at C4 and C6 to N or C.
        ("c1ncccn1", [7, 6, 6.5, 6, 6.5, 6]),
        # Pyrylium: oxygen or carbon, 7 (no nitrogen, though the number is nitrogen's).
        ("[o+]1ccccc1", [6, 7, 6, 6, 6, 7]),
        # Quinoline, the recommendations' example: at C8a to C8, C4a or N, (6 + 6 + 7)/3 = 6⅓.
        ("n1ccc2ccccc2c1", [6, 6.5, 6, 6, 6, 6, 6, 6, 6, 6.5]),
        ("n1cccc2ccccc12", [6, 6.5, 6, 6, 6, 6, 6, 6, 6, 19 / 3]),
        # Azulene and cyclooctatetraene: every double bond moves, aromatic or not.
        ("C1=CC=C2C=CC=C2C=C1", [6] * 10),
        ("C1=CC=CC=CC=C1", [6] * 8),
        # Pentalene: two ways through eight atoms around, none of them across the middle.
        ("C1=CC2=CC=CC2=C1", [6] * 8),
        # One Kekulé structure only: no mean, each duplicate is that of its double bond.
        ("c1cnc[nH]1", [0] * 5),
        ("c1ccsc1", [0] * 5),
        ("C1=CCC=C1", [0] * 5),
        ("O=C1C=CC=CC=C1", [0] * 8),
        ("C=C1C=CC(=C)C=C1", [0] * 8),
        # A chain of conjugated double bonds is no ring.
        ("C=CC=CC=C", [0] * 6),
    ],
)
def test_means(smiles: str, expected: list[float]) -> None:
    assert means(smiles) == pytest.approx(expected)


def test_the_double_bond_of_imidazole_stays_where_the_hydrogen_puts_it() -> None:
    # C4 and C5 of an imidazole differ: N3 has a double bond to C2, and C4 one to C5.
    molecule = molecule_of(Chem.MolFromSmiles("c1cnc[nH]1"))
    doubles = {(a, b) for a, near in enumerate(molecule.near) for b in near if near[b] == 2}
    assert doubles == {(0, 1), (1, 0), (2, 3), (3, 2)}


def test_means_are_those_of_all_kekule_structures_tried_one_by_one() -> None:
    found = 0
    for smiles in (*handbook(), *dictionary(150)):
        mol = Chem.MolFromSmiles(smiles)
        _, expected = prepared(mol)
        assert molecule_of(mol).duplicate == pytest.approx(
            [expected.get(atom, 0) for atom in range(mol.GetNumAtoms())]
        ), smiles
        found += any(value not in (0, 6) for value in expected.values())
    assert found > 20
