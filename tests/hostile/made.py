"""Hostile files as data: what each is, its name, how it is made, and what has to be said of it.

Beside those of `test_hostile_files`, `_word` and `_pdf`. Those marked "fuzz" broke a reader, in
`tests/benchmarks/fuzz` or when they were thought of, and are kept as small as they can be.
"""

from __future__ import annotations

import io
import json
import zipfile
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

import openpyxl

from tests.unit.readers import test_fhir, test_gsrs, test_spl
from tests.unit.readers.pdfmaking import Maker, lines


@dataclass(frozen=True, slots=True)
class Case:
    """`reasons` are all the reasons given, each once, sorted; `read` the number of records,
    tables and passages that are read all the same."""

    what: str
    name: str
    make: Callable[[], bytes]
    reasons: tuple[str, ...]
    read: int = 0


def _mol(rest: bytes) -> Callable[[], bytes]:
    return lambda: b"x\n\n\n" + rest


V3 = b"  0  0  0     0  0            999 V3000\n"
ATOM = b"    0.0000    0.0000    0.0000 C   0  0\n"
DOCTYPE = b"<!DOCTYPE a SYSTEM 'a.dtd'>"


def _json(value: Any) -> Callable[[], bytes]:
    return lambda: json.dumps(value).encode()


def _gsrs(**structure: object) -> Callable[[], bytes]:
    whole = {key: value for key, value in test_gsrs.WHOLE.items() if key != "names"}
    return _json({**whole, "structure": {**test_gsrs.WHOLE["structure"], **structure}})


def _bundles(depth: int) -> dict[str, Any]:
    inner: dict[str, Any] = test_fhir.WHOLE
    for _ in range(depth):
        inner = {"resourceType": "Bundle", "entry": [{"resource": inner}]}
    return inner


def _cif(cell: bytes = b"10", angle: bytes = b"90", more: bytes = b"", sites: int = 1) -> bytes:
    tags = b"".join(b"_cell_length_%c %s\n" % (c, cell) for c in b"abc")
    tags += b"".join(b"_cell_angle_%s %s\n" % (a, angle) for a in (b"alpha", b"beta", b"gamma"))
    columns = b"".join(
        b"_atom_site_%s\n" % c for c in (b"label", b"fract_x", b"fract_y", b"fract_z")
    )
    atoms = b"".join(b"C%d 0.1 0.1 0.1\n" % n for n in range(sites))
    group = more or b"_space_group_name_H-M_alt 'P 1'\n"
    return b"data_x\n_chemical_formula_sum 'C H4'\n" + tags + group + b"loop_\n" + columns + atoms


def _operations(text: bytes) -> Callable[[], bytes]:
    return lambda: _cif(more=b"loop_\n_space_group_symop_operation_xyz\n" + text)


def _label(text: str) -> Callable[[], bytes]:
    return lambda: test_spl.document(test_spl.description(text))


def _svg(inner: bytes) -> Callable[[], bytes]:
    return lambda: b"<svg xmlns='http://www.w3.org/2000/svg'>" + inner + b"</svg>"


def _book(cells: str, *, strings: str = "") -> Callable[[], bytes]:
    space = 'xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"'
    new = {
        "xl/worksheets/sheet1.xml": f"<worksheet {space}><sheetData>{cells}</sheetData></worksheet>",
        "xl/sharedStrings.xml": f"<sst {space}>{strings}</sst>" if strings else None,
    }

    def make() -> bytes:
        plain, out = io.BytesIO(), io.BytesIO()
        book = openpyxl.Workbook()
        sheet = book.active
        assert sheet is not None
        sheet.append(["x"])
        book.save(plain)
        with zipfile.ZipFile(plain) as old, zipfile.ZipFile(out, "w") as made:
            for name in old.namelist():
                made.writestr(name, new.get(name) or old.read(name))
        return out.getvalue()

    return make


def _shifted() -> bytes:
    """Bytes lost from the middle: the directory's offsets lead to before the beginning."""
    data = _book('<row r="1"><c r="A1"><v>1</v></c></row>')()
    return b"PK\3\4" + data[data.index(b"PK\1\2") - 200 :]


