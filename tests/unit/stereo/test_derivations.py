"""Every derivation of the hand-ranked cases is true, as an independent checker replays it."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable
from dataclasses import replace
from typing import Any

import pytest

from dossiercheck.stereo.cip.derivation import Comparison, Derivation
from dossiercheck.stereo.descriptors import Descriptor, descriptors
from dossiercheck.stereo.perception import from_smiles
from tests.cases.hand_ranked import CASES, structure
from tests.unit.stereo.anew import prepared, turned
from tests.unit.stereo.replay import untrue

DERIVED = [
    (case, unit)
    for case in CASES
    for unit in descriptors(structure(case))
    if unit.derivation is not None and unit.kind != "helix"
]


def replayed(case: dict[str, Any], unit: Descriptor) -> list[str]:
    mol, means = prepared(structure(case).mol)
    return list(untrue(mol, means, unit))


@pytest.mark.parametrize("case", CASES, ids=[case["name"] for case in CASES])
def test_derivations_are_true(case: dict[str, Any]) -> None:
    mol, means = prepared(structure(case).mol)
    found = {
        unit.atoms: list(untrue(mol, means, unit))
        for unit in descriptors(structure(case))
        if unit.derivation is not None and unit.kind != "helix"
    }
    assert not any(found.values()), found
    # A helix has no ligands to rank.
    helical = case["rule"] == "shape"
    assert len(found) == len(case["labels"]) - helical


def test_what_is_replayed() -> None:
    """Every rule, every kind of unit, and the letter of nearly all from the library's own mark."""
    rules = Counter(
        one.rule for _, unit in DERIVED if unit.derivation for one in unit.derivation.comparisons
    )
    assert set(rules) == {"1a", "1b", "2", "3", "4a", "4b", "4c", "5", "6"}
    assert {unit.kind for _, unit in DERIVED} == {"centre", "double bond", "axis"}
    letters = 0
    for case, unit in DERIVED:
        assert unit.derivation is not None
        ends = [[r.ligand - 1 for r in unit.derivation.ranks if r.end == e + 1] for e in unit.atoms]
        letters += bool(turned(structure(case).mol, unit.atoms, ends))
    assert letters > 0.9 * len(DERIVED)


# --- falsified: the checker must find it in every derivation that can be falsified so ----------

False_ = Callable[[Descriptor, Derivation], Descriptor | None]


def _with(
    unit: Descriptor,
    told: Derivation,
    change: Callable[[Comparison], Comparison | None],
    which: int = -1,
) -> Descriptor | None:
    one = change(told.comparisons[which]) if told.comparisons else None
    if one is None:
        return None
    rest = list(told.comparisons)
    rest[which] = one
    return replace(unit, derivation=replace(told, comparisons=tuple(rest)))


def other_letter(unit: Descriptor, told: Derivation) -> Descriptor | None:
    turned_round = str.maketrans("RSrsEZez", "SRsrZEze")
    if unit.kind == "axis" or not unit.library:
        return None
    return replace(unit, ours=unit.ours.translate(turned_round))


def ranks_exchanged(unit: Descriptor, told: Derivation) -> Descriptor | None:
    first, second, *rest = told.ranks
    swapped = (replace(second, rank="a"), replace(first, rank="b"), *rest)
    return replace(unit, derivation=replace(told, ranks=swapped))


def sides_exchanged(unit: Descriptor, told: Derivation) -> Descriptor | None:
    return _with(unit, told, lambda one: replace(one, higher=one.lower, lower=one.higher))


def comparison_missing(unit: Descriptor, told: Derivation) -> Descriptor | None:
    if not told.comparisons:
        return None
    return replace(unit, derivation=replace(told, comparisons=told.comparisons[1:]))


def sphere_moved(unit: Descriptor, told: Derivation) -> Descriptor | None:
    return _with(unit, told, lambda one: replace(one, sphere=one.sphere + 1))


def value_raised(unit: Descriptor, told: Derivation) -> Descriptor | None:
    def change(one: Comparison) -> Comparison | None:
        first, *rest = one.higher.entries
        raised = (replace(first, value=first.value + 0.5), *rest)
        return replace(one, higher=replace(one.higher, entries=raised))

    return _with(unit, told, change)


def member_left_out(unit: Descriptor, told: Derivation) -> Descriptor | None:
    def change(one: Comparison) -> Comparison | None:
        return replace(one, higher=replace(one.higher, entries=one.higher.entries[:-1]))

    return _with(unit, told, change)


def duplicate_called_an_atom(unit: Descriptor, told: Derivation) -> Descriptor | None:
    for number, one in enumerate(told.comparisons):
        if any(entry.duplicate for entry in one.higher.entries):
            entries = tuple(replace(entry, duplicate=False) for entry in one.higher.entries)
            higher = replace(one.higher, entries=entries)
            return _with(unit, told, lambda one, h=higher: replace(one, higher=h), number)
    return None


def path_elsewhere(unit: Descriptor, told: Derivation) -> Descriptor | None:
    def change(one: Comparison) -> Comparison | None:
        if one.sphere < 2:
            return None
        path = (one.higher.path[0], one.lower.ligand, *one.higher.path[2:])
        return replace(one, higher=replace(one.higher, path=path))

    return _with(unit, told, change, 1 if len(told.comparisons) > 1 else 0)


def other_rule(unit: Descriptor, told: Derivation) -> Descriptor | None:
    def change(one: Comparison) -> Comparison | None:
        return replace(one, rule="1b" if one.rule == "1a" else "1a")

    return _with(unit, told, change)


FALSE: tuple[False_, ...] = (
    other_letter,
    ranks_exchanged,
    sides_exchanged,
    comparison_missing,
    sphere_moved,
    value_raised,
    member_left_out,
    duplicate_called_an_atom,
    path_elsewhere,
    other_rule,
)


@pytest.mark.parametrize("falsify", FALSE, ids=lambda f: f.__name__)
def test_a_falsified_derivation_is_found(falsify: False_) -> None:
    found = 0
    for case, unit in DERIVED:
        assert unit.derivation is not None
        told = falsify(unit, unit.derivation)
        if told is None:
            continue
        assert replayed(case, told), (case["name"], unit.atoms)
        found += 1
    assert found > 50


def test_a_comparison_that_comes_too_late_is_found() -> None:
    """A true difference behind the first one is no reason: COOH and CH2SH differ in sphere 2."""
    smiles = "N[C@@H](CS)C(=O)O"
    (unit,) = descriptors(from_smiles(smiles))
    assert unit.derivation is not None
    carbons = unit.derivation.comparisons[1]
    assert (carbons.higher.path, carbons.lower.path) == ((2, 3), (2, 5))
    late = replace(
        carbons,
        sphere=3,
        higher=replace(carbons.higher, path=(2, 3, 4), entries=_hydrogen(carbons)),
        lower=replace(carbons.lower, path=(2, 5, 6), entries=()),
    )
    told = _with(unit, unit.derivation, lambda _: late, 1)
    mol, means = prepared(from_smiles(smiles).mol)
    assert told is not None
    assert any(text.startswith("decided before") for text in untrue(mol, means, told))


def _hydrogen(one: Comparison) -> tuple[Any, ...]:
    return (replace(one.higher.entries[0], atom=0, label="H", value=1.0),)
