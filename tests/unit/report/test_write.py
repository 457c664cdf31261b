"""Files appear whole or not at all."""

import os
from collections.abc import Callable
from pathlib import Path

import pytest

from dossiercheck import report
from dossiercheck.report import html, jsonfile
from dossiercheck.report.document import document
from tests.unit.report import sample


def test_both_formats(tmp_path: Path) -> None:
    written = report.write(sample.review(), tmp_path / "new" / "deep", ["html", "json", "html"])
    assert [one.name for one in written] == ["report.html", "findings.json"]
    made = document(sample.review())
    assert written[0].read_bytes() == html.render(made)
    assert written[1].read_bytes() == jsonfile.render(made)
    assert sorted(one.name for one in written[0].parent.iterdir()) == [
        "findings.json",
        "report.html",
    ]


def test_unknown_format_writes_nothing(tmp_path: Path) -> None:
    with pytest.raises(ValueError, match=r"unknown report format 'pdf'; known: .*html.*json"):
        report.write(sample.review(), tmp_path / "out", ["json", "pdf"])
    assert not (tmp_path / "out").exists()


def test_a_format_that_fails_leaves_nothing(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def fail(_: object) -> bytes:
        raise RuntimeError("no")

    monkeypatch.setattr(html, "render", fail)
    with pytest.raises(RuntimeError):
        report.write(sample.review(), tmp_path / "out", ["json", "html"])
    assert not (tmp_path / "out").exists()


def test_an_interrupted_write_keeps_the_former_file(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    (tmp_path / "findings.json").write_text("former")

    def full(_: int) -> None:
        raise OSError("no space left on device")

    monkeypatch.setattr(os, "fsync", full)
    with pytest.raises(OSError, match="no space"):
        report.write(sample.review(), tmp_path, ["json"])
    assert (tmp_path / "findings.json").read_text() == "former"
    assert [one.name for one in tmp_path.iterdir()] == ["findings.json"]


def test_flushed_to_the_disk_before_it_is_renamed(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    steps: list[str] = []
    sync: Callable[[int], None] = os.fsync
    rename = Path.replace
    monkeypatch.setattr(os, "fsync", lambda handle: (steps.append("sync"), sync(handle))[1])
    monkeypatch.setattr(
        Path, "replace", lambda one, to: (steps.append(Path(to).name), rename(one, to))[1]
    )
    report.write(sample.review(), tmp_path, ["json"])
    assert steps == ["sync", "findings.json"]
