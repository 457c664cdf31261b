"""Parts of a disorder. The meaning of assemblies and groups: core CIF dictionary 2.4."""

from __future__ import annotations

import pytest

from dossiercheck.limits import Refused
from dossiercheck.readers.disorder import parts
from dossiercheck.readers.packing import Site


def site(label: str, share: float = 1.0, group: int = 0, assembly: str = "") -> Site:
    return Site(label, "C", (0.1, 0.2, 0.3), share, assembly, group)


def labels(sites: tuple[Site, ...]) -> str:
    return " ".join(one.label for one in sites)


def test_nothing_is_disordered() -> None:
    found = parts([site("C1"), site("C2")])
    assert (labels(found.major), found.others, found.note) == ("C1 C2", (), "")


def test_the_greater_share_is_kept() -> None:
    found = parts([site("C1"), site("C2A", 0.3, 1), site("C2B", 0.7, 2)])
    assert labels(found.major) == "C1 C2B"
    assert [labels(other) for other in found.others] == ["C1 C2A"]
    assert "C2A" in found.note and "0.30" in found.note


def test_of_equal_shares_the_lower_number_is_kept() -> None:
    found = parts([site("C2B", 0.5, 2), site("C2A", 0.5, 1)])
    assert labels(found.major) == "C2A"


def test_assemblies_are_independent() -> None:
    found = parts(
        [
            site("C1A", 0.6, 1, "A"),
            site("C1B", 0.4, 2, "A"),
            site("C2A", 0.2, 1, "B"),
            site("C2B", 0.8, 2, "B"),
        ]
    )
    assert labels(found.major) == "C1A C2B"
    assert sorted(labels(other) for other in found.others) == ["C1A C2A", "C1B C2B"]


def test_unnamed_assemblies_are_told_apart_by_their_shares() -> None:
    """Refinement programs write PART 1 and PART 2 for every disorder (common practice)."""
    found = parts(
        [site("C1A", 0.6, 1), site("C1B", 0.4, 2), site("C2A", 0.25, 1), site("C2B", 0.75, 2)]
    )
    assert labels(found.major) == "C1A C2B"
    assert sorted(labels(other) for other in found.others) == ["C1A C2A", "C1B C2B"]


def test_three_parts() -> None:
    found = parts([site("A", 0.5, 1), site("B", 0.3, 2), site("C", 0.2, 3)])
    assert labels(found.major) == "A"
    assert [labels(other) for other in found.others] == ["B", "C"]


def test_a_negative_group_stands_by_itself() -> None:
    """Its other part is its own image by symmetry."""
    found = parts([site("C1"), site("C2", 0.5, -1)])
    assert (labels(found.major), found.others) == ("C1 C2", ())


@pytest.mark.parametrize(
    "sites",
    [
        [site("C1", 0.5)],
        [site("C1", 0.5, 1)],
        [site("C1", 0.5, 1), site("C2", 0.3, 2)],
        [site("C1", 0.5, 1), site("C2", 0.3, 1), site("C3", 0.5, 2)],
        [site("C1", 1.0, 1), site("C2", 1.0, 2)],
        [site(f"C{n}", 1 / 20, n) for n in range(1, 21)],
    ],
    ids=["no group", "alone", "too little", "uneven", "too much", "too many"],
)
def test_shares_that_make_no_whole_are_refused(sites: list[Site]) -> None:
    with pytest.raises(Refused) as refused:
        parts(sites)
    assert refused.value.reason == "unresolved-disorder"
