"""Branches ranked by the Sequence Rules, in their order, each over the whole tree before the next.

A branch's key under a rule is the list of its spheres, each a list of sets, one for each atom of
the sphere before; sets and spheres stand in order of rank, so that two keys compare as the rule
does (IUPAC 2013, P-92.1.4.2: sphere by sphere, and within a sphere the sets in order).
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from functools import partial
from itertools import pairwise

from dossiercheck.stereo.cip.tree import MULTIPLE, REAL, Branch, Level

Key = list[Level]
Property = Callable[[Branch], float]


@dataclass(frozen=True, slots=True)
class Step:
    """Why one ligand ranks above the next: the rule, the sphere counted from the root, and under
    Rule 6 the atom that was favoured."""

    rule: str
    depth: int
    favoured: int = -1


@dataclass(slots=True)
class Order:
    """Ligands from highest rank to lowest in groups that no rule parts; `steps[i]` parts group i
    from group i + 1."""

    groups: list[list[Branch]]
    steps: list[Step]

    @property
    def unique(self) -> bool:
        """Whether every ligand has its own rank."""
        return all(len(group) == 1 for group in self.groups)

    @property
    def ranked(self) -> list[Branch]:
        """The ligands in order, where the ranks are unique."""
        return [branch for group in self.groups for branch in group]

    def split(
        self, keyed: Callable[[Branch], object], rule: str, depth: int = 0, favoured: int = -1
    ) -> None:
        """Part each group by a key, higher first."""
        groups: list[list[Branch]] = []
        steps: list[Step] = []
        for number, group in enumerate(self.groups):
            if number:
                steps.append(self.steps[number - 1])
            if len(group) == 1:
                groups.append(group)
                continue
            keys = {id(branch): keyed(branch) for branch in group}
            ordered = sorted(group, key=lambda branch: keys[id(branch)], reverse=True)  # type: ignore[arg-type,return-value]
            parts = [[ordered[0]]]
            for above, branch in pairwise(ordered):
                high, low = keys[id(above)], keys[id(branch)]
                if high == low:
                    parts[-1].append(branch)
                else:
                    parts.append([branch])
                    steps.append(Step(rule, depth or first_difference(high, low), favoured))
            groups.extend(parts)
        self.groups, self.steps = groups, steps


def first_difference(high: object, low: object) -> int:
    """The sphere, counted from the root, in which two keys first differ; 1 for plain values."""
    if not isinstance(high, list) or not isinstance(low, list):
        return 1
    pairs = enumerate(zip(high, low, strict=False), 1)
    return next((number for number, (one, two) in pairs if one != two), min(len(high), len(low)))


RULES = ("1a", "1b", "2", "3", "4a", "4b", "4c", "5", "6")
# What siblings are in order of when a rule is applied. Rule 4b parts whole ligands, by a reference
# that belongs to the ligand; within one it has none.
BEFORE = {
    rule: tuple(earlier for earlier in RULES[:number] if earlier not in ("4b", "5"))
    for number, rule in enumerate(RULES)
}


def by_constitution(ligands: Iterable[Branch]) -> Order:
    """Rank by atomic number (1a), root distance of duplicates (1b) and mass (2)."""
    order = Order([list(ligands)], [])
    _by_number(order)
    if order.unique:
        return order
    keys = Keys({})
    order.split(lambda branch: keys.of(branch, "1b"), "1b")
    if not order.unique and any(order.groups[0][0].node.tree.molecule.isotope):
        order.split(lambda branch: keys.of(branch, "2"), "2")
    return order


def _by_number(order: Order) -> None:
    """Rule 1a, unfolding the tree only as far as the ligands tie."""
    depth = 0
    while True:
        tied = [branch for group in order.groups if len(group) > 1 for branch in group]
        if not tied:
            return
        for branch in tied:
            extend(branch, depth)
        if all(len(branch.levels) <= depth for branch in tied):
            return
        order.split(partial(_sphere, depth), "1a", depth + 1)
        depth += 1


def _sphere(depth: int, branch: Branch) -> Level:
    return branch.levels[depth] if len(branch.levels) > depth else ()


def extend(branch: Branch, depth: int) -> None:
    """Fill the branch's spheres of atomic numbers up to `depth`, if it reaches so far."""
    levels = branch.levels
    while len(levels) <= depth and not branch.whole:
        kids = branch.kids if branch.kids is not None else branch.below()
        level = len(levels)
        if level == 1:
            if len(kids) > 1:
                kids.sort(key=_number, reverse=True)
            levels.append((tuple([kid.number for kid in kids]),))
            continue
        branch.node.tree.spend(len(kids))
        below = level - 1
        tall = [kid for kid in kids if not kid.whole or len(kid.levels) > below]
        for kid in tall:
            if len(kid.levels) <= below:
                extend(kid, below)
        if len(tall) > 1:
            kids.sort(key=_levels, reverse=True)
        sets: Level = ()
        for kid in kids:
            if len(kid.levels) > below:
                sets += kid.levels[below]
        if sets:
            levels.append(sets)
        else:
            branch.whole = True


def _number(branch: Branch) -> float:
    return branch.number


def _levels(branch: Branch) -> list[Level]:
    return branch.levels


class Keys:
    """Keys of branches under each rule, each worked out once.

    Keys under Rules 1a, 1b and 2 belong to the tree and are kept there; those under later rules
    hold as long as its auxiliary descriptors do not change, and go with this object.
    """

    def __init__(self, properties: dict[str, Property]) -> None:
        """`properties` gives what each of the later rules compares at a node."""
        self._properties = {**FIXED, **properties}
        self._known: dict[tuple[int, str], Key] = {}

    def of(self, branch: Branch, rule: str) -> Key:
        """The key of a branch under a rule, ties in the rules before it taken as given."""
        if rule == "1a":
            extend(branch, 1 << 30)
            return branch.levels
        return self.spheres(branch, self._properties[rule], BEFORE[rule], rule)

    def spheres(self, branch: Branch, prop: Property, before: tuple[str, ...], name: str) -> Key:
        """The spheres of a property: siblings in order of the rules before, then of itself."""
        known = branch.node.tree.keys if name in FIXED else self._known
        label = (id(branch), name)
        found = known.get(label)
        if found is not None:
            return found
        branch.node.tree.spend(len(branch.below()) + 1)
        levels: Key = [((prop(branch),),)]
        keyed = [
            ([self.of(kid, rule) for rule in before], self.spheres(kid, prop, before, name))
            for kid in branch.below()
        ]
        if len(keyed) > 1:
            keyed.sort(reverse=True)
        levels.append((tuple([own[0][0][0] for _, own in keyed]),))
        for depth in range(1, max((len(own) for _, own in keyed), default=0)):
            sets: Level = ()
            for _, own in keyed:
                if len(own) > depth:
                    sets += own[depth]
            levels.append(sets)
        known[label] = levels
        return levels


def _nearness(branch: Branch) -> float:
    """Rule 1b: of two duplicates the one whose root distance is smaller ranks higher."""
    node = branch.node
    if branch is not node or node.kind == REAL:
        return -1000.0
    return float(-node.nearness)


def _mass(branch: Branch) -> float:
    """Rule 2; a duplicate repeats its atom's mass."""
    node = branch.node
    if node.kind == MULTIPLE and node.number != node.tree.molecule.number[node.atom]:
        return 0.0
    return node.tree.molecule.mass(node.atom)


FIXED: dict[str, Property] = {"1b": _nearness, "2": _mass}
