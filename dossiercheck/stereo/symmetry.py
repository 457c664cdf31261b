"""The symmetry of a constitution: permutations of its atoms that leave the graph as it is."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from dossiercheck.stereo.graph import Graph

Colours = dict[int, int]

# A search that needs more refinements has no answer here; a molecule of 100 atoms with a dozen
# equivalent groups takes about a hundred.
REFINEMENTS = 3_000


class TooSymmetric(Exception):
    """The search for the symmetries was given up."""


def generators(graph: Graph, *, exact: bool = True) -> tuple[dict[int, int], ...]:
    """Permutations of the atoms from which every symmetry of the graph is composed.

    Individualisation and refinement down a chain of stabilisers (McKay and Piperno, J. Symb.
    Comput. 2014, 60, 94). With `exact` false, bond orders, hydrogens and charges do not count:
    the symmetries of the skeleton. Raises `TooSymmetric`.
    """
    search = _Search(graph, exact)
    first = search.refined((search.base(),))
    assert first is not None
    chain = [first[0]]
    chosen: list[int] = []
    while (atom := _branching(chain[-1])) is not None:
        below = search.refined((_apart(chain[-1], atom),))
        assert below is not None
        chosen.append(atom)
        chain.append(below[0])
    found: list[dict[int, int]] = []
    for level in reversed(range(len(chosen))):
        colours, atom = chain[level], chosen[level]
        reached = _orbit(atom, found)
        for other in sorted(a for a in colours if colours[a] == colours[atom]):
            if other in reached:
                continue
            symmetry = search.matched(_apart(colours, atom), _apart(colours, other))
            if symmetry:
                found.append(symmetry)
                reached = _orbit(atom, found)
    return tuple(found)


def _orbit(atom: int, permutations: list[dict[int, int]]) -> set[int]:
    reached, queue = {atom}, [atom]
    while queue:
        here = queue.pop()
        for permutation in permutations:
            if permutation[here] not in reached:
                reached.add(permutation[here])
                queue.append(permutation[here])
    return reached


def _branching(colours: Colours) -> int | None:
    """The first atom of the smallest class that is not alone, None where each atom is."""
    classes: dict[int, list[int]] = {}
    for atom, colour in colours.items():
        classes.setdefault(colour, []).append(atom)
    shared = [sorted(members) for members in classes.values() if len(members) > 1]
    return min(shared, key=lambda members: (len(members), members))[0] if shared else None


def _apart(colours: Colours, atom: int) -> Colours:
    return {**colours, atom: -1}


class _Search:
    def __init__(self, graph: Graph, exact: bool) -> None:
        self.graph, self.exact = graph, exact
        self.left = REFINEMENTS

    def base(self) -> Colours:
        graph = self.graph
        keys: dict[int, tuple[Any, ...]] = {}
        for a in graph.atoms:
            key = (graph.element[a], graph.isotope[a], len(graph.near[a]))
            keys[a] = (*key, graph.charge[a], graph.hydrogens[a]) if self.exact else key
        palette = {key: number for number, key in enumerate(sorted(set(keys.values())))}
        return {a: palette[key] for a, key in keys.items()}

    def refined(self, sides: tuple[Colours, ...]) -> tuple[Colours, ...] | None:
        """Colourings refined side by side until nothing changes; None where they part."""
        self.left -= 1
        if self.left < 0:
            raise TooSymmetric
        near, exact = self.graph.near, self.exact
        classes = 0
        while True:
            keys = [
                {
                    a: (
                        colour,
                        tuple(sorted((o if exact else 0.0, side[b]) for b, o in near[a].items())),
                    )
                    for a, colour in side.items()
                }
                for side in sides
            ]
            counted = sorted(keys[0].values())
            if any(sorted(other.values()) != counted for other in keys[1:]):
                return None
            palette = {key: number for number, key in enumerate(dict.fromkeys(counted))}
            sides = tuple({a: palette[key] for a, key in side.items()} for side in keys)
            if len(palette) == classes:
                return sides
            classes = len(palette)

    def matched(self, one: Colours, two: Colours) -> dict[int, int] | None:
        """A symmetry that carries one colouring into the other, None where there is none."""
        found = self.refined((one, two))
        if found is None:
            return None
        one, two = found
        atom = _branching(one)
        if atom is None:
            by_colour = {colour: a for a, colour in two.items()}
            symmetry = {a: by_colour[colour] for a, colour in one.items()}
            return symmetry if self._holds(symmetry) else None
        for other in sorted(a for a in two if two[a] == one[atom]):
            symmetry_or_none = self.matched(_apart(one, atom), _apart(two, other))
            if symmetry_or_none:
                return symmetry_or_none
        return None

    def _holds(self, symmetry: Mapping[int, int]) -> bool:
        near = self.graph.near
        return all(
            symmetry[b] in near[symmetry[a]]
            and (not self.exact or near[symmetry[a]][symmetry[b]] == order)
            for a in symmetry
            for b, order in near[a].items()
        )
