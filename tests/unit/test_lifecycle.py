"""The current view over several sequences; the XML is that of tests/unit/sequence.py."""

from __future__ import annotations

import json
from pathlib import Path

import jsonschema
import pytest

from dossiercheck import assets, pipeline
from dossiercheck.report.document import document
from dossiercheck.report.html import render
from dossiercheck.report.text import summary
from tests.unit.sequence import BOOK, SETTINGS, cycle_of, findings, index, laid, leaf

R = "Compound: A\nSMILES: C[C@@H](N)C(O)=O\n"
S = "Compound: A\nSMILES: C[C@H](N)C(O)=O\n"
FIRST = {"0000/index.xml": index(leaf("m3/a.txt", R, ID="a")), "0000/m3/a.txt": R}


def later(operation: str, modified: str, number: str = "0001", href: str = "m3/a.txt") -> dict:  # type: ignore[type-arg]
    more = {"modified_file": modified} if modified else {}
    made = leaf(href, S if href else "", ID="b", operation=operation, **more)
    return {f"{number}/index.xml": index(made), **({f"{number}/{href}": S} if href else {})}


def texts(folder: Path) -> list[str]:
    """What was compared, by the names that were read."""
    review = pipeline.review([folder], SETTINGS, BOOK)
    return [said.text for entry in review.substances for said in entry.evidence]


def test_what_was_replaced_is_listed_and_not_judged(tmp_path: Path) -> None:
    laid(tmp_path, {**FIRST, **later("replace", "../0000/index.xml#a")})
    assert texts(tmp_path) == ["C[C@H](N)C(O)=O"]
    review = pipeline.review([tmp_path], SETTINGS, BOOK)
    (finding,) = review.findings
    assert finding.rule == "across-documents/leaf-not-current"
    assert finding.grade == "remark"
    assert finding.message == (
        "The leaf 3.2.S.1.2 “A document” of sequence 0000 was replaced in sequence 0001."
    )
    assert [one.place.source for one in finding.exhibits] == ["0000/index.xml", "0001/index.xml"]
    assert "0000/m3/a.txt" in [source.path for source in review.sources]


def test_what_was_deleted_is_listed_and_not_judged(tmp_path: Path) -> None:
    laid(tmp_path, {**FIRST, **later("delete", "../0000/index.xml#a", href="")})
    assert texts(tmp_path) == []
    assert [rule for rule, _ in findings(tmp_path)] == ["leaf-not-current"]


def test_what_was_appended_to_stays_current(tmp_path: Path) -> None:
    laid(tmp_path, {**FIRST, **later("append", "../0000/index.xml#a")})
    assert len(texts(tmp_path)) == 2
    assert "leaf-not-current" not in [rule for rule, _ in findings(tmp_path)]


def test_a_leaf_may_be_appended_to_one_of_its_own_sequence(tmp_path: Path) -> None:
    """Allowed since version 3.2.1 of the specification, by its document change history."""
    made = index(
        leaf("m3/a.txt", R, ID="a"),
        leaf("m3/b.txt", R, ID="b", operation="append", modified_file="index.xml#a"),
    )
    laid(tmp_path, {**FIRST, "0000/index.xml": made, "0000/m3/b.txt": R})
    assert findings(tmp_path) == []


def test_three_sequences_in_a_row(tmp_path: Path) -> None:
    laid(tmp_path, {**FIRST, **later("replace", "../0000/index.xml#a")})
    laid(tmp_path, later("replace", "../0001/index.xml#b", "0002"))
    ended = [(one.leaf.sequence, one.by.sequence) for one in cycle_of(tmp_path).ended]
    assert ended == [("0000", "0001"), ("0001", "0002")]
    assert len(texts(tmp_path)) == 1


def test_sequences_count_as_numbers(tmp_path: Path) -> None:
    nine = {name.replace("0000", "9"): text for name, text in FIRST.items()}
    laid(tmp_path, {**nine, **later("replace", "../9/index.xml#a", "10")})
    assert [rule for rule, _ in findings(tmp_path)] == ["leaf-not-current"]


def test_a_file_that_another_leaf_still_needs_is_judged(tmp_path: Path) -> None:
    both = index(leaf("m3/a.txt", R, ID="a"), leaf("m3/a.txt", R, ID="c"))
    laid(tmp_path, {**FIRST, "0000/index.xml": both, **later("replace", "../0000/index.xml#a")})
    assert len(texts(tmp_path)) == 2


BROKEN = [
    ("replace", "../0000/index.xml#z", "no leaf has that ID"),
    ("replace", "../0000/index.xml", "no leaf has that ID"),
    ("replace", "", "does not say which leaf"),
    ("replace", "../0000/m3/index.xml#a", "there is no such index"),
    ("replace", "http://x.invalid/index.xml#a", "there is no such index"),
    ("replace", "index.xml#b", "a leaf of its own sequence"),
    ("append", "index.xml#b", "it modifies itself"),
    ("new", "../0000/index.xml#a", "is new and yet names a leaf"),
    ("mend", "../0000/index.xml#a", "is none of new, append, replace, delete"),
    ("", "", "is none of new, append, replace, delete"),
]


