"""Helices from wedged drawings (IUPAC 2013, P-92.1.2.2.1); no ranking is needed."""

from __future__ import annotations

import pytest

from dossiercheck.stereo.cip.engine import rank_all
from dossiercheck.stereo.cip.source import source_of
from dossiercheck.stereo.descriptors import descriptors
from dossiercheck.stereo.perception import from_molblock
from tests.cases.drawn import molblock
from tests.cases.hand_ranked import CASES
from tests.property import drawings

HELICES = [case for case in CASES if case["rule"] == "shape"]
named = pytest.mark.parametrize("case", HELICES, ids=[case["name"] for case in HELICES])


def helices(text: str) -> dict[tuple[int, ...], str]:
    found = rank_all(source_of(from_molblock(text)))
    return {one.unit.ends: one.descriptor for one in found if one.unit.kind == "helix"}


def drawing(case: dict[str, str]) -> str:
    return molblock(case["atoms"], case["bonds"])


@named
def test_wedge_and_hash_exchanged_give_the_other_helix(case: dict[str, str]) -> None:
    text = drawing(case)
    (letter,) = helices(text).values()
    (image,) = helices(drawings.mirror_drawing(text)).values()
    assert {letter, image} == {"M", "P"}


@named
def test_turned_or_seen_from_behind_it_is_the_same_helix(case: dict[str, str]) -> None:
    text = drawing(case)
    for angle in (30, 90, 211):
        assert helices(drawings.rotated(text, angle)) == helices(text)
    assert helices(drawings.reflected(text)) == helices(text)


@named
def test_without_both_ends_marked_there_is_no_helix(case: dict[str, str]) -> None:
    bonds = [bond.split() for bond in case["bonds"].split(";")]
    plain = ";".join(" ".join(bond[:3]) for bond in bonds)
    assert helices(molblock(case["atoms"], plain)) == {}
    # One end alone is read as a wedge at an axis, which is never certain: no letter rests on it.
    fronts = ";".join(" ".join(bond if bond[3:] != ["6"] else bond[:3]) for bond in bonds)
    assert helices(molblock(case["atoms"], fronts)) == {}
    read = from_molblock(molblock(case["atoms"], fronts))
    assert not any(one.certain for one in descriptors(read))
