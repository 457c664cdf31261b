"""FHIR R5 `SubstanceDefinition` (HL7 FHIR R5, "Resource SubstanceDefinition") in both forms.

The substance is invented; `as_xml` writes the same resource in the XML form (HL7 FHIR R5,
section 2.1.6.1: the value of a primitive is an attribute, a resource an element of its name).
"""

from __future__ import annotations

import json
from collections.abc import Callable
from typing import Any
from xml.sax.saxutils import quoteattr

import pytest

from dossiercheck.model import Item, Record
from tests.unit.readers.reading import read, reasons, records, unread
from tests.unit.readers.test_gsrs import LACTIC, fields

Json = dict[str, Any]


def concept(code: str, display: str = "") -> Json:
    coding = {"system": "http://example.org/codes", "code": code}
    return {"coding": [{**coding, "display": display} if display else coding]}


WHOLE: Json = {
    "resourceType": "SubstanceDefinition",
    "id": "lavorin",
    "code": [{"code": {"coding": [{"system": "https://www.cas.org/", "code": "79-33-4"}]}}],
    "structure": {
        "stereochemistry": concept("200000", "Absolute"),
        "opticalActivity": concept("+"),
        "molecularFormula": "C3H6O3",
        "molecularWeight": {
            "type": concept("Average"),
            "amount": {"value": 90.080, "unit": "g/mol"},
        },
        "representation": [
            {"representation": LACTIC, "format": concept("MOLFILE")},
            {"representation": "C[C@H](O)C(=O)O", "format": concept("SMILES")},
            {
                "representation": "InChI=1S/C3H6O3/c1-2(4)3(5)6/h2,4H,1H3,(H,5,6)/t2-/m0/s1",
                "format": concept("InChI"),
            },
        ],
    },
    "name": [
        {"name": "(2S)-2-hydroxypropanoic acid", "type": concept("Systematic")},
        {"name": "Lavoplex", "type": concept("Brand")},
        {
            "name": "Lavorin",
            "type": concept("INN"),
            "preferred": True,
            "language": [concept("la")],
            "translation": [{"name": "lavorine", "language": [concept("fr")]}],
        },
        {
            "name": "Acide (2S)-2-hydroxypropanoïque",
            "type": concept("Systematic"),
            "language": [concept("fr-CH")],
        },
    ],
    "moiety": [{"name": "Lavoric acid", "molecularFormula": "C3H6O3"}, {"name": "Nothing said"}],
}


def as_json(resource: Json) -> tuple[str, bytes]:
    return "a.json", json.dumps(resource, ensure_ascii=False).encode()


def as_xml(resource: Json) -> tuple[str, bytes]:
    text = _element(resource["resourceType"], resource)
    return "a.xml", text.replace(">", ' xmlns="http://hl7.org/fhir">', 1).encode()


def _element(name: str, value: Any) -> str:
    if not isinstance(value, dict):
        text = str(value).lower() if isinstance(value, bool) else str(value)
        return f"<{name} value={quoteattr(text, {chr(10): '&#10;'})}/>"
    inner = "".join(
        _element(key, one)
        for key, kid in value.items()
        if key != "resourceType"
        for one in (kid if isinstance(kid, list) else [kid])
    )
    kind = value.get("resourceType", name)
    return (
        f"<{name}>{inner}</{name}>" if kind == name else f"<{name}>{_element(kind, value)}</{name}>"
    )


Form = Callable[[Json], tuple[str, bytes]]
both = pytest.mark.parametrize("form", [as_json, as_xml])


def substance(items: list[Item]) -> Record:
    return records(items)[0]


def with_structure(**changes: object) -> Json:
    return {**WHOLE, "structure": {**WHOLE["structure"], **changes}}


@both
def test_every_value_stands_under_its_heading(form: Form) -> None:
    record = substance(read(*form(WHOLE)))
    assert record.title == "Lavorin"
    assert record.molblock == LACTIC
    assert fields(record) == {
        "systematic name": ["(2S)-2-hydroxypropanoic acid"],
        "brand name": ["Lavoplex"],
        "name of another type": ["Lavorin", "lavorine"],
        "SMILES": ["C[C@H](O)C(=O)O"],
        "InChI": ["InChI=1S/C3H6O3/c1-2(4)3(5)6/h2,4H,1H3,(H,5,6)/t2-/m0/s1"],
        "molecular formula": ["C3H6O3"],
        "molecular weight": ["90.08"],
        "stereochemistry": ["Absolute"],
        "optical activity": ["+"],
        "CAS registry number": ["79-33-4"],
    }


def test_a_value_is_found_again_by_its_path() -> None:
    for form, expected in (
        (as_json, "$.structure.representation[1].representation"),
        (as_xml, "/SubstanceDefinition/structure/representation[2]/representation"),
    ):
        record = substance(read(*form(WHOLE)))
        (smiles,) = [field for field in record.fields if field.name == "SMILES"]
        assert smiles.place.path == expected


