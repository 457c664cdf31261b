"""How the letter follows from the ranks and the drawing, in a chemist's words."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from math import atan2, tau

from dossiercheck.stereo.cip.derivation import Derivation, Rank
from dossiercheck.stereo.cip.drawn import Drawn
from dossiercheck.stereo.cip.engine import Ranked
from dossiercheck.stereo.cip.molecule import HYDROGEN, LONE_PAIR
from dossiercheck.stereo.cip.units import AXIS, CENTRE, DOUBLE_BOND
from dossiercheck.stereo.cip.words import Namer

_UNDRAWN = {HYDROGEN: "H", LONE_PAIR: "lone pair"}
_TURN = {1: "counter-clockwise", -1: "clockwise"}


def read_off(
    ranked: Ranked, derivation: Derivation, drawn: Drawn | None, name: Namer
) -> tuple[str, ...]:
    """Sentences from ranks to letter; `drawn` is the drawing, None for a line notation; `name`
    calls the atoms.

    Every sentence is worked out from what is seen; where the steps do not lead to the letter, as
    in a drawing with unusual angles, only the outcome is stated.
    """
    letter = ranked.descriptor
    if not letter:
        return ()
    kind = ranked.unit.kind
    if kind == CENTRE:
        steps = _centre(ranked, derivation, drawn, name)
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


def _centre(ranked: Ranked, derivation: Derivation, drawn: Drawn | None, name: Namer) -> list[str]:
    atom = ranked.unit.chain[0]
    ranks = {rank.rank: rank for rank in derivation.ranks}
    letter = ranked.descriptor.upper()
    behind = name(ranks["d"].ligand, ranks["d"].label)
    outcome = f"a → b → c run {_TURN[-1 if letter == 'R' else 1]}: {letter}."
    if drawn is None:
        first, *rest = (
            name(max(ligand + 1, 0), _UNDRAWN.get(ligand, "")) for ligand in ranked.unit.ligands
        )
        follow = ", ".join(rest)
        return [
            f"As written, seen from {first} the others follow as {follow} "
            f"{_TURN[ranked.unit.sign]}.",
            f"Seen with d ({behind}) behind, {outcome}",
        ]
    if not drawn.flat:
        return [f"In the coordinates, seen with d ({behind}) behind, {outcome}"]
    seen = seen_in(derivation, atom, drawn, name)
    if seen.letter != letter:
        return [f"Seen with d ({behind}) behind, {outcome}"]
    return list(seen.steps)


@dataclass(frozen=True, slots=True)
class Seen:
    """How a drawn centre is read: the sentences, the letter they lead to ("" where they do not),
    the sense in which a, b and c follow as drawn (+1 counter-clockwise, -1 clockwise), and after
    two exchanges the rank that each ligand's place holds."""

    steps: tuple[str, ...] = ()
    letter: str = ""
    turn: int = 0
    held: Mapping[str, str] = field(default_factory=dict)


def seen_in(derivation: Derivation, atom: int, drawn: Drawn, name: Namer) -> Seen:
    """The reading of a centre (0-based) in a flat drawing, from its ranks."""
    ranks = {rank.rank: rank for rank in derivation.ranks}
    angles = {
        rank.rank: _angle(drawn, atom, rank.ligand - 1) for rank in ranks.values() if rank.ligand
    }
    raised = drawn.raised.get(atom, {})
    heights = {
        rank.rank: raised.get(rank.ligand - 1, 0.0) if rank.ligand else 0.0
        for rank in ranks.values()
    }
    return _in_the_plane(ranks, angles, heights, name)


def _angle(drawn: Drawn, atom: int, other: int) -> float:
    x, y, _ = drawn.toward(atom, other)
    return atan2(y, x)


def _in_the_plane(
    ranks: Mapping[str, Rank],
    angles: dict[str, float],
    heights: Mapping[str, float],
    name: Namer,
) -> Seen:
    held: dict[str, str] = {}
    lowest = name(ranks["d"].ligand, ranks["d"].label)
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
            return Seen()
        swap = marked[0]
        height = heights[swap]
        one, two = (rank for rank in "abc" if rank != swap)
        side = "in front of" if height > 0 else "behind"
        steps = [
            f"d ({lowest}) lies in the plane of the drawing and {swap} "
            f"({name(ranks[swap].ligand, ranks[swap].label)}) {side} it.",
            f"Exchange {swap} with d, and {one} with {two}: two exchanges leave the configuration "
            f"as it is, and d now points {_direction(height)}.",
        ]
        angles = {
            swap: angles["d"],
            one: angles.get(two, 0.0),
            two: angles.get(one, 0.0),
        }
        held = {"d": swap, swap: "d", one: two, two: one}
    if len([rank for rank in "abc" if rank in angles]) < 3 or not height:
        return Seen()
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
    return Seen(tuple(steps), letter, turn, held)


def _direction(height: float) -> str:
    return "towards the viewer" if height > 0 else "away from the viewer"


def _sense(angles: Sequence[float]) -> int:
    """+1 where three directions follow counter-clockwise, -1 clockwise."""
    first, second, third = angles
    return 1 if (second - first) % tau < (third - first) % tau else -1
