"""Lists of names, synonyms, and index names printed the wrong way round."""

from __future__ import annotations

import pytest

from dossiercheck.language.lists import parts
from dossiercheck.language.running import candidates
from dossiercheck.model import Evidence, Field, Place, Record
from tests.unit.language.gathering import evidence, lines, not_read, said, table


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("(2S)-butan-2-ol; (S)-2-butanol", ["(2S)-butan-2-ol", "(S)-2-butanol"]),
        ("a;\nb ;c", ["a", "b ;c"]),
        ("a; b;", ["a", "b"]),
        ("(2S)-butan-2-amine;hydrochloride", ["(2S)-butan-2-amine;hydrochloride"]),
        ("(2S)-butan-2-amine; hydrochloride", ["(2S)-butan-2-amine; hydrochloride"]),
        ("sodium; (2S)-2-hydroxypropanoate", ["sodium; (2S)-2-hydroxypropanoate"]),
        ("a (b; c) d; e", ["a (b; c) d", "e"]),
        ("a", ["a"]),
    ],
)
def test_a_semicolon_parts_names_and_keeps_salts_whole(text: str, found: list[str]) -> None:
    assert [text[slice(*one)] for one in parts(text, 0, len(text))] == found


LIST = "(2S)-butan-2-ol; (S)-2-butanol"


@pytest.mark.parametrize(
    "items",
    [
        lines(f"Chemical names: {LIST}."),
        [table([["Code", "Chemical name"], ["DX-101", LIST]])],
        [table([["Chemical name", LIST], ["Molecular formula", "C4H10O"]])],
        [
            Record(
                "DX-101",
                "",
                (Field("IUPAC name", LIST, Place("a", record=1, field="IUPAC name")),),
                Place("a", record=1),
            )
        ],
    ],
    ids=["field", "column", "row", "record"],
)
def test_each_name_of_a_list_is_evidence_at_its_place(items: list) -> None:  # type: ignore[type-arg]
    found = [one for one in evidence(items) if one.role.name == "NAME"]
    assert [one.text for one in found] == ["(2S)-butan-2-ol", "(S)-2-butanol"]
    assert len({one.group for one in found}) == 1
    for one in found:
        assert one.place.span is not None
        assert one.place.span[1] - one.place.span[0] == len(one.text)


def test_lines_that_end_in_a_semicolon_are_a_list_and_others_are_not() -> None:
    rows = [
        ["Code", "Chemical name"],
        ["A", "(2S)-butan-2-ol;\n(S)-2-butanol"],
        ["B", "(2S)-\nbutanol"],
    ]
    assert [one.text for one in evidence([table(rows)])] == ["(2S)-butan-2-ol", "(S)-2-butanol"]
    assert [one.reason for one in not_read([table(rows)])] == ["several-lines"]


def test_of_synonyms_only_names_with_descriptors_are_taken() -> None:
    text = "Synonyms: Dorvaquelan; QX-77; 2-butanol; (2S)-butan-2-ol; 2-BUTANOL, (2S)-; (S)-form"
    names = [("NAME", "(2S)-butan-2-ol"), ("NAME", "2-BUTANOL, (2S)-")]
    assert said(lines(text)) == names
    heading, _, value = text.partition(": ")
    assert said([table([["Code", heading], ["DX-101", value]])]) == names


@pytest.mark.parametrize(
    "name",
    [
        "2-BUTANOL, (2S)-",
        "2-Butanol, 3-methyl-, (2S)-",
        "8-AZABICYCLO[3.2.1]OCTANE-2-CARBOXYLIC ACID, 3-(4-CHLOROPHENYL)-8-METHYL-, METHYL ESTER,"
        " (1R,2S,3S,5S)-",
        "Benzenemethanamine, .alpha.-methyl-, (.alpha.S)-",
        "BENZENEACETIC ACID, .ALPHA.-METHYL-4-(2-METHYLPROPYL)-, (.ALPHA.S)-",
        "Benzenemethanamine, α-methyl-, hydrochloride, (αS)-",
        "2-Propenoic acid, 3-phenyl-, (2E)-",
    ],
)
@pytest.mark.parametrize(
    "sentence",
    ["{}", "It is listed as {} in the index.", "The entry is “{}”.", "Impurity B ({}) was found."],
)
def test_inverted_names_are_found_whole(name: str, sentence: str) -> None:
    text = sentence.format(name)
    assert [text[one.start : one.end] for one in candidates(text)] == [name]


@pytest.mark.parametrize(
    "prose",
    [
        "Of the alkene, (E)- and (Z)-isomers were found.",
        "Compared with the amine, (S)- or (R)-configured acids are stronger.",
        "In solution, (2R)- and (2S)-forms interconvert.",
        "the enantiomers, (R)-, and the others",
        "Note, (S)-, (R)-",
    ],
)
def test_prose_before_a_descriptor_is_no_parent(prose: str) -> None:
    assert candidates(prose) == []


@pytest.mark.parametrize(
    "name",
    [
        "(.alpha.S)-.alpha.-methylbenzenemethanamine",
        "(alphaS)-alpha-methylbenzenemethanamine",
        "(.BETA.R)-.BETA.-METHYLBENZENEETHANOL",
        "(2*S*)-butan-2-ol",
    ],
)
def test_typography_of_greek_and_italic(name: str) -> None:
    text = f"The product is {name}, a liquid."
    assert [text[one.start : one.end] for one in candidates(text)] == [name]


def test_a_list_in_running_text_is_names_alone() -> None:
    found = evidence(lines("They are (2R)-butan-2-ol; (2S)-butan-2-ol."))
    assert [one.text for one in found] == ["(2R)-butan-2-ol", "(2S)-butan-2-ol"]
    assert all(isinstance(one, Evidence) and not one.group for one in found)
