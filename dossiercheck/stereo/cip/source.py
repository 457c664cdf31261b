"""A structure as the engine takes it: its molecule, and the units that its source marks."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from dossiercheck.stereo.cip.drawn import Drawn
from dossiercheck.stereo.cip.linear import marked_in_text
from dossiercheck.stereo.cip.molecule import Molecule, molecule_of
from dossiercheck.stereo.cip.units import Marked
from dossiercheck.stereo.cip.vectors import Vector
from dossiercheck.stereo.structure import Structure


@dataclass(frozen=True, slots=True)
class Source:
    """What a structure says: atoms and bonds, the units it marks, and by its end atoms each unit
    it means to mark and does not, with the reason."""

    molecule: Molecule
    marked: tuple[Marked, ...]
    unclear: Mapping[tuple[int, ...], str]
    drawn: Drawn | None = None


def source_of(structure: Structure) -> Source:
    """Atoms and bonds from the structure; configurations from its text or its coordinates, read
    anew and not from the marks that the library made of them."""
    molecule = molecule_of(structure.mol)
    if not structure.dimension:
        return Source(molecule, tuple(marked_in_text(structure.text, molecule)), {})
    drawn = drawn_of(structure, molecule)
    return Source(molecule, tuple(drawn.marked()), drawn.unclear, drawn)


def drawn_of(structure: Structure, molecule: Molecule) -> Drawn:
    """The structure's coordinates and wedges."""
    marks = [(mark.begin, mark.end, mark.style) for mark in structure.marks]
    return Drawn(molecule, points_of(structure), marks, structure.dimension == 2)


def points_of(structure: Structure) -> list[Vector]:
    """The coordinates of each atom, in the source's own unit."""
    conformer = structure.mol.GetConformer()
    return [(x, y, z) for x, y, z in conformer.GetPositions().tolist()]
