"""Relations against the definitions (IUPAC Basic Terminology of Stereochemistry 1996), on compounds
whose relation any textbook gives."""

from __future__ import annotations

import pytest

from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.relations import Relation, relation
from tests.benchmarks import relations as benchmark
from tests.unit.stereo.forms import v2000


def of(one: str, two: str) -> Relation:
    return relation(from_smiles(one), from_smiles(two))


L_TARTARIC = "OC(=O)[C@H](O)[C@@H](O)C(=O)O"
D_TARTARIC = "OC(=O)[C@@H](O)[C@H](O)C(=O)O"
MESO_TARTARIC = "OC(=O)[C@H](O)[C@H](O)C(=O)O"
D_GLUCOSE = "O=C[C@H](O)[C@@H](O)[C@H](O)[C@H](O)CO"
L_GLUCOSE = "O=C[C@@H](O)[C@H](O)[C@@H](O)[C@@H](O)CO"
D_MANNOSE = "O=C[C@@H](O)[C@@H](O)[C@H](O)[C@H](O)CO"
D_GALACTOSE = "O=C[C@H](O)[C@@H](O)[C@@H](O)[C@H](O)CO"
D_FRUCTOSE = "OCC(=O)[C@@H](O)[C@H](O)[C@H](O)CO"


@pytest.mark.parametrize(
    ("one", "two", "kind", "epimer"),
    [
        (L_TARTARIC, D_TARTARIC, "enantiomer", False),
        (L_TARTARIC, MESO_TARTARIC, "diastereomer", True),
        (MESO_TARTARIC, "OC(=O)[C@@H](O)[C@@H](O)C(=O)O", "same", False),
        (D_GLUCOSE, L_GLUCOSE, "enantiomer", False),
        (D_GLUCOSE, D_MANNOSE, "diastereomer", True),  # epimers at C-2
        (D_GLUCOSE, D_GALACTOSE, "diastereomer", True),  # epimers at C-4
        (D_MANNOSE, D_GALACTOSE, "diastereomer", False),
        (D_GLUCOSE, D_FRUCTOSE, "constitutional isomer", False),
        ("C[C@H](O)CC", "C[C@@H](O)CC", "enantiomer", False),
        ("C[C@H]1CC[C@@H](C)CC1", "C[C@H]1CC[C@H](C)CC1", "diastereomer", True),
        # 1-Ethylidene-4-methylcyclohexane: the double bond turned gives the mirror image.
        ("C/C=C1/CC[C@H](C)CC1", "C/C=C1\\CC[C@H](C)CC1", "enantiomer", False),
        ("CCO", "COC", "constitutional isomer", False),
        ("CCO", "CCN", "different", False),
        ("CCO", "C[13CH2]O", "different", False),
        ("C[13CH2]O", "[13CH3]CO", "undetermined", False),
    ],
)
def test_textbook(one: str, two: str, kind: str, epimer: bool) -> None:
    for first, second in ((one, two), (two, one)):
        found = of(first, second)
        assert (found.kind, found.epimer) == (kind, epimer)


def test_which_units_differ() -> None:
    assert of(D_GLUCOSE, D_MANNOSE).units == ((2,),)
    found = of("C/C=C/[C@H](O)F", "C/C=C\\[C@H](O)F")
    assert (found.units, found.geometry, found.epimer) == (((1, 2),), True, False)


def test_a_centre_that_is_none_beside_a_like_one() -> None:
    """C3 of (2R,4R)-2,3,4-trihydroxyglutaric acid is no centre: its mark says nothing; in the
    meso forms it is pseudoasymmetric (IUPAC 2013, P-92.6)."""
    ends = "OC(=O)[C@H](O)[C@{}H](O)[C@{}H](O)C(=O)O"
    kinds = {
        (a, b): of(ends.format("", a), ends.format("@", b)).kind
        for a in ("", "@")
        for b in ("", "@")
    }
    assert {kinds["", ""], kinds["@", "@"]} == {"same", "diastereomer"}
    open_one = "OC(=O)[C@H](O)C(O)[C@{}H](O)C(=O)O"
    assert {of(open_one.format(a), ends.format("", a)).kind for a in ("", "@")} == {
        "same",
        "undetermined",
    }


def test_silence_is_undetermined_unless_the_rest_settles_it() -> None:
    found = of("C[C@H](N)C(=O)O", "CC(N)C(=O)O")
    assert found == Relation("undetermined", note="the second leaves one unit open")
    assert of("CC(N)C(=O)O", "CC(N)C(=O)O").kind == "undetermined"
    settled = of("C/C=C/[C@H](O)F", "C/C=C\\C(O)F")
    assert (settled.kind, settled.units, settled.geometry) == ("diastereomer", ((1, 2),), True)
    assert "leaves one unit open" in settled.note
    # Enantiomer or diastereomer, but never the same.
    assert of("C[C@H](O)[C@H](F)Cl", "C[C@@H](O)C(F)Cl").kind == "undetermined"


def test_a_bridgehead_left_open_is_held_by_the_other() -> None:
    camphor = "CC1(C)[C@@H]2CC[C@@]1(C)C(=O)C2"
    found = of(camphor, "CC1(C)C2CC[C@@]1(C)C(=O)C2")
    assert found.kind == "same"
    assert "leaves one unit open" in found.note


