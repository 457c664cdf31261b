"""Lists of names: "(2S)-butan-2-ol; (S)-2-butanol", and what a list of synonyms says."""

from __future__ import annotations

import re
from collections.abc import Iterator

from dossiercheck.language.running import candidates
from dossiercheck.language.words import ANIONS, CATIONS

_JOINT = re.compile(r";\s+")
# Naming programs set the parts of a salt with a semicolon too; then one part is a mere ion.
_ION = re.compile(rf"(?:{ANIONS}|{CATIONS}|(?:mono|di|tri|hemi)?hydrate|water)", re.IGNORECASE)


def parts(text: str, start: int, end: int) -> list[tuple[int, int]]:
    """Start and end of each name in the stretch of a text that holds one name or a list.

    A semicolon parts names where white space follows it and no bracket is open; the parts of one
    salt ("…amine;hydrochloride", "…; sodium") stay together. The name parser would take a list
    for a mixture.
    """
    found: list[tuple[int, int]] = []
    at, depth, seen = start, 0, start
    for joint in _JOINT.finditer(text, start, end):
        depth += sum((c in "([{") - (c in ")]}") for c in text[seen : joint.start()])
        seen = joint.end()
        if depth == 0:
            found.append((at, joint.start()))
            at = joint.end()
    found.append((at, end))
    kept = [_trimmed(text, *one) for one in found]
    kept = [one for one in kept if one[0] < one[1]]
    if any(_ION.fullmatch(text[slice(*one)]) for one in kept):
        return [_trimmed(text, start, end)]
    return kept


def synonyms(text: str, start: int, end: int) -> Iterator[tuple[int, int]]:
    """Those parts of a list of synonyms that are as a whole names with descriptors; trivial
    names, codes and names that say nothing of configuration are passed over."""
    for first, last in parts(text, start, end):
        part = text[first:last]
        if any((one.start, one.end) == (0, len(part)) for one in candidates(part)):
            yield first, last


def _trimmed(text: str, start: int, end: int) -> tuple[int, int]:
    while start < end and text[start].isspace():
        start += 1
    while start < end and (text[end - 1].isspace() or text[end - 1] == ";"):
        end -= 1
    return start, end
