"""HL7 SPL: substance-indexing documents and the description of a label. The substances are
invented; the layout follows the FDA's "SPL Implementation Guide with Validation Procedures"."""

from __future__ import annotations

import base64

import pytest

from dossiercheck.model import Item
from tests.unit.readers.reading import passages, read, reasons, records, tables, texts, unread
from tests.unit.readers.test_gsrs import LACTIC, fields

NCIT = 'codeSystem="2.16.840.1.113883.3.26.1.1"'
KEY = "JVTAAEKCZFNVCJ-REOHCLBHSA-N"


def document(*sections: str) -> bytes:
    body = "".join(f"<component>{section}</component>" for section in sections)
    return (
        '<?xml version="1.0" encoding="UTF-8"?><?xml-stylesheet href="x.xsl"?>'
        '<document xmlns="urn:hl7-org:v3" xmlns:xsi="http://www.w3.org/2001/XMLSchema-instance">'
        f"<title>Invented</title><component><structuredBody>{body}</structuredBody></component>"
        "</document>"
    ).encode()


def structure(media: str, text: str, attributes: str = "") -> str:
    return (
        f'<subjectOf><characteristic><code code="C103240" {NCIT} displayName="Chemical Structure"/>'
        f'<value xsi:type="ED" mediaType="{media}" {attributes}>{text}</value>'
        "</characteristic></subjectOf>"
    )


def coded(heading: str, value: str) -> str:
    return (
        f'<subjectOf><characteristic><code code="C1" {NCIT} displayName="{heading}"/>'
        f'<value xsi:type="CV" code="C2" {NCIT} displayName="{value}"/></characteristic></subjectOf>'
    )


def molfile(text: str = LACTIC) -> str:
    return structure("application/x-mdl-molfile", f"<![CDATA[{text}]]>")


def substance(*inner: str, name: str = "Lavorin", code: str = "ZZ00000000") -> str:
    return (
        '<section><code code="48779-3" displayName="SPL indexing data elements section"/><subject>'
        f'<identifiedSubstance><id extension="{code}"/><identifiedSubstance><code code="{code}"/>'
        f"<name>{name}</name>{''.join(inner)}</identifiedSubstance></identifiedSubstance>"
        "</subject></section>"
    )


def moiety(*inner: str, name: str = "", code: str = "", amount: str = "") -> str:
    named = f"<name>{name}</name>" if name else ""
    part = f'<code code="{code}"/>{named}' if code else named
    quantity = f'<quantity><numerator value="{amount}" unit="1"/></quantity>' if amount else ""
    return f"<moiety>{quantity}<partMoiety>{part}</partMoiety>{''.join(inner)}</moiety>"


def description(text: str, title: str = "11 DESCRIPTION") -> str:
    return (
        '<section><code code="34089-3" codeSystem="2.16.840.1.113883.6.1" '
        f'displayName="DESCRIPTION SECTION"/><title>{title}</title><text>{text}</text></section>'
    )


def test_the_values_of_a_single_moiety_are_those_of_the_substance() -> None:
    inner = (
        molfile(),
        structure("application/x-inchi", " InChI=1S/C3H6O3/c1-2(4)3(5)6\n"),
        structure("application/x-inchi-key", KEY),
        structure("application/x-smiles", "<![CDATA[C[C@H](O)C(=O)O]]>"),
        coded("Stereochemistry Type", "Absolute"),
        coded("Optical Activity", "Dextrorotatory"),
    )
    items = read("a.xml", document(substance(moiety(*inner))))
    (record,) = records(items)
    assert unread(items) == []
    assert (record.title, record.molblock) == ("Lavorin", LACTIC)
    assert fields(record) == {
        "InChI": ["InChI=1S/C3H6O3/c1-2(4)3(5)6"],
        "InChIKey": [KEY],
        "SMILES": ["C[C@H](O)C(=O)O"],
        "Stereochemistry Type": ["Absolute"],
        "Optical Activity": ["Dextrorotatory"],
    }
    assert record.fields[1].place.path == (
        "/document/component/structuredBody/component/section/subject/identifiedSubstance"
        "/identifiedSubstance/moiety/subjectOf[3]/characteristic"
    )


@pytest.mark.parametrize(
    ("part", "titles"),
    [
        ({}, ["Lavorin"]),
        ({"code": "ZZ00000000", "name": "Lavorin"}, ["Lavorin"]),
        ({"code": "ZZ00000000", "amount": "2"}, ["Lavorin"]),
        ({"amount": "1"}, ["Lavorin"]),
        ({"amount": "2"}, ["Lavorin, moiety 1"]),
        ({"code": "YY00000000", "name": "Lavoric acid"}, ["Lavoric acid"]),
    ],
)
def test_whether_a_single_moiety_is_the_substance(part: dict[str, str], titles: list[str]) -> None:
    items = read("a.xml", document(substance(moiety(molfile(), **part))))
    assert [record.title for record in records(items)] == titles


def test_of_several_moieties_each_is_a_substance_of_its_own() -> None:
    two = [moiety(molfile(), name="Lavoric acid"), moiety(structure("application/x-smiles", "Cl"))]
    found = records(read("a.xml", document(substance(*two))))
    assert [record.title for record in found] == ["Lavoric acid", "Lavorin, moiety 2"]
    assert len({record.place.record for record in found}) == 2


@pytest.mark.parametrize("text", ["\n" + LACTIC, "\n\n   \n" + LACTIC, LACTIC.lstrip("\n")])
def test_indentation_around_a_connection_table_does_no_harm(text: str) -> None:
    (record,) = records(read("a.xml", document(substance(moiety(molfile(text))))))
    assert record.molblock.split("\n")[3:] == LACTIC.split("\n")[3:]


