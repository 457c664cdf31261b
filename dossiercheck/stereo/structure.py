"""A molecule as the program holds it: the library's atoms and bonds, with every stereo mark kept.

The library's own clean-up of stereo marks is never run: it deletes centres whose existence
depends on other centres (Sequence Rules 3 to 6, IUPAC 2013 P-92.2) and then labels others wrongly.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property
from typing import Any

from rdkit import Chem
from rdkit.Chem import rdCIPLabeler, rdMolDescriptors, rdqueries

# Bounds the labeller: a polycyclic cage ran past 90 s without a limit. This many take about a
# second, and label every compound of the published suite but one cage (VS009).
LABELLER_ITERATIONS = 3_000_000

_NOTHING = 4294967295  # the library's "no atom here" among controlling atoms
# Labels and marks must survive the way between processes.
Chem.SetDefaultPickleProperties(Chem.PropertyPickleOptions.AllProps)

_ALL_HYDROGENS = Chem.RemoveHsParameters()
_ALL_HYDROGENS.removeDefiningBondStereo = True
_DOUBLE_BONDS = Chem.MolFromSmarts("[!D1]=[!D1]")
_MARKED = rdqueries.HasChiralTagQueryAtom()
_LABELLED = rdqueries.IsotopeGreaterQueryAtom(0)
_AXES = tuple(
    Chem.MolFromSmarts(text)
    for text in ("[#6;!$([CH2])]=[CX2]=[#6;!$([CH2])]", "[a;$(a:[a;X3;H0])]-!@[a;$(a:[a;X3;H0])]")
)
_SHOWN = {Chem.BondStereo.STEREOCIS: 1, Chem.BondStereo.STEREOTRANS: -1}

_TWISTED = (Chem.BondStereo.STEREOATROPCW, Chem.BondStereo.STEREOATROPCCW)


class Unreadable(Exception):
    """A structure that could not be read or is not one molecule; the message says why."""


@dataclass(frozen=True, slots=True)
class Unit:
    """One stereogenic unit. `atoms` are 0-based: one for a centre, two for a double bond.

    `descriptor` is "" where the configuration is not specified; `kind` is "centre" or
    "double bond".
    """

    kind: str
    atoms: tuple[int, ...]
    descriptor: str


@dataclass(frozen=True, slots=True)
class StereoGroup:
    """Centres that are known only relative to each other: `kind` "and" (a racemate or a mixture
    of epimers) or "or" (one of them, unknown which), as in enhanced stereo and rac-/rel-."""

    kind: str
    atoms: frozenset[int]


@dataclass(frozen=True, slots=True)
class Mark:
    """A stereo mark as drawn, atoms 0-based, narrow end first.

    `style`: wedge, hash, wavy, crossed.
    """

    begin: int
    end: int
    style: str


@dataclass(eq=False)
class Structure:
    """A molecule with its marks. Atom numbers everywhere are the source's own, 0-based.

    `dimension` is 0 (no coordinates), 2 or 3; `locants` is a label for each atom where a name
    gave them; `positions` are the source's own numbers of the atoms, 1-based, where they run in
    another order (an InChI); `doubt` says why descriptors cannot be trusted, "" where they can;
    `described` is what `descriptors.described` keeps.
    """

    mol: Chem.Mol
    text: str
    dimension: int = 0
    groups: tuple[StereoGroup, ...] = ()
    marks: tuple[Mark, ...] = ()
    locants: tuple[str, ...] = ()
    positions: tuple[int, ...] = ()
    doubt: str = field(default="", init=False)
    described: dict[tuple[int, ...], Any] | None = field(default=None, init=False)

    @cached_property
    def possible(self) -> tuple[tuple[str, tuple[int, ...], tuple[int, int]], ...]:
        """Units the library holds possible: kind, atoms, and for a double bond one neighbour at
        each end. Some are stereogenic only if others are; `units` and `undefined` decide."""
        found: list[tuple[str, tuple[int, ...], tuple[int, int]]] = []
        for info in Chem.FindPotentialStereo(self.mol, cleanIt=False, flagPossible=True):
            if info.type == Chem.StereoType.Atom_Tetrahedral:
                found.append(("centre", (info.centeredOn,), (-1, -1)))
            elif info.type == Chem.StereoType.Bond_Double:
                bond = self.mol.GetBondWithIdx(info.centeredOn)
                near = list(info.controllingAtoms)
                begin = next((a for a in near[:2] if a != _NOTHING), -1)
                end = next((a for a in near[2:] if a != _NOTHING), -1)
                ends = (bond.GetBeginAtomIdx(), bond.GetEndAtomIdx())
                if min(begin, end) < 0 or _is_cumulated(bond):
                    continue
                if self.mol.GetBondBetweenAtoms(ends[0], begin) is None:
                    begin, end = end, begin
                found.append(("double bond", ends, (begin, end)))
        return tuple(found)

    @cached_property
    def units(self) -> tuple[Unit, ...]:
        """The units whose configuration is specified, with their descriptors."""
        labelled = _label(self.mol)
        if labelled:
            self.doubt = labelled
            return ()
        found = [
            Unit("centre", (atom.GetIdx(),), atom.GetProp("_CIPCode"))
            for atom in self.mol.GetAtomsMatchingQuery(_MARKED)
            if atom.HasProp("_CIPCode")
        ]
        for index in stereo_bonds(self):
            bond = self.mol.GetBondWithIdx(index)
            if bond.HasProp("_CIPCode") and not _is_cumulated(bond):
                ends = (bond.GetBeginAtomIdx(), bond.GetEndAtomIdx())
                found.append(Unit("double bond", ends, bond.GetProp("_CIPCode")))
        return tuple(found)

    @cached_property
    def axes(self) -> tuple[Unit, ...]:
        """Chiral axes between rings that a drawing's wedges configure, as the library labels them;
        they are no units of the concordance."""
        if self.dimension != 2 or not self.marks:
            return ()
        found = []
        _ = self.units  # which labels the bonds as well
        for number in range(self.mol.GetNumBonds()):
            bond = self.mol.GetBondWithIdx(number)
            if bond.GetStereo() in _TWISTED and bond.HasProp("_CIPCode"):
                ends = (bond.GetBeginAtomIdx(), bond.GetEndAtomIdx())
                found.append(Unit("axis", ends, bond.GetProp("_CIPCode")))
        return tuple(found)

    @cached_property
    def undefined(self) -> tuple[Unit, ...]:
        """The units that are stereogenic but carry no configuration.

        A possible unit counts when giving it (and the other bare ones) a configuration earns it
        a descriptor in some combination tried: all alike, then each one inverted.
        """
        specified = {unit.atoms for unit in self.units}
        bare = [
            (kind, atoms, near)
            for kind, atoms, near in self.possible
            if atoms not in specified
            and not self._is_marked(kind, atoms)
            and not is_pyramidal_nitrogen(self, atoms[0])
        ]
        if not bare:
            return ()
        earned: set[tuple[int, ...]] = set()
        for inverted in range(-1, min(len(bare), 24)):
            trial = Chem.Mol(self.mol)
            for number, (kind, atoms, near) in enumerate(bare):
                _set(trial, kind, atoms, near, 1 if number == inverted else -1)
            if _label(trial):
                break
            earned.update(atoms for kind, atoms, _ in bare if _has_label(trial, kind, atoms))
            if len(earned) == len(bare):
                break
        return tuple(
            Unit(kind, atoms, "")
            for kind, atoms, near in bare
            if atoms in earned and not self._is_held(kind, atoms, near, earned)
        )

    def _is_held(
        self,
        kind: str,
        atoms: tuple[int, ...],
        near: tuple[int, int],
        earned: set[tuple[int, ...]],
    ) -> bool:
        """Whether a bridgehead is held by its rings: it earns a descriptor only through another
        bare bridgehead across the bridges, as in quinuclidine, and has no choice of its own."""
        if kind != "centre":
            return False
        atom = self.mol.GetAtomWithIdx(atoms[0])
        if not all(bond.IsInRing() for bond in atom.GetBonds()):
            return False
        if any((other.GetIdx(),) in earned for other in atom.GetNeighbors()):
            return False
        alone = Chem.Mol(self.mol)
        _set(alone, kind, atoms, near, 1)
        return not _label(alone) and not _has_label(alone, kind, atoms)

    @cached_property
    def _canonical(self) -> tuple[str, tuple[int, ...]]:
        smiles = str(Chem.MolToSmiles(self.mol))
        written = self.mol.GetProp("_smilesAtomOutputOrder")
        return smiles, tuple(int(atom) for atom in written.strip("[],").split(",") if atom)

    @property
    def smiles(self) -> str:
        """Canonical isomeric SMILES; marks that mean nothing are not in it."""
        return self._canonical[0]

    @property
    def order(self) -> tuple[int, ...]:
        """Atoms in the order in which `smiles` writes them."""
        return self._canonical[1]

    @cached_property
    def flat(self) -> str:
        """Canonical SMILES without stereo, isotopes kept: equal where the constitution is the
        same and labelled in the same places."""
        # A hydrogen that is drawn to show the side of an =N–H is a hydrogen like any other.
        bare = Chem.RemoveHs(self.mol, _ALL_HYDROGENS, sanitize=False)
        labelled = bool(bare.GetAtomsMatchingQuery(_LABELLED))
        if labelled:
            Chem.RemoveStereochemistry(bare)
        return str(Chem.MolToSmiles(bare, isomericSmiles=labelled))

    @cached_property
    def hill(self) -> str:
        """The molecular formula as text, isotopes apart, the charge last."""
        return str(rdMolDescriptors.CalcMolFormula(self.mol, True, True))

    @cached_property
    def axis_atoms(self) -> frozenset[int]:
        """Atoms of what may be a chiral axis, which the program does not judge: an allene, or
        a bond between aromatic rings substituted beside it (IUPAC 2013, P-92.1.2.2)."""
        found = (match for axis in _AXES for match in self.mol.GetSubstructMatches(axis))
        return frozenset(atom for match in found for atom in match)

    def components(self) -> list[tuple[int, ...]]:
        """The atoms of each connected part."""
        return [tuple(part) for part in Chem.GetMolFrags(self.mol)]

    @property
    def kind(self) -> str:
        """What the marks say of the whole: achiral, silent, absolute, relative, racemic.

        A molecule is only as absolute as its groups let it be; no specified centre is "silent"
        where there are undefined ones.
        """
        centres = {unit.atoms[0] for unit in self.units if unit.kind == "centre"}
        grouped: set[int] = set()
        kinds = set()
        for group in self.groups:
            if centres & group.atoms:
                kinds.add(group.kind)
                grouped |= group.atoms
        if not centres:
            return "silent" if any(u.kind == "centre" for u in self.undefined) else "achiral"
        if centres - grouped:
            return "absolute" if not kinds else "partly " + _GROUP_KIND[min(kinds)]
        return _GROUP_KIND["and" if "and" in kinds else "or"]

    def _is_marked(self, kind: str, atoms: tuple[int, ...]) -> bool:
        if kind == "centre":
            tag = self.mol.GetAtomWithIdx(atoms[0]).GetChiralTag()
            return bool(tag != Chem.ChiralType.CHI_UNSPECIFIED)
        return self.mol.GetBondBetweenAtoms(*atoms).GetStereo() in _SHOWN


def _is_cumulated(bond: Chem.Bond) -> bool:
    """One of several double bonds in a row: the unit is then the row's axis or plane (IUPAC 2013,
    P-93.4.2), never one bond of it."""
    return any(
        atom.GetDegree() == 2 and all(b.GetBondType() == _DOUBLE for b in atom.GetBonds())
        for atom in (bond.GetBeginAtom(), bond.GetEndAtom())
    )


_DOUBLE = Chem.BondType.DOUBLE
_GROUP_KIND = {"and": "racemic", "or": "relative"}


def marked_atoms(structure: Structure) -> list[int]:
    """The atoms with a chirality mark, meaningful or not."""
    return [atom.GetIdx() for atom in structure.mol.GetAtomsMatchingQuery(_MARKED)]


def stereo_bonds(structure: Structure) -> list[int]:
    """The double bonds with a geometry."""
    if not structure.dimension and not {"/", "\\"} & set(structure.text):
        return []
    bonds = (
        structure.mol.GetBondBetweenAtoms(*ends)
        for ends in structure.mol.GetSubstructMatches(_DOUBLE_BONDS)
    )
    return [bond.GetIdx() for bond in bonds if bond.GetStereo() in _SHOWN]


def is_pyramidal_nitrogen(structure: Structure, index: int) -> bool:
    """A neutral nitrogen with three ligands: its configuration is nowhere drawn or stated."""
    atom = structure.mol.GetAtomWithIdx(index)
    return (
        atom.GetSymbol() == "N"
        and atom.GetFormalCharge() == 0
        and atom.GetDegree() + atom.GetNumImplicitHs() == 3
        and not any(bond.GetBondTypeAsDouble() > 1 for bond in atom.GetBonds())
    )


def geometry(mol: Chem.Mol, atoms: tuple[int, ...]) -> tuple[int, int, int] | None:
    """Neighbour at the first atom, neighbour at the second, +1 cis or -1 trans; None if bare."""
    bond = mol.GetBondBetweenAtoms(*atoms)
    sign = _SHOWN.get(bond.GetStereo())
    if sign is None:
        return None
    near = list(bond.GetStereoAtoms())
    if mol.GetBondBetweenAtoms(atoms[0], near[0]) is None:
        near.reverse()
    return near[0], near[1], sign


def set_geometry(mol: Chem.Mol, atoms: tuple[int, ...], near: tuple[int, int], sign: int) -> None:
    """Give a double bond its configuration: +1 cis, -1 trans, of the two neighbours named."""
    bond = mol.GetBondBetweenAtoms(*atoms)
    if bond.GetBeginAtomIdx() != atoms[0]:
        near = (near[1], near[0])
    bond.SetStereoAtoms(*near)
    bond.SetStereo(Chem.BondStereo.STEREOCIS if sign > 0 else Chem.BondStereo.STEREOTRANS)


def invert(mol: Chem.Mol, unit: Unit) -> None:
    """Give one specified unit the opposite configuration, in place."""
    if unit.kind == "centre":
        mol.GetAtomWithIdx(unit.atoms[0]).InvertChirality()
        return
    shown = geometry(mol, unit.atoms)
    if shown:
        set_geometry(mol, unit.atoms, shown[:2], -shown[2])


def _set(
    mol: Chem.Mol, kind: str, atoms: tuple[int, ...], near: tuple[int, int], sign: int
) -> None:
    if kind == "double bond":
        set_geometry(mol, atoms, near, sign)
        return
    tag = Chem.ChiralType.CHI_TETRAHEDRAL_CCW if sign > 0 else Chem.ChiralType.CHI_TETRAHEDRAL_CW
    mol.GetAtomWithIdx(atoms[0]).SetChiralTag(tag)


def _has_label(mol: Chem.Mol, kind: str, atoms: tuple[int, ...]) -> bool:
    if kind == "centre":
        return bool(mol.GetAtomWithIdx(atoms[0]).HasProp("_CIPCode"))
    return bool(mol.GetBondBetweenAtoms(*atoms).HasProp("_CIPCode"))


def _label(mol: Chem.Mol) -> str:
    """Label in place; the reason where the labeller gave up, "" where it did not."""
    try:
        rdCIPLabeler.AssignCIPLabels(mol, maxRecursiveIterations=LABELLER_ITERATIONS)
    except (RuntimeError, ValueError) as error:
        return f"the ranking was given up: {error}".splitlines()[0]
    return ""
