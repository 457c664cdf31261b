"""Bad input beside good: a clear unread entry, the rest still checked, nothing lost."""

from __future__ import annotations

import os
import signal
import threading
import time
from pathlib import Path

import pytest

from dossiercheck import pipeline, rulebook, work
from dossiercheck.find import Found
from dossiercheck.model import Place, Review, Unread
from dossiercheck.names.parser import NameParser
from dossiercheck.settings import Settings
from tests.unit.stereo.forms import v2000

BOOK = rulebook.load(Settings())
ALANINE = v2000("C[C@H](N)C(=O)O")
CONFIGURATION = "name-and-drawing/configuration-differs"


def record(label: str, name: str, block: str = ALANINE) -> str:
    return f"{block}> <Label>\n{label}\n\n> <IUPAC name>\n{name}\n\n$$$$\n"


TURNED = record("Compound T", "(2R)-2-aminopropanoic acid")
SOUND = record("Compound S", "(2S)-2-aminopropanoic acid")


@pytest.fixture
def dossier(tmp_path: Path) -> Path:
    """A folder with one planted error and one sound record, both to be checked in any company."""
    (tmp_path / "good.sdf").write_text(TURNED + SOUND, encoding="utf-8")
    return tmp_path


def reviewed(folder: Path, jobs: int = 1) -> Review:
    return pipeline.review([folder], Settings(jobs=jobs), BOOK)


def unread_of(review: Review, name: str) -> list[Unread]:
    return [entry for entry in review.unread if entry.place.source == name]


def rest_is_checked(review: Review) -> bool:
    found = [f for f in review.findings if f.exhibits[0].place.source == "good.sdf"]
    return [f.rule for f in found] == [CONFIGURATION] and not unread_of(review, "good.sdf")


def ole(_: None = None) -> bytes:
    """The head of an encrypted workbook: an OLE container with a stream of that name."""
    name = "EncryptedPackage".encode("utf-16-le")
    return b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + b"\0" * 504 + name + b"\0" * 2000


FILES: dict[str, bytes] = {
    "empty.sdf": b"",
    "empty.csv": b"",
    "empty.docx": b"",
    "empty.xlsx": b"",
    "empty.txt": b"",
    "blank.txt": b"\n \n\t\n",
    "picture.sdf": b"\x89PNG\r\n\x1a\n" + bytes(range(256)) * 10,
    "picture.docx": b"\x89PNG\r\n\x1a\n" + bytes(range(256)) * 10,
    "text.xlsx": b"Label,Name\nX,ethanol\n",
    "cut.docx": b"PK\x03\x04" + b"\0" * 40,
    "locked.xlsx": ole(),
    "locked.docx": ole(),
    "unknown.bin": b"\0\1\2\3",
    "scan.tiff": b"II*\0" + b"\0" * 100,
    "quote.csv": b'Label,IUPAC name\nX,"(2R)-2-aminopropanoic acid\nY,ethanol\n',
}
NAMES = [
    "(2R)-2-aminopropanoic acid" * 400,
    "poly" * 2500,
    "(" * 5000 + ")" * 5000,
    "etha\tnol",
    "etha\x07nol",
    "2-amino\u2028propanoic acid",
    "етанол",
    "🧪",
    "no name of anything",
]
KEPT = (0.3, 0.5, 0.8, 0.97)
FIRST = record("Compound A", "(2S)-2-aminopropanoic acid")
SECOND = record("Compound B", "(2R)-2-aminopropanoic acid")
BAD = record("Compound B", "(2R)-2-aminopropanoic acid", ALANINE.replace("  2  1", " 66  1"))


