"""The command line: exit status, streams, and every mistake answered in one clear line.

The line itself is replaced by a stand-in, so that only arguments and streams are tested here.
"""

from __future__ import annotations

import json
import os
import signal
import subprocess
import sys
from collections.abc import Callable, Sequence
from pathlib import Path
from typing import Any

import pytest

from dossiercheck import __version__, cli
from dossiercheck.model import Exhibit, Finding, Grade, Place, Review, Source, Unread
from dossiercheck.rulebook import Rulebook
from dossiercheck.settings import Settings

Write = Callable[[str, str], Path]
PLACE = Place("names.txt", line=1)


def finding(grade: Grade) -> Finding:
    exhibit = Exhibit("e1", "name", "ethanol", PLACE)
    return Finding("f1", "name/lost-space", grade, "s1", "It is so.", "Mend it.", (exhibit,))


UNREAD = Unread(PLACE, "no-reader", "no reader for it")


class Line:
    """Stands in for the pipeline; remembers what it was asked."""

    def __init__(self) -> None:
        self.grades: tuple[Grade, ...] = ()
        self.unread: tuple[Unread, ...] = ()
        self.settings: Settings | None = None
        self.rulebook: Rulebook | None = None
        self.trouble: BaseException | None = None

    def review(
        self, paths: Sequence[Path], settings: Settings, rulebook: Rulebook, progress: Any = None
    ) -> Review:
        self.settings, self.rulebook = settings, rulebook
        if progress:
            progress("reading", 1, 1)
        if self.trouble:
            raise self.trouble
        return Review(
            sources=(Source("names.txt", "0" * 64, 8, "txt"),),
            unread=self.unread,
            substances=(),
            findings=tuple(finding(grade) for grade in self.grades),
            rules=rulebook.entries(),
            method={},
            caution="Confirm it.",
        )


@pytest.fixture
def line(monkeypatch: pytest.MonkeyPatch) -> Line:
    stand_in = Line()
    monkeypatch.setattr(cli.pipeline, "review", stand_in.review)
    return stand_in


@pytest.fixture
def dossier(write: Write) -> Path:
    return write("dossier/names.txt", "ethanol\n").parent


def complaint(capfd: pytest.CaptureFixture[str]) -> str:
    """The one line on stderr, nothing being on stdout."""
    out, err = capfd.readouterr()
    assert out == ""
    assert err.count("\n") == 1
    assert err.startswith("dossiercheck: ")
    return err


# --- exit status --------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("grades", "unread", "more", "status"),
    [
        ((), (), [], 0),
        ((Grade.REMARK,), (), [], 0),
        ((Grade.MINOR,), (), [], 1),
        ((Grade.CRITICAL,), (), [], 1),
        ((Grade.MINOR,), (), ["--fail-on", "major"], 0),
        ((Grade.MAJOR,), (), ["--fail-on", "major"], 1),
        ((Grade.REMARK,), (), ["--fail-on", "remark"], 1),
        ((), (UNREAD,), [], 3),
        ((Grade.REMARK,), (UNREAD,), [], 3),
        ((Grade.MINOR,), (UNREAD,), [], 1),
    ],
)
@pytest.mark.parametrize("form", ["text", "json"])
def test_exit_status(
    line: Line,
    dossier: Path,
    grades: tuple[Grade, ...],
    unread: tuple[Unread, ...],
    more: list[str],
    status: int,
    form: str,
) -> None:
    line.grades, line.unread = grades, unread
    assert cli.run(["check", str(dossier), "--format", form, *more]) == status


def test_the_settings_say_what_fails(line: Line, write: Write) -> None:
    dossier = write("dossier/dossiercheck.toml", 'fail_on = "critical"\njobs = 2\n').parent
    line.grades = (Grade.MAJOR,)
    assert cli.run(["check", str(dossier)]) == 0
    assert line.settings is not None
    assert line.settings.jobs == 2
    assert cli.run(["check", str(dossier), "--fail-on", "major", "--jobs", "1"]) == 1
    assert line.settings.jobs == 1


# --- streams ------------------------------------------------------------------------------


