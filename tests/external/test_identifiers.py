"""Formula, mass and check digit on public identifier records (package `chemicals`, from PubChem).

71,347 records; every tenth with a multiple of seven is enough here. The database's own oddities
(isotope mixtures, salts counted otherwise) are few; the shares asserted leave room for them and
for nothing else.
"""

from itertools import islice

import pytest

from dossiercheck.checks.identity import registry_check_digit_ok
from dossiercheck.stereo.formula import (
    mass_spread,
    molecular_formula,
    parse_formula,
    relative_mass,
)
from dossiercheck.stereo.perception import from_smiles
from dossiercheck.stereo.structure import Unreadable
from tests.benchmarks.identifiers import Identifiers, records


@pytest.fixture(scope="module")
def sample() -> list[Identifiers]:
    return list(islice(records(), 3, None, 23))


def test_the_sample_is_large(sample: list[Identifiers]) -> None:
    assert len(sample) > 3000


def test_check_digits_are_right_and_a_changed_digit_is_not(sample: list[Identifiers]) -> None:
    for record in sample:
        assert registry_check_digit_ok(record.registry) is True, record
        body, last = record.registry[:-1], int(record.registry[-1])
        assert registry_check_digit_ok(f"{body}{(last + 1) % 10}") is False


def test_formulas_and_masses_are_those_of_the_structures(sample: list[Identifiers]) -> None:
    compared = formulas = masses = 0
    for record in sample:
        stated = parse_formula(record.formula)
        try:
            structure = from_smiles(record.smiles)
        except Unreadable:
            continue
        if stated is None:
            continue
        computed = molecular_formula(structure)
        compared += 1
        formulas += dict(stated.counts) == dict(computed.counts)
        try:
            mass = relative_mass(computed)
        except KeyError:  # an element without a standard atomic weight
            compared -= 1
            continue
        # The records print masses of several editions; PubChem rounds some to two decimals.
        masses += abs(mass - float(record.mass)) <= 0.006 + mass_spread(computed)
    assert compared > 2900
    assert formulas / compared >= 0.99
    assert masses / compared >= 0.985
