"""Claims in stereochemistry fields, held against the reference structure."""

from __future__ import annotations

import re
from collections.abc import Iterator

from dossiercheck.checks.configuration import hand_open
from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.model import Role
from dossiercheck.stereo.alignment import mirror_smiles
from dossiercheck.stereo.counting import stereoisomers
from dossiercheck.stereo.descriptors import all_certain
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
        if hand_open(case.structure) and stated not in ("achiral", "chiral", "mixture"):
            continue
        if _drawn_for_both(case, stated):
            continue
        yield Observation(
            {"stated": reading.evidence.text.strip(), "found": found},
            (exhibit(reading), exhibit(case.reference)),
        )


@check(needs=("statement",), fields=("stated", "centres"))
def racemate_not_marked(case: Case, params: Params) -> Iterator[Observation]:
    """A racemate drawn as one enantiomer whose connection table does not say that it is only that.

    The wedges on two centres or more are then needed to say which diastereomer it is.
    """
    for reading in case.of_role(Role.STEREO):
        stated = reading.statement.kind if reading.statement else ""
        if not _drawn_for_both(case, stated):
            continue
        assert case.structure is not None
        assert case.reference is not None
        yield Observation(
            {
                "stated": reading.evidence.text.strip(),
                "centres": str(sum(unit.kind == "centre" for unit in case.structure.units)),
            },
            (exhibit(reading), exhibit(case.reference)),
        )


def _drawn_for_both(case: Case, stated: str) -> bool:
    """True for a stated racemate whose drawing has two centres or more and a chiral flag of 0:
    by the published CTfile description the drawing then stands for both enantiomers."""
    structure, reference = case.structure, case.reference
    if stated != "racemic" or structure is None or reference is None:
        return False
    centres = sum(unit.kind == "centre" for unit in structure.units)
    return (
        reference.evidence.role is Role.MOLFILE
        and structure.kind == "absolute"
        and centres > 1
        and _flag(reference.evidence.text) == "0"
    )


def _flag(molblock: str) -> str:
    """The chiral flag of a connection table, V2000 or V3000; "" where there is none."""
    counts = re.search(r"^M  V30 COUNTS(?: +\d+){4} +(\d)", molblock, re.MULTILINE)
    if counts:
        return counts[1]
    lines = molblock.split("\n")
    old = len(lines) > 3 and lines[3].rstrip().endswith("V2000")
    return lines[3][12:15].strip() if old else ""


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
        counted = stereoisomers(structure)
        if counted and stated in (counted.centres, counted.centres - counted.nitrogens):
            continue
        if not all_certain(structure):
            continue
        yield Observation(
            {"stated": str(stated), "found": str(len(atoms))},
            (exhibit(reading), exhibit(case.reference, atoms=dict.fromkeys(sorted(atoms), ""))),
        )


def _contradicts(stated: str, found: str, structure: Structure) -> bool:
    """A mixture of stereoisomers is contradicted by one that is wholly specified and by a
    structure that has none; optical activity by a racemate and by what is achiral, optical
    inactivity by one enantiomer."""
    if found in ("silent", "") or found.startswith("partly"):
        return False
    if stated == "mixture":
        return found == "achiral" or (found == "absolute" and not structure.undefined)
    if stated in ("active", "scalemic"):
        return found in ("racemic", "achiral")
    if stated == "chiral":
        return found == "achiral"
    if stated == "inactive":
        return found == "absolute"
    if stated == "not racemic":
        return found == "racemic"
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
