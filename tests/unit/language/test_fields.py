from __future__ import annotations

import pytest

from dossiercheck.model import Passage, Place
from tests.unit.language.gathering import evidence, labels, lines, not_read, said

NAME = "(2S)-butan-2-ol"
OTHER = "(2R)-butan-2-ol"


@pytest.mark.parametrize(
    "line",
    [
        "Molecular formula: C4H10O",
        "Molecular formula – C4H10O",
        "Molecular formula - C4H10O",
        "molecular formula = C4H10O.",
        "- Molecular formula:\tC4H10O",
        "Molecular formula\tC4H10O",
        "3. Mol. formula : C4H10O ",
        "MF: C4H10O",
    ],
)
def test_labelled_lines(line: str) -> None:
    (found,) = evidence(lines(line))
    assert (found.role.name, found.text) == ("FORMULA", "C4H10O")
    assert found.place.span is not None
    assert line[slice(*found.place.span)] == "C4H10O"


@pytest.mark.parametrize(
    "line", ["Note: C4H10O", "The molecular formula: see below", "Batch: 7", "molecular formula"]
)
def test_lines_that_are_no_fields(line: str) -> None:
    assert said(lines(line)) == []


def test_consecutive_fields_form_a_block_with_its_label() -> None:
    text = f"Substance: DX-101\nChemical name: {NAME}\nMW: 74.12 g/mol\n\nWhite powder."
    found = evidence(lines(text))
    assert [(one.text, one.label, one.group) for one in found] == [
        (NAME, "DX-101", "a#block1"),
        ("74.12 g/mol", "DX-101", "a#block1"),
    ]


def test_a_label_may_come_last() -> None:
    assert labels(lines(f"Chemical name: {NAME}\nCode: DX-101")) == ["DX-101"]


def test_a_second_label_begins_the_next_block() -> None:
    text = "Substance: A-1\nStereochemistry: racemate\nSubstance: B-2\nStereochemistry: meso"
    assert [(one.label, one.group) for one in evidence(lines(text))] == [
        ("A-1", "a#block1"),
        ("B-2", "a#block2"),
    ]


def test_a_label_without_values_does_not_pass_to_the_next() -> None:
    text = "Substance: A-1\nSubstance: B-2\nStereochemistry: meso"
    assert labels(lines(text)) == ["B-2"]


def test_blocks_parted_by_a_blank_line_do_not_run_together() -> None:
    text = f"Chemical name: {NAME}\n\nChemical name: {OTHER}\nMW: 74"
    groups = {one.text: one.group for one in evidence(lines(text))}
    assert groups[NAME] != groups[OTHER]
    assert groups[OTHER] == groups["74"]


def test_fields_each_a_paragraph_of_their_own_stay_together() -> None:
    text = f"Chemical name: {NAME}\n\nMolecular formula: C4H10O\n\nMW: 74"
    assert len({one.group for one in evidence(lines(text))}) == 1


def test_names_in_a_row_are_of_one_substance_and_later_ones_of_the_next() -> None:
    text = f"IUPAC name: {NAME}\nCAS index name: x\nMW: 74\nIUPAC name: {OTHER}\nMW: 75"
    groups = {one.text: one.group for one in evidence(lines(text))}
    assert groups[NAME] == groups["x"] == groups["74"]
    assert groups[OTHER] == groups["75"] != groups[NAME]


def test_text_between_ends_a_block() -> None:
    text = f"Chemical name: {NAME}\nIt is a liquid.\nMW: 74"
    assert len({one.group for one in evidence(lines(text))}) == 2


@pytest.mark.parametrize(
    ("headings", "label"),
    [
        (("Impurity B",), "Impurity B"),
        (("3.2.S.3.2 Impurities", "Impurity B (DX-102)"), "Impurity B"),
        (("3.2.S.3.2 Impurities", "Impurity B from DX-102"), ""),
        (("3.2.S.1 General information (DX-101)", "3.2.S.1.2 Structure"), "DX-101"),
        (("3.2.S.1 General information (Dorvaquelan tartrate)",), "Dorvaquelan tartrate"),
        (("DX-101", "Impurities"), ""),
        (("Enantiomer of DX-101",), "Enantiomer of DX-101"),
        (("3.2.S.1.1 Nomenclature",), ""),
        (("3.2.S.2.3 Intermediate 3",), "Intermediate 3"),
        (("Section according to ICH-Q6A",), ""),
    ],
)
def test_labels_from_headings(headings: tuple[str, ...], label: str) -> None:
    assert labels(lines(f"Chemical name: {NAME}", headings)) == [label]


def test_a_line_that_is_a_label_names_the_block_below_it() -> None:
    assert labels(lines(f"Impurity B\nChemical name: {NAME}")) == ["Impurity B"]
    assert labels(lines(f"Impurity B is described here.\nChemical name: {NAME}")) == [""]


