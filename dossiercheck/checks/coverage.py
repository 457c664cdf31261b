"""What the guidelines expect to find stated of a chiral drug substance, and was not found.

Nothing is ever called missing: what was not read may say it. The drug substance is the one that
the register declares or that the dossier names for certain, and it is a single enantiomer.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from dossiercheck import ctd
from dossiercheck.calling import DRUG_SUBSTANCE
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.dossier import Dossier, Portrait
from dossiercheck.model import Exhibit, Role, Unread
from dossiercheck.stereo import relations
from dossiercheck.stereo.perception import from_smiles
from dossiercheck.stereo.structure import Unreadable

_LISTED = 6
_STRUCTURAL = (Role.MOLFILE, Role.SMILES, Role.INCHI, Role.NAME)


@check(
    needs=("dossier",),
    fields=("drug", "sections", "unread"),
    params={"topics": list, "sections": list, "structures": str},
)
def not_found(case: Dossier, params: Params) -> Iterator[Observation]:
    """A matter that none of the sections raises, though the dossier holds them.

    `topics` are those of `language.topics`, `sections` those to look in. `structures` says what
    does as well: "drawn" a structure of the drug substance itself in those sections,
    "enantiomer" or "stereoisomer" a substance there that is one of it, "" nothing.
    """
    chapters: Sequence[str] = params["sections"]
    if not case.holds(chapters) or case.speaks(params["topics"], chapters):
        return
    for drug in case.portraits:
        if drug.substance.role.casefold() != DRUG_SUBSTANCE or not drug.single:
            continue
        if params["structures"] == "stereoisomer" and _has_one_unit(drug):
            continue
        if _shown(case, drug, params["structures"], chapters):
            continue
        assert drug.reference is not None
        text = drug.reference.text if drug.reference.role is not Role.MOLFILE else ""
        note = drug.substance.inferred or "declared in the register"
        quoted = Exhibit(drug.reference.id, "Drug substance", text, drug.reference.place, note=note)
        yield Observation(
            {
                "drug": drug.substance.label,
                "sections": " and ".join(f"3.2.{chapter}" for chapter in chapters),
                "unread": not_read(case.unread),
            },
            (quoted,),
            substance=drug.entry.id,
        )


def not_read(unread: Sequence[Unread]) -> str:
    """What was left unread, as a sentence: the matter may stand there."""
    if not unread:
        return "Nothing was left unread."
    places = list(dict.fromkeys(f"{one.place.source} ({one.place})" for one in unread))
    listed = "; ".join(places[:_LISTED])
    more = len(places) - _LISTED
    return f"Unread, and it may stand there: {listed}" + (
        f"; and {more} more." if more > 0 else "."
    )


def _has_one_unit(drug: Portrait) -> bool:
    """With one stereogenic unit the enantiomer is the only other stereoisomer."""
    table = drug.entry.concordance
    return table is not None and len(table.rows) < 2


def _shown(case: Dossier, drug: Portrait, wanted: str, chapters: Sequence[str]) -> bool:
    if wanted == "drawn":
        return any(
            said.role in _STRUCTURAL and _within(ctd.section_of(said.place), chapters)
            for said in drug.entry.evidence
        )
    if not wanted:
        return False
    kinds = {relations.ENANTIOMER}
    if wanted == "stereoisomer":
        kinds = {relations.DIASTEREOMER}
    return any(
        _related(drug, other) in kinds
        for other in case.portraits
        if other is not drug and any(_within(one, chapters) for one in other.sections())
    )


def _within(section: str, chapters: Sequence[str]) -> bool:
    return any(
        ctd.within(section, one) or (section and ctd.within(one, section)) for one in chapters
    )


def _related(drug: Portrait, other: Portrait) -> str:
    """How a substance is related to the drug substance, salts by their main components."""
    for mine in sorted(drug.identities, key=lambda one: one.smiles):
        for theirs in sorted(other.identities, key=lambda one: one.smiles):
            if mine.kind != "absolute" or theirs.kind != "absolute":
                continue
            try:
                found = relations.relation(from_smiles(mine.smiles), from_smiles(theirs.smiles))
            except Unreadable:
                continue
            if found.kind in (relations.ENANTIOMER, relations.DIASTEREOMER):
                return found.kind
    return ""
