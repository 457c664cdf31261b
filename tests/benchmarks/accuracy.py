"""Detection, localisation and false alarms of the program's own line over dictionary records.

`python -m tests.benchmarks.accuracy [--size N] [--seed N] [--jobs N] [--json FILE]`

Seeded single errors (`mutations`) and sound records (`corpus`) go through `pipeline.review` as
dossiers on disk. Prints JSON and a table. The first run on a machine draws the dictionary, which
takes about two minutes; it is kept in the system's folder for temporary files.
"""

from __future__ import annotations

import argparse
import json
import sys
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from tests.benchmarks import corpus, flagged, mutations, naive, scoring
from tests.benchmarks.changes import DRAWING_KINDS, NAME_KINDS
from tests.benchmarks.corpus import SoundRecord
from tests.benchmarks.scoring import Said, Score

_STEREO = (*NAME_KINDS, *DRAWING_KINDS)


@dataclass(frozen=True, slots=True)
class Outcome:
    """What was measured. `scores` are the mutants that change the meaning, `silent` those that
    do not (`raised` of them were reported), `sound` the sound records with what was said."""

    scores: tuple[Score, ...]
    silent: tuple[Score, ...]
    sound: tuple[tuple[SoundRecord, Said], ...]
    naive: tuple[bool | None, ...]
    unsettled: Counter[str]
    excluded: Counter[str]


def measure(size: int, seed: int, jobs: int = 1) -> Outcome:
    """Run `size` mutants and as many sound records."""
    loaded = corpus.load(None if size > 600 else 4 * size)
    records = mutations.with_registry(loaded.records)
    made = mutations.mutate(records, size, seed)
    mutants = (*made.changed, *made.unchanged)
    before = scoring.run([m.record for m in mutants], jobs=jobs)
    after = scoring.run([m.changed for m in mutants], jobs=jobs)
    scored = tuple(map(scoring.score, mutants, before, after))
    sound = records[:size]
    said = scoring.run(sound, jobs=jobs)
    return Outcome(
        scores=scored[: len(made.changed)],
        silent=scored[len(made.changed) :],
        sound=tuple(zip(sound, said, strict=True)),
        naive=tuple(naive.differing(sound)),
        unsettled=made.unsettled,
        excluded=Counter(dict(loaded.excluded)),
    )


def summary(outcome: Outcome) -> dict[str, Any]:
    """The figures, as printed and as JSON."""
    kinds = {
        kind: _of_kind([s for s in outcome.scores if s.mutant.kind == kind])
        for kind in dict.fromkeys(s.mutant.kind for s in outcome.scores)
    }
    grave = [(record, said) for record, said in outcome.sound if said.grave()]
    judged = flagged.verdicts()
    verdicts = Counter(
        judged[record.id].verdict if record.id in judged else "not read" for record, _ in grave
    )
    stereo = [s for s in outcome.scores if s.mutant.kind in _STEREO and s.unit != "unsettled"]
    alarms = [found for found in outcome.naive if found]
    return {
        "errors": len(outcome.scores),
        "found": sum(s.found for s in outcome.scores),
        "found_share": _share([s.found for s in outcome.scores]),
        "unit_right_share": _share([s.unit == "right" for s in stereo if s.found]),
        "kinds": kinds,
        "same_meaning": len(outcome.silent),
        "same_meaning_raised": sum(s.found for s in outcome.silent),
        "sound": len(outcome.sound),
        "sound_grave": len(grave),
        "sound_grave_by_verdict": dict(sorted(verdicts.items())),
        "false_alarm_share": _share(
            [
                bool(said.grave())
                and (record.id not in judged or judged[record.id].verdict != "dictionary")
                for record, said in outcome.sound
            ]
        ),
        "sound_name_unread": sum(said.unread_name for _, said in outcome.sound),
        "naive_inchi_alarms": len(alarms),
        "naive_inchi_alarms_on_records_we_pass": sum(
            bool(found) and not said.grave()
            for found, (_, said) in zip(outcome.naive, outcome.sound, strict=True)
        ),
        "unsettled": dict(sorted(outcome.unsettled.items())),
        "excluded": dict(sorted(outcome.excluded.items())),
    }


