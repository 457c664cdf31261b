"""Why a unit has its letter: the first point of difference between neighbours in rank."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from dossiercheck.stereo.cip.auxiliary import Criterion, criteria
from dossiercheck.stereo.cip.engine import Ranked
from dossiercheck.stereo.cip.molecule import LONE_PAIR, Molecule
from dossiercheck.stereo.cip.ranking import Order, Step
from dossiercheck.stereo.cip.tree import REAL, Branch

RANKS = "abcd"


@dataclass(frozen=True, slots=True)
class Entry:
    """One atom of a set. `atom` is 1-based, 0 for a hydrogen that is not drawn; `value` is what
    the rule compares: atomic number, root distance, mass, or a descriptor's place in the rule."""

    atom: int
    label: str
    value: float
    duplicate: bool = False
    descriptor: str = ""


@dataclass(frozen=True, slots=True)
class Side:
    """One ligand's side of a comparison: `path` leads from the unit to the atom whose set it is,
    1-based, the unit's own atom first."""

    ligand: int
    path: tuple[int, ...]
    entries: tuple[Entry, ...]


@dataclass(frozen=True, slots=True)
class Comparison:
    """Why `higher` ranks above `lower`: the sequence rule, and the sphere of the first difference.

    For Rule 4b the sets are those of like and unlike pairs with the reference descriptor of each
    side's own branch; `reference` names that of the higher one.
    """

    rule: str
    sphere: int
    higher: Side
    lower: Side
    reference: str = ""


@dataclass(frozen=True, slots=True)
class Rank:
    """A ligand and its rank letter, a the highest; `end` is the unit's atom it hangs from."""

    ligand: int
    label: str
    rank: str
    end: int


@dataclass(frozen=True, slots=True)
class Derivation:
    """The ranked ligands and each comparison between neighbours in rank."""

    ranks: tuple[Rank, ...]
    comparisons: tuple[Comparison, ...]


def derive(molecule: Molecule, ranked: Ranked) -> Derivation:
    """The derivation of one unit that has a letter (or that ties: then as far as it goes)."""
    ranks: list[Rank] = []
    comparisons: list[Comparison] = []
    for end, order in zip(ranked.unit.ends, ranked.orders, strict=False):
        letters = iter(RANKS)
        for group in order.groups:
            letter = next(letters)
            for branch in group:
                atom = branch.node.atom
                ranks.append(Rank(_position(atom), molecule.name(atom), letter, end + 1))
        if LONE_PAIR in ranked.unit.at(end):
            ranks.append(Rank(0, "lone pair", next(letters), end + 1))
        comparisons += _comparisons(molecule, order, end)
    return Derivation(tuple(ranks), tuple(comparisons))


def _comparisons(molecule: Molecule, order: Order, end: int) -> Iterator[Comparison]:
    for number, step in enumerate(order.steps):
        high, low = order.groups[number][0], order.groups[number + 1][0]
        yield _first_difference(molecule, step, high, low, end)


def _first_difference(
    molecule: Molecule, step: Step, high: Branch, low: Branch, end: int
) -> Comparison:
    """The first set in which two branches differ under the rule that parts them."""
    upper, lower = criteria(step, high, low)
    spheres = zip(_sets(high, upper), _sets(low, lower), strict=False)
    for depth, (above, below) in enumerate(spheres, 1):
        for one, two in zip(above, below, strict=False):
            if [upper.value(b) for b in one.members] != [lower.value(b) for b in two.members]:
                return Comparison(
                    step.rule,
                    depth,
                    _side(molecule, high, end, one, upper),
                    _side(molecule, low, end, two, lower),
                    upper.reference,
                )
    raise AssertionError("a step of the ranking has no difference")


@dataclass(frozen=True, slots=True)
class _Set:
    """The atoms attached to one atom; `path` leads to it within the branch."""

    path: tuple[Branch, ...]
    members: tuple[Branch, ...]


def _sets(branch: Branch, criterion: Criterion) -> Iterator[list[_Set]]:
    """The sets of each sphere in order of rank, the ligand itself first."""
    sphere = [_Set((), (branch,))]
    while sphere:
        yield sphere
        sphere = [
            _Set(
                (*group.path, member),
                tuple(sorted(_atoms_first(member), key=criterion.key, reverse=True)),
            )
            for group in sphere
            for member in group.members
        ]
        if not any(group.members for group in sphere):
            yield sphere
            return


def _atoms_first(branch: Branch) -> list[Branch]:
    """What hangs from a branch, duplicates last: sorting keeps that order where ranks are equal."""
    return sorted(branch.below(), key=lambda kid: kid is kid.node and kid.node.kind != REAL)


def _side(molecule: Molecule, branch: Branch, end: int, group: _Set, by: Criterion) -> Side:
    entries = tuple(_entry(molecule, member, by) for member in group.members)
    path = (end + 1, *(_position(member.node.atom) for member in group.path))
    return Side(_position(branch.node.atom), path, entries)


def _entry(molecule: Molecule, branch: Branch, by: Criterion) -> Entry:
    node = branch.node
    return Entry(
        atom=_position(node.atom),
        label=molecule.name(node.atom),
        value=by.value(branch),
        duplicate=branch is node and node.kind != REAL,
        descriptor=node.aux,
    )


def _position(atom: int) -> int:
    return atom + 1 if atom >= 0 else 0
