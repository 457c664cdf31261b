"""Every case of `descriptors.toml`: the letters, and that they follow from the ranking given."""

from __future__ import annotations

import tomllib
from collections import Counter
from pathlib import Path
from typing import Any

import pytest

from dossiercheck.stereo.descriptors import own_units
from dossiercheck.stereo.perception import from_molblock, from_smiles
from tests.cases.drawn import molblock
from tests.cases.marks import letter

# Structure → units with `atoms` (0-based) and `descriptor`; whether it must know every case.
compute, complete = own_units, True

CASES = tomllib.loads((Path(__file__).parent / "descriptors.toml").read_text("utf-8"))["case"]
KEYS = {"name", "labels", "rule", "source", "basis", "why"}
MORE = {"smiles", "atoms", "bonds", "order", "library"}
RULES = {"1a", "1b", "2", "3", "4a", "4b", "4c", "5", "6", "shape", "none"}

each = pytest.mark.parametrize("case", CASES, ids=[case["name"] for case in CASES])
ranked = pytest.mark.parametrize(
    "case", [pytest.param(case, id=case["name"]) for case in CASES if "order" in case]
)


@each
def test_labels(case: dict[str, Any]) -> None:
    structure = (
        from_smiles(case["smiles"])
        if "smiles" in case
        else from_molblock(molblock(case["atoms"], case["bonds"]))
    )
    found = {
        "-".join(str(atom + 1) for atom in sorted(unit.atoms)): unit.descriptor
        for unit in compute(structure)
    }
    if complete or "library" not in case:
        assert found == case["labels"]
    else:
        # A library that has learnt the unit: take the flag away.
        assert found != case["labels"]


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
