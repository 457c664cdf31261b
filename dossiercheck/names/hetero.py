"""Centres at phosphorus, sulfur and their like, which a name mostly cites without a locant.

The parser holds phosphorus with OH and =O for no centre and gives the letter printed for it to
the next centre that it finds further inside, so these letters need a look of their own.
"""

from __future__ import annotations

import re

from dossiercheck.names.descriptors import PrintedDescriptor
from dossiercheck.names.notation import Notation

# The last word of a group or class whose own centre is not carbon.
_GROUP = re.compile(
    r"(?:phosph(?:oryl|inyl|inoyl|inate|inic|onate|onic|onoyl|ate|ite|ane|anyl|onothio[a-z]*|"
    r"or[a-z]*amid[a-z]*|on[a-z]*amid[a-z]*|in[a-z]*amid[a-z]*|orothio[a-z]*)|"
    r"sulf(?:inyl|inate|inic|inamide|inamido|inamoyl|on[a-z]*imid[a-z]*|oximin[a-z]*|imid[a-z]*|"
    r"oxide)|selen(?:inyl|oxide)|sil(?:ane|yl)|germ(?:ane|yl))$",
    re.IGNORECASE,
)
_ATOM = re.compile(r"\[?\d*(?:P|S|As|Se|Si|Ge)(?![a-z])")


def speaks_of_hetero(text: str, descriptor: PrintedDescriptor) -> bool:
    """Whether a bracketed descriptor without locant stands before a group that ends in
    phosphoryl, sulfinyl or the like, so that its phosphorus or sulfur may be meant."""
    if descriptor.bracket < 0 or descriptor.locant or descriptor.family != "centre":
        return False
    depth, kept = 0, []
    for character in text[descriptor.item[1] + 1 :]:
        depth += (character in "([{") - (character in ")]}")
        if depth < 0 or (depth == 0 and character == " "):
            break
        if depth == 0:
            kept.append(character)
    return bool(_GROUP.search("".join(kept).rstrip(")]}")))


def hetero_centres(notation: Notation) -> tuple[int, ...]:
    """The atoms of such elements with three or more neighbours, no two of them alike."""
    atoms = [
        a
        for a, token in enumerate(notation.atoms)
        if _ATOM.match(token) and len(notation.neighbours[a]) > 2
    ]
    if not atoms:
        return ()
    kinds = _kinds(notation)
    return tuple(
        a
        for a in atoms
        if len({kinds[n] for n in notation.neighbours[a]}) == len(notation.neighbours[a])
    )


def _kinds(notation: Notation) -> list[int]:
    """Atoms that look alike from everywhere in the structure get the same number (refinement of
    element and bonds by those of the neighbours)."""
    orders: list[list[tuple[int, str]]] = [[] for _ in notation.atoms]
    for begin, end, symbol in notation.bonds:
        order = "" if symbol in ("/", "\\", "-") else symbol
        orders[begin].append((end, order))
        orders[end].append((begin, order))
    plain = [re.sub(r"@+|H\d?", "", token).strip("[]") for token in notation.atoms]
    kinds = _numbered(
        [
            (token, tuple(sorted(o for _, o in bonds)))
            for token, bonds in zip(plain, orders, strict=True)
        ]
    )
    while True:
        finer = _numbered(
            [
                (kind, tuple(sorted((kinds[n], o) for n, o in bonds)))
                for kind, bonds in zip(kinds, orders, strict=True)
            ]
        )
        if max(finer) == max(kinds):
            return kinds
        kinds = finer


def _numbered(keys: list[tuple[object, ...]]) -> list[int]:
    numbers: dict[tuple[object, ...], int] = {}
    return [numbers.setdefault(key, len(numbers)) for key in keys]
