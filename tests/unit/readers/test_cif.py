"""Crystallographic information files: invented crystals in, molecules out. Data names are those of
the core CIF dictionary (IUCr, version 2.4); molecules and their forms are common practice."""

from __future__ import annotations

import random
from collections.abc import Callable

import numpy as np
import pytest
from rdkit import Chem
from rdkit.Chem import AllChem

from dossiercheck.model import Item, Record
from dossiercheck.readers import packing
from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.structure import Structure
from tests.unit.readers import crystals
from tests.unit.readers.crystals import Atom, Made, crystal
from tests.unit.readers.reading import read, reasons, records, unread

THREONINE = "C[C@@H](O)[C@H](N)C(=O)O"
AMMONIUM = "C[C@H]([NH3+])c1ccccc1"
GROUPS = ("P 1", "P 1 21 1", "P 21 21 21", "C 1 2 1", "P 41 21 2", "R 3:H", "P 21 3")
BOTH = ("P -1", "P 1 21/c 1", "P b c a", "P n a 21", "I -4", "R -3 c:H")


def items(made: Made | str) -> list[Item]:
    text = made if isinstance(made, str) else made.text()
    return read("a.cif", text.encode())


def plain(structure: Structure) -> str:
    """Canonical isomeric SMILES without explicit hydrogens."""
    bare = Chem.RemoveHs(structure.mol)
    bare.RemoveAllConformers()
    return str(Chem.CanonSmiles(Chem.MolToSmiles(bare)))


def molecule(made: Made | str) -> str:
    """What the one block is read as."""
    found = items(made)
    (record,) = records(found)
    assert record.molblock, unread(found)
    return plain(from_molblock(record.molblock))


def refusal(made: Made | str) -> str:
    """Why the one block gave no molecule."""
    found = items(made)
    assert not any(record.molblock for record in records(found)), "a molecule was read"
    (entry,) = unread(found)
    return entry.reason


def canonical(smiles: str) -> str:
    return plain(from_smiles(smiles))


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


def beside(one: list[Atom], other: list[Atom]) -> list[Atom]:
    reach = max(float(atom.position[0]) for atom in one) + 4.0
    least = min(float(atom.position[0]) for atom in other)
    for atom in other:
        atom.position = atom.position + np.array([reach - least, 0.0, 0.0])
    return [*one, *other]


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


# --- disorder ------------------------------------------------------------------------------------


def two_parts(
    smiles: str, other: str, *, share: float = 0.7, assembly: str = ".", group: str = "2"
) -> Made:
    """A second species in the place of the first, moved a little."""
    mol = crystals.embedded(smiles)
    major = crystals.atoms_of(mol)
    minor = crystals.atoms_of(crystals.embedded(other, seed=11))
    for atom in major:
        atom.occupancy, atom.assembly, atom.group = share, assembly, "1"
    for atom in minor:
        atom.occupancy, atom.assembly, atom.group = 1 - share, assembly, group
        atom.position = atom.position + np.array([0.3, 0.4, 0.5])
    for number, atom in enumerate([*major, *minor]):
        atom.label = f"{atom.element}{number}{'AB'[number >= len(major)]}"
    return crystals.put_into(
        [*major, *minor], tags={"_chemical_formula_sum": crystals.formula_of(mol)}
    )


@pytest.mark.parametrize("share", [0.7, 0.3, 0.5])
def test_parts_that_are_one_stereoisomer(share: float) -> None:
    found = items(two_parts(THREONINE, THREONINE, share=share))
    (record,) = records(found)
    assert plain(from_molblock(record.molblock)) == canonical(THREONINE)
    assert reasons(found) == ["disorder"]


def test_parts_of_two_configurations_are_refused() -> None:
    made = two_parts(THREONINE, "C[C@H](O)[C@H](N)C(=O)O")
    assert refusal(made) == "unresolved-disorder"


def test_a_minor_part_that_is_no_molecule_is_refused() -> None:
    made = two_parts(THREONINE, THREONINE)
    made.atoms.pop()
    assert refusal(made) == "unresolved-disorder"