@both
def test_a_systematic_name_in_another_language_is_unread(form: Form) -> None:
    (entry,) = unread(read(*form(WHOLE)))
    assert (entry.reason, entry.text) == ("name-language", "Acide (2S)-2-hydroxypropanoïque")


@both
def test_a_moiety_is_a_substance_of_its_own(form: Form) -> None:
    _, part = records(read(*form(WHOLE)))
    assert (part.title, part.molblock, part.place.record) == ("Lavoric acid", "", 2)
    assert fields(part) == {"molecular formula": ["C3H6O3"]}


@both
def test_resources_in_a_bundle_and_inside_others(form: Form) -> None:
    other = {"resourceType": "Ingredient", "contained": [WHOLE]}
    entries = [{"resource": one} for one in (WHOLE, other, {"resourceType": "Ingredient"})]
    items = read(*form({"resourceType": "Bundle", "entry": entries}))
    found = [record for record in records(items) if record.title == "Lavorin"]
    assert [record.place.record for record in found] == [1, 3]
    assert len({record.place.path for record in found}) == 2
    (entry,) = [entry for entry in unread(items) if entry.reason == "no-reader"]
    assert entry.detail == "2 FHIR resources of the type Ingredient are not read."


@both
@pytest.mark.parametrize(
    ("resource", "reason"),
    [
        ({"resourceType": "Bundle"}, "empty"),
        ({"resourceType": "Bundle", "entry": []}, "empty"),
        ({"resourceType": "SubstanceSpecification"}, "no-reader"),
        ({"resourceType": "SubstanceDefinition"}, "no-substance"),
        ({**WHOLE, "modifierExtension": [{"url": "http://example.org/not"}]}, "modifier-extension"),
        (with_structure(modifierExtension=[{"url": "http://example.org/not"}]), "modifier-extension"),
        (with_structure(representation=[{"representation": "CCO"}]), "structure-format"),
        (with_structure(representation=[{"representation": "x", "format": concept("CDX")}]), "structure-format"),
        (
            with_structure(
                representation=[
                    {"representation": "CCO", "format": {"coding": [{"code": "SMILES"}, {"code": "InChI"}]}}
                ]
            ),
            "structure-format",
        ),
        (
            with_structure(
                representation=[{"format": concept("SMILES"), "document": {"reference": "DocumentReference/1"}}]
            ),
            "external-part",
        ),
        (
            with_structure(representation=[{"representation": LACTIC[:300], "format": concept("MOLFILE")}]),
            "damaged-record",
        ),
        (
            with_structure(
                representation=[{"representation": LACTIC.replace("\n", "\\n"), "format": concept("MOLFILE")}]
            ),
            "damaged-record",
        ),
        (with_structure(molecularWeight={"amount": {"value": 0.09, "unit": "kg/mol"}}), "other-mass"),
        (with_structure(molecularWeight={"type": concept("Exact"), "amount": {"value": 90.0317}}), "other-mass"),
        (with_structure(molecularWeight={"amount": {"value": 90, "comparator": "<"}}), "other-mass"),
    ],
)  # fmt: skip
def test_what_cannot_be_read_is_listed(form: Form, resource: Json, reason: str) -> None:
    assert reason in reasons(read(*form(resource)))


def test_a_connection_table_whose_line_ends_an_attribute_swallowed_is_unread() -> None:
    name, data = as_xml(WHOLE)
    items = read(name, data.replace(b"&#10;", b"\n"))
    assert "damaged-record" in reasons(items)
    assert substance(items).molblock == ""


def test_an_array_inside_an_array_is_unread() -> None:
    items = read("a.json", b'{"resourceType": "SubstanceDefinition", "name": [[{"name": "x"}]]}')
    assert reasons(items) == ["unexpected-value"]


def test_a_document_type_declaration_with_entities_is_refused() -> None:
    data = as_xml(WHOLE)[1].decode()
    assert reasons(read("a.xml", f"<!DOCTYPE x [<!ENTITY a 'b'>]>{data}".encode())) == ["entities"]


def test_codes_are_read_whatever_they_are_written_in() -> None:
    for given in ({"text": "Racemic"}, concept("RACEMIC"), concept("77", "racemic")):
        record = substance(read(*as_json(with_structure(stereochemistry=given))))
        assert [text.lower() for text in fields(record)["stereochemistry"]] == ["racemic"]


@pytest.mark.parametrize("count", [2000])
def test_a_long_bundle_is_walked_once(count: int) -> None:
    entries = [
        {"resource": {"resourceType": "SubstanceDefinition", "name": [{"name": "x"}]}}
    ] * count
    for form in (as_json, as_xml):
        items = read(*form({"resourceType": "Bundle", "entry": entries}))
        assert len(records(items)) == count
