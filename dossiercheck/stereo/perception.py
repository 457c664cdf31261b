"""Text to structure: molfile, SMILES, InChI, and a name's SMILES, without loss of stereo marks."""

from __future__ import annotations

import logging
import re
from collections.abc import Iterable, Iterator, Sequence
from contextlib import contextmanager

from rdkit import Chem, rdBase
from rdkit.Chem import rdqueries

from dossiercheck.stereo.cip.linear import written
from dossiercheck.stereo.cip.molecule import LONE_PAIR
from dossiercheck.stereo.cip.units import parity
from dossiercheck.stereo.structure import (
    Mark,
    StereoGroup,
    Structure,
    Unreadable,
    set_geometry,
)

_SMILES = Chem.SmilesParserParams()
_SMILES.sanitize = False
_SMILES.removeHs = False
_SMILES.parseName = False

_GROUPS = {
    Chem.StereoGroupType.STEREO_AND: "and",
    Chem.StereoGroupType.STEREO_OR: "or",
}
_V2000_STYLES = {1: "wedge", 6: "hash", 4: "wavy", 3: "crossed"}
_V3000_STYLES = {"1": "wedge", "3": "hash", "2": "wavy"}

# S-groups that repeat or vary (CTFile formats, "Sgroup type"); the others only group or abbreviate.
_REPEATING = frozenset(["SRU", "MON", "MER", "COP", "CRO", "MOD", "GRA", "ANY", "MIX", "FOR"])
_MARKED = rdqueries.HasChiralTagQueryAtom()
_LEFT, _RIGHT = Chem.ChiralType.CHI_TETRAHEDRAL_CCW, Chem.ChiralType.CHI_TETRAHEDRAL_CW
_DUMMY = rdqueries.AtomNumEqualsQueryAtom(0)
# A bond line of order 0 (none that the format knows) or 4 (aromatic, which needs a look).
_ODD_BOND = re.compile(r"^[ \d]{6}  [04](?!.*V[23]000)|^M  V30 \d+ [04] \d+ \d+", re.MULTILINE)
_STAMP = re.compile(r"^\[\d\d:\d\d:\d\d\]\s*")

# Below this sine of the angle between substituent and double bond, the drawing does not say on
# which side the substituent stands (about 6 degrees).
_LEAST_SINE = 0.1
_TETRAHEDRAL = (
    Chem.ChiralType.CHI_UNSPECIFIED,
    Chem.ChiralType.CHI_TETRAHEDRAL_CW,
    Chem.ChiralType.CHI_TETRAHEDRAL_CCW,
)


class _Collector(logging.Handler):
    def __init__(self) -> None:
        super().__init__()
        self.lines: list[str] = []

    def emit(self, record: logging.LogRecord) -> None:
        self.lines.append(record.getMessage())


rdBase.LogToPythonLogger()
_LOGGER = logging.getLogger("rdkit")
_LOGGER.propagate = False
_COLLECTOR = _Collector()
_LOGGER.handlers = [_COLLECTOR]


@contextmanager
def _complaints() -> Iterator[list[str]]:
    """What the library says while it reads; it says it to a log and not in an exception."""
    _COLLECTOR.lines.clear()
    yield _COLLECTOR.lines
    _COLLECTOR.lines.clear()


def from_molblock(text: str) -> Structure:
    """A structure from one molfile (V2000 or V3000), drawn or with 3D coordinates.

    Raises `Unreadable` where the connection table is damaged, a valence is impossible, or the
    table stands for more than one molecule (query atoms, R groups, polymers).
    """
    with _complaints() as said:
        try:
            mol = Chem.MolFromMolBlock(text, sanitize=False, removeHs=False, strictParsing=True)
        except RuntimeError as error:
            raise Unreadable(_sentence([str(error)])) from error
        if mol is None:
            raise Unreadable(_sentence(said))
    if mol.GetNumAtoms() == 0:
        raise Unreadable("the connection table has no atoms")
    _refuse_generic(mol, text)
    conformer = mol.GetConformer()
    flat = not conformer.Is3D()
    _sanitize(mol)
    if _ODD_BOND.search(text):
        _refuse_odd_bonds(mol)
    if flat:
        Chem.AssignChiralTypesFromBondDirs(mol)
    else:
        Chem.AssignAtomChiralTagsFromStructure(mol)
        _only_tetrahedral(mol)
    marks = tuple(_marks(text))
    structure = Structure(
        mol,
        text,
        dimension=2 if flat else 3,
        groups=tuple(_groups(mol)) if "MDLV30/STE" in text else (),
        marks=marks,
    )
    vague = {frozenset((m.begin, m.end)) for m in marks if m.style == "crossed"}
    wavy = {m.begin for m in marks if m.style == "wavy"}
    for kind, atoms, near in structure.possible:
        if kind == "double bond" and frozenset(atoms) not in vague and not wavy & set(atoms):
            sign = _side(conformer, atoms, near)
            if sign:
                set_geometry(mol, atoms, near, sign)
    return structure


