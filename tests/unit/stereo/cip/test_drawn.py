"""Wedges and coordinates (IUPAC recommendations for drawn configurations, 2006, sections ST-1).

What those call ambiguous or contradictory gives no configuration, and what depends on it none.
Letters by hand: with the wedge towards the viewer, three drawn ligands and a hydrogen behind.
"""

from __future__ import annotations

import pytest

from dossiercheck.stereo.cip.drawn import can_be_centre
from dossiercheck.stereo.cip.engine import rank_all
from dossiercheck.stereo.cip.molecule import molecule_of
from dossiercheck.stereo.cip.source import source_of
from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.structure import Structure
from tests.cases.drawn import molblock

STAR = "C 0 0; N 0 1; O 0.9 -0.5; F -0.9 -0.5"  # F > O > N > H
TEE = "C 0 0; N 0 1; O 1 0; F -1 0"
FAN = "C 0 0; N 1 0; O 0.7 0.7; F 0.7 -0.7"
CROSS = "C 0 0; N 0 1; O 1 0; F -1 0; Cl 0 -1"  # Cl > F > O > N
TWO_WAYS = "the wedge stands where it can be read in two ways"
CANCEL = "the wedges contradict each other or cancel out"


def letters(structure: Structure) -> dict[tuple[int, ...], str]:
    return {one.unit.ends: one.descriptor for one in rank_all(source_of(structure))}


def read(atoms: str, bonds: str) -> tuple[dict[tuple[int, ...], str], dict[tuple[int, ...], str]]:
    """Letters, and units that are not clear with the reason."""
    structure = from_molblock(molblock(atoms, bonds))
    return letters(structure), dict(source_of(structure).unclear)


@pytest.mark.parametrize(
    ("atoms", "bonds", "letter"),
    [
        # F, O, N run counter-clockwise from the left: S with the hydrogen behind, R in front.
        (STAR, "1 2 1 1; 1 3 1; 1 4 1", "S"),
        (STAR, "1 2 1 6; 1 3 1; 1 4 1", "R"),
        # Any one of the three may carry the wedge, or all.
        (STAR, "1 2 1; 1 3 1 1; 1 4 1", "S"),
        (STAR, "1 2 1; 1 3 1; 1 4 1 1", "S"),
        (STAR, "1 2 1 1; 1 3 1 1; 1 4 1 1", "S"),
        # An arm of the T may, its stem may not (ST-1.1.10).
        (TEE, "1 2 1; 1 3 1 1; 1 4 1", "S"),
        # Four drawn ligands: one wedge, or wedges and hashes in turn (ST-1.1.5 ff.).
        (CROSS, "1 2 1 1; 1 3 1; 1 4 1; 1 5 1", "S"),
        (CROSS, "1 2 1 6; 1 3 1; 1 4 1; 1 5 1", "R"),
        (CROSS, "1 2 1 1; 1 3 1 6; 1 4 1 6; 1 5 1 1", "S"),
    ],
)
def test_a_clear_drawing(atoms: str, bonds: str, letter: str) -> None:
    assert read(atoms, bonds) == ({(0,): letter}, {})


@pytest.mark.parametrize(
    ("atoms", "bonds", "why"),
    [
        # Three bonds on one side, the middle one marked (ST-1.1.3).
        (FAN, "1 2 1 1; 1 3 1; 1 4 1", TWO_WAYS),
        (TEE, "1 2 1 1; 1 3 1; 1 4 1", TWO_WAYS),
        # Wedge beside wedge of four; wedge opposite hash; wedge and hash of three.
        (CROSS, "1 2 1 1; 1 3 1 1; 1 4 1; 1 5 1", CANCEL),
        (CROSS, "1 2 1 1; 1 5 1 6; 1 3 1; 1 4 1", CANCEL),
        (STAR, "1 2 1 1; 1 3 1 6; 1 4 1", CANCEL),
    ],
)
def test_an_unclear_drawing_gives_no_configuration(atoms: str, bonds: str, why: str) -> None:
    found, unclear = read(atoms, bonds)
    assert not any(found.values())
    assert unclear == {(0,): why}


@pytest.mark.parametrize(
    "bonds",
    [
        "1 2 1; 1 3 1; 1 4 1",  # no mark
        "1 2 1 4; 1 3 1; 1 4 1",  # wavy: unknown, or both
        "1 2 1 4; 1 3 1 1; 1 4 1",  # wavy speaks louder than a wedge beside it
        "2 1 1 1; 1 3 1; 1 4 1",  # a wedge speaks of its narrow end
    ],
)
def test_no_configuration_meant(bonds: str) -> None:
    assert read(STAR, bonds) == ({}, {})


# Pentane-2,3,4-triol: C1 here is the middle, whose letter rests on both others (P-92.6).
TRIOL = (
    "C 0 0; O 0 1; C 0.9 -0.5; C -0.9 -0.5; O 1.8 0; C 0.9 -1.5; O -1.8 0; C -0.9 -1.5",
    "1 2 1 1; 1 3 1; 1 4 1; 3 5 1 1; 3 6 1; 4 7 1 1; 4 8 1",
)


