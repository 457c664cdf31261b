"""Descriptors and open units in every form of a structure; letters as `tests/cases` has them.

The cases themselves, in the form in which they are written, are run by
`tests/cases/test_descriptors.py`.
"""

from __future__ import annotations

from typing import Any

import pytest

from dossiercheck.stereo.perception import from_molblock, from_smiles
from tests.benchmarks.descriptors import HARD
from tests.cases.hand_ranked import CASES, labels
from tests.unit.stereo.forms import descriptors, in_space, letters, open_units, v2000, v3000

CARRIED = [case for case in CASES if "smiles" in case and "library" not in case]
# A drawn selenoxide and a deuterium that alone makes a double bond stereogenic are not seen by the
# library; lone pairs at a phosphane, an arsane and a bridgehead amine are left open where only
# coordinates say how they are built.
UNDRAWN = {"methyl phenyl selenoxide", "(Z)-(2-2H)styrene"}
NOT_FROM_SPACE = {
    "ethyl(methyl)phenylphosphane",
    "ethyl(methyl)phenylarsane",
    "quinine, the bridgehead nitrogen marked too",
    "(Z)-(2-2H)styrene",
    "manxyl against a tris(cyclobutylpropyl)methyl",  # no coordinates are found
}
DRAWN = [case for case in CARRIED if case["name"] not in UNDRAWN]
IN_SPACE = [case for case in CARRIED if case["name"] not in NOT_FROM_SPACE]


def named(cases: list[dict[str, Any]]) -> Any:
    return pytest.mark.parametrize("case", cases, ids=[case["name"] for case in cases])


@named(DRAWN)
def test_a_drawing_says_the_same_as_the_notation(case: dict[str, Any]) -> None:
    smiles = case["smiles"]
    for block in (v2000(smiles), v3000(smiles), v2000(smiles, hydrogens=True)):
        structure = from_molblock(block)
        assert structure.dimension == 2
        assert labels((*structure.units, *structure.axes)) == case["labels"]
        assert not structure.undefined


@named([case for case in CARRIED if case["name"] in UNDRAWN])
def test_a_unit_that_a_drawing_loses_is_lost_and_not_turned(case: dict[str, Any]) -> None:
    # Loses it, never gives another letter.
    structure = from_molblock(v2000(case["smiles"]))
    assert labels(structure.units) == {}


@named(IN_SPACE[::2])
def test_coordinates_say_the_same_as_the_notation(case: dict[str, Any]) -> None:
    structure = from_molblock(in_space(case["smiles"]))
    assert structure.dimension == 3
    assert labels(structure.units) == case["labels"]


def test_a_ranking_that_was_given_up_is_doubt_and_no_descriptor() -> None:
    # A dodecahedrane with every centre marked takes more comparisons than the labeller's budget.
    structure = from_smiles(HARD["dodecahedrane, every centre marked"])
    assert structure.units == ()
    assert "given up" in structure.doubt


@pytest.mark.parametrize(
    ("smiles", "expected"),
    [
        # IUPAC 2013, P-92.6: (2R,3r,4S)-pentane-2,3,4-triol and its 3s isomer, C3 existing only
        # through the difference of C2 and C4.
        ("C[C@@H](O)[C@H](O)[C@@H](O)C", ["R", "S", "r"]),
        ("C[C@@H](O)[C@@H](O)[C@@H](O)C", ["R", "S", "s"]),
        # C2 and C4 alike: C3 is no centre however it is marked (P-93.4.1.2).
        ("C[C@@H](O)[C@H](O)[C@H](O)C", ["R", "R"]),
        ("C[C@@H](O)[C@@H](O)[C@H](O)C", ["R", "R"]),
        # trans-1,4 is r,r and cis-1,4 s,s in cyclohexanes with two equal ligands (P-93.5.1.1.2).
        ("C[C@H]1CC[C@H](C)CC1", ["r", "r"]),
        ("C[C@H]1CC[C@@H](C)CC1", ["s", "s"]),
        # Ribitol, (2R,3s,4S)-pentane-1,2,3,4,5-pentol; xylitol, (2R,3r,4S) (P-102.5.6.5, from
        # memory; the letter of C3 is in every catalogue of chemicals).
        ("OC[C@H](O)[C@H](O)[C@H](O)CO", ["R", "S", "s"]),
        ("OC[C@H](O)[C@@H](O)[C@H](O)CO", ["R", "S", "r"]),
        # Natural amino acids: S but for cysteine, whose sulfur outranks the carboxy group
        # (P-103.1.3.1; common practice).
        ("N[C@@H](C)C(=O)O", ["S"]),
        ("N[C@@H](CO)C(=O)O", ["S"]),
        ("N[C@@H](CS)C(=O)O", ["R"]),
        ("C[C@@H](O)[C@H](N)C(=O)O", ["R", "S"]),
        ("CC[C@H](C)[C@H](N)C(=O)O", ["S", "S"]),
        # Meso- and (R,R)-tartaric acid (P-93.5.1, common practice).
        ("OC(=O)[C@H](O)[C@@H](O)C(=O)O", ["R", "R"]),
        ("OC(=O)[C@H](O)[C@H](O)C(=O)O", ["R", "S"]),
        # Fumaric E, maleic Z (P-65.1.1.2.3).
        ("OC(=O)/C=C/C(=O)O", ["E"]),
        ("OC(=O)/C=C\\C(=O)O", ["Z"]),
    ],
)
def test_handbook_molecules(smiles: str, expected: list[str]) -> None:
    assert letters(from_smiles(smiles)) == expected


