"""What two constitutions have in common. All pairs are common practice of the trade."""

from __future__ import annotations

import pytest

from dossiercheck.stereo import constitution as con
from dossiercheck.stereo.constitution import compare_constitution
from dossiercheck.stereo.perception import from_molblock, from_smiles
from tests.unit.stereo.forms import in_space, v2000


@pytest.mark.parametrize(
    ("one", "two", "verdict"),
    [
        ("c1ccccc1O", "OC1=CC=CC=C1", con.SAME),
        ("O=[N+]([O-])c1ccccc1", "O=N(=O)c1ccccc1", con.SAME),
        ("[2H]CC(C)=O", "CC(=O)C[2H]", con.SAME),
        # Proton transfers: zwitterion, hydrochloride drawn as ions, ionised acid.
        ("C[C@H](N)C(=O)O", "C[C@H]([NH3+])C(=O)[O-]", con.CHARGE),
        ("CCN.Cl", "CC[NH3+].[Cl-]", con.CHARGE),
        ("CC(=O)O", "CC(=O)[O-]", con.CHARGE),
        ("CCN.OC(=O)/C=C\\C(=O)O", "CC[NH3+].OC(=O)/C=C\\C(=O)[O-]", con.CHARGE),
        # Salts, stoichiometry, solvates.
        ("CCN", "CCN.Cl", con.SALT),
        ("CCN.Cl", "CCN.Br", con.SALT),
        ("CCN.Cl", "CCN.Cl.Cl", con.SALT),
        ("CCN.CCN.OS(=O)(=O)O", "CCN.OS(=O)(=O)O", con.SALT),
        ("CCN.Cl", "CCN.Cl.O", con.SALT),
        ("CC(=O)O", "CC(=O)[O-].[Na+]", con.SALT),
        ("CC(=O)[O-].[Na+]", "CC(=O)[O-].[K+]", con.SALT),
        ("CCN.Cl", "CC[NH3+]", con.SALT),
        # Mobile hydrogen as the standard InChI has it.
        ("Cc1c[nH]cn1", "Cc1cnc[nH]1", con.MOBILE),
        ("CC(=N)NC", "CC(N)=NC", con.MOBILE),
        ("OC1=CC=NC=C1", "O=C1C=CNC=C1", con.MOBILE),
        ("O=c1[nH]cnc2[nH]cnc12", "Oc1ncnc2[nH]cnc12", con.MOBILE),
        # Keto and enol go further.
        ("CC(=O)CC(C)=O", "CC(O)=CC(C)=O", con.TAUTOMER),
        ("CC(C)=O", "CC(O)=C", con.TAUTOMER),
        # Other compounds.
        ("C=CCC", "CC=CC", con.DIFFERENT),
        ("CCO", "COC", con.DIFFERENT),
        ("CCO", "CCCO", con.DIFFERENT),
        ("CC(C)C(=O)O", "CCCC(=O)O", con.DIFFERENT),
        ("Oc1ccccc1C", "Oc1cccc(C)c1", con.DIFFERENT),
        # Labelled and unlabelled are not the same substance, nor labelled elsewhere.
        ("[2H]CCO", "CCO", con.DIFFERENT),
        ("[13CH3]CO", "CCO", con.DIFFERENT),
        ("[13CH3]CO", "C[13CH2]O", con.DIFFERENT),
        ("[2H]OCC", "OCC[2H]", con.DIFFERENT),
    ],
)
def test_verdict(one: str, two: str, verdict: str) -> None:
    assert compare_constitution(from_smiles(one), from_smiles(two)).verdict == verdict
    assert compare_constitution(from_smiles(two), from_smiles(one)).verdict == verdict


@pytest.mark.parametrize(
    ("one", "two", "detail"),
    [
        ("CCO", "CCCO", "CH2 more"),
        ("CCCO", "CCO", "CH2 less"),
        ("CC(N)=O", "CC(=O)O", "O more, HN less"),
        ("CCO", "COC", "both are C2H6O, connected differently"),
        ("CCN", "CCN.Cl", "only here: HCl"),
        ("CCN.Cl", "CCN", "only in the reference: HCl"),
        ("CCN.Cl", "CCN.Cl.O.O", "only here: 2 × H2O"),
        ("CCN.Cl", "CCN.Br", "only in the reference: HCl; only here: HBr"),
        ("[2H]CCO", "CCO", "isotopes: 1 × 2H against none"),
    ],
)
def test_the_difference_is_told_as_a_chemist_would(one: str, two: str, detail: str) -> None:
    assert compare_constitution(from_smiles(one), from_smiles(two)).detail == detail


@pytest.mark.parametrize("smiles", ["C[C@H](N)C(=O)O", "C/C=C/CO", "c1ccncc1", "CC(=N)N"])
def test_drawn_hydrogens_do_not_change_the_constitution(smiles: str) -> None:
    for block in (v2000(smiles), v2000(smiles, hydrogens=True), in_space(smiles)):
        found = compare_constitution(from_smiles(smiles), from_molblock(block))
        assert found.verdict == con.SAME


def test_stereo_is_no_part_of_the_constitution() -> None:
    for one, two in (("C[C@H](O)CC", "CC(O)CC"), ("C/C=C/C", "C/C=C\\C")):
        assert compare_constitution(from_smiles(one), from_smiles(two)).verdict == con.SAME
