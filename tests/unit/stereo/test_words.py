"""Comparisons in a chemist's words, one structure for each sequence rule.

Those of Rules 1b to 6 are cases of `tests/cases/descriptors.toml`, ranked there by hand, or
isotopes. The wording is ours.
"""

import pytest

from dossiercheck.stereo.cip import words
from dossiercheck.stereo.cip.derivation import Derivation, Entry
from dossiercheck.stereo.descriptors import confirmed
from dossiercheck.stereo.perception import from_inchi, from_smiles
from dossiercheck.stereo.structure import Structure


def derivation(structure: Structure, *atoms: int) -> Derivation:
    found = confirmed(structure, [atom - 1 for atom in atoms])
    assert found is not None
    assert found.derivation is not None
    return found.derivation


def said(smiles: str, *atoms: int) -> list[str]:
    structure = from_smiles(smiles)
    name = words.namer_for(structure)
    return [words.comparing(one, name) for one in derivation(structure, *atoms).comparisons]


@pytest.mark.parametrize(
    ("smiles", "atoms", "sentence"),
    [
        ("C[C@H](N)C(=O)O", (2,), "N3 > C4: atomic number 7 against 6 (Rule 1a), sphere 1."),
        (
            "C[C@H](N)C(=O)O",
            (2,),
            "C4 > C1: in sphere 2, {O,O,(O)} > {H,H,H} (Rule 1a; a duplicate atom in brackets).",
        ),
        # Sulfur beats three oxygens: sets are compared member by member (IUPAC 2013, P-92.2.1.2).
        (
            "O[C@H](CS)C(=O)O",
            (2,),
            "C3 > C5: in sphere 2, {S,H,H} > {O,O,(O)} (Rule 1a; a duplicate atom in brackets).",
        ),
        (
            "CCC[C@H](O)CCCl",
            (4,),
            "C6 > C3: in sphere 3, {Cl,H,H} > {C,H,H} (Rule 1a)."
            " The sets are those along C4–C6–C7 and along C4–C3–C2.",
        ),
        # Alpha-pinene, the bridgehead beside the double bond: {C,C,H} and {H,H,H} tie, then a methyl group against a duplicate.
        (
            "CC1=CC[C@@H]2C[C@H]1C2(C)C",
            (7,),
            "C8 > C2: in sphere 3, {H,H,H} > {0,0,0} (Rule 1a; 0 is a phantom atom)."
            " The sets are those along C7–C8–C10 and along C7–C2–C3.",
        ),
        # Mean of C and N, 6½, at the carbon beside a pyridine's nitrogen (P-92.1.4.4).
        (
            "OC(=O)[C@@H](c1ccccn1)c1ccncc1",
            (4,),
            "C5 > C11: in sphere 2, {N,(6.5),C} > {C,C,(C)} (Rule 1a; a duplicate atom in brackets;"
            " a number in brackets is the mean atomic number of a duplicate).",
        ),
        (
            "O1[C@H]2OC=C[C@@H]12",
            (2,),
            "O1 > O3: in sphere 3, duplicate atoms at root distance {0} > {2} (Rule 1b: the nearer"
            " one ranks higher). The sets are those along C2–O1–C6 and along C2–O3–C4.",
        ),
        (
            "C[C@@H](O)[13CH3]",
            (2,),
            "¹³C4 > C1: mass 13.003 against 12.011 (Rule 2), sphere 1.",
        ),
        (
            "O[C@@H](C[37Cl])C[35Cl]",
            (2,),
            "C3 > C5: in sphere 2, {³⁷Cl,H,H} > {³⁵Cl,H,H} (Rule 2: mass 36.966 against 34.969).",
        ),
        (
            "C/C=C\\[C@H](O)/C=C/C",
            (4,),
            "C3 > C6: auxiliary descriptor Z against E, Z before E before none (Rule 3), sphere 1.",
        ),
        (
            "C[C@H](F)[C@H]([C@@H](C)F)[C@@H](N)C([C@@H](C)F)[C@@H](C)F",
            (8,),
            "C4 > C10: auxiliary descriptor r against none, chiral before pseudoasymmetric before"
            " none (Rule 4a), sphere 1.",
        ),
        (
            "C[C@H](O)[C@H](O)[C@@H](N)[C@H](O)[C@H](C)O",
            (6,),
            "C8 > C4: in sphere 2, C10 (S) is like the reference S and C2 (S) is unlike the"
            " reference R (Rule 4b: like before unlike).",
        ),
        (
            "N[C@@H]([C@H]1CC[C@@H](O)CC1)[C@H]1CC[C@H](O)CC1",
            (2,),
            "C10 > C3: auxiliary descriptor r against s, r before s before none (Rule 4c), sphere"
            " 1.",
        ),
        (
            "C[C@H](O)[C@H](O)[C@@H](C)O",
            (4,),
            "C6 > C2: auxiliary descriptor R against S, R before S before none (Rule 5), sphere 1.",
        ),
        (
            "C[C@@H]1CC/C(=C/C(O)=O)CC1",
            (5, 6),
            "C10 > C4: in sphere 3, auxiliary descriptor R at C2 against S at C2 (Rule 5: R before S"
            " before none). The sets are those along C5–C10–C11 and along C5–C4–C3.",
        ),
        (
            "C1CCO[C@@]2(C1)CCCCO2",
            (5,),
            "C6 > C7: in sphere 5, O4 is the favoured ligand and O11 is not (Rule 6: the favoured"
            " ligand, met again, ranks higher). The sets are those along C5–C6–C1–C2–C3 and along"
            " C5–C7–C8–C9–C10.",
        ),
    ],
)
def test_each_rule_in_words(smiles: str, atoms: tuple[int, ...], sentence: str) -> None:
    assert sentence in said(smiles, *atoms)


