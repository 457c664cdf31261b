"""Mancude rings: where a double bond may stand on either side, its duplicate atom is a mean."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

Bonds = Sequence[Mapping[int, int]]


def averaged(number: Sequence[int], near: Bonds, ring: frozenset[tuple[int, int]]) -> list[float]:
    """For each atom the mean atomic number of its possible double-bond partners, else 0.

    An atom counts where its ring double bond moves between the Kekulé structures of the molecule
    (IUPAC 2013, P-92.1.4.4: all positions that the double bond can take count alike).
    """
    partner = _ring_double_bonds(near, ring)
    means = [0.0] * len(number)
    for atom, mate in partner.items():
        possible = [mate]
        for other in near[atom]:
            bond = (min(atom, other), max(atom, other))
            movable = other != mate and bond in ring and other in partner
            if movable and _can_shift(atom, other, partner, near, ring):
                possible.append(other)
        if len(possible) > 1:
            means[atom] = sum(number[other] for other in possible) / len(possible)
    return means


def _ring_double_bonds(near: Bonds, ring: frozenset[tuple[int, int]]) -> dict[int, int]:
    """Atom → the atom at the other end of its one double bond, where that bond is in a ring."""
    partner: dict[int, int] = {}
    for one, two in ring:
        if near[one][two] == 2 and _doubles(near[one]) == 1 == _doubles(near[two]):
            partner[one], partner[two] = two, one
    return partner


def _doubles(bonds: Mapping[int, int]) -> int:
    return sum(order > 1 for order in bonds.values())


def _can_shift(
    atom: int,
    other: int,
    partner: Mapping[int, int],
    near: Bonds,
    ring: frozenset[tuple[int, int]],
) -> bool:
    """Whether a Kekulé structure has atom=other: an alternating ring through that bond exists."""
    goal = partner[atom]
    stack = [(partner[other], frozenset((atom, other, partner[other])))]
    tried: set[int] = set()
    while stack:
        here, passed = stack.pop()
        for step in near[here]:
            if (min(here, step), max(here, step)) not in ring or step not in partner:
                continue
            if step == goal:
                return True
            onward = partner[step]
            if step in passed or onward in passed or onward in tried:
                continue
            tried.add(onward)
            stack.append((onward, passed | {step, onward}))
    return False
