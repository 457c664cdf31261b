"""A name by itself: descriptors that cannot be right, and names that cannot be read."""

from __future__ import annotations

from collections.abc import Iterator

from dossiercheck.checks.axes import of_axis
from dossiercheck.checks.configuration import OFFENCES, silent_views, unit_of
from dossiercheck.checks.exhibits import exhibit, of_units
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.interpretation import Reading
from dossiercheck.model import Exhibit, Role
from dossiercheck.names.reading import Fault
from dossiercheck.views import Pair


def _faults(case: Case, slug: str) -> Iterator[tuple[Reading, Fault]]:
    for reading in case.readings:
        if reading.name is not None:
            for fault in reading.name.faults:
                if fault.slug == slug:
                    yield reading, fault


def _observe(case: Case, reading: Reading, fault: Fault, values: dict[str, str]) -> Observation:
    """One fault, with the unit it leaves without a descriptor where that can be told."""
    assert reading.name is not None
    descriptors = reading.name.descriptors
    spans = [
        descriptors[index].span for index in (fault.descriptor, fault.other) if index is not None
    ]
    own = exhibit(reading, spans=spans, atoms=dict.fromkeys(fault.atoms, ""))
    exhibits: tuple[Exhibit, ...] = (own,)
    unit = locant = ""
    pair = next((p for p in case.pairs if p.reading is reading), None)
    if pair is not None and case.reference is not None:
        views = _bereft(case, pair, fault)
        exhibits = (own, of_units(case.reference, views, reference=True))
        unit = unit_of(case, views)
        locant = ", ".join(view.locant for view in views if view.locant)
    return Observation(values, exhibits, unit, locant)


def _bereft(case: Case, pair: Pair, fault: Fault) -> list:  # type: ignore[type-arg]
    """The units of which the faulty descriptor ought to speak."""
    at_locant = [view for view in pair.views if set(view.other) & set(fault.atoms)]
    silent = silent_views(case, pair)
    if fault.slug in OFFENCES and silent:
        return silent
    return at_locant


def _is_unit(case: Case, reading: Reading, fault: Fault) -> bool:
    """Whether the descriptor was judged by its letter after all: the reference has a unit where
    the name parser sees none, or may have it. The concordance then says how."""
    assert reading.name is not None
    if fault.descriptor is None:
        return False
    span = reading.name.descriptors[fault.descriptor].span
    return any(
        view.span == span for pair in case.pairs if pair.reading is reading for view in pair.views
    )


def _printed(reading: Reading, index: int | None) -> tuple[str, str]:
    assert reading.name is not None
    if index is None:
        return "", ""
    descriptor = reading.name.descriptors[index]
    return descriptor.text, descriptor.locant


@check(needs=("name",), fields=("printed", "locant", "detail"))
def locant_not_stereogenic(case: Case, params: Params) -> Iterator[Observation]:
    """A descriptor stands at a locant that carries no stereogenic unit."""
    for reading, fault in _faults(case, "locant-not-stereogenic"):
        if _is_unit(case, reading, fault) or of_axis(case, reading, fault):
            continue
        text, locant = _printed(reading, fault.descriptor)
        values = {"printed": text, "locant": locant or "(none)", "detail": fault.detail}
        yield _observe(case, reading, fault, values)


@check(needs=("name",), fields=("printed", "locant", "detail"))
def no_such_locant(case: Case, params: Params) -> Iterator[Observation]:
    """A descriptor stands at a locant that the name's parent does not have."""
    for reading, fault in _faults(case, "no-such-locant"):
        text, locant = _printed(reading, fault.descriptor)
        yield _observe(
            case, reading, fault, {"printed": text, "locant": locant, "detail": fault.detail}
        )


@check(needs=("name",), fields=("printed", "locant"))
def duplicate_descriptor(case: Case, params: Params) -> Iterator[Observation]:
    """One descriptor is printed twice for one locant."""
    for reading, fault in _faults(case, "duplicate-descriptor"):
        text, locant = _printed(reading, fault.descriptor)
        yield _observe(case, reading, fault, {"printed": text, "locant": locant})


@check(needs=("name",), fields=("first", "second", "locant"))
def contradictory_descriptors(case: Case, params: Params) -> Iterator[Observation]:
    """Two different descriptors are printed for one locant."""
    for reading, fault in _faults(case, "contradictory-descriptors"):
        first, locant = _printed(reading, fault.descriptor)
        second, _ = _printed(reading, fault.other)
        yield _observe(case, reading, fault, {"first": first, "second": second, "locant": locant})


@check(needs=("name",), fields=("printed", "implied", "detail"))
def overrides_implied(case: Case, params: Params) -> Iterator[Observation]:
    """A printed descriptor contradicts what the name's own stem or prefix implies."""
    for reading, fault in _faults(case, "overrides-implied"):
        text, locant = _printed(reading, fault.descriptor)
        implied, _ = _printed(reading, fault.other)
        yield _observe(
            case,
            reading,
            fault,
            {
                "printed": f"{locant}{text}",
                "implied": implied or "what the parent implies",
                "detail": fault.detail,
            },
        )


@check(needs=("name",), fields=("detail",))
def lost_space(case: Case, params: Params) -> Iterator[Observation]:
    """An ester's name without the space after its alkyl part."""
    for reading, fault in _faults(case, "lost-space"):
        yield _observe(case, reading, fault, {"detail": fault.detail})


@check(needs=("name",), fields=("part", "detail"))
def name_not_interpretable(case: Case, params: Params) -> Iterator[Observation]:
    """The name led to no structure, so nothing was compared with it."""
    for reading in case.readings:
        if reading.evidence.role is not Role.NAME or not reading.refusal:
            continue
        span = reading.name.refusal.span if reading.name and reading.name.refusal else None
        part = reading.evidence.text[span[0] : span[1]] if span else reading.evidence.text
        yield Observation(
            {"part": part, "detail": reading.refusal}, (exhibit(reading, spans=[span]),)
        )
