"""The rewritings do what they say: shown with the structure library's labels, unit by unit."""

from __future__ import annotations

from collections.abc import Iterator
from random import Random

import pytest

from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.structure import Structure
from tests.property import drawings, table
from tests.property.drawings import NotCarried, in_mirror
from tests.property.pool import dictionary, handbook

Labels = dict[tuple[int, ...], str]
HANDBOOK = handbook()
MIXED = (*HANDBOOK, *dictionary(60))
# Of these the program sees a unit in the notation but not yet in a drawing, or in coordinates.
UNSEEN = ("C[Se@](=O)c1ccccc1", r"[2H]/C=C\c1ccccc1")
UNSEEN_IN_SPACE = (
    r"[2H]/C=C\c1ccccc1",
    "C[P@](CC)c1ccccc1",
    "C[As@](CC)c1ccccc1",
    "C[C@H](F)[C@H]([C@@H](C)F)/C(=C/Cl)C([C@@H](C)F)[C@@H](C)F",
    "O[C@@H](C(CCCC1CCC1)(CCCC1CCC1)CCCC1CCC1)C12CCCC(CCC1)CCC2",  # given up: so many hydrogens
)


def labels(structure: Structure) -> Labels:
    return {tuple(sorted(unit.atoms)): unit.descriptor for unit in structure.units}


def drawn(text: str) -> Labels:
    return labels(from_molblock(text))


def each_drawn(seed: int = 0) -> Iterator[tuple[str, str, Labels]]:
    """Notation, drawing and labels, for what the library can draw."""
    carried = 0
    for smiles in MIXED:
        if smiles in UNSEEN:
            continue
        try:
            text = drawings.laid_out(smiles, seed)
        except NotCarried:
            continue
        carried += 1
        yield smiles, text, labels(from_smiles(smiles))
    assert carried > 0.95 * len(MIXED)


def mirrored(found: Labels) -> Labels:
    return {atoms: in_mirror(letter) for atoms, letter in found.items()}


def test_letters_in_the_mirror() -> None:
    assert "".join(map(in_mirror, "RSrsEZezMPmp")) == "SRrsEZzePMmp"


def test_the_pool_is_what_it_says() -> None:
    assert len(HANDBOOK) > 100
    assert len(set(MIXED)) == len(MIXED) == len(HANDBOOK) + 60
    assert dictionary(5, seed=2) == dictionary(5, seed=2) != dictionary(5, seed=3)


def test_the_mirror_image_of_a_notation() -> None:
    turned = 0
    for smiles in MIXED:
        image = drawings.mirror_notation(smiles)
        assert drawings.mirror_notation(image) == smiles
        found = labels(from_smiles(smiles))
        assert labels(from_smiles(image)) == mirrored(found), smiles
        turned += found != mirrored(found)
    assert turned > 100


def test_one_mark_of_a_notation_turned_round() -> None:
    assert drawings.invert_notation("C[C@H](O)[C@@H](O)C", 1) == "C[C@H](O)[C@H](O)C"
    for smiles in ("C[C@H](N)C(=O)O", "C[C@@H](O)[C@H](N)C(=O)O"):
        found, other = (
            labels(from_smiles(text)) for text in (smiles, drawings.invert_notation(smiles, 0))
        )
        assert {a for a in found if found[a] != other[a]} == {(1,)}


def test_a_layout_shows_the_same_molecule() -> None:
    for seed in (0, 1, 2):
        for smiles, text, found in each_drawn(seed):
            assert drawn(text) == found, (seed, smiles)
    shapes = {drawings.laid_out("C[C@H](CCCC)[C@@H](O)CCC(=O)N", seed) for seed in range(6)}
    assert len(shapes) > 2


@pytest.mark.parametrize("smiles", UNSEEN)
@pytest.mark.xfail(reason="a drawn selenoxide and a deuterated alkene are read without their unit")
def test_a_layout_that_is_not_read_in_full(smiles: str) -> None:
    assert smiles in HANDBOOK
    assert drawn(drawings.laid_out(smiles)) == labels(from_smiles(smiles))


