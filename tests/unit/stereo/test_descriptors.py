"""A descriptor is certain where both computations give it, else it says why not."""

from __future__ import annotations

from dataclasses import replace

import pytest

from dossiercheck.stereo import descriptors as module
from dossiercheck.stereo.cip.tree import TooLarge
from dossiercheck.stereo.descriptors import (
    Descriptor,
    all_certain,
    confirmed,
    descriptors,
    doubt_at,
)
from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.structure import Unit
from tests.benchmarks.descriptors import HARD
from tests.cases.drawn import molblock
from tests.cases.hand_ranked import CASES, structure


def the_one(smiles: str) -> Descriptor:
    (found,) = descriptors(from_smiles(smiles))
    return found


def test_both_agree() -> None:
    found = the_one("C[C@H](N)C(=O)O")
    assert (found.ours, found.library, found.note) == ("S", "S", "")
    assert found.certain
    assert found.descriptor == "S"
    assert found.derivation is not None
    assert found.reading


def test_the_library_gives_none() -> None:
    found = the_one("CC=[C@]=CC")
    assert (found.ours, found.library, found.descriptor) == ("M", "", "")
    assert found.note == "the structure library gives no descriptor here"
    assert not found.certain
    # What is not certain is derived all the same, for the reviewer.
    assert found.derivation is not None


def test_the_engine_gives_none() -> None:
    # A double bond marked in a ring of five, which holds it.
    found = the_one("C1CCC/C=C/1")
    assert (found.ours, found.library, found.descriptor) == ("", "E", "")
    assert found.note == "the engine finds no stereogenic unit here"
    assert found.derivation is None


def test_the_two_differ(monkeypatch: pytest.MonkeyPatch) -> None:
    read = from_smiles("C[C@H](N)C(=O)O")
    wrong = (Unit("centre", (1,), "R"),)
    monkeypatch.setattr(type(read), "units", property(lambda _: wrong))
    (found,) = descriptors(read)
    assert (found.ours, found.library, found.descriptor) == ("S", "R", "")
    assert found.note == "the two computations differ"
    assert not all_certain(read)
    assert doubt_at(read, (1,)) == (
        "the two computations differ (the engine gives S, the structure library R)"
    )


def test_an_ambiguous_drawing_is_undetermined_though_the_library_reads_it() -> None:
    read = from_molblock(molblock("C 0 0; N 0 1; O 1 0; F -1 0", "1 2 1 1; 1 3 1; 1 4 1"))
    (found,) = descriptors(read)
    assert found.library
    assert (found.ours, found.descriptor) == ("", "")
    assert found.note == "the wedge stands where it can be read in two ways"


def test_a_contradiction_that_neither_reads_is_still_shown() -> None:
    read = from_molblock(
        molblock("C 0 0; N 0 1; O 0.9 -0.5; F -0.9 -0.5", "1 2 1 1; 1 3 1 6; 1 4 1")
    )
    (found,) = descriptors(read)
    assert (found.ours, found.library, found.certain) == ("", "", False)
    assert found.note == "the wedges contradict each other or cancel out"


def test_both_give_up_on_a_cage() -> None:
    read = from_smiles(HARD["dodecahedrane, every centre marked"])
    found = descriptors(read)
    assert found
    assert not any(one.certain for one in found)
    assert all(one.note for one in found)
    assert not all_certain(read)


def test_a_derivation_that_is_too_large_leaves_doubt(monkeypatch: pytest.MonkeyPatch) -> None:
    def refuse(*_: object) -> None:
        raise TooLarge

    monkeypatch.setattr(module, "derive", refuse)
    found = the_one("C[C@H](N)C(=O)O")
    assert found.note == "its derivation takes more steps than the budget allows"
    assert found.derivation is None


def test_a_unit_that_neither_sees() -> None:
    read = from_smiles("CC(N)C(=O)O")
    assert descriptors(read) == ()
    assert confirmed(read, (1,)) is None
    assert doubt_at(read, (1,)) == "neither computation gives a descriptor"


def test_certain_needs_a_letter() -> None:
    nothing = Descriptor("centre", (1,), "", "")
    assert not nothing.certain
    assert replace(nothing, ours="R", library="R").certain
    assert not replace(nothing, ours="R", library="r").certain


def test_what_is_flagged_in_the_cases_is_not_certain_and_all_else_is() -> None:
    flagged = 0
    for case in CASES:
        found = descriptors(structure(case))
        if "library" in case:
            assert not all(one.certain for one in found), case["name"]
            flagged += 1
        else:
            assert all(one.certain for one in found), case["name"]
    assert flagged > 10
