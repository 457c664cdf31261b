"""What a section of the dossier is about.

ICH M4Q(R1): 3.2.S.1 (nomenclature, structure, general properties) and 3.2.S.3.1 (elucidation of
structure) describe the drug substance, and section 11 of labelling the one of the product. Other
sections speak of many substances, and where evidence stands says nothing there.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field

from dossiercheck import ctd
from dossiercheck.calling import DRUG_SUBSTANCE, Callings, key_of, plays_a_part
from dossiercheck.language.words import SALTS
from dossiercheck.model import Place
from dossiercheck.substances import REGISTER, Substance

CHAPTERS = ("S.1", "S.3.1", ctd.DESCRIPTION)
_NAMING = ("S.1.1", "S.1.2")
_FORM = re.compile(rf"(?:[\s(]+{SALTS}\)?)+$")
_PARENT_FORM = re.compile(r"\b(?:base|free acid)\b")


@dataclass(slots=True)
class Standing:
    """Which substances are called by a label in which section of which source."""

    _named: dict[tuple[str, str], list[Substance]] = field(default_factory=dict)

    def enter(self, homes: Iterable[Substance]) -> None:
        """Take the labelled substances, in the order of the dossier."""
        for home in homes:
            if plays_a_part(home.label):
                continue
            places = {
                (ctd.section_of(said.place), said.place.source)
                for said in home.evidence
                if said.label and not said.group.startswith(REGISTER)
            }
            keys = {
                key
                for section, source in places
                for chapter in (*CHAPTERS, *_NAMING)
                if ctd.within(section, chapter)
                for key in ((chapter, source), (chapter, ""))
            }
            for key in keys:
                self._named.setdefault(key, []).append(home)

    def named(self, chapters: Iterable[str], source: str = "") -> list[Substance]:
        """The substances named in some chapters, of one source or ("") of all."""
        found = {id(home): home for one in chapters for home in self._named.get((one, source), ())}
        return list(found.values())

    def drug_substance(self, callings: Callings) -> tuple[str, str]:
        """The title of the drug substance and how it is known; ("", "") where that is not certain.

        The register says so; or the text defines the words; or exactly one substance, in whatever
        forms, is named in the sections on nomenclature and structure, or else in all of 3.2.S.1.
        """
        declared = callings.declared(DRUG_SUBSTANCE)
        if declared:
            known = len(declared) == 1
            return (declared[0], "the register's drug substance") if known else ("", "")
        if callings.knows(DRUG_SUBSTANCE):
            return callings.called(DRUG_SUBSTANCE).title, "the text calls it so"
        for chapters in (_NAMING, ("S.1",)):
            named = self.named(chapters)
            if named:
                where = " and ".join(f"3.2.{chapter}" for chapter in chapters)
                title = _one_in_forms([home.label for home in named])
                return (title, f"the only substance named in {where}") if title else ("", "")
        return "", ""

    def subject(self, place: Place, drug: Substance | None) -> tuple[Substance | None, str]:
        """The one substance that the section of a place is about, and why; (None, "") for none.

        Exactly one must be named in the section: in the same file, or in the whole section where
        the file names none. Where none is named at all it is the drug substance, if that is known.
        """
        section = ctd.section_of(place)
        chapter = next((one for one in CHAPTERS if ctd.within(section, one)), "")
        if not chapter:
            return None, ""
        title = "the description" if chapter == ctd.DESCRIPTION else f"3.2.{chapter}"
        for source in (place.source, ""):
            named = self.named((chapter,), source)
            if len(named) == 1:
                return named[0], f"stands in {title}, where no other substance is named"
            if named:
                return None, ""
        if drug is None:
            return None, ""
        return drug, f"stands in {title}, which is about the drug substance"


def _one_in_forms(labels: Sequence[str]) -> str:
    """The label of the only substance among labels, "" for several. Of a substance and its salt
    the salt is meant: the free base is named beside the form that is made, and not the reverse."""
    if len({key_of(_FORM.sub("", label)) for label in labels}) != 1:
        return ""
    return max(labels, key=lambda label: (not _PARENT_FORM.search(label), len(label)))
