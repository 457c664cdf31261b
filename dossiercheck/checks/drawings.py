"""A drawing by itself: marks that mean nothing, and units left open."""

from __future__ import annotations

from collections.abc import Iterator

from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.interpretation import Reading
from dossiercheck.model import Role
from dossiercheck.stereo.descriptors import ambiguous_wedges
from dossiercheck.stereo.structure import Structure


def _drawn(case: Case) -> Iterator[tuple[Reading, Structure]]:
    for reading in case.of_role(Role.MOLFILE):
        structure = reading.structure
        if structure is not None and structure.dimension == 2 and not structure.doubt:
            yield reading, structure


def _centres(structure: Structure) -> set[int]:
    return {unit.atoms[0] for unit in structure.units if unit.kind == "centre"}


def _open(structure: Structure) -> set[int]:
    return {unit.atoms[0] for unit in structure.undefined if unit.kind == "centre"}


@check(needs=("drawing",), fields=("atom",))
def wedge_not_stereogenic(case: Case, params: Params) -> Iterator[Observation]:
    """A wedge begins at an atom that is no stereogenic centre (IUPAC 2006 recommendations on
    the graphical representation of configuration, ST-1)."""
    for reading, structure in _drawn(case):
        wedged = {mark.begin for mark in structure.marks if mark.style in ("wedge", "hash")}
        if not wedged:
            continue
        for atom in sorted(wedged - _centres(structure) - _open(structure)):
            if _on_axis(structure, atom):
                continue
            yield Observation(
                {"atom": f"{structure.mol.GetAtomWithIdx(atom).GetSymbol()} {atom + 1}"},
                (exhibit(reading, atoms={atom: "!"}),),
            )


@check(needs=("drawing",), fields=("atom", "reason"))
def wedge_ambiguous(case: Case, params: Params) -> Iterator[Observation]:
    """The wedges at a stereogenic centre can be read in two ways or contradict each other."""
    for reading, structure in _drawn(case):
        for atom, why in ambiguous_wedges(structure, _centres(structure)).items():
            yield Observation(
                {
                    "atom": f"{structure.mol.GetAtomWithIdx(atom).GetSymbol()} {atom + 1}",
                    "reason": why,
                },
                (exhibit(reading, atoms={atom: "?"}),),
                case.unit_ids.get(frozenset((atom,)), "") if reading is case.reference else "",
            )


@check(needs=("drawing",), fields=("atoms", "count"))
def undefined_centre(case: Case, params: Params) -> Iterator[Observation]:
    """A drawing leaves centres open and nothing says that this is meant."""
    if _said_to_be_mixture(case):
        return
    for reading, structure in _drawn(case):
        wavy = {atom for m in structure.marks if m.style == "wavy" for atom in (m.begin, m.end)}
        atoms = sorted(_open(structure) - wavy - _said_elsewhere(case, reading))
        if not atoms:
            continue
        yield Observation(
            {
                "atoms": ", ".join(str(atom + 1) for atom in atoms),
                "count": str(len(atoms)),
            },
            (exhibit(reading, atoms=dict.fromkeys(atoms, "?")),),
            ", ".join(
                case.unit_ids[frozenset((atom,))]
                for atom in atoms
                if reading is case.reference and frozenset((atom,)) in case.unit_ids
            ),
        )


@check(needs=("drawing",), fields=("atom",))
def wavy_bond(case: Case, params: Params) -> Iterator[Observation]:
    """A wavy bond at a stereogenic unit says that its configuration is open."""
    for reading, structure in _drawn(case):
        possible = {atom for _, atoms, _ in structure.possible for atom in atoms}
        for mark in structure.marks:
            ends = [atom for atom in (mark.begin, mark.end) if atom in possible]
            if mark.style == "wavy" and ends:
                yield Observation(
                    {"atom": str(ends[0] + 1)}, (exhibit(reading, atoms={ends[0]: "?"}),)
                )


def _on_axis(structure: Structure, atom: int) -> bool:
    """Wedges also show an axis: at an end of a cumulene, or beside a biaryl bond."""
    here = structure.mol.GetAtomWithIdx(atom)
    if here.GetIsAromatic():
        return True
    return any(
        bond.GetBondTypeAsDouble() == 2.0
        and sum(b.GetBondTypeAsDouble() == 2.0 for b in bond.GetOtherAtom(here).GetBonds()) > 1
        for bond in here.GetBonds()
    )


def _said_elsewhere(case: Case, reading: Reading) -> set[int]:
    """Units of this drawing that another evidence specifies: that is a finding of its own."""
    if reading is not case.reference:
        # A drawing other than the reference is compared with the reference.
        return {
            atom
            for pair in case.pairs
            if pair.reading is reading
            for view in pair.views
            for atom in view.other
        }
    return {
        atom
        for pair in case.pairs
        for view in pair.views
        if view.silent_side == "reference"
        for atom in view.atoms
    }


def _said_to_be_mixture(case: Case) -> bool:
    for reading in case.readings:
        if reading.name is not None and reading.name.stereo_kind == "racemic":
            return True
        if reading.statement is not None and reading.statement.kind == "racemic":
            return True
    return False