def test_a_disordered_methyl_group() -> None:
    """Two sets of hydrogens on one carbon, and nothing else in parts."""
    made = crystal("C[C@H](O)c1ccccc1")
    methyl = [a for a in made.atoms if a.element == "H"][:3]
    carbon = made.atoms[0].position
    axis = made.atoms[1].position - carbon
    axis /= np.linalg.norm(axis)
    for number, atom in enumerate(methyl):
        here = atom.position - carbon
        turned = 2 * axis * (axis @ here) - here  # by 180° about C–C
        atom.occupancy, atom.assembly, atom.group = 0.6, "A", "1"
        made.atoms.append(Atom("H", carbon + turned, 0.4, "A", "2", f"H{number}Z"))
    found = items(made)
    assert reasons(found) == ["disorder"]
    (record,) = records(found)
    assert plain(from_molblock(record.molblock)) == canonical("C[C@H](O)c1ccccc1")


def test_a_solvent_over_an_inversion_centre() -> None:
    """Half of the cells have the water here, the others its image: two molecules to one water."""
    made = crystal(THREONINE, "P -1")
    water = {"O": (0.3, 0.2, 0.1), "Ha": (1.1, 0.3, 0.3), "Hb": (0.0, 1.0, -0.2)}
    for name, place in water.items():
        made.atoms.append(Atom(name[0], np.array(place), 0.5, ".", "-1", f"{name}W"))
    made.tags["_chemical_formula_sum"] = "C8 H20 N2 O7"
    parts = molecule(made).split(".")
    assert sorted(parts) == sorted([canonical(THREONINE)] * 2 + ["O"])


def test_half_a_molecule_in_parts_over_an_inversion_centre_is_refused() -> None:
    made = crystal(THREONINE, "P -1")
    for atom in made.atoms[:5]:
        atom.occupancy, atom.group = 0.5, "-1"
    assert refusal(made) == "unresolved-disorder"


def partial_water(made: Made) -> None:
    for atom in made.atoms[-3:]:
        atom.occupancy = 0.5


def alone_in_group(made: Made) -> None:
    for atom in made.atoms[-3:]:
        atom.occupancy, atom.group = 0.5, "1"


def letters_as_group(made: Made) -> None:
    made.atoms[0].group = "A"


@pytest.mark.parametrize("change", [partial_water, alone_in_group, letters_as_group])
def test_disorder_that_says_too_little(change: Callable[[Made], None]) -> None:
    made = crystal("C[C@H](O)c1ccccc1.O")
    change(made)
    assert refusal(made) == "unresolved-disorder"


# --- refusals ------------------------------------------------------------------------------------


def no_hydrogens(made: Made) -> None:
    made.atoms = [atom for atom in made.atoms if atom.element != "H"]


def one_hydrogen_less(made: Made) -> None:
    made.atoms.pop()


def no_formula(made: Made) -> None:
    del made.tags["_chemical_formula_sum"]


def solvent_only_in_formula(made: Made) -> None:
    made.tags["_chemical_formula_sum"] = "C4 H11 N O4"


def formula_of_a_third(made: Made) -> None:
    made.tags["_chemical_formula_sum"] = "C6 H13.5 N1.5 O4.5"


def two_on_one_place(made: Made) -> None:
    made.atoms.append(Atom("C", made.atoms[0].position + 0.3))


def same_label(made: Made) -> None:
    made.atoms[3].label = made.atoms[4].label = "C7"


def halfway_bond(made: Made) -> None:
    made.atoms.append(Atom("Cl", made.atoms[0].position + np.array([0.0, 0.0, 2.1])))


def stray_hydrogen(made: Made) -> None:
    far = max(float(atom.position[0]) for atom in made.atoms) + 2.5
    made.atoms.append(Atom("H", np.array([far, *made.atoms[0].position[1:]])))


def a_metal(made: Made) -> None:
    far = max(float(atom.position[0]) for atom in made.atoms) + 3.5
    made.atoms.append(Atom("Zn", np.array([far, *made.atoms[0].position[1:]])))


def lone_chloride(made: Made) -> None:
    far = max(float(atom.position[0]) for atom in made.atoms) + 3.5
    made.atoms.append(Atom("Cl", np.array([far, *made.atoms[0].position[1:]])))


def no_element(made: Made) -> None:
    made.atoms[0].element = "Xx"