def test_several_fields_on_one_line() -> None:
    text = f"Chemical name: {NAME}; Molecular formula: C4H10O; MW: 74.12"
    assert said(lines(text)) == [("NAME", NAME), ("FORMULA", "C4H10O"), ("MASS", "74.12")]


def test_a_value_on_the_next_line() -> None:
    assert said(lines(f"Chemical name:\n{NAME}\nMW: 74")) == [("NAME", NAME), ("MASS", "74")]


def test_a_field_without_a_value_is_listed() -> None:
    (entry,) = not_read(lines("Chemical name:\n\nNothing was determined."))
    assert (entry.reason, entry.place.line) == ("empty-field", 1)


@pytest.mark.parametrize(
    "text",
    [
        "Chemical name: (2S)-2-amino-3-\nphenylpropanoic acid",
        "Chemical name: (2S)-2-{[(1R)-1-phenylethyl\n]amino}propanoic acid",
        "Chemical name: (2S)-2-aminopropane\n    dioic acid",
    ],
)
def test_a_name_over_a_line_end_is_not_guessed(text: str) -> None:
    assert said(lines(text)) == []
    assert "broken-name" in [entry.reason for entry in not_read(lines(text))]


def test_the_label_in_brackets_is_not_part_of_the_name() -> None:
    assert said(lines(f"Chemical name: {NAME} (Impurity B).")) == [("NAME", NAME)]


def test_a_sentence_as_value_gives_the_name_in_it() -> None:
    text = f"Chemical name: The name according to IUPAC is {NAME}."
    (found,) = evidence(lines(text))
    assert found.text == NAME
    assert found.place.span is not None
    assert text[slice(*found.place.span)] == NAME


@pytest.mark.parametrize("nothing", ["n/a", "-", "not applicable"])
def test_fields_that_say_nothing(nothing: str) -> None:
    assert said(lines(f"CAS No.: {nothing}")) == []
    assert not_read(lines(f"CAS No.: {nothing}")) == []


def test_the_number_of_stereocentres_keeps_its_heading() -> None:
    assert said(lines("Number of stereocentres: 4")) == [("STEREO", "Number of stereocentres: 4")]


def test_the_users_mapping() -> None:
    columns = {"Bezeichnung": "name", "Code": "ignore"}
    assert said(lines(f"Code: X\nBezeichnung: {NAME}"), columns) == [("NAME", NAME)]


def test_lines_inside_one_paragraph() -> None:
    passage = Passage(f"Chemical name: {NAME}\nMW: 74", Place("a", paragraph=3))
    found = evidence([passage])
    assert [(one.role.name, one.text) for one in found] == [("NAME", NAME), ("MASS", "74")]
    for one in found:
        assert one.place.span is not None
        assert passage.text[slice(*one.place.span)] == one.text


def test_blocks_are_numbered_anew_in_each_source() -> None:
    items = [
        Passage(f"Chemical name: {NAME}", Place("a", paragraph=1)),
        Passage(f"Chemical name: {OTHER}", Place("b", paragraph=1)),
    ]
    assert [one.group for one in evidence(items)] == ["a#block1", "b#block1"]


def test_a_name_that_is_a_label_begins_its_block() -> None:
    # The hydrochloride's formula, cut off by an unknown field, must not join the base below it.
    text = f"Name: Dorvaline hydrochloride\nGrade: pure\nMW: 75\n\nName: Dorvaline\nChemical name: {NAME}\nMW: 74"
    said = {one.text: one for one in evidence(lines(text))}
    assert said["75"].group != said["74"].group == said[NAME].group
    assert said["74"].label == "Dorvaline"


def test_a_systematic_name_under_name_is_a_name() -> None:
    (name, _) = evidence(lines(f"Name: {NAME}\nMW: 74"))
    assert (name.role.name, name.text, name.label) == ("NAME", NAME, "")


@pytest.mark.parametrize(
    ("text", "hints"),
    [
        ("TA-L is (2R,3R)-2,3-dihydroxybutanedioic acid.", ("TA-L",)),
        ("Then the Amine, (2S)-butan-2-amine, is added.", ("Then the Amine", "the Amine", "Amine")),
        ("It is (2S)-butan-2-amine (TA-L).", ("TA-L", "It")),
        ("The enantiomer of TA-L, (2S)-butan-2-amine, is limited.", ()),
    ],
)  # fmt: skip
def test_words_beside_a_name_that_may_be_a_label(text: str, hints: tuple[str, ...]) -> None:
    said = [one for one in evidence(lines(text)) if one.role.name == "NAME"]
    assert [one.hints for one in said] == [hints]


def test_an_unknown_field_among_the_others_does_not_end_their_block() -> None:
    text = f"Substance: Dorvaline\nChemical name: {NAME}\nSalt form: none\nMW: 74"
    assert len({one.group for one in evidence(lines(text))}) == 1
    apart = f"Substance: Dorvaline\nChemical name: {NAME}\n\nSalt form: none\nMW: 74"
    assert len({one.group for one in evidence(lines(apart))}) == 2
