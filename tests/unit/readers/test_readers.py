"""Which reader answers for which file."""

from __future__ import annotations

import pytest

from dossiercheck import readers
from dossiercheck.readers import reader_for
from dossiercheck.readers.grid import column_index, column_letter


@pytest.mark.parametrize(
    ("name", "module"),
    [
        ("m3/32s1/structure.SDF", "molfile"),
        ("a.mol", "molfile"),
        ("a.csv", "delimited"),
        ("a.tsv", "delimited"),
        ("a.xlsx", "workbook"),
        ("a.md", "text"),
        ("a.docx", "word"),
    ],
)
def test_by_suffix(name: str, module: str) -> None:
    reader = reader_for(name)
    assert reader is not None
    assert reader.__module__ == f"dossiercheck.readers.{module}"


@pytest.mark.parametrize("name", ["a.xyz", "csv", "a.sdf/readme", "a.", ".csv.bak"])
def test_nobody_answers(name: str) -> None:
    assert reader_for(name) is None


def test_a_reader_from_elsewhere_is_found(monkeypatch: pytest.MonkeyPatch) -> None:
    from importlib.metadata import EntryPoint

    entry = EntryPoint("more", "tests.unit.readers.elsewhere:read", readers.GROUP)
    monkeypatch.setattr(readers, "entry_points", lambda group: [entry])
    readers._by_suffix.cache_clear()
    try:
        reader = reader_for("a.fancy")
        assert reader is not None
        assert reader.__module__ == "tests.unit.readers.elsewhere"
        assert reader_for("a.csv") is not None
    finally:
        readers._by_suffix.cache_clear()


@pytest.mark.parametrize(("index", "letters"), [(0, "A"), (25, "Z"), (26, "AA"), (16383, "XFD")])
def test_column_letters(index: int, letters: str) -> None:
    assert column_letter(index) == letters
    assert column_index(letters) == index