def test_ranks_are_listed_for_each_end() -> None:
    structure = from_smiles("C/C(F)=C(Cl)/Br")
    found = derivation(structure, 2, 4)
    assert words.ranking(found.ranks, words.namer_for(structure)) == (
        "Ranks at C2: a F3 > b C1.",
        "Ranks at C4: a Br6 > b Cl5.",
    )
    structure = from_smiles("C[S@](=O)c1ccccc1")
    found = derivation(structure, 2)
    assert words.ranking(found.ranks, words.namer_for(structure)) == (
        "Ranks at S2: a O3 > b C4 > c C1 > d lone pair.",
    )


def test_a_locant_names_an_atom_only_where_no_other_has_it() -> None:
    name = words.namer(["C", "2H", "N", "O", "C"], ["1", "", "N", "1", "alpha"])
    assert [name(atom) for atom in range(1, 6)] == ["C1", "²H2", "N", "O4", "C-α"]
    assert name(0, "H") == "H"
    name = words.namer(["C", "C"], ["3", "4a"])
    assert [name(1), name(2)] == ["C-3", "C-4a"]


def test_atoms_of_an_inchi_have_its_own_numbers() -> None:
    # (S)-lactic acid: InChI numbers C1 (methyl), C2 (carbinol), C3 (acid), O4, O5, O6.
    structure = from_inchi("InChI=1S/C3H6O3/c1-2(4)3(5)6/h2,4H,1H3,(H,5,6)/t2-/m0/s1")
    at = structure.positions.index(2)
    found = derivation(structure, at + 1)
    assert words.ranking(found.ranks, words.namer_for(structure)) == (
        "Ranks at C2: a O4 > b C3 > c C1 > d H.",
    )


def test_a_mean_that_happens_to_be_whole_is_still_told_from_the_atom() -> None:
    """In a pyrylium the carbon beside oxygen has duplicates of mean number 7: no nitrogen."""
    found = said("F[C@H](c1cccc[o+]1)c1ccccn1", 2)
    assert any("{O,(7),C} > {N,(6.5),C}" in one for one in found), found
    assert words._numbered(Entry(3, "C", 6.0, duplicate=True)) == "(C)"