def test_a_structure_in_base_64() -> None:
    coded_ = base64.b64encode(LACTIC.encode()).decode()
    value = structure("application/x-mdl-molfile", coded_, 'representation="B64"')
    (record,) = records(read("a.xml", document(substance(moiety(value)))))
    assert record.molblock == LACTIC


@pytest.mark.parametrize(
    ("value", "reason"),
    [
        (molfile(LACTIC[:200]), "damaged-record"),
        (molfile(LACTIC.replace("\n", " ")), "damaged-record"),
        (structure("application/x-aa-seq", "AAA"), "structure-format"),
        (structure("", "CCO"), "structure-format"),
        (structure("application/x-smiles", "CCO", 'representation="B64"'), "encoding"),
        (structure("application/x-smiles", "CCO", 'compression="DF"'), "structure-format"),
        (structure("application/x-mdl-molfile", '<reference value="a.mol"/>'), "external-part"),
        ("", "no-structure"),
    ],
)
def test_what_cannot_be_read_is_listed(value: str, reason: str) -> None:
    items = read("a.xml", document(substance(moiety(value))))
    assert reasons(items) == [reason]
    assert records(items) == []


def label(text: str) -> list[Item]:
    return read("a.xml", document(description(text)))


def test_the_description_is_read_under_its_title() -> None:
    text = """<paragraph>Lavorin is
      <content styleCode="italics">(2S)</content>-2-hydroxypropanoic acid, C<sub>3</sub>H<sub>6</sub
      >O<sub>3</sub>.</paragraph><list><item>First</item><item>Second<br/>line</item></list>"""
    found = passages(label(text))
    assert [passage.text for passage in found] == [
        "Lavorin is (2S)-2-hydroxypropanoic acid, C3H6O3.",
        "First",
        "Second\nline",
    ]
    assert found[0].headings == ("11 DESCRIPTION",)
    assert [passage.place.paragraph for passage in found] == [1, 2, 3]
    assert str(found[2].place).endswith("section/text/list/item[2]")


def test_words_between_blocks_are_not_lost() -> None:
    found = passages(label("before<paragraph>inside</paragraph>after <sup>1</sup>"))
    assert [passage.text for passage in found] == ["before", "inside", "after 1"]


def test_sections_inside_the_description_come_under_both_titles() -> None:
    inner = "<section><title>Chemistry</title><text><paragraph>x</paragraph></text></section>"
    whole = description("<paragraph>a</paragraph>").replace(
        "</section>", f"<component>{inner}</component></section>"
    )
    items = read("a.xml", document(whole))
    assert reasons(items) == []
    assert [p.headings for p in passages(items)] == [
        ("11 DESCRIPTION",),
        ("11 DESCRIPTION", "Chemistry"),
    ]


def test_a_spanning_cell_is_repeated_where_it_reaches() -> None:
    rows = (
        '<tr><th colspan="2">Both</th><td>c</td></tr>'
        '<tr><td rowspan="2">a</td><td>b</td></tr><tr><td>d</td><td>e</td></tr>'
    )
    (table,) = tables(label(f"<table><caption>Table 1</caption><tbody>{rows}</tbody></table>"))
    assert texts(table) == [["Both", "Both", "c"], ["a", "b", ""], ["a", "d", "e"]]
    assert table.caption == "Table 1"


@pytest.mark.parametrize(
    ("text", "reason"),
    [
        ('<paragraph>x</paragraph><renderMultiMedia referencedObject="MM1"/>', "picture"),
        ('<paragraph>a<renderMultiMedia referencedObject="MM1"/></paragraph>', "picture"),
        ('<paragraph>(2R)<content revised="delete">(2S)</content></paragraph>', "tracked-change"),
        ('<paragraph>x</paragraph><paragraph revised="delete">y</paragraph>', "tracked-change"),
        ('<table><tr><td colspan="99999">x</td></tr></table>', ""),
        ("<table><tr>" + "<td>x</td>" * 600 + "</tr></table>", "size-budget"),
        (
            "<table>" + ("<tr>" + '<td colspan="200" rowspan="200">x</td>' * 2 + "</tr>") * 4000
            + "</table>",
            "size-budget",
        ),
    ],
)  # fmt: skip
def test_what_is_no_text_is_listed(text: str, reason: str) -> None:
    assert reasons(label(text)) == ([reason] if reason else [])


def test_words_deleted_in_a_revision_are_not_read() -> None:
    (found,) = passages(
        label('<paragraph>(2R)<content revised="delete">(2S)</content>-x</paragraph>')
    )
    assert found.text == "(2R)-x"


def test_a_footnote_stands_after_its_paragraph() -> None:
    found = passages(label("<paragraph>a<footnote>note</footnote>b</paragraph>"))
    assert [passage.text for passage in found] == ["ab", "note"]


def test_other_sections_are_counted_as_unread() -> None:
    other = '<section><code code="34067-9"/><text>Indications</text></section>'
    items = read("a.xml", document(description("x"), other, other))
    assert [p.text for p in passages(items)] == ["x"]
    (entry,) = unread(items)
    assert entry.reason == "section-not-read"
    assert entry.detail.startswith("2 sections")


def test_a_document_with_neither_is_unread() -> None:
    assert reasons(read("a.xml", document("<section/>"))) == ["no-substance"]
    assert reasons(read("a.xml", document(description("")))) == ["no-substance"]
