"""Descriptors of all marked units of a molecule, by the engine's own computation."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from dossiercheck.stereo.cip.auxiliary import by_everything, label_branches, ligand_branches
from dossiercheck.stereo.cip.molecule import LONE_PAIR, Molecule
from dossiercheck.stereo.cip.ranking import Order, by_constitution
from dossiercheck.stereo.cip.source import Source
from dossiercheck.stereo.cip.tree import Branch, TooLarge, Tree
from dossiercheck.stereo.cip.units import CENTRE, DOUBLE_BOND, HELIX, Marked, parity

# Steps (branches unfolded or ranked) of one tree, and of all trees of a molecule: about one second
# and three. The hardest compound of the published suite takes 94,000 and 254,000. What needs more
# is given up and its unit left undetermined.
BUDGET = 200_000
MOLECULE_BUDGET = 600_000


@dataclass(slots=True)
class Ranked:
    """A unit with its letter ("" where it is not stereogenic) and the ranking that gives it.

    `orders` has one order for a centre, one for each end of another unit; `doubt` says why there
    is no letter where the computation was given up.
    """

    unit: Marked
    descriptor: str = ""
    orders: list[Order] = field(default_factory=list)
    trees: list[Tree] = field(default_factory=list)
    doubt: str = ""


def rank_all(source: Source, budget: int = BUDGET) -> list[Ranked]:
    """The descriptor of each marked unit, by Rules 1 and 2 where they suffice, else by all.

    Where the ranking rests on other units and one of them is unclear, so is the descriptor.
    """
    found = []
    left = max(budget, MOLECULE_BUDGET)
    for unit in source.marked:
        allowed = min(budget, left)
        result = _rank(source.molecule, unit, source.marked, allowed)
        left -= sum(allowed - max(tree.left, 0) for tree in result.trees)
        if source.unclear and not _rests_on_constitution(result):
            result.descriptor = ""
            result.doubt = "its ranking depends on a unit that is not clear"
        found.append(result)
    return found


def _rests_on_constitution(result: Ranked) -> bool:
    return _unique(result.orders) and all(
        step.rule in ("1a", "1b", "2") for order in result.orders for step in order.steps
    )


def _rank(molecule: Molecule, unit: Marked, marked: Sequence[Marked], budget: int) -> Ranked:
    result = Ranked(unit)
    if unit.kind == HELIX:
        result.descriptor = "P" if unit.sign > 0 else "M"
        return result
    try:
        for end in unit.ends:
            tree = Tree(molecule, end, budget)
            ligands = ligand_branches(tree.root, unit.at(end))
            if ligands is None:
                return result
            result.trees.append(tree)
            result.orders.append(by_constitution(ligands))
        if _unique(result.orders):
            result.descriptor = letter(unit, result.orders)
        else:
            _rank_further(result, marked)
    except (TooLarge, RecursionError):
        result.doubt = "its digraph takes more steps than the budget allows"
    return result


def _unique(orders: Sequence[Order]) -> bool:
    return all(order.unique for order in orders)


def _rank_further(result: Ranked, marked: Sequence[Marked]) -> None:
    """Rules 3 to 6."""
    if len(marked) > 1:
        for tree, order in zip(result.trees, result.orders, strict=True):
            if not order.unique:
                label_branches(tree, marked, _auxiliary)
    result.descriptor, result.orders = _by_all(result.unit, result.orders)


def _by_all(unit: Marked, orders: Sequence[Order]) -> tuple[str, list[Order]]:
    """Letter and ranking by Rules 3 to 5, and where ligands still tie by Rule 6: one of them is
    favoured, and the letter counts where every choice among them gives the same one (Hanson et
    al. 2018, Rule 6)."""
    found, ranked = _by_stereo(unit, orders)
    if _unique(ranked) or not _may_decide(ranked):
        return found, ranked
    tied = next(group for order in ranked for group in order.groups if len(group) > 1)
    outcomes = [_by_stereo(unit, ranked, each.node.atom) for each in tied]
    if len({descriptor for descriptor, _ in outcomes}) == 1:
        return outcomes[0]
    return found, ranked


def _may_decide(orders: Sequence[Order]) -> bool:
    """Whether Rule 6 can part the ligands: two that tie alone could be exchanged, and then every
    choice has its mirror image; and a favoured ligand is met again only through a ring."""
    tied = [len(group) for order in orders for group in order.groups if len(group) > 1]
    if tied == [2]:
        return False
    branches = (b for order in orders for g in order.groups if len(g) > 1 for b in g)
    return all(_in_ring(branch) for branch in branches)


def _in_ring(branch: Branch) -> bool:
    node = branch.node
    if branch is not node:
        return True
    return node.atom >= 0 and node.tree.molecule.in_ring(node.atom, node.parent_atom)


def _by_stereo(
    unit: Marked, orders: Sequence[Order], favoured: int | None = None
) -> tuple[str, list[Order]]:
    """Letter and ranking by Rules 3 to 6 on top of `orders`; "" where two ligands still tie.

    Where Rule 5 had a say, the mirror image is ranked as well: a unit that is its own mirror image
    gets a small letter, and so does a double bond that is not (IUPAC 2013, P-92.6, P-93.4.2.1.3).
    """
    ranked = [by_everything(order, favoured=favoured) for order in orders]
    found = letter(unit, ranked)
    if found and any(step.rule == "5" for order in ranked for step in order.steps):
        mirrored = [by_everything(order, hand=-1, favoured=favoured) for order in orders]
        image = letter(unit, mirrored, mirror=unit.kind != DOUBLE_BOND)
        if (image == found) != (unit.kind == DOUBLE_BOND):
            found = found.lower()
    return found, ranked


def _auxiliary(unit: Marked, orders: Sequence[Order]) -> str:
    return letter(unit, orders) if _unique(orders) else _by_all(unit, orders)[0]


def letter(unit: Marked, orders: Sequence[Order], mirror: bool = False) -> str:
    """The capital letter that the ranks give the unit, or its mirror image; "" where two tie."""
    if not _unique(orders):
        return ""
    ranked: list[int] = []
    for end, order in zip(unit.ends, orders, strict=True):
        present = unit.at(end)
        ranks = [branch.node.atom for branch in order.ranked]
        ranked += [*ranks, LONE_PAIR] if LONE_PAIR in present else ranks
    sign = -unit.sign if mirror else unit.sign
    if unit.kind == CENTRE:
        return "S" if sign * parity(ranked, unit.ligands) > 0 else "R"
    for number in (0, 2):
        if ranked[number] != unit.ligands[number]:
            sign = -sign
    if unit.kind == DOUBLE_BOND:
        return "Z" if sign > 0 else "E"
    return "P" if sign > 0 else "M"
