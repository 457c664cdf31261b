from __future__ import annotations

from dossiercheck.language import gather
from dossiercheck.language.wrapped import hard_lines, stretched
from dossiercheck.model import Cell, Evidence, Passage, Place, Role, Stretch, Table


def found(text: str) -> list[tuple[str, list[str]]]:
    return [
        (text[s.candidate.start : s.candidate.end], [text[a:b] for a, b in s.others])
        for s in stretched(text)
    ]


def evidence(text: str) -> list[Evidence]:
    breaks = tuple(at for at, c in enumerate(text) if c == "\n")
    passage = Passage(text, Place("a.pdf", page=1, paragraph=1), (), (), breaks)
    return [said for said in gather([passage]) if isinstance(said, Evidence)]


def test_lines_that_the_author_ended() -> None:
    text = "ab\ncd\nef"
    assert [text[a:b] for a, b in hard_lines(text, (2,))] == ["ab\ncd", "ef"]


def test_a_hyphen_binds() -> None:
    assert found("the (2R)-2-amino-\nbutan-1-ol was") == [("(2R)-2-amino-\nbutan-1-ol", [])]


def test_an_open_bracket_binds() -> None:
    name = "(2R)-2-[(4-chloro\nphenyl)methyl]butane"
    assert found(f"with {name}, which") == [(name, [])]


def test_the_bracket_of_a_sentence_does_not_bind() -> None:
    assert [name for name, _ in found("(see\n(2R)-2-aminobutane) it")] == ["(2R)-2-aminobutane"]


def test_without_a_hyphen_the_name_may_end_or_go_on() -> None:
    assert found("we took (2R)-2-aminobutane\nthiol and") == [
        ("(2R)-2-aminobutane", ["(2R)-2-aminobutane\nthiol"])
    ]


def test_a_salt_word_that_is_cut() -> None:
    ((name, others),) = found("as (2R)-2-aminobutane hydro-\nchloride in")
    assert name == "(2R)-2-aminobutane"
    assert others == ["(2R)-2-aminobutane hydro-\nchloride"]


def test_an_acid_over_the_line_end() -> None:
    ((name, _),) = found("to (2S)-2-hydroxypropanoic\nacid and")
    assert name == "(2S)-2-hydroxypropanoic\nacid"


def test_labelled_values_over_line_ends() -> None:
    (said,) = evidence("InChI: InChI=1S/C3H6O3/c1-2(4)\n3(5)6/h2,4H,1H3,(H,5,6)/t2-/m0/s1")
    assert said.role is Role.INCHI
    assert said.text == "InChI=1S/C3H6O3/c1-2(4)3(5)6/h2,4H,1H3,(H,5,6)/t2-/m0/s1"
    (said,) = evidence("Stereochemistry: single\nenantiomer")
    assert said.text == "single enantiomer"
    (said,) = evidence("Chemical name: (2S)-2-hydroxy-\npropanoic acid")
    assert said.text == "(2S)-2-hydroxy-\npropanoic acid"


def test_a_name_has_the_box_of_its_own_words() -> None:
    text = "It is (2R)-2-aminobutane."
    stretch = Stretch(0, len(text), 3, (100.0, 50.0, 100.0 + 10 * len(text), 60.0))
    passage = Passage(text, Place("a.pdf", page=3), (), (), (), (stretch,))
    (said,) = gather([passage])
    assert isinstance(said, Evidence)
    assert said.place.page == 3
    assert said.place.box == (160.0, 50.0, 340.0, 60.0)


def test_a_name_over_the_lines_of_a_table_cell() -> None:
    place = Place("a.pdf", table=1, row=2, column="B")
    head = (Cell("Code", place), Cell("Chemical name", place))
    name = "(2S)-2-hydroxy-\npropanoic acid"
    soft = Table((head, (Cell("DX-1", place), Cell(name, place, (), (15,)))), place)
    (said,) = gather([soft])
    assert isinstance(said, Evidence)
    assert (said.role, said.text) == (Role.NAME, name)


def test_a_name_that_is_one_only_with_the_next_lines() -> None:
    text = "Residual (1R,3R)-3-m\nethylcyclohexane-1-carb\noxylic acid (not more"
    ((name, others),) = found(text)
    assert name == "(1R,3R)-3-m\nethylcyclohexane-1-carb"
    assert others == ["(1R,3R)-3-m\nethylcyclohexane-1-carb\noxylic acid"]
    assert found("the (S)\nisomer was") == []
