"""The derivation of a unit as a report shows it: sentences, and how they are seen in a drawing."""

from __future__ import annotations

from dossiercheck.model import Derived, Drawing, RankPlace, Sight
from dossiercheck.stereo.cip.derivation import Derivation
from dossiercheck.stereo.cip.drawn import Drawn
from dossiercheck.stereo.cip.molecule import molecule_of
from dossiercheck.stereo.cip.readoff import Seen, seen_in
from dossiercheck.stereo.cip.units import CENTRE
from dossiercheck.stereo.cip.words import Namer, comparing, namer_for, ranking
from dossiercheck.stereo.descriptors import Descriptor
from dossiercheck.stereo.structure import Structure


def shown(
    structure: Structure, found: Descriptor, drawing: Drawing | None = None, doubt: str = ""
) -> Derived:
    """A unit's derivation in sentences and, where a drawing of the structure is shown beside
    them, what to mark in it. `drawing` has the structure's own atoms in their order; `doubt` is
    why the configuration itself is not certain, whatever the letter."""
    name = namer_for(structure)
    steps: list[str] = []
    sight = None
    if found.derivation is not None:
        steps += ranking(found.derivation.ranks, name)
        steps += [comparing(one, name) for one in found.derivation.comparisons]
        steps += found.reading
    if drawing is not None:
        seen = _seen(structure, found, drawing, name)
        if drawing.laid_out and seen.steps:
            steps += [f"In the drawing shown, {seen.steps[0]}", *seen.steps[1:]]
        sight = _sight(found, seen, name)
    steps.append(certainty(found, doubt))
    return Derived(
        kind=found.kind,
        atoms=tuple(position(structure, atom) for atom in found.atoms),
        locant=locant_of(structure, found.atoms),
        descriptor="" if doubt else found.descriptor,
        ours=found.ours,
        library=found.library,
        note=doubt or found.note,
        steps=tuple(steps),
        sight=sight,
    )


def certainty(found: Descriptor, doubt: str = "") -> str:
    """What the two computations give, as a sentence."""
    if found.certain and not doubt:
        if found.derivation is None and found.note:
            return f"Both computations give {found.ours}; {found.note}."
        return f"The structure library gives {found.library} as well: the descriptor is certain."
    why = f": {doubt or found.note}" if doubt or found.note else ""
    return (
        f"Undetermined{why}. By this derivation {found.ours or 'no letter'}, by the structure "
        f"library {found.library or 'no letter'}."
    )


def position(structure: Structure, atom: int) -> int:
    """The source's number of an atom, 1-based."""
    return structure.positions[atom] if structure.positions else atom + 1


def locant_of(structure: Structure, atoms: tuple[int, ...]) -> str:
    """The locant by which a unit is cited: that of the atom, the lower one of two (IUPAC 2013,
    P-31.1.4.2.4); "" where a name gives none."""
    given = [structure.locants[atom] for atom in atoms if structure.locants]
    kept = [locant for locant in given if locant]
    return min(kept, key=lambda text: (len(text), text)) if kept else ""


def _seen(structure: Structure, found: Descriptor, drawing: Drawing, name: Namer) -> Seen:
    """How the drawing shows a centre; nothing where it does not lead to the letter derived."""
    if found.kind != CENTRE or found.derivation is None:
        return Seen()
    points = [(atom.x, atom.y, 0.0) for atom in drawing.atoms]
    marks = [(b.begin, b.end, b.style) for b in drawing.bonds if b.style in ("wedge", "hash")]
    drawn = Drawn(molecule_of(structure.mol), points, marks, flat=True)
    seen = seen_in(found.derivation, found.atoms[0], drawn, name)
    return seen if seen.letter == found.ours.upper() else Seen()


def _sight(found: Descriptor, seen: Seen, name: Namer) -> Sight:
    if found.derivation is None:
        return Sight(found.kind, found.atoms, ())
    places = tuple(
        RankPlace(
            rank.rank, rank.ligand - 1, rank.label, rank.end - 1, seen.held.get(rank.rank, "")
        )
        for rank in found.derivation.ranks
    )
    cited = sorted(_cited(found.derivation))
    numbers = tuple((atom - 1, name(atom, "")) for atom in cited)
    return Sight(found.kind, found.atoms, places, seen.turn, numbers)


def _cited(derivation: Derivation) -> set[int]:
    """The atoms (1-based) that the sentences name."""
    found = {rank.end for rank in derivation.ranks}
    found |= {rank.ligand for rank in derivation.ranks}
    for comparison in derivation.comparisons:
        for side in (comparison.higher, comparison.lower):
            found.update(side.path)
            if comparison.rule not in ("1a", "1b", "2"):
                found.update(entry.atom for entry in side.entries if entry.descriptor)
    return found - {0}
