"""Substance records of the registration system. The substances are invented or simple acids;
the shape follows the public records (US FDA / NCATS)."""

from __future__ import annotations

import json
import os
from pathlib import Path
from typing import Any

import pytest

from dossiercheck.language.roles import Aside, meaning_of
from dossiercheck.model import Record, Role
from dossiercheck.readers import entry
from tests.unit.readers.reading import read, reasons, records, unread

LACTIC = """
  made by hand

  6  5  0  0  1  0            999 V2000
    0.0000    0.0000    0.0000 C   0  0
    1.2990    0.7500    0.0000 C   0  0
    2.5981    0.0000    0.0000 C   0  0
    3.8971    0.7500    0.0000 O   0  0
    2.5981   -1.5000    0.0000 O   0  0
    1.2990    2.2500    0.0000 O   0  0
  2  1  1  0
  2  3  1  0
  3  4  1  0
  3  5  2  0
  2  6  1  1
M  END
"""

WHOLE: dict[str, Any] = {
    "substanceClass": "chemical",
    "uuid": "0000",
    "approvalID": "ZZ00000000",
    "names": [
        {"name": "ZZ-17", "type": "cd", "languages": ["en"]},
        {"name": "2-HYDROXYPROPANOIC ACID, (2S)-", "type": "sys", "languages": ["en"]},
        {"name": "acide (2S)-2-hydroxypropanoïque", "type": "sys", "languages": ["fr"]},
        {"name": "Lavorin", "type": "of", "languages": ["la"]},
        {"name": "LAVORINE", "type": "of", "displayName": True},
        {"name": "Lavoplex", "type": "bn"},
    ],
    "codes": [
        {"codeSystem": "CAS", "code": "79-33-4", "type": "PRIMARY"},
        {"codeSystem": "CAS", "code": "50-21-5", "type": "SUPERSEDED"},
        {"codeSystem": "ELSEWHERE", "code": "1", "type": "PRIMARY"},
    ],
    "structure": {
        "molfile": LACTIC,
        "smiles": "C[C@H](O)C(=O)O",
        "formula": "C3H6O3",
        "mwt": 90.080,
        "stereochemistry": "ABSOLUTE",
        "opticalActivity": "( + )",
        "stereoCenters": 1,
    },
    "moieties": [{"formula": "C3H6O3", "countAmount": {"average": 1}}],
}


def one(value: object) -> Record:
    (record,) = records(read("a.json", json.dumps(value).encode()))
    return record


def changed(**changes: object) -> dict[str, Any]:
    return {**WHOLE, **changes}


def fields(record: Record) -> dict[str, list[str]]:
    found: dict[str, list[str]] = {}
    for field in record.fields:
        found.setdefault(field.name, []).append(field.value)
    return found


def test_every_value_stands_under_its_heading() -> None:
    record = one(WHOLE)
    assert record.title == "LAVORINE"
    assert record.molblock == LACTIC
    assert fields(record) == {
        "molecular formula": ["C3H6O3"],
        "SMILES": ["C[C@H](O)C(=O)O"],
        "molecular weight": ["90.08"],
        "stereochemistry": ["ABSOLUTE"],
        "optical activity": ["( + )"],
        "number of stereocentres": ["1"],
        "code name": ["ZZ-17"],
        "systematic name": ["2-HYDROXYPROPANOIC ACID, (2S)-"],
        "official name": ["Lavorin", "LAVORINE"],
        "brand name": ["Lavoplex"],
        "CAS registry number": ["79-33-4"],
        "CAS number, superseded": ["50-21-5"],
        "moiety formula": ["C3H6O3"],
    }


def test_a_weight_keeps_the_decimals_that_are_printed() -> None:
    text = json.dumps(WHOLE).replace("90.08", "90.080")
    (record,) = records(read("a.json", text.encode()))
    assert fields(record)["molecular weight"] == ["90.080"]


def test_a_value_is_found_again_by_its_path() -> None:
    where = {field.value: field.place for field in one(WHOLE).fields}
    assert where["2-HYDROXYPROPANOIC ACID, (2S)-"].path == "$.names[1].name"
    assert where["C[C@H](O)C(=O)O"].path == "$.structure.smiles"
    assert where["79-33-4"].path == "$.codes[0].code"
    assert str(where["79-33-4"]) == "record 1, field CAS registry number, at $.codes[0].code"


def test_a_systematic_name_in_another_language_is_unread() -> None:
    (found,) = unread(read("a.json", json.dumps(WHOLE).encode()))
    assert (found.reason, found.text) == ("name-language", "acide (2S)-2-hydroxypropanoïque")
    assert found.place.path == "$.names[2].name"


@pytest.mark.parametrize(
    ("names", "title"),
    [
        ([{"name": "B", "type": "cn"}, {"name": "A", "type": "of"}], "A"),
        ([{"name": "B", "type": "cn"}], "B"),
        ([], "ZZ00000000"),
        (None, "ZZ00000000"),
    ],
)
def test_what_the_record_is_called(names: object, title: str) -> None:
    assert one(changed(names=names)).title == title


def test_the_slimmed_record_says_the_same() -> None:
    slim = {
        "unii": "ZZ00000000",
        **WHOLE["structure"],
        "mass": "90.08",
        "names": WHOLE["names"],
        "cas": ["79-33-4", "50-21-5"],
        "cas_primary": ["79-33-4"],
    }
    del slim["mwt"]
    found = one(slim)
    assert found.molblock == LACTIC
    assert fields(found)["molecular weight"] == ["90.08"]
    assert fields(found)["CAS registry number"] == ["79-33-4"]


