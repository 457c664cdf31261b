"""One structure in the forms in which a dossier may carry it, made by the structure library."""

from __future__ import annotations

from collections.abc import Sequence

from rdkit import Chem
from rdkit.Chem import AllChem, rdDepictor

from dossiercheck.stereo.perception import from_smiles
from dossiercheck.stereo.structure import Structure


def laid_out(smiles: str, *, hydrogens: bool = False) -> Chem.Mol:
    mol = Chem.Mol(from_smiles(smiles).mol)
    if hydrogens:
        mol = Chem.AddHs(mol)
    rdDepictor.Compute2DCoords(mol)
    return mol


def v2000(smiles: str, *, hydrogens: bool = False) -> str:
    return str(Chem.MolToMolBlock(laid_out(smiles, hydrogens=hydrogens)))


def v3000(smiles: str) -> str:
    return str(Chem.MolToV3KMolBlock(laid_out(smiles)))


def in_space(smiles: str) -> str:
    mol = Chem.AddHs(from_smiles(smiles).mol)
    assert AllChem.EmbedMolecule(mol, randomSeed=7) == 0, "no coordinates"
    return str(Chem.MolToMolBlock(mol))


def renumbered(mol: Chem.Mol, order: Sequence[int]) -> Chem.Mol:
    return Chem.RenumberAtoms(mol, list(order))


def descriptors(structure: Structure) -> frozenset[str]:
    """ "atom number from 1, letter", a double bond at both of its atoms."""
    return frozenset(f"{atom + 1}{u.descriptor}" for u in structure.units for atom in u.atoms)


def letters(structure: Structure) -> list[str]:
    return sorted(unit.descriptor for unit in structure.units)


def open_units(structure: Structure) -> set[tuple[int, ...]]:
    return {tuple(sorted(unit.atoms)) for unit in structure.undefined}
