"""Evidence to meaning, or the reason why there is none."""

from __future__ import annotations

from collections.abc import Iterator

import pytest

from dossiercheck import interpretation
from dossiercheck.interpretation import Reading, interpret, printed_number
from dossiercheck.model import Evidence, Kind, Place, Role
from dossiercheck.names.parser import NameParser
from tests.unit.stereo.forms import descriptors, in_space, v2000

ALANINE = "C[C@H](N)C(=O)O"


@pytest.fixture(scope="module")
def parser() -> Iterator[NameParser]:
    with NameParser() as running:
        yield running


def say(role: Role, text: str) -> Evidence:
    return Evidence("e1", role, text, Place("a.txt", line=1))


def read(role: Role, text: str, parser: NameParser) -> Reading:
    (reading,) = interpret([say(role, text)], parser)
    return reading


@pytest.mark.parametrize(
    ("text", "number"),
    [
        ("119.12", (119.12, 2)),
        ("119,12", (119.12, 2)),
        ("119", (119.0, 0)),
        ("119.120", (119.12, 3)),
        ("119.12 g/mol", (119.12, 2)),
        ("Mr = 119.12", (119.12, 2)),
        ("1 234.5", (1234.5, 1)),
        ("1\u00a0234.5", (1234.5, 1)),
        ("1\u2009234,5 Da", (1234.5, 1)),
        ("", None),
        ("n/a", None),
        ("119.12 (base), 155.58 (salt)", None),
        ("119.12–119.14", None),
        ("1.234.567", None),
        # Thousands by comma, as English documents print them; "12,345" may be either.
        ("1,234.56", (1234.56, 2)),
        ("1,234", (1234.0, 0)),
        ("180,159", (180.159, 3)),
        ("12,345", None),
        ("CAS 72-19-5", None),
    ],
)
def test_printed_number(text: str, number: tuple[float, int] | None) -> None:
    assert printed_number(text) == number


@pytest.mark.parametrize(
    ("role", "text", "kind"),
    [
        (Role.MOLFILE, v2000(ALANINE), Kind.DRAWING),
        (Role.MOLFILE, in_space(ALANINE), Kind.COORDINATES),
        (Role.SMILES, f" {ALANINE} ", Kind.NOTATION),
        (Role.INCHI, "InChI=1S/C3H7NO2/c1-2(4)3(5)6/h2H,4H2,1H3,(H,5,6)/t2-/m0/s1", Kind.NOTATION),
        (Role.NAME, "(2S)-2-aminopropanoic acid", Kind.NAME),
    ],
)
def test_a_structure_by_any_form(role: Role, text: str, kind: Kind, parser: NameParser) -> None:
    reading = read(role, text, parser)
    assert reading.refusal == ""
    assert reading.unread is None
    assert reading.structure is not None
    assert reading.kind is kind
    assert [letter[-1] for letter in descriptors(reading.structure)] == ["S"]


@pytest.mark.parametrize(
    ("role", "text", "reason"),
    [
        (Role.MOLFILE, "no molfile", "structure-not-readable"),
        (Role.SMILES, "C(C", "structure-not-readable"),
        (Role.INCHI, "InChI=", "structure-not-readable"),
        (Role.INCHIKEY, "not a key", "malformed"),
        (Role.FORMULA, "see table", "malformed"),
        (Role.MASS, "about 120 to 130", "malformed"),
        (Role.STEREO, "This is not a racemate.", "statement-not-understood"),
        (Role.NAME, "(2S)-2-aminopropanoik acid", "name-not-interpretable"),
        (Role.NAME, "etha\0nol", "name-not-interpretable"),
        (Role.NAME, "", "name-not-interpretable"),
    ],
)
def test_a_refusal_says_why_and_where(
    role: Role, text: str, reason: str, parser: NameParser
) -> None:
    reading = read(role, text, parser)
    assert reading.structure is None
    unread = reading.unread
    assert unread is not None
    assert unread.reason == reason
    assert len(unread.detail) > 10
    assert unread.place == Place("a.txt", line=1)
    assert unread.text == ("" if role is Role.MOLFILE else text)


def test_answers_come_in_the_order_of_the_questions(parser: NameParser) -> None:
    said = [
        say(Role.NAME, "ethanol"),
        say(Role.SMILES, "C"),
        say(Role.NAME, "no name at all"),
        say(Role.MASS, "46.07"),
        say(Role.NAME, "propan-1-ol"),
    ]
    readings = interpret(said, parser)
    assert [reading.evidence for reading in readings] == said
    assert [r.structure.smiles if r.structure else None for r in readings] == [
        "CCO",
        "C",
        None,
        None,
        "CCCO",
    ]


def test_a_racemate_by_name_is_a_group_of_all_its_centres(parser: NameParser) -> None:
    reading = read(Role.NAME, "rac-(2S,3R)-2-amino-3-hydroxybutanoic acid", parser)
    assert reading.structure is not None
    assert reading.structure.kind == "racemic"
    reading = read(Role.NAME, "rel-(2S,3R)-2-amino-3-hydroxybutanoic acid", parser)
    assert reading.structure is not None
    assert reading.structure.kind == "relative"


def test_one_place_that_breaks_the_program_is_unread_and_the_others_go_on(
    parser: NameParser, monkeypatch: pytest.MonkeyPatch
) -> None:
    def broken(text: str) -> None:
        raise IndexError(f"no such atom in {text}")

    monkeypatch.setattr(interpretation, "from_inchi", broken)
    first, second = interpret([say(Role.INCHI, "InChI=1S/CH4/h1H4"), say(Role.SMILES, "C")], parser)
    assert first.unread is not None
    assert first.unread.reason == "reading-failed"
    assert "IndexError" in first.unread.detail
    assert second.structure is not None
