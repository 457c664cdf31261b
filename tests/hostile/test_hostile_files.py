"""Files that are damaged, mislabelled or made to harm: each a clear unread entry, in budget.

Time and memory are not measured: the budgets are set so small, or the file is such, that a
reader without the guard could not give the expected answer.
"""

from __future__ import annotations

import io
import zipfile
import zlib
from collections.abc import Callable

import docx
import openpyxl
import pytest

from dossiercheck.limits import Limits, Refused, decode, open_zip, parse_xml
from dossiercheck.model import Item, Source
from dossiercheck.readers import word, workbook
from tests.unit.readers.reading import passages, read, reasons, records, tables, unread

OLE = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"
BOMB = (
    '<?xml version="1.0"?><!DOCTYPE b [<!ENTITY a "aaaaaaaaaa">'
    '<!ENTITY b "&a;&a;&a;&a;&a;&a;&a;&a;&a;&a;">]><document>&b;</document>'
)
LEAK = (
    '<?xml version="1.0"?><!DOCTYPE d [<!ENTITY x SYSTEM "file:///etc/hostname">]>'
    "<document>&x;</document>"
)


def document() -> bytes:
    made = docx.Document()
    made.add_paragraph("text")
    stream = io.BytesIO()
    made.save(stream)
    return stream.getvalue()


def book() -> bytes:
    made = openpyxl.Workbook()
    made.active.append(["Code", "Name"])
    stream = io.BytesIO()
    made.save(stream)
    return stream.getvalue()


def changed(package: bytes, change: Callable[[zipfile.ZipFile, str, bytes], None]) -> bytes:
    """The package written anew, each part through `change`."""
    stream = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(package)) as old, zipfile.ZipFile(stream, "w") as new:
        for name in old.namelist():
            change(new, name, old.read(name))
    return stream.getvalue()


def with_part(package: bytes, part: str, content: bytes | str) -> bytes:
    def change(new: zipfile.ZipFile, name: str, data: bytes) -> None:
        new.writestr(name, content if name == part else data, zipfile.ZIP_DEFLATED)

    return changed(package, change)


# --- names that do not match ---------------------------------------------------------------


@pytest.mark.parametrize("name", ["a.sdf", "a.csv", "a.txt", "a.md", "a.xlsx", "a.docx"])
@pytest.mark.parametrize(
    "content",
    [
        pytest.param(b"%PDF-1.7\n%\xe2\xe3\xcf\xd3\n", id="PDF"),
        pytest.param(b"\x89PNG\r\n\x1a\n\0\0", id="PNG"),
        pytest.param(b"\x1f\x8b\x08\0", id="gzip"),
        pytest.param(b"{\\rtf1 text}", id="RTF"),
    ],
)
def test_content_of_another_kind(name: str, content: bytes) -> None:
    assert reasons(read(name, content)) == ["content-mismatch"]


@pytest.mark.parametrize("name", ["a.sdf", "a.csv", "a.txt"])
def test_an_archive_under_a_text_name(name: str) -> None:
    assert reasons(read(name, document())) == ["content-mismatch"]


@pytest.mark.parametrize("name", ["a.xlsx", "a.docx"])
def test_text_under_an_office_name(name: str) -> None:
    assert reasons(read(name, b"Code,Name\n")) == ["content-mismatch"]


def test_office_documents_under_one_anothers_name() -> None:
    assert reasons(read("a.xlsx", document())) == ["content-mismatch"]
    assert reasons(read("a.docx", book())) == ["content-mismatch"]


def test_a_bare_archive_under_an_office_name() -> None:
    stream = io.BytesIO()
    with zipfile.ZipFile(stream, "w") as archive:
        archive.writestr("a.txt", "x")
    assert reasons(read("a.docx", stream.getvalue())) == ["content-mismatch"]


@pytest.mark.parametrize(
    "name", ["a.sdf", "a.mol", "a.csv", "a.tsv", "a.txt", "a.md", "a.xlsx", "a.docx"]
)
def test_empty_files(name: str) -> None:
    assert reasons(read(name, b"")) == ["empty"]


@pytest.mark.parametrize("name", ["a.sdf", "a.csv", "a.txt", "a.md"])
def test_files_of_nothing_but_white_space(name: str) -> None:
    assert reasons(read(name, b"\r\n  \r\n\t\r\n")) == ["empty"]


@pytest.mark.parametrize(
    ("name", "content", "reason"),
    [
        ("a.xlsx", OLE + b"\0" * 512 + "EncryptedPackage".encode("utf-16-le"), "encrypted"),
        ("a.docx", OLE + b"\0" * 512 + "EncryptedPackage".encode("utf-16-le"), "encrypted"),
        ("a.xls", OLE + b"\0" * 512 + "Workbook".encode("utf-16-le"), "unsupported-format"),
        ("a.doc", OLE + b"\0" * 512 + "WordDocument".encode("utf-16-le"), "unsupported-format"),
    ],
)
def test_encrypted_and_old_binary_documents(name: str, content: bytes, reason: str) -> None:
    assert reasons(read(name, content)) == [reason]


