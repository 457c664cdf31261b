"""A substance's evidence held against one reference, unit by unit."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

from dossiercheck.interpretation import Reading
from dossiercheck.model import Concordance, Kind, Role, State, UnitCell, UnitRow
from dossiercheck.names.parser import NameParser
from dossiercheck.pairing import lay
from dossiercheck.stereo import constitution as con
from dossiercheck.stereo.structure import Structure
from dossiercheck.substances import REGISTER, Substance
from dossiercheck.views import Pair, UnitView

_RANK = {Kind.DRAWING: 0, Kind.COORDINATES: 1, Kind.NOTATION: 2, Kind.NAME: 3}


@dataclass(eq=False, slots=True)
class Case:
    """What a check is given: a substance, its readings, the reference among them, and every
    other structural reading laid on it. `unit_ids` names the units of the table ("u1") by the
    reference's atoms. `others` are the references of the substances that its statements name, by
    the keys of their labels."""

    substance: Substance
    readings: Sequence[Reading]
    reference: Reading | None
    pairs: tuple[Pair, ...]
    unit_ids: dict[frozenset[int], str] = field(default_factory=dict)
    others: Mapping[str, Reading] = field(default_factory=dict)

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
    reference = reference_of(substance, readings)
    if reference is None:
        return Case(substance, readings, None, ())
    pairs = tuple(lay(reference, r, parser) for r in structural if r is not reference)
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


def reference_of(substance: Substance, readings: Sequence[Reading]) -> Reading | None:
    """The structural reading that the others are held against, None where there is none."""
    structural = [r for r in readings if r.structure is not None]
    firm = [r for r in structural if r.evidence.id not in substance.weak]
    return _reference(firm or structural) if structural else None


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