def _pdf(
    content: str, box: tuple[float, float, float, float] = (0, 0, 595, 842)
) -> Callable[[], bytes]:
    def make() -> bytes:
        made = Maker()
        made.page(content, box=box)
        return made.bytes()

    return make


def _ring() -> bytes:
    data = _pdf(lines("A sound page."))()
    start = data[data.rindex(b"startxref") :].split()[1]
    return data.replace(b"/Root 1 0 R", b"/Root 1 0 R /Prev " + start)


CASES = (
    # delimited
    Case("a million quotes (fuzz)", "a.csv", lambda: b'"' * 1_000_001, ("quoting",)),
    Case("a first cell past the limit (fuzz)", "a.csv", lambda: b'"' + b"a" * 200_000 + b'",x\na,b\nc,d\n', ("quoting",), 1),
    Case("a million delimiters", "a.csv", lambda: b"," * 1_000_000, ("quoting",)),
    Case("a quote opened in every row", "a.csv", lambda: b"a,b\n" + b'"a\n' * 300_000, ("unclosed-quote",), 1),
    Case("300,000 rows", "a.csv", lambda: b"a,b\n" * 300_000, ("row-budget",), 1),
    # molfile
    Case("a count of 5,000 digits (fuzz)", "a.mol", _mol(V3 + b"M  V30 COUNTS " + b"9" * 5000 + b" 0\nM  END\n"), ("damaged-record",)),
    Case("a counts line with a word in it (fuzz)", "a.mol", _mol(b"  1  0abc  0  0            999 V2000\n" + ATOM + b"  1  1  1  0\nM  END\n"), ("damaged-record",)),
    Case("100,000 lines that go on (fuzz)", "a.mol", _mol(V3 + b"M  V30 aaaaaaaaaaaaaaaaaaaaaaa-\n" * 100_000 + b"M  END\n"), ("damaged-record",)),
    Case("400,000 ends within lines", "a.sdf", lambda: b"x$$$$" * 400_000, ("damaged-record",)),
    Case("a record of 21 million characters", "a.sdf", lambda: b"x\n" * 10_500_000, ("size-budget",)),
    # text
    Case("fences, never closed", "a.md", lambda: b"```\n" * 100_001 + b"(2S)-x\n", (), 1),
    Case("100,000 headings", "a.md", lambda: b"a\n===\n" * 50_000 + b"x" * 100_001, ("line-too-long",), 50_000),
    # workbook
    Case("a row number of 5,000 digits (fuzz)", "a.xlsx", _book(f'<row r="{"9" * 5000}"><c r="A1"><v>1</v></c></row>'), (), 1),
    Case("a raised digit for a row number (fuzz)", "a.xlsx", _book('<row r="²"><c r="A1" s="²"><v>1</v></c></row>'), (), 1),
    Case("a text number of 5,000 digits (fuzz)", "a.xlsx", _book(f'<row r="1"><c r="A1" t="s"><v>{"9" * 5000}</v></c></row>'), ("missing-text",)),
    Case("a number past any exponent", "a.xlsx", _book('<row r="1"><c r="A1"><v>1e999999999</v></c></row>'), (), 1),
    Case("a member that begins before the file (fuzz)", "a.xlsx", _shifted, ("damaged-archive",)),
    # CIF
    Case("25,000 data blocks", "a.cif", lambda: b"".join(b"data_x%d\n_a 1\n" % n for n in range(25_000)), ("size-budget",)),
    Case("a loop with a value missing", "a.cif", lambda: b"data_x\nloop_\n_a\n_b\n1 2 3\n", ("damaged",)),
    Case("a text field that is not closed", "a.cif", lambda: b"data_x\n_a\n;text\n", ("damaged",)),
    Case("a data name given twice", "a.cif", lambda: b"data_x\n_a 1\n_a 2\n", ("damaged",)),
    Case("a cell without volume", "a.cif", lambda: _cif(cell=b"0"), ("cell-not-possible",), 1),
    Case("a flat cell", "a.cif", lambda: _cif(angle=b"180"), ("cell-not-possible",), 1),
    Case("a cell past counting", "a.cif", lambda: _cif(cell=b"1e300"), ("damaged-record",), 1),
    Case("5,000 operations", "a.cif", _operations(b"x,y,z\n" * 5000), ("space-group-not-known",), 1),
    Case("an operation divided by nothing", "a.cif", _operations(b"'x,y,z' 'x/0,y,z'\n"), ("space-group-not-known",), 1),
    Case("2,000 atoms at one spot", "a.cif", lambda: _cif(sites=2000), ("unresolved-disorder",), 1),
    Case("2,001 atoms", "a.cif", lambda: _cif(sites=2001), ("size-budget",), 1),
    # JSON
    Case("a million brackets", "a.json", lambda: b"[" * 1_000_000, ("too-deep",)),
    Case("a million objects, one in the other", "a.json", lambda: b'{"a":' * 1_000_000, ("too-deep",)),
    Case("one name 50,000 times", "a.json", lambda: b"{" + b'"a":1,' * 50_000 + b'"b":1}', ("duplicate-key",)),
    Case("half of a surrogate pair", "a.json", _gsrs(formula="\ud800"), ("encoding",)),
    Case("a formula of 5,000 digits (fuzz)", "a.json", _gsrs(formula="C" + "9" * 5000), (), 1),
    Case("a formula divided by nothing (fuzz)", "a.json", _gsrs(formula="1/0C2H6"), (), 1),
    Case("forty bundles in each other", "a.json", _json(_bundles(40)), ("too-deep",)),
    # SPL and FHIR as XML
    Case("a section of 50,000 paragraphs (fuzz)", "a.xml", _label("<paragraph>x</paragraph>" * 50_000), ("size-budget",)),
    Case("lists in lists", "a.xml", _label("<list><item>" * 200 + "x" + "</item></list>" * 200), ("damaged-xml",)),
    # XML, SVG, HTML
    Case("an entity that is declared elsewhere (fuzz)", "a.xml", lambda: DOCTYPE + b"<a>(2&prime;S)-x</a>", ("entities",)),
    Case("the same in a drawing (fuzz)", "a.svg", lambda: DOCTYPE + _svg(b"<text>(2&prime;S)-x</text>")(), ("entities",)),
    Case("an entity that reads a file", "a.xml", lambda: b"<!DOCTYPE a [<!ENTITY % p SYSTEM 'file:///etc/passwd'> %p;]><a/>", ("entities",)),
    Case("500,000 sections never closed", "a.xml", lambda: DOCTYPE + b"<a>" + b"<![CDATA[" * 500_000, ("damaged-xml",)),
    Case("an inclusion, not followed", "a.xml", lambda: b"<a xmlns:x='http://www.w3.org/2001/XInclude'><x:include href='/etc/passwd' parse='text'/></a>", ("no-reader",)),
    Case("the character of number 0", "a.xml", lambda: b"<a>&#0;</a>", ("damaged-xml",)),
    Case("200,000 attributes", "a.xml", lambda: b"<a " + b" ".join(b"a%d='1'" % n for n in range(200_000)) + b">x</a>", ("no-reader",), 1),
    Case("a drawing that uses itself", "a.svg", _svg(b"<g id='a'><use href='#a'/><text>x</text></g>"), ("picture",), 1),
    Case("a style of a million braces", "a.html", lambda: b"<style>" + b"{" * 1_000_000 + b"</style><p>x", (), 1),
    Case("20,000 rows that reach to the end", "a.html", lambda: b"<table>" + b"<tr><td rowspan=0>x" * 20_000 + b"</table>", ("cell-budget",)),
    Case("frames in frames", "a.html", lambda: b"<frameset>" * 300 + b"x", ("size-budget",)),
    # PDF
    Case("text of the size of a town", "a.pdf", _pdf(lines("x", size=1e6)), ("off-page",), 1),
    Case("100,000 dictionaries in each other", "a.pdf", _pdf("<<" * 100_000), ("blank-page",)),
    Case("a file with nothing in it", "a.pdf", lambda: b"%PDF-1.4\n%%EOF", ("damaged",)),
    Case("cross references in a ring", "a.pdf", _ring, (), 1),
)  # fmt: skip
