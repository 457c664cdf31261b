"""Rewritings of a molecule that must, or must not, change its descriptors.

The rewritings of a connection table are made on its text, without the structure library, so that
nothing the library believes about the molecule can leak into them. Only what needs a layout or a
conformation (`laid_out`, `in_space`) asks the library.

The mirror image exchanges R and S, M and P, and e and z; r, s, m and p stay, and so do E and Z
(IUPAC 2013, P-92.6). A rotation, a reflection together with an exchange of wedge and hash, another
order of the atoms, another layout and a conformation change nothing. Two ligands exchanged at one
centre invert it; exchanged again they restore it (common practice).
"""

from __future__ import annotations

import math
import re
from collections.abc import Callable, Mapping, Sequence
from dataclasses import replace

from rdkit import Chem
from rdkit.Chem import AllChem, rdDepictor

from dossiercheck.stereo.perception import from_smiles
from tests.property.table import HASH, WEDGE, Bond, Table, branch, neighbours, read, write

_OTHER_STYLE = {WEDGE: HASH, HASH: WEDGE}
_IN_MIRROR = {"R": "S", "S": "R", "M": "P", "P": "M", "e": "z", "z": "e"}
_NUMBERED = re.compile(r"^M  (CHG|ISO|RAD)")


def in_mirror(letter: str) -> str:
    """The letter that the same unit has in the mirror image."""
    return _IN_MIRROR.get(letter, letter)


# --- rewritings of a notation ---------------------------------------------------------------


def mirror_notation(smiles: str) -> str:
    """The enantiomer: every chirality mark turned round, of centres and of allenes alike."""
    if re.search(r"@(TH|AL|SP|TB|OH)\d", smiles):
        raise ValueError("a chirality class that is not written @ or @@")
    return re.sub(r"@@?", lambda mark: "@" if mark[0] == "@@" else "@@", smiles)


def invert_notation(smiles: str, number: int) -> str:
    """The epimer: the mark of one marked atom turned round, `number` counting the marks from 0."""
    found = list(re.finditer(r"@@?", smiles))[number]
    other = "@" if found[0] == "@@" else "@@"
    return smiles[: found.start()] + other + smiles[found.end() :]


# --- rewritings of a connection table -------------------------------------------------------


def mirror_drawing(text: str) -> str:
    """The enantiomer of a drawing: the same picture with wedge and hash exchanged."""
    return write(_restyled(read(text)))


def mirror_space(text: str) -> str:
    """The enantiomer of three-dimensional coordinates: x negated."""
    return write(_moved(read(text), lambda x, y: (-x, y)))


def rotated(text: str, degrees: float) -> str:
    """The same molecule, turned in the plane of the paper about the origin."""
    c, s = math.cos(math.radians(degrees)), math.sin(math.radians(degrees))
    return write(_moved(read(text), lambda x, y: (c * x - s * y, s * x + c * y)))


def reflected(text: str) -> str:
    """The same molecule seen from behind the paper: x negated, wedge and hash exchanged."""
    return write(_restyled(_moved(read(text), lambda x, y: (-x, y))))


def renumbered(text: str, order: Sequence[int], bonds: Sequence[int] = ()) -> str:
    """The same molecule with its atoms in another order, and its bonds too if asked.

    `order[k]` is the 0-based atom of `text` that becomes atom k; `bonds` likewise.
    """
    table = read(text)
    if sorted(order) != list(range(len(table.atoms))):
        raise ValueError("not a permutation of the atoms")
    place = {old: new for new, old in enumerate(order)}
    moved = [replace(b, begin=place[b.begin], end=place[b.end]) for b in table.bonds]
    return write(
        replace(
            table,
            atoms=tuple(table.atoms[old] for old in order),
            bonds=tuple(moved[old] for old in bonds or range(len(moved))),
            properties=tuple(_renumbered_line(line, place) for line in table.properties),
        )
    )


def exchangeable(text: str, centre: int) -> list[tuple[int, int]]:
    """Pairs of ligands of a centre whose branches are not tied to each other or to a third."""
    table = read(text)
    near = neighbours(table)
    ligands = near[centre]
    loose = [
        ligand for ligand in ligands if set(ligands) & branch(near, centre, ligand) == {ligand}
    ]
    return [(a, b) for i, a in enumerate(loose) for b in loose[i + 1 :]]


