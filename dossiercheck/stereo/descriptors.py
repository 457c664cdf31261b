"""Every descriptor computed twice: by the engine, which can say why, and by the library.

A descriptor is certain where both give it. Where they differ, or one of them gives none (the
library knows no helices or cumulenes; either may give up), both are shown and nothing may rest on
it.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from dossiercheck.stereo.cip.derivation import Derivation, derive
from dossiercheck.stereo.cip.engine import Ranked, rank_all
from dossiercheck.stereo.cip.molecule import around
from dossiercheck.stereo.cip.readoff import read_off
from dossiercheck.stereo.cip.source import Source, drawn_of, source_of
from dossiercheck.stereo.cip.tree import TooLarge
from dossiercheck.stereo.cip.words import Namer, namer_for
from dossiercheck.stereo.structure import Structure, Unit


@dataclass(frozen=True, slots=True)
class Descriptor:
    """One unit as both computations have it.

    `atoms` are 0-based: one for a centre, the two ends for another unit. `ours` and `library` are
    "" where that computation gives no letter; `note` says why a descriptor is not certain.
    """

    kind: str
    atoms: tuple[int, ...]
    ours: str
    library: str
    note: str = ""
    derivation: Derivation | None = None
    reading: tuple[str, ...] = ()

    @property
    def certain(self) -> bool:
        """Whether both computations give the same letter."""
        return bool(self.ours) and self.ours == self.library

    @property
    def descriptor(self) -> str:
        """The letter where it is certain, else ""."""
        return self.ours if self.certain else ""


def descriptors(structure: Structure) -> tuple[Descriptor, ...]:
    """Every unit to which either computation gives a letter or a doubt, by atom, with its
    derivation."""
    source = source_of(structure)
    library = {_key(unit.atoms): unit for unit in (*structure.units, *structure.axes)}
    name = namer_for(structure)
    found = [
        _joined(source, ranked, library, structure.doubt, name)
        for ranked in rank_all(source)
        if ranked.descriptor or ranked.doubt or _key(ranked.unit.ends) in library
    ]
    seen = {_key(one.atoms) for one in found}
    for atoms, unit in library.items():
        if atoms not in seen:
            seen.add(atoms)
            note = source.unclear.get(unit.atoms) or source.unclear.get(unit.atoms[::-1])
            found.append(
                Descriptor(
                    unit.kind,
                    unit.atoms,
                    "",
                    unit.descriptor,
                    note or "the engine finds no stereogenic unit here",
                )
            )
    for atoms, why in source.unclear.items():
        if _key(atoms) not in seen and len(atoms) == 1 and structure.dimension == 2:
            found.append(Descriptor("centre", atoms, "", "", why))
    return tuple(sorted(found, key=lambda one: (len(one.atoms), one.atoms)))


def own_units(structure: Structure) -> tuple[Unit, ...]:
    """The units with a letter by the engine alone, without derivations."""
    return tuple(
        Unit(ranked.unit.kind, ranked.unit.ends, ranked.descriptor)
        for ranked in rank_all(source_of(structure))
        if ranked.descriptor
    )


def ambiguous_wedges(structure: Structure, centres: Iterable[int]) -> dict[int, str]:
    """Those of a drawing's stereogenic centres (0-based) whose wedges have no one meaning, with
    the reason."""
    wedged = {mark.begin for mark in structure.marks if mark.style in ("wedge", "hash")}
    wedged &= set(centres)
    if structure.dimension != 2 or not wedged:
        return {}
    return drawn_of(structure, around(structure.mol, wedged)).ambiguous(wedged)


def axis_of(structure: Structure) -> tuple[Descriptor | None, str]:
    """The one chiral axis that a structure configures, and why nothing may rest on it; "" where
    both computations agree."""
    axes = [one for one in described(structure).values() if one.kind == "axis"]
    if not axes:
        return None, "the structure shows no configuration of one"
    if len(axes) > 1:
        return None, "the structure shows more than one"
    return axes[0], "" if axes[0].certain else axes[0].note


def doubt_at(structure: Structure, atoms: Iterable[int]) -> str:
    """Why nothing may rest on the descriptor of the unit at these atoms (0-based), "" where both
    computations give it."""
    found = confirmed(structure, atoms)
    if found is None:
        return "neither computation gives a descriptor"
    if found.certain:
        return ""
    return (
        f"{found.note} (the engine gives {found.ours or 'none'}, "
        f"the structure library {found.library or 'none'})"
    )


def all_certain(structure: Structure) -> bool:
    """Whether both computations give the same letter to the same units of the structure."""
    return all(one.certain for one in described(structure).values())


def confirmed(structure: Structure, atoms: Iterable[int]) -> Descriptor | None:
    """The unit at these atoms (0-based) as both computations have it, None where neither sees
    one."""
    return described(structure).get(_key(atoms))


def described(structure: Structure) -> dict[tuple[int, ...], Descriptor]:
    """`descriptors` by their atoms in ascending order; worked out once a structure."""
    if structure.described is None:
        structure.described = {_key(one.atoms): one for one in descriptors(structure)}
    return structure.described


def _key(atoms: Iterable[int]) -> tuple[int, ...]:
    return tuple(sorted(atoms))


def _joined(
    source: Source,
    ranked: Ranked,
    library: dict[tuple[int, ...], Unit],
    given_up: str,
    name: Namer,
) -> Descriptor:
    other = library.get(_key(ranked.unit.ends))
    letter = other.descriptor if other else ""
    derivation = None
    note = ranked.doubt
    if ranked.descriptor:
        try:
            derivation = derive(source.molecule, ranked)
        except (TooLarge, RecursionError):
            note = "its derivation takes more steps than the budget allows"
    reading = read_off(ranked, derivation, source.drawn, name) if derivation is not None else ()
    if not note and ranked.descriptor != letter:
        if letter:
            note = "the two computations differ"
        else:
            note = given_up or "the structure library gives no descriptor here"
    return Descriptor(
        ranked.unit.kind, ranked.unit.ends, ranked.descriptor, letter, note, derivation, reading
    )
