from __future__ import annotations

import pytest

from dossiercheck.limits import Limits
from dossiercheck.model import Passage, Source
from dossiercheck.readers import text
from dossiercheck.readers.text import unmarked
from tests.unit.readers.reading import passages, read, reasons, tables, texts, unread


def test_lines_carry_their_number_and_headings() -> None:
    items = read("a.md", b"# Dossier\n\n## 3.2.S.1.1 Nomenclature\n\none\ntwo\n")
    assert [(p.text, p.place.line, p.headings) for p in passages(items)] == [
        ("Dossier", 1, ()),
        ("3.2.S.1.1 Nomenclature", 3, ("Dossier",)),
        ("one", 5, ("Dossier", "3.2.S.1.1 Nomenclature")),
        ("two", 6, ("Dossier", "3.2.S.1.1 Nomenclature")),
    ]
    assert passages(items)[2].place.section == "3.2.S.1.1"


@pytest.mark.parametrize(
    ("line", "section"),
    [
        # Section numbers of ICH M4 (granularity annex).
        ("3.2.S.1.1 Nomenclature", "3.2.S.1.1"),
        ("2.3.S.3 Characterisation (DX-101)", "2.3.S.3"),
        ("3.2.R Regional information", "3.2.R"),
        ("3.1 Impurities", "3.1"),
        ("2.5 mg of the substance were weighed", None),
        ("1.2 G was added.", None),
        ("3.2.S.1.1 is the section on nomenclature, see there.", None),
    ],
)
def test_numbered_headings_of_plain_text(line: str, section: str | None) -> None:
    items = read("a.txt", f"{line}\n\ntext\n".encode())
    assert passages(items)[-1].place.section == section


def test_a_heading_closes_those_below_it() -> None:
    data = b"3.2.S.1 General\n3.2.S.1.1 Nomenclature\na\n3.2.S.2 Manufacture\nb\n"
    found = passages(read("a.txt", data))
    assert found[-1].headings == ("3.2.S.2 Manufacture",)
    assert found[-1].place.section == "3.2.S.2"


def test_underlined_headings() -> None:
    found = passages(read("a.txt", b"Impurity B\n==========\n\ntext\n"))
    assert [(p.text, p.headings) for p in found] == [
        ("Impurity B", ()),
        ("text", ("Impurity B",)),
    ]


@pytest.mark.parametrize(
    ("source", "shown"),
    [
        ("(2*R*,3*S*)-**x**", "(2R,3S)-x"),
        ("2,2′-di-*tert*-butyl", "2,2′-di-tert-butyl"),
        ("*N*-methyl and *this is said* here", "N-methyl and this is said here"),
        ("`C[C@@H](N)C(=O)O`", "C[C@@H](N)C(=O)O"),
        ("C[C@@H](N)C(=O)O", "C[C@@H](N)C(=O)O"),
        ("F/C=C\\F", "F/C=C\\F"),
        ("*CC*", "*CC*"),
        ("C17H19NO3 C<sub>17</sub>H<sub>19</sub>", "C17H19NO3 C17H19"),
        ("a \\* b \\| c", "a * b | c"),
        ("3 * 4 * 5", "3 * 4 * 5"),
    ],
)
def test_marks_of_emphasis_are_taken_out_and_structures_left_alone(source: str, shown: str) -> None:
    assert unmarked(source) == shown


def test_plain_text_is_left_as_it_is() -> None:
    assert passages(read("a.txt", b"(2*R*)-**x**\n"))[0].text == "(2*R*)-**x**"


def test_pipe_tables() -> None:
    data = b"intro\n\n| Code | SMILES |\n|:--|--:|\n| A | `C\\|x` |\n| B | |\n\nend\n"
    items = read("a.md", data)
    (table,) = tables(items)
    assert texts(table) == [["Code", "SMILES"], ["A", "C|x"], ["B", ""]]
    assert [row[0].place.line for row in table.rows] == [3, 5, 6]
    assert [row[0].place.row for row in table.rows] == [1, 2, 3]
    assert [p.text for p in passages(items)] == ["intro", "end"]


def test_a_pipe_row_too_long_is_unread() -> None:
    items = read("a.md", b"| a | b |\n|---|---|\n| 1 | 2 | 3 |\n| 4 | 5 |\n")
    assert texts(tables(items)[0]) == [["a", "b"], ["4", "5"]]
    assert [(entry.reason, entry.place.line) for entry in unread(items)] == [("ragged-row", 3)]


def test_fenced_text_is_verbatim() -> None:
    found = passages(read("a.md", b"```\n# no heading\n**x**\n```\n"))
    assert [p.text for p in found] == ["# no heading", "**x**"]


def test_a_line_past_the_budget_is_unread_and_the_others_come() -> None:
    source = Source("a.txt", "", 0, "txt")
    items = list(text.read_text(source, "one\n" + "x" * 101 + "\nthree", Limits(line_chars=100)))
    assert [i.text for i in items if isinstance(i, Passage)] == ["one", "three"]
    assert [(entry.reason, entry.place.line) for entry in unread(items)] == [("line-too-long", 2)]


@pytest.mark.parametrize("end", ["\n", "\r\n", "\r"])
def test_line_ends_do_not_matter(end: str) -> None:
    data = "# A\n\none\n\n| a | b |\n|---|---|\n| 1 | 2 |\n".replace("\n", end)
    assert read("a.md", data.encode()) == read("a.md", data.replace(end, "\n").encode())


def test_nothing_but_blank_lines_is_empty() -> None:
    assert reasons(read("a.txt", b" \n\n\t\n")) == ["empty"]
