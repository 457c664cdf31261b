"""Evidence to substances: what stands together, or is called the same, speaks of one substance.

A label, a register entry, a record or a row attributes firmly. A name or structure without any
of these is attributed by what it says, and only where it says exactly what one substance is
already held to be; where it contradicts, nobody knows of whom it speaks, and it is listed as
unread instead of raising an alarm.
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, field

from dossiercheck.interpretation import Reading
from dossiercheck.model import Evidence, Place, Role, Unread
from dossiercheck.settings import RegisterEntry, Settings


@dataclass(frozen=True, slots=True)
class Identity:
    """What a structure is, as text: canonical SMILES without and with stereo, and the kind of
    stereo (`Structure.kind`). Two equal ones are one stereoisomer."""

    flat: str
    smiles: str
    kind: str


@dataclass(eq=False, slots=True)
class Substance:
    """`evidence` in the order of the dossier; `attribution` gives the reason for each evidence
    id; `role` is what the register says it is for."""

    id: str
    label: str
    evidence: list[Evidence] = field(default_factory=list)
    attribution: dict[str, str] = field(default_factory=dict)
    role: str = ""

    def add(self, said: Evidence, reason: str) -> None:
        """Attribute one evidence."""
        self.evidence.append(said)
        self.attribution[said.id] = reason


REGISTER = "register#"  # how the group of a register entry's own evidence begins


def registered(settings: Settings) -> Iterator[Evidence]:
    """What the register itself says: the structure a substance is declared to be."""
    path = settings.path.name if settings.path else "settings"
    for entry in settings.register:
        for role, text in ((Role.SMILES, entry.smiles), (Role.NAME, entry.name)):
            if text:
                place = Place(path, section=f"[[substance]] {entry.id}", field=role.value)
                yield Evidence("", role, text, place, f"{REGISTER}{entry.id}", entry.id)


Survey = Callable[[Sequence[Substance]], Sequence[frozenset[Identity]]]

_SIGN = re.compile(r"\(\s*(\+\s*/\s*[-−–]|±|[-+−–])\s*\)")
_SIGNS = {"+": "plus", "-": "minus", "−": "minus", "–": "minus"}


def key_of(label: str) -> str:
    """What makes two labels the same: letters and digits, without case, spaces or hyphens. A sign
    of rotation counts: "(+)-…" and "(−)-…" are two substances, and "(±)-…" is a third."""
    plain = unicodedata.normalize("NFKC", label).casefold()
    plain = _SIGN.sub(lambda found: _SIGNS.get(found[1], "plusminus"), plain)
    return re.sub(r"[\W_]+", "", plain)


def identities(readings: Sequence[Reading]) -> frozenset[Identity]:
    """What the structures among the readings are."""
    return frozenset(
        Identity(r.structure.flat, r.structure.smiles, r.structure.kind)
        for r in readings
        if r.structure is not None
    )


def attribute(
    evidence: Sequence[Evidence], register: Sequence[RegisterEntry], survey: Survey
) -> tuple[list[Substance], list[Unread]]:
    """Sort evidence into substances, in the order in which these first appear.

    `survey` interprets the evidence of substances; it is asked only where something stands
    without a label.
    """
    known = {key_of(name): entry for entry in register for name in (entry.id, *entry.aliases)}
    found: dict[str, Substance] = {}
    homeless: list[Substance] = []
    for group in _groups(evidence):
        label = next((said.label for said in group if said.label), "")
        key = key_of(label)
        if not key:
            home = Substance("", _title(group))
            for said in group:
                home.add(said, "without a label; taken as a substance of its own")
            homeless.append(home)
            continue
        entry = known.get(key)
        title = entry.id if entry else label
        home = found.setdefault(
            key_of(title), Substance("", title, role=entry.role if entry else "")
        )
        for said in group:
            home.add(said, _reason(said, label, title))
    substances = list(found.values())
    unread = list(_settle(homeless, substances, survey)) if homeless else []
    order = {said.id: number for number, said in enumerate(evidence)}
    for home in substances:
        home.evidence.sort(key=lambda said: order[said.id])
    substances.sort(key=lambda home: order[home.evidence[0].id])
    for number, home in enumerate(substances, 1):
        home.id = f"s{number}"
    return substances, unread


def _groups(evidence: Sequence[Evidence]) -> list[list[Evidence]]:
    groups: dict[str, list[Evidence]] = {}
    for said in evidence:
        groups.setdefault(said.group or f"alone {said.id}", []).append(said)
    return list(groups.values())


def _reason(said: Evidence, label: str, title: str) -> str:
    called = f"called “{said.label or label}”"
    if not said.label:
        called = f"stands together with what is called “{label}”"
    return called if key_of(label) == key_of(title) else f"{called}, in the register “{title}”"


def _settle(
    homeless: Sequence[Substance], substances: list[Substance], survey: Survey
) -> Iterator[Unread]:
    """Give evidence without a label a home by what it says, or a substance of its own."""
    surveyed = survey([*substances, *homeless])
    by_flat: dict[str, list[tuple[Substance, Identity]]] = {}

    def enter(home: Substance, seen: frozenset[Identity]) -> None:
        for identity in sorted(seen, key=lambda one: (one.smiles, one.kind)):
            by_flat.setdefault(identity.flat, []).append((home, identity))

    for home, seen in zip(substances, surveyed, strict=False):
        enter(home, seen)
    for group, seen in zip(homeless, surveyed[len(substances) :], strict=True):
        alone = not group.evidence[0].group
        likely = [entry for identity in seen for entry in by_flat.get(identity.flat, [])]
        exact = {id(home): home for home, identity in likely if seen == {identity}}
        if len(exact) == 1 or (exact and alone):
            target = next(iter(exact.values()))
            for said in group.evidence:
                target.add(said, "without a label; says exactly what this substance is")
        elif alone and likely:
            yield _nobody(group.evidence[0], [home.label for home, _ in likely])
        else:
            substances.append(group)
            enter(group, seen)


def _nobody(said: Evidence, labels: Sequence[str]) -> Unread:
    names = " or ".join(f"“{label}”" for label in list(dict.fromkeys(labels))[:3])
    return Unread(
        said.place,
        "not-attributed",
        f"has the constitution of {names} but not the same configuration, and the text does not"
        " say of which substance it speaks",
        said.text,
    )


def _title(group: Sequence[Evidence]) -> str:
    said = group[0]
    if said.group:
        parts = str(said.place).split(", ")
        kept = [part for part in parts if not part.startswith(("field", "column", "char"))]
        return f"{said.place.source}, {', '.join(kept)}"
    text = " ".join(said.text.split())
    return text if len(text) <= 60 else f"{text[:57]}…"
