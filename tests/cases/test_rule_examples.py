"""Every example of every rule, run through the program's own line.

An example is the rule's documentation; here it is held to what it says.
"""

from __future__ import annotations

import pytest

from dossiercheck import pipeline, rulebook
from dossiercheck.model import Field, Finding, Place, Record
from dossiercheck.rulefile import Example, Rule
from dossiercheck.settings import Settings

BOOK = rulebook.load(Settings())
EXAMPLES = [
    pytest.param(
        rule, example, id=f"{rule.id}-{number}-{'finding' if example.finding else 'nothing'}"
    )
    for rule in BOOK.rules
    for number, example in enumerate(rule.examples, 1)
]


def records(example: Example) -> list[Record]:
    """Each place of an example as a record of its own file, its evidence as data fields."""
    made = []
    for number, evidence in enumerate(example.records, 1):
        place = Place(f"example{number}.sdf", record=1)
        fields = tuple(
            Field(key, value, Place(place.source, record=1, field=key))
            for key, value in evidence.items()
            if key != "molfile"
        )
        made.append(Record("", evidence.get("molfile", ""), fields, place))
    return made


def findings(rule: Rule, example: Example) -> list[Finding]:
    review = pipeline.review_items(records(example), Settings(), BOOK)
    return [finding for finding in review.findings if finding.rule == rule.id]


@pytest.mark.parametrize(("rule", "example"), EXAMPLES)
def test_example(rule: Rule, example: Example) -> None:
    found = findings(rule, example)
    assert bool(found) is example.finding
    for finding in found:
        assert finding.grade is rule.grade
        assert "{" not in finding.message
        assert finding.exhibits, "a finding quotes what it speaks of"


def test_every_rule_has_a_case_that_it_finds_and_one_that_it_leaves_alone() -> None:
    """Rules without an example of a finding are listed here with the reason."""
    cannot_be_shown = {
        # Two computations of a descriptor must disagree; no small compound is known to do that.
        "name-and-drawing/descriptor-undetermined",
    }
    assert {
        rule.id for rule in BOOK.rules if {e.finding for e in rule.examples} != {True, False}
    } == cannot_be_shown