def test_what_depends_on_an_unclear_unit_is_in_doubt() -> None:
    atoms, bonds = TRIOL
    found, unclear = read(atoms, bonds)
    assert sorted(found.values()) == ["R", "S", "s"] or sorted(found.values()) == ["R", "S", "r"]
    assert not unclear
    # One end contradicts itself: the middle has no letter, the other end keeps its own.
    broken = from_molblock(molblock(atoms, bonds.replace("3 6 1;", "3 6 1 6;")))
    ranked = {one.unit.ends: one for one in rank_all(source_of(broken))}
    assert dict(source_of(broken).unclear) == {(2,): CANCEL}
    assert ranked[(0,)].descriptor == ""
    assert ranked[(0,)].doubt == "its ranking depends on a unit that is not clear"
    assert ranked[(3,)].descriptor == found[(3,)]
    assert not ranked[(3,)].doubt


@pytest.mark.parametrize(
    ("atoms", "bonds", "letter", "why"),
    [
        ("C 0 0; C 1 0; F -0.5 0.9; F 1.5 0.9", "1 2 2; 1 3 1; 2 4 1", "Z", ""),
        ("C 0 0; C 1 0; F -0.5 0.9; F 1.5 -0.9", "1 2 2; 1 3 1; 2 4 1", "E", ""),
        ("C 0 0; C 1 0; F -0.5 0.9; F 1.5 0.9", "1 2 2 3; 1 3 1; 2 4 1", "", ""),  # crossed
        ("C 0 0; C 1 0; F -0.5 0.9; F 1.5 0.9", "1 2 2; 1 3 1 4; 2 4 1", "", ""),  # wavy
        (
            "C 0 0; C 1 0; F -1 0; F 1.5 0.9",
            "1 2 2; 1 3 1; 2 4 1",
            "",
            "a ligand lies in line with the double bond",
        ),
        (
            "C 0 0; C 1 0; F -0.5 0.9; F 1.5 0.9; Cl -0.9 0.5",
            "1 2 2; 1 3 1; 2 4 1; 1 5 1",
            "",
            "both ligands of one end lie on the same side",
        ),
    ],
)
def test_double_bonds(atoms: str, bonds: str, letter: str, why: str) -> None:
    found, unclear = read(atoms, bonds)
    assert found == ({(0, 1): letter} if letter else {})
    assert unclear == ({(0, 1): why} if why else {})


def test_wedges_at_both_ends_of_an_axis_must_agree() -> None:
    # An allene seen from the side: F and H at C1, F and H at C3, wedges at both ends.
    atoms = "C 0 0; C 1 0; C 2 0; F -0.5 0.9; Cl -0.5 -0.9; F 2.5 0.9; Cl 2.5 -0.9"
    bonds = "1 2 2; 2 3 2; 1 4 1{}; 1 5 1; 3 6 1{}; 3 7 1"
    one, _ = read(atoms, bonds.format(" 1", ""))
    two, _ = read(atoms, bonds.format("", " 6"))
    assert set(one) == set(two) == {(0, 2)}
    assert {one[(0, 2)], two[(0, 2)]} <= {"M", "P"}
    both, unclear = read(atoms, bonds.format(" 1", " 6" if one != two else " 1"))
    assert both == {}
    assert unclear == {(0, 2): "the wedges at the two ends contradict each other"}


def holds(smiles: str, atom: int) -> bool:
    return can_be_centre(molecule_of(from_smiles(smiles).mol), atom)


@pytest.mark.parametrize(
    ("smiles", "atom", "expected"),
    [
        # A lone pair swings over on an amine, in a ring or not (P-93.2, common practice) …
        ("CN(CC)CCC", 1, False),
        ("CN1CCCC1C", 1, False),
        # … also where two rings share a bond only (1-azabicyclo[4.3.0]nonane) …
        ("C1CCN2CCCC2C1", 3, False),
        # … and is held in a ring of three and at the head of a bridge.
        ("CN1CC1C", 1, True),
        ("C1CC2CCN1CC2C", 5, True),
        ("C1N2CCC(C1)C2", 1, True),
        # Four ligands hold their places on N+.
        ("C[N+](CC)(CCC)CC(C)C", 1, True),
        ("C[N+]([O-])(CC)CCC", 1, True),
        # Phosphorus, arsenic, sulfur and selenium keep the lone pair.
        ("CP(CC)CCC", 1, True),
        ("C[As](CC)CCC", 1, True),
        ("CS(=O)CC", 1, True),
        ("C[S+](CC)CCC", 1, True),
        ("C[Se](=O)CC", 1, True),
        # Two equal single atoms, two hydrogens, or a double bond: no centre.
        ("CC(F)(F)O", 1, False),
        ("CCO", 1, False),
        ("CC(=O)O", 1, False),
    ],
)
def test_what_can_be_a_centre(smiles: str, atom: int, expected: bool) -> None:
    assert holds(smiles, atom) is expected