def test_records_of_a_list_of_lines_are_counted() -> None:
    items = read("a.jsonl", f"{json.dumps(WHOLE)}\n\n\t\t{json.dumps(WHOLE)}\n".encode())
    assert [(r.place.record, r.place.line) for r in records(items)] == [(1, 1), (2, 3)]


@pytest.mark.parametrize(
    ("printed", "kept", "span"),
    [
        ("C7H5NaO3.Na.C7H5O3", "C7H5NaO3", (0, 8)),
        ("C14H10CaO6.Ca.C7H5O3.C7H5O3", "C14H10CaO6", (0, 10)),
        ("C2H3O2.Na.3H2O", "C2H3O2.Na.3H2O", None),
        ("C4H4O4.C4H4O4", "C4H4O4.C4H4O4", None),
        ("C7H6O3.C7H6O3.H2O", "C7H6O3.C7H6O3.H2O", None),
        ("C3H6O3", "C3H6O3", None),
        ("see label.x.y", "see label.x.y", None),
    ],
)
def test_a_total_before_its_parts_is_the_formula(
    printed: str, kept: str, span: tuple[int, int] | None
) -> None:
    record = one(changed(structure={**WHOLE["structure"], "formula": printed}))
    (found,) = [field for field in record.fields if field.name == "molecular formula"]
    assert (found.value, found.place.span) == (kept, span)


def test_a_moiety_with_a_structure_is_a_record_of_its_own() -> None:
    value = changed(moieties=[{"molfile": LACTIC, "formula": "C3H6O3"}, {"formula": "H2O"}])
    whole, part = records(read("a.json", json.dumps(value).encode()))
    assert (whole.title, part.title) == ("LAVORINE", "LAVORINE, moiety 1")
    assert part.molblock == LACTIC
    assert (part.place.record, part.place.path) == (2, "$.moieties[0]")
    assert fields(whole)["moiety formula"] == ["H2O"]


@pytest.mark.parametrize(
    ("change", "reason"),
    [
        ({"structure": {**WHOLE["structure"], "molfile": LACTIC.replace("M  END", "")}}, "damaged-record"),
        ({"structure": {**WHOLE["structure"], "molfile": LACTIC.replace("  6  5", "  7  5")}}, "damaged-record"),
        ({"structure": {**WHOLE["structure"], "molfile": LACTIC.replace("\n", " ")}}, "damaged-record"),
        ({"structure": {**WHOLE["structure"], "molfile": 7.5}}, "damaged-record"),
        ({"structure": {**WHOLE["structure"], "smiles": ["C", "N"]}}, "unexpected-value"),
        ({"structure": {**WHOLE["structure"], "formula": {"a": 1}}}, "unexpected-value"),
        ({"names": ["LAVORINE"]}, "unexpected-value"),
        ({"names": {"name": "LAVORINE"}}, "unexpected-value"),
        ({"names": [{"name": True, "type": "sys"}]}, "unexpected-value"),
        ({"codes": "79-33-4"}, "unexpected-value"),
        ({"moieties": [None]}, "unexpected-value"),
        ({"structure": None}, "no-structure"),
        ({"substanceClass": "protein"}, "substance-class"),
        ({"substanceClass": ["chemical"]}, "substance-class"),
    ],
)  # fmt: skip
def test_what_cannot_be_read_is_listed(change: dict[str, object], reason: str) -> None:
    found = reasons(read("a.json", json.dumps(changed(**change)).encode()))
    assert reason in found


@pytest.mark.parametrize("drop", [1, 2, 3])
def test_a_header_that_an_export_trimmed_is_filled_up(drop: int) -> None:
    short = "\n".join(LACTIC.split("\n")[drop:])
    record = one(changed(structure={**WHOLE["structure"], "molfile": short}))
    assert record.molblock.split("\n")[3:] == LACTIC.split("\n")[3:]


def test_blank_lines_before_the_header_are_taken_off() -> None:
    record = one(changed(structure={**WHOLE["structure"], "molfile": "\r\n\n" + LACTIC}))
    assert record.molblock == LACTIC


_HERE = Path(__file__).resolve().parents[3]
_EXTERNAL = Path(os.environ.get("DOSSIERCHECK_EXTERNAL", _HERE.parent / "shared" / "external"))
PUBLIC = _EXTERNAL / "gsrs_open" / "substances.jsonl"


@pytest.mark.skipif(not PUBLIC.is_file(), reason="the public substance records are not here")
def test_all_public_records_are_read() -> None:
    items = read("substances.jsonl", PUBLIC.read_bytes())
    assert reasons(items) == []
    assert len(records(items)) == 780
    assert all(record.molblock for record in records(items))


@pytest.mark.parametrize(
    "heading",
    [entry.OTHER_NAME, "official name", "brand name", "code name", "scientific name",
     "moiety formula", "CAS number, superseded"],
)  # fmt: skip
def test_what_is_no_evidence_stands_under_headings_that_are_none(heading: str) -> None:
    assert meaning_of(heading) is None


@pytest.mark.parametrize(
    ("heading", "meaning"),
    [
        (entry.NAME, Role.NAME),
        (entry.SMILES, Role.SMILES),
        (entry.INCHI, Role.INCHI),
        (entry.INCHIKEY, Role.INCHIKEY),
        (entry.FORMULA, Role.FORMULA),
        (entry.MASS, Role.MASS),
        (entry.REGISTRY, Role.REGISTRY),
        (entry.STEREO, Role.STEREO),
        (entry.ROTATION, Role.STEREO),
        (entry.MOLFILE, Role.MOLFILE),
        (entry.CENTRES, Aside.COUNT),
    ],
)
def test_headings_mean_what_they_are_chosen_for(heading: str, meaning: object) -> None:
    assert meaning_of(heading) is meaning
