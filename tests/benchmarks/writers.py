"""Sound records and mutants as dossiers: a structure file, or a table beside one."""

from __future__ import annotations

import csv
from collections.abc import Iterable, Sequence
from pathlib import Path

from tests.benchmarks.corpus import SoundRecord

HEADINGS = (
    ("IUPAC name", "name"),
    ("Molecular formula", "formula"),
    ("Relative molecular mass", "weight"),
    ("InChIKey", "inchikey"),
    ("CAS registry number", "registry"),
)


def write_sdf(records: Iterable[SoundRecord], path: Path) -> None:
    """Structures with everything else as data fields, in record order."""
    with path.open("w", encoding="utf-8") as stream:
        for record in records:
            stream.write(_titled(record))
            for heading, attribute in HEADINGS:
                if value := getattr(record, attribute):
                    stream.write(f">  <{heading}>\n{value}\n\n")
            stream.write("$$$$\n")


def write_csv_and_sdf(records: Sequence[SoundRecord], table: Path, structures: Path) -> None:
    """Structures titled with the record's code, and a table with the same code in each row."""
    with structures.open("w", encoding="utf-8") as stream:
        for record in records:
            stream.write(f"{_titled(record)}$$$$\n")
    with table.open("w", encoding="utf-8", newline="") as rows:
        writer = csv.writer(rows)
        writer.writerow(["Code", *(heading for heading, _ in HEADINGS)])
        for record in records:
            values = (getattr(record, attribute) for _, attribute in HEADINGS)
            writer.writerow([record.id, *values])


def _titled(record: SoundRecord) -> str:
    """The molfile with the record's code as its first line, ending in a line break."""
    _, _, rest = record.molblock.partition("\n")
    return f"{record.id}\n{rest.rstrip()}\n"