def exchanged(text: str, centre: int, first: int, second: int) -> str:
    """A drawing in which two ligands of a centre have changed places, with all that hangs on them.

    Each branch is turned in the plane about the centre, which leaves every unit inside it as it
    was; a wedge whose narrow end is the centre belongs to the place and not to the ligand.
    """
    table = read(text)
    if (first, second) not in exchangeable(text, centre):
        raise ValueError("the two ligands are not branches of their own")
    near = neighbours(table)
    hub = table.atoms[centre]

    def angle(atom: int) -> float:
        return math.atan2(table.atoms[atom].y - hub.y, table.atoms[atom].x - hub.x)

    turn = angle(second) - angle(first)
    atoms = list(table.atoms)
    for ligand, by in ((first, turn), (second, -turn)):
        c, s = math.cos(by), math.sin(by)
        for atom in branch(near, centre, ligand):
            x, y = atoms[atom].x - hub.x, atoms[atom].y - hub.y
            atoms[atom] = replace(atoms[atom], x=hub.x + c * x - s * y, y=hub.y + s * x + c * y)
    styles = {b.end: b.style for b in table.bonds if b.begin == centre}
    other = {first: second, second: first}
    # Both bonds are turned to begin at the centre, unless a mark there belongs to the far end.
    bonds = []
    for bond in table.bonds:
        pair = {bond.begin, bond.end}
        ligand = next((x for x in (first, second) if pair == {centre, x}), None)
        if ligand is not None and (bond.begin == centre or not bond.style):
            bond = Bond(centre, ligand, bond.order, styles.get(other[ligand], 0))
        elif ligand is not None and styles.get(other[ligand]):
            raise ValueError("one bond would need a mark at both ends")
        bonds.append(bond)
    return write(replace(table, atoms=tuple(atoms), bonds=tuple(bonds)))


# --- other forms, made by the structure library ---------------------------------------------


class NotCarried(ValueError):
    """The library cannot carry this molecule into the form without loss; the message says why."""


def laid_out(smiles: str, seed: int = 0) -> str:
    """A V2000 drawing, its wedges set for this layout; another seed, another layout.

    Double bonds of which the notation says nothing are crossed. Atoms keep their numbers.
    """
    mol = _molecule(smiles)
    rdDepictor.Compute2DCoords(
        mol,
        canonOrient=seed == 0,
        nFlipsPerSample=3 if seed else 0,
        nSample=5 if seed else 0,
        sampleSeed=seed,
        permuteDeg4Nodes=bool(seed),
    )
    return _v2000(mol)


def in_space(smiles: str, seed: int = 1) -> str:
    """Three-dimensional coordinates of one conformer with all hydrogens, the added ones last.

    Coordinates show every unit, also those of which the notation says nothing: compare the
    others only.
    """
    mol = Chem.AddHs(_molecule(smiles))
    for anywhere in (False, True):
        if not AllChem.EmbedMolecule(
            mol, randomSeed=seed, maxAttempts=20, useRandomCoords=anywhere
        ):
            break
    else:
        raise NotCarried("no coordinates were found")
    return _v2000(mol)


def _v2000(mol: Chem.Mol) -> str:
    text = str(Chem.MolToMolBlock(mol))
    if "V3000" in text:
        raise NotCarried("a bond that a V2000 table cannot hold")
    return text


def _molecule(smiles: str) -> Chem.Mol:
    structure = from_smiles(smiles)
    mol = Chem.Mol(structure.mol)
    for atom in mol.GetAtoms():
        lone_pair = (
            atom.GetChiralTag() != Chem.ChiralType.CHI_UNSPECIFIED
            and atom.GetDegree() + atom.GetTotalNumHs() == 3
        )
        written_first = all(n.GetIdx() > atom.GetIdx() for n in atom.GetNeighbors())
        if lone_pair and (atom.IsInRing() or written_first):
            raise NotCarried("the library may read a mark beside a lone pair the wrong way round")
    for kind, atoms, _ in structure.possible:
        if kind == "double bond":
            bond = mol.GetBondBetweenAtoms(*atoms)
            if bond.GetStereo() == Chem.BondStereo.STEREONONE:
                bond.SetStereo(Chem.BondStereo.STEREOANY)
    return mol


# --- helpers --------------------------------------------------------------------------------


def _moved(table: Table, to: Callable[[float, float], tuple[float, float]]) -> Table:
    places = ((atom, to(atom.x, atom.y)) for atom in table.atoms)
    return replace(table, atoms=tuple(replace(atom, x=x, y=y) for atom, (x, y) in places))


def _restyled(table: Table) -> Table:
    bonds = (replace(b, style=_OTHER_STYLE.get(b.style, b.style)) for b in table.bonds)
    return replace(table, bonds=tuple(bonds))


def _renumbered_line(line: str, place: Mapping[int, int]) -> str:
    """An M line with its atoms renumbered. Raises ValueError for one this does not know."""
    if not _NUMBERED.match(line):
        raise ValueError(f"a property line that is not understood: {line[:6]}")
    values = line[9:].split()
    pairs = zip(values[::2], values[1::2], strict=True)
    return line[:9] + "".join(
        f"{place[int(atom) - 1] + 1:4}{int(value):4}" for atom, value in pairs
    )
