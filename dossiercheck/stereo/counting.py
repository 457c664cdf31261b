"""How many stereogenic units a constitution has, and how many stereoisomers it can have."""

from __future__ import annotations

from dataclasses import dataclass

from dossiercheck.stereo.graph import Centre
from dossiercheck.stereo.possible import space_of
from dossiercheck.stereo.space import Space
from dossiercheck.stereo.structure import Structure, is_pyramidal_nitrogen
from dossiercheck.stereo.symmetry import TooSymmetric

# Units that symmetry or rings bind to each other, all whose combinations are looked at.
MOST_BOUND = 14


@dataclass(frozen=True, slots=True)
class Count:
    """Of the constitution, whatever is marked, its largest component alone (by carbon atoms, then
    by all).

    `centres` stereogenic in at least one stereoisomer (pseudoasymmetric ones included, IUPAC 2013
    P-91.2.1.1). Of them, `nitrogens` are bridgehead nitrogens held by small rings, and
    `conditional` are stereogenic in some stereoisomers only, as C3 of 2,3,4-trihydroxyglutaric
    acid is; some count either and some do not. `bonds` are stereogenic double bonds,
    `stereoisomers` those possible, `achiral` those of them that are.
    `exact` is false where the true numbers of stereoisomers may be others, and `bound` says how:
    "at most", "at least" (axes are not counted) or "about" (both); `note` says why.
    """

    centres: int
    nitrogens: int
    conditional: int
    bonds: int
    stereoisomers: int
    achiral: int
    exact: bool = True
    bound: str = ""
    note: str = ""

    @property
    def meso(self) -> int:
        """Achiral stereoisomers of a set that has chiral ones too (IUPAC Basic Terminology of
        Stereochemistry 1996, "meso-compound")."""
        return self.achiral if self.achiral < self.stereoisomers else 0

    @property
    def pairs(self) -> int:
        """Pairs of enantiomers."""
        return (self.stereoisomers - self.achiral) // 2


def stereoisomers(structure: Structure) -> Count | None:
    """Counted by enumeration up to symmetry; None where more than `MOST_BOUND` units are bound to
    each other, or the constitution is too symmetric to be searched. Centres and double bonds
    only."""
    parts = structure.components()
    main = max(parts, key=lambda part: _size(structure, part))
    try:
        space = space_of(structure, frozenset(main))
    except TooSymmetric:
        return None
    return _counted(structure, space, main, len(parts))


def _size(structure: Structure, part: tuple[int, ...]) -> tuple[int, int, int]:
    atoms = [structure.mol.GetAtomWithIdx(a) for a in part]
    carbons = sum(atom.GetSymbol() == "C" for atom in atoms)
    return carbons, sum(atom.GetAtomicNum() > 1 for atom in atoms), -part[0]


def _counted(structure: Structure, space: Space, main: tuple[int, ...], parts: int) -> Count | None:
    bound = sorted(space.moved)
    if len(bound) > MOST_BOUND:
        return None
    free = [n for n in range(len(space.units)) if n not in space.moved]
    leader: dict[int, int] = {}
    for chosen in range(1 << len(bound)):
        bits = sum(1 << unit for place, unit in enumerate(bound) if chosen >> place & 1)
        if bits not in leader and space.exists(bits):
            leader.update(dict.fromkeys(space.orbit(bits), bits))
    sometimes, always = set(free), set(free)
    for unit in bound:
        turned = [_matters(space, leader, bits, unit) for bits in sorted(set(leader.values()))]
        if any(turned):
            sometimes.add(unit)
        if all(turned):
            always.add(unit)
    mirror = space.centres & sum(1 << unit for unit in bound)
    kinds = set(leader.values())
    achiral = sum(leader[bits ^ mirror] == bits for bits in kinds)
    if any(isinstance(space.units[n], Centre) for n in free):
        achiral = 0
    centres = [n for n in sometimes if isinstance(space.units[n], Centre)]
    axes = bool(structure.axis_atoms & set(main))
    notes = [space.unsure]
    if axes:
        notes.append("axes are not counted")
    if parts > 1:
        notes.append("the largest component alone")
    return Count(
        centres=len(centres),
        nitrogens=sum(is_pyramidal_nitrogen(structure, space.atoms[n][0]) for n in centres),
        conditional=len(set(centres) - always),
        bonds=len(sometimes) - len(centres),
        stereoisomers=len(kinds) << len(free),
        achiral=achiral << len(free),
        exact=not (space.unsure or axes),
        bound={(True, True): "about", (True, False): "at most", (False, True): "at least"}.get(
            (bool(space.unsure), axes), ""
        ),
        note="; ".join(filter(None, notes)),
    )


def _matters(space: Space, leader: dict[int, int], bits: int, unit: int) -> bool:
    """Whether a unit is stereogenic in a stereoisomer: turned round, with what rings bind to it,
    it makes another one, or the same one with the unit elsewhere.

    C1 and C5 of tropine are of the second kind: each has four different ligands although together
    they have no choice; C1 of norbornane is of neither.
    """
    block = space.block(unit)
    goal = bits ^ block
    if leader[goal] != leader[bits]:
        return True
    if block == 1 << unit:
        return False
    seen, queue = {(bits, unit)}, [(bits, unit)]
    while queue:
        here, place = queue.pop()
        for move in space.moves:
            there = move(here), move.to[place]
            if there not in seen:
                seen.add(there)
                queue.append(there)
    return (goal, unit) not in seen
