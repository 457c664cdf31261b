"""A V2000 connection table as numbers (CTFile formats), read and written without any library."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

WEDGE, HASH = 1, 6


@dataclass(frozen=True, slots=True)
class Atom:
    """A line of the atom block: coordinates in the table's own unit and the rest of the line."""

    x: float
    y: float
    z: float
    rest: str


@dataclass(frozen=True, slots=True)
class Bond:
    """A line of the bond block, atoms 0-based, the narrow end of a wedge first."""

    begin: int
    end: int
    order: int
    style: int


@dataclass(frozen=True, slots=True)
class Table:
    """A V2000 connection table; `properties` are its M lines but the last."""

    header: tuple[str, str, str]
    counts: str
    atoms: tuple[Atom, ...]
    bonds: tuple[Bond, ...]
    properties: tuple[str, ...]


def read(text: str) -> Table:
    """A table from a molblock. Raises ValueError for what is not V2000."""
    lines = text.splitlines()
    if len(lines) < 5 or "V2000" not in lines[3]:
        raise ValueError("not a V2000 connection table")
    atoms, bonds = int(lines[3][0:3]), int(lines[3][3:6])
    first = 4 + atoms
    return Table(
        header=(lines[0], lines[1], lines[2]),
        counts=lines[3][6:],
        atoms=tuple(
            Atom(float(line[0:10]), float(line[10:20]), float(line[20:30]), line[30:])
            for line in lines[4:first]
        ),
        bonds=tuple(
            Bond(int(line[0:3]) - 1, int(line[3:6]) - 1, int(line[6:9]), int(line[9:12] or 0))
            for line in lines[first : first + bonds]
        ),
        properties=tuple(
            line for line in lines[first + bonds :] if line.startswith("M  ") and line != "M  END"
        ),
    )


def write(table: Table) -> str:
    """The molblock of a table."""
    return "\n".join(
        [
            *table.header,
            f"{len(table.atoms):3}{len(table.bonds):3}{table.counts}",
            *(f"{a.x:10.4f}{a.y:10.4f}{a.z:10.4f}{a.rest}" for a in table.atoms),
            *(f"{b.begin + 1:3}{b.end + 1:3}{b.order:3}{b.style:3}" for b in table.bonds),
            *table.properties,
            "M  END",
            "",
        ]
    )


def neighbours(table: Table) -> list[list[int]]:
    """For each atom the atoms it is bonded to."""
    near: list[list[int]] = [[] for _ in table.atoms]
    for bond in table.bonds:
        near[bond.begin].append(bond.end)
        near[bond.end].append(bond.begin)
    return near


def branch(near: Sequence[Iterable[int]], centre: int, ligand: int) -> set[int]:
    """The atoms that hang on a ligand when the centre is taken away."""
    found, rest = {ligand}, [ligand]
    while rest:
        for atom in near[rest.pop()]:
            if atom != centre and atom not in found:
                found.add(atom)
                rest.append(atom)
    return found
