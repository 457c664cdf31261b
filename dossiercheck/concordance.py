"""A substance's evidence held against one reference, unit by unit."""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass, field, replace

from dossiercheck.interpretation import Reading
from dossiercheck.model import Concordance, Kind, Role, State, UnitCell, UnitRow
from dossiercheck.names.parser import NameParser
from dossiercheck.names.reading import NameReading
from dossiercheck.names.tying import tie
from dossiercheck.stereo import alignment as al
from dossiercheck.stereo import constitution as con
from dossiercheck.stereo.descriptors import doubt_at
from dossiercheck.stereo.structure import Structure
from dossiercheck.substances import REGISTER, Substance

# Descriptors the name parser could not take. One at a locant that it holds not stereogenic may
# be right all the same: it looks at the constitution alone, and a centre may exist only through
# other centres (Sequence Rules 4 and 5).
LEFT_OUT = ("descriptor-stripped", "locant-not-stereogenic")
_ABSOLUTE = {"R", "S", "r", "s", "E", "Z"}
_RANK = {Kind.DRAWING: 0, Kind.COORDINATES: 1, Kind.NOTATION: 2, Kind.NAME: 3}


@dataclass(frozen=True, slots=True)
class UnitView:
    """One unit as one evidence has it.

    `atoms` number the reference, `other` the evidence's own structure, 0-based. `state` is that
    of the concordance; `silent_side` is "reference" or "other" where one of them is silent.
    `descriptor` is the reference's, `shows` the evidence's; for a name `shows` is the printed
    descriptor where it could be tied to the unit, and `span` its characters.
    """

    kind: str
    atoms: tuple[int, ...]
    other: tuple[int, ...]
    state: State
    descriptor: str
    shows: str
    silent_side: str = ""
    locant: str = ""
    span: tuple[int, int] | None = None
    note: str = ""


@dataclass(frozen=True, slots=True)
class Pair:
    """One structural evidence laid on the reference."""

    reading: Reading
    alignment: al.Alignment
    views: tuple[UnitView, ...]

    def having(self, state: State, silent_side: str = "") -> list[UnitView]:
        """The units in a state, in the reference's order."""
        return [
            view
            for view in self.views
            if view.state is state and (not silent_side or view.silent_side == silent_side)
        ]


@dataclass(eq=False, slots=True)
class Case:
    """What a check is given: a substance, its readings, the reference among them, and every
    other structural reading laid on it. `unit_ids` names the units of the table ("u1") by the
    reference's atoms."""

    substance: Substance
    readings: Sequence[Reading]
    reference: Reading | None
    pairs: tuple[Pair, ...]
    unit_ids: dict[frozenset[int], str] = field(default_factory=dict)

    def of_role(self, role: Role) -> list[Reading]:
        """The substance's readings in a role that were understood."""
        return [r for r in self.readings if r.evidence.role is role and not r.refusal]

    @property
    def structure(self) -> Structure | None:
        """The reference's structure."""
        return self.reference.structure if self.reference else None

    @property
    def kinds(self) -> frozenset[str]:
        """The kinds of evidence there are."""
        return frozenset(str(reading.kind) for reading in self.readings)


def build_case(substance: Substance, readings: Sequence[Reading], parser: NameParser) -> Case:
    """Choose the reference and lay everything else on it."""
    structural = [r for r in readings if r.structure is not None]
    if not structural:
        return Case(substance, readings, None, ())
    reference = _reference(structural)
    pairs = tuple(_pair(reference, r, parser) for r in structural if r is not reference)
    case = Case(substance, readings, reference, pairs)
    atoms: dict[frozenset[int], None] = {}
    assert reference.structure is not None
    for unit in reference.structure.units:
        atoms.setdefault(frozenset(unit.atoms))
    for pair in pairs:
        for view in pair.views:
            atoms.setdefault(frozenset(view.atoms))
    for unit in reference.structure.undefined:
        atoms.setdefault(frozenset(unit.atoms))
    ordered = sorted(atoms, key=lambda unit: (len(unit), sorted(unit)))
    case.unit_ids = {unit: f"u{number}" for number, unit in enumerate(ordered, 1)}
    return case


