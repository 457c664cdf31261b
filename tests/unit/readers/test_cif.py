"""Crystallographic information files: invented crystals in, molecules out. Data names are those of
the core CIF dictionary (IUCr, version 2.4); molecules and their forms are common practice."""

from __future__ import annotations

import random

import numpy as np
import pytest
from rdkit import Chem
from rdkit.Chem import AllChem

from dossiercheck.stereo.perception import from_molblock
from dossiercheck.stereo.structure import Structure
from tests.unit.readers import crystals
from tests.unit.readers.crystals import (
    Atom,
    Made,
    beside,
    canonical,
    crystal,
    items,
    molecule,
    refusal,
)
from tests.unit.readers.reading import reasons, records, unread

THREONINE = "C[C@@H](O)[C@H](N)C(=O)O"
AMMONIUM = "C[C@H]([NH3+])c1ccccc1"
GROUPS = ("P 1", "P 1 21 1", "P 21 21 21", "C 1 2 1", "P 41 21 2", "R 3:H", "P 21 3")
BOTH = ("P -1", "P 1 21/c 1", "P b c a", "P n a 21", "I -4", "R -3 c:H")


# --- molecules -----------------------------------------------------------------------------------


@pytest.mark.parametrize("symbol", [*GROUPS, *BOTH])
def test_a_molecule_comes_out_as_it_was_put_in(symbol: str) -> None:
    assert molecule(crystal(THREONINE, symbol)) == canonical(THREONINE)


@pytest.mark.parametrize(
    "smiles",
    [
        "C[C@H](O)[C@H](N)C(=O)O",
        "C[C@H]([NH3+])C(=O)[O-]",
        "O[C@@H](C(=O)O)[C@@H](C(=O)O)O",
        "C/C=C/C(=O)O",
        "C/C=C\\C(=O)O",
        "C/C(=N\\O)c1ccccc1",
        "C[S@](=O)c1ccccc1",
        "CS(=O)(=O)N[C@@H](C)c1ccccc1",
        "O=[N+]([O-])c1ccc([C@H](C)O)cc1",
        "C[C@H](N=[N+]=[N-])c1ccccc1",
        "C[C@@H](C#N)c1ccncc1",
        "COP(=O)(OC)[C@H](C)N",
        "C[N+](C)([O-])[C@@H](C)c1ccccc1",
        "[2H]C([2H])([2H])[C@H](O)c1ccccc1",
        "c1ccc2cc3ccccc3cc2c1",
        "O=c1cc[nH]c(=O)[nH]1",
        "C[C@H]1CN2CCC1CC2",
    ],
)
def test_functional_groups(smiles: str) -> None:
    assert molecule(crystal(smiles)) == canonical(smiles)


@pytest.mark.parametrize(
    "smiles",
    [
        f"{AMMONIUM}.[Cl-]",
        f"{AMMONIUM}.OC(=O)[C@H](O)[C@@H](O)C(=O)[O-]",
        f"{AMMONIUM}.{AMMONIUM}.[O-]S(=O)(=O)[O-]",
        f"{AMMONIUM}.[O-][Cl+3]([O-])([O-])[O-]",
        f"{AMMONIUM}.F[B-](F)(F)F",
        f"{AMMONIUM}.CS(=O)(=O)[O-]",
        f"{AMMONIUM}.[Br-].O",
        "C[C@H](O)C(=O)[O-].[Na+].O.O",
        "C[C@H](O)C(=O)[O-].C[C@H](O)C(=O)[O-].[Ca+2]",
        "C[C@H](O)c1ccccc1.ClCCl",
        "NC(=[NH2+])N.C[C@H](O)C(=O)[O-]",
    ],
)
def test_ions_and_solvents_are_components(smiles: str) -> None:
    made = crystal(smiles, "P 1 21 1")
    assert sorted(molecule(made).split(".")) == sorted(canonical(smiles).split("."))


def test_water_whose_hydrogens_are_only_in_the_formula() -> None:
    """Common in crystal structures; with the formula there is no doubt."""
    made = crystal(f"{AMMONIUM}.[Cl-].O")
    oxygen = next(n for n, atom in enumerate(made.atoms) if atom.element == "O")
    places = np.array([atom.position for atom in made.atoms])
    near = np.linalg.norm(places - places[oxygen], axis=1) < 1.2
    made.atoms = [a for n, a in enumerate(made.atoms) if not near[n] or n == oxygen]
    assert molecule(made) == canonical(f"{AMMONIUM}.[Cl-].O")
    for formula in ("C8 H12 Cl N O", "C8 H13 Cl N O"):
        made.tags["_chemical_formula_sum"] = formula
        assert refusal(made) == "atoms-and-formula-differ"


def test_oxonium_without_its_hydrogens_is_no_water() -> None:
    made = crystal("CS(=O)(=O)[O-].[OH3+]")
    kept = [n for n, atom in enumerate(made.atoms) if atom.element != "H"]
    carbon = next(n for n in kept if made.atoms[n].element == "C")
    places = np.array([atom.position for atom in made.atoms])
    near = np.linalg.norm(places - places[carbon], axis=1) < 1.2
    made.atoms = [a for n, a in enumerate(made.atoms) if n in kept or near[n]]
    assert refusal(made) == "charge-not-assignable"


