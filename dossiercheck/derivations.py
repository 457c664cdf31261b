"""The derivation of every unit that a finding speaks of, put beside its exhibits.

Worked out where the structures are still at hand: with the case, in the process that judges it.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import replace

from dossiercheck.concordance import Case
from dossiercheck.interpretation import Reading
from dossiercheck.model import Derived, Exhibit, Finding
from dossiercheck.stereo.descriptors import confirmed
from dossiercheck.stereo.showing import shown


def with_derivations(case: Case, findings: Iterable[Finding]) -> tuple[Finding, ...]:
    """The findings, each drawn exhibit with the derivations of the finding's units in its own
    structure. A unit to which neither computation gives a letter there has none."""
    atoms = {name: unit for unit, name in case.unit_ids.items()}
    return tuple(_derived(case, finding, atoms) for finding in findings)


def _derived(case: Case, finding: Finding, atoms: Mapping[str, frozenset[int]]) -> Finding:
    units = [atoms[name] for name in finding.unit.split(", ") if name in atoms]
    if not units:
        return finding
    exhibits = tuple(
        replace(one, derived=tuple(_of_exhibit(case, one, units))) if one.drawing else one
        for one in finding.exhibits
    )
    return replace(finding, exhibits=exhibits)


def _of_exhibit(case: Case, exhibit: Exhibit, units: Iterable[frozenset[int]]) -> Iterator[Derived]:
    for unit in units:
        for reading, own in _at(case, exhibit.evidence, unit):
            assert reading.structure is not None
            found = confirmed(reading.structure, own)
            if found is not None:
                doubt = _unstated(reading, own)
                yield shown(reading.structure, found, exhibit.drawing, doubt)


def _at(
    case: Case, evidence: str, unit: frozenset[int]
) -> Iterator[tuple[Reading, tuple[int, ...]]]:
    """The reading of an evidence and its own atoms of a unit of the reference."""
    if case.reference is not None and case.reference.evidence.id == evidence:
        yield case.reference, tuple(sorted(unit))
        return
    for pair in case.pairs:
        if pair.reading.evidence.id == evidence:
            view = next((one for one in pair.views if frozenset(one.atoms) == unit), None)
            if view is not None:
                yield pair.reading, view.other
            return


def _unstated(reading: Reading, atoms: Iterable[int]) -> str:
    """Why a name's configuration at some atoms is nobody's statement, "" where it is one."""
    own = set(atoms)
    for fault in reading.name.faults if reading.name else ():
        if fault.slug == "assumed-configuration" and own & set(fault.atoms):
            return fault.detail
    return ""