@pytest.fixture(scope="module")
def crowd(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """All of it in one folder, with the good file in its midst."""
    folder = tmp_path_factory.mktemp("crowd")
    (folder / "good.sdf").write_text(TURNED + SOUND, encoding="utf-8")
    for name, data in FILES.items():
        (folder / name).write_bytes(data)
    for keep in KEPT:
        text = FIRST + SECOND[: int(len(SECOND) * keep)]
        (folder / f"cut-{keep}.sdf").write_text(text, encoding="utf-8")
    (folder / "three.sdf").write_text(SECOND + BAD + SECOND, encoding="utf-8")
    for number, name in enumerate(NAMES):
        (folder / f"name-{number}.sdf").write_text(record(f"Odd {number}", name), "utf-8")
    # The parser drops a NUL, so that "etha<NUL>nol" would pass for ethanol.
    (folder / "nul.sdf").write_bytes(record("Odd", "etha\0nol", v2000("CCO")).encode())
    (folder / "long.txt").write_text("IUPAC name: " + "methyl" * 170_000, encoding="utf-8")
    (folder / "long.csv").write_text(f"IUPAC name,Label\n{'x' * 1_000_000},Z\n", "utf-8")
    return folder


@pytest.fixture(scope="module")
def review(crowd: Path) -> Review:
    return reviewed(crowd)


def test_the_good_file_is_checked_in_any_company(review: Review, crowd: Path) -> None:
    assert rest_is_checked(review)
    assert {source.path for source in review.sources} == {file.name for file in crowd.iterdir()}


@pytest.mark.parametrize("name", [*FILES, "nul.sdf", "long.txt", "long.csv"])
def test_a_file_that_is_not_what_it_says(review: Review, name: str) -> None:
    entries = unread_of(review, name)
    assert entries
    assert all(len(entry.detail) > 8 and entry.reason for entry in entries)


@pytest.mark.parametrize("keep", KEPT)
def test_an_sdf_cut_off_in_the_middle(review: Review, keep: float) -> None:
    name = f"cut-{keep}.sdf"
    whole = [s for s in review.substances if s.evidence[0].place == Place(name, record=1)]
    assert whole or any(said.place.source == name for s in review.substances for said in s.evidence)
    # The second record is unread, or whatever of it was whole was checked: never passed over.
    checked = [f for f in review.findings if any(e.place.source == name for e in f.exhibits)]
    assert unread_of(review, name) or checked


def test_a_bad_record_between_good_ones(review: Review) -> None:
    (entry,) = unread_of(review, "three.sdf")
    assert entry.place.record == 2
    turned = {
        exhibit.place.record
        for finding in review.findings
        if finding.rule == CONFIGURATION
        for exhibit in finding.exhibits
        if exhibit.place.source == "three.sdf"
    }
    assert {1, 3} <= turned


@pytest.mark.parametrize("number", range(len(NAMES)))
def test_a_name_that_is_none(review: Review, number: int) -> None:
    (entry,) = unread_of(review, f"name-{number}.sdf")
    assert entry.reason == "name-not-interpretable"
    assert len(entry.detail) > 8
    assert entry.place.field == "IUPAC name"


def test_two_processes_say_exactly_the_same(review: Review, crowd: Path) -> None:
    assert reviewed(crowd, jobs=2) == review


def test_a_file_that_may_not_be_read(dossier: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    (dossier / "shut.txt").write_text("Name: ethanol", encoding="utf-8")
    plain = Found.read

    def refusing(found: Found) -> bytes:
        if found.path.name == "shut.txt":
            raise PermissionError(13, "Permission denied")
        return plain(found)

    monkeypatch.setattr(Found, "read", refusing)
    review = reviewed(dossier)
    (entry,) = unread_of(review, "shut.txt")
    assert (entry.reason, entry.detail) == ("cannot-open", "Permission denied")
    assert rest_is_checked(review)


def test_a_reader_that_breaks_down(dossier: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    (dossier / "odd.xyz").write_text("?", encoding="utf-8")
    plain = pipeline.reader_for

    def reader_for(name: str, head: bytes) -> object:
        def broken(source: object, data: bytes) -> object:
            raise ZeroDivisionError("in the reader")

        return broken if name == "odd.xyz" else plain(name, head)

    monkeypatch.setattr(pipeline, "reader_for", reader_for)
    review = reviewed(dossier)
    (entry,) = unread_of(review, "odd.xyz")
    assert entry.reason == "reader-failed"
    assert "ZeroDivisionError" in entry.detail
    assert rest_is_checked(review)


def test_the_name_parser_killed_again_and_again(dossier: Path) -> None:
    """The child process is killed from outside while it works; every name is still answered."""
    names = [f"(2{'R' if n % 2 else 'S'})-2-amino-{n + 4}-methyl{STEMS[n % 5]}" for n in range(400)]
    text = "Label,IUPAC name\n" + "".join(f"N{n},{name}\n" for n, name in enumerate(names))
    (dossier / "many.csv").write_text(text, encoding="utf-8")
    expected = reviewed(dossier)
    killed: list[int] = []
    done = threading.Event()

    def kill() -> None:
        while not done.is_set() and len(killed) < 2:
            parser: NameParser | None = work._State.parser
            pid = parser.pid if parser else None
            if pid and pid not in killed:
                time.sleep(0.1)
                os.kill(pid, signal.SIGKILL)
                killed.append(pid)
            time.sleep(0.005)

    killer = threading.Thread(target=kill)
    killer.start()
    try:
        review = reviewed(dossier)
    finally:
        done.set()
        killer.join()
    assert killed
    assert review == expected


STEMS = ["decanoic acid", "undecanoic acid", "dodecanoic acid", "nonanoic acid", "octanoic acid"]
