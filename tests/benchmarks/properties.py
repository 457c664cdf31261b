"""The properties of descriptors over molecules of the wwPDB dictionary.

The same functions that `tests/property/test_descriptors.py` runs over a few molecules. For each
property: molecules and units compared, units that the second reading leaves undetermined, forms
that cannot be made, and every violation. Each molecule's chance is fixed by its place and the seed.

    python -m tests.benchmarks.properties --size 2000
"""

from __future__ import annotations

import argparse
import json
import sys
from collections import Counter
from pathlib import Path
from random import Random
from time import process_time
from typing import Any

from rdkit import RDLogger

from tests.property.pool import dictionary, handbook
from tests.property.properties import PROPERTIES, NotCarried


def measure(size: int, seed: int) -> dict[str, Any]:
    """Every property over the hand-ranked cases and `size` molecules of the dictionary."""
    counts: dict[str, Counter[str]] = {name: Counter() for name in PROPERTIES}
    violations: list[dict[str, str]] = []
    pool = (*handbook(), *dictionary(size, seed))
    began = process_time()
    for number, smiles in enumerate(pool):
        for name, holds in PROPERTIES.items():
            count = counts[name]
            try:
                found = list(holds(smiles, Random(f"{seed} {number} {name}")))
            except NotCarried as why:
                count[f"not made: {why}"] += 1
                continue
            count["molecules"] += bool(found)
            for one in found:
                count["units"] += one.units
                count["undetermined"] += one.undetermined
                count["violations"] += bool(one.wrong)
                violations += [
                    {"property": name, "molecule": smiles, "wrong": wrong} for wrong in one.wrong
                ]
    return {
        "molecules": len(pool),
        "seed": seed,
        "cpu seconds": round(process_time() - began),
        "properties": {name: dict(count) for name, count in counts.items()},
        "violations": violations,
    }


def table(figures: dict[str, Any]) -> str:
    """A line for each property."""
    rows = [f"{'':54}{'molecules':>10}{'units':>9}{'undetermined':>14}{'violations':>12}"]
    for name, count in figures["properties"].items():
        numbers = [
            count.get(key, 0) for key in ("molecules", "units", "undetermined", "violations")
        ]
        rows.append(f"{name:54}{numbers[0]:10}{numbers[1]:9}{numbers[2]:14}{numbers[3]:12}")
    return "\n".join(rows)


def main() -> None:
    """Measure and print; status 1 where a property does not hold."""
    # Only here: in the tests the program listens to what the library says.
    RDLogger.DisableLog("rdApp.*")
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--size", type=int, default=2000, help="dictionary molecules")
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--json", type=Path)
    given = parser.parse_args()
    figures = measure(given.size, given.seed)
    text = json.dumps(figures, indent=1, ensure_ascii=False)
    if given.json:
        given.json.write_text(text + "\n", encoding="utf-8")
    sys.stdout.write(f"{text}\n\n{table(figures)}\n")
    sys.exit(bool(figures["violations"]))


if __name__ == "__main__":
    main()
