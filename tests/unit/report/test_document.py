"""The document and findings.json: complete, valid against the published schema, repeatable."""

import json
from dataclasses import replace
from pathlib import Path

import jsonschema
import pytest

from dossiercheck import assets
from dossiercheck.model import Drawing, DrawnAtom, Review
from dossiercheck.report import jsonfile
from dossiercheck.report.document import document
from tests.unit.report import sample


@pytest.fixture(scope="module")
def schema() -> jsonschema.Draft202012Validator:
    text = (assets.templates() / "findings.schema.json").read_text(encoding="utf-8")
    published = json.loads(text)
    jsonschema.Draft202012Validator.check_schema(published)
    return jsonschema.Draft202012Validator(published)


def objects(node: object, path: str = "") -> list[tuple[str, dict]]:
    """Every sub-schema that describes an object."""
    found = []
    if isinstance(node, dict):
        if node.get("type") == "object":
            found.append((path, node))
        for key, value in node.items():
            found += objects(value, f"{path}/{key}")
    return found


@pytest.mark.parametrize(
    "made", [sample.review(), sample.empty(), sample.clean(), sample.many(3)], ids=range(4)
)
def test_valid_against_the_published_schema(
    schema: jsonschema.Draft202012Validator, made: Review
) -> None:
    schema.validate(json.loads(jsonfile.render(document(made))))


def test_schema_refuses_what_it_does_not_know(schema: jsonschema.Draft202012Validator) -> None:
    made = document(sample.review())
    for spoilt in (
        {**made, "remark": "x"},
        {**made, "version": "2"},
        {**made, "findings": [{**made["findings"][0], "grade": "severe"}]},
        {**made, "sources": [{**made["sources"][0], "sha256": "abc"}]},
        {key: value for key, value in made.items() if key != "unread"},
    ):
        assert not schema.is_valid(spoilt)


def test_schema_is_strict_and_describes_every_field(
    schema: jsonschema.Draft202012Validator,
) -> None:
    found = objects(schema.schema)
    assert len(found) > 12
    for path, node in found:
        assert node.get("description"), path
        if "properties" in node:
            assert node["additionalProperties"] is False, path
            for name, member in node["properties"].items():
                assert "description" in member or "$ref" in member, f"{path}/{name}"


def test_counts_are_those_of_the_sample() -> None:
    # Counted by hand in sample.py.
    assert document(sample.review())["counts"] == {
        "sources": 6,
        "evidence": 14,
        "substances": 4,
        "substances_compared": 3,
        "substances_with_findings": 2,
        "findings": 6,
        "findings_on_the_whole": 0,
        "grades": {"critical": 2, "major": 3, "minor": 0, "remark": 1},
        "unread": 3,
        "cells": {"agrees": 19, "differs": 1, "silent": 1, "undetermined": 1},
        "rules": 6,
        "rules_off": 1,
    }


def test_by_substance_is_gravest_first() -> None:
    # Both have one critical finding; S1 has three major ones besides.
    made = document(sample.review())["by_substance"]
    assert [one["substance"] for one in made] == ["S1", "S2"]
    assert made[0]["findings"] == ["F1", "F2", "F3", "F4", "F5"]
    turned = replace(sample.review(), findings=tuple(reversed(sample.FINDINGS)))
    assert document(turned)["by_substance"][0]["findings"][0] == "F1"
    assert document(turned)["by_substance"][0]["findings"][-1] == "F5"


def test_every_text_of_the_review_is_in_the_file() -> None:
    made = document(sample.review())
    assert json.loads(jsonfile.render(made)) == made
    held = json.dumps(made, ensure_ascii=False)
    for finding in sample.FINDINGS:
        for exhibit in finding.exhibits:
            assert json.dumps(exhibit.text, ensure_ascii=False) in held
            assert str(exhibit.place) in held
    for unread in sample.UNREAD:
        assert unread.detail in held


def test_verdict_never_calls_a_dossier_sound() -> None:
    verdict = document(sample.review())["verdict"]
    assert verdict == (
        "6 findings on 2 substances: 2 critical, 3 major, 1 remark. "
        "3 places were not read and 1 comparison stayed undetermined."
    )
    assert document(sample.clean())["verdict"] == (
        "No discrepancy was found in what could be read and compared. No place was left unread."
    )
    assert document(sample.empty())["verdict"].startswith("Nothing could be compared")
    unread_only = replace(sample.empty(), unread=sample.UNREAD[:1])
    assert document(unread_only)["verdict"].endswith("1 place was not read.")


def test_order_of_sources_rules_and_unread_does_not_matter() -> None:
    made = sample.review()
    turned = replace(
        made,
        sources=made.sources[::-1],
        rules=made.rules[::-1],
        unread=made.unread[::-1],
        substances=tuple(
            replace(one, attribution=dict(reversed(list(one.attribution.items()))))
            for one in made.substances
        ),
    )
    assert jsonfile.render(document(turned)) == jsonfile.render(document(made))


def test_file_is_utf8_one_line_an_entry_and_ends_with_a_line_feed() -> None:
    data = jsonfile.render(document(sample.review()))
    assert data == jsonfile.render(document(sample.review()))
    assert data.endswith(b"\n}\n")
    assert "4′" in data.decode("utf-8")
    lines = data.decode("utf-8").split("\n")
    assert sum(line.startswith('{"id": "F') for line in lines) == 6


def test_coordinates_that_are_not_numbers_become_null() -> None:
    odd = Drawing((DrawnAtom(float("nan"), float("inf"), "C"), DrawnAtom(0.0, 1.0, "N")), ())
    made = replace(sample.CLEAN, drawing=odd)
    data = jsonfile.render(document(replace(sample.clean(), substances=(made,))))
    atoms = json.loads(data)["substances"][0]["drawing"]["atoms"]
    assert atoms == [["C", None, None, 0, 0, 0], ["N", 0.0, 1.0, 0, 0, 0]]


def test_half_a_surrogate_pair_and_controls_survive() -> None:
    text = "2S\udc80\x00\u202e\u2028end"
    made = replace(sample.CLEAN, label=text)
    data = jsonfile.render(document(replace(sample.clean(), substances=(made,))))
    assert json.loads(data.decode("utf-8"))["substances"][0]["label"] == text


def test_length_of_a_substance_is_flat() -> None:
    def length(number: int) -> float:
        return len(jsonfile.render(document(sample.many(number)))) / number

    assert length(2000) < 1.1 * length(200)


def test_schema_travels_with_the_templates() -> None:
    assert isinstance(assets.templates() / "findings.schema.json", Path)
    assert (assets.templates() / "findings.schema.json").is_file()
