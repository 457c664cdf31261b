"""Work in one process and in several: the same outcome, and what dies is listed and alone."""

from __future__ import annotations

import os
from collections.abc import Iterator, Sequence

import pytest

from dossiercheck import rulebook, work
from dossiercheck.model import Evidence, Place, Role
from dossiercheck.relatives import Relatives
from dossiercheck.settings import Settings
from dossiercheck.substances import Identity, Substance
from dossiercheck.work import Judged, Workers

BOOK = rulebook.load(Settings())


def substance(number: int, *texts: tuple[Role, str]) -> Substance:
    said = [
        Evidence(
            f"e{number}.{n}", role, text, Place("a.csv", row=number), f"row{number}", f"S{number}"
        )
        for n, (role, text) in enumerate(texts)
    ]
    return Substance(f"s{number}", f"S{number}", said)


SOUND = ((Role.SMILES, "C[C@H](N)C(=O)O"), (Role.NAME, "(2S)-2-aminopropanoic acid"))
TURNED = ((Role.SMILES, "C[C@H](N)C(=O)O"), (Role.NAME, "(2R)-2-aminopropanoic acid"))


@pytest.fixture(scope="module")
def pair() -> Iterator[Workers]:
    with Workers(2, BOOK) as workers:
        yield workers


def dying(asked: Sequence[tuple[Substance, Relatives]]) -> list[Judged]:
    """Stands for a structure that brings the structure library down."""
    if any(one.label == "S7" for one, _ in asked):
        os._exit(1)
    return [Judged(work._not_judged(one, "", "").entry, (), ()) for one, _ in asked]


def raising(_: Sequence[Substance]) -> list[Judged]:
    raise RuntimeError("a mistake of the program's own")


def test_one_process_and_two_say_the_same(pair: Workers) -> None:
    substances = [substance(n, *(TURNED if n % 7 == 0 else SOUND)) for n in range(1, 251)]
    with Workers(1, BOOK) as alone:
        expected = alone.judge(substances)
        surveyed = alone.survey(substances)
    assert pair.judge(substances) == expected
    assert pair.survey(substances) == surveyed
    assert [one.entry.id for one in expected] == [f"s{n}" for n in range(1, 251)]
    assert [bool(one.findings) for one in expected] == [n % 7 == 0 for n in range(1, 251)]


def test_a_process_that_dies_costs_one_substance(pair: Workers) -> None:
    substances = [substance(n, *SOUND) for n in range(1, 31)]
    judged = pair._spread("judging", dying, [(one, {}) for one in substances], work._lost)
    assert [one.entry.id for one in judged] == [one.id for one in substances]
    lost = [one for one in judged if one.unread]
    assert [one.entry.label for one in lost] == ["S7"]
    assert lost[0].unread[0].reason == "worker-died"
    assert "S7" in lost[0].unread[0].detail
    # The pool goes on afterwards.
    assert not pair.judge([substance(1, *SOUND)])[0].findings


def test_a_mistake_of_the_program_is_not_hidden(pair: Workers) -> None:
    with pytest.raises(RuntimeError, match="of the program"):
        pair._spread("judging", raising, [(substance(1, *SOUND), {})], work._lost)


def test_a_substance_on_which_judging_stops_is_unread(monkeypatch: pytest.MonkeyPatch) -> None:
    plain = work.build_case

    def failing(one: Substance, *rest: object) -> object:
        if one.label == "S2":
            raise KeyError("no such unit")
        return plain(one, *rest)  # type: ignore[arg-type]

    monkeypatch.setattr(work, "build_case", failing)
    with Workers(1, BOOK) as alone:
        judged = alone.judge([substance(n, *TURNED) for n in (1, 2, 3)])
    assert [len(one.findings) for one in judged] == [1, 0, 1]
    (unread,) = judged[1].unread
    assert unread.reason == "judging-failed"
    assert "KeyError" in unread.detail


def test_progress_is_told_to_the_end() -> None:
    told: list[tuple[str, int, int]] = []
    with Workers(1, BOOK, lambda *step: told.append(step)) as alone:
        alone.judge([substance(n, *SOUND) for n in range(1, 131)])
    assert told == [("judging", 100, 130), ("judging", 130, 130)]


def test_a_dead_process_in_the_survey_attributes_nothing_and_loses_nothing(pair: Workers) -> None:
    empty: frozenset[Identity] = frozenset()
    substances = [substance(n, *SOUND) for n in (6, 7, 8)]
    surveyed = pair._spread("surveying", dying_survey, substances, lambda _: empty)
    assert [bool(one) for one in surveyed] == [True, False, True]


def dying_survey(substances: Sequence[Substance]) -> list[frozenset[Identity]]:
    if any(one.label == "S7" for one in substances):
        os._exit(1)
    return [frozenset((Identity("C", "C", "achiral"),)) for _ in substances]