def table(case: Case) -> Concordance | None:
    """The concordance as data, None where there is no structure to hold anything against."""
    if case.reference is None or case.structure is None:
        return None
    own = {frozenset(u.atoms): u for u in (*case.structure.units, *case.structure.undefined)}
    by_pair = [{frozenset(view.atoms): view for view in pair.views} for pair in case.pairs]
    rows = []
    for unit, name in case.unit_ids.items():
        mine = own.get(unit)
        shown = mine.descriptor if mine and mine.descriptor else ""
        state = State.AGREES if shown else State.SILENT
        cells = [UnitCell(case.reference.evidence.id, state, shown or "—", "reference")]
        locant = ""
        for pair, views in zip(case.pairs, by_pair, strict=True):
            view = views.get(unit)
            cells.append(_cell(pair, view))
            if view and not locant:
                locant = view.locant
        kind = "double bond" if len(unit) == 2 else "centre"
        rows.append(UnitRow(name, kind, tuple(a + 1 for a in sorted(unit)), locant, tuple(cells)))
    constitution = {
        pair.reading.evidence.id: _constitution(pair.alignment.constitution) for pair in case.pairs
    }
    return Concordance(case.reference.evidence.id, tuple(rows), constitution)


def _reference(structural: Sequence[Reading]) -> Reading:
    """What the register declares; else drawings first, among them the one that specifies most."""
    rank = min(_rank(reading) for reading in structural)
    likely = [reading for reading in structural if _rank(reading) == rank]
    return likely[0] if len(likely) == 1 else max(likely, key=_specified)


def _rank(reading: Reading) -> int:
    declared = reading.evidence.group.startswith(REGISTER)
    return _RANK[reading.kind] - (len(_RANK) if declared else 0)


def _specified(reading: Reading) -> int:
    return len(reading.structure.units) if reading.structure else 0


def _cell(pair: Pair, view: UnitView | None) -> UnitCell:
    said = pair.reading.evidence.id
    if view is None:
        return UnitCell(said, State.SILENT, "—", "")
    return UnitCell(said, view.state, view.shows or "—", view.note)


def _constitution(found: con.Constitution) -> str:
    return f"{found.verdict}: {found.detail}" if found.detail else found.verdict


def _pair(reference: Reading, reading: Reading, parser: NameParser) -> Pair:
    assert reference.structure is not None
    assert reading.structure is not None
    found = al.align(reference.structure, reading.structure)
    if reference.structure.dimension == 2 and not reading.structure.dimension:
        reading.like = (reference.structure, found.mapping)
    views = tuple(_view(verdict, reading.structure) for verdict in found.verdicts)
    if found.doubt:
        views = tuple(
            replace(v, state=State.UNDETERMINED, note=found.doubt)
            if v.state is not State.AGREES
            else v
            for v in views
        )
    if reading.name is not None:
        views = _without_assumed(views, reading.name)
    if reading.name is not None and _needs_tying(found, views, reading):
        views = _tied(views, reading, reading.name, reference.structure, parser)
    views = tuple(_sure(view, reference.structure, reading.structure) for view in views)
    return Pair(reading, found, views)


def _sure(view: UnitView, reference: Structure, other: Structure) -> UnitView:
    """A difference counts only where two independent computations describe the unit alike, in
    both structures: a mark that one of them reads in another way makes no finding."""
    if view.state is not State.DIFFERS:
        return view
    for structure, atoms in ((reference, view.atoms), (other, view.other)):
        if any(unit.atoms == atoms for unit in structure.units):
            doubt = doubt_at(structure, atoms)
            if doubt:
                return replace(view, state=State.UNDETERMINED, note=doubt)
    return view


