"""The register that is proposed: TOML that loads, and gives the same substances when fed back."""

from __future__ import annotations

import shutil
import tomllib
from pathlib import Path

import pytest

from dossiercheck import cli, pipeline, rulebook, settings
from dossiercheck.model import Evidence, Place, Review, Role, SubstanceEntry
from dossiercheck.proposal import proposed

CLEAN = Path(__file__).parents[2] / "samples" / "clean"


def reviewed(folder: Path, given: settings.Settings) -> Review:
    return pipeline.review([folder], given, rulebook.load(given))


def sorted_out(review: Review) -> list[tuple[str, str, list[tuple[str, str]]]]:
    """Label, role and what each substance holds, without what the register itself says."""
    return [
        (
            one.label,
            one.role,
            [(str(e.place), e.text) for e in one.evidence if not e.group.startswith("register#")],
        )
        for one in review.substances
    ]


def test_fed_back_it_gives_the_same_substances(tmp_path: Path) -> None:
    dossier = tmp_path / "dossier"
    shutil.copytree(CLEAN, dossier)
    (dossier / settings.FILE_NAME).unlink()
    first = reviewed(dossier, settings.Settings())
    written = tmp_path / "register.toml"
    written.write_text(proposed(first), encoding="utf-8")
    again = reviewed(dossier, settings.load(written))
    assert sorted_out(again) == sorted_out(first)
    # Who is who does not depend on the number of workers.
    assert reviewed(dossier, settings.Settings(jobs=2)).substances == first.substances
    drug = next(one for one in first.substances if one.role == "drug substance")
    entry = next(e for e in tomllib.loads(written.read_text())["substance"] if "role" in e)
    assert entry["id"] == drug.label == "Dorvaquelan tartrate"
    assert entry["aliases"] == ["BQT-2291"]
    assert "nomenclature.docx" in written.read_text()


def entry(number: int, label: str, *called: str, smiles: str = "") -> SubstanceEntry:
    said = tuple(
        Evidence(f"e{number}{n}", Role.SMILES, "C", Place("a\nb.txt", line=n), label=one)
        for n, one in enumerate(called, 1)
    )
    return SubstanceEntry(f"s{number}", label, said, {}, None, smiles=smiles)


def review_of(*entries: SubstanceEntry) -> Review:
    return Review((), (), entries, (), (), {}, "")


def test_an_alias_of_two_substances_is_a_comment_and_so_is_what_has_no_label() -> None:
    text = proposed(
        review_of(
            entry(1, "Impurity A", "Impurity A", "DX-1", "impurity-a"),
            entry(2, "Impurity B", "Impurity B", "DX-1", "DX-2"),
            entry(3, "a.sdf, record 3", "", smiles="C[C@H](N)O"),
        )
    )
    assert tomllib.loads(text)["substance"] == [
        {"id": "Impurity A"},
        {"id": "Impurity B", "aliases": ["DX-2"]},
    ]
    assert '# "DX-1" is left out' in text
    assert '# smiles = "C[C@H](N)O"' in text


def test_odd_characters_do_not_break_out_of_their_line() -> None:
    text = proposed(review_of(entry(1, 'A"\\\n\x7f[x]', 'A"\\\n\x7f[x]')))
    (found,) = tomllib.loads(text)["substance"]
    assert found["id"].startswith('A"\\')


def run(*arguments: object) -> int:
    return cli.run([str(one) for one in arguments])


@pytest.fixture
def dossier(tmp_path: Path) -> Path:
    folder = tmp_path / "dossier"
    folder.mkdir()
    (folder / "a.txt").write_text(
        "Substance: Dorvaline\nSystematic name: (2S)-2-aminobutanoic acid\n"
    )
    return folder


def test_the_command_writes_it_and_never_over_a_file(
    dossier: Path, tmp_path: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    target = tmp_path / "new.toml"
    assert run("check", dossier, "--propose-register", target, "--quiet") == 0
    assert tomllib.loads(target.read_text())["substance"][0]["id"] == "Dorvaline"
    target.write_text("mine")
    assert run("check", dossier, "--propose-register", target, "--quiet") == 2
    assert "never overwritten" in capfd.readouterr().err
    assert target.read_text() == "mine"


def test_inside_the_dossier_only_as_its_settings(
    dossier: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    assert run("check", dossier, "--propose-register", dossier / "register.toml") == 2
    assert "part of the dossier" in capfd.readouterr().err
    assert (
        run("check", dossier, "--propose-register", dossier / "dossiercheck.toml", "--quiet") == 0
    )
    assert run("check", dossier, "--quiet") == 0
