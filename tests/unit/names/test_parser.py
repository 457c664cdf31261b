"""The child process: order, time-outs, deaths, and that no answer is ever given to another name."""

import os
import signal
import subprocess
import sys
import threading
from pathlib import Path

import pytest

from dossiercheck.names import parser as module
from dossiercheck.names.parser import NameParser, ParserMissing

STEMS = ["prop", "but", "pent", "hex", "hept", "oct", "non", "dec", "undec", "dodec"]
HALOGENS = {"fluoro": "F", "chloro": "Cl", "bromo": "Br", "iodo": "I"}


def halides() -> list[tuple[str, int, str]]:
    """Names with the number of carbon atoms and the halogen that they must have."""
    return [
        (f"{at}-{halogen}-{methyl}-methyl{stem}ane", carbons + 1, symbol)
        for carbons, stem in enumerate(STEMS, 3)
        for at in range(1, carbons + 1)
        for methyl in range(2, carbons)
        for halogen, symbol in HALOGENS.items()
    ]


def test_five_hundred_names_in_order(parser: NameParser) -> None:
    wanted = halides()[:500]
    answers = parser.parse([name for name, _, _ in wanted])
    assert len(answers) == 500
    for (name, carbons, symbol), answer in zip(wanted, answers, strict=True):
        assert answer.name == name
        assert answer.smiles is not None
        smiles = answer.smiles.partition(" ")[0]
        assert smiles.replace("Cl", "").count("C") == carbons
        assert symbol in smiles


def test_messages_stay_with_their_name(parser: NameParser) -> None:
    answers = parser.parse(["ethanol", "qqq", "propane", "(2S)-butan-1-ol", "methane"])
    assert [a.smiles is None for a in answers] == [False, True, False, True, False]
    assert [len(a.messages) for a in answers] == [0, 1, 0, 1, 0]
    assert "qqq" in answers[1].messages[0]
    assert "2S" in answers[3].messages[0]


@pytest.mark.parametrize("name", ["", " ", "etha\0nol", "etha\tnol", "etha\rnol", "a\nb", "naïve"])
def test_what_would_be_misread_is_not_sent(parser: NameParser, name: str) -> None:
    answers = parser.parse([name, "ethanol"])
    assert (answers[0].smiles, answers[0].stopped) == (None, "not-sent")
    assert answers[1].smiles


def test_a_name_of_ten_thousand_characters(parser: NameParser) -> None:
    answers = parser.parse(["methyl" * 1700, "ethanol"])
    assert answers[0].stopped == "too-long"
    assert answers[1].smiles


def test_the_same_name_twice_is_answered_twice(parser: NameParser) -> None:
    first, other, second = parser.parse(["ethanol", "propane", "ethanol"])
    assert first == second != other


def test_a_child_killed_from_outside_loses_nothing() -> None:
    wanted = halides()[:600]
    with NameParser() as running:
        running.parse(["ethanol"])
        pid = running.pid
        assert pid is not None
        timer = threading.Timer(0.05, os.kill, (pid, signal.SIGKILL))
        timer.start()
        answers = running.parse([name for name, _, _ in wanted])
        timer.join()
        assert running.pid not in (None, pid)
    assert [a.name for a in answers] == [name for name, _, _ in wanted]
    assert all(a.smiles for a in answers)


def test_a_child_killed_between_calls_is_replaced() -> None:
    with NameParser() as running:
        assert running.parse(["ethanol"])[0].smiles
        assert running.pid is not None
        os.kill(running.pid, signal.SIGKILL)
        assert all(a.smiles for a in running.parse(["propane", "butane"]))