def _without_assumed(views: tuple[UnitView, ...], name: NameReading) -> tuple[UnitView, ...]:
    """A configuration that the name parser only assumed says nothing, either way."""
    for fault in name.faults:
        if fault.slug == "assumed-configuration":
            views = tuple(
                replace(view, state=State.UNDETERMINED, silent_side="", shows="", note=fault.detail)
                if set(view.other) & set(fault.atoms)
                else view
                for view in views
            )
    return views


def _view(verdict: al.Verdict, other: Structure) -> UnitView:
    locants = [other.locants[a] for a in verdict.other] if other.locants else []
    state, silent = {
        al.SAME: (State.AGREES, ""),
        al.OPPOSITE: (State.DIFFERS, ""),
        al.OTHER_SILENT: (State.SILENT, "other"),
        al.REFERENCE_SILENT: (State.SILENT, "reference"),
    }[verdict.state]
    return UnitView(
        verdict.kind,
        verdict.atoms,
        verdict.other,
        state,
        verdict.descriptor,
        verdict.other_descriptor,
        silent,
        _locant(locants),
    )


def _locant(locants: Sequence[str]) -> str:
    """A double bond is cited by its lower locant (IUPAC 2013, P-31.1.4.2.4)."""
    kept = [locant for locant in locants if locant]
    return min(kept, key=lambda text: (len(text), text)) if kept else ""


def _needs_tying(found: al.Alignment, views: Sequence[UnitView], reading: Reading) -> bool:
    """Whether the printed letters must be tied to their units, which costs a parse each."""
    assert reading.name is not None
    assert reading.structure is not None
    if any(view.state is not State.AGREES for view in views):
        return True
    if found.constitution.verdict == con.DIFFERENT:
        return False
    if any(fault.slug in LEFT_OUT for fault in reading.name.faults):
        return True
    if reading.structure.groups:
        return False
    printed = Counter(d.text.upper() for d in reading.name.descriptors if d.text in _ABSOLUTE)
    computed = Counter(verdict.other_descriptor.upper() for verdict in found.verdicts)
    return bool(printed - computed)


def _tied(
    views: tuple[UnitView, ...],
    reading: Reading,
    name: NameReading,
    reference: Structure,
    parser: NameParser,
) -> tuple[UnitView, ...]:
    """Put the printed descriptor on each unit, and doubt where two computations differ.

    The name parser placed the atoms by its own ranking; the printed letter held against the
    letter recomputed on the reference is a second way to the same question. Where the structure
    says "opposite" and the letters say "equal", or the reverse, nobody is right for certain.
    """
    assert reading.structure is not None
    by_atoms = {frozenset(t.atoms): t.descriptor for t in tie(name, parser) if t.atoms}
    faults = {f.descriptor: f for f in name.faults if f.descriptor is not None}
    relative = bool(reference.groups or reading.structure.groups)
    result = []
    for view in views:
        index = by_atoms.get(frozenset(view.other))
        if index is None:
            result.append(_by_locant(view, views, name, bool(reference.undefined)))
            continue
        printed = name.descriptors[index]
        shown = replace(
            view, shows=printed.text, locant=printed.locant or view.locant, span=printed.span
        )
        fault = faults.get(index)
        if view.silent_side == "other":
            shown = _by_letter(shown)
        elif not relative and not (fault and fault.slug == "overrides-implied"):
            shown = _cross_checked(shown, view.shows)
        result.append(shown)
    return _loose_bonds(_in_any_order(result, name), name, reference)


def _in_any_order(views: list[UnitView], name: NameReading) -> list[UnitView]:
    """Letters without locants ("(E,Z)-", "(R,S)-") may be meant in another order than the name
    parser takes them in: where all of them agree in some order, none differs for certain."""
    bare = {d.span for d in name.descriptors if not d.locant}
    loose = [v for v in views if v.span in bare and v.state in (State.AGREES, State.DIFFERS)]
    if len(loose) < 2 or sorted(v.shows.upper() for v in loose) != sorted(
        v.descriptor.upper() for v in loose
    ):
        return views
    note = "the letters have no locants; in another order they agree"
    return [
        replace(view, state=State.UNDETERMINED, note=note)
        if view in loose and view.state is State.DIFFERS
        else view
        for view in views
    ]