@pytest.mark.parametrize(
    ("change", "reason"),
    [
        (no_hydrogens, "bonds-ambiguous"),
        (one_hydrogen_less, "charge-not-assignable"),
        (no_formula, "formula-not-stated"),
        (solvent_only_in_formula, "atoms-and-formula-differ"),
        (formula_of_a_third, "formula-not-stated"),
        (two_on_one_place, "unresolved-disorder"),
        (same_label, "damaged-record"),
        (halfway_bond, "bonds-ambiguous"),
        (stray_hydrogen, "bonds-ambiguous"),
        (a_metal, "element-not-covered"),
        (lone_chloride, "charge-not-assignable"),
        (no_element, "element-not-known"),
    ],
    ids=lambda value: value if isinstance(value, str) else value.__name__,
)
def test_what_is_not_certain_is_refused(change: Callable[[Made], None], reason: str) -> None:
    made = crystal(THREONINE)
    change(made)
    assert refusal(made) == reason


def test_a_chain_without_an_end_is_a_polymer() -> None:
    """Polyoxymethylene-like chain along a: each C–O bond leads on to the next cell."""
    chain = [
        Atom("C", np.array([0.0, 0.0, 0.0])),
        Atom("O", np.array([1.15, 0.83, 0.0])),
        Atom("H", np.array([0.0, -0.63, 0.89])),
        Atom("H", np.array([0.0, -0.63, -0.89])),
    ]
    made = Made("P 1", (2.3, 9.0, 9.0, 90, 90, 90), chain, {"_chemical_formula_sum": "C H2 O"})
    assert refusal(made) == "polymeric"


@pytest.mark.parametrize("index", range(16))
def test_no_hydrogen_can_be_missed(index: int) -> None:
    """Each hydrogen left out in turn, and the formula made to agree with what is listed."""
    made = crystal("C[C@@H](O)[C@H](NC(=O)C=C)c1ccc(O)cc1")
    hydrogens = [n for n, atom in enumerate(made.atoms) if atom.element == "H"]
    del made.atoms[hydrogens[index % len(hydrogens)]]
    made.tags["_chemical_formula_sum"] = " ".join(
        f"{element}{sum(atom.element == element for atom in made.atoms)}" for element in "CHNO"
    )
    assert refusal(made) in ("charge-not-assignable", "bonds-ambiguous")


def test_pairs_of_hydrogens_can_be_missed_by_valence_but_not_by_length() -> None:
    """Ethane without one hydrogen at each end has the valences of ethene; its bond is too long."""
    made = crystal("CCc1ccccc1")
    ends = [2 + 6 + n for n in (0, 3)]  # one hydrogen of CH3, one of CH2
    made.atoms = [atom for n, atom in enumerate(made.atoms) if n not in ends]
    made.tags["_chemical_formula_sum"] = "C8 H8"
    assert refusal(made) == "bonds-ambiguous"


# --- hostile -------------------------------------------------------------------------------------


def text_of(**changes: str) -> str:
    text = crystal(THREONINE).text()
    for old, new in changes.items():
        assert old in text
        text = text.replace(old, new)
    return text


def set_value(tag: str, value: str) -> str:
    lines = crystal(THREONINE).text().split("\n")
    return "\n".join(f"{tag} {value}" if line.startswith(tag + " ") else line for line in lines)


@pytest.mark.parametrize(
    ("tag", "value", "reason"),
    [
        ("_cell_length_a", "nan", "damaged-record"),
        ("_cell_length_a", "inf", "damaged-record"),
        ("_cell_length_a", "?", "damaged-record"),
        ("_cell_length_a", "rubbish", "damaged-record"),
        ("_cell_length_a", "0", "cell-not-possible"),
        ("_cell_length_a", "-12", "cell-not-possible"),
        ("_cell_length_a", "0.001", "cell-not-possible"),
        ("_cell_length_a", "5000", "cell-not-possible"),
        ("_cell_length_a", "1e300", "damaged-record"),
        ("_cell_angle_beta", "0", "cell-not-possible"),
        ("_cell_angle_beta", "180", "cell-not-possible"),
        ("_cell_angle_alpha", "150", "cell-not-possible"),
        ("_space_group_name_H-M_alt", "'P 21/c'", "space-group-contradictory"),
    ],
)
def test_values_that_cannot_be(tag: str, value: str, reason: str) -> None:
    text = set_value(tag, value)
    if value == "150":
        text = text.replace("_cell_angle_beta 90.0000", "_cell_angle_beta 150")
    assert refusal(text) == reason


