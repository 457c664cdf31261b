"""What must hold for the descriptors of any molecule, each a comparison of two readings of it.

Every property takes a notation and a source of chance and gives what it found. Letters are the
engine's own. A drawing or coordinates may leave a unit undetermined that the notation has, never
give it another letter. Sources of the properties: `tests/property/drawings.py`.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from functools import lru_cache
from random import Random

from dossiercheck.stereo.cip.engine import rank_all
from dossiercheck.stereo.cip.source import source_of
from dossiercheck.stereo.perception import from_molblock, from_smiles
from dossiercheck.stereo.structure import Structure
from tests.property import drawings, notation, table
from tests.property.drawings import NotCarried, in_mirror

Key = tuple[int, ...]
Labels = Mapping[Key, str]
_MOST_EXCHANGES = 3  # centres a molecule at which ligands are exchanged


@dataclass(frozen=True, slots=True)
class Found:
    """Units compared, those that the second reading leaves undetermined, and what is wrong."""

    units: int
    undetermined: int = 0
    wrong: tuple[str, ...] = ()


def letters(structure: Structure) -> dict[Key, str]:
    """The engine's letter of each unit, by its ends in ascending order (0-based)."""
    ranked = rank_all(source_of(structure))
    return {tuple(sorted(one.unit.ends)): one.descriptor for one in ranked if one.descriptor}


@lru_cache(512)
def noted(smiles: str) -> Labels:
    """Letters of a notation."""
    return letters(from_smiles(smiles))


@lru_cache(512)
def shown(text: str) -> Labels:
    """Letters of a connection table."""
    return letters(from_molblock(text))


def mirrored(labels: Labels) -> dict[Key, str]:
    """The letters of the mirror image."""
    return {atoms: in_mirror(letter) for atoms, letter in labels.items()}


def compared(
    expected: Labels, found: Labels, *, may_lack: bool = False, may_add: bool = False
) -> Found:
    """Two readings held against each other."""
    wrong = [
        f"{atoms}: {letter} became {found.get(atoms, 'none')}"
        for atoms, letter in expected.items()
        if found.get(atoms) != letter and not (may_lack and atoms not in found)
    ]
    if not may_add:
        wrong += [f"{atoms}: {found[atoms]} is new" for atoms in found if atoms not in expected]
    return Found(len(expected), sum(atoms not in found for atoms in expected), tuple(wrong))


def _moved(labels: Labels, place: Mapping[int, int]) -> dict[Key, str]:
    return {tuple(sorted(place[a] for a in atoms)): x for atoms, x in labels.items()}


# --- properties of notations ------------------------------------------------------------------


def mirror_notation(smiles: str, _: Random) -> Iterator[Found]:
    """The mirror image exchanges R/S, M/P and e/z and keeps the others."""
    yield compared(mirrored(noted(smiles)), letters(from_smiles(drawings.mirror_notation(smiles))))


def rewritten_notation(smiles: str, random: Random) -> Iterator[Found]:
    """Another order of atoms in the text changes nothing."""
    text, order = notation.rewritten(smiles, random)
    place = {old: new for new, old in enumerate(order)}
    yield compared(_moved(noted(smiles), place), letters(from_smiles(text)))


# --- properties of drawings -------------------------------------------------------------------


def drawn(smiles: str, _: Random) -> Iterator[Found]:
    """A drawing gives no other letter than the notation."""
    yield compared(noted(smiles), shown(drawings.laid_out(smiles)), may_lack=True)


def other_layout(smiles: str, random: Random) -> Iterator[Found]:
    """Nor does another layout."""
    text = drawings.laid_out(smiles, random.randrange(1, 1000))
    yield compared(noted(smiles), shown(text), may_lack=True)


def mirror_drawing(smiles: str, _: Random) -> Iterator[Found]:
    """Wedge and hash exchanged give the mirror image."""
    text = drawings.laid_out(smiles)
    yield compared(mirrored(shown(text)), shown(drawings.mirror_drawing(text)))


def rotated(smiles: str, random: Random) -> Iterator[Found]:
    """A drawing turned in its plane is the same."""
    text = drawings.laid_out(smiles)
    yield compared(shown(text), shown(drawings.rotated(text, random.uniform(0, 360))))


def reflected(smiles: str, _: Random) -> Iterator[Found]:
    """A drawing seen from behind, wedge and hash exchanged, is the same."""
    text = drawings.laid_out(smiles)
    yield compared(shown(text), shown(drawings.reflected(text)))


def renumbered(smiles: str, random: Random) -> Iterator[Found]:
    """Another order of atoms and bonds changes nothing."""
    text = drawings.laid_out(smiles)
    whole = table.read(text)
    order = random.sample(range(len(whole.atoms)), len(whole.atoms))
    bonds = random.sample(range(len(whole.bonds)), len(whole.bonds))
    place = {old: new for new, old in enumerate(order)}
    yield compared(_moved(shown(text), place), shown(drawings.renumbered(text, order, bonds)))


def exchanged(smiles: str, random: Random) -> Iterator[Found]:
    """Two ligands of a centre exchanged invert it, exchanged again restore every letter."""
    text = drawings.laid_out(smiles)
    before = shown(text)
    centres = [atoms[0] for atoms in before if len(atoms) == 1]
    random.shuffle(centres)
    for centre in centres[:_MOST_EXCHANGES]:
        pairs = drawings.exchangeable(text, centre)
        random.shuffle(pairs)
        for first, second in pairs[:1]:
            try:
                once = drawings.exchanged(text, centre, first, second)
                twice = drawings.exchanged(once, centre, first, second)
            except ValueError:
                continue
            inverted = _INVERTED[before[(centre,)]]
            after = {(centre,): shown(once).get((centre,), "")}
            yield compared({(centre,): inverted}, after)
            yield compared(before, shown(twice))


_INVERTED = {"R": "S", "S": "R", "r": "s", "s": "r"}


# --- properties of coordinates ------------------------------------------------------------------


def in_space(smiles: str, random: Random) -> Iterator[Found]:
    """Coordinates give no other letter than the notation, and turned round the mirror image."""
    text = drawings.in_space(smiles, random.randrange(1, 1000))
    found = shown(text)
    yield compared(noted(smiles), found, may_lack=True, may_add=True)
    yield compared(mirrored(found), shown(drawings.mirror_space(text)))


PROPERTIES: dict[str, Callable[[str, Random], Iterator[Found]]] = {
    "mirror image of the notation": mirror_notation,
    "notation in another order": rewritten_notation,
    "drawing against notation": drawn,
    "another layout against notation": other_layout,
    "mirror image of the drawing": mirror_drawing,
    "drawing rotated": rotated,
    "drawing reflected": reflected,
    "drawing renumbered": renumbered,
    "ligands exchanged, and again": exchanged,
    "coordinates against notation, and their mirror image": in_space,
}

# Those that need no drawing made by the library.
NOTATIONS = tuple(PROPERTIES)[:2]

__all__ = ["NOTATIONS", "PROPERTIES", "Found", "NotCarried", "compared", "letters", "mirrored"]
