"""What sentences claim of configuration and number, held against the reference structure."""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from dossiercheck.checks.configuration import called, hand_open
from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.interpretation import Reading
from dossiercheck.language.statements import Statement
from dossiercheck.model import Role
from dossiercheck.stereo.arrangement import PAIRS, arrangement
from dossiercheck.stereo.counting import stereoisomers
from dossiercheck.stereo.descriptors import all_certain, doubt_at
from dossiercheck.stereo.structure import Structure, Unit


def stated(case: Case) -> Iterator[tuple[Reading, Statement]]:
    """The statements that were understood."""
    for reading in case.of_role(Role.STEREO):
        if reading.statement is not None:
            yield reading, reading.statement


def quoted(reading: Reading) -> str:
    """A statement in a sentence of ours: on one line."""
    return " ".join(reading.evidence.text.split())


@check(needs=("statement",), fields=("stated", "claimed", "where", "found", "reference"))
def statement_configuration_differs(case: Case, params: Params) -> Iterator[Observation]:
    """A sentence gives a unit a letter that the structure does not have there.

    A locant is looked up in the numbering of the substance's own names; one that these do not
    give to exactly one unit, or in two ways, decides nothing. A letter without a locant differs
    where no unit at all has it.
    """
    structure = case.structure
    if structure is None or case.reference is None or structure.doubt or hand_open(structure):
        return
    if structure.groups:
        return
    for reading, statement in stated(case):
        for locant, letter in statement.letters:
            units = meant(case, structure, locant, letter)
            if not units or any(unit.descriptor.upper() == letter.upper() for unit in units):
                continue
            if any(doubt_at(structure, unit.atoms) for unit in units):
                continue
            atoms = {unit.atoms[0]: unit.descriptor for unit in units}
            names = [case.unit_ids[frozenset(u.atoms)] for u in units]
            where = f"at {locant}" if locant else f"of its {_units_of(units)}"
            yield Observation(
                {
                    "stated": quoted(reading),
                    "claimed": letter,
                    "where": where,
                    "found": ", ".join(unit.descriptor for unit in units),
                    "reference": called(case),
                },
                (exhibit(reading), exhibit(case.reference, atoms=atoms)),
                ", ".join(names),
                locant,
            )
            break


def _units_of(units: list[Unit]) -> str:
    kind = "double bond" if units[0].kind == "double bond" else "stereogenic centre"
    return kind if len(units) == 1 else f"{kind}s"


def meant(case: Case, structure: Structure, locant: str, letter: str) -> list[Unit]:
    """The units of which the letter must be one's; none where that cannot be told.

    Of several letters without locants, or where units are left open, nothing is certain.
    """
    kind = "double bond" if letter in "EZ" else "centre"
    units = [unit for unit in structure.units if unit.kind == kind]
    if not locant:
        bare = any(unit.kind == kind for unit in structure.undefined)
        return [] if bare or (kind == "centre" and structure.axis_atoms) else units
    found: set[tuple[int, ...]] = set()
    for numbers in numberings(case, structure):
        here = {unit for unit in units if locant in numbers.get(frozenset(unit.atoms), ())}
        if len(here) != 1 or _elsewhere(numbers, locant, here):
            return []
        found.add(next(iter(here)).atoms)
    return [unit for unit in units if unit.atoms in found] if len(found) == 1 else []


def _elsewhere(
    numbers: Mapping[frozenset[int], tuple[str, ...]], locant: str, here: set[Unit]
) -> bool:
    """Whether a unit of another kind or of another part bears the locant too."""
    own = {frozenset(unit.atoms) for unit in here}
    return any(locant in locants and unit not in own for unit, locants in numbers.items())


def numberings(
    case: Case, structure: Structure
) -> Iterator[Mapping[frozenset[int], tuple[str, ...]]]:
    """For each name of the substance, the locants of the reference's units."""
    if structure.locants:
        yield {
            frozenset(unit.atoms): tuple(structure.locants[a] for a in unit.atoms)
            for unit in (*structure.units, *structure.undefined)
        }
    for pair in case.pairs:
        other = pair.reading.structure
        if other is None or not other.locants or not pair.alignment.mapping:
            continue
        mapping = pair.alignment.mapping
        yield {
            frozenset(unit.atoms): tuple(other.locants[mapping[a]] for a in unit.atoms)
            for unit in (*structure.units, *structure.undefined)
            if all(a in mapping for a in unit.atoms)
        }


@check(needs=("statement",), fields=("stated", "found"))
def statement_bonds_differ(case: Case, params: Params) -> Iterator[Observation]:
    """The number of stereogenic double bonds stated is not that of the structure."""
    structure = case.structure
    if structure is None or case.reference is None or structure.doubt:
        return
    atoms = [u.atoms for u in (*structure.units, *structure.undefined) if u.kind == "double bond"]
    for reading, statement in stated(case):
        if statement.bonds is None or statement.bonds == len(atoms):
            continue
        counted = stereoisomers(structure)
        if counted is None or counted.bonds == statement.bonds or not all_certain(structure):
            continue
        marked = {atom: "" for ends in atoms for atom in ends}
        yield Observation(
            {"stated": str(statement.bonds), "found": str(len(atoms))},
            (exhibit(reading), exhibit(case.reference, atoms=marked)),
        )


@check(needs=("statement",), fields=("stated", "found", "how"))
def statement_isomers_differ(case: Case, params: Params) -> Iterator[Observation]:
    """The number of possible stereoisomers stated is not that of the constitution."""
    structure = case.structure
    if structure is None or case.reference is None or structure.doubt:
        return
    for reading, statement in stated(case):
        if statement.isomers is None:
            continue
        counted = stereoisomers(structure)
        if counted is None or not counted.exact or counted.nitrogens:
            continue
        if statement.isomers == counted.stereoisomers:
            continue
        yield Observation(
            {
                "stated": str(statement.isomers),
                "found": str(counted.stereoisomers),
                "how": _how(counted.centres, counted.bonds, counted.meso),
            },
            (exhibit(reading), exhibit(case.reference)),
        )


def _how(centres: int, bonds: int, meso: int) -> str:
    parts = [f"{centres} stereogenic centre{'s' * (centres != 1)}"] if centres else []
    parts += [f"{bonds} stereogenic double bond{'s' * (bonds != 1)}"] if bonds else []
    text = " and ".join(parts) or "no stereogenic units"
    return f"{text}, {meso} meso form{'s' * (meso != 1)} among them" if meso else text


@check(needs=("statement",), fields=("stated", "word", "found", "reference"))
def statement_arrangement_differs(case: Case, params: Params) -> Iterator[Observation]:
    """Cis for trans, threo for erythro, D for L, where geometry alone decides."""
    structure = case.structure
    if structure is None or case.reference is None:
        return
    for reading, statement in stated(case):
        for word in statement.words:
            found, atoms = arrangement(structure, word)
            if not found or found == word or not any({found, word} == pair for pair in PAIRS):
                continue
            if any(
                doubt_at(structure, unit.atoms)
                for unit in structure.units
                if set(unit.atoms) & set(atoms)
            ):
                continue
            yield Observation(
                {
                    "stated": quoted(reading),
                    "word": word,
                    "found": found,
                    "reference": called(case),
                },
                (exhibit(reading), exhibit(case.reference, atoms=dict.fromkeys(atoms, ""))),
            )
