"""Constitution: name against reference, before any stereo."""

from __future__ import annotations

from collections.abc import Iterator

from dossiercheck.checks.configuration import called, of_kind
from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case, Pair
from dossiercheck.model import Kind
from dossiercheck.stereo import constitution as con
from dossiercheck.stereo.formula import molecular_formula


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
    """The name stands for another compound."""
    for pair in _named(case, con.DIFFERENT):
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
