"""All configurations that a constitution can have, as bits, and how its symmetry moves them.

A unit's bit says which of its two configurations it has. A symmetry of the constitution carries
one set of bits into another that stands for the same stereoisomer; so stereoisomers are the orbits
(Pólya's view of isomers, as in any textbook of combinatorics), and no descriptor is needed.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from dossiercheck.stereo.graph import Centre, Geometry, Graph, same_centre, same_geometry
from dossiercheck.stereo.symmetry import generators


@dataclass(frozen=True, slots=True)
class Move:
    """A symmetry: unit u goes to `to[u]`, its bit turned where `turned` has bit u."""

    to: tuple[int, ...]
    turned: int

    def __call__(self, bits: int) -> int:
        """The configurations after the symmetry."""
        bits ^= self.turned
        moved = 0
        for unit, image in enumerate(self.to):
            if bits >> unit & 1:
                moved |= 1 << image
        return moved


@dataclass(frozen=True, slots=True)
class Space:
    """`units` by number, with the reference configuration (bit 0) of each. `moves` generate the
    symmetries; `ties` are pairs of units whose bits must be alike (0) or unlike (1), because small
    rings hold them. `unsure` says why some combinations may not exist, "" for
    nothing. `left_out` might be taken for units and are none here; `imines` are C=N–H, no units
    either."""

    graph: Graph
    units: tuple[Centre | Geometry, ...]
    atoms: tuple[tuple[int, ...], ...]
    moves: tuple[Move, ...]
    ties: tuple[tuple[int, int, int], ...]
    unsure: str
    left_out: tuple[tuple[int, ...], ...]
    imines: tuple[Geometry, ...] = ()

    @property
    def centres(self) -> int:
        """The bits of the centres, which a mirror turns."""
        return sum(1 << n for n, unit in enumerate(self.units) if isinstance(unit, Centre))

    @property
    def moved(self) -> frozenset[int]:
        """The units that some symmetry moves or turns, or that are tied; the others are free."""
        found = {unit for one, two, _ in self.ties for unit in (one, two)}
        for move in self.moves:
            found |= {u for u, image in enumerate(move.to) if image != u or move.turned >> u & 1}
        return frozenset(found)

    def exists(self, bits: int) -> bool:
        """Whether small rings allow this combination, as far as they are judged."""
        return all((bits >> one ^ bits >> two) & 1 == odd for one, two, odd in self.ties)

    def block(self, unit: int) -> int:
        """The bits that turn together with a unit's."""
        found, queue = {unit}, [unit]
        while queue:
            here = queue.pop()
            for one, two, _ in self.ties:
                if here in (one, two):
                    queue += {one, two} - found
                    found |= {one, two}
        return sum(1 << member for member in found)

    def orbit(self, bits: int) -> Iterator[int]:
        """All sets of bits that stand for the same stereoisomer."""
        seen, queue = {bits}, [bits]
        while queue:
            here = queue.pop()
            yield here
            for move in self.moves:
                there = move(here)
                if there not in seen:
                    seen.add(there)
                    queue.append(there)


def moves_of(
    graph: Graph,
    units: tuple[Centre | Geometry, ...],
    atoms: tuple[tuple[int, ...], ...],
    *,
    exact: bool = True,
) -> tuple[Move, ...]:
    """What the graph's symmetries (of its skeleton, where not `exact`) do to the units. A
    symmetry that does not carry units into units is left out."""
    number = {frozenset(a): n for n, a in enumerate(atoms)}
    found = []
    for symmetry in generators(graph, exact=exact):
        to, turned = [], 0
        for n, unit in enumerate(units):
            image = number.get(frozenset(symmetry[a] for a in atoms[n]))
            same = None if image is None else alike(unit, units[image], symmetry)
            if image is None or same is None:
                break
            to.append(image)
            turned |= (not same) << n
        else:
            if turned or to != sorted(to):
                found.append(Move(tuple(to), turned))
    return tuple(dict.fromkeys(found))


def alike(
    one: Centre | Geometry, two: Centre | Geometry, mapping: Mapping[int, int]
) -> bool | None:
    """Whether two units have one configuration under a mapping; None where they do not
    correspond."""
    if isinstance(one, Centre) and isinstance(two, Centre):
        return same_centre(one, two, dict(mapping))
    if isinstance(one, Geometry) and isinstance(two, Geometry):
        return same_geometry(one, two, dict(mapping))
    return None


def part_of(graph: Graph, within: frozenset[int] | None) -> Graph:
    """The graph of some whole components."""
    if within is None:
        return graph
    kept = tuple(a for a in graph.atoms if a in within)
    return Graph(
        kept,
        graph.element,
        graph.isotope,
        graph.charge,
        graph.hydrogens,
        {a: graph.near[a] for a in kept},
        {a: c for a, c in graph.centres.items() if a in within},
        {b: g for b, g in graph.bonds.items() if b <= within},
    )
