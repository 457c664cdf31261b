"""From the species of a crystal, atoms in space, to one connection table with its charges.

A species is one discrete molecule or ion. Nothing is guessed: where more than one reading of the
electrons is left, or where a bond's length contradicts it, the answer is `Refused`.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import product
from math import dist, gcd

from dossiercheck.limits import Refused
from dossiercheck.stereo.alignment import mirror_smiles
from dossiercheck.stereo.lewis import HYDROGENS, Bond, Lewis, lewis, strained
from dossiercheck.stereo.perception import from_molblock
from dossiercheck.stereo.structure import Structure, Unreadable

Point = tuple[float, float, float]

RELATIVE = "relative"  # the hand of the whole model is open
BOTH = "both"  # each molecule is there with its mirror image
# A second arrangement of charges must be this much less usual, in the units of `Lewis.cost`.
_CLEAR = 5.0
_MOST_EXTRA = 60.0
_MOST_ATOMS = 2_000
_APART = 60.0  # ångström between copies of one species in the table
_OUT_OF_PLANE = 0.28  # ångström; a carbon further out is tetrahedral and lacks a hydrogen


@dataclass(frozen=True, slots=True)
class Species:
    """One discrete molecule or ion. `positions` are Cartesian, right-handed, in ångström;
    `bonds` join atoms by their 0-based numbers; `copies` is how many the unit cell holds."""

    elements: tuple[str, ...]
    positions: tuple[Point, ...]
    bonds: tuple[tuple[int, int], ...]
    copies: int


@dataclass(frozen=True, slots=True)
class Content:
    """What a crystal consists of: `molblock` is one formula unit (V3000, 3D), `structure` the
    same as the program reads it."""

    molblock: str
    structure: Structure

    @property
    def smiles(self) -> str:
        """Canonical isomeric SMILES of the formula unit."""
        return self.structure.smiles


def content(species: Sequence[Species], hand: str = "") -> Content:
    """The formula unit of a crystal.

    `hand` says what the model's handedness is worth: "" means as it stands, `RELATIVE` that only
    relative configuration is known, `BOTH` that the space group puts each mirror image beside
    it. Raises `Refused`: "charge-not-assignable", "bonds-ambiguous", "geometry-not-clear",
    "independent-molecules-differ", "size-budget".
    """
    if sum(len(one.elements) for one in species) > _MOST_ATOMS:
        raise Refused("size-budget", f"The crystal's molecules have more than {_MOST_ATOMS} atoms.")
    bonds = [_measured(one) for one in species]
    electrons = _neutral(species, bonds)
    for one, pairs, found in zip(species, bonds, electrons, strict=True):
        _confirm(one, pairs, found)
    parts = [
        _read(_molblock([(one, found)])) for one, found in zip(species, electrons, strict=True)
    ]
    kept = _unit(species, parts, hand)
    unit = [(species[number], electrons[number]) for number in kept]
    read = _read(_molblock(unit))
    groups = list(_groups(read, hand))
    molblock = _molblock(unit, groups, "RAC" if hand == BOTH else "REL")
    return Content(molblock, _read(molblock) if groups else read)


def _measured(one: Species) -> list[Bond]:
    return [(a, b, dist(one.positions[a], one.positions[b])) for a, b in one.bonds]


def _neutral(species: Sequence[Species], bonds: Sequence[Sequence[Bond]]) -> list[Lewis]:
    """The cheapest arrangements that together carry no charge."""
    options = []
    for one, pairs in zip(species, bonds, strict=True):
        found = lewis(one.elements, pairs)
        if not found:
            raise Refused(
                "bonds-ambiguous",
                f"The valences of {_formula(one)} do not come out with the bonds found: a"
                " hydrogen is missing or too many, or the bonding is unusual.",
            )
        least = min(lew.cost for lew in found.values())
        options.append([(q, lew) for q, lew in found.items() if lew.cost <= least + _MOST_EXTRA])
    # Equal sites of one species would only multiply the ways: they are added up as they come.
    ways: dict[int, list[tuple[float, tuple[Lewis, ...]]]] = {0: [(0.0, ())]}
    for one, choices in zip(species, options, strict=True):
        onward: dict[int, list[tuple[float, tuple[Lewis, ...]]]] = {}
        for (charge, sums), (more, lew) in product(ways.items(), choices):
            into = onward.setdefault(charge + more * one.copies, [])
            into += [(cost + lew.cost * one.copies, (*chosen, lew)) for cost, chosen in sums]
        ways = {q: sorted(sums, key=lambda way: way[0])[:2] for q, sums in onward.items()}
    balanced = ways.get(0, [])
    if not balanced:
        raise Refused(
            "charge-not-assignable",
            "No usual charges of the molecules add up to none: a hydrogen or an ion is missing.",
        )
    least_copies = min(one.copies for one in species)
    if len(balanced) > 1 and balanced[1][0] - balanced[0][0] < _CLEAR * least_copies:
        raise Refused(
            "charge-not-assignable", "The charges can be shared out in more than one usual way."
        )
    return list(balanced[0][1])


def _confirm(one: Species, pairs: Sequence[Bond], found: Lewis) -> None:
    bad = strained(one.elements, pairs, found)
    if bad:
        names = "–".join(one.elements[atom] for atom in bad[:2])
        raise Refused(
            "bonds-ambiguous",
            f"A {names} bond of {bad[2]:.2f} Å in {_formula(one)} does not fit the order that the"
            " valences ask for: a hydrogen may be missing.",
        )
    double = {
        a for bond, order in zip(pairs, found.orders, strict=True) if order > 1 for a in bond[:2]
    }
    near: dict[int, list[int]] = {}
    for begin, end in one.bonds:
        near.setdefault(begin, []).append(end)
        near.setdefault(end, []).append(begin)
    for atom in double:
        if one.elements[atom] == "C" and len(near[atom]) == 3:
            out = _height(one.positions[atom], *(one.positions[n] for n in near[atom]))
            if out > _OUT_OF_PLANE:
                raise Refused(
                    "bonds-ambiguous",
                    f"A carbon of {_formula(one)} with three ligands stands {out:.2f} Å out of"
                    " their plane: a hydrogen may be missing.",
                )


def _height(atom: Point, one: Point, two: Point, three: Point) -> float:
    """Distance of an atom from the plane of three others, in ångström."""
    a, b, c = (tuple(p - q for p, q in zip(x, one, strict=True)) for x in (two, three, atom))
    normal = (a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0])
    length = dist(normal, (0.0, 0.0, 0.0))
    return abs(sum(n * x for n, x in zip(normal, c, strict=True))) / length if length else 0.0


def _read(molblock: str) -> Structure:
    try:
        structure = from_molblock(molblock)
    except Unreadable as error:
        raise Refused("bonds-ambiguous", f"The atoms make no sound molecule: {error}") from error
    if structure.doubt:
        raise Refused("geometry-not-clear", f"Its descriptors are in doubt: {structure.doubt}")
    for unit in structure.undefined:
        where = structure.mol.GetAtomWithIdx(unit.atoms[0]).GetSymbol()
        raise Refused(
            "geometry-not-clear",
            f"The coordinates do not show the configuration of a {unit.kind} at {where}.",
        )
    return structure


def _unit(species: Sequence[Species], parts: Sequence[Structure], hand: str) -> list[int]:
    """Which species make up one formula unit, by number, each as often as it is in it."""
    kinds: dict[str, list[int]] = {}
    for number, part in enumerate(parts):
        kinds.setdefault(part.flat, []).append(number)
    for numbers in kinds.values():
        first = parts[numbers[0]]
        hands = {first.smiles} | ({mirror_smiles(first)} if hand == BOTH else set())
        if any(parts[number].smiles not in hands for number in numbers):
            raise Refused(
                "independent-molecules-differ",
                f"The independent molecules of {_formula(species[numbers[0]])} have one"
                " constitution and not one configuration.",
            )
    copies = {n[0]: sum(species[number].copies for number in n) for n in kinds.values()}
    common = gcd(*copies.values())
    return [number for number, count in copies.items() for _ in range(count // common)]


def _groups(structure: Structure, hand: str) -> Iterator[tuple[int, ...]]:
    """Centres known only relative to each other: all of them, or those of each molecule."""
    centres = sorted(unit.atoms[0] for unit in structure.units if unit.kind == "centre")
    if not hand or not centres:
        return
    if hand == RELATIVE:
        yield tuple(centres)
        return
    for part in structure.components():
        inside = tuple(atom for atom in centres if atom in part)
        if inside:
            yield inside


def _molblock(
    unit: Sequence[tuple[Species, Lewis]], groups: Sequence[tuple[int, ...]] = (), kind: str = ""
) -> str:
    """A V3000 connection table (CTfile formats), copies of a species set apart."""
    atoms: list[str] = []
    bonds: list[str] = []
    met: dict[int, int] = {}
    for one, found in unit:
        first = len(atoms) + 1
        shift = _APART * met.get(id(one), 0)
        met[id(one)] = met.get(id(one), 0) + 1
        for element, (x, y, z), charge in zip(
            one.elements, one.positions, found.charges, strict=True
        ):
            symbol = "H" if element in HYDROGENS else element
            line = f"{len(atoms) + 1} {symbol} {x + shift:.4f} {y:.4f} {z:.4f} 0"
            line += f" CHG={charge}" if charge else ""
            atoms.append(line + (" MASS=2" if element == "D" else ""))
        for (begin, end), order in zip(one.bonds, found.orders, strict=True):
            bonds.append(f"{len(bonds) + 1} {order} {begin + first} {end + first}")
    body = [
        "BEGIN CTAB",
        f"COUNTS {len(atoms)} {len(bonds)} 0 0 0",
        *("BEGIN ATOM", *atoms, "END ATOM"),
        *(("BEGIN BOND", *bonds, "END BOND") if bonds else ()),
    ]
    if groups:
        body.append("BEGIN COLLECTION")
        for number, group in enumerate(groups, 1):
            members = " ".join(str(atom + 1) for atom in group)
            body.append(f"MDLV30/STE{kind}{number} ATOMS=({len(group)} {members})")
        body.append("END COLLECTION")
    lines = [piece for line in (*body, "END CTAB") for piece in _wrapped(f"M  V30 {line}")]
    head = ["", "                    3D", "", "  0  0  0     0  0            999 V3000"]
    return "\n".join([*head, *lines, "M  END", ""])


def _wrapped(line: str) -> Iterator[str]:
    """A V3000 line holds 80 characters; one that ends in a hyphen goes on in the next."""
    while len(line) > 78:
        cut = line.rindex(" ", 0, 78)
        yield line[: cut + 1] + "-"
        line = "M  V30 " + line[cut + 1 :]
    yield line


def _formula(one: Species) -> str:
    counts: dict[str, int] = {}
    for element in sorted(one.elements, key=lambda e: (e != "C", e not in HYDROGENS, e)):
        counts[element] = counts.get(element, 0) + 1
    return "".join(f"{element}{count if count > 1 else ''}" for element, count in counts.items())
