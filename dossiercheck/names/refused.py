"""Names that the parser refuses for the sake of their stereodescriptors.

The parser refuses the whole name when it cannot place one descriptor. Here descriptors are
left out, as few as will do, until the rest is read; what was left out becomes a fault, with
the atoms that carry its locant, so that others can judge it on the structure.
"""

from __future__ import annotations

import re
from collections.abc import Collection, Sequence
from dataclasses import dataclass

from dossiercheck.names.descriptors import PrintedDescriptor
from dossiercheck.names.named import Fault, NamedStructure
from dossiercheck.names.notation import read_notation
from dossiercheck.names.parser import NameParser, Parse
from dossiercheck.names.rewriting import rewritten

_BLAMED = re.compile(r'<stereoChemistry[^>]*>(?P<item>[^<]*)</stereoChemistry>')
# What the parser knows as stereodescriptors and never places (measured, version 2.9.0).
_NEVER_PLACED = frozenset(
    "M P Ra Sa Rp Sp Rm Sm aR aS pR pS exo endo syn anti threo erythro meso "
    "all-trans all-cis".split()
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


def least_left_out(
    text: str,
    descriptors: Sequence[PrintedDescriptor],
    rest: Rest,
    parser: NameParser,
    spaces: Sequence[int] = (),
) -> Rest:
    """Leave out descriptors one after another, those blamed by the parser first, until the
    name is read or none is left."""

    def ask(drops: Sequence[frozenset[int]]) -> list[Rest]:
        names = [rewritten(text, descriptors, drop=drop, spaces=spaces) for drop in drops]
        return [Rest(p, d) for p, d in zip(parser.parse(names), drops, strict=True)]

    while is_stereo_refusal(rest.parse) and len(rest.dropped) < len(descriptors):
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


def _put_back(rest, ask):  # type: ignore[no-untyped-def]
    """Descriptors that were left out on suspicion and that the read name bears after all."""
    if not rest.parse.smiles or len(rest.dropped) < 2:
        return rest
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
    return (not _is_unjudged(descriptor), not twice, depth, index)


def _is_unjudged(descriptor: PrintedDescriptor) -> bool:
    return descriptor.text in ("r", "s", "cis", "trans") or descriptor.text in _NEVER_PLACED


def faults_of(
    descriptors: Sequence[PrintedDescriptor],
    dropped: Collection[int],
    skeleton: NamedStructure | None,
    structure: NamedStructure | None,
    unplaced: Collection[int] = (),
) -> list[Fault]:
    """One fault for each descriptor that was left out. `unplaced` are those on which the parser
    gave up although the unit may exist."""
    base = skeleton or structure
    found = []
    for index in sorted(dropped):
        descriptor = descriptors[index]
        printed = descriptor.locant + descriptor.text
        atoms = candidates(base, descriptor) if base else ()
        if _is_unjudged(descriptor) or index in unplaced:
            detail = f"the name parser cannot place {printed}; the rest was read without it"
            found.append(Fault("descriptor-stripped", index, None, detail, atoms))
            continue
        if descriptor.locant and base and not base.labelled(descriptor.locant):
            detail = f"{printed}: no atom of the named structure has the locant {descriptor.locant}"
            found.append(Fault("no-such-locant", index, None, detail))
        else:
            where = f"locant {descriptor.locant}" if descriptor.locant else "this place"
            detail = f"{printed}: nothing at {where} that the descriptor could describe"
            found.append(Fault("locant-not-stereogenic", index, None, detail, atoms))
    return found


def candidates(structure: NamedStructure, descriptor: PrintedDescriptor) -> tuple[int, ...]:
    """The atoms a descriptor may speak of by its locant; for E and Z those of double bonds
    when there are such."""
    atoms = structure.labelled(descriptor.locant)
    if descriptor.family == "double bond":
        bonds = [b[:2] for b in read_notation(structure.smiles).bonds if b[2] == "="]
        doubly = tuple(a for a in atoms if any(a in bond for bond in bonds))
        return doubly or atoms
    return atoms
