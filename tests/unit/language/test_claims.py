"""Claims in sentences: of whom, of what, and what is left unread. All sentences are invented."""

from __future__ import annotations

import pytest

from dossiercheck.language.claims import claims, only_statement
from dossiercheck.language.predicates import Statement
from dossiercheck.model import Role
from tests.unit.language.gathering import evidence, lines, not_read, table


def found(text: str, under: str = "", before: str = "") -> list[tuple[str, str]]:
    """(label, "" or why) of each claim."""
    return [(one.label, one.why) for one in claims(text, under, before)]


@pytest.mark.parametrize(
    ("text", "label", "expected"),
    [
        ("DX-101 is a single enantiomer.", "DX-101", Statement("absolute")),
        ("DX-101 is the (S)-enantiomer.", "DX-101", Statement("absolute", letters=(("", "S"),))),
        (
            "The configuration at C-4 of DX-101 is R.",
            "DX-101",
            Statement(letters=(("4", "R"),)),
        ),
        (
            "The absolute configuration of lomivarane was established as (S).",
            "lomivarane",
            Statement(letters=(("", "S"),)),
        ),
        ("DX-101 is (2S,3R)-configured.", "DX-101", Statement(letters=(("2", "S"), ("3", "R")))),
        ("C-4 of DX-101 is R-configured.", "DX-101", Statement(letters=(("4", "R"),))),
        ("DX-101 has four stereocentres.", "DX-101", Statement(centres=4)),
        (
            "DX-101 contains two stereogenic centres and one stereogenic double bond.",
            "DX-101",
            Statement(centres=2, bonds=1),
        ),
        ("DX-101 can exist as four stereoisomers.", "DX-101", Statement(isomers=4)),
        ("Three stereoisomers of DX-101 are possible.", "DX-101", Statement(isomers=3)),
        ("Starting material 1 is a racemate.", "Starting material 1", Statement("racemic")),
        ("DX-101 is not a racemate.", "DX-101", Statement("not racemic")),
        ("DX-101 is scalemic.", "DX-101", Statement("scalemic")),
        (
            "Intermediate 3 is a mixture of diastereomers.",
            "Intermediate 3",
            Statement("mixture"),
        ),
        ("Intermediate 3 is epimeric at C-3.", "Intermediate 3", Statement("mixture")),
        ("Intermediate 6 is a meso compound.", "Intermediate 6", Statement("achiral")),
        ("DX-101 is achiral.", "DX-101", Statement("achiral")),
        ("DX-101 is optically inactive.", "DX-101", Statement("inactive")),
        ("DX-101 is the trans isomer.", "DX-101", Statement(words=("trans",))),
        ("DX-101 is the threo isomer.", "DX-101", Statement(words=("threo",))),
        ("DX-101 is the β-anomer.", "DX-101", Statement(words=("β",))),
        ("Reagent 2 is the D-enantiomer.", "Reagent 2", Statement(words=("D",))),
        (
            "Impurity B is the enantiomer of DX-101.",
            "Impurity B",
            Statement(relation="enantiomer", other="DX-101"),
        ),
        (
            "The enantiomer of DX-101 is Impurity B.",
            "Impurity B",
            Statement(relation="enantiomer", other="DX-101"),
        ),
        (
            "Impurity B and Impurity C are diastereomers.",
            "Impurity B",
            Statement(relation="diastereomer", other="Impurity C"),
        ),
        (
            "Impurity C is the epimer at C-3 of DX-101.",
            "Impurity C",
            Statement(relation="epimer", other="DX-101", at=("3",)),
        ),
        (
            "Impurity D is the racemate of DX-101.",
            "Impurity D",
            Statement("racemic", relation="racemate", other="DX-101"),
        ),
        (
            "Impurity E is a constitutional isomer of velbrasol.",
            "Impurity E",
            Statement(relation="constitutional isomer", other="velbrasol"),
        ),
        (
            "Intermediate 3 is converted into Intermediate 4 with inversion at C-2.",
            "Intermediate 4",
            Statement(step="inversion", other="Intermediate 3", at=("2",)),
        ),
        (
            "The conversion of Intermediate 3 to Intermediate 4 proceeds with retention.",
            "Intermediate 4",
            Statement(step="retention", other="Intermediate 3"),
        ),
        ("DX-101 has an enantiomeric excess of 99.5 %.", "DX-101", Statement(excess=99.5)),
    ],
)
def test_plain_claims_are_understood(text: str, label: str, expected: Statement) -> None:
    assert found(text, "HEADING") == [(label, "")]
    assert only_statement(text) == expected


