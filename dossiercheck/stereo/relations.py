"""How two structures are related: the same, enantiomers, diastereomers, constitutional isomers.

IUPAC Basic Terminology of Stereochemistry (1996): enantiomers are mirror images that cannot be
laid on each other, diastereomers are stereoisomers that are not enantiomers, epimers are
diastereomers that differ at one of several centres. It is judged by laying the structures on each
other, never by comparing letters.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

from rdkit import Chem

from dossiercheck.stereo import constitution as con
from dossiercheck.stereo.graph import Centre, Graph, graph_of
from dossiercheck.stereo.isomers import are_isomers
from dossiercheck.stereo.mapping import best_mapping
from dossiercheck.stereo.notation import inchi_of
from dossiercheck.stereo.possible import space_of
from dossiercheck.stereo.space import Space, moves_of, part_of
from dossiercheck.stereo.states import Mixture, State, alternatives, leader, orbit, state_of
from dossiercheck.stereo.structure import Structure
from dossiercheck.stereo.symmetry import TooSymmetric

SAME = "same"
ENANTIOMER = "enantiomer"
DIASTEREOMER = "diastereomer"
CONSTITUTIONAL = "constitutional isomer"
RACEMATE = "racemate"
DIFFERENT = "different"
UNDETERMINED = "undetermined"


@dataclass(frozen=True, slots=True)
class Relation:
    """What `two` is to `one`.

    `kind` is one of the constants above; "racemate" where one of them is the racemate of the
    other, and `racemic` says which, "one" or "two". `units` are those that differ (0-based atoms
    of `one`), laid on each other so that they are fewest. `epimer`: exactly one centre of several
    differs. `geometry`: only double bonds differ. `note` gives the doubt, or what was compared.
    """

    kind: str
    units: tuple[tuple[int, ...], ...] = ()
    epimer: bool = False
    geometry: bool = False
    racemic: str = ""
    note: str = ""


def relation(one: Structure, two: Structure) -> Relation:
    """Compare two structures, salts by their main components."""
    found = con.compare_constitution(one, two)
    if found.verdict == con.DIFFERENT:
        isomers, note = are_isomers(one, two, found)
        kinds = {True: CONSTITUTIONAL, False: DIFFERENT, None: UNDETERMINED}
        return Relation(kinds[isomers], note=note)
    if found.verdict == con.TAUTOMER:
        return Relation(UNDETERMINED, note=found.detail)
    graphs = graph_of(one), graph_of(two)
    exact = found.verdict == con.SAME
    parts = len(graphs[0].components()), len(graphs[1].components())
    if parts == (1, 1):
        return _noted(_stereo(one, two, graphs, exact), found.detail)
    if any(
        _unlike_copies(structure, graph)
        for structure, graph in zip((one, two), graphs, strict=True)
    ):
        whole = _stereo(one, two, graphs, exact) if found.verdict != con.SALT else None
        if whole is not None and whole.kind == SAME:
            return whole
        return Relation(
            UNDETERMINED, note="the main component is there in more than one configuration"
        )
    mains = tuple(part_of(graph, frozenset(main_part(graph))) for graph in graphs)
    parent = _stereo(one, two, (mains[0], mains[1]), exact)
    if found.verdict == con.SALT:
        return _noted(parent, f"the main components are compared ({found.detail})")
    whole = _stereo(one, two, graphs, exact)
    if whole == parent:
        return _noted(parent, found.detail)
    note = f"the main components alone; with the other components: {whole.kind}"
    if parent.kind == SAME:
        return Relation(UNDETERMINED, note=f"the main components are the same; {whole.note}")
    return _noted(parent, note)


def main_part(graph: Graph) -> tuple[int, ...]:
    """The component with the most carbon atoms, then the most atoms."""
    return max(
        graph.components(),
        key=lambda part: (sum(graph.element[a] == 6 for a in part), len(part), -part[0]),
    )


def _noted(found: Relation, note: str) -> Relation:
    return replace(found, note="; ".join(filter(None, (found.note, note))))


def _unlike_copies(structure: Structure, graph: Graph) -> bool:
    """Whether components as large as the main one are not all alike in configuration."""
    main = main_part(graph)
    size = sum(graph.element[a] == 6 for a in main), len(main)
    texts = {
        Chem.MolFragmentToSmiles(structure.mol, part)
        for part in graph.components()
        if (sum(graph.element[a] == 6 for a in part), len(part)) == size
    }
    return len(texts) > 1


# --- configurations -----------------------------------------------------------------------


def _stereo(one: Structure, two: Structure, graphs: tuple[Graph, Graph], exact: bool) -> Relation:
    try:
        return _judged(one, two, graphs, exact)
    except TooSymmetric:
        return Relation(UNDETERMINED, note="too symmetric to be compared in every way")


def _judged(one: Structure, two: Structure, graphs: tuple[Graph, Graph], exact: bool) -> Relation:
    within = graphs[0].atoms, graphs[1].atoms
    nothing: tuple[frozenset[int], frozenset[frozenset[int]]] = (frozenset(), frozenset())
    mapped = best_mapping(*graphs, exact=True, within=within, judged=nothing)
    if mapped is None and not exact:
        mapped = best_mapping(*graphs, exact=False, within=within, judged=nothing)
    if mapped is None:
        return Relation(UNDETERMINED, note="the structures could not be laid on each other")
    space = space_of(one, frozenset(within[0]))
    states = (
        state_of(one, graphs[0], space, {a: a for a in within[0]}),
        state_of(two, graphs[1], space, mapped.mapping),
    )
    found = _related(space, states)
    if exact and found.geometry and _not_fixed(one, two):
        return Relation(UNDETERMINED, note="hydrogen or charge can move along the double bond")
    if exact or mapped.cost == (0, 0) or found.kind == UNDETERMINED:
        return found
    # Hydrogens and charges stand elsewhere: what holds under the symmetries of the structure as
    # drawn and under those of its bare skeleton holds under those in between.
    loose = replace(space, moves=moves_of(space.graph, space.units, space.atoms, exact=False))
    if _related(loose, states).kind != found.kind:
        return Relation(UNDETERMINED, note="it depends on where the mobile hydrogens stand")
    return found


def _not_fixed(one: Structure, two: Structure) -> bool:
    """Whether the standard InChI sees no fixed double bond where two drawings differ, as in
    cyanines: a second opinion on a difference in geometry alone."""
    forms = inchi_of(one), inchi_of(two)
    return bool(forms[0]) and forms[0] == forms[1]


def _related(space: Space, states: tuple[State, State]) -> Relation:
    if any(state.strange for state in states):
        return Relation(UNDETERMINED, note="a unit is marked that is not judged here")
    notes = ["a unit that proton transfer or inversion of nitrogen undoes is not compared"]
    notes = notes if any(state.ignored for state in states) else []
    sides = [alternatives(state, space) for state in states]
    first, second = sides
    if first is None or second is None:
        return Relation(UNDETERMINED, note="; ".join([*notes, *_why(states), "too many are open"]))
    outcomes = {_of_mixtures(space, a, b) for a in first for b in second}
    if len(outcomes) > 1:
        return Relation(UNDETERMINED, note="; ".join([*notes, *_why(states)]))
    kind, racemic, note = outcomes.pop()
    if kind == SAME and any(a * b < 0 for a, b in zip(*(s.imines for s in states), strict=True)):
        return Relation(UNDETERMINED, note="they differ only at a C=N–H")
    if any(state.axes for state in states) and kind != DIASTEREOMER:
        return Relation(UNDETERMINED, note="an axis or helix is marked, and is not compared")
    notes += [note] if note else []
    notes += ["a possible axis is not compared"] if any(s.axial for s in states) else []
    bits = [[b for group in side.values() for b in group] for side in (first, second)]
    varied = [_varied(side) for side in bits]
    # Where all alternatives are one compound, what is open is no stereogenic unit there.
    certain = len(first) == len(second) == 1
    for state, side in zip(states, varied, strict=True):
        # What only the rings settle is good enough for the kind, not for which units differ.
        certain &= not state.open & ~side
    if not certain:
        notes += ["settled all the same: " + "; ".join(_why(states))]
    if kind not in (ENANTIOMER, DIASTEREOMER) or any(state.together for state in states):
        return Relation(kind, racemic=racemic, note="; ".join(notes))
    unclear = varied[0] | varied[1] | states[0].open | states[1].open
    numbers = _fewest(space, bits[0], bits[1], ~unclear)
    centres = [n for n in numbers if isinstance(space.units[n], Centre)]
    single = kind == DIASTEREOMER and len(numbers) == 1 and certain
    return Relation(
        kind,
        tuple(space.atoms[n] for n in numbers),
        epimer=single and len(centres) == 1 and bin(space.centres).count("1") > 1,
        geometry=bool(numbers) and not centres,
        note="; ".join(notes),
    )


def _varied(alternatives: list[int]) -> int:
    """The bits that are not alike in all of them."""
    found = 0
    for bits in alternatives:
        found |= bits ^ alternatives[0]
    return found


def _of_mixtures(space: Space, one: Mixture, two: Mixture) -> tuple[str, str, str]:
    """Kind, which of them is racemic, and a note."""
    mirrored = frozenset(leader(space, bits ^ space.centres) for bits in two)
    note = "" if len(one) == len(two) == 1 else "a mixture, by the groups of its centres"
    if one == two:
        return SAME, "", note
    if one == mirrored:
        return ENANTIOMER, "", note
    if not one & two and not one & mirrored:
        return DIASTEREOMER, "", note
    for mixture, other, which in ((one, two, "one"), (two, one, "two")):
        image = frozenset(leader(space, bits ^ space.centres) for bits in mixture)
        if len(mixture) == 2 and image == mixture and len(other) == 1 and other <= mixture:
            return RACEMATE, which, ""
    return UNDETERMINED, "", "one is a mixture that holds the other or part of it"


def _fewest(space: Space, first: list[int], second: list[int], mask: int) -> list[int]:
    """The units that differ where the two are laid on each other in the best way."""
    images = {member for bits in second[:64] for member in orbit(space, bits)}
    differing = min(
        ((a ^ b) & mask for a in first[:64] for b in images),
        key=lambda bits: (bin(bits).count("1"), bits),
    )
    return [n for n in range(len(space.units)) if differing >> n & 1]


def _why(states: tuple[State, State]) -> list[str]:
    said = []
    for title, state in zip(("the first", "the second"), states, strict=True):
        if state.doubts:
            said.append(f"{title}: {'; '.join(state.doubts)}")
        elif state.open:
            said.append(f"{title} leaves {_number(state.open)} open")
        if state.either:
            said.append(f"{title} gives a relative configuration only")
    return said


def _number(bits: int) -> str:
    count = bin(bits).count("1")
    return "one unit" if count == 1 else f"{count} units"
