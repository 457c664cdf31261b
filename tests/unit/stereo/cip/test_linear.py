r"""Marks of a SMILES read from its text (OpenSMILES specification, chirality and / \ sections).

Every pair writes one molecule in two ways; the letters of each are ranked by hand, and the two
readings must agree whatever the writing.
"""

from __future__ import annotations

import pytest

from dossiercheck.stereo.cip.engine import rank_all
from dossiercheck.stereo.cip.linear import LONE_PAIR, written
from dossiercheck.stereo.cip.molecule import HYDROGEN
from dossiercheck.stereo.cip.source import source_of
from dossiercheck.stereo.perception import from_smiles


def letters(smiles: str) -> list[str]:
    return sorted(r.descriptor for r in rank_all(source_of(from_smiles(smiles))) if r.descriptor)


@pytest.mark.parametrize(
    ("smiles", "expected"),
    [
        # Seen from N the others (H, CH3, COOH) follow counter-clockwise: S-alanine, L.
        ("N[C@@H](C)C(=O)O", ["S"]),
        ("N[C@@]([H])(C)C(=O)O", ["S"]),
        ("[H][C@@](C(=O)O)(C)N", ["S"]),
        ("[C@H](N)(C)C(=O)O", ["S"]),  # the hydrogen first where nothing stands before
        ("OC(=O)[C@@H](N)C", ["S"]),
        # A ring closure stands where its digit stands, not where the other atom is written.
        ("C1CO[C@@H]1F", ["R"]),
        ("O1CC[C@@H]1F", ["S"]),
        ("[C@H]1(F)CCO1", ["S"]),
        ("F[C@H]1CCO1", ["S"]),
        ("F[C@H]%10CCO%10", ["S"]),
        ("F[C@H]%(100)CCO%(100)", ["S"]),
        # A closing digit at the centre, and two digits at one atom.
        ("C1[C@@H](F)OC1", ["R"]),
        # Lone pairs stand where the hydrogen would.
        ("C[S@](=O)CC", ["S"]),
        ("[S@@](C)(=O)CC", ["S"]),
        ("O=[S@@](C)CC", ["S"]),
    ],
)
def test_centres(smiles: str, expected: list[str]) -> None:
    assert letters(smiles) == expected


@pytest.mark.parametrize(
    ("smiles", "expected"),
    [
        ("F/C=C/F", ["E"]),
        ("F/C=C\\F", ["Z"]),
        ("C(/F)=C/F", ["Z"]),  # written from the carbon the slash is turned round
        ("F\\C=C\\F", ["E"]),
        ("F/C(Cl)=C/F", ["Z"]),  # the fluorines stand apart, and chlorine ranks higher
        ("FC(/Cl)=C/F", ["Z"]),
        # A direction at the opening or at the closing digit of a ring, the second turned round.
        ("F/C=C1/CCCC[C@H]1C", ["R", "Z"]),
        ("F/C=C/1CCCC[C@H]1C", ["E", "R"]),
        ("F/C=C1CCCC[C@H]\\1C", ["E", "R"]),
        # Conjugated: one slash serves two double bonds.
        ("C/C=C/C=C\\C", ["E", "Z"]),
        # One end without a mark says nothing.
        ("F/C=CF", []),
        ("FC=CF", []),
        # Rings below eight members hold the double bond Z: no unit (P-93.5.1.4.1).
        ("C1CCC/C=C/1", []),
        ("C1CCCCC/C=C/1", ["E"]),
        ("C1CCCCC/C=C\\1", ["Z"]),
        # Nitrogen's lone pair is the fourth.
        ("C/C=N/O", ["E"]),
        ("C/C=N\\O", ["Z"]),
        ("C/N=N/C", ["E"]),
        # A row of three double bonds is planar, E or Z (P-93.4.2).
        ("C/C=C=C=C/C", ["E"]),
        ("C/C=C=C=C\\C", ["Z"]),
    ],
)
def test_double_bonds(smiles: str, expected: list[str]) -> None:
    assert letters(smiles) == expected


@pytest.mark.parametrize(
    ("smiles", "expected"),
    [
        # Seen from the first methyl: H, H, CH3 counter-clockwise, so the way from near to far
        # methyl is counter-clockwise.
        ("CC=[C@]=CC", ["M"]),
        ("CC=[C@@]=CC", ["P"]),
        ("C(C)=[C@@]=CC", ["M"]),
        ("C([H])(C)=[C@@]=CC", ["M"]),
        ("OC(F)=[C@AL1]=C(F)O", ["M"]),
        ("OC(F)=[C@AL2]=C(F)O", ["P"]),
        # Five double-bonded atoms turn as three do.
        ("CC=C=[C@]=C=CC", ["M"]),
    ],
)
def test_axes(smiles: str, expected: list[str]) -> None:
    assert letters(smiles) == expected


@pytest.mark.parametrize(
    ("smiles", "expected"),
    [
        # An amine inverts, in a ring or not: its mark is no configuration (common practice).
        ("C[N@](CC)CCC", []),
        ("C[N@]1CCC[C@H]1C", ["R"]),
        ("C[N@H]CC", []),
        # In a ring of three, at the head of a bridge, or with four ligands it is one.
        ("C[N@]1CC1C", ["S"]),
        ("C1CC[N@@]2CCC1C2", ["R"]),
        ("C[N@+](CC)(CCC)CCCC", ["S"]),
        # A phosphane and a sulfoxide keep theirs.
        ("CC[P@](C)c1ccccc1", ["S"]),
        ("C[S@](=O)CC", ["S"]),
    ],
)
def test_a_lone_pair_that_is_held_or_not(smiles: str, expected: list[str]) -> None:
    assert letters(smiles) == expected


def test_neighbours_in_written_order() -> None:
    found = written("C1O[C@H]1F")
    assert found.near[2] == [1, HYDROGEN, 0, 3]
    assert found.near[0] == [2, 1]  # the digit is written before O
    assert found.sense == {2: 1}
    assert written("F/C=C\\F").up == {(0, 1): 1, (1, 0): -1, (2, 3): -1, (3, 2): 1}
    assert LONE_PAIR not in found.near[0]


def test_two_parts_do_not_join() -> None:
    assert written("CC.O").near == [[1], [0], []]
