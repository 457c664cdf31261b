from __future__ import annotations

from itertools import permutations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from dossiercheck.model import Table
from tests.unit.language.gathering import evidence, labels, not_read, said, table

NAME = "(2S)-butan-2-ol"
OTHER = "(2R)-butan-2-ol"
KEY = "BTANRVKWQNVYAZ-BYPYZUCNSA-N"
INCHI = "InChI=1S/C4H10O/c1-3-4(2)5/h4-5H,3H2,1-2H3/t4-/m0/s1"


def test_headings_above_columns() -> None:
    found = evidence(
        [table([["Code", "IUPAC name", "M.W. (g/mol)", "Batch"], ["DX-1", NAME, "74.12", "7"]])]
    )
    assert [(one.role.name, one.text, one.label) for one in found] == [
        ("NAME", NAME, "DX-1"),
        ("MASS", "74.12", "DX-1"),
    ]
    assert {one.group for one in found} == {"a#table1row2"}
    assert [one.place.column for one in found] == ["IUPAC name", "M.W. (g/mol)"]
    assert [one.place.row for one in found] == [2, 2]


def test_in_a_spreadsheet_columns_keep_their_letters() -> None:
    found = evidence([table([["SMILES"], ["CCO"]], sheet="S")])
    assert found[0].place.column == "A"


def test_a_title_above_the_headings() -> None:
    rows = [["List of impurities", "", ""], ["Impurity", "Chemical name", "MW"], ["B", NAME, "74"]]
    assert said([table(rows)]) == [("NAME", NAME), ("MASS", "74")]


def test_fields_and_values_in_two_columns() -> None:
    rows = [
        ["Substance", "DX-101"],
        ["Company code", "other"],
        ["Chemical name", NAME],
        ["Appearance", "white powder"],
        ["Molecular formula", "C4H10O"],
    ]
    found = evidence([table(rows)])
    assert [(one.role.name, one.text, one.label) for one in found] == [
        ("NAME", NAME, "DX-101"),
        ("FORMULA", "C4H10O", "DX-101"),
    ]
    assert len({one.group for one in found}) == 1
    assert found[1].place.field == "Molecular formula"
    assert found[1].place.row == 5


def test_one_value_column_a_substance() -> None:
    rows = [
        ["", "DX-101", "Impurity B", "Reference"],
        ["Chemical name", NAME, OTHER, "3.2.S.1"],
        ["MW", "74.12", "74.12", "3.2.S.1"],
    ]
    found = evidence([table(rows)])
    assert [(one.text, one.label) for one in found] == [
        (NAME, "DX-101"),
        ("74.12", "DX-101"),
        (OTHER, "Impurity B"),
        ("74.12", "Impurity B"),
    ]
    assert len({one.group for one in found}) == 2


def test_fields_under_generic_headings() -> None:
    rows = [["Property", "Value"], ["SMILES", "CCO"], ["InChIKey", KEY]]
    assert said([table(rows)]) == [("SMILES", "CCO"), ("INCHIKEY", KEY)]
    assert labels([table(rows)]) == ["", ""]


def test_substances_listed_one_below_another() -> None:
    rows = [
        ["Code", "A-101"],
        ["Chemical name", NAME],
        ["MW", "74"],
        ["Code", "B-102"],
        ["Chemical name", OTHER],
        ["MW", "75"],
    ]
    found = evidence([table(rows)])
    assert [(one.text, one.label) for one in found] == [
        (NAME, "A-101"),
        ("74", "A-101"),
        (OTHER, "B-102"),
        ("75", "B-102"),
    ]
    assert len({one.group for one in found}) == 2


def test_a_second_substance_without_a_label_does_not_join_the_first() -> None:
    rows = [["Chemical name", NAME], ["MW", "74"], ["Chemical name", OTHER], ["MW", "75"]]
    groups = {one.text: one.group for one in evidence([table(rows)])}
    assert groups[NAME] == groups["74"]
    assert groups[OTHER] == groups["75"]
    assert groups[NAME] != groups[OTHER]


def test_a_column_of_labels_before_the_fields() -> None:
    rows = [
        ["Compound", "Property", "Value"],
        ["A", "SMILES", "CCO"],
        ["A", "MW", "46"],
        ["B", "SMILES", "CCC"],
        ["B", "MW", "44"],
    ]
    found = evidence([table(rows)])
    assert [(one.text, one.label) for one in found] == [
        ("CCO", "A"),
        ("46", "A"),
        ("CCC", "B"),
        ("44", "B"),
    ]


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        ([["SMILES", "Batch"], ["CCO", "3"]], [("SMILES", "CCO")]),
        ([["IUPAC name", NAME], ["Appearance", "white"]], [("NAME", NAME)]),
        ([["IUPAC name", NAME]], [("NAME", NAME)]),
        ([["Chemical name", "Limit"], [NAME, "0.1"]], [("NAME", NAME)]),
        ([["Molecular formula", "C4H10O"], ["Colour", "none"]], [("FORMULA", "C4H10O")]),
    ],
)
def test_one_known_heading_in_the_corner(
    rows: list[list[str]], expected: list[tuple[str, str]]
) -> None:
    assert said([table(rows)]) == expected


@pytest.mark.parametrize("nothing", ["", "-", "–", "n/a", "N.A.", "not applicable", "none"])
def test_cells_that_say_nothing_are_passed_over(nothing: str) -> None:
    assert said([table([["Code", "Chemical name", "CAS No."], ["A", NAME, nothing]])]) == [
        ("NAME", NAME)
    ]