def stand_in(tmp_path: Path, monkeypatch: pytest.MonkeyPatch, answer: str) -> None:
    """A child of our own in the parser's place; `answer` computes `out` from `name`, `run` being
    how many times it was started."""
    script = tmp_path / "child.py"
    script.write_text(
        "import pathlib, sys, time\n"
        f"runs = pathlib.Path({str(tmp_path / 'runs')!r})\n"
        "run = int(runs.read_text()) + 1 if runs.exists() else 1\n"
        "runs.write_text(str(run))\n"
        "print('a banner')\n"
        "for line in sys.stdin:\n"
        "    name = line.rstrip('\\n')\n"
        "    out = 'C\\t' + name\n"
        f"    {answer}\n"
        "    print(out, flush=True)\n"
    )
    monkeypatch.setattr(module, "command", lambda: (sys.executable, str(script)))


def test_a_slipped_answer_is_noticed_and_asked_again(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    stand_in(tmp_path, monkeypatch, "out = 'N\\tother' if run == 1 and name == 'c' else out")
    with NameParser() as running:
        answers = running.parse(list("abcde"))
    assert [(a.name, a.smiles) for a in answers] == [(x, "C") for x in "abcde"]


def test_an_answer_that_always_slips_is_given_to_nobody(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    stand_in(tmp_path, monkeypatch, "out = 'N\\tother' if name == 'c' else out")
    with NameParser() as running:
        answers = running.parse(list("abcde"))
    assert [(a.smiles, a.stopped) for a in answers] == [
        ("C", ""),
        ("C", ""),
        (None, "echo-mismatch"),
        ("C", ""),
        ("C", ""),
    ]


def test_a_name_without_answer_times_out_and_the_rest_is_answered(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    stand_in(tmp_path, monkeypatch, "time.sleep(600) if name == 'c' else None")
    with NameParser(seconds=1) as running:
        answers = running.parse(list("abcde"))
    assert [(a.smiles, a.stopped) for a in answers] == [
        ("C", ""),
        ("C", ""),
        (None, "time-out"),
        ("C", ""),
        ("C", ""),
    ]
    assert answers[2].messages == ("time-out", "no answer within 1 s")


def test_a_name_that_kills_the_child_is_named(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    stand_in(tmp_path, monkeypatch, "sys.exit() if name == 'c' else None")
    with NameParser() as running:
        answers = running.parse(list("abcde"))
    assert [a.stopped for a in answers] == ["", "", "process-died", "", ""]


def test_a_child_that_does_not_start(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(module, "command", lambda: (sys.executable, "-c", "print('no java')"))
    with pytest.raises(ParserMissing, match="no java"):
        NameParser().parse(["ethanol"])
    monkeypatch.setattr(module, "command", lambda: ("/nowhere/java",))
    with pytest.raises(ParserMissing):
        NameParser().parse(["ethanol"])


def test_closing_leaves_no_process() -> None:
    running = NameParser()
    running.parse(["ethanol"])
    pid = running.pid
    running.close()
    assert running.pid is None
    with pytest.raises(ProcessLookupError):
        os.kill(pid or 0, 0)
    assert running.parse(["propane"])[0].smiles  # and it may be used again
    running.close()


def test_a_forked_copy_has_its_own_child() -> None:
    code = (
        "import os, sys\n"
        "from dossiercheck.names.parser import NameParser\n"
        "with NameParser() as p:\n"
        "    p.parse(['ethanol'])\n"
        "    first = p.pid\n"
        "    child = os.fork()\n"
        "    ok = p.parse(['propane', 'butane'])[1].smiles.startswith('CCCC')\n"
        "    if child == 0:\n"
        "        sys.exit(0 if ok and p.pid != first else 1)\n"
        "    status = os.waitstatus_to_exitcode(os.waitpid(child, 0)[1])\n"
        "    ok = ok and p.parse(['pentane'])[0].smiles and p.pid == first\n"
        "sys.exit(0 if ok and status == 0 else 2)\n"
    )
    done = subprocess.run(
        [sys.executable, "-W", "ignore", "-c", code],
        capture_output=True,
        text=True,
        timeout=120,
        check=False,
        cwd=Path(module.__file__).parents[2],
    )
    assert (done.returncode, done.stdout, done.stderr) == (0, "", "")
