"""Every case of `descriptors.toml`: the letters, and that they follow from the ranking given."""

from __future__ import annotations

from collections import Counter
from typing import Any

import pytest

from dossiercheck.stereo.descriptors import own_units
from tests.cases.hand_ranked import CASES, labels, structure
from tests.cases.marks import letter

KEYS = {"name", "labels", "rule", "source", "basis", "why"}
MORE = {"smiles", "atoms", "bonds", "order", "library"}
RULES = {"1a", "1b", "2", "3", "4a", "4b", "4c", "5", "6", "shape", "none"}

each = pytest.mark.parametrize("case", CASES, ids=[case["name"] for case in CASES])
ranked = pytest.mark.parametrize(
    "case", [pytest.param(case, id=case["name"]) for case in CASES if "order" in case]
)


@each
def test_labels_by_the_engine(case: dict[str, Any]) -> None:
    assert labels(own_units(structure(case))) == case["labels"]


@each
def test_labels_by_the_library(case: dict[str, Any]) -> None:
    read = structure(case)
    found = labels((*read.units, *read.axes))
    if "library" in case:
        # A library that has learnt the unit: take the flag away.
        assert found != case["labels"]
    else:
        assert found == case["labels"]
        assert not read.doubt


@ranked
def test_the_letter_follows_from_the_ranking(case: dict[str, Any]) -> None:
    for atom, order in case["order"].items():
        assert letter(case["smiles"], int(atom), order) == case["labels"][atom].upper()


def test_cases_are_whole_and_cover_all_rules_and_letters() -> None:
    for case in CASES:
        assert KEYS <= set(case) <= KEYS | MORE, case["name"]
        assert ("smiles" in case) != ("atoms" in case and "bonds" in case), case["name"]
        assert case["basis"] in ("derived", "handbook", "memory"), case["name"]
        assert case["source"].startswith("P-"), case["name"]
    assert len({case["name"] for case in CASES}) == len(CASES) >= 100
    written = [case.get("smiles") or case["atoms"] + case["bonds"] for case in CASES]
    assert len(set(written)) == len(CASES)
    assert {case["rule"] for case in CASES} == RULES
    letters = Counter(letter for case in CASES for letter in case["labels"].values())
    assert set(letters) == set("RSrsEZezMPmp")
