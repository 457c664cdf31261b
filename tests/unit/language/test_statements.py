"""What a stereochemistry field claims, and what is left unread."""

from __future__ import annotations

import pytest

from dossiercheck.language.records import record_evidence
from dossiercheck.language.statements import Statement, read_statement
from dossiercheck.model import Evidence, Field, Place, Record


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("ABSOLUTE", Statement("absolute")),
        ("RACEMIC", Statement("racemic")),
        ("ACHIRAL", Statement("achiral")),
        ("MIXED", Statement("mixture")),
        ("Epimeric", Statement("mixture")),
        ("( + / - )", Statement("racemic")),
        ("(±)", Statement("racemic")),
        ("( + )", Statement("active")),
        ("-", Statement("active")),
        ("Levorotatory", Statement("active")),
        ("number of stereocentres: 2", Statement(centres=2)),
        ("Number of chiral centers: three", Statement(centres=3)),
        ("No. of stereogenic centres = 0", Statement(centres=0)),
        ("Stereocentres: 4", Statement(centres=4)),
    ],
)
def test_codes_and_counts(text: str, expected: Statement) -> None:
    assert read_statement(text) == expected


@pytest.mark.parametrize(
    "text",
    [
        "UNKNOWN",
        "mixed with water",
        "the mixed anhydride",
        "not EPIMERIC",
        "(+) or (-)",
        "(+)-form",
        "Enantiomer",
        "Stereoisomer",
        "number of stereocentres: 2 to 4",
        "number of stereocentres: 2 (C3, C7)",
        "number of stereocentres: -1",
    ],
)
def test_what_is_not_certain_stays_unread(text: str) -> None:
    assert read_statement(text) is None


@pytest.mark.parametrize(
    ("heading", "value", "evidence"),
    [
        ("stereochemistry", "UNKNOWN", True),
        ("stereochemistry", "unspecified", False),
        ("optical activity", "UNSPECIFIED", False),
        ("molecular formula", "unknown", False),
        ("batch", "unknown", False),
    ],
)
def test_an_unknown_stereochemistry_is_something_said(
    heading: str, value: str, evidence: bool
) -> None:
    place = Place("a.json", record=1)
    record = Record("", "", (Field(heading, value, place),), place)
    found = list(record_evidence(record, {}))
    assert [isinstance(one, Evidence) for one in found] == [True] * evidence
