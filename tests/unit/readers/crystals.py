"""Invented crystals: molecules with coordinates put into cells, written as CIF.

The structure library embeds the molecule; what is written is the asymmetric unit only, so that
a reader has to find the rest by symmetry where the molecule lies on a symmetry element.
"""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

import gemmi
import numpy as np
from rdkit import Chem
from rdkit.Chem import AllChem, rdMolDescriptors

from dossiercheck.model import Item
from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.structure import Structure
from tests.unit.readers.reading import read, records, unread

PADDING = 7.0  # ångström between molecules; far more than any contact


@dataclass
class Atom:
    element: str
    position: np.ndarray
    occupancy: float = 1.0
    assembly: str = "."
    group: str = "."
    label: str = ""


@dataclass
class Made:
    """A CIF in the making: everything may be changed before `text` is asked."""

    symbol: str
    cell: tuple[float, float, float, float, float, float]
    atoms: list[Atom]
    tags: dict[str, str] = field(default_factory=dict)
    block: str = "OVE118"
    operations: bool = True

    def text(self) -> str:
        group = gemmi.SpaceGroup(self.symbol)
        to_cell = np.linalg.inv(orthogonal(self.cell))
        lines = [f"data_{self.block}"]
        lines += [f"{tag} {quoted(value)}" for tag, value in self.tags.items()]
        lines.append(f"_space_group_name_H-M_alt '{group.hm}'")
        names = ("length_a", "length_b", "length_c", "angle_alpha", "angle_beta", "angle_gamma")
        lines += [f"_cell_{name} {v:.4f}" for name, v in zip(names, self.cell, strict=True)]
        if self.operations:
            lines += ["loop_", "_space_group_symop_operation_xyz"]
            lines += [f"'{op.triplet()}'" for op in group.operations()]
        columns = ("label", "type_symbol", "fract_x", "fract_y", "fract_z", "occupancy")
        lines += ["loop_", *(f"_atom_site_{name}" for name in columns)]
        lines += ["_atom_site_disorder_assembly", "_atom_site_disorder_group"]
        for number, atom in enumerate(self.atoms, 1):
            x, y, z = to_cell @ atom.position
            label = atom.label or f"{atom.element}{number}"
            lines.append(
                f"{label} {atom.element} {x:.5f}(3) {y:.5f}(3) {z:.5f}(3)"
                f" {atom.occupancy:g} {atom.assembly} {atom.group}"
            )
        return "\n".join([*lines, ""])


def quoted(value: str) -> str:
    return f"\n;{value}\n;" if "\n" in value or "'" in value else f"'{value}'"


def orthogonal(cell: Sequence[float]) -> np.ndarray:
    return np.array(gemmi.UnitCell(*cell).orth.mat.tolist())


def embedded(smiles: str, seed: int = 7) -> Chem.Mol:
    """With all hydrogens and relaxed coordinates. Raises ValueError where none are found."""
    mol = Chem.AddHs(from_smiles(smiles).mol)
    if AllChem.EmbedMolecule(mol, randomSeed=seed) != 0:
        raise ValueError(f"no coordinates for {smiles}")
    try:
        AllChem.MMFFOptimizeMolecule(mol, maxIters=2000)
    except Exception:
        AllChem.UFFOptimizeMolecule(mol, maxIters=2000)
    return mol


def atoms_of(mol: Chem.Mol) -> list[Atom]:
    """The molecule's fragments beside each other, well apart."""
    found: list[Atom] = []
    offset = 0.0
    positions = mol.GetConformer().GetPositions()
    for part in Chem.GetMolFrags(mol):
        own = positions[list(part)]
        own = own - own.min(axis=0) + np.array([offset, 0.0, 0.0])
        offset = float(own[:, 0].max()) + 4.0
        for index, position in zip(part, own, strict=True):
            atom = mol.GetAtomWithIdx(index)
            element = "D" if atom.GetIsotope() == 2 else atom.GetSymbol()
            found.append(Atom(element, position))
    return found


