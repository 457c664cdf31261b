"""The letter that a notation's mark means, from the ligands' order given by hand.

A reader of chirality marks of its own, so that the cases do not rest on the structure library:
OpenSMILES 1.0, "Tetrahedral Centers"; a lone pair stands where an implicit hydrogen would stand.
"""

from __future__ import annotations

import re
from collections.abc import Sequence

_TOKEN = re.compile(
    r"\[\d*(?:[A-Z][a-z]?|[a-z]{1,2}?)(?P<mark>@{0,2})(?P<hydrogen>H?)\d?[^\]]*\]"
    r"|(?P<bond>[-=#:/\\])|(?P<open>\()|(?P<shut>\))|(?P<ring>%\d\d|\d)|[A-Zbcnops][lr]?"
)
UNWRITTEN = 0  # a hydrogen or a lone pair without an atom of its own


def marks(smiles: str) -> dict[int, tuple[str, list[int]]]:
    """For each atom, from 1, its mark ("", "@", "@@") and its neighbours in the order of the text."""
    found: dict[int, tuple[str, list[int]]] = {}
    branches: list[int] = []
    closures: dict[str, tuple[int, int]] = {}
    last = at = 0
    while at < len(smiles):
        token = _TOKEN.match(smiles, at)
        assert token, smiles[at:]
        at = token.end()
        if token["bond"]:
            continue
        if token["open"]:
            branches.append(last)
        elif token["shut"]:
            last = branches.pop()
        elif token["ring"] in closures:
            other, slot = closures.pop(token["ring"])
            found[other][1][slot] = last
            found[last][1].append(other)
        elif token["ring"]:
            closures[token["ring"]] = last, len(found[last][1])
            found[last][1].append(-1)
        else:
            atom = len(found) + 1
            found[atom] = token["mark"] or "", [last] if last else []
            if last:
                found[last][1].append(atom)
            if token["hydrogen"]:
                found[atom][1].append(UNWRITTEN)
            last = atom
    for atom, (mark, near) in found.items():
        if mark and len(near) == 3:
            near.insert(1 if near[0] < atom else 0, UNWRITTEN)
    return found


def letter(smiles: str, atom: int, order: Sequence[int]) -> str:
    """R or S of a marked atom whose ligands rank in this order, the unwritten one last."""
    mark, near = marks(smiles)[atom]
    ranked = [*order, UNWRITTEN] if len(order) == 3 else list(order)
    assert sorted(ranked) == sorted(near), (atom, ranked, near)
    places = [near.index(ligand) for ligand in ranked]
    odd = sum(a > b for i, a in enumerate(places) for b in places[i + 1 :]) % 2
    # From the first of four, "@" runs the other three anticlockwise: with the lowest one behind,
    # the three highest then run anticlockwise too.
    return "S" if (mark == "@") != bool(odd) else "R"
