"""Small rings of a drawing, so that the second line of a double bond can run inside the ring."""

from __future__ import annotations

from collections import deque
from collections.abc import Sequence

from dossiercheck.model import DrawnBond

_LARGEST = 8


def neighbours_of(atoms: int, bonds: Sequence[DrawnBond]) -> list[list[int]]:
    """For each atom the atoms bonded to it, ascending."""
    found: list[set[int]] = [set() for _ in range(atoms)]
    for bond in bonds:
        found[bond.begin].add(bond.end)
        found[bond.end].add(bond.begin)
    return [sorted(one) for one in found]


def ring_of_each(
    bonds: Sequence[DrawnBond], neighbours: Sequence[Sequence[int]]
) -> dict[int, tuple[int, ...]]:
    """For each multiple bond in a ring of up to 8 atoms, the ring it is drawn into.

    Of several rings the one with most multiple bonds is taken, then the one nearest to six atoms:
    the double bond that a benzene ring shares with a saturated one belongs into the benzene.
    """
    rings = {ring for bond in bonds if (ring := _shortest(bond, neighbours))}
    multiple = {_pair(bond.begin, bond.end) for bond in bonds if bond.order > 1}
    ranked = sorted(
        rings,
        key=lambda ring: (-len(_edges(ring) & multiple), abs(len(ring) - 6), ring),
    )
    found: dict[int, tuple[int, ...]] = {}
    edges = [(ring, _edges(ring)) for ring in ranked]
    for index, bond in enumerate(bonds):
        if bond.order > 1:
            pair = _pair(bond.begin, bond.end)
            for ring, held in edges:
                if pair in held:
                    found[index] = ring
                    break
    return found


def _pair(one: int, other: int) -> tuple[int, int]:
    return (one, other) if one < other else (other, one)


def _edges(ring: tuple[int, ...]) -> set[tuple[int, int]]:
    return {_pair(a, b) for a, b in zip(ring, ring[1:] + ring[:1], strict=True)}


def _shortest(bond: DrawnBond, neighbours: Sequence[Sequence[int]]) -> tuple[int, ...]:
    """The shortest ring through a bond, turned so that equal rings are equal; () for none."""
    came: dict[int, int] = {bond.begin: -1}
    queue = deque([(bond.begin, 1)])
    while queue:
        atom, size = queue.popleft()
        if size >= _LARGEST:
            break
        for other in neighbours[atom]:
            if other in came or (atom == bond.begin and other == bond.end):
                continue
            came[other] = atom
            if other == bond.end:
                return _turned(_walk(other, came))
            queue.append((other, size + 1))
    return ()


def _walk(atom: int, came: dict[int, int]) -> list[int]:
    path = []
    while atom >= 0:
        path.append(atom)
        atom = came[atom]
    return path


def _turned(path: list[int]) -> tuple[int, ...]:
    first = path.index(min(path))
    turned = path[first:] + path[:first]
    if turned[-1] < turned[1]:
        turned = [turned[0], *reversed(turned[1:])]
    return tuple(turned)
