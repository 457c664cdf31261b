r"""Configurations as a SMILES writes them, read from the text itself.

OpenSMILES specification: the chirality marks @ and @@ with their neighbours in written order, an
implicit hydrogen or lone pair right after the atom before; / and \ beside double bonds and
cumulenes; @ on the middle atom of an allene.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field

from dossiercheck.stereo.cip.molecule import HYDROGEN, LONE_PAIR, Molecule, holds_lone_pair
from dossiercheck.stereo.cip.units import AXIS, CENTRE, DOUBLE_BOND, Marked

_TOKEN = re.compile(
    r"\[(?P<isotope>\d*)(?P<symbol>[A-Za-z*][a-z]?)(?P<chiral>@(?:@|TH\d|AL\d)?|)(?P<rest>[^\]]*)\]"
    r"|(?P<bare>Cl|Br|[BCNOPSFI*bcnops])"
    r"|(?P<bond>[-=#$:/\\~]|->|<-)|(?P<ring>%\(\d+\)|%\d\d|\d)|(?P<other>[().])"
)
_BENT = frozenset((16, 34, 52))
_SENSE = {"@": 1, "@@": -1, "@TH1": 1, "@TH2": -1, "@AL1": 1, "@AL2": -1}


@dataclass(slots=True)
class Written:
    """The SMILES as graph in writing order. `near[a]` lists a's neighbours as written, HYDROGEN
    among them; `up[a, b]` is +1 where b is drawn above a, -1 below."""

    near: list[list[int]] = field(default_factory=list)
    sense: dict[int, int] = field(default_factory=dict)
    up: dict[tuple[int, int], int] = field(default_factory=dict)


def written(text: str) -> Written:
    """Read the text's atoms, neighbours in order, and marks. Assumes a SMILES that parses."""
    found = Written()
    stack: list[int] = []
    here = -1
    bond = ""
    rings: dict[str, tuple[int, int, str]] = {}
    for token in _TOKEN.finditer(text.split(maxsplit=1)[0]):
        symbol = token["symbol"] or token["bare"]
        if symbol:
            atom = len(found.near)
            found.near.append([])
            if here >= 0:
                found.near[here].append(atom)
                found.near[atom].append(here)
                _direct(found, here, atom, bond)
            if token["symbol"] and re.match(r"H\d*", token["rest"]):
                count = token["rest"][1:2]
                found.near[atom].extend([HYDROGEN] * (int(count) if count.isdigit() else 1))
            if token["chiral"] in _SENSE:
                found.sense[atom] = _SENSE[token["chiral"]]
            here, bond = atom, ""
        elif token["bond"]:
            bond = token["bond"]
        elif token["ring"]:
            label = token["ring"].strip("%()")
            if label in rings:
                atom, place, opened = rings.pop(label)
                found.near[atom][place] = here
                found.near[here].append(atom)
                _direct(found, atom, here, opened)
                _direct(found, here, atom, bond)
            else:
                rings[label] = (here, len(found.near[here]), bond)
                found.near[here].append(LONE_PAIR)
            bond = ""
        elif token["other"] == "(":
            stack.append(here)
        elif token["other"] == ")":
            here = stack.pop()
        else:
            here = -1
    return found


def _direct(found: Written, begin: int, end: int, bond: str) -> None:
    if bond in ("/", "\\"):
        up = 1 if bond == "/" else -1
        found.up[begin, end] = up
        found.up[end, begin] = -up


def marked_in_text(text: str, molecule: Molecule) -> Iterator[Marked]:
    """The units to which the text gives a configuration, stereogenic or not."""
    if "@" not in text and "/" not in text and "\\" not in text:
        return
    found = written(text)
    if len(found.near) != len(molecule.near):
        return
    for atom, sense in found.sense.items():
        chain = cumulated(molecule, atom)
        if len(chain) > 1:
            yield from _axis(found, molecule, chain, sense)
            continue
        ligands = _around(found, molecule, atom)
        if len(set(ligands)) == 4 and not _inverts(molecule, atom):
            yield Marked(CENTRE, (atom,), tuple(ligands), sense)
    if found.up:
        yield from _planes(found, molecule)


def _inverts(molecule: Molecule, atom: int) -> bool:
    """Whether an atom is an amine's nitrogen, whose mark means nothing because its lone pair swings
    over (IUPAC 2013, P-93.2; common practice)."""
    return (
        molecule.number[atom] == 7
        and not molecule.charge[atom]
        and len(molecule.near[atom]) + molecule.hydrogens[atom] == 3
        and not (len(molecule.near[atom]) == 3 and holds_lone_pair(molecule, atom))
    )


