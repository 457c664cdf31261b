"""Stereodescriptors as printed in a name: where they stand, and nothing about what they mean.

Written apart from the program's own reading of names on purpose: the benchmark must not inherit
the program's mistakes.
"""

from __future__ import annotations

import re
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Descriptor:
    """One printed descriptor. `start`, `end` span locant and letter, mark-up included;
    `at` is the position of the letter itself; `group` numbers the brackets of the name."""

    start: int
    end: int
    locant: str
    letter: str
    at: int
    group: int


# The dictionary prints italics as ~{R}; older names print the bare letter.
_DESCRIPTOR = re.compile(
    r"(?<=[(\[{,])"
    r"(?P<locant>(?:~\{N\}|N)?\d*(?:'*(?:~\{[a-z]\}|[a-zA-D]))?['\"]*(?:\(\d+[a-z]?\))?)"
    r"(?P<letter>~\{[RSEZrs]\}|[RSEZrs])"
    r"(?=[,)\]}])"
)
_AXIAL = re.compile(r"[(\[,](?:\d*(?:~\{[MP]\}|[MP]|[RS]a)|a[RS])[,)\]]")
_RELATIVE = re.compile(r"[RS]\}?\*|\brel\b|\brac\b|\(RS\)|\d(?:RS|SR)[,)]|\+/-|±", re.IGNORECASE)
_IMPLIED = re.compile(
    r"(?<![a-z])[DL]-(?=[a-z(~\[\d])|alpha|beta|\b(?:cis|trans|exo|endo|threo|erythro|allo)\b"
    r"|(?:adenos|guanos|uridin|cytidin|thymidin|inosin|glucos|pyranos|furanos)",
    re.IGNORECASE,
)


def descriptors(name: str) -> tuple[Descriptor, ...]:
    """The printed descriptors of a name in reading order."""
    found: list[Descriptor] = []
    group = -1
    for match in _DESCRIPTOR.finditer(name):
        joined = found and name[found[-1].end : match.start()] == ","
        group = group if joined else group + 1
        letter = match["letter"]
        at = match.start("letter") + (2 if letter.startswith("~") else 0)
        locant = re.sub(r"~\{(.)\}", r"\1", match["locant"])
        found.append(Descriptor(match.start(), match.end(), locant, letter.strip("~{}"), at, group))
    return tuple(found)


def axial(name: str) -> bool:
    """True where the name prints a descriptor of an axis, plane or helix (M, P, Ra, Sa)."""
    return bool(_AXIAL.search(name))


def relative(name: str) -> bool:
    """True where the name marks its descriptors as relative or racemic."""
    return bool(_RELATIVE.search(name))


def implied(name: str) -> bool:
    """True where the name carries configuration in words (D-, alpha, cis, a sugar's name)."""
    return bool(_IMPLIED.search(name))


def bare(name: str) -> str:
    """The name without the dictionary's marks for italics; superscripts (~5~) stay as printed."""
    return re.sub(r"~\{(.*?)\}", r"\1", name)