def _only_tetrahedral(mol: Chem.Mol) -> None:
    """Take off the marks that the library gives to octahedra and the like, equal ligands or not:
    PF6⁻ has no configuration."""
    for atom in mol.GetAtoms():
        if atom.GetChiralTag() not in _TETRAHEDRAL:
            atom.SetChiralTag(Chem.ChiralType.CHI_UNSPECIFIED)


def from_smiles(
    text: str, groups: Iterable[StereoGroup] = (), locants: Sequence[str] = ()
) -> Structure:
    """A structure from SMILES (OpenSMILES, with the extension block for enhanced stereo).

    `groups` and `locants` come from a name's parse. Raises `Unreadable`.
    """
    if "\n" in text.strip():
        raise Unreadable("more than one line")
    with _complaints() as said:
        try:
            mol = Chem.MolFromSmiles(text, _SMILES)
        except RuntimeError as error:
            raise Unreadable(_sentence([str(error)])) from error
        if mol is None or mol.GetNumAtoms() == 0:
            raise Unreadable(_sentence(said))
    _refuse_generic(mol, text)
    _sanitize(mol)
    if ":" in text:
        _refuse_odd_bonds(mol)
    Chem.SetBondStereoFromDirections(mol)
    if "@" in text:
        _seat_lone_pairs(mol, text)
    own = tuple(_groups(mol)) if "|" in text else ()
    return Structure(mol, text, groups=(*own, *groups), locants=tuple(locants))


def from_inchi(text: str) -> Structure:
    """A structure from an InChI. Raises `Unreadable`.

    Serves the alignment only: whether two InChI agree is decided on the strings themselves.
    """
    with _complaints() as said:
        mol = Chem.MolFromInchi(text)
        if mol is None or mol.GetNumAtoms() == 0:
            raise Unreadable(_sentence(said))
    smiles = Chem.MolToSmiles(mol)
    written = mol.GetProp("_smilesAtomOutputOrder").strip("[],").split(",")
    structure = from_smiles(smiles)
    structure.positions = tuple(int(atom) + 1 for atom in written if atom)
    return structure


@contextmanager
def quiet() -> Iterator[None]:
    """Keep the library's remarks off the screen while it computes."""
    with _complaints():
        yield


def _sanitize(mol: Chem.Mol) -> None:
    with _complaints():
        try:
            Chem.SanitizeMol(mol)
        except (ValueError, RuntimeError) as error:
            raise Unreadable(_sentence([str(error)])) from error


def _sentence(said: list[str]) -> str:
    """The library's complaint as one short line, without its time stamps."""
    stamped = [line for line in said if _STAMP.match(line)]
    for line in (*stamped, *said):
        plain = _STAMP.sub("", line).strip()
        if plain and plain not in ("ERROR:", "****"):
            return plain.splitlines()[0].rstrip(".")
    return "the structure could not be parsed"


