"""Pending changes from a Word document through the whole line."""

from __future__ import annotations

import pytest

from dossiercheck import pipeline, rulebook
from dossiercheck.model import Finding, Review
from dossiercheck.settings import Settings
from tests.unit.readers.reading import read
from tests.unit.readers.wordparts import paragraph, put_in, row, run, table, taken_out, with_body

SETTINGS = Settings()
BOOK = rulebook.load(SETTINGS)
RULE = "across-documents/pending-change"


def reviewed(body: str) -> Review:
    return pipeline.review_items(read("a.docx", with_body(body)), SETTINGS, BOOK)


def found(body: str) -> list[Finding]:
    return [one for one in reviewed(body).findings if one.rule == RULE]


@pytest.mark.parametrize(
    ("inner", "now", "before"),
    [
        (
            (run("DX-101 is (2"), taken_out("R"), put_in(run("S")), run(")-butan-2-ol.")),
            "(2S)-butan-2-ol",
            "(2R)-butan-2-ol",
        ),
        (
            (run("DX-101 is (2S)-butan-2-o"), taken_out("ne"), put_in(run("l")), run(".")),
            "(2S)-butan-2-ol",
            "(2S)-butan-2-one",
        ),
        (
            (run("Chemical name: (2S)-"), put_in(run("3-methyl")), run("butan-2-ol")),
            "(2S)-3-methylbutan-2-ol",
            "(2S)-butan-2-ol",
        ),
        (
            (run("DX-101 is "), put_in(run("(2S)-butan-2-ol")), run(".")),
            "(2S)-butan-2-ol",
            "nothing",
        ),
    ],
)
def test_a_change_inside_a_name_is_found(inner: tuple[str, ...], now: str, before: str) -> None:
    (finding,) = found(paragraph(*inner))
    assert finding.message == (
        f"With its pending change the text reads “{now}”; before it, “{before}”."
    )
    assert finding.exhibits[0].text == now
    assert finding.exhibits[0].place.paragraph == 1


@pytest.mark.parametrize(
    "inner",
    [
        (run("DX-101 is (2S)-butan-2-ol, "), taken_out("old"), put_in(run("a liquid")), run(".")),
        (put_in(run("The alcohol ")), run("(2S)-butan-2-ol.")),
        (taken_out("The alcohol "), run("(2S)-butan-2-ol.")),
    ],
)
def test_a_change_beside_a_name_is_none_of_it(inner: tuple[str, ...]) -> None:
    assert found(paragraph(*inner)) == []


def test_a_change_in_a_table_cell_is_found() -> None:
    changed = f"<w:tc>{paragraph(run('(2'), taken_out('R'), put_in(run('S')), run(')-butan-2-ol'))}</w:tc>"
    (finding,) = found(table(row("Code", "Chemical name"), row("DX-101", changed)))
    assert finding.exhibits[0].text == "(2S)-butan-2-ol"
    assert "(2R)-butan-2-ol" in finding.message


def test_what_is_compared_is_the_document_as_it_reads_now() -> None:
    changed = f"<w:tc>{paragraph(run('(2'), taken_out('R'), put_in(run('S')), run(')-butan-2-ol'))}</w:tc>"
    body = table(row("Code", "Chemical name", "SMILES"), row("DX-101", changed, "CC[C@H](C)O"))
    assert [one.rule for one in reviewed(body).findings] == [RULE]
