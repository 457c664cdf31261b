"""Whether two different constitutions have one molecular formula."""

from __future__ import annotations

from rdkit import Chem
from rdkit.Chem import rdMolDescriptors
from rdkit.Chem.MolStandardize import rdMolStandardize

from dossiercheck.stereo import constitution as con
from dossiercheck.stereo.perception import quiet
from dossiercheck.stereo.structure import Structure


def are_isomers(one: Structure, two: Structure, found: con.Constitution) -> tuple[bool | None, str]:
    """Whether two structures that `found` calls different are constitutional isomers, None where
    that cannot be told; and a note. Salts by their main components, charges undone."""
    if found.detail.startswith("isotopes"):
        return False, found.detail
    with quiet():
        parents = [Chem.MolFromSmiles(con.parent(structure)) for structure in (one, two)]
        if None in parents:
            return None, "the main components cannot be told apart"
        if _without_isotopes(parents[0]) == _without_isotopes(parents[1]):
            return None, "they differ in where the isotopes stand"
        formulas = [rdMolDescriptors.CalcMolFormula(mol, True, True) for mol in parents]
        if formulas[0] != formulas[1]:
            return False, found.detail
        drawn = {Chem.MolToSmiles(rdMolStandardize.Normalize(mol)) for mol in parents}
        if len(drawn) == 1:
            return None, "one constitution, drawn with other bonds or charges"
        skeletons = [_connections(mol) for mol in parents]
    notes = [found.detail]
    if len(one.components()) > 1 or len(two.components()) > 1:
        notes = ["the main components are compared"]
    if skeletons[0] and skeletons[0] == skeletons[1]:
        notes.append("they have one skeleton, with hydrogens and multiple bonds elsewhere")
    return True, "; ".join(notes)


def _without_isotopes(mol: Chem.Mol) -> str:
    bare = Chem.Mol(mol)
    for atom in bare.GetAtoms():
        atom.SetIsotope(0)
    return str(Chem.MolToSmiles(bare))


def _connections(mol: Chem.Mol) -> str:
    """The connection layer of the standard InChI, "" for none."""
    parts = str(Chem.MolToInchi(mol)).split("/")
    return parts[2] if len(parts) > 2 and parts[2].startswith("c") else ""
