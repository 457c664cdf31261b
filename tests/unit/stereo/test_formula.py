"""Formulas and masses, as printed and as computed."""

from __future__ import annotations

import random
import re

import pytest
from chemicals.elements import periodic_table
from rdkit import Chem
from rdkit.Chem import Descriptors, rdMolDescriptors

from dossiercheck.stereo.formula import (
    Formula,
    difference,
    formula_of_smiles,
    mass_spread,
    molecular_formula,
    parse_formula,
    relative_mass,
)
from dossiercheck.stereo.perception import from_smiles
from dossiercheck.stereo.weights import WEIGHTS


@pytest.mark.parametrize(
    ("text", "hill", "charge"),
    [
        ("C17H19NO3", "C17H19NO3", 0),
        ("C₁₇H₁₉NO₃", "C17H19NO3", 0),
        ("C17 H19 N O3", "C17H19NO3", 0),
        ("C<sub>17</sub>H<sub>19</sub>NO<sub>3</sub>", "C17H19NO3", 0),
        ("C_{17}H_{19}NO_3", "C17H19NO3", 0),
        ("C\u00a017H\u200919NO3", "C17H19NO3", 0),
        # Salts and solvates, by every dot that is printed for one.
        ("C₁₇H₁₉NO₃ · HCl", "C17H20ClNO3", 0),
        ("C17H19NO3.HCl", "C17H20ClNO3", 0),
        ("C17H19NO3 . HCl", "C17H20ClNO3", 0),
        ("C17H19NO3•HCl", "C17H20ClNO3", 0),
        ("C17H19NO3∙HCl", "C17H20ClNO3", 0),
        ("C17H19NO3⋅HCl", "C17H20ClNO3", 0),
        ("C17H19NO3*HCl", "C17H20ClNO3", 0),
        ("C17H19NO3, HCl", "C17H20ClNO3", 0),
        ("C17H19NO3 · 2HCl", "C17H21Cl2NO3", 0),
        ("C17H19NO3·2 HCl", "C17H21Cl2NO3", 0),
        ("2C8H11N·H2SO4", "C16H24N2O4S", 0),
        ("(C8H11N)2·H2SO4", "C16H24N2O4S", 0),
        ("(C8H11N)2.H2SO4.2H2O", "C16H28N2O6S", 0),
        ("2 C10H12 · 0.5 C2H6O2", "C21H27O", 0),
        ("2 C10H12 · 1/2 C2H6O2", "C21H27O", 0),
        ("Ca(C3H5O3)2", "C6H10CaO6", 0),
        ("CH3CH(NH2)COOH", "C3H7NO2", 0),
        # Charges.
        ("C2H3O2-", "C2H3O2", -1),
        ("C2H3O2−", "C2H3O2", -1),
        ("C4H12N+", "C4H12N", 1),
        ("[C4H12N]+", "C4H12N", 1),
        ("C4H12N⁺", "C4H12N", 1),
        ("SO₄²⁻", "O4S", -2),
        ("SO4^2-", "O4S", -2),
        ("SO4(2-)", "O4S", -2),
        ("Ca2+", "Ca", 2),
        ("Ca²⁺", "Ca", 2),
    ],
)
def test_printed_forms(text: str, hill: str, charge: int) -> None:
    formula = parse_formula(text)
    assert formula is not None
    assert (str(Formula(formula.counts)), formula.charge) == (hill, charge)


@pytest.mark.parametrize(
    "text",
    [
        "",
        "—",
        "n/a",
        "see above",
        "c17h19no3",
        "Xx2",
        "(C8H11N2",
        "C8H11N)2",
        "C17H19NO3 (free base)",
        "Formula: C2H6O",
        "C2H6O or C3H8O",
        "(C2H4)n",
        "C10H12O · xH2O",
        "C17H19NO3 = 285.3",
        "C17H19NO3 285.34",
        # Half a water of a half-hydrate: no whole atoms. Whether 42 or 4 and 2: nobody can tell.
        "C10H12O · 0.5 H2O",
        "SO42-",
    ],
)
def test_what_is_no_formula_for_certain_is_not_read(text: str) -> None:
    assert parse_formula(text) is None


PARTS = [
    "CC(=O)O",
    "c1ccccc1",
    "N[C@@H](C)C(=O)O",
    "CCS(=O)(=O)N",
    "FC(F)(F)Br",
    "C[Si](C)(C)Cl",
    "OB(O)c1ccccc1",
    "CP(=O)(O)O",
    "ClCCI",
    "[Na+]",
    "[Cl-]",
    "C[N+](C)(C)C",
    "CC(=O)[O-]",
    "O=S(=O)([O-])[O-]",
    "[2H]C([2H])([2H])O",
    "O",
]


