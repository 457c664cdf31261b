"""Numbers of stereoisomers against textbooks, and against writing every combination down."""

from __future__ import annotations

from itertools import product

import pytest
from rdkit import Chem

from dossiercheck.stereo.counting import stereoisomers
from dossiercheck.stereo.perception import from_smiles

ELIEL = "Eliel and Wilen, Stereochemistry of Organic Compounds, 1994 (from memory)"
SUGARS = "IUPAC-IUBMB, Nomenclature of Carbohydrates 1996, 2-Carb-2 and chart I"
INOSITOLS = "IUPAC-IUB, Nomenclature of Cyclitols 1973: cis, epi, allo, myo, muco, neo, D- and L-chiro, scyllo"
COMMON = "common knowledge of the field"

# SMILES, centres, double bonds, stereoisomers, achiral among them, source
TEXTBOOK = {
    "tartaric acid": ("OC(=O)C(O)C(O)C(=O)O", 2, 0, 3, 1, ELIEL),
    "2,3,4-trihydroxyglutaric acid": ("OC(=O)C(O)C(O)C(O)C(=O)O", 3, 0, 4, 2, ELIEL),
    "butan-2-ol": ("CCC(C)O", 1, 0, 2, 0, COMMON),
    "aldopentoses": ("O=CC(O)C(O)C(O)CO", 3, 0, 8, 0, SUGARS),
    "aldohexoses": ("O=CC(O)C(O)C(O)C(O)CO", 4, 0, 16, 0, SUGARS),
    "aldohexopyranoses": ("OC1C(O)C(O)C(O)C(CO)O1", 5, 0, 32, 0, SUGARS),
    "2-ketohexoses": ("OCC(=O)C(O)C(O)C(O)CO", 3, 0, 8, 0, SUGARS),
    "pentitols": ("OCC(O)C(O)C(O)CO", 3, 0, 4, 2, SUGARS),
    "hexitols": ("OCC(O)C(O)C(O)C(O)CO", 4, 0, 10, 2, SUGARS),
    "inositols": ("OC1C(O)C(O)C(O)C(O)C1O", 6, 0, 9, 7, INOSITOLS),
    "hexachlorocyclohexane": ("ClC1C(Cl)C(Cl)C(Cl)C(Cl)C1Cl", 6, 0, 9, 7, COMMON),
    "1,2-dimethylcyclopropane": ("CC1CC1C", 2, 0, 3, 1, ELIEL),
    "1,2-dimethylcyclohexane": ("CC1CCCCC1C", 2, 0, 3, 1, ELIEL),
    "1,3-dimethylcyclohexane": ("CC1CCCC(C)C1", 2, 0, 3, 1, ELIEL),
    "1,4-dimethylcyclohexane": ("CC1CCC(C)CC1", 2, 0, 2, 2, ELIEL),
    "1,3-dimethylcyclobutane": ("CC1CC(C)C1", 2, 0, 2, 2, ELIEL),
    "hexa-2,4-diene": ("CC=CC=CC", 0, 2, 3, 3, COMMON),
    "but-2-ene": ("CC=CC", 0, 1, 2, 2, COMMON),
    "hept-2-en-5-ol": ("CC=CCC(O)CC", 1, 1, 4, 0, COMMON),
    "menthol": ("CC1CCC(C(C)C)C(O)C1", 3, 0, 8, 0, COMMON),
    "decalin": ("C1CCC2CCCCC2C1", 2, 0, 2, 2, ELIEL),
    "camphor": ("CC1(C)C2CCC1(C)C(=O)C2", 2, 0, 2, 0, COMMON),
    "borneol and isoborneol": ("CC1(C)C2CCC1(C)C(O)C2", 3, 0, 4, 0, COMMON),
    "alpha-pinene": ("CC1=CCC2CC1C2(C)C", 2, 0, 2, 0, COMMON),
    "cocaine skeleton": ("COC(=O)C1C(OC(=O)c2ccccc2)CC2CCC1N2C", 4, 0, 8, 0, COMMON),
    "cholesterol": ("CC(C)CCCC(C)C1CCC2C1(C)CCC1C2CC=C2CC(O)CCC12C", 8, 0, 256, 0, COMMON),
    "Troeger's base": ("Cc1ccc2N3CN(Cc2c1)c1ccc(C)cc1C3", 2, 0, 2, 0, ELIEL),
    "tropane-3-ol": ("CN1C2CCC1CC(O)C2", 3, 0, 2, 2, "tropine and pseudotropine: " + COMMON),
    "bicyclo[3.3.1]nonan-9-ol": ("OC1C2CCCC1CCC2", 0, 0, 1, 1, COMMON),
    "quinuclidine": ("C1CN2CCC1CC2", 0, 0, 1, 1, COMMON),
    "norbornane": ("C1CC2CCC1C2", 0, 0, 1, 1, COMMON),
    "adamantane with four substituents": ("FC12CC3(Cl)CC(Br)(C1)CC(I)(C2)C3", 4, 0, 2, 0, ELIEL),
    "methyl phenyl sulfoxide": ("CS(=O)c1ccccc1", 1, 0, 2, 0, COMMON),
    "dimethyl sulfoxide": ("CS(C)=O", 0, 0, 1, 1, COMMON),
    "isopropylamine": ("CC(C)N", 0, 0, 1, 1, COMMON),
    "ethyl methyl phosphate": ("CCOP(=O)(O)OC", 0, 0, 1, 1, COMMON),
    "oxime": ("CC=NO", 0, 1, 2, 2, COMMON),
    "arginine": ("NC(=N)NCCCC(N)C(=O)O", 1, 0, 2, 0, COMMON),
    "1-ethylidene-4-methylcyclohexane": ("CC=C1CCC(C)CC1", 1, 1, 2, 0, ELIEL),
}


