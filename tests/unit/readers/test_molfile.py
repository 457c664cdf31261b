"""Structure files. Layouts follow the published CTfile formats description (MDL/BIOVIA)."""

from __future__ import annotations

import io
import random

import pytest
from rdkit import Chem
from rdkit.Chem import AllChem

from tests.unit.readers.reading import read, reasons, records, unread

V2000 = """ethanol

made by hand
  3  2  0  0  0  0            999 V2000
    0.0000    0.0000    0.0000 C   0  0
    1.0000    0.0000    0.0000 C   0  0
    2.0000    0.0000    0.0000 O   0  0
  1  2  1  0
  2  3  1  0
M  END
"""

V3000 = """both

enhanced stereo
  0  0  0     0  0            999 V3000
M  V30 BEGIN CTAB
M  V30 COUNTS 4 3 0 0 1
M  V30 BEGIN ATOM
M  V30 1 C 0 0 0 0
M  V30 2 C 1 0 0 0
M  V30 3 O 2 0 0 -
M  V30 0
M  V30 4 N 1 1 0 0
M  V30 END ATOM
M  V30 BEGIN BOND
M  V30 1 1 1 2
M  V30 2 1 2 3 CFG=1
M  V30 3 1 2 4
M  V30 END BOND
M  V30 BEGIN COLLECTION
M  V30 MDLV30/STERAC1 ATOMS=(1 2)
M  V30 END COLLECTION
M  V30 END CTAB
M  END
"""


def sdf(*records_: str) -> bytes:
    return "".join(record + "$$$$\n" for record in records_).encode()


def test_a_record_comes_with_its_connection_table_as_written() -> None:
    (record,) = records(read("a.mol", V2000.encode()))
    assert record.title == "ethanol"
    assert record.molblock == V2000
    assert record.place.record == 1


def test_enhanced_stereo_groups_stay_in_the_connection_table() -> None:
    (record,) = records(read("a.sdf", sdf(V3000)))
    assert "MDLV30/STERAC1" in record.molblock
    assert record.molblock == V3000


@pytest.mark.parametrize(
    ("block", "expected"),
    [
        (">  <NAME>\nethanol\n\n", [("NAME", "ethanol")]),
        ("> <A> (1)\n1\n\n>  25  <B> DT3\n2\n\n", [("A", "1"), ("B", "2")]),
        ("> DT12\nvalue\n\n", [("DT12", "value")]),
        (">  <TWO>\nline 1\n line 2\n\n", [("TWO", "line 1\n line 2")]),
        (">  <EMPTY>\n\n>  <X>\n1\n\n", [("EMPTY", ""), ("X", "1")]),
        (">  <X>\n> 5 %\n\n", [("X", "> 5 %")]),
    ],
)
def test_data_items(block: str, expected: list[tuple[str, str]]) -> None:
    (record,) = records(read("a.sdf", sdf(V2000 + block)))
    assert [(field.name, field.value) for field in record.fields] == expected
    assert [field.place.field for field in record.fields] == [name for name, _ in expected]


def test_lines_under_no_heading_are_listed() -> None:
    items = read("a.sdf", sdf(V2000 + ">  <X>\n1\n\nlost text\n\n"))
    assert len(records(items)) == 1
    (entry,) = unread(items)
    assert entry.reason == "stray-lines"
    assert entry.text == "lost text"


@pytest.mark.parametrize("end", ["\n", "\r\n", "\r"])
def test_line_ends_do_not_matter(end: str) -> None:
    text = sdf(V2000 + ">  <N>\na\nb\n\n", V3000).decode().replace("\n", end)
    first, second = records(read("a.sdf", text.encode()))
    assert first.molblock == V2000
    assert first.fields[0].value == "a\nb"
    assert second.molblock == V3000


def test_the_last_record_counts_without_its_end_line() -> None:
    assert len(records(read("a.sdf", sdf(V2000) + V2000.encode()))) == 2
    assert len(records(read("a.sdf", sdf(V2000) + b"\n \n"))) == 1


