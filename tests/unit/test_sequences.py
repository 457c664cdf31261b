"""What index.xml and the regional XML say of the files, held against the files.

The form of the XML follows the ICH eCTD DTD 3.2, which is not in the project; where it lies in
the shared folder, every heading element of it is tried.
"""

from __future__ import annotations

import re
from pathlib import Path

import pytest
from lxml import etree

from dossiercheck import pipeline
from dossiercheck.limits import parse_xml
from dossiercheck.sequences import resolve, section_of
from tests.unit.archived import zipped
from tests.unit.sequence import (
    BOOK,
    SETTINGS,
    cycle_of,
    findings,
    index,
    laid,
    leaf,
    md5,
    said,
)

DTD = Path("/work/shared/external/ectd/ich-ectd-3-2.dtd")
NAME = "m3/32-body-data/structure.txt"
TEXT = "Compound: A\nSMILES: C[C@@H](N)C(O)=O\n"
SOUND = {"0000/index.xml": index(leaf(NAME, TEXT)), f"0000/{NAME}": TEXT}


@pytest.mark.parametrize(
    ("tag", "section"),
    [
        ("m3-2-s-1-2-structure", "3.2.S.1.2"),
        ("m3-2-s-drug-substance", "3.2.S"),
        ("m3-2-p-5-6-justification-of-specifications", "3.2.P.5.6"),
        ("m3-2-a-3-excipients", "3.2.A.3"),
        ("m3-2-r-regional-information", "3.2.R"),
        ("m2-7-3-summary-of-clinical-efficacy", "2.7.3"),
        ("m2-3-s-drug-substance", "2.3.S"),
        ("m3-quality", "3"),
        ("m1-14-1-3-draft-labeling-text", "1.14.1.3"),
        ("node-extension", ""),
        ("leaf", ""),
        ("m6-other", ""),
    ],
)
def test_sections_of_headings(tag: str, section: str) -> None:
    """Section numbers of ICH M4, as the element names of the DTD spell them."""
    assert section_of(tag) == section


@pytest.mark.skipif(not DTD.exists(), reason="the ICH DTD is not at hand")
def test_every_heading_of_the_dtd_has_a_section() -> None:
    tags = re.findall(r"<!ELEMENT (m\d[\w-]*)", DTD.read_text(encoding="utf-8"))
    assert len(tags) > 100
    for tag in tags:
        words = tag.split("-")
        number = [words[0][1:]]
        for at, word in enumerate(words[1:], 1):
            letter = word in "spar" and number in (["3", "2"], ["2", "3"])
            if not (word.isdigit() or (letter and at == 2)):
                break
            number.append(word.upper())
        assert section_of(tag) == ".".join(number), tag


@pytest.mark.skipif(not DTD.exists(), reason="the ICH DTD is not at hand")
def test_the_indexes_of_these_tests_are_such_as_the_dtd_allows() -> None:
    made = index(
        leaf(NAME, TEXT),
        leaf("m3/b.txt", TEXT, operation="replace", modified_file="../0000/index.xml#a"),
        m1=leaf("m1/xx/xx-regional.xml", TEXT),
    )
    with DTD.open("rb") as stream:
        dtd = etree.DTD(stream)
    assert dtd.validate(parse_xml(made.encode(), doctype=True)), dtd.error_log


def test_paths_are_names_and_nothing_else() -> None:
    assert resolve("s/0001/index.xml", "m3/a.pdf") == "s/0001/m3/a.pdf"
    assert resolve("s/0001/index.xml", "../0000/index.xml#x") == "s/0000/index.xml"
    assert resolve("s/0001/m1/us/us-regional.xml", "../../m1/us/b.pdf") == "s/0001/m1/us/b.pdf"
    assert resolve("index.xml", "../0000/index.xml#x") == "../0000/index.xml"
    for outside in ("/etc/passwd", "file:///etc/passwd", "http://x.invalid/a", "C:\\a", "\\\\h\\a"):
        assert resolve("0000/index.xml", outside) == ""
    assert resolve("0000/index.xml", "") == ""


def test_a_sound_sequence_gives_nothing(tmp_path: Path) -> None:
    files = {
        **SOUND,
        "0000/index-md5.txt": md5(SOUND["0000/index.xml"]),
        "0000/util/dtd/ich-ectd-3-2.dtd": "<!ELEMENT title (#PCDATA)>",
        "0000/util/style/ectd-2-0.xsl": "<x/>",
    }
    review = pipeline.review([laid(tmp_path, files)], SETTINGS, BOOK)
    assert said(review) == []
    assert review.unread == ()
    assert len(review.sources) == 5
    (one,) = cycle_of(tmp_path).submission.leaves
    assert (one.section, one.title, one.operation) == ("3.2.S.1.2", "A document", "new")
    assert (one.file, one.checksum) == (f"0000/{NAME}", md5(TEXT))


