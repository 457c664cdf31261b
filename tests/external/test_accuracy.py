"""The accuracy benchmark, small: seeded errors and sound records of the wwPDB chemical component
dictionary (package `biotite`), through the program's own line.

The thresholds are those of the full run, with the grain of a small sample.
"""

import pytest

from tests.benchmarks import accuracy
from tests.benchmarks.accuracy import Outcome


@pytest.fixture(scope="module")
def outcome() -> Outcome:
    return accuracy.measure(size=210, seed=11)


def test_every_kind_of_error_is_there(outcome: Outcome) -> None:
    kinds = accuracy.summary(outcome)["kinds"]
    assert len(kinds) == 14
    assert all(row["errors"] >= 10 for row in kinds.values())


def test_errors_are_found_and_their_units_named(outcome: Outcome) -> None:
    figures = accuracy.summary(outcome)
    listed = "\n".join(accuracy.misses(outcome))
    assert figures["found_share"] >= 0.99, listed
    assert figures["unit_right_share"] >= 0.98, listed


def test_a_change_without_a_meaning_raises_nothing(outcome: Outcome) -> None:
    assert accuracy.summary(outcome)["same_meaning_raised"] == 0


def test_grave_findings_on_sound_records_are_errors_of_the_dictionary(outcome: Outcome) -> None:
    # Each record with one was read; `flagged_records.toml` says what was found.
    assert accuracy.summary(outcome)["false_alarm_share"] <= 0.01, accuracy.misses(outcome)
