"""What substances are called: definitions are followed where they can be, and only there."""

from __future__ import annotations

import pytest

from dossiercheck.calling import Callings, kind_of, plays_a_part
from dossiercheck.language.glossary import Term, beside, terms
from dossiercheck.model import Place
from dossiercheck.settings import RegisterEntry

HERE = Place("a.txt")


def defined(text: str) -> list[tuple[str, str]]:
    return [(one.label, one.other) for one in terms(text, HERE)]


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("Dorvaline maleate (hereinafter DX-101) is white.", ("Dorvaline maleate", "DX-101")),
        ("Dorvaline, hereinafter referred to as “DX-101”, is", ("Dorvaline", "DX-101")),
        ("DX-101, referred to as Impurity B in this report", ("DX-101", "Impurity B")),
        ("Impurity B (also known as DX-102) arises", ("Impurity B", "DX-102")),
        ("Impurity B (DX-102) arises", ("Impurity B", "DX-102")),
        ("Dorvaline (hereinafter the drug substance)", ("Dorvaline", "drug substance")),
    ],
)
def test_definitions(text: str, found: tuple[str, str]) -> None:
    assert defined(text) == [found]


@pytest.mark.parametrize(
    "text",
    [
        "The enantiomer of Dorvaline (Impurity A) is limited.",
        "Impurity B is made from DX-101 (see 3.2.S.2.2).",
        "Impurity B, DX-102 and DX-103 arise.",
        "According to ICH (Q6A) it is chiral.",
        "However, known as a solid",
    ],
)
def test_no_definition(text: str) -> None:
    assert defined(text) == []


def always(_: str, __: str, ___: bool) -> bool:
    return True


def test_a_chain_of_definitions_leads_to_one_title() -> None:
    callings = Callings()
    callings.learn(
        [Term("DX-101", "Impurity B", "is", HERE), Term("Dorvaline", "DX-101", "is", HERE)], always
    )
    assert {callings.called(one).title for one in ("Dorvaline", "DX-101", "Impurity B")} == {
        "Dorvaline"
    }


def test_the_register_goes_before_a_definition() -> None:
    callings = Callings((RegisterEntry("Dorvaline", aliases=("DX-101",)), RegisterEntry("DX-102")))
    callings.learn(
        [Term("DX-102", "DX-101", "is", HERE), Term("DX-9", "DX-101", "is", HERE)], always
    )
    assert callings.called("DX-101").title == "Dorvaline"
    assert callings.called("DX-102").title == "DX-102"
    # Only the register knows one side: the other is a further name of that one.
    assert callings.called("DX-9").title == "Dorvaline"
    assert [one.label for one in callings.refused] == ["DX-102"]


def test_a_code_that_two_labels_claim_is_neithers() -> None:
    callings = Callings()
    callings.learn(
        [*beside("Impurity A", ["DX-1"], HERE), *beside("Impurity B", ["DX-1"], HERE)], always
    )
    assert callings.called("DX-1").title == "DX-1"
    assert len(callings.refused) == 2


def test_row_numbers_are_no_codes() -> None:
    assert list(beside("Impurity A", ["1", "B2", "007"], HERE)) == []


def test_kinds_and_parts() -> None:
    assert kind_of("Impurity B") == kind_of("impurity 12") == "impurity"
    assert kind_of("Dorvaline") == kind_of("DX-101") == kind_of("Dorvaline maleate") == ""
    assert plays_a_part("The drug substance")
    assert not plays_a_part("drug substance batch 3")