def _seat_lone_pairs(mol: Chem.Mol, text: str) -> None:
    """Read anew the marks of centres with three ligands and a lone pair.

    The library turns some of them round (a centre that opens one ring closure). One that is
    written first is left as it is: whether the lone pair then comes first or last is not settled
    by the OpenSMILES specification, and the two computations differ on it.
    """
    centres = [
        atom
        for atom in mol.GetAtomsMatchingQuery(_MARKED)
        if atom.GetDegree() == 3 and not atom.GetTotalNumHs()
    ]
    if not centres:
        return
    found = written(text)
    for atom in centres:
        around = found.near[atom.GetIdx()]
        if len(around) == 3 and around[0] < atom.GetIdx():
            sense = found.sense.get(atom.GetIdx(), 0)
            order = [around[0], LONE_PAIR, *around[1:]]
            own = [*(other.GetIdx() for other in atom.GetNeighbors()), LONE_PAIR]
            if sense and set(order) == set(own):
                left = sense * parity(own, order) > 0
                atom.SetChiralTag(_LEFT if left else _RIGHT)


def _refuse_generic(mol: Chem.Mol, text: str) -> None:
    """Refuse what stands for more than one molecule."""
    if "M  RGP" in text or " R# " in text or ("M  V30 " in text and " RGROUPS=" in text):
        raise Unreadable("an R group: the drawing stands for more than one molecule")
    grouped = "M  STY" in text or "SGROUP" in text or "Sg:" in text
    for group in Chem.GetMolSubstanceGroups(mol) if grouped else ():
        if group.HasProp("TYPE") and group.GetProp("TYPE") in _REPEATING:
            raise Unreadable("a polymer bracket: the drawing stands for more than one molecule")
    if mol.HasQuery() or mol.GetAtomsMatchingQuery(_DUMMY):
        raise Unreadable(
            "a query atom, query bond or open valence: it stands for more than one molecule"
        )


def _refuse_odd_bonds(mol: Chem.Mol) -> None:
    """Refuse bonds that the library passes on although they have no sound order."""
    for bond in mol.GetBonds():
        if bond.GetBondType() == Chem.BondType.AROMATIC and not bond.GetBeginAtom().GetIsAromatic():
            raise Unreadable("an aromatic bond outside an aromatic ring")
        if bond.GetBondType() in (Chem.BondType.UNSPECIFIED, Chem.BondType.ZERO):
            raise Unreadable("a bond without an order")


def _groups(mol: Chem.Mol) -> Iterator[StereoGroup]:
    for group in mol.GetStereoGroups():
        kind = _GROUPS.get(group.GetGroupType())
        if kind:
            yield StereoGroup(kind, frozenset(atom.GetIdx() for atom in group.GetAtoms()))


def _marks(text: str) -> Iterator[Mark]:
    """Wedges and vague bonds as the connection table writes them (CTFile formats, bond block)."""
    lines = text.split("\n")
    if len(lines) > 3 and "V3000" in lines[3]:
        inside = False
        # A line that ends in a hyphen goes on in the next one.
        for line in re.sub(r"-\s*\nM  V30 ", "", text).split("\n"):
            if line.startswith("M  V30 BEGIN BOND"):
                inside = True
            elif line.startswith("M  V30 END BOND"):
                return
            elif inside and " CFG=" in line:
                part = line.split()
                value = next(p[4:] for p in part if p.startswith("CFG="))
                style = "crossed" if part[3] == "2" else _V3000_STYLES.get(value, "")
                if style:
                    yield Mark(int(part[4]) - 1, int(part[5]) - 1, style)
        return
    atoms, bonds = int(lines[3][0:3]), int(lines[3][3:6])
    for line in lines[4 + atoms : 4 + atoms + bonds]:
        value = line[9:12].strip()
        if value and value != "0":
            style = _V2000_STYLES.get(int(value), "")
            if style:
                yield Mark(int(line[0:3]) - 1, int(line[3:6]) - 1, style)


def _side(conformer: Chem.Conformer, atoms: tuple[int, ...], near: tuple[int, int]) -> int:
    """+1 where the two neighbours stand on one side of the bond, -1 on opposite sides, 0 vague."""
    begin, end = (conformer.GetAtomPosition(atom) for atom in atoms)
    axis = end - begin
    first = conformer.GetAtomPosition(near[0]) - begin
    second = conformer.GetAtomPosition(near[1]) - end
    one, two = axis.CrossProduct(first), axis.CrossProduct(second)
    length = axis.Length()
    if one.Length() <= _LEAST_SINE * length * first.Length():
        return 0
    if two.Length() <= _LEAST_SINE * length * second.Length():
        return 0
    return 1 if one.DotProduct(two) > 0 else -1
