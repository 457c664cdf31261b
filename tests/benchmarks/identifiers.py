"""Public identifier records as the package `chemicals` ships them (from PubChem)."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

_FILE = "chemical identifiers pubchem large.tsv"
_REGISTRY = re.compile(r"(\d{2,7})-(\d{2})-(\d)")


@dataclass(frozen=True, slots=True)
class Identifiers:
    """One record; `inchi` without its prefix and `mass` with more digits than dossiers print."""

    pubchem: str
    registry: str
    formula: str
    mass: str
    smiles: str
    inchi: str
    inchikey: str


def records() -> Iterator[Identifiers]:
    """All records in the order of the file: id, registry number, formula, mass, SMILES, InChI,
    InChIKey, then names that are of no use here."""
    import chemicals

    path = Path(chemicals.__file__).parent / "Identifiers" / _FILE
    with path.open(encoding="utf-8") as lines:
        for line in lines:
            yield Identifiers(*line.rstrip("\n").split("\t")[:7])


def check_digit_is_right(number: str) -> bool:
    """The other digits, each times its position from the right, summed, modulo 10 (the rule that
    CAS publishes for its registry numbers)."""
    match = _REGISTRY.fullmatch(number)
    if match is None:
        return False
    digits = (match[1] + match[2])[::-1]
    return sum(i * int(digit) for i, digit in enumerate(digits, 1)) % 10 == int(match[3])