@pytest.mark.parametrize(
    "text",
    [
        "DX-101 is probably a single enantiomer.",
        "DX-101 may be a racemate.",
        "DX-101 is believed to be the (S)-enantiomer.",
        "DX-101 is either a racemate or a single enantiomer.",
        "DX-101 is a racemate or a single enantiomer.",
        "DX-101 is a single enantiomer in solution only.",
        "DX-101 is not the (S)-enantiomer.",
        "Impurity B is not the enantiomer of DX-101.",
        "DX-101 does not have two stereocentres but has no stereocentre.",
        "Neither of them is a racemate.",
        "Both intermediates are racemic.",
        "The configuration at C-4 is presumably R.",
        "The configuration at C-4 was tentatively assigned as S.",
        "The ring closes with inversion at C-2.",
        "DX-101 is predominantly the (R)-enantiomer.",
        "DX-101 is a mixture of two enantiomers of unknown ratio.",
    ],
)
def test_a_claim_with_a_hedge_or_a_negation_is_unread_and_never_a_claim(text: str) -> None:
    got = found(text, "HEADING")
    assert got
    assert all(why for _, why in got)
    assert only_statement(text) is None


@pytest.mark.parametrize(
    "text",
    [
        "No epimerisation was observed.",
        "DX-101 may racemise at high pH.",
        "If DX-101 is a racemate, the batch is rejected.",
        "Chiral HPLC was used to separate the enantiomers.",
        "The column is chiral.",
        "The enantiomer content is not more than 0.15 %.",
        "The racemate is resolved with a chiral acid.",
        "A racemate is a 1:1 mixture of enantiomers.",
        "Impurity B elutes with a retention time of 5 min.",
        "The cis isomer is removed by crystallisation.",
        "The stereochemistry is discussed in the next section.",
        "Optical rotation is measured at 20 °C.",
        "DX-101 is a white powder.",
    ],
)
def test_ordinary_prose_gives_nothing(text: str) -> None:
    assert found(text, "HEADING") == []


def test_a_sentence_about_two_substances_gives_each_its_own() -> None:
    text = "DX-101 is the (S)-enantiomer and Impurity B is the (R)-enantiomer."
    assert found(text) == [("DX-101", ""), ("Impurity B", "")]


def test_a_pronoun_is_the_substance_just_named_and_no_other() -> None:
    assert found("DX-101 is a white powder. It is a single enantiomer.", "X") == [("DX-101", "")]
    assert found("It is a single enantiomer.", "DX-101") == [("DX-101", "")]
    ((label, why),) = found("DX-101 arises from Impurity B. It is a racemate.", "DX-101")
    assert not label
    assert why
    ((label, why),) = found("It is a racemate.")
    assert not label
    assert why


def test_its_enantiomer_is_of_the_substance_spoken_of_before() -> None:
    (one,) = claims("Impurity A is its enantiomer.", before="DX-101")
    assert (one.label, one.other, one.why) == ("Impurity A", "DX-101", "")
    (one,) = claims("Impurity A is its enantiomer.")
    assert one.why


def test_relative_clauses_and_appositions() -> None:
    name = "(1R,5S)-3,6-dioxabicyclo[3.1.0]hexane"
    text = f"It is epoxidised to Intermediate 6, {name}, which is meso."
    assert found(text) == [("Intermediate 6", "")]
    text = f"Addition gives Intermediate 3, {name}, a pair of diastereomers."
    assert found(text) == [("Intermediate 3", "")]


def test_letters_in_names_are_no_claims() -> None:
    assert found("DX-101 is (2S)-2-aminopropanoic acid.", "X") == []


def test_evidence_of_passages_has_label_and_span() -> None:
    (said,) = evidence(lines("Text before. DX-101 is a single enantiomer.", ("Impurities",)))
    assert (said.role, said.label, said.text) == (
        Role.STEREO,
        "DX-101",
        "DX-101 is a single enantiomer",
    )
    assert said.place.span == (13, 42)


def test_a_claim_of_nobody_is_unread() -> None:
    assert [u.reason for u in not_read(lines("It is a single enantiomer."))] == [
        "statement-not-attributed"
    ]
    (said,) = evidence(lines("It is a single enantiomer.", ("Impurity B",)))
    assert said.label == "Impurity B"


def test_cells_claim_of_the_substance_of_their_row() -> None:
    items = [
        table(
            [
                ["Impurity", "SMILES", "Remark"],
                ["Impurity A", "C[C@H](N)O", "enantiomer of DX-101"],
                ["Impurity B", "C[C@H](N)CO", "probably a racemate"],
                ["Impurity C", "C[C@H](N)CCO", "by-product of step 2"],
            ]
        )
    ]
    said = [one for one in evidence(items) if one.role is Role.STEREO]
    assert [(one.label, one.text, bool(one.group)) for one in said] == [
        ("Impurity A", "enantiomer of DX-101", True)
    ]
    assert [u.reason for u in not_read(items)] == ["statement-not-understood"]


def test_a_long_sentence_costs_no_more_than_its_length() -> None:
    # Ends at all: patterns that went back over what they had read took an hour.
    name = "(2S)-2-" + "methyl" * 400 + "butane"
    many = "DX-101 (" * 300 + "is a racemate and " * 300
    for text in (f"DX-101, {name}, {name}, is what.", many, "is a " * 3000 + "racemate"):
        assert all(one.why for one in claims(text, "X"))
