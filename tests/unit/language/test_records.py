from __future__ import annotations

from dossiercheck.model import Field, Place, Record
from tests.unit.language.gathering import evidence, not_read

MOL = "x\n\n\n  1  0  0  0  0  0            999 V2000\nM  END\n"


def record(title: str, *fields: tuple[str, str], molblock: str = MOL) -> Record:
    place = Place("a.sdf", record=3)
    made = tuple(Field(name, value, Place("a.sdf", record=3, field=name)) for name, value in fields)
    return Record(title, molblock, made, place)


def test_the_drawing_and_its_fields_are_one_group() -> None:
    item = record("DX-101", ("IUPAC name", "(2S)-butan-2-ol"), ("MW", "74.12"), ("Lot", "7"))
    found = evidence([item])
    assert [(one.role.name, one.text) for one in found] == [
        ("MOLFILE", MOL),
        ("NAME", "(2S)-butan-2-ol"),
        ("MASS", "74.12"),
    ]
    assert {one.group for one in found} == {"a.sdf#record3"}
    assert {one.label for one in found} == {"DX-101"}
    assert found[1].place.field == "IUPAC name"


def test_a_label_field_goes_before_the_title() -> None:
    assert evidence([record("untitled", ("Compound", "DX-101"))])[0].label == "DX-101"
    assert evidence([record("untitled", ("Compound", "n/a"))])[0].label == "untitled"


def test_values_that_say_themselves() -> None:
    key = "BTANRVKWQNVYAZ-BYPYZUCNSA-N"
    found = evidence([record("", ("hash", key))])
    assert [one.role.name for one in found] == ["MOLFILE", "INCHIKEY"]
    assert [one.role.name for one in evidence([record("", ("hash", key))], {"hash": "ignore"})] == [
        "MOLFILE"
    ]


def test_a_field_of_several_lines_is_not_joined() -> None:
    item = record("", ("IUPAC name", "(2S)-2-amino-3-\nphenylpropanoic acid"))
    assert [one.role.name for one in evidence([item])] == ["MOLFILE"]
    (entry,) = not_read([item])
    assert (entry.reason, entry.place.field) == ("several-lines", "IUPAC name")


def test_a_record_without_a_structure_still_speaks() -> None:
    found = evidence([record("A", ("SMILES", "CCO"), molblock="")])
    assert [one.role.name for one in found] == ["SMILES"]


def test_a_second_connection_table_in_a_field() -> None:
    found = evidence([record("A", ("Molfile", MOL))])
    assert [(one.role.name, one.text) for one in found] == [("MOLFILE", MOL)] * 2
