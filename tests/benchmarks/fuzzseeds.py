"""What the fuzz targets start from: a few small sound files for each reader, made here.

The substances are invented or simple acids, and the formats' layouts are those of the readers'
own tests.
"""

from __future__ import annotations

import io
import json
from collections.abc import Callable, Mapping

import openpyxl

from tests.unit import archived, sequence
from tests.unit.readers import crystals, pdfmaking, test_fhir, test_gsrs, test_spl, wordparts

NAME = "(2S)-2-hydroxypropanoic acid"
Seeds = list[tuple[str, bytes]]

V3000 = """lavorin
  made by hand

  0  0  0     0  0            999 V3000
M  V30 BEGIN CTAB
M  V30 COUNTS 4 3 0 0 1
M  V30 BEGIN ATOM
M  V30 1 C 0 0 0 0
M  V30 2 C 1.3 0.75 0 0 -
M  V30 CFG=1
M  V30 3 N 2.6 0 0 0
M  V30 4 O 1.3 2.25 0 0
M  V30 END ATOM
M  V30 BEGIN BOND
M  V30 1 1 2 1
M  V30 2 1 2 3
M  V30 3 1 2 4 CFG=1
M  V30 END BOND
M  V30 BEGIN COLLECTION
M  V30 MDLV30/STEABS ATOMS=(1 2)
M  V30 END COLLECTION
M  V30 END CTAB
M  END
"""


def delimited() -> Seeds:
    rows = f'Code,Name,SMILES\nZZ-1,"{NAME}",C[C@H](O)C(=O)O\nZZ-2,"a ""b""\nc",CCO\n'
    return [
        ("a.csv", rows.encode()),
        ("a.csv", ("sep=;\n" + rows.replace(",", ";")).encode("utf-16")),
        ("a.tsv", ("A title\n" + rows.replace(",", "\t")).encode("cp1252")),
    ]


def molfile() -> Seeds:
    lactic = test_gsrs.LACTIC
    data = f">  <NAME>\n{NAME}\n\n> 25 DT3 (ZZ-1)\nx\ny\n\n$$$$\n"
    return [
        ("a.sdf", (lactic + data + V3000 + data).encode()),
        ("a.mol", lactic.replace("\n", "\r\n").encode()),
        ("a.mol", V3000.encode()),
    ]


def text() -> Seeds:
    plain = f"3.2.S.1.2 Structure\n\nName: {NAME}\nIt is the S enantiomer of ZZ-1.\n"
    marked = (
        f"# Structure\n\n*{NAME}* has `C[C@H](O)C(=O)O`.\n\n| Code | Name |\n| --- | :-: |\n"
        "| ZZ-1 | a \\| b |\n\nUnder\n-----\n\n```\nC1CC1\n```\n1. **H<sub>2</sub>O** &alpha;\n"
    )
    return [("a.txt", plain.encode()), ("a.md", marked.encode()), ("a.txt", plain.encode("utf-16"))]


def word() -> Seeds:
    p, r = wordparts.paragraph, wordparts.run
    field = '<w:r><w:fldChar w:fldCharType="{}"/></w:r>'
    body = (
        p(r("3.2.S.1.1 Nomenclature"), properties='<w:outlineLvl w:val="0"/>')
        + p(r("(2"), r("S", "<w:i/>"), r(")-2-hydroxypropanoic acid"))
        + p(r("1"), wordparts.taken_out("2"), wordparts.put_in(r("3")), r("4"))
        + p(field.format("begin"), r("x"), field.format("separate"), r("y"), field.format("end"))
        + wordparts.table(wordparts.row("Code", "Name"), wordparts.row("ZZ-1", NAME))
        + p(r("listed"), properties='<w:numPr><w:ilvl w:val="0"/><w:numId w:val="1"/></w:numPr>')
        + p(r("x"), '<w:r><w:commentReference w:id="0"/></w:r>')
        + p(
            "<w:r><w:pict><w:txbxContent><w:p><w:r><w:t>box</w:t></w:r></w:p></w:txbxContent></w:pict></w:r>"
        )
    )
    parts = {
        "comments": f'<w:comments><w:comment w:id="0">{p(r("why"))}</w:comment></w:comments>',
        "styles": '<w:styles><w:style w:type="paragraph" w:styleId="A"><w:basedOn w:val="B"/></w:style></w:styles>',
        "numbering": '<w:numbering><w:abstractNum w:abstractNumId="0"><w:lvl w:ilvl="0"><w:start w:val="1"/>'
        '<w:numFmt w:val="lowerRoman"/><w:lvlText w:val="%1."/></w:lvl></w:abstractNum>'
        '<w:num w:numId="1"><w:abstractNumId w:val="0"/></w:num></w:numbering>',
        "footnotes": f'<w:footnotes><w:footnote w:id="1">{p(r("note"))}</w:footnote></w:footnotes>',
        "header": f"<w:hdr>{p(r('head'))}</w:hdr>",
    }
    return [("a.docx", wordparts.with_body(body, parts))]


def workbook() -> Seeds:
    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    sheet.append(["Code", "Name", "Mr"])
    sheet.append(["ZZ-1", NAME, 90.078])
    sheet.append(["ZZ-2", "=A2", True])
    sheet["C2"].number_format = '[>=100]0.0;[Red]#,##0.000" g"'
    sheet.merge_cells("A4:C5")
    sheet["A4"] = "merged"
    book.create_sheet("Hidden").sheet_state = "hidden"
    stream = io.BytesIO()
    book.save(stream)
    return [("a.xlsx", stream.getvalue())]


