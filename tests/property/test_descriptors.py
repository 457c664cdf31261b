"""Properties of descriptors over drawn molecules; `tests/benchmarks/properties.py` runs more."""

from __future__ import annotations

from random import Random

import pytest
from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st
from rdkit import Chem

from dossiercheck.stereo.perception import from_smiles
from tests.cases.marks import letter
from tests.property.drawings import in_mirror, mirror_notation
from tests.property.pool import dictionary, handbook, unknown_to_the_library
from tests.property.properties import NOTATIONS, PROPERTIES, NotCarried, compared, letters, mirrored

MOLECULES = (*handbook(), *dictionary(60))
SYMBOL = Chem.GetPeriodicTable().GetElementSymbol
few = settings(
    max_examples=15, deadline=None, suppress_health_check=[HealthCheck.too_slow], derandomize=True
)
seeds = st.integers(0, 10**6)


@pytest.mark.parametrize("name", PROPERTIES)
@few
@given(smiles=st.sampled_from(MOLECULES), seed=seeds)
def test_property(name: str, smiles: str, seed: int) -> None:
    try:
        found = list(PROPERTIES[name](smiles, Random(seed)))
    except NotCarried:
        assume(False)
    for one in found:
        assert not one.wrong, (name, smiles, seed)


@pytest.mark.parametrize("smiles", unknown_to_the_library())
@pytest.mark.parametrize("name", NOTATIONS)
def test_property_of_a_unit_that_the_library_does_not_know(name: str, smiles: str) -> None:
    for seed in range(3):
        (found,) = PROPERTIES[name](smiles, Random(seed))
        assert found.units
        assert not found.wrong, (name, smiles, seed)


# Every letter and its mirror image (IUPAC 2013, P-92.6): the two chiral classes change, what is
# its own mirror image and E and Z stay.
@pytest.mark.parametrize(
    ("smiles", "atoms", "expected"),
    [
        ("C[C@H](N)C(=O)O", (1,), "S"),
        ("O[C@H]1C[C@@H](O)C1", (1,), "s"),
        ("C/C=C/C", (1, 2), "E"),
        ("C[C@H](F)/C(=C/Cl)[C@@H](C)F", (3, 4), "z"),
        ("CC=[C@]=CC", (1, 3), "M"),
        ("C[C@H](F)C(=[C@@]=CCl)[C@@H](C)F", (3, 5), "m"),
    ],
)
def test_a_letter_in_the_mirror(smiles: str, atoms: tuple[int, ...], expected: str) -> None:
    found = letters(from_smiles(smiles))
    image = letters(from_smiles(mirror_notation(smiles)))
    assert found[atoms] == expected
    assert image == mirrored(found)
    assert image[atoms] == (in_mirror(expected) if expected not in "rsmpEZ" else expected)


def test_a_comparison_can_fail() -> None:
    right, other = {(1,): "R", (2, 3): "Z"}, {(1,): "S"}
    assert not compared(right, right).wrong
    assert compared(right, other).wrong == ("(1,): R became S", "(2, 3): Z became none")
    assert compared(right, other, may_lack=True).wrong == ("(1,): R became S",)
    assert compared(right, other).undetermined == 1
    assert compared({}, other).wrong == ("(1,): S is new",)
    assert not compared({}, other, may_add=True).wrong


# --- Rules 1a and 2: atomic number, and mass between isotopes only (IUPAC 2013, P-92.2 and P-92.3)

# Noble gases apart, which the library lets have no bond.
elements = st.integers(3, 103).filter(lambda number: number not in (10, 18, 36, 54, 86))
MASSES = {52: (106, 133), 53: (109, 141), 6: (11, 14), 8: (15, 18)}


@few
@given(numbers=st.lists(elements, min_size=3, max_size=3, unique=True), mark=st.booleans())
def test_rank_goes_by_atomic_number(numbers: list[int], mark: bool) -> None:
    one, two, three = (f"[{SYMBOL(number)}]" for number in numbers)
    smiles = f"{one}[C{'@@' if mark else '@'}H]({two}){three}"
    place = {numbers[0]: 1, numbers[1]: 3, numbers[2]: 4}
    order = [place[number] for number in sorted(numbers, reverse=True)]
    assert letters(from_smiles(smiles)) == {(1,): letter(smiles, 2, order)}


def by_mass(smiles: str, order: list[int]) -> None:
    assert letters(from_smiles(smiles)) == {(1,): letter(smiles, 2, order)}


def test_tellurium_ranks_below_iodine_though_its_mass_is_higher() -> None:
    table = Chem.GetPeriodicTable()
    assert table.GetAtomicWeight(52) > table.GetAtomicWeight(53)
    by_mass("[TeH][C@H](C)I", [4, 1, 3])
    # So do cobalt and nickel.
    assert table.GetAtomicWeight(27) > table.GetAtomicWeight(28)
    by_mass("[Co][C@H](C)[Ni]", [4, 1, 3])


@few
@given(tellurium=st.integers(*MASSES[52]), iodine=st.integers(*MASSES[53]), mark=st.booleans())
def test_no_isotope_of_tellurium_ranks_above_iodine(
    tellurium: int, iodine: int, mark: bool
) -> None:
    by_mass(f"[{tellurium}TeH][C{'@@' if mark else '@'}H](C)[{iodine}I]", [4, 1, 3])


@few
@given(element=st.sampled_from(sorted(MASSES)), data=st.data(), mark=st.sampled_from(["@", "@@"]))
def test_of_two_isotopes_the_heavier_ranks_higher(
    element: int, data: st.DataObject, mark: str
) -> None:
    masses = st.integers(*MASSES[element])
    one, two = data.draw(st.lists(masses, min_size=2, max_size=2, unique=True))
    smiles = f"[{one}{SYMBOL(element)}][C{mark}H](F)[{two}{SYMBOL(element)}]"
    heavier, lighter = (1, 4) if one > two else (4, 1)
    by_mass(smiles, [3, heavier, lighter] if element < 9 else [heavier, lighter, 3])
