"""The cases of `made`, each in a process that is ended where it goes past its budget."""

from __future__ import annotations

import pytest

from tests.hostile.limited import Answer, within
from tests.hostile.made import CASES, Case

SECONDS = 20  # of processor time, for each; the slowest takes 4
MEMORY = 2 << 30


@pytest.fixture(scope="module")
def answers() -> dict[str, Answer]:
    """Of all cases; after one that breaks its process the next begins behind it."""
    found: dict[str, Answer] = {}
    waiting = list(CASES)
    while waiting:
        batch = {case.what: (case.name, case.make()) for case in waiting}
        some = within(batch, SECONDS, MEMORY)
        found |= some
        waiting = waiting[len(some) + 1 :]
    return found


def test_there_are_as_many_as_were_asked_for() -> None:
    assert len({case.what for case in CASES}) == len(CASES) >= 30


@pytest.mark.parametrize("case", CASES, ids=lambda case: f"{case.name}: {case.what}")
def test_is_answered_within_its_budget(case: Case, answers: dict[str, Answer]) -> None:
    assert case.what in answers, "the process was ended, or the reader broke"
    assert answers[case.what] == (list(case.reasons), case.read)


def test_a_file_that_takes_too_long_has_no_answer() -> None:
    slow = next(case for case in CASES if case.what == "300,000 rows")
    assert within({"x": (slow.name, slow.make())}, 0, 1 << 20) == {}