def test_evidence_stands_in_the_section_of_its_leaf(tmp_path: Path) -> None:
    review = pipeline.review([laid(tmp_path, SOUND)], SETTINGS, BOOK)
    places = [said.place for entry in review.substances for said in entry.evidence]
    assert places
    assert {place.section for place in places} == {"3.2.S.1.2"}


def test_a_checksum_that_differs(tmp_path: Path) -> None:
    laid(tmp_path, {**SOUND, f"0000/{NAME}": TEXT + "\n"})
    ((rule, message),) = findings(tmp_path)
    assert rule == "leaf-checksum-differs"
    assert md5(TEXT) in message
    assert md5(TEXT + "\n") in message


def test_the_index_is_held_against_its_own_checksum(tmp_path: Path) -> None:
    laid(tmp_path, {**SOUND, "0000/index-md5.txt": md5("another")})
    assert [rule for rule, _ in findings(tmp_path)] == ["leaf-checksum-differs"]
    laid(tmp_path, {"0000/index-md5.txt": "see the cover letter"})
    assert findings(tmp_path) == []
    assert [one.reason for one in cycle_of(tmp_path).unread] == ["no-checksum"]


@pytest.mark.parametrize(
    ("attributes", "reason"),
    [({"checksum_type": "sha-999"}, "checksum-type"), ({"checksum": ""}, "no-checksum")],
)
def test_a_checksum_that_cannot_be_compared_is_unread(
    attributes: dict[str, str], reason: str, tmp_path: Path
) -> None:
    laid(tmp_path, {**SOUND, "0000/index.xml": index(leaf(NAME, TEXT, **attributes))})
    assert findings(tmp_path) == []
    assert [one.reason for one in cycle_of(tmp_path).unread] == [reason]


@pytest.mark.parametrize(
    ("href", "says"),
    [
        ("m3/nothing.txt", "there is no file"),
        (NAME.upper(), "in capitals only"),
        ("", "it names no file"),
        ("file:///etc/passwd", "no path within the dossier"),
        ("/etc/passwd", "no path within the dossier"),
        ("http://x.invalid/a.txt", "no path within the dossier"),
    ],
)
def test_a_leaf_without_its_file(href: str, says: str, tmp_path: Path) -> None:
    laid(tmp_path, {**SOUND, "0000/index.xml": index(leaf(NAME, TEXT), leaf(href))})
    ((rule, message),) = findings(tmp_path)
    assert rule == "leaf-file-missing"
    assert says in message


def test_a_file_in_a_sequence_that_was_not_given_is_unread(tmp_path: Path) -> None:
    """An application may refer to files of its earlier sequences; they need not be at hand."""
    for climbing in ("../0009/m3/a.txt", "../../../../etc/passwd"):
        laid(tmp_path, {**SOUND, "0000/index.xml": index(leaf(NAME, TEXT), leaf(climbing))})
        assert findings(tmp_path) == []
        assert [one.reason for one in cycle_of(tmp_path).unread] == ["file-not-given"]


def test_a_file_that_is_there_and_unread_is_not_missing(tmp_path: Path) -> None:
    laid(tmp_path, SOUND)
    (tmp_path / "0000" / NAME).unlink()
    (tmp_path / "0000" / NAME).symlink_to("/etc/passwd")
    assert findings(tmp_path) == []


def test_a_path_written_with_percent_signs(tmp_path: Path) -> None:
    files = {"0000/m3/a b%20c.txt": TEXT, "0000/m3/d e.txt": TEXT}
    made = index(leaf("m3/a%20b%2520c.txt", TEXT), leaf("m3/d%20e.txt", TEXT))
    assert findings(laid(tmp_path, {**files, "0000/index.xml": made})) == []


def test_files_in_no_leaf(tmp_path: Path) -> None:
    extra = {"0000/m3/draft.txt": TEXT, "0000/util/note.txt": TEXT, "beside.txt": TEXT}
    assert findings(laid(tmp_path, {**SOUND, **extra})) == [
        ("file-in-no-leaf", "No leaf leads to the file m3/draft.txt of sequence 0000."),
        ("file-in-no-leaf", "No leaf leads to the file util/note.txt of sequence 0000."),
    ]


def test_a_sequence_at_the_top_of_what_was_given(tmp_path: Path) -> None:
    files = {name.removeprefix("0000/"): text for name, text in SOUND.items()}
    assert findings(laid(tmp_path, {**files, "m3/draft.txt": TEXT})) == [
        ("file-in-no-leaf", "No leaf leads to the file m3/draft.txt of sequence given.")
    ]