def test_an_octahedral_ion() -> None:
    """Hexafluorophosphate with P–F of 1.60 Å, which the structure library cannot embed."""
    mol = crystals.embedded(AMMONIUM)
    axes = [sign * axis for axis in np.eye(3) for sign in (1, -1)]
    anion = [Atom("P", np.zeros(3)), *(Atom("F", 1.60 * axis) for axis in axes)]
    atoms = beside(crystals.atoms_of(mol), anion)
    made = crystals.put_into(atoms, tags={"_chemical_formula_sum": "C8 H12 F6 N P"})
    assert molecule(made) == canonical(f"{AMMONIUM}.F[P-](F)(F)(F)(F)F")


def test_a_molecule_on_a_twofold_axis_is_completed() -> None:
    """(R,R)-tartaric acid's skeleton with its own twofold axis laid on that of C2: half of the
    atoms are listed."""
    smiles = "C[C@@H](O)[C@H](O)C"
    assert molecule(half(smiles, "C 1 2 1")) == canonical(smiles)


def test_a_molecule_on_an_inversion_centre_is_completed() -> None:
    smiles = "C[C@@H](O)[C@@H](O)C"  # meso
    assert molecule(half(smiles, "P 1 21/c 1", centre=True)) == canonical(smiles)


def half(smiles: str, symbol: str, *, centre: bool = False) -> Made:
    """The half of a symmetric molecule that is left when its symmetry is the crystal's."""
    mol = Chem.AddHs(Chem.MolFromSmiles(smiles))
    AllChem.EmbedMultipleConfs(mol, 60, randomSeed=3)
    AllChem.MMFFOptimizeMoleculeConfs(mol, maxIters=4000)
    best: tuple[float, np.ndarray, tuple[int, ...]] | None = None
    for conformer in mol.GetConformers():
        here = conformer.GetPositions() - conformer.GetPositions().mean(axis=0)
        for swap in mol.GetSubstructMatches(mol, uniquify=False, maxMatches=5000):
            if any(i == j for i, j in enumerate(swap)) or any(
                swap[j] != i for i, j in enumerate(swap)
            ):
                continue
            moved = -here if centre else here @ (rotation := _twofold(here, swap)).T
            error = float(np.abs(here[list(swap)] - moved).max())
            if best is None or error < best[0]:
                placed = here if centre else here @ _onto_b(rotation).T
                best = (error, placed, swap)
    assert best is not None and best[0] < 0.4, "no symmetric conformer"
    _, places, swap = best
    image = -places if centre else places * np.array([-1.0, 1.0, -1.0])
    places = (places + image[list(np.argsort(swap))]) / 2
    kept = [i for i, j in enumerate(swap) if i < j]
    atoms = [Atom(mol.GetAtomWithIdx(i).GetSymbol(), places[i]) for i in kept]
    cell = (16.0, 16.0, 16.0, 90.0, 100.0, 90.0)
    tags = {"_chemical_formula_sum": crystals.formula_of(mol)}
    return Made(symbol, cell, atoms, tags)


def _twofold(here: np.ndarray, swap: tuple[int, ...]) -> np.ndarray:
    """The rotation by 180° that best carries each atom to its partner."""
    middles = (here + here[list(swap)]) / 2
    axis = np.linalg.eigh(middles.T @ middles)[1][:, -1]
    return 2 * np.outer(axis, axis) - np.eye(3)


def _onto_b(rotation: np.ndarray) -> np.ndarray:
    """A proper rotation that lays the axis of a twofold rotation on y, the axis b."""
    axis = np.linalg.eigh(rotation)[1][:, -1]
    other = np.cross(axis, [0.3, 0.5, 0.8])
    other /= np.linalg.norm(other)
    return np.array([other, axis, np.cross(other, axis)])


def test_independent_molecules_alike_are_one() -> None:
    """Z' = 2: the same molecule in two conformations or places."""
    mol = crystals.embedded(THREONINE)
    other = crystals.embedded(THREONINE, seed=11)
    atoms = beside(crystals.atoms_of(mol), crystals.atoms_of(other))
    made = crystals.put_into(atoms, tags={"_chemical_formula_sum": crystals.formula_of(mol)})
    assert molecule(made) == canonical(THREONINE)


def test_independent_molecules_of_two_configurations_are_refused() -> None:
    mol, other = crystals.embedded(THREONINE), crystals.embedded("C[C@H](O)[C@H](N)C(=O)O")
    atoms = beside(crystals.atoms_of(mol), crystals.atoms_of(other))
    tags = {"_chemical_formula_sum": crystals.formula_of(mol)}
    assert refusal(crystals.put_into(atoms, tags=tags)) == "independent-molecules-differ"


