"""What sentences say of two substances: relations, and retention or inversion in a step."""

from __future__ import annotations

from collections.abc import Iterator

from dossiercheck.calling import key_of
from dossiercheck.checks.claims import numberings, quoted, stated
from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.interpretation import Reading
from dossiercheck.language.statements import Statement
from dossiercheck.stereo import relations as rel
from dossiercheck.stereo.descriptors import all_certain, doubt_at
from dossiercheck.stereo.steps import compare_step
from dossiercheck.stereo.structure import Structure

_STEREOISOMERS = (rel.ENANTIOMER, rel.DIASTEREOMER)
_ALL = (rel.SAME, *_STEREOISOMERS, rel.CONSTITUTIONAL, rel.RACEMATE, rel.DIFFERENT)
# What a claimed relation leaves possible; "racemate" where one substance is one of a mixture.
_POSSIBLE = {
    "enantiomer": (rel.ENANTIOMER, rel.RACEMATE),
    "diastereomer": (rel.DIASTEREOMER,),
    "epimer": (rel.DIASTEREOMER,),
    "racemate": (rel.RACEMATE,),
    "constitutional isomer": (rel.CONSTITUTIONAL,),
    "stereoisomer": (*_STEREOISOMERS, rel.RACEMATE),
}
_WORDS = {
    rel.SAME: "both are one and the same stereoisomer",
    rel.ENANTIOMER: "they are enantiomers",
    rel.DIASTEREOMER: "they are diastereomers",
    rel.CONSTITUTIONAL: "they are constitutional isomers",
    rel.RACEMATE: "one is the racemate of the other",
    rel.DIFFERENT: "their formulas or skeletons differ",
}


def _other(case: Case, reading: Reading, statement: Statement) -> Reading | None:
    return case.others.get(key_of(reading.evidence.other or statement.other))


def _sure(structure: Structure) -> bool:
    return not structure.doubt and all_certain(structure)


@check(needs=("statement",), fields=("stated", "claimed", "other", "found"))
def relation_differs(case: Case, params: Params) -> Iterator[Observation]:
    """A sentence calls two substances enantiomers, epimers and so on, and their structures are
    something else to each other."""
    for reading, statement in stated(case):
        other = _other(case, reading, statement) if statement.relation else None
        if other is None or other.structure is None or case.structure is None:
            continue
        assert case.reference is not None
        if not _sure(case.structure) or not _sure(other.structure):
            continue
        if statement.relation == "racemate" and not case.structure.groups:
            continue  # drawn as one enantiomer, or flat: for the rules on racemates
        found = rel.relation(case.structure, other.structure)
        words = _contradiction(statement, found) or _elsewhere(case, statement, found)
        if words:
            yield Observation(
                {
                    "stated": quoted(reading),
                    "claimed": statement.relation,
                    "other": reading.evidence.other or statement.other,
                    "found": words,
                },
                (
                    exhibit(reading),
                    exhibit(case.reference, atoms={a: "" for u in found.units for a in u}),
                    exhibit(other),
                ),
            )


def _contradiction(statement: Statement, found: rel.Relation) -> str:
    """What the structures are to each other where the claim is wrong, else ""."""
    if found.kind not in _ALL:
        return ""
    if found.kind not in _POSSIBLE[statement.relation]:
        return _WORDS[found.kind]
    if statement.relation == "racemate" and found.racemic == "two":
        return "the other one is the racemate"
    if statement.relation == "epimer" and not found.epimer and len(found.units) > 1:
        return f"they differ at {len(found.units)} stereogenic units"
    return ""


def _elsewhere(case: Case, statement: Statement, found: rel.Relation) -> str:
    """Where an epimer differs, if that is not at the locant stated by any of its names, all of
    which give that locant to another unit."""
    if statement.relation != "epimer" or not found.epimer or len(statement.at) != 1:
        return ""
    assert case.structure is not None
    unit = frozenset(found.units[0])
    places = set()
    for numbers in numberings(case, case.structure):
        here = numbers.get(unit, ())
        others = {locant for one, own in numbers.items() if one != unit for locant in own}
        if not here or statement.at[0] in here or statement.at[0] not in others:
            return ""
        places.add(here[0])
    return f"they differ at {places.pop()}" if len(places) == 1 else ""


@check(needs=("statement",), fields=("stated", "claimed", "other", "found"))
def step_differs(case: Case, params: Params) -> Iterator[Observation]:
    """A step is said to go with retention, and the arrangement at the centre is inverted; or the
    reverse. Letters decide nothing: the unchanged ligands are laid on each other."""
    for reading, statement in stated(case):
        other = _other(case, reading, statement) if statement.step else None
        if other is None or other.structure is None or case.structure is None:
            continue
        assert case.reference is not None
        found = compare_step(other.structure, case.structure)
        if not found.kind or found.kind == statement.step:
            continue
        sides = [(other.structure, found.before), (case.structure, found.after)]
        if any(doubt_at(one, (atom,)) for one, atoms in sides for atom in atoms):
            continue
        yield Observation(
            {
                "stated": quoted(reading),
                "claimed": statement.step,
                "other": statement.other,
                "found": found.kind,
            },
            (
                exhibit(reading),
                exhibit(other, atoms=_lettered(other.structure, found.before)),
                exhibit(case.reference, atoms=_lettered(case.structure, found.after)),
            ),
        )


def _lettered(structure: Structure, atoms: tuple[int, ...]) -> dict[int, str]:
    return {u.atoms[0]: u.descriptor for u in structure.units if u.atoms[0] in atoms}
