"""Configurations that the name parser assumes and the name does not state.

For "phenylalanine" the parser answers with the L form. A name without D, L, R or S states no
configuration (IUPAC-IUB, Nomenclature and Symbolism for Amino Acids and Peptides, 1983, 3AA-3;
section from memory), and taking the assumption for a statement would be a wrong reading.
"""

from __future__ import annotations

import re

from dossiercheck.names.named import Fault, NameReading
from dossiercheck.names.notation import read_notation

_AMINO_ACID = re.compile(
    r"(?<![A-Za-z])(?:[a-z]*?)(?:alan|argin|asparagin|aspart|cyste|glutam|histid|isoleuc|leuc|lys|"
    r"methion|ornith|phenylalan|prol|ser|threon|tryptoph|tyros|val|norval|norleuc|citrull|"
    r"homoser|homocyste)(?:ine?|ic acid|yl|ate|amide|inamide|inate|inol)",
    re.IGNORECASE,
)


def faults(reading: NameReading) -> list[Fault]:
    """The assumed centres as one fault, for a name that prints no configuration at all."""
    if reading.structure is None or "@" not in reading.structure.smiles:
        return []
    if reading.descriptors or not _AMINO_ACID.search(reading.cleaned.text):
        return []
    atoms = tuple(i for i, mark in enumerate(read_notation(reading.structure.smiles).marks) if mark)
    detail = "the name states no configuration; the name parser assumes L"
    return [Fault("assumed-configuration", None, None, detail, atoms)] if atoms else []
