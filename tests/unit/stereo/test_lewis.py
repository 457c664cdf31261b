"""Electrons put where they belong, from distances and neighbours alone. Structures and usual bond
lengths: F. H. Allen et al., J. Chem. Soc., Perkin Trans. 2 1987, S1 (from memory, to 0.02 Å)."""

from __future__ import annotations

from itertools import pairwise

import pytest

from dossiercheck.limits import Refused
from dossiercheck.stereo import lewis as module
from dossiercheck.stereo.lewis import Bond, lewis, strained


def test_carboxylate_and_acid() -> None:
    """Formate and formic acid differ in a hydrogen and in nothing else that is listed."""
    anion = lewis(["C", "O", "O", "H"], [(0, 1, 1.25), (0, 2, 1.25), (0, 3, 0.95)])
    assert set(anion) == {-1}
    assert sorted(anion[-1].charges) == [-1, 0, 0, 0]
    acid = lewis(
        ["C", "O", "O", "H", "H"], [(0, 1, 1.21), (0, 2, 1.31), (0, 3, 0.95), (2, 4, 0.84)]
    )
    assert acid[0].orders == (2, 1, 1, 1)


@pytest.mark.parametrize(
    ("long", "orders"),
    [((1.34, 1.46, 1.34), (2, 1, 2)), ((1.46, 1.34, 1.46), (1, 2, 1))],
)
def test_lengths_place_the_double_bonds(long: tuple[float, ...], orders: tuple[int, ...]) -> None:
    """Butadiene; the other arrangement needs a hydrogen more at each end."""
    ends = 2 if orders[0] == 2 else 3
    elements = ["C"] * 4 + ["H"] * (2 * ends + 2)
    bonds: list[Bond] = [(n, n + 1, length) for n, length in enumerate(long)]
    hydrogen = 4
    for carbon, count in enumerate((ends, 1, 1, ends)):
        for _ in range(count):
            bonds.append((carbon, hydrogen, 0.95))
            hydrogen += 1
    assert lewis(elements, bonds)[0].orders[:3] == orders


def test_bond_shift_isomers_are_told_apart_by_length() -> None:
    """A ring of eight CH with alternating bonds, cyclooctatetraene: both ways round."""
    for turn in (0, 1):
        lengths = [1.34 if n % 2 == turn else 1.47 for n in range(8)]
        ring: list[Bond] = [(n, (n + 1) % 8, lengths[n]) for n in range(8)]
        hydrogens: list[Bond] = [(n, 8 + n, 0.95) for n in range(8)]
        found = lewis(["C"] * 8 + ["H"] * 8, ring + hydrogens)
        assert found[0].orders[:8] == tuple(2 if n % 2 == turn else 1 for n in range(8))


@pytest.mark.parametrize(
    ("elements", "bonds", "charge"),
    [
        (["Cl"], [], -1),
        (["Na"], [], 1),
        (["Ca"], [], 2),
        (["N", *"HHHH"], [(0, n, 0.9) for n in range(1, 5)], 1),
        (["O", *"HHH"], [(0, n, 0.9) for n in range(1, 4)], 1),
        (["S", *"OOOO"], [(0, n, 1.47) for n in range(1, 5)], -2),
        (["Cl", *"OOOO"], [(0, n, 1.43) for n in range(1, 5)], -1),
        (["N", *"OOO"], [(0, n, 1.25) for n in range(1, 4)], -1),
        (["B", *"FFFF"], [(0, n, 1.39) for n in range(1, 5)], -1),
        (["P", *"FFFFFF"], [(0, n, 1.60) for n in range(1, 7)], -1),
        (["I", "I", "I"], [(0, 1, 2.92), (1, 2, 2.92)], -1),
        (["C", "N", "S"], [(0, 1, 1.15), (0, 2, 1.63)], -1),
        (["N", "N", "N"], [(0, 1, 1.17), (1, 2, 1.17)], -1),
    ],
)
def test_usual_ions(elements: list[str], bonds: list[Bond], charge: int) -> None:
    """The cheapest arrangement has the charge that every textbook gives."""
    found = lewis(elements, bonds)
    assert min(found, key=lambda q: found[q].cost) == charge
    assert strained(elements, bonds, found[charge]) is None


@pytest.mark.parametrize(
    ("elements", "bonds"),
    [
        (["C", *"HHH"], [(0, n, 0.95) for n in range(1, 4)]),
        (["C", *"HHHHH"], [(0, n, 0.95) for n in range(1, 6)]),
        (["C", "H"], [(0, 1, 0.95)]),
        (["H"], []),
        (["Zn"], []),
        (["F", "C", "C"], [(0, 1, 1.35), (0, 2, 1.35)]),
    ],
)
def test_valences_that_do_not_come_out(elements: list[str], bonds: list[Bond]) -> None:
    assert lewis(elements, bonds) == {}


@pytest.mark.parametrize(
    ("length", "fits"), [(1.33, True), (1.42, True), (1.50, False), (1.54, False)]
)
def test_a_double_bond_as_long_as_a_single_one_is_strained(length: float, fits: bool) -> None:
    """Ethene's skeleton; 1.54 Å is ethane's bond."""
    bonds: list[Bond] = [(0, 1, length), *((n // 2, 2 + n, 0.95) for n in range(4))]
    found = lewis(["C", "C", *"HHHH"], bonds)[0]
    assert (strained(["C", "C", *"HHHH"], bonds, found) is None) is fits


def test_a_large_fused_system_is_solved() -> None:
    """A ribbon of 30 fused six-membered rings, 122 carbons."""
    rings = 30
    top = [2 * n for n in range(2 * rings + 1)]
    bottom = [2 * n + 1 for n in range(2 * rings + 1)]
    bonds: list[Bond] = [(a, b, 1.40) for row in (top, bottom) for a, b in pairwise(row)]
    bonds += [(top[n], bottom[n], 1.43) for n in range(0, 2 * rings + 1, 2)]
    elements = ["C"] * len((*top, *bottom))
    degree = [sum(atom in bond[:2] for bond in bonds) for atom in range(len(elements))]
    for atom, count in enumerate(degree):
        for _ in range(3 - count):
            bonds.append((atom, len(elements), 0.95))
            elements.append("H")
    found = lewis(elements, bonds)[0]
    valence = [0] * len(elements)
    for (begin, end, _), order in zip(bonds, found.orders, strict=True):
        valence[begin] += order
        valence[end] += order
    assert {v for v, element in zip(valence, elements, strict=True) if element == "C"} == {4}


def test_too_many_ways_are_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(module, "_MOST_STATES", 1)
    ring: list[Bond] = [(n, (n + 1) % 6, 1.39) for n in range(6)]
    with pytest.raises(Refused) as refused:
        lewis(["C"] * 6 + ["H"] * 6, [*ring, *((n, 6 + n, 0.95) for n in range(6))])
    assert refused.value.reason == "bonds-ambiguous"