# --- text ----------------------------------------------------------------------------------


@pytest.mark.parametrize("name", ["a.sdf", "a.csv", "a.txt"])
@pytest.mark.parametrize(
    "content", [b"Code,Na\0me\nA,b\n", b"\0\0\0\0", bytes(range(1, 32)) * 20 + b"text"]
)
def test_binary_content_is_no_text(name: str, content: bytes) -> None:
    assert reasons(read(name, content)) == ["binary"]


def test_a_nul_inside_utf_16_text_is_refused_too() -> None:
    with pytest.raises(Refused) as caught:
        decode("etha\0nol".encode("utf-16"))
    assert caught.value.reason == "binary"


@pytest.mark.parametrize(
    ("content", "reason"),
    [
        (b"\xff\xfea", "encoding"),
        (b"\xef\xbb\xbf\xff\xfe", "encoding"),
        (b"caf\xe9 \x81 x", "encoding"),
    ],
)
def test_bytes_that_fit_no_encoding(content: bytes, reason: str) -> None:
    with pytest.raises(Refused) as caught:
        decode(content)
    assert caught.value.reason == reason


@pytest.mark.parametrize(
    ("encoding", "found"),
    [
        ("utf-8", "utf-8"),
        ("utf-8-sig", "utf-8"),
        ("utf-16", "utf-16"),
        ("utf-16-le", "utf-16-le"),
        ("utf-16-be", "utf-16-be"),
        ("utf-32", "utf-32"),
        ("cp1252", "cp1252"),
    ],
)
def test_encodings_are_told_apart(encoding: str, found: str) -> None:
    assert decode("naïve – text\n".encode(encoding)) == ("naïve – text\n", found)


@pytest.mark.parametrize("name", ["a.txt", "a.md"])
@pytest.mark.parametrize("filling", ["x", "(2S)-", "| ", "**", "(", "`", "1.", "#", "*a* "])
def test_a_line_of_a_megabyte(name: str, filling: str) -> None:
    long = (filling * 1_000_000)[:1_000_000]
    items = read(name, f"before\n{long}\nafter\n".encode())
    assert [p.text for p in passages(items)] == ["before", "after"]
    assert [(entry.reason, entry.place.line) for entry in unread(items)] == [("line-too-long", 2)]


def test_a_csv_of_one_line_of_a_megabyte() -> None:
    items = read("a.csv", b"Code,Name\nA," + b"x" * 1_000_000 + b"\nB,y\n")
    assert [row[0].text for row in tables(items)[0].rows] == ["Code", "B"]
    assert [(entry.reason, entry.place.row) for entry in unread(items)] == [("quoting", 2)]


# --- structure files -----------------------------------------------------------------------


@pytest.mark.parametrize(
    "content",
    [
        b"$$$$\n" * 1000,
        b"\n" * 5 + b"M  END\n$$$$\n",
        b"a\nb\nc\n999999  0  0 V2000\nM  END\n",
        b"a\nb\nc\n-1 -1  0 V2000\nM  END\n",
        b"a\nb\nc\n  0  0  0     0  0            999 V3000\nM  V30 COUNTS 999999999 0\nM  END\n",
    ],
)
def test_structure_files_without_a_sound_record(content: bytes) -> None:
    items = read("a.sdf", content)
    assert records(items) == []
    assert set(reasons(items)) <= {"empty-record", "damaged-record"}
    assert len(items) == max(content.count(b"$$$$"), 1)


def test_a_truncated_file_keeps_its_whole_records() -> None:
    one = "x\n\n\n  1  0  0  0  0  0            999 V2000\n" + (
        "    0.0000    0.0000    0.0000 C   0  0\nM  END\n$$$$\n"
    )
    data = (one * 3).encode()
    items = read("a.sdf", data[:-30])
    assert [record.place.record for record in records(items)] == [1, 2]
    assert [(e.reason, e.place.record) for e in unread(items)] == [("damaged-record", 3)]


# --- archives ------------------------------------------------------------------------------


