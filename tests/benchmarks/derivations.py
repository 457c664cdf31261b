"""Derivations replayed by the independent checker of `tests/unit/stereo/replay.py`.

Over the hand-ranked cases, the published validation suite from its drawings (Hanson et al., J.
Chem. Inf. Model. 2018, 58, 1755) where it lies beside the project, and molecules of the wwPDB
dictionary. `letters` counts the units whose letter is worked out from a mark of the library's.

    python -m tests.benchmarks.derivations --size 2000
"""

from __future__ import annotations

import argparse
import json
import sys
from collections import Counter
from collections.abc import Iterable, Iterator
from pathlib import Path
from time import process_time
from typing import Any

from rdkit import RDLogger

from dossiercheck.stereo.descriptors import descriptors
from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.structure import Structure
from tests.benchmarks.descriptors import _SUITE
from tests.cases.hand_ranked import CASES, structure
from tests.property.pool import dictionary
from tests.unit.stereo.anew import prepared, turned
from tests.unit.stereo.replay import untrue


def suite() -> Iterator[tuple[str, Structure]]:
    """The published compounds as drawn; none where they are not here."""
    if not (_SUITE / "compounds_2d.sdf").is_file():
        return
    for record in (_SUITE / "compounds_2d.sdf").read_text("utf-8").split("$$$$\n"):
        if record.strip():
            name = record.split("\n", 1)[0]
            yield name, from_molblock(record[: record.index("M  END") + 7])


def replayed(named: Iterable[tuple[str, Structure]]) -> dict[str, Any]:
    """Counts over some structures, and what is untrue."""
    count: Counter[str] = Counter()
    rules: Counter[str] = Counter()
    wrong: list[str] = []
    began = process_time()
    for name, one in named:
        count["structures"] += 1
        mol, means = prepared(one.mol)
        for unit in descriptors(one):
            if unit.derivation is None or unit.kind == "helix":
                why = "helix" if unit.kind == "helix" else unit.note
                count[f"without a derivation: {why}"] += 1
                continue
            count["units"] += 1
            rules.update(step.rule for step in unit.derivation.comparisons)
            told = unit.derivation.ranks
            ends = [[r.ligand - 1 for r in told if r.end == end + 1] for end in unit.atoms]
            count["letters"] += bool(turned(mol, unit.atoms, ends))
            found = list(untrue(mol, means, unit))
            count["untrue"] += bool(found)
            wrong += [f"{name} {[atom + 1 for atom in unit.atoms]}: {text}" for text in found]
    return {
        "counts": dict(count),
        "comparisons by rule": dict(sorted(rules.items())),
        "cpu seconds": round(process_time() - began),
        "untrue": wrong,
    }


def measure(size: int) -> dict[str, Any]:
    """Every figure."""
    return {
        "own cases": replayed((case["name"], structure(case)) for case in CASES),
        "published suite": replayed(suite()),
        "dictionary": replayed((smiles, from_smiles(smiles)) for smiles in dictionary(size)),
    }


def table(figures: dict[str, Any]) -> str:
    """A line for each set."""
    rows = [f"{'':18}{'structures':>12}{'units':>8}{'comparisons':>13}{'letters':>9}{'untrue':>8}"]
    for name, found in figures.items():
        count = found["counts"]
        compared = sum(found["comparisons by rule"].values())
        rows.append(
            f"{name:18}{count.get('structures', 0):12}{count.get('units', 0):8}{compared:13}"
            f"{count.get('letters', 0):9}{count.get('untrue', 0):8}"
        )
    return "\n".join(rows)


def main() -> None:
    """Measure and print; status 1 where a derivation is untrue."""
    # Only here: in the tests the program listens to what the library says.
    RDLogger.DisableLog("rdApp.*")
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--size", type=int, default=2000, help="dictionary molecules")
    parser.add_argument("--json", type=Path)
    given = parser.parse_args()
    figures = measure(given.size)
    text = json.dumps(figures, indent=1, ensure_ascii=False)
    if given.json:
        given.json.write_text(text + "\n", encoding="utf-8")
    sys.stdout.write(f"{text}\n\n{table(figures)}\n")
    sys.exit(any(found["untrue"] for found in figures.values()))


if __name__ == "__main__":
    main()