@pytest.mark.parametrize(("operation", "modified", "says"), BROKEN)
def test_a_reference_that_cannot_hold_ends_nothing(
    operation: str, modified: str, says: str, tmp_path: Path
) -> None:
    laid(tmp_path, {**FIRST, **later(operation, modified)})
    cycle = cycle_of(tmp_path)
    assert cycle.ended == ()
    assert [says in one.why for one in cycle.broken] == [True]
    assert len(texts(tmp_path)) == 2
    assert "leaf-reference-broken" in [rule for rule, _ in findings(tmp_path)]


def test_two_leaves_of_one_id_end_nothing(tmp_path: Path) -> None:
    twice = index(leaf("m3/a.txt", R, ID="a"), leaf("m3/b.txt", R, ID="a"))
    laid(tmp_path, {**FIRST, "0000/index.xml": twice, "0000/m3/b.txt": R})
    laid(tmp_path, later("replace", "../0000/index.xml#a"))
    cycle = cycle_of(tmp_path)
    assert (cycle.ended, len(cycle.broken)) == ((), 1)
    assert "2 leaves have that ID" in cycle.broken[0].why


def test_leaves_that_replace_each_other_in_a_circle(tmp_path: Path) -> None:
    first = leaf("m3/a.txt", R, ID="a", operation="replace", modified_file="../0001/index.xml#b")
    laid(tmp_path, {**FIRST, "0000/index.xml": index(first)})
    laid(tmp_path, later("replace", "../0000/index.xml#a"))
    cycle = cycle_of(tmp_path)
    assert [one.leaf.id for one in cycle.ended] == ["a"]
    assert ["later sequence 0001" in one.why for one in cycle.broken] == [True]
    assert texts(tmp_path) == ["C[C@H](N)C(O)=O"]


def test_a_leaf_replaced_twice(tmp_path: Path) -> None:
    laid(tmp_path, {**FIRST, **later("replace", "../0000/index.xml#a")})
    laid(tmp_path, later("delete", "../0000/index.xml#a", "0002", href=""))
    cycle = cycle_of(tmp_path)
    assert len(cycle.ended) == 1
    assert ["was replaced already, in 0001" in one.why for one in cycle.broken] == [True]


def test_a_sequence_that_was_not_given_is_unread_once(tmp_path: Path) -> None:
    leaves = [
        leaf(f"m3/{n}.txt", S, ID=n, operation="replace", modified_file=f"../0000/index.xml#{n}")
        for n in "xyz"
    ]
    files = {f"m3/{n}.txt": S for n in "xyz"} | {"index.xml": index(*leaves)}
    laid(tmp_path / "inside", {f"0003/{name}": text for name, text in files.items()})
    laid(tmp_path / "alone", files)
    for folder in ("inside", "alone"):
        (unread,) = cycle_of(tmp_path / folder).unread
        assert unread.reason == "life-cycle-unknown"
        assert unread.detail.startswith("3 leaves modify leaves of")
        assert findings(tmp_path / folder) == []


def test_another_application_and_folders_without_numbers(tmp_path: Path) -> None:
    other = {f"other/{name}": text for name, text in FIRST.items()}
    mine = {
        f"mine/{name}": text
        for name, text in later("replace", "../../other/0000/index.xml#a").items()
    }
    laid(tmp_path / "1", {**other, **mine})
    named = {name.replace("0000", "first"): text for name, text in FIRST.items()}
    laid(tmp_path / "2", {**named, **later("replace", "../first/index.xml#a", "second")})
    for folder in ("1", "2"):
        cycle = cycle_of(tmp_path / folder)
        assert (cycle.ended, cycle.broken) == ((), ())
        assert [one.reason for one in cycle.unread] == ["life-cycle-unknown"]


def test_the_report_shows_findings_of_the_dossier_as_a_whole(tmp_path: Path) -> None:
    laid(tmp_path, {**FIRST, **later("replace", "../0000/index.xml#a"), "0001/m3/b.txt": "draft"})
    made = document(pipeline.review([tmp_path], SETTINGS, BOOK))
    schema = json.loads((assets.templates() / "findings.schema.json").read_text("utf-8"))
    jsonschema.validate(made, schema)
    assert made["verdict"].startswith("2 findings on the dossier as a whole: 1 minor, 1 remark.")
    assert made["counts"]["substances_with_findings"] == 0
    assert "The dossier as a whole" in render(made).decode()
    assert "MINOR     The dossier as a whole: No leaf leads to" in summary(made)