@pytest.mark.parametrize(("name", "package"), [("a.docx", document()), ("a.xlsx", book())])
class TestPackages:
    def part(self, name: str) -> str:
        return "word/document.xml" if name == "a.docx" else "xl/workbook.xml"

    def test_a_part_that_is_there_twice(self, name: str, package: bytes) -> None:
        def change(new: zipfile.ZipFile, part: str, data: bytes) -> None:
            new.writestr(part, data)
            if part == self.part(name):
                with pytest.warns(UserWarning, match="Duplicate name"):
                    new.writestr(part, data.replace(b"text", b"other"))

        assert reasons(read(name, changed(package, change))) == ["duplicate-part"]

    def test_a_part_that_is_there_twice_in_other_case(self, name: str, package: bytes) -> None:
        def change(new: zipfile.ZipFile, part: str, data: bytes) -> None:
            new.writestr(part, data)
            if part == self.part(name):
                new.writestr(part.upper(), data)

        assert reasons(read(name, changed(package, change))) == ["duplicate-part"]

    @pytest.mark.parametrize("path", ["../evil.xml", "/etc/x", "a/../../x", "C:\\x", "..\\x"])
    def test_a_path_out_of_the_archive(self, name: str, package: bytes, path: str) -> None:
        def change(new: zipfile.ZipFile, part: str, data: bytes) -> None:
            new.writestr(part, data)
            if part == self.part(name):
                new.writestr(path, b"x")

        assert reasons(read(name, changed(package, change))) == ["unsafe-path"]

    def test_an_encrypted_part(self, name: str, package: bytes) -> None:
        # Bit 0 of the general purpose flags says encrypted (ZIP application note, 4.4.4).
        data = bytearray(package)
        at = data.find(b"PK\x01\x02")
        data[at + 8] |= 1
        assert reasons(read(name, bytes(data))) == ["encrypted"]

    def test_a_part_that_inflates_without_bound(self, name: str, package: bytes) -> None:
        bomb = with_part(package, self.part(name), b"<a>" + b" " * 3_000_000)
        assert reasons(read(name, bomb)) == ["inflation-ratio"]

    def test_a_directory_that_lies_about_the_size(self, name: str, package: bytes) -> None:
        bomb = bytearray(with_part(package, self.part(name), b" " * 3_000_000))
        at = bomb.find(b"PK\x01\x02")
        while bomb[at + 46 : at + 46 + len(self.part(name))] != self.part(name).encode():
            at = bomb.find(b"PK\x01\x02", at + 1)
        bomb[at + 24 : at + 28] = (100).to_bytes(4, "little")
        assert reasons(read(name, bytes(bomb))) in (["inflation-ratio"], ["damaged-archive"])

    def test_all_parts_together_past_the_budget(self, name: str, package: bytes) -> None:
        with pytest.raises(Refused) as caught:
            open_zip(package, Limits(archive_bytes=2000))
        assert caught.value.reason == "size-budget"

    def test_too_many_parts(self, name: str, package: bytes) -> None:
        with pytest.raises(Refused) as caught:
            open_zip(package, Limits(members=3))
        assert caught.value.reason == "too-many-parts"

    @pytest.mark.parametrize("keep", [10, 200, -30])
    def test_a_truncated_package(self, name: str, package: bytes, keep: int) -> None:
        assert reasons(read(name, package[:keep])) == ["damaged-archive"]

    def test_a_part_with_damaged_content(self, name: str, package: bytes) -> None:
        packed = with_part(package, self.part(name), b"<a>" + bytes(range(256)) * 40)
        stream = zlib.compress(bytes(range(256)) * 40)[2:40]
        at = packed.find(stream[:20])
        damaged = bytearray(packed)
        info = zipfile.ZipFile(io.BytesIO(packed)).getinfo(self.part(name))
        at = info.header_offset + 30 + len(self.part(name)) + 5
        damaged[at : at + 8] = b"\xff" * 8
        assert reasons(read(name, bytes(damaged))) == ["damaged-archive"]

    @pytest.mark.parametrize("content", [BOMB, LEAK])
    @pytest.mark.parametrize("encoding", ["utf-8", "utf-16"])
    def test_declared_entities(
        self, name: str, package: bytes, content: str, encoding: str
    ) -> None:
        data = content.replace('"1.0"?', f'"1.0" encoding="{encoding}"?').encode(encoding)
        assert reasons(read(name, with_part(package, self.part(name), data))) == ["entities"]

    def test_a_document_type(self, name: str, package: bytes) -> None:
        data = "<!DOCTYPE document><document/>"
        assert reasons(read(name, with_part(package, self.part(name), data))) == ["doctype"]

    def test_an_encoding_in_which_a_declaration_could_hide(self, name: str, package: bytes) -> None:
        data = '<?xml version="1.0" encoding="UTF-7"?>+ADwAIQ-DOCTYPE x+AD4-<x/>'
        assert reasons(read(name, with_part(package, self.part(name), data))) == ["encoding"]

    @pytest.mark.parametrize("content", ["", "<a><b></a>", "<a>" * 400 + "</a>" * 400, "\0"])
    def test_xml_that_does_not_parse(self, name: str, package: bytes, content: str) -> None:
        found = reasons(read(name, with_part(package, self.part(name), content)))
        assert found in (["damaged-xml"], ["binary"])

    def test_a_missing_part(self, name: str, package: bytes) -> None:
        def change(new: zipfile.ZipFile, part: str, data: bytes) -> None:
            if part != self.part(name):
                new.writestr(part, data)

        assert reasons(read(name, changed(package, change))) == ["missing-part"]


