"""The best mapping of one graph onto another, over all of its automorphisms.

A first isomorphism taken at random makes a symmetric molecule look wrong: the two halves of a
meso compound, or the phenyl rings of a benzhydryl group, may be laid on each other crosswise.
So every mapping is tried, cheapest first, and the one with the fewest disagreements is kept.
"""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from typing import Any

from dossiercheck.stereo.graph import Graph, same_centre, same_geometry

Cost = tuple[int, int]  # disagreements in constitution, then in configuration

MAPPING_STEPS = 60_000


@dataclass(frozen=True, slots=True)
class Mapped:
    """`complete` is false where the budget ended before every mapping was tried."""

    mapping: dict[int, int]
    cost: Cost
    complete: bool


def best_mapping(
    one: Graph,
    two: Graph,
    *,
    exact: bool,
    within: tuple[Sequence[int], Sequence[int]] | None = None,
    judged: tuple[frozenset[int], frozenset[frozenset[int]]],
    final: Callable[[dict[int, int]], int] | None = None,
) -> Mapped | None:
    """Map `one` onto `two`; None where no mapping exists.

    `exact` demands equal bond orders, hydrogens and charges; else they only count as
    disagreements, so that tautomers and charge forms can be laid on each other. `within` limits
    both sides to some of their atoms. `judged` are the centres and double bonds of `one` whose
    configuration counts. `final` replaces the count of stereo disagreements on a whole mapping
    (needed where a group of centres may be inverted together).
    """
    atoms = within or (one.atoms, two.atoms)
    if len(atoms[0]) != len(atoms[1]):
        return None
    # One level of recursion an atom: a long peptide has more atoms than the usual limit.
    sys.setrecursionlimit(max(sys.getrecursionlimit(), 2 * len(atoms[0]) + 1000))
    colours = _refine(one, two, atoms, exact)
    if colours is None:
        return None
    return _Search(one, two, atoms[0], colours, exact, judged, final).run()


def _refine(
    one: Graph, two: Graph, atoms: tuple[Sequence[int], Sequence[int]], exact: bool
) -> tuple[dict[int, int], dict[int, int]] | None:
    """Colours that tell apart what no mapping can exchange (Weisfeiler and Leman, 1968)."""
    graphs = (one, two)
    allowed = (set(atoms[0]), set(atoms[1]))
    keys: list[dict[int, Any]] = []
    for graph, mine in zip(graphs, atoms, strict=True):
        first: dict[int, Any] = {}
        for a in mine:
            base = (graph.element[a], graph.isotope[a], len(graph.near[a]))
            first[a] = (*base, graph.charge[a], graph.hydrogens[a]) if exact else base
        keys.append(first)
    classes = -1
    while True:
        palette = {key: n for n, key in enumerate(sorted({*keys[0].values(), *keys[1].values()}))}
        colours = tuple({a: palette[k] for a, k in side.items()} for side in keys)
        if sorted(colours[0].values()) != sorted(colours[1].values()):
            return None
        if len(palette) == classes:
            return colours[0], colours[1]
        classes = len(palette)
        keys = [
            {
                a: (
                    side[a],
                    tuple(
                        sorted(
                            (order if exact else 0.0, side[b])
                            for b, order in graph.near[a].items()
                            if b in mine
                        )
                    ),
                )
                for a in side
            }
            for graph, side, mine in zip(graphs, colours, allowed, strict=True)
        ]


