"""Space groups. Outside source: International Tables for Crystallography, volume A, by way of the
table that the library (gemmi) ships; the counts by way of table 1.4.1.2 and 3.1.4.1."""

from __future__ import annotations

import gemmi
import pytest

from dossiercheck.stereo.spacegroup import (
    group_of_operations,
    hall_group,
    parse_operations,
    space_group,
)

# The 65 Sohncke types by number, as listed under "Sohncke group" in the IUCr Online Dictionary of
# Crystallography (from memory): all types of the point groups 1, 2, 222, 4, 422, 3, 32, 6, 622,
# 23 and 432.
SOHNCKE = {
    *(1, *range(3, 6), *range(16, 25), *range(75, 81), *range(89, 99), *range(143, 147)),
    *(*range(149, 156), *range(168, 174), *range(177, 183), *range(195, 200), *range(207, 215)),
}


def test_sixty_five_types_can_hold_one_enantiomer() -> None:
    assert len(SOHNCKE) == 65
    found = {n for n in range(1, 231) if (group := space_group(str(n))) and group.sohncke}
    assert found == SOHNCKE


@pytest.mark.parametrize("entry", list(gemmi.spacegroup_table()), ids=lambda g: g.xhm())
def test_operations_and_symbol_say_the_same_in_every_setting(entry: gemmi.SpaceGroup) -> None:
    """The determinants of the operations against the number's place in the list above."""
    ops = parse_operations([op.triplet() for op in entry.operations()])
    assert ops is not None
    by_operations = group_of_operations(ops)
    by_symbol = space_group(entry.xhm())
    by_hall = hall_group(entry.hall)
    assert by_operations and by_symbol and by_hall
    assert by_operations.number == by_symbol.number == by_hall.number == entry.number
    assert by_operations.sohncke == by_symbol.sohncke == by_hall.sohncke
    assert by_operations.sohncke == (entry.number in SOHNCKE)


@pytest.mark.parametrize(
    ("text", "number"),
    [
        ("P212121", 19),
        ("P 21 21 21", 19),
        ("P2(1)2(1)2(1)", 19),
        ("P2₁2₁2₁", 19),
        ("P 2_1 2_1 2_1", 19),
        ("P2<sub>1</sub>2<sub>1</sub>2<sub>1</sub> (No. 19)", 19),
        ("P2(1)/c", 14),
        ("P 1 21/c 1", 14),
        ("P−1", 2),
        ("P -1", 2),
        ("P1̅", 2),
        ("P b c a", 61),
        ("Pna21", 33),
        ("19", 19),
        ("x,y,z; -x,-y,-z", 2),
        ("x,y,z", 1),
    ],
)
def test_ways_to_write_it(text: str, number: int) -> None:
    """Common practice; symbols and numbers as in International Tables."""
    found = space_group(text)
    assert found is not None
    assert found.number == number


@pytest.mark.parametrize("text", ["", "?", "orthorhombic", "P 7", "0", "231", "x,y", "P" * 500])
def test_what_is_none(text: str) -> None:
    assert space_group(text) is None


def test_hall_and_hermann_mauguin_are_not_mixed_up() -> None:
    """P 422 is "P 4 2" after Hall, which after Hermann and Mauguin would be P 42."""
    by_hall, by_symbol = hall_group("P 4 2"), space_group("P 4 2")
    assert by_hall and by_symbol
    assert (by_hall.number, by_symbol.number) == (89, 77)
    assert hall_group("rubbish") is None


def test_settings_that_a_symbol_leaves_open_are_counted() -> None:
    """R3 has hexagonal and rhombohedral axes, Fd-3m two origins (International Tables, A)."""
    for symbol, settings in (("R 3", 2), ("F d -3 m", 2), ("P 21 21 21", 1)):
        found = space_group(symbol)
        assert found is not None
        assert found.settings == settings


@pytest.mark.parametrize(
    "texts",
    [
        [],
        ["-x,-y,-z"],
        ["x,y,z", "x,y,z"],
        ["x,y,z", "x+1,y,z"],
        ["x,y,z", "-y,x,z"],
        ["x,y,z", "2x,y,z"],
        ["x,y,z", "x,x,z"],
        ["x,y,z", "rubbish"],
        ["x,y,z", ""],
    ],
)
def test_lists_that_are_no_group(texts: list[str]) -> None:
    """No identity, an operation twice, not closed, not an isometry, not an operation."""
    assert parse_operations(texts) is None