def pdf() -> Seeds:
    made = pdfmaking.Maker()
    made.page(pdfmaking.lines("3.2.S.1.1 Nomenclature", f"Name: {NAME}", "and more of it", y=700))
    table = [pdfmaking.show(t, x, y) for t, x, y in (("Code", 80, 600), ("ZZ-1", 80, 580))]
    rules = " ".join(f"70 {y} m 300 {y} l S" for y in (570, 590, 615))
    made.page(" ".join(table) + " " + rules + pdfmaking.show("abab", 72, 500, font="FS"))
    plain = pdfmaking.Maker()
    plain.stream(pdfmaking.lines("A sound page.", y=500).encode(), packed=False)
    plain.add(
        "<< /Type /Page /Parent 2 0 R /MediaBox [0 0 595 842] /Contents 3 0 R "
        f"/Resources << {plain.fonts()} >> >>"
    )
    plain.pages.append(4)
    return [("a.pdf", made.bytes()), ("a.pdf", plain.bytes())]


def cif() -> Seeds:
    one = crystals.crystal("C[C@@H](O)C(=O)O", "P 21 21 21")
    return [
        ("a.cif", one.text().encode()),
        ("a.cif", crystals.crystal("CO", "P -1").text().encode()),
    ]


def spl() -> Seeds:
    part = test_spl.moiety(test_spl.molfile(), name="Lavorin", code="ZZ00000001", amount="1")
    indexed = test_spl.substance(part, test_spl.coded("Stereochemistry", "ABSOLUTE"))
    label = (
        f"<paragraph>{NAME} <content styleCode='italics'>R</content><footnote>f</footnote></paragraph>"
        "<table><tr><td rowspan='2'>a</td><td>b</td></tr><tr><td>c</td></tr></table><list><item>x</item></list>"
    )
    return [
        ("a.xml", test_spl.document(indexed)),
        ("a.xml", test_spl.document(test_spl.description(label))),
    ]


def fhir() -> Seeds:
    bundle = {"resourceType": "Bundle", "entry": [{"resource": test_fhir.WHOLE}]}
    return [("a.json", json.dumps(bundle).encode()), test_fhir.as_xml(test_fhir.WHOLE)]


def gsrs() -> Seeds:
    record = json.dumps(test_gsrs.WHOLE).encode()
    return [("a.json", record), ("a.jsonl", record + b"\n" + record + b"\n")]


def ectd() -> Seeds:
    """Under the name that `readers` do not answer for: the fuzz target reads it as an index."""
    leaves = [
        sequence.leaf("m3/a.txt", "x", title="Structure"),
        sequence.leaf("m3/b.txt", "y", operation="replace", modified_file="../0000/index.xml#i1"),
    ]
    return [("index.xml", sequence.index(*leaves).encode())]


def html() -> Seeds:
    page = (
        "<!DOCTYPE html><html><head><meta charset='utf-8'><style>.h,p.x>b{display:none}</style></head>"
        f"<body><h1>3.2.S.1 General</h1><p>(2<i>S</i>)-x H<sub>2</sub>O {NAME}&nbsp;&alpha;</p>"
        "<table><tr><th colspan=2>Code<td rowspan=0>b<tr><td>ZZ-1<td><table><tr><td>y</table></table>"
        "<dl><dt>Name<dd>z</dl><p class=h>no<p style='display:none'>no<select><option selected>o</select>"
        "<img alt=a><svg><text>t</text></svg><del>old</del></body></html>"
    )
    return [("a.html", page.encode()), ("a.xhtml", page.encode("cp1252", "replace"))]


def svg() -> Seeds:
    drawn = (
        "<svg xmlns='http://www.w3.org/2000/svg' width='100'><style>.a{visibility:hidden}</style>"
        "<g transform='scale(2)'><text x='1' y='2'>(2<tspan font-style='italic'>S</tspan>)-x</text></g>"
        "<text class='a'>no</text><title>t</title><path d='M0 0L9 9'/><use href='#a'/></svg>"
    )
    return [("a.svg", drawn.encode())]


def xml() -> Seeds:
    known = (
        "<?xml version='1.0' encoding='utf-8'?><!DOCTYPE article SYSTEM 'a.dtd'><article id='1'>"
        f"<p>{NAME}, (2<i>S</i>)-<sub>x</sub> <odd>m</odd>&#945;</p><p>plain</p><!-- c --><![CDATA[<raw>]]></article>"
    )
    return [("a.xml", known.encode()), ("a.xml", known.replace("utf-8", "utf-16").encode("utf-16"))]


_FILES = {"a.txt": NAME.encode(), "m3/b.csv": b"Code,Name\nZZ-1,x\n", "c/": b""}


def zip_archives() -> Seeds:
    return [("a.zip", archived.zipped({**_FILES, "d.zip": archived.zipped(_FILES)}))]


def tar_archives() -> Seeds:
    return [
        ("a.tar", archived.tarred(_FILES)),
        ("a.tgz", archived.tarred(_FILES, "w:gz")),
        ("a.txz", archived.tarred(_FILES, "w:xz")),
        ("a.tar.bz2", archived.tarred({"x" * 200: b"y", **_FILES}, "w:bz2")),
    ]


SEEDS: Mapping[str, Callable[[], Seeds]] = {
    "delimited": delimited,
    "molfile": molfile,
    "text": text,
    "word": word,
    "workbook": workbook,
    "pdf": pdf,
    "cif": cif,
    "spl": spl,
    "fhir": fhir,
    "gsrs": gsrs,
    "ectd": ectd,
    "html": html,
    "svg": svg,
    "xml": xml,
    "zip": zip_archives,
    "tar": tar_archives,
}
