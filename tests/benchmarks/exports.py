"""The public substance records through the program's own line.

`python -m tests.benchmarks.exports [--file FILE] [--sample N] [--seed N] [--json FILE]`

780 records of the FDA/NCATS registration system, slimmed (`gsrs_open/substances.jsonl` beside the
project; `DOSSIERCHECK_EXTERNAL` names another folder). Prints a table of outcomes: each
systematic name, formula and weight against the drawn structure, the stereochemistry code against
it; the findings by rule and grade; and every critical finding with what its reading by hand came
to (`exports_judged.toml`). The records have errors of their own, so that a finding is a question.
"""

from __future__ import annotations

import argparse
import json
import os
import random
import sys
import tomllib
from collections import Counter, defaultdict
from collections.abc import Sequence
from pathlib import Path
from typing import Any

from dossiercheck import pipeline, rulebook
from dossiercheck.model import Evidence, Finding, Grade, Review, Role
from dossiercheck.settings import Settings

_HERE = Path(__file__).resolve().parents[2]
_EXTERNAL = Path(os.environ.get("DOSSIERCHECK_EXTERNAL", _HERE.parent / "shared" / "external"))
FILE = _EXTERNAL / "gsrs_open" / "substances.jsonl"
_JUDGED = Path(__file__).with_name("exports_judged.toml")
_COMPARED = (Role.NAME, Role.FORMULA, Role.MASS, Role.STEREO)


def review(path: Path) -> Review:
    """The program's review of the file alone, with its own rules and settings."""
    settings = Settings()
    return pipeline.review([path], settings, rulebook.load(settings))


def key_of(finding: Finding) -> str:
    """What names a finding across runs: record, rule, and the paths it quotes from."""
    place = finding.exhibits[0].place
    return f"{place.record} {finding.rule} {place.path} {finding.locant}".strip()


def outcomes(result: Review) -> dict[str, Counter[str]]:
    """For names, formulas, weights and stereochemistry codes: how many came to what.

    An evidence counts once: under the gravest finding that quotes it, else as unread, else as
    "no structure to hold it against" or "nothing found".
    """
    gravest: dict[str, Finding] = {}
    for finding in result.findings:
        for exhibit in finding.exhibits:
            before = gravest.get(exhibit.evidence)
            if before is None or finding.grade.gravity < before.grade.gravity:
                gravest[exhibit.evidence] = finding
    unread = {(u.place.record, u.place.path): u.reason for u in result.unread}
    lost = {
        said.id
        for substance in result.substances
        for said in substance.evidence
        if (said.place.record, said.place.path) in unread
    }
    table: dict[str, Counter[str]] = defaultdict(Counter)
    for substance in result.substances:
        for said in substance.evidence:
            if said.role not in _COMPARED:
                continue
            row = f"{said.role} {said.text}" if _is_code(said) else str(said.role)
            if said.role is Role.STEREO and not _is_code(said):
                row = said.place.field or row
            finding = gravest.get(said.id)
            reason = unread.get((said.place.record, said.place.path))
            if finding is not None:
                table[row][f"{finding.grade} {finding.rule}"] += 1
            elif reason:
                table[row][f"unread: {reason}"] += 1
            elif not any(e.role is Role.MOLFILE and e.id not in lost for e in substance.evidence):
                table[row]["no structure to hold it against"] += 1
            else:
                table[row]["nothing found"] += 1
    return dict(table)


def _is_code(said: Evidence) -> bool:
    return said.role is Role.STEREO and said.place.field == "stereochemistry"


def judged() -> dict[str, dict[str, str]]:
    """What reading by hand came to, by `key_of`."""
    return tomllib.loads(_JUDGED.read_text(encoding="utf-8")) if _JUDGED.is_file() else {}


def summary(result: Review, sample: int, seed: int) -> dict[str, Any]:
    """Everything as one JSON object; `sample` of the critical findings are drawn with `seed`."""
    verdicts = judged()
    critical = [finding for finding in result.findings if finding.grade is Grade.CRITICAL]
    drawn = random.Random(seed).sample(critical, min(sample, len(critical)))
    read = [verdicts.get(key_of(finding), {"verdict": "not read"}) for finding in drawn]
    return {
        "records": len({s.evidence[0].place.record for s in result.substances}),
        "substances": len(result.substances),
        "outcomes": {row: dict(kinds.most_common()) for row, kinds in outcomes(result).items()},
        "findings": {
            f"{grade} {rule}": number
            for (grade, rule), number in sorted(
                Counter((str(f.grade), f.rule) for f in result.findings).items()
            )
        },
        "unread": dict(Counter(entry.reason for entry in result.unread).most_common()),
        "critical": [
            {
                "key": key_of(finding),
                "substance": finding.substance,
                "verdict": verdicts.get(key_of(finding), {}).get("verdict", "not read"),
            }
            for finding in critical
        ],
        "sample": len(drawn),
        "sample_verdicts": dict(Counter(entry["verdict"] for entry in read).most_common()),
    }


def table(found: dict[str, Any]) -> str:
    """The figures as text."""
    lines = [f"{found['records']} records, {found['substances']} substances", ""]
    for row, kinds in sorted(found["outcomes"].items()):
        lines.append(f"{row}: {sum(kinds.values())}")
        lines += [f"  {number:6} {kind}" for kind, number in kinds.items()]
    for title in ("findings", "unread", "sample_verdicts"):
        lines += ["", f"{title}:", *(f"  {n:6} {kind}" for kind, n in found[title].items())]
    lines += ["", "critical findings:"]
    lines += [f"  {entry['verdict']:9} {entry['key']}" for entry in found["critical"]]
    return "\n".join(lines)


def main(arguments: Sequence[str] | None = None) -> int:
    """Run it; 0 where every sampled critical finding has been read, else 1; 2 without the file."""
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0] if __doc__ else "")
    parser.add_argument("--file", type=Path, default=FILE)
    parser.add_argument("--sample", type=int, default=60)
    parser.add_argument("--seed", type=int, default=4)
    parser.add_argument("--json", type=Path)
    options = parser.parse_args(arguments)
    if not options.file.is_file():
        print(f"{options.file} is not here", file=sys.stderr)
        return 2
    found = summary(review(options.file), options.sample, options.seed)
    text = json.dumps(found, indent=1, ensure_ascii=False)
    if options.json:
        options.json.write_text(text + "\n", encoding="utf-8")
    else:
        print(text)
    print(table(found), file=sys.stderr if not options.json else sys.stdout)
    return 1 if found["sample_verdicts"].get("not read") else 0


if __name__ == "__main__":
    sys.exit(main())
