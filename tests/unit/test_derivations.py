"""Findings carry the derivation of their units, in each structure that they show."""

from __future__ import annotations

import pytest

from dossiercheck import rulebook
from dossiercheck.model import Derived, Exhibit, Field, Finding, Place, Record
from dossiercheck.pipeline import review_items
from dossiercheck.settings import Settings
from tests.unit.report import sample

NAME = sample.NAME.replace("(2S,4R)-1-", "(2S,4S)-1-")


def findings(molblock: str, **fields: str) -> tuple[Finding, ...]:
    place = Place("a.sdf", record=1)
    given = tuple(Field(name, text, place) for name, text in fields.items())
    record = Record("x", molblock, given, place)
    return review_items([record], Settings(), rulebook.load(Settings())).findings


def of(finding: Finding, title: str) -> tuple[Derived, ...]:
    (exhibit,) = (one for one in finding.exhibits if one.title == title)
    return exhibit.derived


@pytest.fixture(scope="module")
def differing() -> Finding:
    molblock = sample.molfile(sample.BASE, "x") + "\n"
    (found,) = findings(molblock, name=NAME)
    assert found.rule == "name-and-drawing/configuration-differs"
    return found


def test_both_sides_are_derived(differing: Finding) -> None:
    (drawn,) = of(differing, "Drawing")
    (named,) = of(differing, "Systematic name")
    assert (drawn.descriptor, named.descriptor) == ("R", "S")
    assert drawn.atoms == (18,)
    assert named.locant == "4"
    assert drawn.kind == named.kind == "centre"
    assert drawn.steps[-1].endswith("the descriptor is certain.")


def test_the_two_sides_rank_alike(differing: Finding) -> None:
    """One constitution, opposite configurations: the comparisons part at the same rules."""

    def rules(derived: Derived) -> list[str]:
        return [step.split("Rule ")[1][:2] for step in derived.steps if "Rule " in step]

    (drawn,), (named,) = of(differing, "Drawing"), of(differing, "Systematic name")
    assert rules(drawn) == rules(named) == ["1a", "1a", "1a"]


def test_what_is_marked_belongs_to_the_drawing_beside_it(differing: Finding) -> None:
    for exhibit in differing.exhibits:
        (derived,) = exhibit.derived
        assert exhibit.drawing is not None
        assert derived.sight is not None
        elements = [exhibit.drawing.atoms[one.atom].element for one in derived.sight.ranks[:3]]
        assert elements == ["O", "C", "C"]
        assert derived.sight.turn


def test_a_silent_side_has_no_derivation() -> None:
    molblock = sample.molfile(sample.BASE, "x") + "\n"
    (found,) = findings(molblock, name=sample.SILENT_NAME)
    assert found.rule == "name-and-drawing/name-silent"
    (drawn,) = of(found, "Drawing")
    assert (drawn.kind, drawn.descriptor) == ("double bond", "E")
    assert of(found, "Systematic name") == ()


def test_a_finding_of_no_unit_has_none() -> None:
    molblock = sample.molfile(sample.CARBINOL, "x") + "\n"
    found = findings(molblock, formula="C12H14O")
    exhibits: list[Exhibit] = [one for finding in found for one in finding.exhibits]
    assert exhibits
    assert not any(one.derived for one in exhibits)
