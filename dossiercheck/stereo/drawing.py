"""A structure as data to be shown: in its own drawn coordinates where it has any."""

from __future__ import annotations

from collections.abc import Mapping

from rdkit import Chem
from rdkit.Chem import rdDepictor

from dossiercheck.model import Drawing, DrawnAtom, DrawnBond
from dossiercheck.stereo.perception import from_molblock
from dossiercheck.stereo.structure import Structure, Unreadable

_WEDGES = {Chem.BondDir.BEGINWEDGE: "wedge", Chem.BondDir.BEGINDASH: "hash"}


def drawing_of(
    structure: Structure,
    marks: Mapping[int, str] | None = None,
    like: tuple[Structure, Mapping[int, int]] | None = None,
) -> Drawing:
    """The structure with some atoms (0-based) marked by a short text, "" for a bare highlight.

    A structure without coordinates, or with three-dimensional ones, is laid out by the program;
    the drawing says so. `like` is a drawn structure and the mapping from its atoms: the layout
    then follows it, so that a difference shows as a wedge that is a hash, and not as another
    picture.
    """
    marks = marks or {}
    mol = structure.mol
    laid_out = structure.dimension != 2
    styles = {(m.begin, m.end): m.style for m in structure.marks}
    if laid_out:
        mol = (_following(structure, *like) if like else None) or _laid_out(structure)
        styles = {
            (bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()): _WEDGES[bond.GetBondDir()]
            for bond in mol.GetBonds()
            if bond.GetBondDir() in _WEDGES
        }
    positions = mol.GetConformer()
    kekulized = Chem.Mol(mol)
    Chem.Kekulize(kekulized, clearAromaticFlags=False)
    atoms = []
    for atom in mol.GetAtoms():
        index = atom.GetIdx()
        point = positions.GetAtomPosition(index)
        atoms.append(
            DrawnAtom(
                x=round(point.x, 4),
                y=round(point.y, 4),
                element=atom.GetSymbol(),
                charge=atom.GetFormalCharge(),
                hydrogens=atom.GetTotalNumHs(),
                isotope=atom.GetIsotope(),
                highlight=index in marks,
                mark=marks.get(index, ""),
            )
        )
    bonds = []
    for bond in kekulized.GetBonds():
        begin, end = bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()
        style = styles.get((begin, end), "")
        if not style and (end, begin) in styles:
            begin, end = end, begin
            style = styles[(begin, end)]
        order = int(bond.GetBondTypeAsDouble())
        both = order > 1 and begin in marks and end in marks
        bonds.append(DrawnBond(begin, end, order or 1, style or "plain", both))
    return Drawing(tuple(atoms), tuple(bonds), laid_out)


def _laid_out(structure: Structure) -> Chem.Mol:
    mol = Chem.Mol(structure.mol)
    rdDepictor.Compute2DCoords(mol)
    Chem.WedgeMolBonds(mol, mol.GetConformer())
    return mol


def _following(
    structure: Structure, drawn: Structure, mapping: Mapping[int, int]
) -> Chem.Mol | None:
    """The structure on another's coordinates; None where these would not show what it is."""
    mol = Chem.Mol(structure.mol)
    if set(mapping.values()) != set(range(mol.GetNumAtoms())):
        return None
    places = drawn.mol.GetConformer()
    conformer = Chem.Conformer(mol.GetNumAtoms())
    for theirs, mine in mapping.items():
        conformer.SetAtomPosition(mine, places.GetAtomPosition(theirs))
    mol.RemoveAllConformers()
    mol.AddConformer(conformer)
    Chem.WedgeMolBonds(mol, mol.GetConformer())
    # Read back what is now drawn: a double bond of the other side's geometry, or wedges that the
    # borrowed coordinates cannot carry, would show another structure than the one meant.
    try:
        seen = from_molblock(Chem.MolToMolBlock(mol))
    except (Unreadable, RuntimeError, ValueError):
        return None
    return mol if seen.smiles == structure.smiles else None
