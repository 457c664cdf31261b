"""A notation written again from another atom and along other ways, without any library.

OpenSMILES specification: neighbours of a marked atom count in written order, an implicit hydrogen
or a lone pair right after the atom before; the slash of a bond is read in the direction of writing.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from random import Random

_TOKEN = re.compile(
    r"(?P<atom>\[[^\]]*\]|Br|Cl|[BCNOPSFIbcnops])|(?P<bond>[-=#:/\\])|(?P<shut>\))|(?P<open>\()"
    r"|(?P<ring>%\d\d|\d)"
)
_UNWRITTEN = -1
_TURNED = {"/": "\\", "\\": "/"}


@dataclass(slots=True)
class Graph:
    """Atom tokens; each atom's neighbours as written; bond tokens by direction."""

    atoms: list[str] = field(default_factory=list)
    near: list[list[int]] = field(default_factory=list)
    bonds: dict[tuple[int, int], str] = field(default_factory=dict)

    def join(self, one: int, two: int, bond: str) -> None:
        """Set a bond; of the two tokens of a ring closure one may be empty."""
        bond = bond or self.bonds.get((one, two), "")
        self.bonds[one, two], self.bonds[two, one] = bond, _TURNED.get(bond, bond)


def read(smiles: str) -> Graph:
    """One connected molecule. Raises ValueError for a character it does not know."""
    graph = Graph()
    stack: list[int] = []
    rings: dict[str, tuple[int, int, str]] = {}
    here, bond, at = -1, "", 0
    while at < len(smiles):
        token = _TOKEN.match(smiles, at)
        if token is None:
            raise ValueError(f"not understood: {smiles[at:]}")
        at = token.end()
        if token["bond"]:
            bond = token["bond"]
            continue
        if token["open"]:
            stack.append(here)
        elif token["shut"]:
            here = stack.pop()
        elif token["ring"] and token["ring"] in rings:
            other, slot, opened = rings.pop(token["ring"])
            graph.near[other][slot] = here
            graph.near[here].append(other)
            graph.join(other, here, opened)
            graph.join(here, other, bond)
        elif token["ring"]:
            rings[token["ring"]] = here, len(graph.near[here]), bond
            graph.near[here].append(_UNWRITTEN)
        else:
            atom = len(graph.atoms)
            graph.atoms.append(token["atom"])
            graph.near.append([here] if here >= 0 else [])
            if here >= 0:
                graph.near[here].append(atom)
                graph.join(here, atom, bond)
            here = atom
        bond = ""
    return graph


def rewritten(smiles: str, random: Random) -> tuple[str, list[int]]:
    """The same molecule from another atom; `order[k]` is the old number of its atom k."""
    old = read(smiles)
    start = random.randrange(len(old.atoms))
    children: dict[int, list[int]] = {}
    closures: dict[int, list[int]] = {atom: [] for atom in range(len(old.atoms))}
    order: list[int] = []

    def visit(atom: int, parent: int) -> None:
        order.append(atom)
        children[atom] = []
        rest = [other for other in old.near[atom] if other != parent]
        random.shuffle(rest)
        for other in rest:
            if other in children:
                if atom not in closures[other]:
                    closures[other].append(atom)
                    closures[atom].append(other)
            else:
                children[atom].append(other)
                visit(other, atom)

    visit(start, -1)
    before = {kid: [atom] for atom, kids in children.items() for kid in kids}
    near = [[*before.get(a, []), *closures[a], *children[a]] for a in range(len(old.atoms))]
    new = Graph(old.atoms, near, old.bonds)
    first = {atom: place for place, atom in enumerate(order)}
    numbers: dict[frozenset[int], int] = {}

    def text(atom: int) -> str:
        parts = [_marked(atom, old, new, first)]
        for other in closures[atom]:
            pair = frozenset((atom, other))
            opened = pair in numbers
            number = numbers.setdefault(pair, len(numbers) + 1)
            label = str(number) if number < 10 else f"%{number}"
            parts.append(label if opened else old.bonds[atom, other] + label)
        branches = [old.bonds[atom, kid] + text(kid) for kid in children[atom]]
        parts += [f"({branch})" for branch in branches[:-1]]
        return "".join([*parts, *branches[-1:]])

    return text(start), order


def _marked(atom: int, old: Graph, new: Graph, first: dict[int, int]) -> str:
    token = old.atoms[atom]
    if "@" not in token:
        return token
    before = _around(atom, old, {a: a for a in range(len(old.atoms))})
    after = _around(atom, new, first)
    places = [before.index(item) for item in after]
    odd = sum(a > b for i, a in enumerate(places) for b in places[i + 1 :]) % 2
    if not odd:
        return token
    return token.replace("@@", "@") if "@@" in token else token.replace("@", "@@")


def _around(atom: int, graph: Graph, first: dict[int, int]) -> list[tuple[int, int]]:
    """What the mark is about, in order: (end, ligand), the end being the atom of a centre."""
    near = graph.near[atom]
    if len(near) > 2:
        return [(atom, other) for other in _filled(atom, graph, first, 4)]
    ends = []
    for begin in near:
        before, here = atom, begin
        while len(graph.near[here]) == 2 and all(
            graph.bonds[here, other] == "=" for other in graph.near[here]
        ):
            before, here = here, next(a for a in graph.near[here] if a != before)
        ends += [(here, a) for a in _filled(here, graph, first, 3) if a != before]
    return ends


def _filled(atom: int, graph: Graph, first: dict[int, int], count: int) -> list[int]:
    near = list(graph.near[atom])
    if len(near) == count - 1:
        near.insert(1 if first[near[0]] < first[atom] else 0, _UNWRITTEN)
    return near
