"""What a change means: whether it makes another stereoisomer, and at which units.

Settled from canonical forms of the structures before and after (InChI with fixed hydrogens and
canonical isomeric SMILES must agree), never by the program under test.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from itertools import combinations

from rdkit import Chem

from tests.benchmarks import molecules, opsin, printed
from tests.benchmarks.changes import DRAWING_KINDS, NAME_KINDS, Proposal, letter_changed
from tests.benchmarks.corpus import SoundRecord
from tests.benchmarks.molecules import Identity, Unit

_MOST_PAIRS = 300


@dataclass(frozen=True, slots=True)
class Truth:
    """`alternatives`: each is a set of units that alone explains the change (several where the
    molecule is symmetric); none where it could not be settled. `locants`: as printed in the name,
    before and after."""

    alternatives: tuple[frozenset[Unit], ...] = ()
    locants: frozenset[str] = frozenset()


@dataclass(frozen=True, slots=True)
class Mutant:
    """A changed record with what is true of it. `meaning_changed` is None where it cannot be
    settled; `why` says how it was settled or why not."""

    record: SoundRecord
    changed: SoundRecord
    kind: str
    truth: Truth
    meaning_changed: bool | None
    why: str


def settle(proposals: Sequence[Proposal]) -> list[Mutant]:
    """The proposals as mutants, all names read in one go."""
    names: set[str] = set()
    for proposal in proposals:
        if proposal.kind in NAME_KINDS:
            names.update(_names_needed(proposal))
    smiles = opsin.parse(names)
    known: dict[str, Identity | None] = {}

    def of_name(name: str) -> Identity | None:
        name = printed.bare(name)
        if name not in known:
            text = smiles.get(name)
            known[name] = molecules.identity(molecules.read_smiles(text)) if text else None
        return known[name]

    return [_settle(proposal, of_name) for proposal in proposals]


def _names_needed(proposal: Proposal) -> Iterable[str]:
    name = proposal.record.name
    yield printed.bare(name)
    yield printed.bare(proposal.changed.name)
    if proposal.kind == "locant ± 1":
        yield printed.bare(letter_changed(name, proposal.touched[0]))


def _settle(proposal: Proposal, of_name: Callable[[str], Identity | None]) -> Mutant:
    if proposal.kind in NAME_KINDS:
        return _settle_name(proposal, of_name)
    if proposal.kind in DRAWING_KINDS:
        return _settle_drawing(proposal)
    changed = proposal.record != proposal.changed
    return _mutant(proposal, Truth(), changed, proposal.detail)


def _mutant(proposal: Proposal, truth: Truth, changed: bool | None, why: str) -> Mutant:
    return Mutant(proposal.record, proposal.changed, proposal.kind, truth, changed, why)


def _settle_name(proposal: Proposal, of_name: Callable[[str], Identity | None]) -> Mutant:
    before, after = of_name(proposal.record.name), of_name(proposal.changed.name)
    if before is None:
        return _mutant(proposal, Truth(), None, "the parser refuses the original name")
    drawing = molecules.read_molblock(proposal.record.molblock)
    assert drawing is not None
    if before.formula != molecules.neutral_formula(drawing):
        return _mutant(proposal, Truth(), None, "the original name is of another formula")
    locants = frozenset(d.locant for d in proposal.touched) | {proposal.detail} - {""}
    if after is None:
        # Only a locant can become unreadable in a way that has one place.
        units: tuple[frozenset[Unit], ...] = ()
        if proposal.kind == "locant ± 1":
            flipped = of_name(letter_changed(proposal.record.name, proposal.touched[0]))
            units = _explained("flip R/S", proposal, drawing, before, flipped)
            units = units or _explained("flip E/Z", proposal, drawing, before, flipped)
        return _mutant(proposal, Truth(units, locants), True, "the parser refuses the new name")
    same = before.same_as(after)
    if same is None:
        return _mutant(proposal, Truth(), None, "the canonical forms disagree")
    if same:
        return _mutant(proposal, Truth(), False, "the same stereoisomer")
    units = _explained(proposal.kind, proposal, drawing, before, after)
    return _mutant(proposal, Truth(units, locants), True, "another stereoisomer")


def _settle_drawing(proposal: Proposal) -> Mutant:
    """A wedge turned round or taken away; the units are those of the drawing as it now is."""
    was = molecules.read_molblock(proposal.record.molblock)
    now = molecules.read_molblock(proposal.changed.molblock)
    before, after = molecules.identity(was), molecules.identity(now)
    if before is None or after is None or now is None:
        return _mutant(proposal, Truth(), None, "the library does not read the new drawing")
    same = before.same_as(after)
    if same is None:
        return _mutant(proposal, Truth(), None, "the canonical forms disagree")
    if same:
        return _mutant(proposal, Truth(), False, "the same stereoisomer")
    units: tuple[frozenset[Unit], ...] = ()
    if proposal.kind == "wedge flipped":
        units = _matching(now, before, ((unit,) for unit in _units(now, 1)), ())
    units = units or (frozenset({(proposal.atom,)}),)
    return _mutant(proposal, Truth(units), True, "another stereoisomer")


def _explained(
    kind: str, proposal: Proposal, drawing: Chem.Mol, before: Identity, after: Identity | None
) -> tuple[frozenset[Unit], ...]:
    """Sets of units of the drawing that, changed in the way of this kind, give the new name's
    structure. Nothing where the drawing and the original name have no canonical form in common
    (another tautomer, say): then the two cannot be compared in this way."""
    own = molecules.identity(drawing)
    if after is None or own is None:
        return ()
    centres, bonds = _units(drawing, 1), _units(drawing, 2)
    every = [*centres, *bonds]
    flips: Iterable[tuple[Unit, ...]] = ()
    drops: Iterable[tuple[Unit, ...]] = ()
    if kind == "flip R/S":
        flips = ((unit,) for unit in centres)
    elif kind == "flip E/Z":
        flips = ((unit,) for unit in bonds)
    elif kind.startswith("swap"):
        letters = dict(proposal.record.units)
        wanted = {descriptor.letter for descriptor in proposal.touched}
        flips = [
            pair for pair in combinations(every, 2) if {letters.get(u, "") for u in pair} == wanted
        ][:_MOST_PAIRS]
    elif kind == "invert all":
        letters = dict(proposal.record.units)
        flips = [tuple(unit for unit in centres if letters.get(unit, "") in "RS")]
    elif kind == "drop one":
        drops = ((unit,) for unit in every)
    elif kind == "drop all":
        drops = [tuple(every)]
    elif kind == "locant ± 1":
        drops = ((unit,) for unit in every)
        flips = ((unit,) for unit in every)
    for form in ("fixed", "standard", "smiles"):
        if getattr(own, form) and getattr(own, form) == getattr(before, form):
            return _matching(drawing, after, flips, drops, form)
    return ()


def _matching(
    mol: Chem.Mol,
    wanted: Identity,
    flips: Iterable[tuple[Unit, ...]],
    drops: Iterable[tuple[Unit, ...]],
    form: str = "fixed",
) -> tuple[frozenset[Unit], ...]:
    found = []
    for units, how in (*((u, "flip") for u in flips), *((u, "unset") for u in drops)):
        changed = molecules.with_units(mol, **{how: units})
        if molecules.form(changed, form) == getattr(wanted, form):
            found.append(frozenset(units))
    return tuple(found)


def _units(mol: Chem.Mol, size: int) -> list[Unit]:
    """The units that have a descriptor: centres (1) or double bonds (2)."""
    return [unit for unit in molecules.labels(Chem.Mol(mol)) if len(unit) == size]
