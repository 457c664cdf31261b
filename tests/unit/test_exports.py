"""Structured exports through the whole line: one invented substance in three formats, as it
should be and with one thing wrong."""

from __future__ import annotations

import json
from typing import Any

import pytest

from dossiercheck import pipeline, rulebook
from dossiercheck.model import Item, Review
from dossiercheck.settings import Settings
from tests.unit.readers.reading import read
from tests.unit.readers.test_fhir import as_json, as_xml, concept
from tests.unit.readers.test_spl import coded, document, moiety, molfile, structure, substance
from tests.unit.stereo.forms import v2000

SMILES = "C[C@@H](O)[C@H](N)C(=O)O"
MIRROR = "C[C@H](O)[C@@H](N)C(=O)O"
NAME = "(2S,3R)-2-amino-3-hydroxybutanoic acid"
SAID = {
    "name": NAME,
    "smiles": SMILES,
    "drawn": SMILES,
    "formula": "C4H9NO3",
    "mass": "119.12",
    "stereo": "ABSOLUTE",
    "rotation": "( - )",
}
Said = dict[str, str]


def gsrs(said: Said) -> tuple[str, bytes]:
    record: dict[str, Any] = {
        "substanceClass": "chemical",
        "names": [
            {"name": said["label"], "type": "of", "displayName": True},
            {"name": said["name"].upper(), "type": "sys", "languages": ["en"]},
            {"name": "(2R,3S)-2-amino-3-hydroxybutanoic acid", "type": "cn"},
        ],
        "codes": [{"codeSystem": "CAS", "code": "72-19-5", "type": "PRIMARY"}],
        "structure": {
            "molfile": v2000(said["drawn"]),
            "smiles": said["smiles"],
            "formula": said["formula"],
            "mwt": said["mass"],
            "stereochemistry": said["stereo"],
            "opticalActivity": said["rotation"],
            "stereoCenters": "2",
        },
    }
    return "export.jsonl", json.dumps(record).encode()


def fhir(said: Said) -> dict[str, Any]:
    return {
        "resourceType": "SubstanceDefinition",
        "name": [
            {"name": said["name"], "type": concept("Systematic")},
            {"name": said["label"], "type": concept("INN"), "preferred": True},
        ],
        "structure": {
            "stereochemistry": concept(said["stereo"]),
            "opticalActivity": concept(said["rotation"]),
            "molecularFormula": said["formula"],
            "molecularWeight": {"amount": {"value": said["mass"], "unit": "g/mol"}},
            "representation": [
                {"representation": v2000(said["drawn"]), "format": concept("MOLFILE")},
                {"representation": said["smiles"], "format": concept("SMILES")},
            ],
        },
    }


def spl(said: Said) -> tuple[str, bytes]:
    named = f"<asNamedEntity><code displayName='Systematic name'/><name>{said['name']}</name></asNamedEntity>"
    inner = (
        molfile(v2000(said["drawn"])),
        structure("application/x-smiles", said["smiles"]),
        coded("Molecular Formula", said["formula"]),
        coded("Molecular Weight", said["mass"]),
        coded("Stereochemistry Type", said["stereo"]),
        coded("Optical Activity", said["rotation"]),
    )
    return "index.xml", document(substance(named, moiety(*inner), name=said["label"]))


FORMS = {
    "record": gsrs,
    "FHIR JSON": lambda said: as_json(fhir(said)),
    "FHIR XML": lambda said: as_xml(fhir(said)),
    "SPL": spl,
}


CHANGES: dict[str, tuple[dict[str, str], set[str], list[str]]] = {
    "sound": ({}, set(), []),
    "drawing": (
        {"drawn": MIRROR},
        {"name-and-drawing/mirror-image", "identity/notation-differs"},
        [],
    ),
    "smiles": ({"smiles": MIRROR}, {"identity/notation-differs"}, []),
    "name": (
        {"name": "(2S,3S)-2-amino-3-hydroxybutanoic acid"},
        {"name-and-drawing/configuration-differs"},
        [],
    ),
    "formula": ({"formula": "C4H9NO2"}, {"identity/formula-differs"}, []),
    "mass": ({"mass": "119.21"}, {"identity/mass-differs"}, []),
    "achiral": ({"stereo": "ACHIRAL"}, {"statement/kind-differs"}, []),
    "mixed": ({"stereo": "MIXED"}, {"statement/kind-differs"}, []),
    "racemic": ({"stereo": "RACEMIC"}, {"statement/racemate-not-marked"}, []),
    "rotation": ({"rotation": "( + / - )"}, {"statement/racemate-not-marked"}, []),
    "unknown": ({"stereo": "UNKNOWN"}, set(), ["statement-not-understood"]),
}


@pytest.fixture(scope="module")
def review() -> Review:
    items: list[Item] = []
    for form, write in FORMS.items():
        for title, (changes, _, _) in CHANGES.items():
            name, data = write({**SAID, **changes, "label": f"{form} {title}"})
            items += read(f"{form}/{title}/{name}", data)
    settings = Settings()
    return pipeline.review_items(items, settings, rulebook.load(settings))


@pytest.mark.parametrize("title", CHANGES)
@pytest.mark.parametrize("form", FORMS)
def test_what_is_wrong_and_nothing_else_is_found(form: str, title: str, review: Review) -> None:
    _, rules, reasons = CHANGES[title]
    folder = f"{form}/{title}/"
    found = [f for f in review.findings if f.exhibits[0].place.source.startswith(folder)]
    assert {finding.rule for finding in found} == rules, [f.message for f in found]
    unread = [entry for entry in review.unread if entry.place.source.startswith(folder)]
    assert [entry.reason for entry in unread] == reasons


@pytest.mark.parametrize("form", FORMS)
def test_every_kind_of_evidence_comes_through(form: str, review: Review) -> None:
    (one,) = [s for s in review.substances if s.label == f"{form} sound"]
    roles = {said.role.name for said in one.evidence}
    assert roles >= {"MOLFILE", "NAME", "SMILES", "FORMULA", "MASS", "STEREO"}
