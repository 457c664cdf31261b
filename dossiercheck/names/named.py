"""What the reading of a name yields."""

from __future__ import annotations

from dataclasses import dataclass, field

from dossiercheck.names.descriptors import PrintedDescriptor
from dossiercheck.names.typography import Cleaned


@dataclass(frozen=True, slots=True)
class StereoGroup:
    """Centres whose configurations are stated together. `kind` is `rac` (the whole structure is
    a racemate), `and` (both configurations present), `or` (one of the two, not known which) or
    `abs`; `atoms` are 0-based in SMILES order."""

    kind: str
    number: int
    atoms: tuple[int, ...]


@dataclass(frozen=True, slots=True)
class NamedStructure:
    """A structure that a name stands for: plain SMILES, the locant of each atom in SMILES order
    ("" where the name gives it none), and the stated groups."""

    smiles: str
    labels: tuple[str, ...]
    groups: tuple[StereoGroup, ...] = ()

    def labelled(self, locant: str) -> tuple[int, ...]:
        """The atoms that carry a locant."""
        return tuple(i for i, label in enumerate(self.labels) if label == locant) if locant else ()


@dataclass(frozen=True, slots=True)
class Refusal:
    """Why a name has no structure. `reason` is a slug: empty, too-long, ambiguous,
    control-character, line-break, several-joinings, foreign-character, not-interpretable,
    not-buildable, stereo-not-buildable, time-out, process-died, echo-mismatch. `span` is the
    part of the verbatim text that stopped it, None where the parser does not say."""

    reason: str
    detail: str
    span: tuple[int, int] | None = None


@dataclass(frozen=True, slots=True)
class Fault:
    """Something wrong, or not read, in the descriptors of a name.

    `slug` is one of no-such-locant, locant-not-stereogenic, duplicate-descriptor,
    contradictory-descriptors, overrides-implied, lost-space, descriptor-stripped,
    lower-case-descriptor, stereo-ignored, assumed-configuration. `descriptor` and `other` index
    the reading's descriptors. `atoms` are the candidates, 0-based in the skeleton's SMILES order
    where the reading has a skeleton, in the structure's otherwise; empty when none is known.

    locant-not-stereogenic is the name parser's opinion from the constitution alone: a centre
    that depends on other centres (Rules 4 and 5) looks to it like none.
    """

    slug: str
    descriptor: int | None
    other: int | None
    detail: str
    atoms: tuple[int, ...] = ()


@dataclass(frozen=True, slots=True)
class NameReading:
    """A name, read.

    `structure` is what the name says, without the descriptors that could not be placed (each of
    those has a fault); `skeleton` is the name without any descriptor and is there when
    descriptors had to be left out. `sent` is the text from which `structure` came, `dropped`
    the indices of the descriptors that it leaves out. `stereo_kind` is absolute, relative,
    racemic or silent; a name that only states double bonds is absolute.
    """

    text: str
    cleaned: Cleaned
    structure: NamedStructure | None = None
    skeleton: NamedStructure | None = None
    refusal: Refusal | None = None
    descriptors: tuple[PrintedDescriptor, ...] = ()
    faults: tuple[Fault, ...] = ()
    stereo_kind: str = "silent"
    messages: tuple[str, ...] = ()
    dropped: frozenset[int] = field(default_factory=frozenset)
    respaced: tuple[int, ...] = ()