def formula_of(mol: Chem.Mol) -> str:
    """As a CIF prints it: elements in Hill order, with spaces, without the charge."""
    text = re.sub(r"[+-]\d*$", "", rdMolDescriptors.CalcMolFormula(mol, True, True))
    return " ".join(re.findall(r"[A-Z][a-z]?\d*", text))


def put_into(
    atoms: Sequence[Atom],
    symbol: str = "P 21 21 21",
    at: tuple[float, float, float] = (0.14, 0.13, 0.12),
    tags: Mapping[str, str] | None = None,
    angles: tuple[float, float, float] | None = None,
) -> Made:
    """Put molecules at a general position of a cell large enough for all images of them."""
    group = gemmi.SpaceGroup(symbol)
    positions = np.array([atom.position for atom in atoms])
    centre = (positions.max(axis=0) + positions.min(axis=0)) / 2
    size = float(np.linalg.norm(positions - centre, axis=1).max()) * 2 + PADDING
    length = _edge(group, at, size)
    cell = _cell(group, length, angles)
    origin = orthogonal(cell) @ np.array(at)
    moved = [
        Atom(a.element, a.position - centre + origin, a.occupancy, a.assembly, a.group, a.label)
        for a in atoms
    ]
    return Made(symbol, cell, moved, dict(tags or {}))


def _edge(group: gemmi.SpaceGroup, at: tuple[float, float, float], size: float) -> float:
    """An edge with which the centres of all images stand `size` apart."""
    images = [np.array(op.apply_to_xyz(list(at))) for op in group.operations()]
    unit = orthogonal(_cell(group, 1.0, None))
    shifts = np.array(np.meshgrid(*[[-2, -1, 0, 1, 2]] * 3)).reshape(3, -1).T
    nearest = min(
        float(length)
        for image in images
        for length in np.linalg.norm((image - np.array(at) + shifts) @ unit.T, axis=1)
        if length > 1e-6
    )
    return size / nearest


def _cell(
    group: gemmi.SpaceGroup, length: float, angles: tuple[float, float, float] | None
) -> tuple[float, float, float, float, float, float]:
    system = group.crystal_system_str()
    if angles is None:
        angles = {
            "triclinic": (83.0, 97.0, 104.0),
            "monoclinic": (90.0, 101.0, 90.0),
            "hexagonal": (90.0, 90.0, 120.0),
            "trigonal": (90.0, 90.0, 120.0),
        }.get(system, (90.0, 90.0, 90.0))
    return (length, length, length, *angles)


def crystal(smiles: str, symbol: str = "P 21 21 21", seed: int = 7, **tags: str) -> Made:
    """One formula unit in the asymmetric unit. `tags` are data names without the underscore."""
    mol = embedded(smiles, seed)
    given = {"_chemical_formula_sum": formula_of(mol)}
    given |= {f"_{name}": value for name, value in tags.items()}
    return put_into(atoms_of(mol), symbol, tags=given)


def beside(one: list[Atom], other: list[Atom]) -> list[Atom]:
    reach = max(float(atom.position[0]) for atom in one) + 4.0
    least = min(float(atom.position[0]) for atom in other)
    for atom in other:
        atom.position = atom.position + np.array([reach - least, 0.0, 0.0])
    return [*one, *other]


def items(made: Made | str) -> list[Item]:
    text = made if isinstance(made, str) else made.text()
    return read("a.cif", text.encode())


def plain(structure: Structure) -> str:
    """Canonical isomeric SMILES without explicit hydrogens."""
    bare = Chem.RemoveHs(structure.mol)
    bare.RemoveAllConformers()
    return str(Chem.CanonSmiles(Chem.MolToSmiles(bare)))


def molecule(made: Made | str) -> str:
    """What the one block is read as."""
    found = items(made)
    (record,) = records(found)
    assert record.molblock, unread(found)
    return plain(from_molblock(record.molblock))


def refusal(made: Made | str) -> str:
    """Why the one block gave no molecule."""
    found = items(made)
    assert not any(record.molblock for record in records(found)), "a molecule was read"
    (entry,) = unread(found)
    return entry.reason


def canonical(smiles: str) -> str:
    return plain(from_smiles(smiles))