def _around(found: Written, molecule: Molecule, atom: int) -> list[int]:
    """Ligands in written order; where three are written, the lone pair stands where an implicit
    hydrogen would."""
    ligands = list(found.near[atom])
    if len(ligands) == 3:
        missing = HYDROGEN if molecule.hydrogens[atom] and HYDROGEN not in ligands else LONE_PAIR
        _insert(ligands, atom, missing)
    return ligands


def _insert(ligands: list[int], atom: int, missing: int) -> None:
    """Put what is not written right after the atom before, or first where there is none."""
    ligands.insert(1 if 0 <= ligands[0] < atom else 0, missing)


def cumulated(molecule: Molecule, atom: int) -> tuple[int, ...]:
    """The atoms of the row of cumulated double bonds through an atom, from end to end; the atom
    alone where it is in none. Sulfur between two double bonds is bent and joins no row."""
    chain = [atom]
    if molecule.number[atom] in _BENT:
        return (atom,)
    doubles = [other for other, order in molecule.near[atom].items() if order == 2]
    if len(doubles) != 2 or len(molecule.near[atom]) != 2:
        return (atom,)
    for side, first in enumerate(sorted(doubles)):
        before, here = atom, first
        while True:
            chain.insert(len(chain) if side else 0, here)
            onward = [
                other
                for other, order in molecule.near[here].items()
                if order == 2 and other != before
            ]
            straight = len(molecule.near[here]) == 2 and molecule.number[here] not in _BENT
            if len(onward) != 1 or not straight or onward[0] in chain:
                break
            before, here = here, onward[0]
    return tuple(chain if chain[0] < chain[-1] else reversed(chain))


def _axis(
    found: Written, molecule: Molecule, chain: tuple[int, ...], sense: int
) -> Iterator[Marked]:
    if len(chain) % 2 == 0:
        return
    middle = chain[len(chain) // 2]
    if found.near[middle].index(chain[len(chain) // 2 - 1]) == 1:
        chain = chain[::-1]
    near = end_ligands(found.near[chain[0]], molecule, chain[0], chain[1])
    far = end_ligands(found.near[chain[-1]], molecule, chain[-1], chain[-2])
    if len(near) == len(far) == 2:
        yield Marked(AXIS, chain, (*near, *far), sense)


def end_ligands(written: list[int], molecule: Molecule, atom: int, inward: int) -> list[int]:
    """The two ligands at one end of a double bond or cumulene, as written; a hydrogen that is not
    written follows the atom before."""
    ligands = list(written)
    if len(ligands) == 2:
        _insert(ligands, atom, HYDROGEN if molecule.hydrogens[atom] else LONE_PAIR)
    if inward in ligands:
        ligands.remove(inward)
    return ligands


def double_chains(molecule: Molecule) -> Iterator[tuple[int, ...]]:
    """Every double bond, and every row of an odd number of them, from end to end.

    Not in rings of fewer than eight atoms, which hold them Z (IUPAC 2013, P-93.5.1.4.1), and not
    in aromatic rings, where the bond has no fixed place.
    """
    for begin, near in enumerate(molecule.near):
        for end, order in near.items():
            if begin < end and order == 2 and not {begin, end} <= molecule.aromatic:
                row = max(cumulated(molecule, begin), cumulated(molecule, end), key=len)
                if len(row) == 1:
                    row = (begin, end)
                elif len(row) % 2 or (begin, end) != tuple(sorted(row[:2])):
                    continue
                if not molecule.in_ring(begin, end) or _ring_size(molecule, begin, end) >= 8:
                    yield row


def _ring_size(molecule: Molecule, begin: int, end: int) -> int:
    """Atoms in the smallest ring through a ring bond; 8 stands for that many or more."""
    front, seen = {begin}, {begin}
    for size in range(1, 8):
        onward = {
            other
            for at in front
            for other in molecule.near[at]
            if other not in seen and (at, other) != (begin, end)
        }
        if end in onward:
            return size + 1
        front, seen = onward, seen | onward
    return 8


def _planes(found: Written, molecule: Molecule) -> Iterator[Marked]:
    for chain in double_chains(molecule):
        sides = []
        for atom, inward in ((chain[0], chain[1]), (chain[-1], chain[-2])):
            ligands = end_ligands(found.near[atom], molecule, atom, inward)
            ups = [found.up.get((atom, ligand), 0) for ligand in ligands]
            if len(ligands) != 2 or not any(ups) or ups[0] == ups[1]:
                break
            sides.append((ligands, ups[0] or -ups[1]))
        else:
            (near, one), (far, two) = sides
            yield Marked(DOUBLE_BOND, chain, (*near, *far), one * two)
