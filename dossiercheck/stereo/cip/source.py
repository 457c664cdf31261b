"""A structure as the engine takes it: its molecule, and the units that its source marks."""

from __future__ import annotations

from dossiercheck.stereo.cip.drawn import Drawn
from dossiercheck.stereo.cip.linear import marked_in_text
from dossiercheck.stereo.cip.molecule import Molecule, molecule_of
from dossiercheck.stereo.cip.units import Marked
from dossiercheck.stereo.cip.vectors import Vector
from dossiercheck.stereo.structure import Structure


def source_of(structure: Structure) -> tuple[Molecule, list[Marked]]:
    """Atoms and bonds from the structure; configurations from its text or its coordinates, read
    anew and not from the marks that the library made of them."""
    molecule = molecule_of(structure.mol)
    if not structure.dimension:
        return molecule, list(marked_in_text(structure.text, molecule))
    marks = [(mark.begin, mark.end, mark.style) for mark in structure.marks]
    drawn = Drawn(molecule, points_of(structure), marks, structure.dimension == 2)
    return molecule, list(drawn.marked())


def points_of(structure: Structure) -> list[Vector]:
    """The coordinates of each atom, in the source's own unit."""
    conformer = structure.mol.GetConformer()
    return [(x, y, z) for x, y, z in conformer.GetPositions().tolist()]
