"""PDF files that are damaged, closed or made to harm: unread with the reason, page by page.

Each is made here. Budgets are set small where a reader without the guard would not come back.
"""

from __future__ import annotations

import hashlib
import zlib

import pytest

from dossiercheck.limits import Refused
from dossiercheck.model import Item, Source
from dossiercheck.readers import pdf
from dossiercheck.readers.pdfprocess import BadPage, PdfLimits, pages
from tests.unit.readers.pdfmaking import Maker, lines, show
from tests.unit.readers.reading import passages, read, reasons, unread

TEXT = "The text of a sound page."


def sound(count: int = 1) -> Maker:
    made = Maker()
    for _ in range(count):
        made.page(lines(TEXT, y=500))
    return made


def within(data: bytes, limits: PdfLimits) -> list[Item]:
    source = Source("a.pdf", hashlib.sha256(data).hexdigest(), len(data), "pdf")
    try:
        return list(pdf.read_within(source, data, limits))
    except Refused as refused:
        pytest.fail(f"refused: {refused.reason}")


def test_empty() -> None:
    assert reasons(read("a.pdf", b"")) == ["empty"]


def test_another_format_under_its_name() -> None:
    assert reasons(read("a.pdf", b"PK\x03\x04rest")) == ["content-mismatch"]


def test_nothing_but_a_header() -> None:
    assert "damaged" in reasons(read("a.pdf", b"%PDF-1.7\n%%EOF"))


def test_rubbish_after_the_header() -> None:
    assert "damaged" in reasons(read("a.pdf", b"%PDF-1.7\n" + bytes(range(256)) * 50))


def test_no_pages() -> None:
    assert reasons(read("a.pdf", Maker().bytes(kids=[])))[0] in ("no-pages", "damaged")


def test_a_page_tree_that_leads_to_itself() -> None:
    made = sound()
    made.objects[1] = b"<< /Type /Pages /Kids [2 0 R] /Count 1 >>"
    found = reasons(read("a.pdf", made.bytes()))
    assert found
    assert set(found) <= {"no-pages", "damaged-page", "damaged"}


def test_a_page_tree_that_promises_more_pages_than_it_has() -> None:
    made = sound()
    made.objects[1] = f"<< /Type /Pages /Kids [{made.pages[0]} 0 R] /Count 3 >>".encode()
    items = read("a.pdf", made.bytes())
    assert [p.text for p in passages(items)] == [TEXT]
    assert reasons(items).count("damaged-page") == 2


def test_a_page_tree_that_promises_a_million_pages() -> None:
    made = sound()
    made.objects[1] = f"<< /Type /Pages /Kids [{made.pages[0]} 0 R] /Count 1000000 >>".encode()
    assert reasons(read("a.pdf", made.bytes())) == ["page-budget"]


def test_encrypted_with_a_password() -> None:
    """Standard security handler, revision 2 (ISO 32000-1, 7.6.3): the entries are well formed and
    belong to no empty password."""
    made = sound()
    key = made.add(
        "<< /Filter /Standard /V 1 /R 2 /P -4 "
        f"/O <{'28bf4e5e4e758a4164004e56fffa01082e2e00b6d0683e802f0ca9fe6453697a'}> "
        f"/U <{'00' * 32}> >>"
    )
    data = made.bytes(trailer=f"/Encrypt {key} 0 R /ID [<0123456789abcdef> <0123456789abcdef>]")
    assert reasons(read("a.pdf", data)) == ["encrypted"]