def _without_line(text: str, number: int) -> str:
    lines = text.split("\n")
    del lines[number]
    return "\n".join(lines)


@pytest.mark.parametrize(
    "broken",
    [
        pytest.param(V2000.replace("M  END\n", ""), id="no end line"),
        pytest.param(_without_line(V2000, 5), id="an atom short"),
        pytest.param(_without_line(V2000, 7), id="a bond short"),
        pytest.param(V2000.replace("  3  2", "  2  2"), id="an atom more than promised"),
        pytest.param(V2000.replace("  3  2", "  3  1"), id="a bond more than promised"),
        pytest.param(_without_line(V2000, 0), id="header cut"),
        pytest.param("just text\n", id="text"),
        pytest.param(_without_line(V3000, 7), id="V3000 atom short"),
        pytest.param(V3000.replace("M  V30 END CTAB\n", ""), id="V3000 cut off"),
        pytest.param(V2000.replace("M  END\n", "") + ">  <MOL>\nM  END\n\n", id="end in a field"),
    ],
)
def test_a_record_that_is_not_all_there_is_unread_and_the_others_come(broken: str) -> None:
    items = read("a.sdf", sdf(V2000, broken, V3000))
    assert [record.place.record for record in records(items)] == [1, 3]
    (entry,) = unread(items)
    assert (entry.reason, entry.place.record) == ("damaged-record", 2)


def test_a_damaged_record_is_called_by_its_title() -> None:
    (entry,) = unread(read("a.sdf", sdf(_without_line(V2000, 5))))
    assert entry.text == "ethanol"


def test_an_empty_record_is_counted() -> None:
    items = read("a.sdf", b"$$$$\n" + sdf(V2000))
    assert reasons(items) == ["empty-record"]
    assert records(items)[0].place.record == 2


def test_a_table_of_no_atoms_gives_its_fields_and_is_unread() -> None:
    empty = "nothing\n\n\n  0  0  0  0  0  0            999 V2000\nM  END\n>  <N>\nx\n\n"
    items = read("a.sdf", sdf(empty))
    assert reasons(items) == ["no-structure"]
    assert records(items)[0].molblock == ""
    assert records(items)[0].fields[0].value == "x"


@pytest.mark.parametrize("head", ["$RXN\n\n", "$RDFILE 1\n"])
def test_reaction_and_rd_files_are_not_read(head: str) -> None:
    assert reasons(read("a.rdf", head.encode())) == ["unsupported-format"]


def test_what_another_program_wrote_comes_back_field_by_field() -> None:
    """Round trip over 200 records written by RDKit's SDWriter, V2000 and V3000 by turns."""
    draw = random.Random(20)
    parts = ["C[C@H](N)", "C(=O)", "[C@@H](O)", "c1ccc(cc1)", "CCN", "/C=C/"]
    written: list[tuple[str, dict[str, str]]] = []
    stream = io.StringIO()
    writer = Chem.SDWriter(stream)
    for number in range(200):
        mol = None
        while mol is None:
            mol = Chem.MolFromSmiles("".join(draw.choices(parts, k=draw.randint(1, 6))) + "C")
        AllChem.Compute2DCoords(mol)
        fields = {
            "IUPAC name": f"name {number}",
            "Mol. formula": f"C{number}",
            "Note": "two\nlines" if number % 3 else "µ – α",
        }
        mol.SetProp("_Name", f"Compound {number}")
        for name, value in fields.items():
            mol.SetProp(name, value)
        writer.SetForceV3000(bool(number % 2))
        writer.write(mol)
        written.append((Chem.MolToSmiles(mol), fields))
    writer.close()
    items = read("a.sdf", stream.getvalue().encode())
    assert reasons(items) == []
    found = records(items)
    assert len(found) == 200
    for number, (record, (smiles, fields)) in enumerate(zip(found, written, strict=True)):
        assert record.title == f"Compound {number}"
        assert {field.name: field.value for field in record.fields} == fields
        assert Chem.MolToSmiles(Chem.MolFromMolBlock(record.molblock)) == smiles
