"""What the library's molecule has at a place of the digraph, without any code of the engine.

Duplicates as IUPAC 2013, P-92.1.4 has them; the mean ones of mancude rings (P-92.1.4.4) by trying
every Kekulé structure. A hydrogen that is no atom of its own has the number -1.
"""

from __future__ import annotations

from collections import Counter
from itertools import combinations

from rdkit import Chem

Path = tuple[int, ...]
Node = tuple[int, float, int]  # atom, atomic number, root distance of a duplicate or -1
_TABLE = Chem.GetPeriodicTable()
_CCW, _CW = Chem.ChiralType.CHI_TETRAHEDRAL_CCW, Chem.ChiralType.CHI_TETRAHEDRAL_CW


def prepared(mol: Chem.Mol) -> tuple[Chem.Mol, dict[int, float]]:
    """The molecule with Kekulé bonds, and by atom the mean atomic number of its duplicate where
    its ring double bond can stand in more than one place."""
    mol = Chem.Mol(mol)
    Chem.Kekulize(mol, clearAromaticFlags=True)
    for bond in mol.GetBonds():
        # d orbitals are left out (P-92.1.4.2).
        if any(a.GetAtomicNum() > 13 and a.GetDegree() > 2 for a in ends(bond)):
            bond.SetBondType(Chem.BondType.SINGLE)
    multiple = Counter(a.GetIdx() for b in mol.GetBonds() if order(b) > 1 for a in ends(b))
    near: dict[int, set[int]] = {}
    for bond in mol.GetBonds():
        one, two = (atom.GetIdx() for atom in ends(bond))
        if bond.IsInRing() and order(bond) == 2 and multiple[one] == multiple[two] == 1:
            near[one], near[two] = {two}, {one}
    for bond in mol.GetBonds():
        one, two = (atom.GetIdx() for atom in ends(bond))
        if bond.IsInRing() and one in near and two in near:
            near[one].add(two)
            near[two].add(one)
    means = {}
    for atom, others in near.items():
        system = _together(atom, near)
        mates = [other for other in others if _paired(system - {atom, other}, near)]
        if len(mates) > 1:
            numbers = [mol.GetAtomWithIdx(mate).GetAtomicNum() for mate in mates]
            means[atom] = sum(numbers) / len(numbers)
    return mol, means


def number(mol: Chem.Mol, at: int) -> float:
    """Atomic number."""
    return float(mol.GetAtomWithIdx(at).GetAtomicNum()) if at >= 0 else 1.0


def around(mol: Chem.Mol, means: dict[int, float], path: Path) -> list[Node]:
    """What hangs from the last atom of a path; `mol` and `means` as `prepared` gives them."""
    atom, here, up = mol.GetAtomWithIdx(path[-1]), path[-1], (-1, *path)[-2]
    found = [(-1, 1.0, -1)] * atom.GetTotalNumHs()
    for bond in atom.GetBonds():
        at = bond.GetOtherAtomIdx(here)
        if at != up:
            found.append((at, number(mol, at), path.index(at) if at in path else -1))
        if not (here in means and bond.IsInRing()):
            found += [(at, number(mol, at), len(path) - 1)] * (order(bond) - 1)
    return [*found, (here, means[here], len(path) - 1)] if here in means else found


def worth(mol: Chem.Mol, rule: str, at: int, number: float, distance: int) -> float | None:
    """What Rule 1a, 1b or 2 compares at a node; None for another rule."""
    atom = mol.GetAtomWithIdx(at) if at >= 0 else Chem.Atom(1)
    own, isotope = atom.GetAtomicNum(), atom.GetIsotope()
    mass = _TABLE.GetMassForIsotope(own, isotope) or isotope or _TABLE.GetAtomicWeight(own)
    near = -distance if distance >= 0 else -1000
    return {"1a": number, "1b": near, "2": mass * (number == own)}.get(rule)


def spheres(mol: Chem.Mol, means: dict[int, float], path: Path, depth: int) -> list[list[object]]:
    """The sets of atomic numbers of the first spheres of a branch, each sphere sorted."""
    paths = [path] if number(mol, path[-1]) > 1 else []
    found: list[list[object]] = [[number(mol, path[-1])]]
    while len(found) < depth:
        sets = [(before, around(mol, means, before)) for before in paths]
        found.append([*sorted(sorted(node[1] for node in nodes) for _, nodes in sets)])
        paths = [(*p, at) for p, nodes in sets for at, z, d in nodes if d < 0 and z > 1]
    return found[:depth]


def turned(mol: Chem.Mol, atoms: Path, ranked: list[list[int]]) -> str:
    """The capital letter that the library's mark and these ranks give; "" where it has no mark."""
    if len(atoms) == 1:
        atom = mol.GetAtomWithIdx(atoms[0])
        if atom.GetChiralTag() not in (_CCW, _CW):
            return ""
        # Seen from the first, the others run counter-clockwise; what is not drawn comes last.
        near = [*(bond.GetOtherAtomIdx(atoms[0]) for bond in atom.GetBonds()), -1]
        places = [near.index(ligand) for ligand in ranked[0]]
        odd = sum(a > b for a, b in combinations(places, 2)) % 2 == 1
        return "S" if (atom.GetChiralTag() == _CCW) != odd else "R"
    bond = mol.GetBondBetweenAtoms(*atoms)
    side = bond is not None and {"CIS": "ZE", "Z": "ZE", "TRANS": "EZ", "E": "EZ"}.get(
        str(bond.GetStereo()).removeprefix("STEREO")
    )
    if not side or not list(bond.GetStereoAtoms()):
        return ""
    tops = {end[0] for end in ranked}
    return side[sum(at not in tops for at in bond.GetStereoAtoms()) % 2]


def ends(bond: Chem.Bond) -> tuple[Chem.Atom, Chem.Atom]:
    """The bond's two atoms."""
    return bond.GetBeginAtom(), bond.GetEndAtom()


def order(bond: Chem.Bond) -> int:
    """The order of a Kekulé bond."""
    return int(bond.GetBondTypeAsDouble())


def _together(atom: int, near: dict[int, set[int]]) -> frozenset[int]:
    found, rest = {atom}, [atom]
    while rest:
        for other in near[rest.pop()] - found:
            found.add(other)
            rest.append(other)
    return frozenset(found)


def _paired(atoms: frozenset[int], near: dict[int, set[int]]) -> bool:
    """Whether double bonds can pair all the atoms."""
    if not atoms:
        return True
    one = min(atoms, key=lambda atom: (len(near[atom] & atoms), atom))
    return any(_paired(atoms - {one, two}, near) for two in near[one] & atoms)