def test_a_file_cut_off() -> None:
    data = sound(3).bytes()
    found = reasons(read("a.pdf", data[: len(data) // 2]))
    assert "truncated" in found or "damaged" in found


def test_a_page_object_that_is_missing() -> None:
    made = sound(3)
    made.objects[made.pages[1] - 1] = b"null"
    items = read("a.pdf", made.bytes())
    assert len(passages(items)) == 2
    assert unread(items) != []


def test_a_content_stream_that_does_not_unpack() -> None:
    made = sound(2)
    packed = zlib.compress(lines(*[TEXT] * 40).encode())
    broken = packed[:20] + bytes(b ^ 0x5A for b in packed[20:])
    head = f"<< /Filter /FlateDecode /Length {len(broken)} >>\nstream\n".encode()
    number = made.pages[0] - 1
    made.objects[number - 1] = head + broken + b"\nendstream"
    items = read("a.pdf", made.bytes())
    assert "blank-page" in reasons(items)
    assert [p.text for p in passages(items)] == [TEXT]


def test_a_stream_that_inflates_without_end() -> None:
    """Packed twice, 256 MiB of spaces are a few hundred bytes."""
    made = sound(2)
    squeeze = zlib.compressobj(9)
    once = b"".join(squeeze.compress(b" " * (1 << 20)) for _ in range(256)) + squeeze.flush()
    twice = zlib.compress(once, 9)
    head = f"<< /Filter [/FlateDecode /FlateDecode] /Length {len(twice)} >>\nstream\n".encode()
    made.objects[made.pages[0] - 2] = head + twice + b"\nendstream"
    items = within(made.bytes(), PdfLimits(seconds=20, memory=200 << 20))
    assert [u.place.page for u in unread(items)] == [1]
    assert [p.text for p in passages(items)] == [TEXT]


def test_a_form_that_draws_itself() -> None:
    made = Maker()
    number = len(made.objects) + 1
    made.stream(
        b"/X1 Do",
        f"/Type /XObject /Subtype /Form /BBox [0 0 9 9] /Resources << /XObject << /X1 {number} 0 R >> >>",
    )
    made.page(lines(TEXT) + "/X1 Do", made.fonts() + f" /XObject << /X1 {number} 0 R >>")
    items = read("a.pdf", made.bytes())
    assert [p.text for p in passages(items)] == [TEXT]


def test_a_page_that_takes_too_long() -> None:
    """Forms in forms, each drawn ten times: a million of the innermost."""
    made = Maker()
    inner = made.stream(show("x", 1, 1).encode(), "/Type /XObject /Subtype /Form /BBox [0 0 9 9]")
    for _ in range(7):
        inner = made.stream(
            b"/X1 Do " * 10,
            f"/Type /XObject /Subtype /Form /BBox [0 0 9 9] /Resources << /XObject << /X1 {inner} 0 R >> >>",
        )
    made.page("/X1 Do", f"/XObject << /X1 {inner} 0 R >>")
    made.page(lines(TEXT))
    items = within(made.bytes(), PdfLimits(seconds=3, memory=400 << 20))
    assert 1 in {u.place.page for u in unread(items)}
    assert TEXT in [p.text for p in passages(items)]


def test_bookmarks_in_a_ring() -> None:
    made = sound()
    first = len(made.objects) + 1
    made.add(f"<< /Title (A) /Parent {first} 0 R /Next {first} 0 R /First {first} 0 R >>")
    made.catalogue = f"/Outlines << /First {first} 0 R >>".encode()
    assert [p.text for p in passages(read("a.pdf", made.bytes()))] == [TEXT]


def test_a_font_that_does_not_say_its_letters() -> None:
    made = Maker()
    made.page(
        show(TEXT, 72, 700) + "BT /F9 12 Tf 72 600 Td <002400250026> Tj ET",
        "/Font << /F1 << /Type /Font /Subtype /Type1 /BaseFont /Helvetica >> "
        "/F9 << /Type /Font /Subtype /Type0 /BaseFont /Made /Encoding /Identity-H "
        "/DescendantFonts [<< /Type /Font /Subtype /CIDFontType2 /BaseFont /Made "
        "/CIDSystemInfo << /Registry (Adobe) /Ordering (Identity) /Supplement 0 >> "
        "/FontDescriptor << /Type /FontDescriptor /FontName /Made /Flags 4 >> >>] >> >>",
    )
    items = read("a.pdf", made.bytes())
    assert [p.text for p in passages(items)] == [TEXT]
    assert reasons(items) == ["unmapped-text"]


def test_a_map_that_leads_to_private_characters() -> None:
    made = Maker()
    table = b"2 beginbfchar <41> <E001> <42> <E002> endbfchar"
    cmap = made.stream(
        b"begincmap 1 begincodespacerange <00> <FF> endcodespacerange " + table + b" endcmap"
    )
    made.page(
        "BT /F9 10 Tf 72 700 Td (ABBA) Tj ET",
        f"/Font << /F9 << /Type /Font /Subtype /Type1 /BaseFont /Helvetica /ToUnicode {cmap} 0 R >> >>",
    )
    items = read("a.pdf", made.bytes())
    assert passages(items) == []
    assert reasons(items) == ["unmapped-text"]


def test_fifty_thousand_lines_on_one_page() -> None:
    made = Maker()
    made.page(" ".join(f"{n % 500} {n % 700} m {n % 499} {n % 811} l S" for n in range(50_000)))
    assert reasons(read("a.pdf", made.bytes())) == ["drawing"]


def test_a_process_that_dies_loses_one_page(monkeypatch: pytest.MonkeyPatch) -> None:
    """A child that ends itself at page 2 stands in for a crash of the library."""
    data = sound(3).bytes()
    from dossiercheck.readers import pdfprocess

    real = pdfprocess._Child.next

    def fails(self: pdfprocess._Child) -> tuple[object, ...]:
        message = real(self)
        if message == ("page", 1):
            self._process.kill()
            raise pdfprocess._Lost("process-died", "killed")
        return message

    monkeypatch.setattr(pdfprocess._Child, "next", fails)
    found = list(pages(data, PdfLimits()))
    assert [one.number for one in found if isinstance(one, BadPage)] == [2]
    assert len(found) == 4
