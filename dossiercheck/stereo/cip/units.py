"""Stereogenic units as marked: which ligands, and how they stand in space."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

CENTRE, DOUBLE_BOND, AXIS, HELIX = "centre", "double bond", "axis", "helix"


@dataclass(frozen=True, slots=True)
class Marked:
    """A unit with a configuration.

    `chain` is the atom of a centre, or the atoms from one end of a double bond, cumulene, axis or
    helix to the other. `ligands` are atoms, HYDROGEN or LONE_PAIR: the four of a centre; two at
    each end of the others, near end first. `sign`: for a centre, an axis and a helix +1 where,
    seen from the first ligand, the others follow counter-clockwise; for a double bond +1 where
    the first ligands of both ends stand on one side.
    """

    kind: str
    chain: tuple[int, ...]
    ligands: tuple[int, ...]
    sign: int

    @property
    def ends(self) -> tuple[int, ...]:
        """The atom of a centre, the two end atoms of another unit."""
        return self.chain if len(self.chain) == 1 else (self.chain[0], self.chain[-1])

    def at(self, end: int) -> tuple[int, ...]:
        """The ligands at one end."""
        if len(self.chain) == 1:
            return self.ligands
        return self.ligands[:2] if end == self.chain[0] else self.ligands[2:]


def parity(order: Sequence[int], of: Sequence[int]) -> int:
    """+1 where `order` is an even permutation of `of`, -1 where it is odd."""
    places = [of.index(item) for item in order]
    odd = sum(
        places[one] > places[two]
        for one in range(len(places))
        for two in range(one + 1, len(places))
    )
    return -1 if odd % 2 else 1
