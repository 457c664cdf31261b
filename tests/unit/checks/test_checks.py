"""Each check on the smallest dossier that gives it and on its sound neighbour; no cascades."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator

import pytest

from dossiercheck import pipeline, rulebook
from dossiercheck.checks import registry
from dossiercheck.model import Field, Finding, Grade, Place, Record, Review
from dossiercheck.rulefile import EVIDENCE_KEYS
from dossiercheck.settings import Settings
from tests.unit.checks.cases import CASES, Case

SETTINGS = Settings(columns={key: key for key in EVIDENCE_KEYS})
BOOK = rulebook.load(SETTINGS)


def records(case: Case) -> Iterator[Record]:
    for number, evidence in enumerate(case.records, 1):
        source = f"{case.title}/{number}.sdf"
        fields = tuple(
            Field(key, value, Place(source, record=1, field=key))
            for key, value in {**evidence, "label": case.title}.items()
            if key != "molfile"
        )
        yield Record("", evidence.get("molfile", ""), fields, Place(source, record=1))


@pytest.fixture(scope="module")
def review() -> Review:
    items = [record for case in CASES for record in records(case)]
    return pipeline.review_items(items, SETTINGS, BOOK)


def of(case: Case, review: Review) -> list[Finding]:
    return [f for f in review.findings if f.exhibits[0].place.source.startswith(f"{case.title}/")]


@pytest.mark.parametrize("case", CASES, ids=lambda case: case.title)
def test_the_findings_are_exactly_these(case: Case, review: Review) -> None:
    found = of(case, review)
    said = [f"{f.rule}: {f.message}" for f in found]
    grave = Counter(f.rule for f in found if f.grade is not Grade.REMARK)
    assert grave == Counter(case.expected), said
    remarks = Counter(f.rule for f in found if f.grade is Grade.REMARK)
    assert remarks == Counter(case.remarks), said


@pytest.mark.parametrize("case", CASES, ids=lambda case: case.title)
def test_what_was_not_read_is_listed(case: Case, review: Review) -> None:
    unread = [u for u in review.unread if u.place.source.startswith(f"{case.title}/")]
    assert [u.reason for u in unread] == list(case.unread), unread


def test_titles_are_unique() -> None:
    assert len({case.title for case in CASES}) == len(CASES)


def test_every_check_has_a_case() -> None:
    told = {rule for case in CASES for rule in (*case.expected, *case.remarks)}
    asked = {rule.check for rule in BOOK.rules if rule.id in told}
    elsewhere = {"pending_change"}  # needs a document: test_changes.py
    # These need labels of their own: test_together.py.
    elsewhere |= {"name_for_two_labels", "structure_for_two_labels", "printed_differs"}
    # Rules on files are held to their own examples, which are whole dossiers: tests/cases.
    elsewhere |= {rule.check for rule in BOOK.rules if any(e.files for e in rule.examples)}
    assert set(registry.CHECKS) - elsewhere == asked