class _Search:
    """Depth-first with a bound: a branch that already costs as much as the best is left."""

    def __init__(
        self,
        one: Graph,
        two: Graph,
        atoms: Sequence[int],
        colours: tuple[dict[int, int], dict[int, int]],
        exact: bool,
        judged: tuple[frozenset[int], frozenset[frozenset[int]]],
        final: Callable[[dict[int, int]], int] | None,
    ) -> None:
        self.one, self.two, self.exact, self.final = one, two, exact, final
        self.colours = colours
        self.by_colour: dict[int, list[int]] = {}
        for atom, colour in colours[1].items():
            self.by_colour.setdefault(colour, []).append(atom)
        self.sequence = self._sequence(atoms)
        self.due = self._due(judged)
        self.mapping: dict[int, int] = {}
        self.used: set[int] = set()
        self.best: Mapped | None = None
        self.steps = 0

    def run(self) -> Mapped | None:
        self._extend(0, (0, 0))
        if self.best and self.steps > MAPPING_STEPS and self.best.cost != (0, 0):
            return Mapped(self.best.mapping, self.best.cost, False)
        return self.best

    def _sequence(self, atoms: Sequence[int]) -> list[int]:
        """Rarest colour first, then along bonds, so that each step has few candidates."""
        rarity = {a: len(self.by_colour[self.colours[0][a]]) for a in atoms}
        left = set(atoms)
        sequence: list[int] = []
        while left:
            start = min(left, key=lambda a: (rarity[a], a))
            front = {start}
            while front:
                atom = min(front, key=lambda a: (rarity[a], a))
                front.discard(atom)
                left.discard(atom)
                sequence.append(atom)
                front |= {b for b in self.one.near[atom] if b in left}
        return sequence

    def _due(
        self, judged: tuple[frozenset[int], frozenset[frozenset[int]]]
    ) -> list[list[int | frozenset[int]]]:
        """For each step, the units that are complete once that step is taken."""
        step = {atom: n for n, atom in enumerate(self.sequence)}
        due: list[list[int | frozenset[int]]] = [[] for _ in self.sequence]
        for centre in judged[0]:
            if centre in step:
                reach = [centre, *self.one.near[centre]]
                due[max(step.get(a, 0) for a in reach)].append(centre)
        for bond in judged[1]:
            if all(end in step for end in bond):
                reach = [a for end in bond for a in (end, *self.one.near[end])]
                due[max(step.get(a, 0) for a in reach)].append(bond)
        return due

    def _candidates(self, atom: int) -> Iterator[int]:
        placed = [(b, order) for b, order in self.one.near[atom].items() if b in self.mapping]
        pool: Sequence[int] = self.by_colour[self.colours[0][atom]]
        if placed:
            around = self.two.near[self.mapping[placed[0][0]]]
            pool = [b for b in pool if b in around]
        taken: set[tuple[int, int, int, int, float]] = set()
        for other in pool:
            if other in self.used:
                continue
            near = self.two.near[other]
            if any(self.mapping[b] not in near for b, _ in placed):
                continue
            if self.exact and any(near[self.mapping[b]] != order for b, order in placed):
                continue
            # Identical ends of one atom can be exchanged without consequence: try one of them.
            if len(near) == 1:
                twin = (next(iter(near)), self.colours[1][other])
                alike = (self.two.hydrogens[other], self.two.charge[other], near[twin[0]])
                key = (*twin, *alike)
                if key in taken:
                    continue
                taken.add(key)
            yield other

    def _extend(self, step: int, cost: Cost) -> None:
        self.steps += 1
        if self.steps > MAPPING_STEPS and self.best:
            return
        if step == len(self.sequence):
            if self.final:
                cost = (cost[0], self.final(self.mapping))
            if self.best is None or cost < self.best.cost:
                self.best = Mapped(dict(self.mapping), cost, True)
            return
        atom = self.sequence[step]
        for other in self._candidates(atom):
            self.mapping[atom] = other
            self.used.add(other)
            more = (cost[0] + self._strain(atom, other), cost[1] + self._clashes(step))
            bound = (more[0], -1) if self.final else more
            if self.best is None or bound < self.best.cost:
                self._extend(step + 1, more)
            self.used.discard(other)
            del self.mapping[atom]
            if self.best and self.best.cost == (0, 0):
                return

    def _strain(self, atom: int, other: int) -> int:
        if self.exact:
            return 0
        return (
            (self.one.hydrogens[atom] != self.two.hydrogens[other])
            + (self.one.charge[atom] != self.two.charge[other])
            + sum(
                order != self.two.near[other][self.mapping[b]]
                for b, order in self.one.near[atom].items()
                if b in self.mapping
            )
        )

    def _clashes(self, step: int) -> int:
        if self.final:
            return 0
        return sum(
            compare(self.one, self.two, unit, self.mapping) not in (True, None)
            for unit in self.due[step]
        )


def compare(
    one: Graph, two: Graph, unit: int | frozenset[int], mapping: dict[int, int]
) -> bool | str | None:
    """A unit of `one` against its image: True or False where both specify it, "one" or "two"
    for the only side that does, None where neither does or their ligands do not correspond."""
    if isinstance(unit, int):
        here, there = one.centres.get(unit), two.centres.get(mapping[unit])
        if here and there:
            return same_centre(here, there, mapping)
    else:
        bond, image = one.bonds.get(unit), two.bonds.get(frozenset(mapping[a] for a in unit))
        if bond and image:
            return same_geometry(bond, image, mapping)
        here, there = bond, image  # type: ignore[assignment]
    if here:
        return "one"
    return "two" if there else None
