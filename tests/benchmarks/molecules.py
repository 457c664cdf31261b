"""Structures for the benchmark, with the general-purpose library only, nothing of the program's.

A *unit* is a tuple of 1-based atom positions: one atom for a centre, two (ascending) for a
double bond.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping
from dataclasses import dataclass

from rdkit import Chem
from rdkit.Chem import rdCIPLabeler, rdDepictor

from tests.benchmarks.dictionary import Component

Unit = tuple[int, ...]
_ORDERS = {1: Chem.BondType.SINGLE, 2: Chem.BondType.DOUBLE, 3: Chem.BondType.TRIPLE}
# Without a limit a polycyclic cage runs for minutes; a molecule past it is left out and counted.
_LABELLER_STEPS = 200_000


def from_coordinates(component: Component) -> Chem.Mol:
    """The component with all its hydrogens, its configuration taken from the ideal coordinates.

    The marks are not cleaned up: default perception deletes centres that depend on other
    centres. Raises ValueError or RuntimeError where the library cannot make a molecule of it.
    """
    mol = Chem.RWMol()
    for element, charge in zip(component.elements, component.charges, strict=True):
        atom = Chem.Atom(element)
        atom.SetFormalCharge(charge)
        atom.SetNoImplicit(True)
        mol.AddAtom(atom)
    for begin, end, order in component.bonds:
        mol.AddBond(begin, end, _ORDERS[order])
    conformer = Chem.Conformer(mol.GetNumAtoms())
    conformer.SetPositions(component.coordinates)
    conformer.Set3D(True)
    mol.AddConformer(conformer)
    Chem.SanitizeMol(mol)
    Chem.AssignAtomChiralTagsFromStructure(mol)
    Chem.SetDoubleBondNeighborDirections(mol, mol.GetConformer())
    Chem.SetBondStereoFromDirections(mol)
    return mol.GetMol()


def without_hydrogens(mol: Chem.Mol, *, keep_imine: bool) -> Chem.Mol:
    """Hydrogens removed, but for those that alone show the geometry of a C=N–H if asked."""
    parameters = Chem.RemoveHsParameters()
    parameters.removeDefiningBondStereo = not keep_imine
    parameters.showWarnings = False
    return Chem.RemoveHs(mol, parameters)


def labels(mol: Chem.Mol) -> dict[Unit, str]:
    """The CIP descriptor of every unit that has one. Raises RuntimeError past the step limit."""
    for thing in (*mol.GetAtoms(), *mol.GetBonds()):
        thing.ClearProp("_CIPCode")
    rdCIPLabeler.AssignCIPLabels(mol, maxRecursiveIterations=_LABELLER_STEPS)
    found = {
        (atom.GetIdx() + 1,): atom.GetProp("_CIPCode")
        for atom in mol.GetAtoms()
        if atom.HasProp("_CIPCode")
    }
    for bond in mol.GetBonds():
        if bond.HasProp("_CIPCode"):
            found[bond_unit(bond)] = bond.GetProp("_CIPCode")
    return found


def bond_unit(bond: Chem.Bond) -> Unit:
    """The unit of a double bond."""
    return tuple(sorted((bond.GetBeginAtomIdx() + 1, bond.GetEndAtomIdx() + 1)))


def bears_imine_hydrogen(mol: Chem.Mol, unit: Unit) -> bool:
    """True for a double bond to a nitrogen whose geometry only a hydrogen on it shows."""
    return len(unit) == 2 and any(
        atom.GetSymbol() == "N" and any(n.GetSymbol() == "H" for n in atom.GetNeighbors())
        for atom in (mol.GetAtomWithIdx(position - 1) for position in unit)
    )


def draw(mol: Chem.Mol, units: Iterable[Unit]) -> str:
    """A V2000 molfile in two dimensions with wedges at the given units only, flagged absolute."""
    kept = set(units)
    drawn = Chem.Mol(mol)
    for atom in drawn.GetAtoms():
        if (atom.GetIdx() + 1,) not in kept:
            atom.SetChiralTag(Chem.ChiralType.CHI_UNSPECIFIED)
    for bond in drawn.GetBonds():
        if bond.GetStereo() != Chem.BondStereo.STEREONONE and bond_unit(bond) not in kept:
            bond.SetStereo(Chem.BondStereo.STEREONONE)
    rdDepictor.Compute2DCoords(drawn)
    drawn.SetIntProp("_MolFileChiralFlag", 1)
    return Chem.MolToMolBlock(drawn)


def read_molblock(text: str) -> Chem.Mol | None:
    """A drawn structure with its stereo marks as drawn, none cleaned away."""
    mol = Chem.MolFromMolBlock(text, sanitize=False, removeHs=False)
    if mol is None:
        return None
    try:
        Chem.SanitizeMol(mol)
    except ValueError:
        return None
    Chem.AssignChiralTypesFromBondDirs(mol)
    # The first of the two only marks the directions of the neighbouring bonds.
    Chem.DetectBondStereochemistry(mol)
    Chem.SetBondStereoFromDirections(mol)
    return mol


def read_smiles(text: str) -> Chem.Mol | None:
    """A line notation with its stereo marks as written, none cleaned away."""
    parameters = Chem.SmilesParserParams()
    parameters.sanitize = False
    parameters.removeHs = False
    mol = Chem.MolFromSmiles(text, parameters)
    if mol is None:
        return None
    try:
        Chem.SanitizeMol(mol)
    except ValueError:
        return None
    Chem.SetBondStereoFromDirections(mol)
    return mol


@dataclass(frozen=True, slots=True)
class Identity:
    """What a structure is, three ways: with hydrogens fixed where they are drawn, with mobile
    hydrogens (standard InChI), and as canonical isomeric SMILES. "" where one failed."""

    fixed: str
    standard: str
    smiles: str
    formula: str

    def same_as(self, other: Identity) -> bool | None:
        """Whether both are the same stereoisomer; None where the two canonical forms disagree."""
        by_inchi = self.fixed == other.fixed if self.fixed and other.fixed else None
        by_smiles = self.smiles == other.smiles if self.smiles and other.smiles else None
        return by_inchi if by_inchi == by_smiles else None


def identity(mol: Chem.Mol | None) -> Identity | None:
    """The canonical forms of a structure; None for no structure."""
    if mol is None:
        return None
    plain = Chem.Mol(mol)
    plain.RemoveAllConformers()
    # Written and read again: the writer's text for one molecule is not always the canonical one.
    text = Chem.MolToSmiles(without_hydrogens(plain, keep_imine=True))
    again = Chem.MolFromSmiles(text)
    return Identity(
        fixed=form(plain, "fixed"),
        standard=form(plain, "standard"),
        smiles=Chem.MolToSmiles(again) if again is not None else "",
        formula=neutral_formula(mol),
    )


def neutral_formula(mol: Chem.Mol) -> str:
    """Element counts as text, hydrogens less the charge: the same for all protonation states."""
    counts = Counter(atom.GetSymbol() for atom in mol.GetAtoms())
    counts["H"] += sum(atom.GetTotalNumHs() for atom in mol.GetAtoms())
    counts["H"] -= Chem.GetFormalCharge(mol)
    return " ".join(f"{element}{count}" for element, count in sorted(counts.items()) if count)


def form(mol: Chem.Mol, name: str) -> str:
    """One of the canonical forms alone, by its name in `Identity`."""
    if name == "smiles":
        found = identity(mol)
        return found.smiles if found else ""
    plain = Chem.Mol(mol)
    plain.RemoveAllConformers()
    options = "/FixedH" if name == "fixed" else ""
    return Chem.MolToInchi(plain, options=options, logLevel=None) or ""


def standard_inchi(mol: Chem.Mol) -> str:
    """The standard InChI, "" where it fails."""
    return form(mol, "standard")


def with_units(mol: Chem.Mol, flip: Iterable[Unit] = (), unset: Iterable[Unit] = ()) -> Chem.Mol:
    """A copy with some units inverted and some made undefined."""
    changed = Chem.RWMol(mol)
    changed.RemoveAllConformers()
    for unit in flip:
        if len(unit) == 1:
            changed.GetAtomWithIdx(unit[0] - 1).InvertChirality()
        else:
            bond = changed.GetBondBetweenAtoms(unit[0] - 1, unit[1] - 1)
            bond.SetStereo(_OTHER_SIDE[bond.GetStereo()])
    for unit in unset:
        if len(unit) == 1:
            atom = changed.GetAtomWithIdx(unit[0] - 1)
            atom.SetChiralTag(Chem.ChiralType.CHI_UNSPECIFIED)
        else:
            bond = changed.GetBondBetweenAtoms(unit[0] - 1, unit[1] - 1)
            bond.SetStereo(Chem.BondStereo.STEREONONE)
    return changed.GetMol()


_OTHER_SIDE: Mapping[Chem.BondStereo, Chem.BondStereo] = {
    Chem.BondStereo.STEREOE: Chem.BondStereo.STEREOZ,
    Chem.BondStereo.STEREOZ: Chem.BondStereo.STEREOE,
    Chem.BondStereo.STEREOCIS: Chem.BondStereo.STEREOTRANS,
    Chem.BondStereo.STEREOTRANS: Chem.BondStereo.STEREOCIS,
}


def mirror_image(mol: Chem.Mol) -> Chem.Mol:
    """The enantiomer: every tetrahedral mark inverted."""
    marked = [
        (atom.GetIdx() + 1,)
        for atom in mol.GetAtoms()
        if atom.GetChiralTag() != Chem.ChiralType.CHI_UNSPECIFIED
    ]
    return with_units(mol, flip=marked)