@pytest.mark.parametrize(
    ("smiles", "expected"),
    [
        ("CC(N)C(=O)O", {(1,)}),
        # The middle of a triol counts only while its ends may differ.
        ("CC(O)C(O)C(O)C", {(1,), (3,), (5,)}),
        ("C[C@@H](O)C(O)[C@@H](O)C", {(3,)}),
        ("C[C@@H](O)C(O)[C@H](O)C", set()),
        ("OC(=O)C(O)C(O)C(=O)O", {(3,), (5,)}),
        # Rings: 1,4 carries units, a lone substituent does not, bridgeheads of equal bridges do not.
        ("CC1CCC(C)CC1", {(1,), (4,)}),
        ("OC1CCCCC1", set()),
        ("CC1CC1", set()),
        ("C1CC2CCC1CC2", set()),
        ("CC12CCC(CC1)CC2", set()),
        ("CC1CCC1C", {(1,), (4,)}),
        # Sulfoxide, N-oxide and phosphine oxide are centres; amine, sulfone and phosphate are not
        # (P-93.2, P-93.3).
        ("CS(=O)c1ccccc1", {(1,)}),
        ("C[N+]([O-])(CC)CCC", {(1,)}),
        ("CP(=O)(CC)c1ccccc1", {(1,)}),
        ("CN(CC)CCC", set()),
        ("CS(=O)(=O)c1ccccc1", set()),
        ("COP(=O)(O)OC", set()),
        # Double bonds: oxime and imine, none at equal ends, none in rings below eight members
        # (P-31.1.4.3.4 and P-93.5.1.4.1).
        ("CC=CC", {(1, 2)}),
        ("CC(=NO)c1ccccc1", {(1, 2)}),
        ("CC=NC", {(1, 2)}),
        ("CC(C)=NO", set()),
        ("CC(C)=C(C)CC", set()),
        ("C1=CCCCC1", set()),
        ("C1=CCCCCCC1", {(0, 1)}),
        # C3 counts because its two propenyl arms may differ (P-92.4).
        ("CC=CC(O)C=CC", {(1, 2), (3,), (5, 6)}),
        ("C/C=C/C(O)/C=C/C", set()),
    ],
)
def test_open_units_are_those_that_are_stereogenic(
    smiles: str, expected: set[tuple[int, ...]]
) -> None:
    structure = from_smiles(smiles)
    assert open_units(structure) == expected
    assert open_units(from_molblock(v2000(smiles))) == expected


@pytest.mark.parametrize("smiles", ["CC=C=CC", "CC=[C@]=CC", "CC=C=C=CC", "CN=C=NC", "CC=C=CC=O"])
def test_a_row_of_double_bonds_is_not_taken_for_e_or_z(smiles: str) -> None:
    # The unit of an allene is its axis, of a butatriene the plane of the row (P-93.4.2).
    for structure in (from_smiles(smiles), from_molblock(v2000(smiles))):
        assert structure.units == ()
        assert structure.undefined == ()


def test_a_double_bond_beside_an_allene_keeps_its_descriptor() -> None:
    assert descriptors(from_smiles("C/C=C/C=C=C")) == {"2E", "3E"}


@pytest.mark.parametrize(
    ("smiles", "kind"),
    [
        ("CCO", "achiral"),
        ("C/C=C/C", "achiral"),
        ("CC(O)CC", "silent"),
        ("C[C@H](O)CC", "absolute"),
        ("C[C@H](O)CC |&1:1|", "racemic"),
        ("C[C@H](O)CC |o1:1|", "relative"),
        ("C[C@H](O)[C@H](O)CC |&1:1|", "partly racemic"),
        ("C[C@H](O)[C@H](O)CC |o1:1|", "partly relative"),
        ("C[C@H](O)[C@H](O)CC |o1:1,3|", "relative"),
        ("C[C@H](O)[C@H](O)CC |&1:1,o1:3|", "racemic"),
        ("C[C@H](O)CC |a:1|", "absolute"),
        # A mark at an atom that is no centre does not make a compound chiral.
        ("C[C@H](C)O", "achiral"),
    ],
)
def test_kind(smiles: str, kind: str) -> None:
    assert from_smiles(smiles).kind == kind


def test_enhanced_stereo_of_v3000_says_the_same_as_the_notation() -> None:
    for group in ("&1:1,3", "o1:1,3", "&1:1,&2:3"):
        smiles = f"C[C@H](O)[C@H](N)CC |{group}|"
        drawn, written = from_molblock(v3000(smiles)), from_smiles(smiles)
        assert drawn.groups
        assert set(drawn.groups) == set(written.groups)
        assert drawn.kind == written.kind


def test_canonical_text_does_not_show_marks_without_meaning() -> None:
    assert from_smiles("C[C@H](C)O").smiles == from_smiles("CC(C)O").smiles
    assert from_smiles("C[C@H](O)CC").smiles != from_smiles("C[C@@H](O)CC").smiles


@pytest.mark.parametrize(
    ("smiles", "expected"),
    [
        ("CC=C=CC", True),
        ("C=C=CC", False),
        # 1,1'-Binaphthalene-2,2'-diol holds its axis, biphenyl turns freely (common practice).
        ("Oc1ccc2ccccc2c1-c1c(O)ccc2ccccc12", True),
        ("Cc1cccc(C)c1-c1c(C)cccc1C", True),
        ("c1ccc(cc1)-c1ccccc1", False),
        ("Cc1ccccc1Oc1ccccc1C", False),
        ("C[C@H](N)C(=O)O", False),
    ],
)
def test_an_axis_of_which_nothing_is_said(smiles: str, expected: bool) -> None:
    assert bool(from_smiles(smiles).axis_atoms) is expected
