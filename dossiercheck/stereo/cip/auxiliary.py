"""Ranking by stereogenic units in the branches: Rules 3 to 6 and auxiliary descriptors.

Hanson et al. 2018 and IUPAC 2013, P-92.4 to P-92.6. A unit within a branch gets its auxiliary
descriptor from the tree as it hangs from that unit, the outermost sphere first.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, replace
from itertools import groupby
from typing import Any

from dossiercheck.stereo.cip.molecule import LONE_PAIR
from dossiercheck.stereo.cip.ranking import (
    BEFORE,
    FIXED,
    Key,
    Keys,
    Order,
    Property,
    Step,
    by_constitution,
)
from dossiercheck.stereo.cip.tree import MULTIPLE, REAL, Branch, Node, Tree
from dossiercheck.stereo.cip.units import Marked

# What Rule 4b and 5 call like: the chiral descriptors in their two classes.
_CLASS = {"R": 1, "M": 1, "z": 1, "S": -1, "P": -1, "e": -1}
_GEOMETRY = {"Z": 2.0, "E": 1.0}
_CHIRAL = {**dict.fromkeys("RSMPez", 2.0), **dict.fromkeys("rsmpEZ", 1.0)}
_PSEUDO = {**dict.fromkeys("rm", 2.0), **dict.fromkeys("sp", 1.0)}


def _of(table: dict[str, float]) -> Property:
    return lambda branch: table.get(branch.node.aux, 0.0)


_PROPERTIES: dict[str, Property] = {"3": _of(_GEOMETRY), "4a": _of(_CHIRAL), "4c": _of(_PSEUDO)}


def by_everything(order: Order, hand: int = 1, favoured: int | None = None) -> Order:
    """The order after Rules 3 to 5, and Rule 6 where `favoured` names the atom whose first
    occurrence counts. `hand` -1 ranks as the mirror image would be ranked by Rule 5."""
    order = Order([list(group) for group in order.groups], list(order.steps))
    if order.unique:
        return order
    keys = Keys(_PROPERTIES)
    if order.groups[0][0].node.tree.labelled:
        for rule in ("3", "4a"):
            order.split(lambda branch, rule=rule: keys.of(branch, rule), rule)  # type: ignore[misc]
        if not order.unique:
            order.split(lambda branch: _pairs(branch, keys), "4b")
        if not order.unique:
            order.split(lambda branch: keys.of(branch, "4c"), "4c")
        if not order.unique:
            order.split(lambda branch: _likeness(branch, keys, hand, "5"), "5")
    if favoured is not None and not order.unique:
        first = _favoured(favoured)
        order.split(
            lambda branch: keys.spheres(branch, first, BEFORE["6"], "6"), "6", favoured=favoured
        )
    return order


def _favoured(atom: int) -> Property:
    return lambda branch: float(branch.node.atom == atom)


def _pairs(branch: Branch, keys: Keys) -> list[Key]:
    """Rule 4b: the descriptors of the branch as like or unlike its reference descriptor; both
    readings, the better first, where the reference could be either."""
    found = (_likeness(branch, keys, reference, "4b") for reference in _references(branch, keys))
    return sorted(found, reverse=True)


def _likeness(branch: Branch, keys: Keys, reference: int, rule: str) -> Key:
    return keys.spheres(branch, _like(reference), BEFORE[rule], f"{rule} {reference}")


def _like(reference: int) -> Property:
    """+1 for a descriptor like the reference, -1 for an unlike one, 0 for none."""
    return lambda branch: float(_CLASS.get(branch.node.aux, 0) * reference)


@dataclass(frozen=True, slots=True)
class Criterion:
    """What a rule compares at a node, in which order siblings stand, and against which reference
    descriptor (Rule 4b)."""

    value: Property
    key: Callable[[Branch], Any]
    reference: str = ""


def criteria(step: Step, high: Branch, low: Branch) -> tuple[Criterion, Criterion]:
    """The criterion by which a step of the ranking parts its two branches, for each of them."""
    keys = Keys(_PROPERTIES)
    rule = step.rule
    if rule == "1a":
        # As far as the ranking unfolded the tree, which is as far as this difference needs it.
        return (Criterion(_number, lambda branch: branch.levels),) * 2
    before = BEFORE[rule]
    if rule == "4b":
        readings = []
        for branch in (high, low):
            found = [(_likeness(branch, keys, r, rule), r) for r in _references(branch, keys)]
            readings.append(sorted(found, reverse=True))
        pairs = zip(*readings, strict=False)
        chosen = next((high_[1], low_[1]) for high_, low_ in pairs if high_[0] != low_[0])
        first, second = (_criterion(keys, _like(r), before, f"4b {r}") for r in chosen)
        return replace(first, reference=_NAMED[chosen[0]]), replace(
            second, reference=_NAMED[chosen[1]]
        )
    if rule == "5":
        one = _criterion(keys, _like(1), before, "5 1")
    elif rule == "6":
        one = _criterion(keys, _favoured(step.favoured), before, "6")
    else:
        one = _criterion(keys, {**FIXED, **_PROPERTIES}[rule], before, rule)
    return one, one


_NAMED = {1: "R", -1: "S"}


def _number(branch: Branch) -> float:
    return branch.number


def _criterion(keys: Keys, value: Property, before: tuple[str, ...], name: str) -> Criterion:
    return Criterion(
        value,
        lambda branch: (
            [keys.of(branch, rule) for rule in before],
            keys.spheres(branch, value, before, name),
        ),
    )


def _references(branch: Branch, keys: Keys) -> tuple[int, ...]:
    """The reference descriptor: that of the highest node that has one; where several share that
    rank, the one that is there more often, or both (Hanson et al. 2018, Rule 4b)."""
    ranks: list[list[Branch]] = [[branch]]
    while ranks:
        onward: list[list[Branch]] = []
        for rank in ranks:
            balance = [_CLASS[one.node.aux] for one in rank if one.node.aux in _CLASS]
            if balance:
                total = sum(balance)
                return (1,) if total > 0 else (-1,) if total < 0 else (1, -1)
            kids = [kid for one in rank for kid in one.below()]
            keyed = sorted(
                ([keys.of(kid, rule) for rule in BEFORE["4b"]], number)
                for number, kid in enumerate(kids)
            )
            keyed.reverse()
            onward.extend(
                [kids[number] for _, number in group] for _, group in groupby(keyed, lambda k: k[0])
            )
        ranks = onward
    return ()


def label_branches(
    tree: Tree,
    marked: Iterable[Marked],
    letter: Callable[[Marked, Sequence[Order]], str],
) -> None:
    """Set the auxiliary descriptor of every unit within the tree, outermost sphere first.

    `letter` reads the descriptor from the ligands of each end as constitution ranks them. Raises
    `TooLarge`.
    """
    places: dict[int, list[Node]] = {}
    for node in tree.unfold_all():
        places.setdefault(node.atom, []).append(node)
    waiting: list[tuple[int, Node, Marked, tuple[Node, ...]]] = []
    for unit in marked:
        directions = (unit.chain,) if len(unit.chain) == 1 else (unit.chain, unit.chain[::-1])
        for chain in directions:
            for node in places.get(chain[0], ()):
                nodes = _follow(node, chain)
                if nodes and node is not tree.root:
                    waiting.append((node.sphere, node, unit, nodes))
    waiting.sort(key=lambda entry: -entry[0])
    for _, batch in groupby(waiting, lambda entry: entry[0]):
        decided = []
        for _, node, unit, nodes in batch:
            ends = {end.atom: end for end in nodes}
            orders = []
            for end in unit.ends:
                ligands = ligand_branches(ends[end], unit.at(end))
                if ligands is None:
                    break
                orders.append(by_constitution(ligands))
            else:
                decided.append((node, letter(unit, orders)))
        for node, descriptor in decided:
            if descriptor:
                node.aux = descriptor
                tree.labelled = True


def _follow(node: Node, chain: Sequence[int]) -> tuple[Node, ...]:
    """The nodes of a unit that begins at `node` and goes outward; () where it does not."""
    nodes = [node]
    for atom in chain[1:]:
        step = next(
            (
                kid
                for kid in nodes[-1].below()
                if isinstance(kid, Node) and kid.atom == atom and kid.kind == REAL
            ),
            None,
        )
        if step is None:
            return ()
        nodes.append(step)
    return tuple(nodes)


def ligand_branches(node: Node, ligands: Sequence[int]) -> list[Branch] | None:
    """The branch of each ligand, seen from a node; None where one is not there. A lone pair has
    no branch and is left out: it always ranks lowest."""
    branches: list[Branch] = []
    for ligand in ligands:
        if ligand == LONE_PAIR:
            continue
        if node.parent is not None and node.parent.atom == ligand:
            branches.append(node.up())
            continue
        found = next(
            (
                kid
                for kid in node.below()
                if isinstance(kid, Node) and kid.atom == ligand and kid.kind != MULTIPLE
            ),
            None,
        )
        if found is None:
            return None
        branches.append(found)
    return branches