def test_drawings_mirrored_rotated_and_reflected() -> None:
    for angle, (smiles, text, found) in enumerate(each_drawn()):
        assert drawn(drawings.mirror_drawing(text)) == mirrored(found), smiles
        assert drawn(drawings.rotated(text, 7.0 * angle)) == found, smiles
        assert drawn(drawings.reflected(text)) == found, smiles


def test_atoms_and_bonds_in_another_order() -> None:
    random = Random(5)
    charged = 0
    for smiles, text, found in each_drawn():
        whole = table.read(text)
        order = random.sample(range(len(whole.atoms)), len(whole.atoms))
        bonds = random.sample(range(len(whole.bonds)), len(whole.bonds))
        place = {old: new for new, old in enumerate(order)}
        expected = {tuple(sorted(place[a] for a in atoms)): x for atoms, x in found.items()}
        assert drawn(drawings.renumbered(text, order, bonds)) == expected, smiles
        charged += bool(whole.properties)
    assert charged > 5


def test_two_ligands_exchanged() -> None:
    done = 0
    for smiles, text, found in each_drawn():
        for (centre, *more), letter in found.items():
            if more:
                continue
            for first, second in drawings.exchangeable(text, centre):
                try:
                    once = drawings.exchanged(text, centre, first, second)
                    twice = drawings.exchanged(once, centre, first, second)
                except ValueError:
                    continue
                changed = drawn(once)
                # Centres that depend on this one may change too, and r may become s.
                assert changed[(centre,)] != letter, (smiles, centre, first, second)
                if letter in "RS" and changed[(centre,)] in "RS":
                    assert changed[(centre,)] == in_mirror(letter)
                assert drawn(twice) == found, (smiles, centre, first, second)
                done += 1
    assert done > 300


def test_coordinates_show_the_same_molecule() -> None:
    done = 0
    for smiles in HANDBOOK[::3]:
        if smiles in UNSEEN_IN_SPACE:
            continue
        try:
            text = drawings.in_space(smiles)
        except NotCarried:
            continue
        found, shown = labels(from_smiles(smiles)), drawn(text)
        assert {atoms: shown.get(atoms) for atoms in found} == found, smiles
        image = drawn(drawings.mirror_space(text))
        assert {atoms: image.get(atoms) for atoms in found} == mirrored(found), smiles
        done += 1
    assert done > 30


@pytest.mark.parametrize("smiles", UNSEEN_IN_SPACE)
@pytest.mark.xfail(reason="read from coordinates without this unit")
def test_coordinates_that_are_not_read_in_full(smiles: str) -> None:
    assert smiles in HANDBOOK
    found, shown = labels(from_smiles(smiles)), drawn(drawings.in_space(smiles))
    assert {atoms: shown.get(atoms) for atoms in found} == found


def test_what_is_not_understood_is_refused() -> None:
    text = drawings.laid_out("CC(=O)[O-]")
    with pytest.raises(ValueError, match="V2000"):
        table.read("")
    with pytest.raises(ValueError, match="permutation"):
        drawings.renumbered(text, [0, 0, 1, 2])
    with pytest.raises(ValueError, match="property line"):
        drawings.renumbered(text.replace("M  CHG", "M  RGP"), [3, 2, 1, 0])
    with pytest.raises(ValueError, match="class"):
        drawings.mirror_notation("F[Co@OH1](Cl)(Br)(I)(N)O")
    with pytest.raises(ValueError, match="branches"):
        drawings.exchanged(drawings.laid_out("C[C@H]1CCCO1"), 1, 2, 5)
    with pytest.raises(NotCarried, match="lone pair"):
        drawings.laid_out("C[S@+]1CCC[C@H]1C")


def test_a_table_is_written_as_it_was_read() -> None:
    for smiles, text, found in each_drawn():
        again = table.write(table.read(text))
        assert table.write(table.read(again)) == again
        assert drawn(again) == found, smiles
