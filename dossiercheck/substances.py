"""Evidence to substances: what stands together, or is called the same, speaks of one substance.

A label, a register entry, a record or a row attributes firmly. A name or structure without any
of these is attributed by what it says, and only where it says exactly what one substance is
already held to be; where it contradicts, nobody knows of whom it speaks, and it is listed as
unread instead of raising an alarm.
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field

from dossiercheck.interpretation import Reading
from dossiercheck.model import Evidence, Unread
from dossiercheck.settings import RegisterEntry
from dossiercheck.stereo.alignment import SAME, align
from dossiercheck.stereo.structure import Structure


@dataclass(eq=False, slots=True)
class Substance:
    """`readings` in the order of the dossier; `attribution` gives the reason for each evidence
    id; `role` is what the register says it is for."""

    id: str
    label: str
    readings: list[Reading] = field(default_factory=list)
    attribution: dict[str, str] = field(default_factory=dict)
    role: str = ""

    def add(self, reading: Reading, reason: str) -> None:
        """Attribute one reading."""
        self.readings.append(reading)
        self.attribution[reading.evidence.id] = reason

    @property
    def evidence(self) -> tuple[Evidence, ...]:
        """The evidence attributed, in the order of the dossier."""
        return tuple(reading.evidence for reading in self.readings)

    def structures(self) -> Iterable[Structure]:
        """The structures already attributed, names included."""
        return (r.structure for r in self.readings if r.structure is not None)


def key_of(label: str) -> str:
    """What makes two labels the same: letters and digits, without case, spaces or hyphens."""
    plain = unicodedata.normalize("NFKC", label).casefold()
    return re.sub(r"[\W_]+", "", plain)


def attribute(
    readings: Sequence[Reading], register: Sequence[RegisterEntry] = ()
) -> tuple[list[Substance], list[Unread]]:
    """Sort readings into substances, in the order in which these first appear."""
    known = {key_of(name): entry for entry in register for name in (entry.id, *entry.aliases)}
    found: dict[str, Substance] = {}
    homes: dict[str, Substance] = {}  # by group
    homeless: list[list[Reading]] = []
    for group in _groups(readings):
        label = next((r.evidence.label for r in group if r.evidence.label), "")
        key = key_of(label)
        if not key:
            homeless.append(group)
            continue
        entry = known.get(key)
        title = entry.id if entry else label
        home = found.get(key_of(title))
        if home is None:
            home = Substance("", title, role=entry.role if entry else "")
            found[key_of(title)] = home
        for reading in group:
            home.add(reading, _reason(reading, label, title))
        homes[group[0].evidence.group] = home
    substances = list(found.values())
    unread = _settle(homeless, substances)
    order = {reading.evidence.id: number for number, reading in enumerate(readings)}
    for home in substances:
        home.readings.sort(key=lambda reading: order[reading.evidence.id])
    substances.sort(key=lambda home: order[home.readings[0].evidence.id])
    for number, home in enumerate(substances, 1):
        home.id = f"s{number}"
    return substances, unread


def _groups(readings: Sequence[Reading]) -> list[list[Reading]]:
    groups: dict[str, list[Reading]] = {}
    for reading in readings:
        said = reading.evidence
        groups.setdefault(said.group or f"alone {said.id}", []).append(reading)
    return list(groups.values())


def _reason(reading: Reading, label: str, title: str) -> str:
    own = reading.evidence.label
    called = f"called “{own or label}”"
    if not own:
        called = f"stands together with what is called “{label}”"
    return called if key_of(label) == key_of(title) else f"{called}, in the register “{title}”"


def _settle(homeless: list[list[Reading]], substances: list[Substance]) -> list[Unread]:
    """Give evidence without a label a home by what it says, or a substance of its own."""
    by_constitution: dict[str, list[Substance]] = {}
    if homeless:
        for home in substances:
            for flat in {structure.flat for structure in home.structures()}:
                by_constitution.setdefault(flat, []).append(home)
    unread: list[Unread] = []
    for group in homeless:
        structure = next((r.structure for r in group if r.structure is not None), None)
        alone = not group[0].evidence.group
        candidates = by_constitution.get(structure.flat, []) if structure is not None else []
        exact = [home for home in candidates if structure and _says_the_same(structure, home)]
        if len(exact) == 1 or (exact and alone):
            for reading in group:
                exact[0].add(reading, "without a label; says exactly what this substance is")
        elif alone and candidates:
            said = group[0].evidence
            names = " or ".join(f"“{home.label}”" for home in candidates[:3])
            unread.append(
                Unread(
                    said.place,
                    "not-attributed",
                    f"has the constitution of {names} but another configuration, and the text"
                    " does not say of which substance it speaks",
                    said.text,
                )
            )
        elif structure is not None or not alone:
            home = Substance("", _title(group))
            for reading in group:
                home.add(reading, "without a label; taken as a substance of its own")
            substances.append(home)
            if structure is not None:
                by_constitution.setdefault(structure.flat, []).append(home)
        else:
            home = Substance("", _title(group))
            home.add(group[0], "without a label and not understood")
            substances.append(home)
    return unread


def _says_the_same(structure: Structure, home: Substance) -> bool:
    """No unit opposite and none silent on either side, against some structure of the home."""
    for other in home.structures():
        if other.flat != structure.flat:
            continue
        if other.kind != structure.kind:
            continue
        found = align(other, structure)
        if not found.doubt and found.count(SAME) == len(found.verdicts):
            return True
    return False


def _title(group: list[Reading]) -> str:
    said = group[0].evidence
    if said.group:
        return f"{said.place.source}, {_short(str(said.place))}"
    text = " ".join(said.text.split())
    return text if len(text) <= 60 else f"{text[:57]}…"


def _short(place: str) -> str:
    """The record or row of a place, without the field."""
    kept = [part for part in place.split(", ") if not part.startswith(("field", "column", "char"))]
    return ", ".join(kept)
