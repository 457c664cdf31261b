"""Which ring atoms hold each other: configurations that small rings cannot have together.

Two bridgeheads with three bridges between them stand both outwards (or both inwards, which has
the same sense); one in and one out needs large rings. The smallest known such bicycle is
bicyclo[4.4.1]undecane (ingenol); nothing of the sort is known for three bridges of up to three
atoms (in/out isomerism: Alder and East, Chem. Rev. 1996, 96, 2097; limits from memory).
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass

from dossiercheck.stereo.graph import Graph

# Atoms in the three bridges together, and in the longest: up to here one has no in,out isomer.
_HELD = 7
_HELD_BRIDGE = 3
# From here on nothing holds the two.
_FREE = 12
# Fused rings with this many atoms besides the shared bond have a cis and a trans isomer: the
# decalins and hydrindanes (common knowledge); smaller ones are not relied on.
_FUSED = (3, 4)


@dataclass(frozen=True, slots=True)
class Held:
    """Two bridgeheads and for each the first atoms of the three bridges, in the same order."""

    ends: tuple[int, int]
    first: tuple[int, int, int]
    last: tuple[int, int, int]


@dataclass(frozen=True, slots=True)
class Cages:
    """`held` leave no choice; for the pairs in `unsure` it is not known whether every combination
    exists."""

    held: tuple[Held, ...]
    unsure: tuple[tuple[int, int], ...]


def cages(graph: Graph, rings: Mapping[int, frozenset[int]], atoms: Iterable[int]) -> Cages:
    """Judge each pair of `atoms` that three ring bonds leave; `rings` are the neighbours of each
    atom along ring bonds."""
    heads = sorted(a for a in atoms if len(rings.get(a, ())) >= 3)
    held, unsure = [], []
    for number, one in enumerate(heads):
        for two in heads[number + 1 :]:
            paths = three_bridges(rings, one, two)
            if paths is None:
                continue
            sizes = sorted(len(path) - 2 for path in paths)
            if sizes[0] == 0:
                if sizes[1] < _FUSED[0] or sizes[2] < _FUSED[1]:
                    unsure.append((one, two))
            elif sum(sizes) <= _HELD and sizes[2] <= _HELD_BRIDGE:
                a, b, c = paths
                held.append(Held((one, two), (a[1], b[1], c[1]), (a[-2], b[-2], c[-2])))
            elif sum(sizes) < _FREE:
                unsure.append((one, two))
    return Cages(tuple(held), tuple(unsure))


def three_bridges(
    rings: Mapping[int, frozenset[int]], start: int, goal: int
) -> tuple[list[int], ...] | None:
    """Three paths along ring bonds from `start` to `goal` that share no other atom, together as
    short as can be; None where there are no three. (Successive shortest paths in the graph with
    each atom split in two, as in any textbook on network flow.)"""
    flow: dict[tuple[int, int], int] = {}  # the bond one → two that a path takes
    for _ in range(3):
        if not _augment(rings, start, goal, flow):
            return None
    after: dict[int, list[int]] = {}
    for one, two in flow:
        after.setdefault(one, []).append(two)
    paths = []
    for first in sorted(after[start]):
        path = [start, first]
        while path[-1] != goal:
            path.append(after[path[-1]][0])
        paths.append(path)
    return tuple(paths)


def _augment(
    rings: Mapping[int, frozenset[int]], start: int, goal: int, flow: dict[tuple[int, int], int]
) -> bool:
    """One more path, re-routing those there are. A state is an atom and whether it was entered
    by a bond free of paths (then, on a path, it may only be left backwards along that path)."""
    came = {two: one for one, two in flow if two != goal}
    best: dict[tuple[int, bool], int] = {(start, False): 0}
    before: dict[tuple[int, bool], tuple[int, bool]] = {}
    changed = [(start, False)]
    while changed:
        following = []
        for state in changed:
            atom, bound = state
            steps = []
            if atom == goal:
                continue
            if bound:
                steps.append(((came[atom], False), -1))
            else:
                for other in rings[atom]:
                    if (atom, other) in flow or other == start:
                        continue
                    if (other, atom) in flow:
                        if other != start:
                            steps.append(((other, False), -1))
                        continue
                    steps.append(((other, other in came and other != goal), 1))
            for after, cost in steps:
                if best[state] + cost < best.get(after, 1_000_000):
                    best[after] = best[state] + cost
                    before[after] = state
                    following.append(after)
        changed = following
    state = (goal, False)
    if state not in best:
        return False
    while state in before:
        last = before[state]
        if (state[0], last[0]) in flow:
            del flow[(state[0], last[0])]
        else:
            flow[(last[0], state[0])] = 1
        state = last
    return True
