"""Connection tables for the demonstration, and the ways in which a planted one is spoilt."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping

from rdkit import Chem
from rdkit.Chem import rdDepictor

from tests.demonstration.substances import Substance

Edit = Callable[[str], str]


def molblock(substance: Substance, edit: Edit | None = None) -> str:
    """The drawing of a substance: V2000, or V3000 where it carries enhanced-stereo groups.

    Hydrogens at ring fusions of the meso epoxide are drawn, as one draws them by hand.
    """
    mol = Chem.Mol(substance.mol)
    fusion = mol.GetSubstructMatch(Chem.MolFromSmarts("[CR2]O[CR2]"))
    if fusion:
        mol = Chem.AddHs(mol, onlyOnAtoms=[fusion[0], fusion[2]])
    mol.SetProp("_Name", substance.label)
    if substance.centres and not substance.mixed:
        mol.SetIntProp("_MolFileChiralFlag", 1)
    rdDepictor.Compute2DCoords(mol)
    block = Chem.MolToV3KMolBlock(mol) if substance.mixed else Chem.MolToMolBlock(mol)
    return edit(block) if edit else block


def record(substance: Substance, fields: Mapping[str, str], edit: Edit | None = None) -> str:
    """One record of a structure-data file."""
    data = "".join(f">  <{name}>\n{value}\n\n" for name, value in fields.items())
    return f"{molblock(substance, edit)}{data}$$$$\n"


def without_wedge(atom: int) -> Edit:
    """Draw the bond whose narrow end is at `atom` (1-based) plain."""
    return lambda block: _restyle(block, lambda begin, _, style: style if begin != atom else 0)


def wavy(atom: int) -> Edit:
    """Draw the wedge at `atom` wavy (bond stereo 4 of the V2000 connection table)."""

    def style(begin: int, _: int, old: int) -> int:
        return 4 if begin == atom and old else old

    return lambda block: _restyle(block, style)


def wedged(begin: int, end: int) -> Edit:
    """Draw a solid wedge from `begin` to `end`, which the structure does not call for."""

    def spoil(block: str) -> str:
        turned = "\n".join(_ordered(line, begin, end) for line in block.split("\n"))
        return _restyle(turned, lambda b, e, style: 1 if (b, e) == (begin, end) else style)

    return spoil


def replaced_by(smiles: str, label: str) -> Edit:
    """Draw another structure under the same title."""
    other = Substance(label, smiles, "", "", centres=1)
    return lambda _: molblock(other)


def _restyle(block: str, style: Callable[[int, int, int], int]) -> str:
    lines = block.split("\n")
    for number in _bond_lines(lines):
        begin, end, order, old = (int(lines[number][n : n + 3]) for n in (0, 3, 6, 9))
        lines[number] = f"{begin:3d}{end:3d}{order:3d}{style(begin, end, old):3d}"
    spoilt = "\n".join(lines)
    if spoilt == block:
        raise ValueError("the planted change of the drawing changes nothing")
    return spoilt


def _bond_lines(lines: list[str]) -> Iterable[int]:
    atoms, bonds = int(lines[3][:3]), int(lines[3][3:6])
    lines[4 + atoms : 4 + atoms + bonds] = [
        line if len(line) > 9 else f"{line}  0" for line in lines[4 + atoms : 4 + atoms + bonds]
    ]
    return range(4 + atoms, 4 + atoms + bonds)


def _ordered(line: str, begin: int, end: int) -> str:
    turned = f"{end:3d}{begin:3d}"
    return f"{begin:3d}{end:3d}{line[6:]}" if line.startswith(turned) and len(line) < 20 else line
