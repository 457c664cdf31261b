"""Names that the parser refuses for the sake of their stereodescriptors.

The parser refuses the whole name when it cannot place one descriptor. Here descriptors are
left out, as few as will do, until the rest is read; what was left out becomes a fault, with
the atoms that carry its locant (`leftout`), so that others can judge it on the structure.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Sequence
from dataclasses import dataclass

from dossiercheck.names.descriptors import PrintedDescriptor
from dossiercheck.names.hetero import speaks_of_hetero
from dossiercheck.names.parser import NameParser, Parse
from dossiercheck.names.rewriting import rewritten

_BLAMED = re.compile(r"<stereoChemistry[^>]*>(?P<item>[^<]*)</stereoChemistry>")
# What the parser knows as stereodescriptors and never places (measured, version 2.9.0).
_NEVER_PLACED = frozenset(
    [
        "M",
        "P",
        "Ra",
        "Sa",
        "Rp",
        "Sp",
        "Rm",
        "Sm",
        "aR",
        "aS",
        "pR",
        "pS",
        "exo",
        "endo",
        "syn",
        "anti",
        "threo",
        "erythro",
        "meso",
        "all-trans",
        "all-cis",
    ]
)
_MOST_TRIES = 60


@dataclass(frozen=True, slots=True)
class Rest:
    """What is read of a name when `dropped` descriptors are left out; `parse` is the answer."""

    parse: Parse
    dropped: frozenset[int]


def never_placed(descriptors: Sequence[PrintedDescriptor]) -> frozenset[int]:
    """The descriptors for which the parser refuses every name."""
    return frozenset(i for i, d in enumerate(descriptors) if d.text in _NEVER_PLACED)


def is_stereo_refusal(parse: Parse) -> bool:
    """Whether the parser read the name and then failed to place its stereodescriptors."""
    said = " ".join(parse.messages)
    return parse.smiles is None and (
        "<stereoChemistry" in said or "stereochemistry" in said.lower()
    )


def _is_refusal(parse: Parse) -> bool:
    return parse.smiles is None and not parse.stopped


def least_left_out(
    text: str,
    descriptors: Sequence[PrintedDescriptor],
    rest: Rest,
    parser: NameParser,
    spaces: Sequence[int] = (),
) -> Rest:
    """Leave out descriptors one after another, those blamed by the parser first, until the
    name is read or none is left.

    The parser sometimes blames something else, when it has fallen back on another way to split
    the name; that the name is read without any descriptor then says what it was.
    """

    def ask(drops: Sequence[frozenset[int]]) -> list[Rest]:
        names = [rewritten(text, descriptors, drop=drop, spaces=spaces) for drop in drops]
        return [Rest(p, d) for p, d in zip(parser.parse(names), drops, strict=True)]

    refuses = is_stereo_refusal
    if not refuses(rest.parse):
        if not ask([frozenset(range(len(descriptors)))])[0].parse.smiles:
            return rest
        refuses = _is_refusal
    astray = frozenset(i for i, d in enumerate(descriptors) if speaks_of_hetero(text, d))
    if refuses(rest.parse) and astray - rest.dropped:
        # A letter meant for phosphorus may have taken the place of a sound one further inside,
        # which the parser then blames.
        without = ask([rest.dropped | astray])[0]
        rest = without if without.parse.smiles else rest
    while refuses(rest.parse) and len(rest.dropped) < len(descriptors):
        left = [i for i in range(len(descriptors)) if i not in rest.dropped]
        blamed = [i for i in left if _is_blamed(descriptors[i], rest.parse)] or left
        ordered = sorted(blamed, key=lambda i: _suspicion(text, descriptors, i))
        tried = ask([rest.dropped | {i} for i in ordered[:_MOST_TRIES]])
        better = [r for r in tried if r.parse.smiles] or [
            r for r in tried if r.parse.messages != rest.parse.messages
        ]
        if not better and blamed != left:
            tried = ask([rest.dropped | {i} for i in left[:_MOST_TRIES]])
            better = [r for r in tried if r.parse.smiles]
        rest = better[0] if better else ask([rest.dropped | set(ordered)])[0]
    return _put_back(rest, ask)


def _put_back(rest: Rest, ask: Callable[[Sequence[frozenset[int]]], list[Rest]]) -> Rest:
    """Take in again what was left out on suspicion and what the name bears after all."""
    if rest.parse.smiles and len(rest.dropped) > 1:
        for index in sorted(rest.dropped):
            again = ask([rest.dropped - {index}])[0]
            if again.parse.smiles:
                rest = again
    return rest


def _is_blamed(descriptor: PrintedDescriptor, parse: Parse) -> bool:
    for message in parse.messages:
        found = _BLAMED.search(message)
        if found:
            item = found["item"].strip("-()")
            return item.casefold() == (descriptor.locant + descriptor.text).casefold() or (
                item.casefold() == descriptor.text.casefold()
            )
    return False


def _suspicion(
    text: str, descriptors: Sequence[PrintedDescriptor], index: int
) -> tuple[bool, bool, int, int]:
    """Most suspect first: forms that the parser does not know by meaning; the second of two on
    one locant in one bracket; the outermost, for the parser lets an outer descriptor with a
    wrong locant take an inner atom, never the other way round."""
    descriptor = descriptors[index]
    twice = any(
        other.bracket == descriptor.bracket >= 0
        and other.locant == descriptor.locant
        and other.at < descriptor.at
        for other in descriptors
    )
    before = text[: descriptor.item[0] - 1] if descriptor.bracket >= 0 else text[: descriptor.at[0]]
    depth = sum(before.count(c) for c in "([{") - sum(before.count(c) for c in ")]}")
    return (not is_unjudged(descriptor), not twice, depth, index)


def is_unjudged(descriptor: PrintedDescriptor) -> bool:
    """Whether the parser does not know the descriptor by its meaning: its refusal says nothing
    of whether the name is right."""
    return descriptor.text in ("r", "s", "cis", "trans") or descriptor.text in _NEVER_PLACED
