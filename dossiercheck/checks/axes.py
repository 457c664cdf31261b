"""Chiral axes: what a name prints of one, held against the axis that the drawing shows."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from dossiercheck.checks.configuration import LAID, called, silent_views
from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.interpretation import Reading
from dossiercheck.names.descriptors import PrintedDescriptor
from dossiercheck.names.reading import Fault
from dossiercheck.stereo.descriptors import Descriptor, axis_of

# IUPAC 2013, P-92.1.2.2: Ra is M and Sa is P; older names write R and S alone.
_SENSE = {
    **dict.fromkeys(("M", "Ra", "aR", "R"), "M"),
    **dict.fromkeys(("P", "Sa", "aS", "S"), "P"),
}


@dataclass(frozen=True, slots=True)
class _Said:
    """A printed descriptor of an axis, and what is drawn there: its letter, or the doubt."""

    reading: Reading
    printed: PrintedDescriptor
    drawn: Descriptor | None
    doubt: str


@check(needs=("name", "structure"), fields=("locant", "printed", "recomputed", "reference"))
def axis_differs(case: Case, params: Params) -> Iterator[Observation]:
    """The one axis that the name gives a descriptor is drawn with the opposite one."""
    for said in _said(case):
        if said.drawn is None or said.doubt or _SENSE[said.printed.text] == said.drawn.descriptor:
            continue
        assert case.reference is not None
        yield Observation(
            {
                "locant": said.printed.locant or "the axis",
                "printed": said.printed.text,
                "recomputed": said.drawn.descriptor,
                "reference": called(case),
            },
            (
                exhibit(said.reading, spans=[said.printed.span]),
                exhibit(
                    case.reference,
                    atoms=dict.fromkeys(said.drawn.atoms, said.drawn.descriptor),
                ),
            ),
            locant=said.printed.locant,
            derivation=said.drawn.reading,
        )


@check(needs=("name",), fields=("locant", "printed", "recomputed", "doubt"))
def axis_undetermined(case: Case, params: Params) -> Iterator[Observation]:
    """A printed descriptor of an axis that nothing here can confirm or contradict."""
    for said in _said(case):
        if said.doubt:
            yield Observation(
                {
                    "locant": said.printed.locant or "an axis",
                    "printed": said.printed.text,
                    "recomputed": (said.drawn.ours if said.drawn else "") or "nothing",
                    "doubt": said.doubt,
                },
                (exhibit(said.reading, spans=[said.printed.span]),),
                locant=said.printed.locant,
            )


def _said(case: Case) -> Iterator[_Said]:
    for reading in case.readings:
        printed = [
            reading.name.descriptors[fault.descriptor]
            for fault in (reading.name.faults if reading.name else ())
            if reading.name is not None
            and fault.descriptor is not None
            and of_axis(case, reading, fault)
        ]
        for one in printed:
            drawn, doubt = _drawn(case, reading)
            if not doubt and len(printed) > 1:
                doubt = "the name gives more than one axis a descriptor"
            if not doubt and one.text not in _SENSE:
                doubt = "it is not the descriptor of an axis between rings or of an allene"
            yield _Said(reading, one, drawn, doubt)


def _drawn(case: Case, reading: Reading) -> tuple[Descriptor | None, str]:
    """The axis of the reference that the name's descriptor must mean, and why it may not."""
    if case.structure is None or reading is case.reference:
        return None, "it speaks of a chiral axis, and nothing else here shows one"
    pair = next((pair for pair in case.pairs if pair.reading is reading), None)
    if pair is None or pair.alignment.constitution.verdict not in LAID:
        return None, "it speaks of a chiral axis, and the structures differ"
    axis, doubt = axis_of(case.structure)
    return axis, doubt and f"it speaks of a chiral axis; {doubt}"


def of_axis(case: Case, reading: Reading, fault: Fault) -> bool:
    """Whether a descriptor that the name parser did not place speaks of a chiral axis: M, P and
    the like always, R and S at an axis's atom or, without a locant, where there is an axis; but
    not while a centre of the reference waits for its descriptor."""
    if reading.name is None or reading.structure is None or fault.descriptor is None:
        return False
    printed = reading.name.descriptors[fault.descriptor]
    if printed.family == "axis":
        return fault.slug == "descriptor-stripped"
    if fault.slug != "locant-not-stereogenic" or printed.family != "centre":
        return False
    pair = next((pair for pair in case.pairs if pair.reading is reading), None)
    if pair is not None and any(v.kind == "centre" for v in silent_views(case, pair)):
        return False
    axis = reading.structure.axis_atoms
    return bool(axis & set(fault.atoms) if fault.atoms else axis and not printed.locant)