@pytest.mark.parametrize("seed", range(40))
def test_the_computed_formula_is_the_librarys(seed: int) -> None:
    dice = random.Random(seed)
    text = ".".join(dice.choices(PARTS, k=dice.randint(1, 4)))
    mol = Chem.MolFromSmiles(text)
    computed = molecular_formula(from_smiles(text))
    counts = {}
    for atom in Chem.AddHs(mol).GetAtoms():
        symbol = "D" if (atom.GetAtomicNum(), atom.GetIsotope()) == (1, 2) else atom.GetSymbol()
        counts[symbol] = counts.get(symbol, 0) + 1
    assert dict(computed.counts) == counts
    assert computed.charge == Chem.GetFormalCharge(mol)
    assert formula_of_smiles(text) == computed
    if "[2H]" not in text:
        theirs = rdMolDescriptors.CalcMolFormula(mol)
        assert str(computed) == re.sub(r"([+-])(\d+)$", r"(\2\1)", theirs)
    # A formula that is written is read back.
    back = parse_formula(str(computed))
    assert back is not None
    assert (dict(back.counts), back.charge) == (counts, computed.charge)
    assert relative_mass(computed) == pytest.approx(
        Descriptors.MolWt(mol), abs=mass_spread(computed) + 0.001
    )


ELEMENTS = sorted(set(WEIGHTS) - {"D", "T"})


@pytest.mark.parametrize("symbol", ELEMENTS)
def test_the_weights_are_those_of_two_libraries_within_the_stated_spread(symbol: str) -> None:
    # The tables of the chemicals package and of RDKit, each after an IUPAC edition of its time.
    weight, spread = WEIGHTS[symbol]
    for other in (
        getattr(periodic_table, symbol).MW,
        Chem.GetPeriodicTable().GetAtomicWeight(symbol),
    ):
        # The abridged value has five figures: half a unit of its last one is rounding.
        rounding = 0.5 * 10.0 ** -max(4 - len(str(int(weight))) + 1, 0)
        assert abs(other - weight) <= spread + rounding + 1e-9


@pytest.mark.parametrize(("symbol", "mass"), [("D", 2.014102), ("T", 3.016049)])
def test_the_masses_of_hydrogens_isotopes(symbol: str, mass: float) -> None:
    # AME2020 (Wang et al., Chinese Phys. C 2021, 45, 030003), from memory.
    assert WEIGHTS[symbol][0] == pytest.approx(mass, abs=0.0001)


@pytest.mark.parametrize(
    ("formula", "mass"),
    [
        # Relative molecular masses that pharmacopoeias and handbooks print.
        ("C9H8O4", 180.16),
        ("C8H9NO2", 151.16),
        ("C6H12O6", 180.16),
        ("C12H22O11", 342.30),
        ("C3H7NO3", 105.09),
        ("NaCl", 58.44),
        ("H2SO4", 98.08),
        ("C27H46O", 386.65),
    ],
)
def test_known_masses(formula: str, mass: float) -> None:
    parsed = parse_formula(formula)
    assert parsed is not None
    assert relative_mass(parsed) == pytest.approx(mass, abs=0.006 + mass_spread(parsed))


def test_a_mass_of_an_older_table_is_within_the_spread_and_one_hydrogen_is_not() -> None:
    # C27H46O with the weights of 1999: C 12.0107, H 1.00794, O 15.9994 (Pure Appl. Chem. 2001,
    # 73, 667).
    parsed = parse_formula("C27H46O")
    assert parsed is not None
    old = 27 * 12.0107 + 46 * 1.00794 + 15.9994
    assert abs(relative_mass(parsed) - old) <= mass_spread(parsed) + 0.0005
    assert mass_spread(parsed) < 0.1


def test_labelled_atoms_add_their_own_mass() -> None:
    # [13C]: 13.003355 (AME2020, from memory) in place of 12.011.
    light, heavy = formula_of_smiles("CCO"), formula_of_smiles("[13CH3]CO")
    assert relative_mass(heavy) - relative_mass(light) == pytest.approx(
        13.003355 - 12.011, abs=1e-4
    )
    assert formula_of_smiles("[2H]O[2H]").counts == {"D": 2, "O": 1}


@pytest.mark.parametrize(
    ("one", "two", "text"),
    [
        ("C2H6O", "C3H8O", "CH2 more"),
        ("C3H8O", "C2H6O", "CH2 less"),
        ("C2H6O", "C2H7N", "HN more, O less"),
        ("C2H4O2", "C2H3O2-", "H less, charge -1 against +0"),
        ("C2H6O", "C2H6O", ""),
    ],
)
def test_difference(one: str, two: str, text: str) -> None:
    first, second = parse_formula(one), parse_formula(two)
    assert first is not None
    assert second is not None
    assert difference(first, second) == text
