"""Claims in stereochemistry fields, held against the reference structure."""

from __future__ import annotations

from collections.abc import Iterator

from dossiercheck.checks.configuration import hand_open
from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.model import Role
from dossiercheck.stereo.alignment import mirror_smiles
from dossiercheck.stereo.structure import Structure


@check(needs=("statement",), fields=("stated", "found"))
def statement_kind_differs(case: Case, params: Params) -> Iterator[Observation]:
    """The field says racemate and the structure is one enantiomer, or the reverse.

    Nothing is said where the structure may owe its chirality to an axis, or where its descriptors
    could not be computed.
    """
    if case.structure is None or case.reference is None:
        return
    found = stereo_kind(case.structure)
    if case.structure.doubt or (found == "achiral" and case.structure.axis_atoms):
        return
    for reading in case.of_role(Role.STEREO):
        stated = reading.statement.kind if reading.statement else ""
        if not stated or not _contradicts(stated, found, case.structure):
            continue
        if hand_open(case.structure) and stated in ("absolute", "racemic", "relative", "active"):
            continue
        yield Observation(
            {"stated": reading.evidence.text.strip(), "found": found},
            (exhibit(reading), exhibit(case.reference)),
        )


@check(needs=("statement",), fields=("stated", "found"))
def statement_count_differs(case: Case, params: Params) -> Iterator[Observation]:
    """The number of stereogenic centres stated is not that of the structure."""
    if case.structure is None or case.reference is None:
        return
    structure = case.structure
    if structure.doubt:
        return
    atoms = {u.atoms[0] for u in (*structure.units, *structure.undefined) if u.kind == "centre"}
    for reading in case.of_role(Role.STEREO):
        stated = reading.statement.centres if reading.statement else None
        if stated is None or stated == len(atoms) or stated in _per_component(structure, atoms):
            continue
        yield Observation(
            {"stated": str(stated), "found": str(len(atoms))},
            (exhibit(reading), exhibit(case.reference, atoms=dict.fromkeys(sorted(atoms), ""))),
        )


def _contradicts(stated: str, found: str, structure: Structure) -> bool:
    """A mixture of stereoisomers is contradicted by one that is wholly specified and by a
    structure that has none; optical activity by a racemate and by what is achiral."""
    if found in ("silent", "") or found.startswith("partly"):
        return False
    if stated == "mixture":
        return found == "achiral" or (found == "absolute" and not structure.undefined)
    if stated == "active":
        return found in ("racemic", "achiral")
    return stated != found


def stereo_kind(structure: Structure) -> str:
    """The kind of stereo, a meso compound counted as achiral."""
    if structure.kind == "absolute" and mirror_smiles(structure) == structure.smiles:
        return "achiral"
    return structure.kind


def _per_component(structure: Structure, atoms: set[int]) -> set[int]:
    """Centres of the largest component: of a salt, the number for the parent is right too."""
    parts = [set(part) for part in structure.components()]
    if len(parts) == 1:
        return set()
    return {len(atoms & max(parts, key=len))}
