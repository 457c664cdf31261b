"""Configuration: what two structural evidences say of the same stereogenic units."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from dossiercheck.checks.exhibits import exhibit, of_units
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.model import Kind, Role, State
from dossiercheck.stereo import constitution as con
from dossiercheck.stereo.structure import Structure, is_pyramidal_nitrogen
from dossiercheck.views import Pair, UnitView

# A fault of the name that leaves a unit without its descriptor explains the silence there; the
# silence is then part of that finding and not one of its own.
OFFENCES = (
    "no-such-locant",
    "locant-not-stereogenic",
    "duplicate-descriptor",
    "contradictory-descriptors",
    "lost-space",
)
LAID = (con.SAME, con.CHARGE, con.MOBILE, con.TAUTOMER, con.SALT)


def of_kind(case: Case, *kinds: Kind) -> Iterator[Pair]:
    """The pairs whose evidence is of one of these kinds."""
    return (pair for pair in case.pairs if pair.reading.kind in kinds)


def unit_of(case: Case, views: Sequence[UnitView]) -> str:
    """The table's names of some units, comma-separated."""
    return ", ".join(case.unit_ids[frozenset(view.atoms)] for view in views)


def cite(views: Sequence[UnitView]) -> str:
    """Units as a reader finds them: the name's locant where there is one, else the atoms."""
    return ", ".join(
        view.locant or f"atom {'–'.join(str(a + 1) for a in view.atoms)}" for view in views
    )


def steps(case: Case, pair: Pair, views: Sequence[UnitView]) -> tuple[str, ...]:
    """How the comparison was made, in steps that can be followed on paper."""
    assert pair.reading.structure is not None
    laid = len(pair.alignment.mapping)
    lines = [
        f"The structure of the name was laid on the {called(case)}: {laid} atoms correspond"
        f" (constitution: {pair.alignment.constitution.verdict})."
    ]
    for view in views:
        where = "–".join(str(atom + 1) for atom in view.atoms)
        spoken = f"atom {where} of the {called(case)} is {view.locant or 'unnumbered'} in the name"
        lines.append(
            f"{view.kind.capitalize()}: {spoken}; recomputed there"
            f" {view.descriptor or 'no descriptor'}; the name has {view.shows or 'none'}"
            f"{' as printed' if view.span else ' by its own structure'}."
        )
    return tuple(lines)


def different(pair: Pair) -> list[UnitView]:
    """Units with opposite configuration."""
    return pair.having(State.DIFFERS)


@check(needs=("name",), fields=("locant", "unit", "printed", "recomputed", "reference"))
def configuration_differs(case: Case, params: Params) -> Iterator[Observation]:
    """A name gives one unit, or several but not all, the configuration opposite to that of the
    reference structure."""
    for pair in of_kind(case, Kind.NAME):
        mirrored = {view for _, part in mirrored_parts(case, pair) for view in part}
        at_fault = _at_fault(pair)
        for view in different(pair):
            if view in mirrored or view.span in at_fault:
                continue
            assert case.reference is not None
            yield Observation(
                {
                    "locant": cite([view]),
                    "unit": view.kind,
                    "printed": view.shows or "the opposite",
                    "recomputed": view.descriptor or "the opposite",
                    "reference": called(case),
                },
                (
                    of_units(pair.reading, [view], reference=False),
                    of_units(case.reference, [view], reference=True),
                ),
                unit_of(case, [view]),
                view.locant,
                steps(case, pair, [view]),
            )


@check(needs=("name",), fields=("count", "reference", "part"))
def mirror_image(case: Case, params: Params) -> Iterator[Observation]:
    """A name in which the two or more centres of a component are all opposite: it names the
    enantiomer of the compound, or that of its counter-ion."""
    for pair in of_kind(case, Kind.NAME):
        for part, views in mirrored_parts(case, pair):
            assert case.reference is not None
            yield Observation(
                {"count": str(len(views)), "reference": called(case), "part": part},
                (
                    of_units(pair.reading, views, reference=False),
                    of_units(case.reference, views, reference=True),
                ),
                unit_of(case, views),
                derivation=steps(case, pair, views),
            )


