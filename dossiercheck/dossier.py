"""The dossier as a whole, for rules that no single substance can answer.

Some rules ask whether a thing is said anywhere, or whether two substances were given one name.
They see what was judged of each substance, what was noted of the text, and what was not read.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

from dossiercheck import ctd
from dossiercheck.language.topics import Mention
from dossiercheck.model import Evidence, Place, SubstanceEntry, Unread
from dossiercheck.notes import Notes
from dossiercheck.substances import Identity, Substance


@dataclass(frozen=True, slots=True)
class Portrait:
    """A substance with what its structures are. `identities` are those of its firmly attributed
    structures; `single` is true for one enantiomer of a chiral substance, by its reference;
    `reference` is the evidence that the others are held against, None without a structure."""

    substance: Substance
    entry: SubstanceEntry
    identities: frozenset[Identity] = frozenset()
    single: bool = False
    reference: Evidence | None = None

    def sections(self) -> set[str]:
        """The sections in which something is said of it."""
        found = {ctd.section_of(said.place) for said in self.entry.evidence}
        return {section for section in found if section}


@dataclass(frozen=True, slots=True)
class Dossier:
    """All substances in their order, the mentions and sections noted, and the unread places."""

    portraits: Sequence[Portrait] = ()
    mentions: Sequence[Mention] = ()
    sections: Mapping[str, Place] = field(default_factory=dict)
    unread: Sequence[Unread] = ()

    def holds(self, chapters: Sequence[str]) -> bool:
        """Whether the dossier holds something of the chapters named, or of what contains them
        where it is not divided further."""
        return any(
            ctd.within(section, chapter) or chapter.rpartition(".")[0] == section != chapter[:1]
            for section in self.sections
            for chapter in chapters
        )

    def speaks(self, topics: Sequence[str], chapters: Sequence[str]) -> bool:
        """Whether a matter is raised in one of the chapters, or in what contains it."""
        return any(
            one.topic in topics
            and any(
                ctd.within(one.section, chapter) or ctd.within(chapter, one.section)
                for chapter in chapters
            )
            for one in self.mentions
        )


def dossier(portraits: Sequence[Portrait], notes: Notes, unread: Sequence[Unread]) -> Dossier:
    """What the rules on the whole are given."""
    return Dossier(portraits, notes.mentions, notes.sections, unread)