def test_several_name_columns() -> None:
    rows = [["Impurity", "Chemical name", "CAS index name"], ["B", NAME, "2-Butanol, (2S)-"]]
    assert said([table(rows)]) == [("NAME", NAME), ("NAME", "2-Butanol, (2S)-")]


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        ([["Name", "SMILES"], ["Dorvaquelan", "CCO"]], [("SMILES", "CCO", "Dorvaquelan")]),
        ([["Name", "SMILES"], [NAME, "CCO"]], [("NAME", NAME, ""), ("SMILES", "CCO", "")]),
    ],
)
def test_a_column_headed_name_holds_names_or_labels(
    rows: list[list[str]], expected: list[tuple[str, str, str]]
) -> None:
    found = evidence([table(rows)])
    assert [(one.role.name, one.text, one.label) for one in found] == expected


def test_values_that_say_themselves_need_no_heading() -> None:
    rows = [["Code", "MW", "Identifier 2", "InChIKey"], ["A", "74", KEY, INCHI]]
    assert said([table(rows)]) == [("MASS", "74"), ("INCHIKEY", KEY), ("INCHI", INCHI)]


def test_the_number_of_stereocentres_keeps_its_heading() -> None:
    rows = [["Code", "SMILES", "Number of stereocentres"], ["A", "CCO", "0"]]
    assert said([table(rows)])[1] == ("STEREO", "Number of stereocentres: 0")


def test_the_users_mapping() -> None:
    rows = [["Stoff", "Bezeichnung", "SMILES"], ["A", NAME, "CCO"]]
    columns = {"Stoff": "label", "Bezeichnung": "name", "SMILES": "ignore"}
    found = evidence([table(rows)], columns)
    assert [(one.role.name, one.text, one.label) for one in found] == [("NAME", NAME, "A")]


def test_headings_that_come_again_further_down() -> None:
    rows = [
        ["Code", "SMILES", "MW"],
        ["A", "CCO", "46"],
        ["", "", ""],
        ["Code", "MW", "SMILES"],
        ["B", "44", "CCC"],
    ]
    assert said([table(rows)]) == [
        ("SMILES", "CCO"),
        ("MASS", "46"),
        ("MASS", "44"),
        ("SMILES", "CCC"),
    ]


def test_a_label_from_the_heading_above_the_table() -> None:
    rows = [["Chemical name", NAME], ["MW", "74"]]
    assert labels([table(rows, headings=("3.2.S.3.2 Impurities", "Impurity B"))])[0] == "Impurity B"
    assert labels([table(rows, headings=("DX-101", "3.2.S.3.2 Impurities"))])[0] == ""
    assert labels([table(rows, headings=("DX-101", "3.2.S.1.1 Nomenclature"))])[0] == "DX-101"
    assert labels([table(rows, caption="Table 3: Identity of DX-101")])[0] == "DX-101"


def test_names_in_cells_without_a_known_heading_stand_alone() -> None:
    rows = [["Step", "What is done"], ["1", f"The product is {NAME}, a liquid."]]
    (found,) = evidence([table(rows)])
    assert (found.text, found.group) == (NAME, "")
    assert found.place.span == (15, 15 + len(NAME))


def test_a_name_in_several_lines_is_not_joined() -> None:
    rows = [["Code", "Chemical name"], ["A", "(2S)-butan-\n2-ol"]]
    assert said([table(rows)]) == []
    assert [entry.reason for entry in not_read([table(rows)])] == ["several-lines"]


def test_a_file_whose_headings_say_nothing_is_unread() -> None:
    rows = [["Batch", "Yield"], ["1", "90"]]
    (entry,) = not_read([table(rows, number=None, section=None)])
    assert (entry.reason, entry.text) == ("no-known-heading", "Batch | Yield")
    assert not_read([table(rows)]) == []


def test_a_merged_cell_says_once_what_it_says() -> None:
    plain = table([["Code", "SMILES", "SMILES code"], ["A", "CCO", "x"]])
    (code, smiles, _) = plain.rows[1]
    merged = Table((plain.rows[0], (code, smiles, smiles)), plain.place)
    assert said([merged]) == [("SMILES", "CCO")]


def test_a_title_across_the_table_is_no_value() -> None:
    plain = table([["Code", "SMILES"], ["Impurities", ""], ["A", "CCO"]])
    title = plain.rows[1][0]
    merged = Table((plain.rows[0], (title, title), plain.rows[2]), plain.place)
    assert [(one.text, one.label) for one in evidence([merged])] == [("CCO", "A")]


HEADINGS = ["Code", "Chemical name", "SMILES", "MW", "Batch"]
ROWS = [["A", NAME, "CC[C@H](C)O", "74.12", "x"], ["B", OTHER, "CC[C@@H](C)O", "74.1", "y"]]


@given(st.sampled_from(list(permutations(range(len(HEADINGS))))))
def test_the_order_of_columns_does_not_matter(order: tuple[int, ...]) -> None:
    def of(columns: tuple[int, ...]) -> set[tuple[str, str, str, str, str | None]]:
        rows = [[row[column] for column in columns] for row in [HEADINGS, *ROWS]]
        return {
            (one.role.name, one.text, one.label, one.group, one.place.column)
            for one in evidence([table(rows)])
        }

    assert len(of(order)) == 6
    assert of(order) == of(tuple(range(len(HEADINGS))))