def test_a_summary_goes_to_stdout_and_nothing_to_stderr(
    line: Line, dossier: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    line.grades = (Grade.MAJOR,)
    cli.run(["check", str(dossier)])
    out, err = capfd.readouterr()
    assert "It is so." in out
    assert "Confirm it." in out
    assert err == ""


def test_json_goes_to_stdout_whole(
    line: Line, dossier: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    line.grades = (Grade.MAJOR,)
    cli.run(["check", str(dossier), "--format", "json"])
    out, err = capfd.readouterr()
    assert json.loads(out)["findings"][0]["message"] == "It is so."
    assert err == ""


def test_files_go_to_out_and_the_summary_stays(
    line: Line, dossier: Path, tmp_path: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    out = tmp_path / "a" / "report"
    cli.run(["check", str(dossier), "--out", str(out), "--format", "json"])
    assert [path.name for path in out.iterdir()] == ["findings.json"]
    assert "Examined 1 source" in capfd.readouterr().out


def test_quiet_says_nothing(
    line: Line, dossier: Path, tmp_path: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    out = tmp_path / "report"
    line.grades = (Grade.MAJOR,)
    assert cli.run(["check", str(dossier), "--out", str(out), "--format", "json", "--quiet"]) == 1
    assert capfd.readouterr() == ("", "")
    assert (out / "findings.json").is_file()


def test_version_and_help_are_no_mistakes(capfd: pytest.CaptureFixture[str]) -> None:
    assert cli.run(["--version"]) == 0
    assert capfd.readouterr().out == f"dossiercheck {__version__}\n"
    assert cli.run(["check", "--help"]) == 0
    assert "--fail-on critical|major|minor|remark" in capfd.readouterr().out


def test_nothing_asked_is_answered_with_the_help(capfd: pytest.CaptureFixture[str]) -> None:
    assert cli.run([]) == 2
    out, err = capfd.readouterr()
    assert out == ""
    assert "check" in err
    assert "rules" in err


def test_progress_only_where_a_person_watches(
    line: Line, dossier: Path, capfd: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(sys.stderr, "isatty", lambda: True)
    monkeypatch.setenv("NO_COLOR", "1")
    monkeypatch.setenv("TERM", "xterm")
    cli.run(["check", str(dossier), "--quiet"])
    assert capfd.readouterr().err == ""
    cli.run(["check", str(dossier)])
    assert "\x1b[3" not in capfd.readouterr().err  # no colour


# --- mistakes -----------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("arguments", "says"),
    [
        (["chekc", "{dossier}"], "no command is called 'chekc'; did you mean 'check'?"),
        (["{dossier}"], "to check it: dossiercheck check {dossier}"),
        (["check"], "Missing argument"),
        (["check", "{dossier}x"], "no such file or folder: {dossier}x; did you mean '{dossier}'?"),
        (["check", "{dossier}", "--fial-on", "minor"], "--fail-on"),
        (["check", "{dossier}", "--fail-on", "majr"], "'majr' is no grade; did you mean 'major'?"),
        (["check", "{dossier}", "--fail-on", "9"], "'9' is no grade; known: critical, major"),
        (["check", "{dossier}", "--fail-on"], "requires an argument"),
        (["check", "{dossier}", "--format", "htlm"], "'htlm' is no format; did you mean 'html'?"),
        (["check", "{dossier}", "--format", "json", "--format", "html"], "add --out DIR"),
        (["check", "{dossier}", "--jobs", "0"], "--jobs"),
        (["check", "{dossier}", "--jobs", "many"], "'many' is not a valid integer"),
        (["check", "{dossier}", "--settings", "{tmp}/no.toml"], "no.toml: cannot be read"),
        (["check", "{dossier}", "--rules", "{tmp}/no"], "is not a folder of rules"),
        (["check", "{dossier}", "--rules", "{dossier}"], "holds no rule"),
        (["check", "{dossier}", "--out", "{dossier}/names.txt"], "lies inside the dossier"),
        (["check", "{dossier}", "--out", "{dossier}/r"], "choose another folder"),
        (["check", "{dossier}", "--out", "{tmp}/file/r"], "file is not a folder"),
        (["check", "{dossier}", "--out", "{tmp}/file"], "file is not a folder"),
        (["rules", "name/lost-spaec"], "did you mean 'name/lost-space'?"),
        (["rules", "zzz"], "'dossiercheck rules' lists all"),
        (["rules", "--format", "jsn"], "'jsn' is no format; did you mean 'json'?"),
        (["rules", "--format", "html"], "'html' is no format"),
    ],
)
def test_a_mistake_gives_one_line_and_status_2(
    line: Line,
    dossier: Path,
    write: Write,
    capfd: pytest.CaptureFixture[str],
    arguments: list[str],
    says: str,
) -> None:
    tmp = write("file", "").parent
    before = sorted(tmp.rglob("*"))
    filled = [part.format(dossier=dossier, tmp=tmp) for part in arguments]
    assert cli.run(filled) == 2
    assert says.format(dossier=dossier) in complaint(capfd)
    assert sorted(tmp.rglob("*")) == before, "nothing is written"
    assert line.settings is None, "nothing is checked"


def test_bad_settings_and_bad_rules_are_pointed_at(
    line: Line, write: Write, capfd: pytest.CaptureFixture[str]
) -> None:
    settings = write("dossier/dossiercheck.toml", 'fail_on = "minor"\ncolums = 1\n')
    assert cli.run(["check", str(settings.parent)]) == 2
    assert f"{settings}:2: unknown key 'colums'" in complaint(capfd)
    settings.write_text('[rules."name/lost-spaec"]\ngrade = "minor"\n')
    assert cli.run(["check", str(settings.parent)]) == 2
    assert f"{settings}:1: no rule is called 'name/lost-spaec'" in complaint(capfd)
    settings.unlink()
    rule = write("own/name/bad.toml", 'titel = "x"\n')
    assert cli.run(["check", str(settings.parent), "--rules", str(rule.parents[1])]) == 2
    assert f"{rule}:1: unknown key 'titel'" in complaint(capfd)
    assert line.settings is None


def test_a_disk_that_refuses_is_no_finding(
    line: Line,
    dossier: Path,
    tmp_path: Path,
    capfd: pytest.CaptureFixture[str],
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    def refuse(*_: object) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(cli.report, "write_document", refuse)
    assert cli.run(["check", str(dossier), "--out", str(tmp_path / "r")]) == 2
    assert "No space left on device" in complaint(capfd)


def test_an_error_of_its_own_is_not_taken_for_findings(
    line: Line, dossier: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    line.trouble = ZeroDivisionError("oh")
    assert cli.run(["check", str(dossier)]) == 2
    assert capfd.readouterr().err.endswith(
        "dossiercheck: stopped by an error of its own: ZeroDivisionError: oh\n"
    )


def test_interruption_ends_cleanly(
    line: Line, dossier: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    line.trouble = KeyboardInterrupt()
    assert cli.run(["check", str(dossier)]) == 130
    assert "Traceback" not in capfd.readouterr().err


# --- the user's own rules -----------------------------------------------------------------


def test_a_folder_of_own_rules_is_used(line: Line, dossier: Path, write: Write) -> None:
    shipped = cli.rulebook.assets.rules() / "name" / "lost-space.toml"
    own = write("own/name/lost-space.toml", shipped.read_text().replace('"major"', '"remark"'))
    cli.run(["check", str(dossier), "--rules", str(own.parents[1])])
    assert line.rulebook is not None
    rule = next(rule for rule in line.rulebook.rules if rule.id == "name/lost-space")
    assert rule.grade is Grade.REMARK


def test_the_catalogue_is_listed(capfd: pytest.CaptureFixture[str]) -> None:
    assert cli.run(["rules"]) == 0
    lines = capfd.readouterr().out.splitlines()
    assert len(lines) == len(list(cli.rulebook.assets.rules().rglob("*.toml")))
    assert any(text.startswith("name/lost-space ") for text in lines)


def test_a_rule_has_a_page(capfd: pytest.CaptureFixture[str]) -> None:
    assert cli.run(["rules", "name/lost-space"]) == 0
    out = capfd.readouterr().out
    assert "ethyl(2S)-2-hydroxypropanoate" in out
    assert cli.run(["rules", "name/lost-space", "--format", "json"]) == 0
    (rule,) = json.loads(capfd.readouterr().out)
    assert rule["id"] == "name/lost-space"
    assert rule["examples"][0]["expect"] == "finding"


# --- the real process ---------------------------------------------------------------------


def test_a_reader_that_stops_early_is_no_error() -> None:
    command = [sys.executable, "-m", "dossiercheck", "rules", "--format", "json"]
    reading, writing = os.pipe()
    os.close(reading)
    done = subprocess.run(command, stdout=writing, stderr=subprocess.PIPE, check=False)
    os.close(writing)
    assert done.returncode == 0
    assert done.stderr == b""


def test_the_interrupt_key_ends_the_process(dossier: Path) -> None:
    program = (
        "import os, signal, sys\n"
        "from dossiercheck import cli\n"
        "cli.pipeline.review = lambda *a, **k: os.kill(os.getpid(), signal.SIGINT) or 1 / 0\n"
        f"sys.exit(cli.run(['check', {str(dossier)!r}]))\n"
    )
    done = subprocess.run(
        [sys.executable, "-c", program],
        capture_output=True,
        check=False,
        preexec_fn=lambda: signal.signal(signal.SIGINT, signal.default_int_handler),
    )
    assert done.returncode == 130
    assert b"Traceback" not in done.stderr
