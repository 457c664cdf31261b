"""The hierarchical digraph: every path from a root, unfolded into a tree with duplicate atoms.

IUPAC 2013, P-92.1.4. A branch is a directed edge of that tree: downward it is the node it leads
to, upward (needed when an auxiliary descriptor is worked out) it is the rest of the tree.
"""

from __future__ import annotations

from dossiercheck.stereo.cip.molecule import HYDROGEN, Molecule

REAL, RING, MULTIPLE = 0, 1, 2  # an atom, a ring-closure duplicate, a multiple-bond duplicate

Level = tuple[tuple[float, ...], ...]


class TooLarge(Exception):
    """The tree takes more steps to unfold and to rank than the budget allows."""


class Branch:
    """What lies behind one directed edge of the tree.

    `levels[i]` holds the sets of atomic numbers in the i-th sphere of the branch, one set for each
    atom of the sphere before, all in order of rank; `whole` is true when no sphere is left out.
    """

    __slots__ = ("kids", "levels", "node", "number", "whole")

    node: Node
    number: float
    kids: list[Branch] | None
    levels: list[Level]
    whole: bool

    def below(self) -> list[Branch]:
        """The branches that go on from here."""
        raise NotImplementedError


class Node(Branch):
    """A node of the tree, which is also the branch that leads to it from its parent.

    `sphere` counts from the root (0); `nearness` is what Rule 1b compares: the sphere of the atom
    that a ring closure repeats, of the atom to which a multiple bond's duplicate is attached, or
    the node's own.
    """

    sphere: int
    path: int

    __slots__ = ("atom", "aux", "kind", "nearness", "parent", "path", "sphere", "tree", "upward")

    def __init__(
        self, tree: Tree, atom: int, parent: Node | None, kind: int, number: float, nearness: int
    ) -> None:
        """Use `Tree.root` and `below` instead."""
        self.tree = tree
        self.atom = atom
        self.parent = parent
        self.kind = kind
        self.number = number
        self.nearness = nearness
        self.node = self
        self.aux = ""
        self.kids = None if kind == REAL and atom >= 0 else []
        self.levels = [((number,),)]
        self.whole = False
        self.upward: Upward | None = None
        self.sphere = parent.sphere + 1 if parent else 0
        self.path = (parent.path if parent else 0) | (1 << atom if atom >= 0 else 0)

    def below(self) -> list[Branch]:
        """Children, made when first asked for; raises `TooLarge`."""
        if self.kids is None:
            self.kids = self.tree.unfold(self)
        return self.kids

    @property
    def parent_atom(self) -> int:
        """The atom this node hangs from, -1 at the root."""
        return self.parent.atom if self.parent else -1

    def up(self) -> Branch:
        """The branch that leads from here back towards the root."""
        if self.upward is None:
            self.upward = Upward(self)
        return self.upward


class Upward(Branch):
    """The branch from a node to its parent, with everything beyond."""

    __slots__ = ("via",)

    def __init__(self, via: Node) -> None:
        """The branch from `via` upward."""
        assert via.parent is not None
        self.via = via
        self.node = via.parent
        self.number = float(via.tree.molecule.number[self.node.atom])
        self.kids = None
        self.levels = [((self.number,),)]
        self.whole = False

    def below(self) -> list[Branch]:
        """The siblings of the node this came from, and the way further up."""
        if self.kids is None:
            self.kids = [branch for branch in self.node.below() if branch is not self.via]
            if self.node.parent is not None:
                self.kids.append(self.node.up())
        return self.kids


class Tree:
    """The digraph of one root atom, unfolded as far as it is looked at."""

    def __init__(self, molecule: Molecule, root: int, budget: int) -> None:
        """`budget` bounds the steps, one for each branch unfolded or ranked; `labelled` is set
        once a node has an auxiliary descriptor."""
        self.molecule = molecule
        self.left = budget
        self.labelled = False
        self.keys: dict[tuple[int, str], list[Level]] = {}
        self.root = Node(self, root, None, REAL, float(molecule.number[root]), 0)

    def unfold(self, node: Node) -> list[Branch]:
        """The children of a node that stands for an atom."""
        molecule, atom, path = self.molecule, node.atom, node.path
        parent = node.parent.atom if node.parent else -1
        sphere = node.sphere
        mean = molecule.duplicate[atom]
        kids: list[Branch] = []
        add = kids.append
        for other, order in molecule.near[atom].items():
            number = molecule.number[other]
            if other != parent:
                if path >> other & 1:
                    add(Node(self, other, node, RING, number, self._sphere_of(node, other)))
                else:
                    add(Node(self, other, node, REAL, number, sphere + 1))
            if mean and molecule.in_ring(atom, other):
                continue
            for _ in range(order - 1):
                add(Node(self, other, node, MULTIPLE, number, sphere))
        if mean:
            add(Node(self, atom, node, MULTIPLE, mean, sphere))
        for _ in range(molecule.hydrogens[atom]):
            add(Node(self, HYDROGEN, node, REAL, 1, sphere + 1))
        self.spend(len(kids))
        return kids

    def spend(self, steps: int) -> None:
        """Take steps from the budget; raises `TooLarge` when there are none left."""
        self.left -= steps
        if self.left < 0:
            raise TooLarge

    @staticmethod
    def _sphere_of(node: Node, atom: int) -> int:
        """The sphere of the ancestor that stands for an atom."""
        at: Node | None = node
        while at is not None and at.atom != atom:
            at = at.parent
        return at.sphere if at else 0

    def unfold_all(self) -> list[Node]:
        """Every node that stands for an atom, sphere by sphere; raises `TooLarge`."""
        found = [self.root]
        for node in found:
            found.extend(
                kid
                for kid in node.below()
                if isinstance(kid, Node) and kid.kind == REAL and kid.atom >= 0
            )
        return found
