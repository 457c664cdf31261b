"""What the checking costs beside the work that cannot be avoided.

`python -m tests.benchmarks.speed [--size 10000] [--scaling 1000 10000 40000] [--repeats 2]`

Over the same records (a name and a molfile each) the program's own line, findings.json written,
stands against a bare loop that only parses the molfile, labels it, makes its InChI and sends the
name through one name parser with the same flags. Each side runs in processes of its own and CPU
time is that of the whole process tree, the parser's Java included; sides alternate, because these
machines are noisy, and the least time of each counts. Prints JSON and a table.
"""

from __future__ import annotations

import argparse
import json
import resource
import subprocess
import sys
import tempfile
from collections.abc import Sequence
from contextlib import suppress
from dataclasses import replace
from itertools import cycle, islice
from pathlib import Path
from typing import Any

from tests.benchmarks import corpus
from tests.benchmarks.writers import write_sdf

_SIDES = ("bare", "json", "html")


def bare(path: Path) -> None:
    """Parse, label, InChI, and the name's parse; nothing is compared or kept."""
    from rdkit import Chem, RDLogger
    from rdkit.Chem import rdCIPLabeler

    from dossiercheck.names.parser import NameParser
    from dossiercheck.stereo.structure import LABELLER_ITERATIONS

    RDLogger.DisableLog("rdApp.*")
    names = []
    for mol in Chem.SDMolSupplier(str(path)):
        if mol is None:
            continue
        names.append(mol.GetProp("IUPAC name"))
        with suppress(RuntimeError):
            rdCIPLabeler.AssignCIPLabels(mol, maxRecursiveIterations=LABELLER_ITERATIONS)
        Chem.MolToInchi(mol)
    with NameParser(remember=0) as parser:
        for first in range(0, len(names), 100):
            parser.parse(names[first : first + 100])


def checked(path: Path, formats: Sequence[str]) -> None:
    """The program's own line, and its result written."""
    from dossiercheck import pipeline, report, rulebook
    from dossiercheck.settings import Settings

    settings = Settings()
    review = pipeline.review([path], settings, rulebook.load(settings))
    with tempfile.TemporaryDirectory() as out:
        report.write(review, Path(out), formats)


def cost(side: str, path: Path) -> tuple[float, float]:
    """CPU seconds and peak memory (MB) of one side in a process tree of its own."""
    run = subprocess.run(
        [sys.executable, "-m", "tests.benchmarks.speed", "--side", side, "--path", str(path)],
        check=True,
        stdout=subprocess.PIPE,
        text=True,
    )
    seconds, peak = run.stdout.split()
    return float(seconds), float(peak)


def _side(side: str, path: Path) -> None:
    if side == "bare":
        bare(path)
    else:
        checked(path, ["json"] if side == "json" else ["json", "html"])
    seconds = peak = 0.0
    for who in (resource.RUSAGE_SELF, resource.RUSAGE_CHILDREN):
        used = resource.getrusage(who)
        seconds += used.ru_utime + used.ru_stime
        if who == resource.RUSAGE_SELF:
            peak = used.ru_maxrss / 1024
    sys.stdout.write(f"{seconds} {peak}\n")


def measure(size: int, repeats: int, folder: Path, sides: Sequence[str] = _SIDES) -> dict[str, Any]:
    """The least CPU time of each side over `size` records, and what follows from it."""
    path = folder / f"records-{size}.sdf"
    sound = corpus.load().records
    # Beyond the dictionary's size records come again under another code.
    chosen = [
        replace(r, id=f"{r.id}-{n // len(sound)}", formula="", weight="", inchikey="")
        for n, r in enumerate(islice(cycle(sound), size))
    ]
    write_sdf(chosen, path)
    seconds = dict.fromkeys(sides, float("inf"))
    peaks = dict.fromkeys(sides, 0.0)
    for _ in range(repeats):
        for side in sides:
            used, peak = cost(side, path)
            seconds[side] = min(seconds[side], used)
            peaks[side] = max(peaks[side], peak)
    return {
        "records": size,
        "cpu_seconds": {side: round(value, 2) for side, value in seconds.items()},
        "ms_a_record": {side: round(1000 * v / size, 3) for side, v in seconds.items()},
        "peak_mb": {side: round(value) for side, value in peaks.items()},
        "ratio": {
            side: round(seconds[side] / seconds["bare"], 3) for side in sides if side != "bare"
        },
    }


def main() -> None:
    """Measure and print."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--size", type=int, default=10_000)
    parser.add_argument("--scaling", type=int, nargs="*", default=[])
    parser.add_argument("--repeats", type=int, default=2)
    parser.add_argument("--side", choices=_SIDES, help=argparse.SUPPRESS)
    parser.add_argument("--path", type=Path, help=argparse.SUPPRESS)
    given = parser.parse_args()
    if given.side:
        _side(given.side, given.path)
        return
    with tempfile.TemporaryDirectory() as folder:
        rows = [measure(given.size, given.repeats, Path(folder))]
        rows += [measure(size, 1, Path(folder), ("bare", "json")) for size in given.scaling]
    sys.stdout.write(json.dumps(rows, indent=1) + "\n\n")
    for row in rows:
        ratio = ", ".join(f"{side} {value:.2f}" for side, value in row["ratio"].items())
        each = ", ".join(f"{side} {value:.2f} ms" for side, value in row["ms_a_record"].items())
        peak = ", ".join(f"{side} {value} MB" for side, value in row["peak_mb"].items())
        sys.stdout.write(
            f"{row['records']:>7} records: ratio to the bare loop: {ratio}; a record: {each};"
            f" peak memory: {peak}\n"
        )


if __name__ == "__main__":
    main()