@pytest.mark.parametrize("name", TEXTBOOK)
def test_textbook(name: str) -> None:
    smiles, centres, bonds, number, achiral, _source = TEXTBOOK[name]
    count = stereoisomers(from_smiles(smiles))
    assert count is not None
    found = (count.centres, count.bonds, count.stereoisomers, count.achiral)
    assert found == (centres, bonds, number, achiral)
    assert count.exact


def test_meso_needs_chiral_members_in_the_set() -> None:
    # IUPAC Basic Terminology of Stereochemistry 1996, "meso-compound".
    counts = [stereoisomers(from_smiles(TEXTBOOK[name][0])) for name in ("inositols", "decalin")]
    assert [(c.meso, c.pairs) for c in counts if c is not None] == [(7, 1), (0, 0)]


def test_perhydrotriphenylene_has_ten_diastereomers() -> None:
    # Four achiral ones and six pairs (Farina and Audisio, Tetrahedron 1970, 26, 1827; from memory).
    count = stereoisomers(from_smiles("C1CCC2C(C1)C1CCCCC1C1CCCCC21"))
    assert count is not None
    assert count.pairs + count.achiral == 10


@pytest.mark.parametrize(
    ("smiles", "conditional"),
    [
        ("OC(=O)C(O)C(O)C(O)C(=O)O", 1),
        ("OC(=O)C(O)C(O)C(=O)O", 0),
        ("CC1CCC(C)CC1", 0),
        ("CC(C)C1OC(CN)C(CN)O1", 1),  # C2 between like centres is none
    ],
)
def test_centres_that_depend_on_others(smiles: str, conditional: int) -> None:
    count = stereoisomers(from_smiles(smiles))
    assert count is not None
    assert count.conditional == conditional


def test_a_proton_on_nitrogen_makes_no_centre() -> None:
    bases = ["CC[NH+](C)CCO", "CN1C2CCC1CC(O)C2", "C[NH+]1C2CCC1CC(O)C2"]
    counts = [stereoisomers(from_smiles(smiles)) for smiles in bases]
    assert [c.centres for c in counts if c is not None] == [0, 3, 3]


def test_marks_have_no_influence() -> None:
    plain, marked = "OC(=O)C(O)C(O)C(=O)O", "OC(=O)[C@H](O)[C@H](O)C(=O)O"
    assert stereoisomers(from_smiles(plain)) == stereoisomers(from_smiles(marked))


