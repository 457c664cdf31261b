"""Absolute configuration from a crystal: what is claimed, and what the measurement supports.

The criteria are those of H. D. Flack and G. Bernardinelli, J. Appl. Cryst. 2000, 33, 1143: the
parameter x is 0 for the right and 1 for the inverted model, and says something only where its
standard uncertainty u is small.
"""

from __future__ import annotations

import re
from collections.abc import Iterator

from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.checks.statements import stereo_kind
from dossiercheck.concordance import Case
from dossiercheck.interpretation import Reading
from dossiercheck.language.crystal import CLAIMS, ON_DISPERSION, Measured
from dossiercheck.model import Exhibit, Role

_SPREADS = 3.0  # |x| or |x − 1| within three standard uncertainties
_BY_CRYSTAL = re.compile(r"\babsolute\b", re.IGNORECASE)
_LIMITS = {"limit": float, "limit_enantiopure": float}


@check(needs=("property",), fields=("flack", "doubt"), params=_LIMITS)
def flack_not_conclusive(case: Case, params: Params) -> Iterator[Observation]:
    """Absolute configuration is claimed on a Flack parameter that does not bear it out.

    `limit` is the highest standard uncertainty that does, `limit_enantiopure` the one where a
    statement says that the compound is enantiopure. An inverted model is another check's.
    """
    limit = params["limit_enantiopure"] if _enantiopure(case) else params["limit"]
    for reading in case.of_role(Role.FLACK):
        claims = _claims_on(case, reading)
        if reading.flack is None or not claims:
            continue
        doubt = _doubt(reading.flack, limit)
        if not doubt or _is_inverted(reading.flack, params["limit_enantiopure"]):
            continue
        yield Observation(
            {"flack": reading.evidence.text.strip(), "doubt": doubt},
            (exhibit(reading), *(_shown(claim) for claim in claims)),
        )


@check(needs=("property",), fields=("flack",), params={"limit_enantiopure": float})
def structure_inverted(case: Case, params: Params) -> Iterator[Observation]:
    """The Flack parameter is 1 within its uncertainty: the coordinates show the other hand."""
    for reading in case.of_role(Role.FLACK):
        if reading.flack and _is_inverted(reading.flack, params["limit_enantiopure"]):
            beside = [other for other in case.readings if _together(reading, other)]
            shown = [other for other in beside if other.structure is not None]
            yield Observation(
                {"flack": reading.evidence.text.strip()},
                (exhibit(reading), *(exhibit(other) for other in shown[:1])),
            )


@check(needs=("statement",), fields=("space_group", "claim"))
def flack_missing(case: Case, params: Params) -> Iterator[Observation]:
    """Absolute configuration is claimed by anomalous dispersion in a space group where a Flack
    parameter can be had, and none is given."""
    if any(reading.evidence.role is Role.FLACK for reading in case.readings):
        return
    for claim in case.of_role(Role.ABSOLUTE):
        if claim.claim not in ON_DISPERSION:
            continue
        for reading in case.of_role(Role.SPACE_GROUP):
            if _together(claim, reading) and reading.space_group and reading.space_group.sohncke:
                yield Observation(
                    {
                        "space_group": reading.space_group.symbol,
                        "claim": CLAIMS[claim.claim],
                    },
                    (_shown(claim), exhibit(reading)),
                )


@check(needs=("property",), fields=("space_group", "claim"))
def space_group_holds_both(case: Case, params: Params) -> Iterator[Observation]:
    """The crystal's space group has mirror images of every molecule in it, and something says
    that the substance is one enantiomer."""
    for reading in case.of_role(Role.SPACE_GROUP):
        group = reading.space_group
        if group is None or group.sohncke:
            continue
        for other, words in _single(case, reading):
            yield Observation(
                {"space_group": group.symbol, "claim": words}, (exhibit(reading), _shown(other))
            )
            break


def _doubt(flack: Measured, limit: float) -> str:
    """Why a value does not support the configuration; "" where it does."""
    if flack.uncertainty is None:
        return "it is given without a standard uncertainty"
    if flack.uncertainty >= limit:
        return f"its standard uncertainty of {flack.uncertainty:g} is not below {limit:g}"
    if abs(flack.value) > _SPREADS * flack.uncertainty:
        return "it differs from 0 by more than three standard uncertainties"
    return ""


def _is_inverted(flack: Measured, limit: float) -> bool:
    """1 within three uncertainties that are small enough to tell 1 from 0; without any, within
    a tenth."""
    if flack.uncertainty is None:
        return abs(flack.value - 1) <= 0.1
    return flack.uncertainty < limit and (
        abs(flack.value - 1) <= _SPREADS * flack.uncertainty < abs(flack.value)
    )


def _enantiopure(case: Case) -> bool:
    return any(
        reading.statement is not None
        and reading.statement.kind == "absolute"
        and not _BY_CRYSTAL.search(reading.evidence.text)
        for reading in case.of_role(Role.STEREO)
    )


def _claims_on(case: Case, flack: Reading) -> list[Reading]:
    """The claims that rest on a Flack parameter: those of its own record; where that makes none,
    a statement that speaks of absolute configuration, and claims of records without a parameter."""
    claims = [r for r in case.of_role(Role.ABSOLUTE) if r.claim in ON_DISPERSION]
    own = [claim for claim in claims if _together(claim, flack)]
    if own:
        return own
    if any(_together(claim, flack) for claim in case.of_role(Role.ABSOLUTE)):
        return []
    parameters = case.of_role(Role.FLACK)
    loose = [c for c in claims if not any(_together(c, other) for other in parameters)]
    stated = [
        reading
        for reading in case.of_role(Role.STEREO)
        if reading.statement is not None
        and reading.statement.kind == "absolute"
        and _BY_CRYSTAL.search(reading.evidence.text)
    ]
    return [*loose, *stated]


def _single(case: Case, group: Reading) -> Iterator[tuple[Reading, str]]:
    """What says that the substance is one enantiomer, and in which words."""
    for claim in case.of_role(Role.ABSOLUTE):
        if claim.claim != "unk" and _together(claim, group):
            yield claim, f"the absolute configuration was established {CLAIMS[claim.claim]}"
    for reading in case.of_role(Role.STEREO):
        if reading.statement is not None and reading.statement.kind in ("absolute", "active"):
            yield reading, f"“{reading.evidence.text.strip()}”"
    structural = [reading for reading in case.readings if reading.structure is not None]
    for reading in sorted(structural, key=lambda one: one is not case.reference):
        structure = reading.structure
        if structure is None or structure.dimension == 3 or structure.doubt:
            continue
        if stereo_kind(structure) == "absolute":
            words = "drawing" if structure.dimension == 2 else str(reading.evidence.role)
            yield reading, f"the {words} is of one enantiomer"


def _together(one: Reading, other: Reading) -> bool:
    """Whether two readings stand in one record."""
    return one.evidence.group == other.evidence.group != ""


def _shown(reading: Reading) -> Exhibit:
    return exhibit(reading, note=CLAIMS.get(reading.claim, ""))