def test_xml_with_a_harmless_document_type_can_be_asked_for() -> None:
    assert parse_xml(b"<!DOCTYPE a SYSTEM 'a.dtd'><a/>", doctype=True).tag == "a"
    with pytest.raises(Refused) as caught:
        parse_xml(BOMB.encode(), doctype=True)
    assert caught.value.reason == "entities"


@pytest.mark.parametrize("text", ["<a>(2&prime;)-b</a>", "<a b='(2&prime;)-b'/>"])
def test_an_entity_that_only_an_unread_file_declares_is_not_dropped(text: str) -> None:
    """XML 1.0, section 4.1: with an external subset such a reference is not a fatal error."""
    with pytest.raises(Refused) as caught:
        parse_xml(f"<!DOCTYPE a SYSTEM 'a.dtd'>{text}".encode(), doctype=True)
    assert caught.value.reason == "entities"
    assert "prime" in caught.value.detail


def test_characters_by_number_and_what_only_looks_like_an_entity_pass() -> None:
    text = "<a>&amp;&#8242;&#x2032;<!-- &x; --><![CDATA[&y;]]></a>"
    root = parse_xml(f"<!DOCTYPE a SYSTEM 'a.dtd'>{text}".encode(), doctype=True)
    assert "".join(map(str, root.xpath("//text()"))) == "&′′&y;"


def test_a_damaged_sheet_leaves_the_others() -> None:
    made = openpyxl.Workbook()
    made.active.append(["Code"])
    made.create_sheet("Second").append(["Name"])
    stream = io.BytesIO()
    made.save(stream)
    items = read("a.xlsx", with_part(stream.getvalue(), "xl/worksheets/sheet1.xml", "<a><b></a>"))
    assert [(e.reason, e.place.sheet) for e in unread(items)] == [("damaged-xml", "Sheet")]
    assert [t.place.sheet for t in tables(items)] == ["Second"]


SHEET = (
    '<worksheet xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"><sheetData>{}'
    "</sheetData></worksheet>"
)


@pytest.mark.parametrize(
    ("rows", "expected"),
    [
        ('<row r="99999999999"><c r="A1"><v>1</v></c></row>', [["1"]]),
        ('<row r="1"><c r="ZZZ1"><v>1</v></c></row>', []),
        ('<row r="1"><c r="A1" s="999999"><v>1e400</v></c></row>', [["1e400"]]),
        ('<row r="1"><c r="A1"><v>1e300</v></c></row>', [["1E+300"]]),
        ('<row r="x"><c r="?"><v>nan</v></c></row>', [["nan"]]),
        ('<row r="1"><c r="A1" t="s"><v>-5</v></c></row>', []),
        ('<row r="1"><c r="A1" t="s"><v>99</v></c></row>', []),
    ],
)
def test_cells_that_no_program_writes(rows: str, expected: list[list[str]]) -> None:
    data = with_part(book(), "xl/worksheets/sheet1.xml", SHEET.format(rows))
    items = read("a.xlsx", data)
    assert [
        [cell.text for cell in row] for table in tables(items) for row in table.rows
    ] == expected
    assert expected or len(unread(items)) == 1


def test_budgets_are_those_given() -> None:
    source = Source("a", "", 0, "")

    def refused(reader: Callable[[Source, bytes, Limits], object], data: bytes) -> str:
        with pytest.raises(Refused) as caught:
            list(reader(source, data, Limits(member_bytes=100)))  # type: ignore[call-overload]
        return caught.value.reason

    assert refused(word.read_within, document()) == "size-budget"
    assert refused(workbook.read_within, book()) == "size-budget"


def test_every_answer_has_a_reason_and_a_sentence() -> None:
    items: list[Item] = []
    for name in ("a.sdf", "a.csv", "a.txt", "a.xlsx", "a.docx", "a.xls", "a.doc"):
        for data in (b"", b"\0", b"%PDF-1.4", OLE, b"PK\x03\x04", b"x"):
            items += read(name, data)
    entries = unread(items)
    assert len(entries) >= 35
    for entry in entries:
        assert entry.reason == entry.reason.lower().replace(" ", "-")
        assert entry.detail.endswith(".")
        assert entry.place.source