def test_the_leaves_of_regional_xml(tmp_path: Path) -> None:
    """A regional module has a root and headings of its own and the same leaves."""
    regional = (
        '<r:regional xmlns:r="urn:invented" xmlns:xlink="http://www.w3c.org/1999/xlink"><m1>'
        f"<m1-2-cover-letters>{leaf('cover.txt', TEXT)}</m1-2-cover-letters></m1></r:regional>"
    )
    files = {
        **SOUND,
        "0000/index.xml": index(leaf(NAME, TEXT), m1=leaf("m1/xx/xx-regional.xml", regional)),
        "0000/m1/xx/xx-regional.xml": regional,
        "0000/m1/xx/cover.txt": TEXT,
        "0000/m1/xx/forgotten.txt": TEXT,
    }
    assert [message for _, message in findings(laid(tmp_path, files))] == [
        "No leaf leads to the file m1/xx/forgotten.txt of sequence 0000."
    ]
    leaves = cycle_of(tmp_path).submission.leaves
    assert [one.section for one in leaves] == ["1", "3.2.S.1.2", "1.2"]
    laid(tmp_path, {"0000/m1/xx/cover.txt": "changed"})
    assert "leaf-checksum-differs" in [rule for rule, _ in findings(tmp_path)]


def test_a_study_tagging_file_is_no_document(tmp_path: Path) -> None:
    study = '<ectd:study xmlns:ectd="http://www.ich.org/ectd"><study-document/></ectd:study>'
    made = index(leaf(NAME, TEXT), leaf("m4/stf-1.xml", study))
    laid(tmp_path, {**SOUND, "0000/index.xml": made, "0000/m4/stf-1.xml": study})
    review = pipeline.review([tmp_path], SETTINGS, BOOK)
    assert (said(review), review.unread) == ([], ())


def test_a_sequence_in_an_archive(tmp_path: Path) -> None:
    files = {name: text.encode() for name, text in SOUND.items()}
    extra = {f"0000/{NAME}": b"changed", "0000/m3/draft.txt": b"draft"}
    (tmp_path / "sub.zip").write_bytes(zipped({**files, **extra}))
    assert [rule for rule, _ in findings(tmp_path)] == ["file-in-no-leaf", "leaf-checksum-differs"]


def test_the_members_of_an_archive_go_with_its_leaf(tmp_path: Path) -> None:
    data = zipped({"a.txt": b"one", "b.txt": b"two"})
    made = index(leaf(NAME, TEXT), leaf("m5/data.zip", data))
    laid(tmp_path, {**SOUND, "0000/index.xml": made, "0000/m5/data.zip": data})
    assert findings(tmp_path) == []


HOSTILE = [
    pytest.param(
        index(doctype='<!DOCTYPE e [<!ENTITY x SYSTEM "file:///etc/passwd">]>').replace(
            "</ectd:ectd>", "&x;</ectd:ectd>"
        ),
        "entities",
        id="external entity",
    ),
    pytest.param(
        index(doctype='<!DOCTYPE e [<!ENTITY % x SYSTEM "http://x.invalid/"> %x;]>'),
        "entities",
        id="parameter entity",
    ),
    pytest.param(index(leaf("a" * 20_000_000)), "damaged-xml", id="gigantic attribute"),
    pytest.param(index("<node-extension>" * 5000), "damaged-xml", id="deep nesting"),
    pytest.param(index()[:300], "damaged-xml", id="truncated"),
    pytest.param("", "damaged-xml", id="empty"),
]


@pytest.mark.parametrize(("made", "reason"), HOSTILE)
def test_an_index_that_cannot_be_read_is_unread(made: str, reason: str, tmp_path: Path) -> None:
    review = pipeline.review([laid(tmp_path, {**SOUND, "0000/index.xml": made})], SETTINGS, BOOK)
    (unread,) = review.unread
    assert (unread.reason, unread.place.source) == (reason, "0000/index.xml")
    assert "not held against it" in unread.detail
    assert said(review) == []
    assert review.substances  # the documents are read all the same


def test_nothing_is_loaded_from_a_doctype(tmp_path: Path) -> None:
    """The definition named is one that would give the leaf a path and turn its title."""
    made = index(leaf(NAME, TEXT).replace(f'xlink:href="{NAME}"', ""))
    dtd = f'<!ATTLIST leaf xlink:href CDATA "{NAME}">'
    laid(tmp_path, {**SOUND, "0000/index.xml": made, "0000/util/dtd/ich-ectd-3-2.dtd": dtd})
    assert [rule for rule, _ in findings(tmp_path)] == ["file-in-no-leaf", "leaf-file-missing"]


def test_an_xml_called_index_that_is_no_index(tmp_path: Path) -> None:
    laid(tmp_path, {"a/index.xml": "<catalogue/>", "a/x.txt": TEXT})
    assert cycle_of(tmp_path).submission.sequences == ()
    assert findings(tmp_path) == []