def test_a_bridgehead_nitrogen_is_told_apart() -> None:
    # Quinine has 16 stereoisomers: C3, C4, C8, C9, and N1 held by C4 (common knowledge).
    count = stereoisomers(from_smiles("COc1ccc2nccc(C(O)C3CC4CCN3CC4C=C)c2c1"))
    assert count is not None
    assert (count.centres, count.nitrogens, count.stereoisomers) == (5, 1, 16)


def test_fused_and_bridged_rings_give_at_most() -> None:
    # Five centres of morphine; the piperidine bridge holds C9 and C13 (common knowledge: 16).
    morphine = stereoisomers(from_smiles("CN1CCC23C4C1CC1=C2C(OC3C(O)C=C4)=C(O)C=C1"))
    assert morphine is not None
    assert (morphine.centres, morphine.stereoisomers, morphine.bound) == (5, 16, "at most")
    fused = stereoisomers(from_smiles("C1CC2C(C)C2C1"))
    assert fused is not None
    assert not fused.exact


def test_axes_are_not_counted_and_that_is_said() -> None:
    count = stereoisomers(from_smiles("CC(C)C(O)c1cccc(C)c1-c1c(C)cccc1O"))
    assert count is not None
    assert (count.centres, count.bound, count.note) == (1, "at least", "axes are not counted")


def test_the_largest_component_alone() -> None:
    count = stereoisomers(from_smiles("CC(N)c1ccccc1.OC(=O)C(O)C(O)C(=O)O"))
    assert count is not None
    assert (count.centres, count.stereoisomers) == (1, 2)
    assert "largest component" in count.note


def test_past_the_budget_there_is_no_number() -> None:
    cage = "C12C3C4C5C1C6C7C2C8C3C9C4C%10C5C6C%11C7C8C9C%10%11"
    assert stereoisomers(from_smiles(cage)) is None
    assert stereoisomers(from_smiles("C(C(F)Cl)" * 20)) is None


def test_free_units_need_no_enumeration() -> None:
    count = stereoisomers(from_smiles("NC(C)C(=O)" * 25 + "O"))
    assert count is not None
    assert (count.centres, count.stereoisomers) == (25, 2**25)


@pytest.mark.parametrize(
    "smiles",
    [
        "CC(O)C(O)C(O)C",
        "CC(F)C(C(C)F)C(C)F",
        "CC(O)C=CC(C)O",
        "CC1CC(C)CC(C)C1",
        "CC=CC(O)C=CC",
        "OC1CC(O)C1",
        "CC(Cl)C(C)(C(C)Cl)C(C)Cl",
        "C1CCC2C(C1)CCC1CCCCC12",
        "CC(O)c1cccc(C(C)O)c1",
        "FC(Cl)OC(F)Cl",
    ],
)
def test_against_every_combination_written_down(smiles: str) -> None:
    """The InChI of every combination, an independent canonical form."""
    mol = Chem.MolFromSmiles(smiles)
    structure = from_smiles(smiles)
    found = set()
    tags = (Chem.ChiralType.CHI_TETRAHEDRAL_CW, Chem.ChiralType.CHI_TETRAHEDRAL_CCW)
    sides = (Chem.BondStereo.STEREOCIS, Chem.BondStereo.STEREOTRANS)
    for choice in product((0, 1), repeat=len(structure.possible)):
        trial = Chem.Mol(mol)
        for (kind, atoms, near), side in zip(structure.possible, choice, strict=True):
            if kind == "centre":
                trial.GetAtomWithIdx(atoms[0]).SetChiralTag(tags[side])
            else:
                bond = trial.GetBondBetweenAtoms(*atoms)
                ends = near if bond.GetBeginAtomIdx() == atoms[0] else near[::-1]
                bond.SetStereoAtoms(*ends)
                bond.SetStereo(sides[side])
        found.add(Chem.MolToInchi(trial))
    count = stereoisomers(structure)
    assert count is not None
    assert count.stereoisomers == len(found)