def _of_kind(scores: Sequence[Score]) -> dict[str, Any]:
    located = [s for s in scores if s.unit != "unsettled" and s.found]
    return {
        "errors": len(scores),
        "found": sum(s.found for s in scores),
        "by_the_right_family": sum(s.family for s in scores),
        "only_unread": sum(s.unread and not s.found for s in scores),
        "unit": dict(sorted(Counter(s.unit for s in located).items())),
    }


def _share(truths: Sequence[bool]) -> float:
    return round(sum(truths) / len(truths), 5) if truths else 1.0


def table(figures: dict[str, Any]) -> str:
    """The figures for a person."""
    lines = [
        f"{'kind of error':<26}{'errors':>8}{'found':>8}{'unread':>8}{'unit right':>12}{'wrong':>7}"
    ]
    for kind, row in figures["kinds"].items():
        unit = row["unit"]
        lines.append(
            f"{kind:<26}{row['errors']:>8}{row['found']:>8}{row['only_unread']:>8}"
            f"{unit.get('right', 0):>12}{sum(unit.values()) - unit.get('right', 0):>7}"
        )
    lines += [
        "",
        f"errors found: {figures['found']} of {figures['errors']} ({figures['found_share']:.2%});"
        f" right unit named in {figures['unit_right_share']:.2%} of the stereo ones found",
        f"changes that mean the same: {figures['same_meaning']},"
        f" raised on {figures['same_meaning_raised']}",
        f"sound records: {figures['sound']}, critical or major on {figures['sound_grave']}"
        f" {figures['sound_grave_by_verdict']}; false alarms {figures['false_alarm_share']:.2%};"
        f" name not read in {figures['sound_name_unread']}",
        f"naive InChI comparison: differs on {figures['naive_inchi_alarms']}, of which"
        f" {figures['naive_inchi_alarms_on_records_we_pass']} the program passes",
    ]
    return "\n".join(lines)


def misses(outcome: Outcome) -> list[str]:
    """What was not found, named wrongly, or raised without cause, one line each."""
    lines = []
    for s in outcome.scores:
        if not s.found or s.unit in ("wrong", "none", "part"):
            what = "missed" if not s.found else f"unit {s.unit}"
            said = "; ".join(f"{f.rule} {f.unit}" for f in s.new) or ("unread" if s.unread else "-")
            changed = s.mutant.changed
            lines.append(
                f"{what}: {s.mutant.kind}: {changed.id}: {changed.name} [{said}]"
                f" truth {sorted(map(sorted, s.mutant.truth.alternatives))}"
            )
    lines += [
        f"raised without cause: {s.mutant.kind}: {s.mutant.changed.id}: {s.mutant.changed.name}"
        f" [{'; '.join(f.rule for f in s.new)}]"
        for s in outcome.silent
        if s.found
    ]
    judged = flagged.verdicts()
    for record, said in outcome.sound:
        for finding in said.grave():
            read = judged.get(record.id)
            verdict = f"{read.verdict}: {read.reason}" if read else "not read"
            lines.append(f"sound: {record.id}: {finding.rule}: {finding.message} [{verdict}]")
    return lines


def main() -> None:
    """Measure and print."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--size", type=int, default=5000)
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--jobs", type=int, default=2)
    parser.add_argument("--json", type=Path)
    parser.add_argument("--misses", action="store_true", help="list every miss and every alarm")
    given = parser.parse_args()
    outcome = measure(given.size, given.seed, given.jobs)
    figures = summary(outcome)
    text = json.dumps(figures, indent=1, ensure_ascii=False)
    if given.json:
        given.json.write_text(text + "\n", encoding="utf-8")
    sys.stdout.write(f"{text}\n\n{table(figures)}\n")
    if given.misses:
        sys.stdout.write("\n".join(misses(outcome)) + "\n")


if __name__ == "__main__":
    main()
