"""A name's printed letters put on the units they speak of, and held against the recomputed ones."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from dossiercheck.model import State
from dossiercheck.names.parser import NameParser
from dossiercheck.names.reading import NameReading
from dossiercheck.names.tying import tie
from dossiercheck.stereo.structure import Structure
from dossiercheck.views import UnitView

# Descriptors the name parser could not take. One at a locant that it holds not stereogenic may
# be right all the same: it looks at the constitution alone, and a centre may exist only through
# other centres (Sequence Rules 4 and 5).
LEFT_OUT = ("descriptor-stripped", "locant-not-stereogenic")
ABSOLUTE = {"R", "S", "r", "s", "E", "Z"}


def lettered(
    views: tuple[UnitView, ...],
    own: Structure,
    name: NameReading,
    reference: Structure,
    parser: NameParser,
) -> tuple[UnitView, ...]:
    """Put the printed descriptor on each unit, and doubt where two computations differ; `own` is
    the name's structure.

    The name parser placed the atoms by its own ranking; the printed letter held against the
    letter recomputed on the reference is a second way to the same question. Where the structure
    says "opposite" and the letters say "equal", or the reverse, nobody is right for certain.
    """
    by_atoms = {frozenset(t.atoms): t.descriptor for t in tie(name, parser) if t.atoms}
    faults = {f.descriptor: f for f in name.faults if f.descriptor is not None}
    relative = bool(reference.groups or own.groups)
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
    if view.shows not in ABSOLUTE:
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
    if view.shows not in ABSOLUTE or not view.descriptor:
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