@check(needs=("name",), fields=("locants", "units", "count", "recomputed"))
def name_silent(case: Case, params: Params) -> Iterator[Observation]:
    """The reference specifies units of which the name says nothing."""
    for pair in of_kind(case, Kind.NAME):
        views = silent_views(case, pair)
        if not views or len(views) <= _offences(pair):
            continue
        assert case.reference is not None
        yield Observation(
            {
                "locants": cite(views),
                "units": "unit" if len(views) == 1 else "units",
                "count": str(len(views)),
                "recomputed": ", ".join(view.descriptor for view in views),
            },
            (
                exhibit(pair.reading, atoms={a: "?" for view in views for a in view.other[:1]}),
                of_units(case.reference, views, reference=True),
            ),
            unit_of(case, views),
            ", ".join(view.locant for view in views if view.locant),
        )


@check(needs=("name",), fields=("locants", "count", "printed"))
def drawing_silent(case: Case, params: Params) -> Iterator[Observation]:
    """A name or a notation specifies units that the reference structure leaves open."""
    said: set[frozenset[int]] = set()
    for pair in case.pairs:
        views = [
            view
            for view in pair.having(State.SILENT, "reference")
            if not _open_racemate(pair.reading.structure, view, len(pair.views))
            and not _pyramidal_nitrogen(case, view)
            and frozenset(view.atoms) not in said
        ]
        if not views:
            continue
        said.update(frozenset(view.atoms) for view in views)
        assert case.reference is not None
        yield Observation(
            {
                "locants": cite(views),
                "count": str(len(views)),
                "printed": ", ".join(view.shows for view in views),
            },
            (
                of_units(pair.reading, views, reference=False),
                exhibit(case.reference, atoms={a: "?" for v in views for a in v.atoms[:1]}),
            ),
            unit_of(case, views),
            ", ".join(view.locant for view in views if view.locant),
        )


@check(needs=("name",), fields=("locant", "printed", "recomputed", "doubt"))
def descriptor_undetermined(case: Case, params: Params) -> Iterator[Observation]:
    """Two computations differ on a descriptor, or it could not be tied to one unit."""
    for pair in case.pairs:
        for view in pair.having(State.UNDETERMINED):
            assert case.reference is not None
            yield Observation(
                {
                    "locant": cite([view]),
                    "printed": view.shows or "nothing",
                    "recomputed": view.descriptor or "nothing",
                    "doubt": view.note or "the two computations differ",
                },
                (
                    of_units(pair.reading, [view], reference=False),
                    of_units(case.reference, [view], reference=True),
                ),
                unit_of(case, [view]),
                view.locant,
            )
    yield from _not_laid(case)


def _not_laid(case: Case) -> Iterator[Observation]:
    """Structures of one constitution that could nevertheless not be laid on each other."""
    for pair in case.pairs:
        found = pair.alignment
        if not found.mapping and found.doubt and found.constitution.verdict in LAID:
            assert case.reference is not None
            yield Observation(
                {
                    "locant": "every unit",
                    "printed": "nothing",
                    "recomputed": "nothing",
                    "doubt": found.doubt,
                },
                (exhibit(pair.reading), exhibit(case.reference)),
            )


@check(needs=("name",), fields=("name_kind", "reference_kind"))
def stereo_kind_differs(case: Case, params: Params) -> Iterator[Observation]:
    """One side speaks of a single enantiomer, the other of a racemate or of relative
    configuration only."""
    for pair in of_kind(case, Kind.NAME):
        mine, theirs = case.structure, pair.reading.structure
        if not (mine and theirs) or not (mine.groups or theirs.groups):
            continue
        if pair.alignment.constitution.verdict not in LAID:
            continue
        kinds = mine.kind, theirs.kind
        if kinds[0] == kinds[1] or {"silent", "achiral"} & set(kinds) or hand_open(mine):
            continue
        if not any(view.kind == "centre" and not view.silent_side for view in pair.views):
            continue  # each speaks of centres on which the other is silent
        assert case.reference is not None
        yield Observation(
            {"name_kind": kinds[1], "reference_kind": kinds[0]},
            (exhibit(pair.reading, spans=_kind_spans(pair)), exhibit(case.reference)),
        )


@check(needs=("drawing",), fields=("difference", "reference"))
def structures_differ(case: Case, params: Params) -> Iterator[Observation]:
    """A second drawing or set of coordinates of one substance is not the same stereoisomer."""
    for pair in of_kind(case, Kind.DRAWING, Kind.COORDINATES):
        difference, views = describe(case, pair)
        if not difference:
            continue
        assert case.reference is not None
        yield Observation(
            {"difference": difference, "reference": called(case)},
            (
                of_units(pair.reading, views, reference=False),
                of_units(case.reference, views, reference=True),
            ),
            unit_of(case, views),
        )