def _by_letter(view: UnitView) -> UnitView:
    """A descriptor left out of the name's structure and yet tied: its letter alone decides."""
    agrees = view.shows.upper() == view.descriptor.upper()
    if view.shows not in _ABSOLUTE:
        note = "the descriptor could not be held against the reference"
        return replace(view, state=State.UNDETERMINED, silent_side="", note=note)
    return replace(
        view,
        state=State.AGREES if agrees else State.DIFFERS,
        silent_side="",
        note="held against the reference by its letter alone",
    )


def _cross_checked(view: UnitView, computed: str) -> UnitView:
    """Doubt where the structures say "opposite" and the letters "equal", or the reverse."""
    if view.shows not in _ABSOLUTE or not view.descriptor:
        return view
    equal = view.shows.upper() == view.descriptor.upper()
    if view.state not in (State.AGREES, State.DIFFERS) or equal == (view.state is State.AGREES):
        return view
    return replace(
        view,
        state=State.UNDETERMINED,
        note=f"printed {view.shows}; recomputed {view.descriptor} on the reference; "
        f"the name parser's own ranking gives {computed or 'nothing'}",
    )


def _loose_bonds(
    views: list[UnitView], name: NameReading, reference: Structure
) -> tuple[UnitView, ...]:
    """An E or Z without a locant, which the parser did not put on a double bond of the reference
    while one with that letter is left silent: it may speak of that one."""
    settled = {view.span for view in views if view.state in (State.AGREES, State.DIFFERS)}
    loose = {
        d.span: d.text
        for d in name.descriptors
        if d.text in ("E", "Z") and not d.locant and d.span not in settled
    }
    possible = [atoms for kind, atoms, _ in reference.possible if kind != "centre"]
    if len(possible) == 1 and len(loose) == 1:
        # There is no other double bond that it could speak of.
        span, letter = next(iter(loose.items()))
        return tuple(
            _by_letter(replace(view, shows=letter, span=span))
            if view.kind == "double bond" and view.silent_side == "other"
            else view
            for view in views
        )
    note = "the descriptor has no locant and may speak of another double bond"
    return tuple(
        replace(view, state=State.UNDETERMINED, silent_side="", note=note)
        if (view.silent_side == "other" and view.descriptor in loose.values())
        or (view.silent_side == "reference" and view.span in loose)
        else view
        for view in views
    )


def _by_locant(
    view: UnitView, views: Sequence[UnitView], name: NameReading, open_units: bool
) -> UnitView:
    """A descriptor that the parser could not take, judged by its locant and its letter.

    Several atoms may carry the locant (C1 of a ring and of its carboxy group); where only one of
    them is a unit, it is meant. One without a locant, whose letter the silent unit has, cannot be
    tied to anything: that is doubt, and neither agreement nor silence.
    """
    if view.silent_side != "other":
        return view
    for fault in name.faults:
        if fault.slug not in LEFT_OUT or fault.descriptor is None:
            continue
        printed = name.descriptors[fault.descriptor]
        meant = [v for v in views if v.kind == view.kind and set(v.other) & set(fault.atoms)]
        # The parser takes no r or s, and its labels do not reach every atom (a spiro atom has
        # but one): such a letter with no unit at its locant may speak of the silent one.
        nowhere = not printed.locant and not fault.atoms
        loose = printed.text == view.descriptor and (
            nowhere or (not meant and printed.text in ("r", "s"))
        )
        if not loose and not set(view.other) & set(fault.atoms):
            continue
        shown = replace(view, shows=printed.text, locant=printed.locant, span=printed.span)
        several = len(fault.atoms) > len(view.other) if open_units else len(meant) > 1
        if loose or several:
            note = "the descriptor could not be tied to one unit"
            return replace(shown, state=State.UNDETERMINED, silent_side="", note=note)
        return _by_letter(shown)
    return view