def test_independent_mirror_images_are_one_where_the_crystal_has_both() -> None:
    mol, other = crystals.embedded(THREONINE), crystals.embedded("C[C@H](O)[C@@H](N)C(=O)O")
    atoms = beside(crystals.atoms_of(mol), crystals.atoms_of(other))
    tags = {"_chemical_formula_sum": crystals.formula_of(mol)}
    assert molecule(crystals.put_into(atoms, "P b c a", tags=tags)) == canonical(THREONINE)
    refused = crystals.put_into(atoms, "P 21 21 21", tags=tags)
    assert refusal(refused) == "independent-molecules-differ"


def test_atoms_scattered_over_cells_are_put_together() -> None:
    """A list may give any image of an atom."""
    made = crystal(THREONINE, "P 1 21 1")
    to_space = crystals.orthogonal(made.cell)
    chance = random.Random(4)
    for atom in made.atoms:
        shift = [chance.choice((-2, -1, 0, 1)) for _ in range(3)]
        fract = np.linalg.solve(to_space, atom.position) + shift
        if chance.random() < 0.5:
            fract = fract * [-1, 1, -1] + [0, 0.5, 0]
        atom.position = to_space @ fract
    assert molecule(made) == canonical(THREONINE)


# --- what a crystal says of the hand -------------------------------------------------------------


def structure(made: Made) -> Structure:
    (record,) = records(items(made))
    return from_molblock(record.molblock)


@pytest.mark.parametrize("symbol", GROUPS)
def test_one_hand(symbol: str) -> None:
    found = structure(crystal(THREONINE, symbol))
    assert (found.dimension, found.kind) == (3, "absolute")


@pytest.mark.parametrize("symbol", BOTH)
def test_both_hands(symbol: str) -> None:
    assert structure(crystal(THREONINE, symbol)).kind == "racemic"


def test_a_hand_that_is_said_to_be_unknown() -> None:
    made = crystal(THREONINE, chemical_absolute_configuration="unk")
    assert structure(made).kind == "relative"
    assert len(structure(made).groups) == 1


def test_each_molecule_of_a_racemic_salt_has_its_own_mirror_image() -> None:
    made = crystal(f"{AMMONIUM}.C[C@H](O)C(=O)[O-]", "P -1")
    assert len(structure(made).groups) == 2


# --- fields --------------------------------------------------------------------------------------


def test_fields_are_verbatim_and_have_their_places() -> None:
    made = crystal(
        THREONINE,
        chemical_name_systematic="(2S,3R)-2-amino-3-hydroxybutanoic acid",
        chemical_formula_weight="119.12",
        chemical_absolute_configuration="ad",
        refine_ls_abs_structure_Flack="0.02(3)",
        chemical_optical_rotation="[α]D = -28",
        chemical_melting_point="?",
    )
    found = items(made)
    (record,) = records(found)
    said = {field.name: field.value for field in record.fields}
    assert said == {
        "_chemical_name_systematic": "(2S,3R)-2-amino-3-hydroxybutanoic acid",
        "_chemical_formula_sum": "C4 H9 N O3",
        "_chemical_formula_weight": "119.12",
        "_chemical_absolute_configuration": "ad",
        "_refine_ls_abs_structure_Flack": "0.02(3)",
        "_chemical_optical_rotation": "[α]D = -28",
        "_space_group_name_H-M_alt": "P 21 21 21",
    }
    assert {f.place.field for f in record.fields} == set(said)
    assert (record.title, record.place.record) == ("OVE118", 1)
    assert not unread(found)


@pytest.mark.parametrize("name", ["I", "iii", "1", "2a", "global", "shelxl", "shelx"])
def test_a_block_code_that_says_nothing_is_no_label(name: str) -> None:
    made = crystal(THREONINE)
    made.block = name
    (record,) = records(items(made))
    assert record.title == ""


def test_blocks_are_records_of_their_own() -> None:
    one, two = crystal(THREONINE), crystal("CC(=O)O")
    two.block = "OVE119"
    found = records(items(one.text() + two.text()))
    assert [(r.title, r.place.record) for r in found] == [("OVE118", 1), ("OVE119", 2)]


def test_a_refused_block_keeps_its_fields() -> None:
    made = crystal(THREONINE, refine_ls_abs_structure_Flack="0.02(3)")
    del made.atoms[-1]
    found = items(made)
    (record,) = records(found)
    assert record.molblock == ""
    assert "_refine_ls_abs_structure_Flack" in {field.name for field in record.fields}
    assert reasons(found) == ["charge-not-assignable"]


def test_a_formula_of_several_units_is_not_held_against_the_molecule() -> None:
    made = crystal(THREONINE)
    made.tags["_chemical_formula_sum"] = "C8 H18 N2 O6"
    found = items(made)
    (record,) = records(found)
    assert record.molblock
    assert "_chemical_formula_sum" not in {field.name for field in record.fields}
    assert reasons(found) == ["formula-unit"]


def test_the_symbol_serves_where_no_operations_are_listed() -> None:
    made = crystal(THREONINE, "P 41 21 2")
    made.operations = False
    assert molecule(made) == canonical(THREONINE)
