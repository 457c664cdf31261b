"""One name, structure or value where there should be two, and two where there should be one."""

from __future__ import annotations

from collections.abc import Mapping

import pytest

from dossiercheck import pipeline, rulebook
from dossiercheck.model import Field, Finding, Place, Record
from dossiercheck.rulefile import EVIDENCE_KEYS
from dossiercheck.settings import Settings
from tests.unit.stereo.forms import v2000

SETTINGS = Settings(columns={key: key for key in EVIDENCE_KEYS})
BOOK = rulebook.load(SETTINGS)
NAME = "(2S)-2-aminobutanoic acid"
RULES = (
    "name-for-two-labels",
    "structure-for-two-labels",
    "formulas-differ",
    "registry-numbers-differ",
)


def found(*records: Mapping[str, str]) -> list[Finding]:
    items = []
    for number, evidence in enumerate(records, 1):
        source = evidence.get("source", f"{number}.sdf")
        place = Place(source, record=number)
        fields = tuple(
            Field(key, value, Place(source, record=number, field=key))
            for key, value in evidence.items()
            if key not in ("molfile", "source")
        )
        items.append(Record("", evidence.get("molfile", ""), fields, place))
    review = pipeline.review_items(items, SETTINGS, BOOK)
    return [one for one in review.findings if one.rule.removeprefix("across-documents/") in RULES]


def rules(*records: Mapping[str, str]) -> list[str]:
    return [one.rule.removeprefix("across-documents/") for one in found(*records)]


@pytest.mark.parametrize(
    ("one", "other", "expected"),
    [
        ({"label": "Impurity A", "name": NAME}, {"label": "Impurity B", "name": NAME}, ["name-for-two-labels"]),
        ({"label": "Impurity A", "name": NAME}, {"label": "Imp. A", "name": NAME}, []),
        ({"label": "Impurity A", "name": NAME}, {"label": "Intermediate 2", "name": NAME}, []),
        ({"label": "Dorvaline", "name": NAME}, {"label": "DX-101", "name": NAME}, []),
        ({"label": "Compound 1", "name": NAME}, {"label": "Compound 2", "name": NAME}, []),
        ({"label": "Impurity A", "name": NAME}, {"label": "Impurity B", "smiles": "CC[C@H](N)C(=O)O"}, ["structure-for-two-labels"]),
        ({"label": "Impurity A", "name": NAME}, {"label": "Impurity B", "smiles": "CC[C@@H](N)C(=O)O"}, []),
        # Where a centre is open they may be two stereoisomers; so they may with an axis.
        ({"label": "Impurity A", "smiles": "CCC(N)C(=O)O"}, {"label": "Impurity B", "smiles": "CCC(N)C(=O)O"}, []),
        ({"label": "Impurity A", "smiles": "CC=C=CC"}, {"label": "Impurity B", "smiles": "CC=C=CC"}, []),
    ],
)  # fmt: skip
def test_two_labels(one: dict[str, str], other: dict[str, str], expected: list[str]) -> None:
    assert rules(one, other) == expected


def test_both_sides_are_quoted_and_the_later_one_is_spoken_of() -> None:
    (finding,) = found({"label": "Impurity A", "name": NAME}, {"label": "Impurity B", "name": NAME})
    assert finding.substance == "s2"
    assert [one.title for one in finding.exhibits] == ["Impurity B", "Impurity A"]
    assert [one.place.source for one in finding.exhibits] == ["2.sdf", "1.sdf"]


def test_two_formulas_where_no_structure_judges() -> None:
    said = {"label": "DX-101", "formula": "C4H9NO2"}, {"label": "DX-101", "formula": "C4H10ClNO2"}
    assert rules(*said) == ["formulas-differ"]
    assert rules(said[0], {**said[0], "formula": "C4 H9 N O2"}) == []
    # With a structure the wrong one alone is spoken of, by another rule.
    assert rules(*said, {"label": "DX-101", "molfile": v2000("CCC(N)C(=O)O")}) == []


def test_two_registry_numbers_in_two_files_only() -> None:
    said = {"label": "DX-101", "registry": "7732-18-5"}, {"label": "DX-101", "registry": "64-17-5"}
    assert rules(*said) == ["registry-numbers-differ"]
    assert rules(*({**one, "source": "a.sdf"} for one in said)) == []
