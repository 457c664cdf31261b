"""How the letter follows from the ranks and the drawing, in a chemist's words."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from math import atan2, tau

from dossiercheck.stereo.cip.derivation import Derivation, Rank
from dossiercheck.stereo.cip.drawn import Drawn
from dossiercheck.stereo.cip.engine import Ranked
from dossiercheck.stereo.cip.molecule import Molecule
from dossiercheck.stereo.cip.units import AXIS, CENTRE, DOUBLE_BOND

_TURN = {1: "counter-clockwise", -1: "clockwise"}


def read_off(
    molecule: Molecule, ranked: Ranked, derivation: Derivation, drawn: Drawn | None
) -> tuple[str, ...]:
    """Sentences from ranks to letter; `drawn` is the drawing, None for a line notation.

    Every sentence is worked out from what is seen; where the steps do not lead to the letter, as
    in a drawing with unusual angles, only the outcome is stated.
    """
    letter = ranked.descriptor
    if not letter:
        return ()
    kind = ranked.unit.kind
    if kind == CENTRE:
        steps = _centre(molecule, ranked, derivation, drawn)
    elif kind == DOUBLE_BOND:
        side = "the same side" if letter in "Zz" else "opposite sides"
        steps = [f"The two ligands ranked a stand on {side} of the double bond: {letter.upper()}."]
    elif kind == AXIS:
        turn = "clockwise" if letter in "Pp" else "counter-clockwise"
        steps = [
            "Seen along the axis, the way from the near ligand ranked a to the far one is "
            f"{turn}: {letter.upper()}."
        ]
    else:
        turn = "clockwise" if letter == "P" else "counter-clockwise"
        steps = [f"Away from the viewer the inner rim turns {turn}: {letter}."]
    if letter.islower():
        steps.append(
            f"Two ligands differ only as mirror images of each other: hence the small {letter}."
        )
    return tuple(steps)


def _centre(
    molecule: Molecule, ranked: Ranked, derivation: Derivation, drawn: Drawn | None
) -> list[str]:
    atom = ranked.unit.chain[0]
    ranks = {rank.rank: rank for rank in derivation.ranks}
    letter = ranked.descriptor.upper()
    outcome = f"a → b → c run {_TURN[-1 if letter == 'R' else 1]}: {letter}."
    if drawn is None:
        first = molecule.name(ranked.unit.ligands[0])
        follow = ", ".join(molecule.name(ligand) for ligand in ranked.unit.ligands[1:])
        return [
            f"As written, seen from {first} the others follow as {follow} "
            f"{_TURN[ranked.unit.sign]}.",
            f"Seen with d ({ranks['d'].label}) behind, {outcome}",
        ]
    if not drawn.flat:
        return [f"In the coordinates, seen with d ({ranks['d'].label}) behind, {outcome}"]
    angles = {
        rank.rank: _angle(drawn, atom, rank.ligand - 1) for rank in ranks.values() if rank.ligand
    }
    heights = {
        rank.rank: drawn.raised[atom].get(rank.ligand - 1, 0.0) if rank.ligand else 0.0
        for rank in ranks.values()
    }
    steps, seen = _in_the_plane(ranks, angles, heights)
    if seen != letter:
        return [f"Seen with d ({ranks['d'].label}) behind, {outcome}"]
    return steps


def _angle(drawn: Drawn, atom: int, other: int) -> float:
    x, y, _ = drawn.toward(atom, other)
    return atan2(y, x)


def _in_the_plane(
    ranks: Mapping[str, Rank], angles: dict[str, float], heights: Mapping[str, float]
) -> tuple[list[str], str]:
    """The steps of reading a drawn centre, and the letter they lead to ("" where they do not)."""
    lowest = _named(ranks["d"])
    height = heights["d"]
    if "d" not in angles:
        height = -sum(heights.values())
        where = "the hydrogen that is not drawn" if ranks["d"].label == "H" else "the lone pair"
        steps = [f"d is {where}; it lies opposite the wedge and points {_direction(height)}."]
    elif height:
        mark = "wedged" if height > 0 else "hashed"
        steps = [f"d ({lowest}) is on the {mark} bond and points {_direction(height)}."]
    else:
        marked = sorted((rank for rank in "abc" if heights[rank]), key=lambda rank: heights[rank])
        if not marked:
            return [], ""
        swap = marked[0]
        height = heights[swap]
        one, two = (rank for rank in "abc" if rank != swap)
        side = "in front of" if height > 0 else "behind"
        steps = [
            f"d ({lowest}) lies in the plane of the drawing and {swap} "
            f"({_named(ranks[swap])}) {side} it.",
            f"Exchange {swap} with d, and {one} with {two}: two exchanges leave the configuration "
            f"as it is, and d now points {_direction(height)}.",
        ]
        angles = {
            swap: angles["d"],
            one: angles.get(two, 0.0),
            two: angles.get(one, 0.0),
        }
    if len([rank for rank in "abc" if rank in angles]) < 3 or not height:
        return [], ""
    turn = _sense([angles[rank] for rank in "abc"])
    if height < 0:
        letter = "S" if turn > 0 else "R"
        steps.append(f"a → b → c run {_TURN[turn]}: {letter}.")
    else:
        letter = "R" if turn > 0 else "S"
        steps.append(
            f"a → b → c are drawn {_TURN[turn]}; since d points towards the viewer this is "
            f"reversed: {letter}."
        )
    return steps, letter


def _direction(height: float) -> str:
    return "towards the viewer" if height > 0 else "away from the viewer"


def _named(rank: Rank) -> str:
    return f"{rank.label}{rank.ligand}" if rank.ligand else rank.label


def _sense(angles: Sequence[float]) -> int:
    """+1 where three directions follow counter-clockwise, -1 clockwise."""
    first, second, third = angles
    return 1 if (second - first) % tau < (third - first) % tau else -1
