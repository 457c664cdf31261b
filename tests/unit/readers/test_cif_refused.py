"""Crystallographic information files that give no certain molecule: disorder, what is missing, what
cannot be, and files made to do harm. Data names: core CIF dictionary (IUCr, version 2.4)."""

from __future__ import annotations

import random
from collections.abc import Callable

import numpy as np
import pytest

from dossiercheck.model import Record
from dossiercheck.readers import packing
from dossiercheck.stereo.perception import from_molblock
from tests.unit.readers import crystals
from tests.unit.readers.crystals import (
    Atom,
    Made,
    canonical,
    crystal,
    items,
    molecule,
    plain,
    refusal,
)
from tests.unit.readers.reading import read, reasons, records

THREONINE = "C[C@@H](O)[C@H](N)C(=O)O"


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
