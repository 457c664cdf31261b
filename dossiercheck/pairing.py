"""One structural evidence laid on the reference: aligned, unit by unit, doubts included."""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from dataclasses import replace

from dossiercheck.interpretation import Reading
from dossiercheck.lettering import ABSOLUTE, LEFT_OUT, lettered
from dossiercheck.model import State
from dossiercheck.names.parser import NameParser
from dossiercheck.names.reading import NameReading
from dossiercheck.stereo import alignment as al
from dossiercheck.stereo import constitution as con
from dossiercheck.stereo.descriptors import doubt_at
from dossiercheck.stereo.structure import Structure
from dossiercheck.views import Pair, UnitView


def lay(reference: Reading, reading: Reading, parser: NameParser) -> Pair:
    """Lay a structural reading on the reference; both have a structure."""
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
        views = lettered(views, reading.structure, reading.name, reference.structure, parser)
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
    printed = Counter(d.text.upper() for d in reading.name.descriptors if d.text in ABSOLUTE)
    computed = Counter(verdict.other_descriptor.upper() for verdict in found.verdicts)
    return bool(printed - computed)
