"""A structure as data to be shown: in its own drawn coordinates where it has any."""

from __future__ import annotations

from collections.abc import Mapping

from rdkit import Chem
from rdkit.Chem import rdDepictor

from dossiercheck.model import Drawing, DrawnAtom, DrawnBond
from dossiercheck.stereo.structure import Structure

_WEDGES = {Chem.BondDir.BEGINWEDGE: "wedge", Chem.BondDir.BEGINDASH: "hash"}


def drawing_of(structure: Structure, marks: Mapping[int, str] | None = None) -> Drawing:
    """The structure with some atoms (0-based) marked by a short text, "" for a bare highlight.

    A structure without coordinates, or with three-dimensional ones, is laid out by the library;
    the drawing says so.
    """
    marks = marks or {}
    mol = structure.mol
    # The writer of hydrogens must not see atoms whose valence nobody stated.
    laid_out = structure.dimension != 2
    styles = {(m.begin, m.end): m.style for m in structure.marks}
    if laid_out:
        mol = Chem.Mol(mol)
        rdDepictor.Compute2DCoords(mol)
        wedged = Chem.Mol(mol)
        Chem.WedgeMolBonds(wedged, wedged.GetConformer())
        styles = {
            (bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()): _WEDGES[bond.GetBondDir()]
            for bond in wedged.GetBonds()
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