@pytest.mark.parametrize(
    ("one", "two", "kind", "racemic"),
    [
        ("C[C@H](O)F |&1:1|", "C[C@H](O)F", "racemate", "one"),
        ("C[C@H](O)F", "C[C@@H](O)F |&1:1|", "racemate", "two"),
        ("C[C@H](O)F |&1:1|", "C[C@@H](O)F |&1:1|", "same", ""),
        ("C[C@H](O)F |o1:1|", "C[C@H](O)F", "undetermined", ""),
        # Whichever hand it is, the racemate is its racemate.
        ("C[C@H](O)F |o1:1|", "C[C@H](O)F |&1:1|", "racemate", "two"),
        ("C[C@H](O)[C@H](F)Cl |&1:1,3|", "C[C@H](O)[C@H](F)Cl", "racemate", "one"),
        ("C[C@H](O)[C@H](F)Cl |&1:1,3|", "C[C@H](O)[C@@H](F)Cl", "diastereomer", ""),
        ("C[C@H](O)[C@H](F)Cl |&1:1,3|", "C[C@H](O)[C@@H](F)Cl |&1:1,3|", "diastereomer", ""),
        # Relative configuration settles it: neither hand of the one is a hand of the other.
        ("C[C@H](O)[C@H](F)Cl |o1:1,3|", "C[C@H](O)[C@@H](F)Cl", "diastereomer", ""),
        # A mixture of epimers, and one of them.
        ("C[C@H](O)[C@H](F)Cl |&1:1|", "C[C@H](O)[C@H](F)Cl", "undetermined", ""),
        ("C[C@H](O)[C@H](F)Cl |&1:1|", "C[C@H](O)[C@@H](F)Cl |&1:1|", "enantiomer", ""),
    ],
)
def test_groups(one: str, two: str, kind: str, racemic: str) -> None:
    found = of(one, two)
    assert (found.kind, found.racemic) == (kind, racemic)


def test_salts_by_their_main_components() -> None:
    base, mirror = "C[C@H](N)c1ccccc1", "C[C@@H](N)c1ccccc1"
    assert of(base, f"{base}.Cl").kind == "same"
    found = of("C[C@H]([NH3+])c1ccccc1.[Cl-]", mirror)
    assert (found.kind, found.units) == ("enantiomer", ((1,),))
    assert "main components" in found.note
    assert of(f"{base}.{MESO_TARTARIC}", f"{base}.{MESO_TARTARIC}").kind == "same"
    salts = of(f"{base}.{L_TARTARIC}", f"{mirror}.{L_TARTARIC}")
    assert salts.kind == "enantiomer"
    assert "with the other components: diastereomer" in salts.note
    assert of(f"{base}.{L_TARTARIC}", f"{base}.{D_TARTARIC}").kind == "undetermined"


def test_a_racemate_drawn_as_two_molecules() -> None:
    both = "C[C@H](O)F.C[C@@H](O)F"
    assert of(both, "C[C@H](O)F").kind == "undetermined"
    assert of(both, "C[C@@H](O)F.C[C@H](O)F").kind == "same"


@pytest.mark.parametrize(
    ("one", "two", "kind"),
    [
        ("C[C@H](N)C(=O)O", "C[C@H]([NH3+])C(=O)[O-]", "same"),
        ("C[C@H](N)C(=O)O", "C[C@@H]([NH3+])C(=O)[O-]", "enantiomer"),
        ("C[C@H](c1c[nH]cn1)O", "C[C@H](c1cnc[nH]1)O", "same"),
        ("C[C@H](c1c[nH]cn1)O", "C[C@@H](c1cnc[nH]1)O", "enantiomer"),
        ("C[S@](CC)=O", "C[S@@+](CC)[O-]", "enantiomer"),
        ("CC(=O)C[C@H](C)O", "CC(O)=C[C@H](C)O", "undetermined"),
        ("C[N+](=O)[O-]", "CN(=O)=O", "same"),
        ("O=C(O)CC", "OC(=O)CC", "same"),
    ],
)
def test_one_constitution_drawn_otherwise(one: str, two: str, kind: str) -> None:
    assert of(one, two).kind == kind


def test_drawings() -> None:
    found = relation(
        from_molblock(v2000(D_GLUCOSE)), from_molblock(v2000(D_MANNOSE, hydrogens=True))
    )
    assert (found.kind, found.epimer, found.units) == ("diastereomer", True, ((2,),))


def test_what_is_open_and_no_unit_takes_nothing_away() -> None:
    four = "C(C[C@H](F)Cl)(C[C@H](F)Cl)(C[C@H](F)Cl)C[C@{}H](F)Cl"
    found = of(four.format(""), four.format("@"))
    assert (found.kind, found.epimer, found.note) == ("diastereomer", True, "")


def test_an_imine_hydrogen_decides_nothing() -> None:
    one, two = "[H]/N=C(\\C)CC", "[H]/N=C(/C)CC"
    assert of(one, two).kind == "undetermined"
    assert of(one, one).kind == "same"


def test_a_possible_axis_is_named() -> None:
    biaryl = "Cc1cccc([C@H](C)O)c1-c1c(C)cccc1O"
    assert of(biaryl, biaryl.replace("@", "@@")).note == "a possible axis is not compared"


def test_an_axis_that_is_marked_is_not_passed_over() -> None:
    found = of("CC=[C@]=CC", "CC=[C@@]=CC")
    assert found.kind == "undetermined"


def test_pairs_of_dictionary_molecules() -> None:
    """A small share of `python -m tests.benchmarks.relations`."""
    figures = benchmark.measure(45)
    assert figures["pairs"] >= 35
    assert figures["right"] == figures["pairs"], figures["not right"]
