"""Systematic name to structure, and each printed descriptor to its unit."""

from dossiercheck.names.descriptors import PrintedDescriptor, printed
from dossiercheck.names.named import Fault, NamedStructure, NameReading, Refusal, StereoGroup
from dossiercheck.names.parser import NameParser, Parse, ParserMissing
from dossiercheck.names.reading import read_names
from dossiercheck.names.tying import Tie, tie, tie_one, ties
from dossiercheck.names.typography import Cleaned, clean

__all__ = [
    "Cleaned",
    "Fault",
    "NameParser",
    "NameReading",
    "NamedStructure",
    "Parse",
    "ParserMissing",
    "PrintedDescriptor",
    "Refusal",
    "StereoGroup",
    "Tie",
    "clean",
    "printed",
    "read_names",
    "tie",
    "tie_one",
    "ties",
]
