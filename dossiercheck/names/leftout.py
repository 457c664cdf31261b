"""Faults for the descriptors that a name was read without, and where they may belong."""

from __future__ import annotations

from collections.abc import Collection

from dossiercheck.names.hetero import hetero_centres, speaks_of_hetero
from dossiercheck.names.named import Fault, NamedStructure, NameReading
from dossiercheck.names.notation import read_notation
from dossiercheck.names.parser import NameParser
from dossiercheck.names.refused import is_unjudged
from dossiercheck.names.tying import ties


def faults(reading: NameReading, unplaced: Collection[int], parser: NameParser) -> list[Fault]:
    """One fault for each descriptor that the reading leaves out, those of `unplaced` being such
    as the parser gave up on although the unit may exist."""
    base = reading.skeleton or reading.structure
    if base is None:
        return []
    found = []
    for index in sorted(reading.dropped):
        descriptor = reading.descriptors[index]
        printed = descriptor.locant + descriptor.text
        atoms = _nearest(reading, index, candidates(reading, index, base), parser)
        hetero = atoms and speaks_of_hetero(reading.cleaned.text, descriptor)
        # Of a retained name the parser may know no numbers: the descriptor may speak of any atom.
        unnumbered = bool(descriptor.locant) and not any(one[:1].isdigit() for one in base.labels)
        if unnumbered:
            atoms = tuple(range(len(base.labels)))
        if is_unjudged(descriptor) or hetero or index in unplaced or unnumbered:
            detail = f"the name parser cannot place {printed}; the rest was read without it"
            found.append(Fault("descriptor-stripped", index, None, detail, atoms))
        elif descriptor.locant and not base.labelled(descriptor.locant):
            detail = f"{printed}: no atom of the named structure has the locant {descriptor.locant}"
            found.append(Fault("no-such-locant", index, None, detail))
        else:
            where = f"locant {descriptor.locant}" if descriptor.locant else "this place"
            detail = f"{printed}: nothing at {where} that the descriptor could describe"
            found.append(Fault("locant-not-stereogenic", index, None, detail, atoms))
    return found


def candidates(reading: NameReading, index: int, structure: NamedStructure) -> tuple[int, ...]:
    """The atoms a descriptor may speak of: those with its locant (for E and Z of double bonds,
    when there are such); without a locant, before a phosphoryl or sulfinyl group, the
    phosphorus or sulfur atoms whose configuration nothing else states."""
    descriptor = reading.descriptors[index]
    atoms = structure.labelled(descriptor.locant)
    notation = read_notation(structure.smiles)
    if descriptor.family == "double bond":
        bonds = [bond[:2] for bond in notation.bonds if bond[2] == "="]
        doubly = tuple(a for a in atoms if any(a in bond for bond in bonds))
        return doubly or atoms
    if speaks_of_hetero(reading.cleaned.text, descriptor):
        stated = read_notation(reading.structure.smiles).marks if reading.structure else ()
        alike = len(stated) == len(notation.atoms)
        return tuple(a for a in hetero_centres(notation) if not (alike and stated[a]))
    return atoms


def _nearest(
    reading: NameReading, index: int, atoms: tuple[int, ...], parser: NameParser
) -> tuple[int, ...]:
    """Of several candidates those nearest to the unit of another descriptor in the same
    bracket: locants of one bracket count on one parent."""
    structure, base = reading.structure, reading.skeleton or reading.structure
    descriptor = reading.descriptors[index]
    if len(atoms) < 2 or structure is None or base is None or descriptor.bracket < 0:
        return atoms
    siblings = [
        i
        for i, d in enumerate(reading.descriptors)
        if d.bracket == descriptor.bracket and i not in reading.dropped
    ]
    notation = read_notation(base.smiles)
    if not siblings or read_notation(structure.smiles).constitution != notation.constitution:
        return atoms
    for tied in ties(reading, siblings[:3], parser):
        if tied.atoms:
            away = notation.distances(tied.atoms[0])
            reached = [a for a in atoms if a in away and a not in tied.atoms]
            if reached:
                least = min(away[a] for a in reached)
                return tuple(a for a in reached if away[a] == least)
    return atoms