def describe(case: Case, pair: Pair) -> tuple[str, list[UnitView]]:
    """How a structure departs from the reference, in words; "" where it does not."""
    found = pair.alignment.constitution
    if found.verdict == con.DIFFERENT:
        return f"the constitution differs ({found.detail})", []
    if found.verdict == con.SALT:
        return f"the components differ ({found.detail})", []
    mine, theirs = case.structure, pair.reading.structure
    kinds = {mine.kind, theirs.kind} if mine and theirs else set()
    if (
        mine
        and theirs
        and len(kinds) > 1
        and not {"silent", "achiral"} & kinds
        and not (hand_open(mine) or hand_open(theirs))
    ):
        return f"the one is {mine.kind}, the other {theirs.kind}", []
    views = different(pair)
    if views:
        if pair.alignment.mirrored and len(views) > 1:
            return "the whole structure is the mirror image", views
        for part, mirrored in mirrored_parts(case, pair):
            if len(mirrored) == len(views):
                return f"the {part} is the mirror image", views
        return f"the configuration differs at {cite(views)}", views
    silent = silent_views(case, pair)
    if silent:
        return f"the configuration is left open at {cite(silent)}", silent
    return "", []


def hand_open(structure: Structure) -> bool:
    """Coordinates of a crystal that does not tell the hand of the molecule: what that means for
    a claim is for the rules on absolute structure."""
    return structure.dimension == 3 and bool(structure.groups)


def silent_views(case: Case, pair: Pair) -> list[UnitView]:
    """The units on which an evidence is silent and should not be."""
    return [
        view
        for view in pair.having(State.SILENT, "other")
        if not _open_racemate(case.structure, view, len(pair.views))
        and not _imine_hydrogen(case, view)
        and not _pyramidal_nitrogen(case, view)
    ]


def mirrored_parts(case: Case, pair: Pair) -> list[tuple[str, list[UnitView]]]:
    """The components of which all centres, two or more, are opposite, and what to call each."""
    if case.structure is None or not different(pair):
        return []
    parts = [set(part) for part in case.structure.components()]
    main = max(parts, key=len)
    found = []
    for part in parts:
        centres = [v for v in pair.views if v.kind == "centre" and v.atoms[0] in part]
        if len(centres) > 1 and all(view.state is State.DIFFERS for view in centres):
            name = "compound" if part == main else "smaller component (counter-ion or solvate)"
            found.append((name, centres))
    return found


def _at_fault(pair: Pair) -> set[tuple[int, int] | None]:
    """Descriptors that contradict another part of their own name: a finding about the name."""
    name = pair.reading.name
    if name is None:
        return set()
    return {
        name.descriptors[index].span
        for fault in name.faults
        if fault.slug in ("overrides-implied", "contradictory-descriptors")
        for index in (fault.descriptor, fault.other)
        if index is not None
    }


def _offences(pair: Pair) -> int:
    name = pair.reading.name
    return sum(fault.slug in OFFENCES for fault in name.faults) if name else 0


def _open_racemate(structure: object, view: UnitView, total: int) -> bool:
    """A racemate with one centre may be written without any descriptor (common practice)."""
    return getattr(structure, "kind", "") == "racemic" and view.kind == "centre" and total == 1


def _imine_hydrogen(case: Case, view: UnitView) -> bool:
    """The side on which an =N–H hydrogen is drawn says nothing (common practice)."""
    if view.kind != "double bond" or case.structure is None:
        return False
    atoms = (case.structure.mol.GetAtomWithIdx(atom) for atom in view.atoms)
    return any(atom.GetSymbol() == "N" and atom.GetTotalNumHs(True) > 0 for atom in atoms)


def _pyramidal_nitrogen(case: Case, view: UnitView) -> bool:
    """A bridgehead nitrogen is fixed by its rings; names do not state it (common practice)."""
    if view.kind != "centre" or case.structure is None:
        return False
    return is_pyramidal_nitrogen(case.structure, view.atoms[0])


def _kind_spans(pair: Pair) -> list[tuple[int, int]]:
    name = pair.reading.name
    if name is None:
        return []
    return [d.span for d in name.descriptors]


def called(case: Case) -> str:
    """The reference in a sentence."""
    if case.reference is None:
        return "reference"
    role = case.reference.evidence.role
    if role is Role.MOLFILE:
        return "drawing" if case.reference.kind is Kind.DRAWING else "coordinates"
    return str(role)
