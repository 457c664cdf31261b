"""Constitution: name against reference, before any stereo."""

from __future__ import annotations

from collections.abc import Iterator

from dossiercheck.checks.configuration import called, of_kind
from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.model import Kind
from dossiercheck.stereo import constitution as con
from dossiercheck.stereo.formula import molecular_formula
from dossiercheck.views import Pair

_AMBIGUOUS = "APPEARS_AMBIGUOUS:"


def _named(case: Case, verdict: str) -> Iterator[Pair]:
    return (
        pair for pair in of_kind(case, Kind.NAME) if pair.alignment.constitution.verdict == verdict
    )


def _plain(case: Case, verdict: str) -> Iterator[Observation]:
    for pair in _named(case, verdict):
        assert case.reference is not None
        yield Observation(
            {"difference": pair.alignment.constitution.detail},
            (exhibit(pair.reading), exhibit(case.reference)),
        )


@check(needs=("name",), fields=("difference", "reference", "name_formula", "reference_formula"))
def constitution_differs(case: Case, params: Params) -> Iterator[Observation]:
    """The name stands for another compound. Where the name leaves a position open, the compound
    that the name parser chose is one of several; that is `position_open`."""
    for pair in _named(case, con.DIFFERENT):
        if _open(pair):
            continue
        assert case.reference is not None
        assert case.structure is not None
        assert pair.reading.structure is not None
        yield Observation(
            {
                "difference": pair.alignment.constitution.detail,
                "reference": called(case),
                "name_formula": str(molecular_formula(pair.reading.structure)),
                "reference_formula": str(molecular_formula(case.structure)),
            },
            (exhibit(pair.reading), exhibit(case.reference)),
        )


@check(needs=("name",), fields=("detail",))
def position_open(case: Case, params: Params) -> Iterator[Observation]:
    """The name leaves open where something is attached, and the name parser's choice is not the
    reference: whether the name means the reference cannot be told."""
    for pair in _named(case, con.DIFFERENT):
        where = _open(pair)
        if where:
            assert case.reference is not None
            yield Observation(
                {"detail": "; ".join(where)}, (exhibit(pair.reading), exhibit(case.reference))
            )


def _open(pair: Pair) -> list[str]:
    """What the name parser says it had to choose: "connection of phenyl to lact"."""
    messages = pair.reading.name.messages if pair.reading.name else ()
    found = [text for text in messages if text.startswith(_AMBIGUOUS)]
    said = [text.removeprefix(_AMBIGUOUS).strip() for text in found]
    return [text[:1].lower() + text[1:] for text in said]


@check(needs=("name",), fields=("difference",))
def salt_differs(case: Case, params: Params) -> Iterator[Observation]:
    """The same parent with another counter-ion, solvate or stoichiometry."""
    return _plain(case, con.SALT)


@check(needs=("name",), fields=("difference",))
def tautomer_differs(case: Case, params: Params) -> Iterator[Observation]:
    """Another tautomer is named than is drawn."""
    return _plain(case, con.TAUTOMER)


@check(needs=("name",), fields=("difference",))
def charge_differs(case: Case, params: Params) -> Iterator[Observation]:
    """The same salt or zwitterion written with other charges."""
    return _plain(case, con.CHARGE)
