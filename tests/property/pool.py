"""Molecules for the properties of descriptors, as notations in which every mark stands."""

from __future__ import annotations

import re
import tomllib
from pathlib import Path
from random import Random

from rdkit import Chem

from tests.benchmarks import molecules
from tests.benchmarks.dictionary import Dictionary

_CASES = Path(__file__).parents[1] / "cases" / "descriptors.toml"
_MARKED = re.compile(r"[@/\\]")
_OTHER = re.compile(r"\.|@(TH|AL|SP|TB|OH)\d")  # several molecules, or the classes of metals
_LARGEST = 40  # heavy atoms; larger ones cost time and show no other rule


def handbook() -> tuple[str, ...]:
    """The notations of the hand-ranked cases, but for those that the library gets wrong."""
    return _notations(library=True)


def unknown_to_the_library() -> tuple[str, ...]:
    """The notations of the hand-ranked cases with a unit that only the engine knows."""
    return _notations(library=False)


def _notations(*, library: bool) -> tuple[str, ...]:
    cases = tomllib.loads(_CASES.read_text("utf-8"))["case"]
    return tuple(c["smiles"] for c in cases if "smiles" in c and ("library" in c) != library)


def dictionary(size: int, seed: int = 1) -> tuple[str, ...]:
    """`size` molecules of the wwPDB dictionary in a drawn order that the seed fixes.

    Each is one connected molecule with a marked centre or double bond, taken from the ideal
    coordinates; 2,000 take about five seconds.
    """
    entries = Dictionary()
    identifiers = sorted(entries.ids)
    Random(seed).shuffle(identifiers)
    found: dict[str, None] = {}
    for identifier in identifiers:
        if len(found) == size:
            break
        component = entries.component(identifier)
        if not component.bonds or (component.coordinates != component.coordinates).any():
            continue
        if not 0 < sum(element != "H" for element in component.elements) <= _LARGEST:
            continue
        try:
            mol = molecules.from_coordinates(component)
        except (ValueError, RuntimeError, KeyError):
            continue
        mol.RemoveAllConformers()
        smiles = Chem.MolToSmiles(molecules.without_hydrogens(mol, keep_imine=True))
        if _MARKED.search(smiles) and not _OTHER.search(smiles):
            found[smiles] = None
    return tuple(found)
