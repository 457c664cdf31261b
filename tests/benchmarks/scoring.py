"""The program's own line over dossiers of records, and its findings put back to each record."""

from __future__ import annotations

import tempfile
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from pathlib import Path

from dossiercheck import pipeline, rulebook
from dossiercheck.model import Finding, Grade, Place, Review, Role, SubstanceEntry
from dossiercheck.settings import Settings
from tests.benchmarks.changes import DRAWING_KINDS, NAME_KINDS
from tests.benchmarks.corpus import SoundRecord
from tests.benchmarks.molecules import Unit
from tests.benchmarks.truth import Mutant
from tests.benchmarks.writers import write_csv_and_sdf, write_sdf

CHUNK = 500  # records in a file
_GRAVE = (Grade.CRITICAL, Grade.MAJOR)


@dataclass(slots=True)
class Said:
    """What the program said of one record: findings, its unread entries, whether it read the
    name, and the atoms of each unit of the concordance. `drawn` is false where the reference of
    the concordance is not the drawing, so that the atoms mean something else."""

    findings: list[Finding] = field(default_factory=list)
    unread: list[str] = field(default_factory=list)
    units: dict[str, Unit] = field(default_factory=dict)
    drawn: bool = False
    seen: bool = False

    def grave(self) -> list[Finding]:
        """Critical and major findings."""
        return [finding for finding in self.findings if finding.grade in _GRAVE]

    @property
    def unread_name(self) -> bool:
        """The name, or the whole record, was not read."""
        return bool(self.unread) or any(f.rule == "name/not-interpretable" for f in self.findings)


def run(records: Sequence[SoundRecord], *, tables: bool = False, jobs: int = 1) -> list[Said]:
    """Review the records as dossiers of `CHUNK` records a file; one answer for each, in order.

    With `tables`, the names stand in a table and the structures in a file beside it.
    """
    settings = Settings(jobs=jobs)
    rules = rulebook.load(settings)
    answers: list[Said] = []
    for first in range(0, len(records), CHUNK):
        chunk = records[first : first + CHUNK]
        with tempfile.TemporaryDirectory() as folder:
            if tables:
                write_csv_and_sdf(chunk, Path(folder, "data.csv"), Path(folder, "drawings.sdf"))
            else:
                write_sdf(chunk, Path(folder, "records.sdf"))
            review = pipeline.review([Path(folder)], settings, rules)
        answers += sort_out(review, len(chunk))
    return answers


def sort_out(review: Review, count: int) -> list[Said]:
    """The review's findings and unread entries by record."""
    said = [Said() for _ in range(count)]
    homes: dict[str, set[int]] = {}
    for entry in review.substances:
        numbers = {n for e in entry.evidence if (n := _number(e.place)) is not None}
        homes[entry.id] = numbers
        for number in numbers:
            _units(entry, said[number])
    for finding in review.findings:
        shown = {n for e in finding.exhibits if (n := _number(e.place)) is not None}
        for number in shown or homes[finding.substance]:
            said[number].findings.append(finding)
    for entry in review.unread:
        number = _number(entry.place)
        if number is None:
            raise RuntimeError(f"unread, of no record: {entry}")
        said[number].unread.append(f"{entry.reason}: {entry.detail}")
    return said


def _units(entry: SubstanceEntry, said: Said) -> None:
    said.seen = True
    table = entry.concordance
    if table is None:
        return
    roles = {evidence.id: evidence.role for evidence in entry.evidence}
    said.drawn = roles.get(table.reference) is Role.MOLFILE
    said.units = {row.unit: tuple(sorted(row.atoms)) for row in table.rows}


def _number(place: Place) -> int | None:
    """0-based position of the record in the dossier: its number in the structure file, or its
    row under the table's heading."""
    if place.record is not None:
        return place.record - 1
    if place.row is not None and place.source.endswith(".csv"):
        return place.row - 2
    return None


# --- one mutant --------------------------------------------------------------------------------

_FAMILIES: dict[str, tuple[str, ...]] = {
    "wrong InChIKey": ("identity/inchikey-differs",),
    "wrong formula": ("identity/formula-differs",),
    "wrong mass": ("identity/mass-differs",),
    "wrong check digit": ("identity/registry-check-digit",),
    **dict.fromkeys(NAME_KINDS, ("name-and-drawing/", "name/")),
    # A changed drawing also parts from the InChIKey, the only witness where no name is read.
    **dict.fromkeys(DRAWING_KINDS, ("name-and-drawing/", "drawing/", "identity/inchikey-differs")),
}


@dataclass(frozen=True, slots=True)
class Score:
    """How one mutant fared. `unit` is "right", "part" (some of the units, none wrong), "wrong",
    "none" (no unit named) or "unsettled" (the truth is not known, or not a matter of units)."""

    mutant: Mutant
    new: tuple[Finding, ...]
    found: bool
    family: bool
    unit: str
    unread: bool
    unread_before: bool


def score(mutant: Mutant, before: Said, after: Said) -> Score:
    """Hold what was said of the mutant against what was said of the sound original."""
    old = {(f.rule, f.message) for f in before.findings}
    new = tuple(
        f
        for f in after.findings
        if (f.rule, f.message) not in old and f.grade.gravity <= Grade.MINOR.gravity
    )
    family = _FAMILIES[mutant.kind]
    telling = tuple(f for f in new if f.rule.startswith(family))
    return Score(
        mutant=mutant,
        new=new,
        found=bool(new),
        family=bool(telling),
        unit=_unit(mutant, telling, after),
        unread=after.unread_name,
        unread_before=before.unread_name,
    )


def _unit(mutant: Mutant, telling: Sequence[Finding], said: Said) -> str:
    """Whether the units named are those that were changed."""
    truth = mutant.truth
    if not truth.alternatives:
        return "unsettled"
    if mutant.kind == "locant ± 1" and any(
        f.locant in truth.locants for f in telling if f.rule.startswith("name/")
    ):
        return "right"
    named = {said.units[u] for f in telling for u in _split(f.unit) if u in said.units}
    if not named or not said.drawn:
        return "none"
    if named in truth.alternatives:
        return "right"
    if any(named < whole for whole in truth.alternatives):
        return "part"
    return "wrong"


def _split(units: str) -> Iterator[str]:
    return (unit.strip() for unit in units.split(",") if unit.strip())
