from __future__ import annotations

from collections.abc import Iterator

import pytest

from dossiercheck.names import NameParser, read_names
from dossiercheck.names.joining import choose, joinings


@pytest.fixture(scope="module")
def parser() -> Iterator[NameParser]:
    with NameParser() as one:
        yield one


def ways(text: str) -> list[str]:
    return [way.text for way in joinings(text)]


def test_the_ways_to_join_two_lines() -> None:
    assert ways("meth-\nyl") == ["meth-yl", "methyl"]
    assert ways("propanoic\nacid") == ["propanoic acid", "propanoicacid"]
    assert ways("meth\u00ad\nyl") == ["methyl", "meth-yl"]


def test_no_space_beside_a_comma_or_inside_a_bracket() -> None:
    assert ways("(2R,\n3S)-x") == ["(2R,3S)-x"]
    assert ways("[4-(\nx)]") == ["[4-(x)]"]


def test_too_many_ways_are_not_tried() -> None:
    assert joinings("a\n" * 9 + "a") == []


def test_where_each_character_came_from() -> None:
    text = "ab-\n  cd\nef"
    for way in joinings(text):
        came = [text[at] for at in way.offsets]
        assert all(a == b or (a == " " and b == "\n") for a, b in zip(way.text, came, strict=True))


# Structures of simple names by hand from the nomenclature (IUPAC 2013, P-31 and P-65).
@pytest.mark.parametrize(
    ("text", "smiles"),
    [
        ("(2R)-2-amino-3-methyl-\nbutan-1-ol", "N[C@@H](CO)C(C)C"),
        ("(2R)-2-amino-3-meth-\nylbutan-1-ol", "N[C@@H](CO)C(C)C"),
        ("(2R)-2-amino-3-meth\nylbutan-1-ol", "N[C@@H](CO)C(C)C"),
        ("(2R)-2-amino-\n3-methyl\nbutan-\n1-ol", "N[C@@H](CO)C(C)C"),
        ("ethyl\n(2S)-2-hydroxypropanoate", "O[C@H](C(=O)OCC)C"),
        ("(2S)-2-hydroxypropanoic\nacid", "O[C@H](C(=O)O)C"),
    ],
)
def test_a_name_over_line_ends(text: str, smiles: str, parser: NameParser) -> None:
    (reading,) = read_names([text], parser)
    assert reading.structure is not None
    assert reading.structure.smiles == smiles
    descriptor = reading.descriptors[0]
    assert text[slice(*descriptor.span)] == descriptor.text


def test_two_structures_are_undetermined_and_both_are_shown(parser: NameParser) -> None:
    """With a space an ester of two alcohols, without it one of ethylphosphonic acid (IUPAC 2013,
    P-67.1.3.2)."""
    (reading,) = read_names(["(2R)-butan-2-yl ethyl\nphosphonate"], parser)
    assert reading.structure is None
    assert reading.refusal is not None
    assert reading.refusal.reason == "several-joinings"
    assert "ethyl phosphonate" in reading.refusal.detail
    assert "ethylphosphonate" in reading.refusal.detail


def test_a_name_that_is_none_in_any_way(parser: NameParser) -> None:
    (reading,) = read_names(["(2R)-2-amino-\nnonsensical"], parser)
    assert reading.structure is None
    assert reading.refusal is not None
    assert reading.refusal.reason == "not-interpretable"


def chosen(parser: NameParser, *texts: str) -> tuple[int, str]:
    index, refusal = choose(texts, read_names(texts, parser))
    return index, refusal.reason if refusal else ""


def test_a_word_of_the_sentence_is_no_part_of_the_name(parser: NameParser) -> None:
    assert chosen(parser, "(2R)-2-aminobutane", "(2R)-2-aminobutane\nwas") == (0, "")


def test_the_longer_extent_where_only_it_is_a_name(parser: NameParser) -> None:
    assert chosen(parser, "(2R)-2-amino-3-meth", "(2R)-2-amino-3-meth\nylbutane") == (1, "")


def test_two_extents_that_are_two_compounds(parser: NameParser) -> None:
    found = chosen(parser, "(2R)-2-aminobutane", "(2R)-2-aminobutane\nthiol")
    assert found[1] == "several-joinings"
