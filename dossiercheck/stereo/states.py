"""What a structure says of its units, as sets of bits: one configuration, several that are
possible, or a mixture."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from dossiercheck.stereo.descriptors import described
from dossiercheck.stereo.graph import Centre, Graph
from dossiercheck.stereo.space import Space, alike
from dossiercheck.stereo.structure import Structure
from dossiercheck.stereo.symmetry import TooSymmetric

# Units left open and "or" groups: more alternatives are not gone through.
MOST_OPEN = 8
# Sets of bits in one orbit.
MOST_ORBIT = 20_000

Mixture = frozenset[int]


@dataclass(frozen=True, slots=True)
class State:
    """`bits` of the units, those in `open` not known; `together` and `either` are the bits that
    an "and" and an "or" group turn as one. `axes`: an axis or helix is marked; `axial`: there may
    be one; `ignored`: a unit that the space leaves out is marked; `strange`: any other unit is.
    `imines` has +1, -1 or, where it is silent, 0 for each C=N–H. `doubts` say why a marked unit
    is open all the same."""

    bits: int
    open: int
    together: tuple[int, ...]
    either: tuple[int, ...]
    axes: bool
    axial: bool
    ignored: bool
    strange: bool
    imines: tuple[int, ...]
    doubts: tuple[str, ...]


def state_of(structure: Structure, graph: Graph, space: Space, mapping: Mapping[int, int]) -> State:
    """What `structure` says of the units of `space`, laid on it by `mapping` (from the space's
    atoms); `graph` is the structure's own. A unit that two computations describe differently is
    open."""
    twice = described(structure)
    bits = unknown = 0
    doubts = []
    images = [tuple(mapping[atom] for atom in atoms) for atoms in space.atoms]
    for number, (unit, image) in enumerate(zip(space.units, images, strict=True)):
        found = (
            graph.centres.get(image[0])
            if isinstance(unit, Centre)
            else graph.bonds.get(frozenset(image))
        )
        same = None if found is None else alike(unit, found, mapping)
        one = twice.get(tuple(sorted(image)))
        if one is not None and not one.certain:
            same = None
            doubts.append(one.note)
        if same is None:
            unknown |= 1 << number
        elif not same:
            bits |= 1 << number
    groups: dict[str, list[int]] = {"and": [], "or": []}
    for group in structure.groups:
        mask = sum(
            1 << number
            for number, image in enumerate(images)
            if len(image) == 1 and image[0] in group.atoms
        )
        if mask:
            groups[group.kind].append(mask)
    imines = []
    for imine in space.imines:
        shown = graph.bonds.get(frozenset(mapping[end] for end in imine.ends))
        same = None if shown is None else alike(imine, shown, mapping)
        imines.append(0 if same is None else 1 if same else -1)
    known = {frozenset(image) for image in images}
    outside = [*space.left_out, *(imine.ends for imine in space.imines)]
    left_out = {frozenset(mapping[atom] for atom in atoms) for atoms in outside}
    covered = set(mapping.values())
    described_units = [one for one in twice.values() if set(one.atoms) <= covered]
    marked = {frozenset(one.atoms) for one in described_units if one.ours or one.library}
    axes = {
        frozenset(one.atoms)
        for one in described_units
        if one.kind not in ("centre", "double bond") and (one.ours or one.note)
    }
    return State(
        bits,
        unknown,
        tuple(groups["and"]),
        tuple(groups["or"]),
        bool(axes),
        bool(structure.axis_atoms & covered),
        bool(marked & left_out),
        bool(marked - known - left_out - axes),
        tuple(imines),
        tuple(dict.fromkeys(filter(None, doubts))),
    )


def alternatives(state: State, space: Space) -> dict[Mixture, list[int]] | None:
    """The mixtures (of orbits, each by its smallest member; one member for a single compound)
    that the structure may stand for, and the bits from which each came. None where there are too
    many. Raises `TooSymmetric`."""
    unknown = [1 << n for n in range(len(space.units)) if state.open >> n & 1]
    turns = [*unknown, *state.either]
    if len(turns) > MOST_OPEN or len(state.together) > MOST_OPEN:
        return None
    every = list(_turned(state.bits, turns))
    # What small rings forbid is no alternative; a drawing that says so all the same stands.
    possible = [bits for bits in every if space.exists(bits)] or every
    found: dict[Mixture, list[int]] = {}
    for bits in possible:
        mixture = frozenset(leader(space, one) for one in _turned(bits, list(state.together)))
        found.setdefault(mixture, []).append(bits)
    return found


def leader(space: Space, bits: int) -> int:
    """The smallest member of an orbit. Raises `TooSymmetric` where it is too large."""
    return min(orbit(space, bits))


def orbit(space: Space, bits: int) -> list[int]:
    """The members of an orbit. Raises `TooSymmetric` where there are too many."""
    found = []
    for member in space.orbit(bits):
        found.append(member)
        if len(found) > MOST_ORBIT:
            raise TooSymmetric
    return found


def _turned(bits: int, masks: list[int]) -> Iterator[int]:
    for chosen in range(1 << len(masks)):
        turned = bits
        for place, mask in enumerate(masks):
            if chosen >> place & 1:
                turned ^= mask
        yield turned
