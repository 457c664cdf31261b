"""Printed descriptors that contradict what the name implies by a word.

`(2R)-L-alanine`: L says S, the bracket says R, and the parser follows the bracket without a
word. Found by parsing the name once more without its R and S and comparing the centres that
still have a configuration. Asked only where D, L or allo stands beside a printed descriptor
(IUPAC 2013, P-102.3 and P-103.1.3).
"""

from __future__ import annotations

from dossiercheck.names.named import Fault, NameReading
from dossiercheck.names.notation import NotationError, read_extended, read_notation
from dossiercheck.names.parser import NameParser
from dossiercheck.names.rewriting import rewritten
from dossiercheck.names.tying import ties

_IMPLYING = frozenset(("D", "L", "d", "l"))


def faults(reading: NameReading, parser: NameParser) -> list[Fault]:
    """A fault for each printed R or S that turns round an implied configuration."""
    structure, descriptors = reading.structure, reading.descriptors
    centres = [i for i, d in enumerate(descriptors) if d.family == "centre" and d.bracket >= 0]
    implying = [i for i, d in enumerate(descriptors) if d.text in _IMPLYING]
    if structure is None or not centres or not (implying or "allo" in reading.cleaned.text.lower()):
        return []
    bare = rewritten(
        reading.cleaned.text,
        descriptors,
        drop=reading.dropped | set(centres),
        spaces=reading.respaced,
    )
    answer = parser.parse([bare])[0]
    if answer.smiles is None:
        return []
    try:
        here = read_notation(structure.smiles)
        there = read_notation(read_extended(answer.smiles).smiles)
    except NotationError:
        return []
    if here.constitution != there.constitution:
        return []
    turned = {
        i
        for i, (a, b) in enumerate(zip(here.marks, there.marks, strict=True))
        if a and b and a != b
    }
    if not turned:
        return []
    kept = [i for i in centres if i not in reading.dropped]
    found = []
    for tied in ties(reading, kept, parser):
        if set(tied.atoms) & turned:
            descriptor = descriptors[tied.descriptor]
            before = [i for i in implying if descriptors[i].at > descriptor.at] or implying
            other = before[0] if before else None
            word = descriptors[other].text if other is not None else "allo"
            detail = f"{descriptor.locant}{descriptor.text} is the opposite of what {word} implies"
            found.append(
                Fault("overrides-implied", tied.descriptor, other, detail, tuple(tied.atoms))
            )
    return found
