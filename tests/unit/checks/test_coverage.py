"""Coverage: only where the sections are there, never "missing", and with what was not read."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from pathlib import Path

import pytest

from dossiercheck import pipeline, rulebook
from dossiercheck.model import Grade, Review
from dossiercheck.settings import RegisterEntry, Settings

REGISTER = (RegisterEntry("Dorvaline", role="drug substance"),)
SETTINGS = Settings(register=REGISTER)
BOOK = rulebook.load(SETTINGS)
NAME = "(2S,3R)-2-amino-3-hydroxybutanoic acid"
SAID = f"Substance: Dorvaline\nSystematic name: {NAME}\n"


def reviewed(files: Mapping[str, str], folder: Path, settings: Settings = SETTINGS) -> Review:
    for name, text in files.items():
        (folder / name).write_bytes(text.encode())
    return pipeline.review([folder], settings, BOOK)


def coverage(review: Review) -> dict[str, str]:
    return {
        one.rule.removeprefix("coverage/"): one.message
        for one in review.findings
        if one.rule.startswith("coverage/")
    }


def test_a_dossier_without_sections_is_not_held_to_them(tmp_path: Path) -> None:
    assert coverage(reviewed({"a.txt": SAID}, tmp_path)) == {}


@pytest.mark.parametrize(
    ("section", "rules"),
    [
        ("3.2.S.1.1 Nomenclature", {"absolute-configuration"}),
        ("3.2.S.1.3 General properties", {"rotation"}),
        ("3.2.S.3.1 Elucidation of structure", {"configuration-evidence"}),
        ("3.2.S.3.2 Impurities", {"enantiomer-as-impurity", "stereoisomers-as-impurities"}),
        ("3.2.S.4.1 Specification", {"enantiomer-limit", "chiral-identity"}),
        ("3.2.P.1 Description", set()),
    ],
)
def test_each_section_is_asked_for_its_own(section: str, rules: set[str], tmp_path: Path) -> None:
    found = coverage(reviewed({"a.txt": SAID, "b.md": f"# {section}\n\nIt is white.\n"}, tmp_path))
    assert set(found) == rules
    for message in found.values():
        assert "not found in what was read" in message or "was found in what was read" in message
        assert "missing" not in message
        assert message.endswith("Nothing was left unread.")


def test_what_was_not_read_is_listed(tmp_path: Path) -> None:
    files = {"a.txt": SAID, "b.md": "# 3.2.S.4.1 Specification\n\nWhite.\n", "c.xyz": "?"}
    found = coverage(reviewed(files, tmp_path))
    assert "Unread, and it may stand there: c.xyz (whole file)." in found["enantiomer-limit"]


def test_a_sentence_that_leaves_a_matter_open_does_not_raise_it(tmp_path: Path) -> None:
    text = "# 3.2.S.1.3 General properties\n\nThe optical rotation was not determined.\n"
    assert "rotation" in coverage(reviewed({"a.txt": SAID, "b.md": text}, tmp_path))


@pytest.mark.parametrize("name", ["2-amino-3-hydroxybutanoic acid", "2-aminoacetic acid"])
def test_only_one_enantiomer_of_a_chiral_substance_is_asked(name: str, tmp_path: Path) -> None:
    files = {"a.txt": SAID.replace(NAME, name), "b.md": "# 3.2.S.4.1 Specification\n\nWhite.\n"}
    assert coverage(reviewed(files, tmp_path)) == {}


def test_without_a_certain_drug_substance_nothing_is_asked(tmp_path: Path) -> None:
    files = {"a.txt": SAID, "b.md": "# 3.2.S.4.1 Specification\n\nWhite.\n"}
    assert coverage(reviewed(files, tmp_path, replace(SETTINGS, register=()))) == {}


def test_the_enantiomer_counts_by_its_structure_also_of_a_salt(tmp_path: Path) -> None:
    text = (
        "# 3.2.S.3.2 Impurities\n\nSubstance: Impurity A\n"
        "Systematic name: (2R,3S)-2-amino-3-hydroxybutanoic acid hydrochloride\n"
    )
    assert set(coverage(reviewed({"a.txt": SAID, "b.md": text}, tmp_path))) == {
        "stereoisomers-as-impurities"
    }


def test_coverage_is_never_grave() -> None:
    grades = {rule.grade for rule in BOOK.rules if rule.id.startswith("coverage/")}
    assert grades == {Grade.MINOR, Grade.REMARK}
