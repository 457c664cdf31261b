"""Which unit a printed descriptor speaks of.

A locant alone does not tell: most locants are carried by several atoms of the whole structure.
So the descriptor is turned round (R for S, E for Z) in the printed name and the name parsed
again; the unit whose configuration changed is the one it speaks of.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from dossiercheck.names.named import NamedStructure, NameReading
from dossiercheck.names.notation import Notation, NotationError, read_extended, read_notation
from dossiercheck.names.parser import NameParser
from dossiercheck.names.rewriting import OPPOSITE, rewritten


@dataclass(frozen=True, slots=True)
class Tie:
    """Descriptor number `descriptor` speaks of `atoms` (0-based in the structure's SMILES order:
    one for a centre, two for a double bond; none when it could not be tied). `reason` says how
    it was tied, or why not."""

    descriptor: int
    atoms: tuple[int, ...]
    reason: str


def tie(reading: NameReading, parser: NameParser) -> tuple[Tie, ...]:
    """A tie for every printed descriptor of the reading, in order; one parser call in all."""
    return ties(reading, range(len(reading.descriptors)), parser)


def tie_one(reading: NameReading, index: int, parser: NameParser) -> Tie:
    """The tie of one printed descriptor."""
    return ties(reading, [index], parser)[0]


def ties(reading: NameReading, indices: Sequence[int], parser: NameParser) -> tuple[Tie, ...]:
    """The ties of some printed descriptors; their turned names go to the parser together."""
    structure = reading.structure
    if structure is None:
        return tuple(Tie(index, (), "the name was not interpreted") for index in indices)
    turned = {index: text for index in indices if (text := _turned(reading, index))}
    answers = dict(zip(turned, parser.parse(list(turned.values())), strict=True))
    here = read_notation(structure.smiles)
    found = []
    for index in indices:
        answer = answers.get(index)
        if answer is None or answer.smiles is None:
            why = "no opposite" if answer is None else "refused when turned round"
            found.append(_by_locant(reading, index, here, why))
            continue
        try:
            there = read_notation(read_extended(answer.smiles).smiles)
        except NotationError:
            found.append(Tie(index, (), "the parser's answer could not be read"))
            continue
        found.append(_chosen(reading, index, here, there))
    return tuple(found)


def changed(here: Notation, there: Notation) -> tuple[tuple[int, ...], ...] | None:
    """The units whose configuration differs between two answers: (atom,) for centres, (atom,
    atom) for double bonds. None when the two do not number the same constitution alike."""
    if here.constitution != there.constitution:
        return None
    centres = [(i,) for i, (a, b) in enumerate(zip(here.marks, there.marks, strict=True)) if a != b]
    first, second = here.double_bonds, there.double_bonds
    bonds = [key for key in sorted({*first, *second}) if first.get(key) != second.get(key)]
    return (*centres, *bonds)


def _turned(reading: NameReading, index: int) -> str | None:
    letters = OPPOSITE.get(reading.descriptors[index].text)
    if letters is None or index in reading.dropped:
        return None
    return rewritten(
        reading.cleaned.text,
        reading.descriptors,
        drop=reading.dropped,
        change={index: letters},
        spaces=reading.respaced,
    )


def _chosen(reading: NameReading, index: int, here: Notation, there: Notation) -> Tie:
    moved = changed(here, there)
    if moved is None:
        return _by_locant(reading, index, here, "the turned name is numbered differently")
    if len(moved) == 1:
        return Tie(index, moved[0], "the only unit that changes when it is turned round")
    if not moved:
        return _by_locant(reading, index, here, "turning it round changes nothing")
    structure = reading.structure
    locant = reading.descriptors[index].locant
    named = [unit for unit in moved if structure and _carries(structure, unit, locant)]
    if locant and len(named) == 1:
        return Tie(index, named[0], "of the units that change the only one with its locant")
    return Tie(index, (), f"turning it round changes {len(moved)} units")


def _carries(structure: NamedStructure, unit: tuple[int, ...], locant: str) -> bool:
    return any(structure.labels[atom] == locant for atom in unit)


def _by_locant(reading: NameReading, index: int, here: Notation, why: str) -> Tie:
    """The tie by locant alone, where only one unit can be meant."""
    structure, descriptor = reading.structure, reading.descriptors[index]
    if (
        structure is None
        or not descriptor.locant
        or descriptor.family
        not in (
            "centre",
            "double bond",
        )
    ):
        return Tie(index, (), why)
    atoms = structure.labelled(descriptor.locant)
    if descriptor.family == "double bond":
        bonds = [
            (min(a, b), max(a, b))
            for a, b, symbol in here.bonds
            if symbol == "=" and (a in atoms or b in atoms)
        ]
        if len(bonds) == 1:
            return Tie(index, bonds[0], f"{why}; the only double bond with its locant")
    elif len(atoms) == 1:
        return Tie(index, atoms, f"{why}; the only atom with its locant")
    return Tie(index, (), f"{why}; {len(atoms)} atoms carry its locant")