@pytest.mark.parametrize(
    ("old", "new", "reason"),
    [
        ("'x+1/2,-y+1/2,-z'", "'x+1/2,-y+1/2,q'", "space-group-not-known"),
        ("'x+1/2,-y+1/2,-z'", "'2x,y,z'", "space-group-not-known"),
        ("'x+1/2,-y+1/2,-z'\n", "", "space-group-not-known"),
        ("_atom_site_fract_y", "_atom_site_other", "no-structure"),
        ("_atom_site_fract_x", "_atom_site_other", "no-structure"),
        ("_atom_site_label", "_atom_site_other", "no-structure"),
        ("_cell_length_b", "_cell_other", "damaged-record"),
    ],
)
def test_what_is_missing_or_wrong(old: str, new: str, reason: str) -> None:
    assert refusal(text_of(**{old: new})) == reason


def test_a_loop_cut_off_makes_the_file_unread() -> None:
    text = crystal(THREONINE).text()
    lines = text.rstrip().split("\n")
    short = "\n".join([*lines[:-1], " ".join(lines[-1].split()[:4])])
    assert reasons(items(short)) == ["damaged"]


def test_a_loop_cut_off_between_two_atoms_is_noticed() -> None:
    lines = crystal(THREONINE).text().rstrip().split("\n")
    for kept in range(len(lines) - 1, len(lines) - 10, -1):
        assert refusal("\n".join(lines[:kept])) in (
            "bonds-ambiguous",
            "charge-not-assignable",
            "atoms-and-formula-differ",
        )


@pytest.mark.parametrize(
    ("text", "reason"),
    [
        ("", "empty"),
        ("# only a comment\n", "empty"),
        ("data_a\n", "no-structure"),
        ("data_a\n_cell_length_a 1\n_cell_length_a 2\n", "damaged"),
        ("data_a\n_publ_section_abstract\n;never closed\n", "damaged"),
        ("data_a\n_x 'never closed\n", "damaged"),
        ("loop_\n_a\n1\n", "damaged"),
        ("data_a\nsave_frame\n_x 1\n", "damaged"),
        ("\x00\x01\x02" * 400, "binary"),
        ("<html><body>404</body></html>", "damaged"),
        ("data_a\nloop_\n_atom_site.Cartn_x\n1.0\n", "no-structure"),
    ],
)
def test_files_that_are_none(text: str, reason: str) -> None:
    assert reasons(items(text)) == [reason]
    assert not records(items(text))


def test_the_same_block_code_twice_is_not_silently_one() -> None:
    assert reasons(items(crystal(THREONINE).text() * 2)) == ["damaged"]


def atom_list(count: int) -> str:
    chance = random.Random(2)
    head = set_value("_chemical_formula_sum", "'C H4'").split("loop_\n_atom_site_label")[0]
    names = ("label", "type_symbol", "fract_x", "fract_y", "fract_z")
    rows = (
        f"C{n} C {chance.random():.4f} {chance.random():.4f} {chance.random():.4f}"
        for n in range(count)
    )
    return "\n".join([head, "loop_", *(f"_atom_site_{name}" for name in names), *rows, ""])


def test_a_million_atoms_are_refused_unseen() -> None:
    assert refusal(atom_list(1_000_000)) == "size-budget"


def test_a_cell_full_of_atoms_is_refused() -> None:
    assert refusal(atom_list(1_500)) in ("size-budget", "unresolved-disorder", "bonds-ambiguous")


def test_too_many_images_are_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(packing, "_MOST_IMAGES", 100)
    assert refusal(crystal(THREONINE)) == "size-budget"


def test_bytes_of_any_kind_do_not_stop_the_reader() -> None:
    """Cut, doubled and altered at random: a record, an unread entry or both, and no exception."""
    chance = random.Random(8)
    whole = crystal(THREONINE, refine_ls_abs_structure_Flack="0.02(3)").text().encode()
    for _ in range(150):
        data = bytearray(whole)
        for _ in range(chance.randint(1, 4)):
            at = chance.randrange(len(data))
            match chance.randrange(4):
                case 0:
                    del data[at : at + chance.randint(1, 60)]
                case 1:
                    data[at:at] = data[at : at + chance.randint(1, 60)]
                case 2:
                    data[at] = chance.randrange(256)
                case _:
                    data[at:at] = chance.choice([b"?", b"'", b"\n;\n", b"loop_\n", b" 1e9 ", b"("])
        found = read("a.cif", bytes(data))
        assert found
        for record in records(found):
            assert isinstance(record, Record)
            if record.molblock:
                assert from_molblock(record.molblock).dimension == 3
