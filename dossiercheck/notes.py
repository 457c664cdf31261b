"""What is noted of the running text while it passes: definitions, and what sections say at all.

Evidence says what a place states of a substance. Some rules ask for more: whether a dossier
speaks of a matter anywhere. Only what is asked for is kept, so that a long dossier costs little.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, field, replace

from dossiercheck import ctd
from dossiercheck.language import topics
from dossiercheck.language.glossary import Term, terms
from dossiercheck.language.topics import Mention
from dossiercheck.model import Item, Passage, Place, Table


@dataclass(slots=True)
class Notes:
    """`filed` is the section under which a submission files a source; `terms` the definitions;
    `mentions` the places that speak of a matter (`topics`); `sections` the sections of the
    document that hold anything, with a place of each."""

    filed: Mapping[str, str] = field(default_factory=dict)
    terms: list[Term] = field(default_factory=list)
    mentions: list[Mention] = field(default_factory=list)
    sections: dict[str, Place] = field(default_factory=dict)
    _headings: set[tuple[str, str]] = field(default_factory=set)

    def over(self, items: Iterable[Item]) -> Iterator[Item]:
        """The items as they come, noted."""
        for item in items:
            place = self._filed(item.place)
            section = ctd.section_of(place)
            if section:
                self.sections.setdefault(section, place)
            if isinstance(item, Passage):
                self._passage(item, place, section)
            elif isinstance(item, Table) and section:
                self._table(item, place, section)
            yield item

    def _passage(self, passage: Passage, place: Place, section: str) -> None:
        for heading in passage.headings:
            if (place.source, heading) not in self._headings:
                self._headings.add((place.source, heading))
                self.terms += terms(heading, place)
                if section:
                    self.mentions += topics.mentions(heading, place, section)
        self.terms += terms(passage.text, place)
        if section:
            self.mentions += topics.mentions(passage.text, place, section)

    def _table(self, table: Table, place: Place, section: str) -> None:
        self.mentions += topics.mentions(table.caption, place, section)
        for row in table.rows:
            # A row is one statement: a test in one cell, its limit in another.
            text = " | ".join(dict.fromkeys(cell.text for cell in row))
            where = replace(row[0].place, section=place.section) if row else place
            self.mentions += topics.mentions(text, where, section)

    def _filed(self, place: Place) -> Place:
        section = place.section or self.filed.get(place.source)
        return replace(place, section=section) if section != place.section else place
