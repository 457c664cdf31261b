"""Substances: what evidence is attributed to, and what makes two of them one.

Who speaks of whom is decided in `attribution`; this module holds the values it makes.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, field

from dossiercheck.interpretation import Reading
from dossiercheck.model import Evidence, Place, Role
from dossiercheck.settings import Settings
from dossiercheck.stereo.constitution import parent

FIRM = "firm"
WEAK = "weak"


@dataclass(frozen=True, slots=True)
class Identity:
    """What a structure is, as text: canonical SMILES without and with stereo, and the kind of
    stereo (`Structure.kind`). Two equal ones are one stereoisomer. `parent` is the largest
    component without charges and stereo: a salt, a hydrate and the free base have it in common."""

    flat: str
    smiles: str
    kind: str
    parent: str = ""

    def like(self, other: Identity) -> bool:
        """Whether both have one skeleton: equal constitutions, or two forms of one substance."""
        return self.flat == other.flat or (self.parent != "" and self.parent == other.parent)


@dataclass(eq=False, slots=True)
class Substance:
    """`evidence` in the order of the dossier; `attribution` gives the strength and the reasons
    for each evidence id, `weak` the ids for which they do not suffice for a grave finding; `role`
    is the part it plays by the register, or where `inferred` says why, by the dossier. `called`
    are the labels under which evidence came, with the place of the first."""

    id: str
    label: str
    evidence: list[Evidence] = field(default_factory=list)
    attribution: dict[str, str] = field(default_factory=dict)
    role: str = ""
    inferred: str = ""
    weak: set[str] = field(default_factory=set)
    called: dict[str, Place] = field(default_factory=dict)

    def add(self, said: Evidence, reason: str, strength: str = FIRM) -> None:
        """Attribute one evidence."""
        self.evidence.append(said)
        self.attribution[said.id] = f"{strength}: {reason}"
        if strength == WEAK:
            self.weak.add(said.id)
        for label in (said.label, *said.also):
            if label:
                self.called.setdefault(label, said.place)


REGISTER = "register#"  # how the group of a register entry's own evidence begins

Survey = Callable[[Sequence[Substance]], Sequence[frozenset[Identity]]]


def registered(settings: Settings) -> Iterator[Evidence]:
    """What the register itself says: the structure a substance is declared to be."""
    path = settings.path.name if settings.path else "settings"
    for entry in settings.register:
        for role, text in ((Role.SMILES, entry.smiles), (Role.NAME, entry.name)):
            if text:
                place = Place(path, section=f"[[substance]] {entry.id}", field=role.value)
                yield Evidence("", role, text, place, f"{REGISTER}{entry.id}", entry.id)


def identities(readings: Sequence[Reading], *, parents: bool = True) -> frozenset[Identity]:
    """What the structures among the readings are; their parents cost as much as the rest."""
    return frozenset(
        Identity(
            r.structure.flat,
            r.structure.smiles,
            r.structure.kind,
            parent(r.structure) if parents else "",
        )
        for r in readings
        if r.structure is not None
    )
