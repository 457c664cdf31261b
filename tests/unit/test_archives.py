"""Archives walked like folders: their members are sources, and what is not opened says why."""

from __future__ import annotations

import hashlib
import io
import pickle
import random
import stat
import struct
import tarfile
import tracemalloc
import zipfile
from pathlib import Path

import pytest

from dossiercheck import pipeline, rulebook
from dossiercheck.find import Found, find
from dossiercheck.limits import Limits
from dossiercheck.model import Unread
from dossiercheck.settings import Settings
from dossiercheck.shelf import Shelf, archive_kind
from tests.unit.archived import entry, overlapping, tar_of, tarred, with_header, zipped

FILES = {"b.txt": b"second", "a/x.txt": b"first", "a/.DS_Store": b"hidden"}
WRITERS = {
    "d.zip": lambda files: zipped(files),
    "d.tar": lambda files: tarred(files),
    "d.tar.gz": lambda files: tarred(files, "w:gz"),
    "d.TGZ": lambda files: tarred(files, "w:gz"),
    "d.tar.bz2": lambda files: tarred(files, "w:bz2"),
    "d.tar.xz": lambda files: tarred(files, "w:xz"),
}


def walk(tmp_path: Path, name: str, data: bytes, limits: Limits | None = None) -> dict[str, str]:
    """What the file is found to hold: name -> content, or the reason in brackets."""
    path = tmp_path / name
    path.write_bytes(data)
    seen: dict[str, str] = {}
    with Shelf(limits or Limits()) as shelf:
        for one in list(find([path], shelf)):
            if isinstance(one, Unread):
                key = one.place.source
                while key in seen:
                    key += "+"
                seen[key] = f"[{one.reason}]"
            else:
                seen[one.source.path] = "" if one.archive else one.read().decode()
    return seen


@pytest.mark.parametrize("name", WRITERS)
def test_members_are_sources_in_the_order_of_their_names(name: str, tmp_path: Path) -> None:
    seen = walk(tmp_path, name, WRITERS[name](FILES))
    assert list(seen.items()) == [
        (name, ""),
        (f"{name}/a/x.txt", "first"),
        (f"{name}/b.txt", "second"),
    ]


def test_a_member_has_its_hash_size_and_format(tmp_path: Path) -> None:
    (tmp_path / "d.zip").write_bytes(zipped({"a/B.SDF": b"12345"}))
    _, member = find([tmp_path / "d.zip"])
    assert isinstance(member, Found)
    assert member.source.sha256 == hashlib.sha256(b"12345").hexdigest()
    assert (member.source.size, member.source.format) == (5, "sdf")


def test_an_archive_in_an_archive(tmp_path: Path) -> None:
    inner = tarred({"c.txt": b"deep"}, "w:gz")
    seen = walk(tmp_path, "d.zip", zipped({"z.txt": b"last", "m/in.tar.gz": inner}))
    assert list(seen.items()) == [
        ("d.zip", ""),
        ("d.zip/m/in.tar.gz", ""),
        ("d.zip/m/in.tar.gz/c.txt", "deep"),
        ("d.zip/z.txt", "last"),
    ]


def test_office_documents_stay_one_source(tmp_path: Path) -> None:
    package = zipped({"[Content_Types].xml": b"<Types/>", "word/document.xml": b"<d/>"})
    (tmp_path / "a.docx").write_bytes(package)
    (found,) = find([tmp_path / "a.docx"])
    assert isinstance(found, Found)
    assert not found.archive
    assert archive_kind("a.xlsx") == ""
    assert walk(tmp_path, "a.zip", package)["a.zip+"] == "[content-mismatch]"


def test_fifty_archives_in_each_other_end_at_the_depth_allowed(tmp_path: Path) -> None:
    data = zipped({"a.txt": b"bottom"})
    for _ in range(49):
        data = zipped({"n.zip": data})
    seen = walk(tmp_path, "n.zip", data)
    assert len(seen) == 7  # five opened, the sixth listed and refused
    assert list(seen.values())[-1] == "[nesting-depth]"


@pytest.mark.parametrize(
    "name",
    ["../up.txt", "/etc/passwd", "C:/a.txt", "a/../../b.txt", "..\\up.txt", "\\\\host\\a.txt"],
)
def test_a_path_that_leads_out_is_not_opened(name: str, tmp_path: Path) -> None:
    for kind, data in (
        ("d.zip", zipped({name: b"x", "good.txt": b"y"})),
        ("d.tar", tarred({name: b"x", "good.txt": b"y"})),
    ):
        seen = walk(tmp_path, kind, data)
        assert sorted(seen.values()) == ["", "[unsafe-path]", "y"]
        assert not (tmp_path.parent / "up.txt").exists()


def test_a_member_without_a_name_is_not_opened(tmp_path: Path) -> None:
    """zipfile of Python 3.11 raises IndexError on one (found by mutation)."""
    for kind, data in (("d.zip", zipped({"": b"x", "a": b"y"})), ("d.tar", tarred({".": b"x"}))):
        assert walk(tmp_path, kind, data)[f"{kind}/"] == "[unsafe-path]"


def test_links_and_devices_are_not_opened(tmp_path: Path) -> None:
    data = tar_of(
        [
            (entry("link", type=tarfile.SYMTYPE, linkname="../../secret"), b""),
            (entry("hard", type=tarfile.LNKTYPE, linkname="a.txt"), b""),
            (entry("device", type=tarfile.CHRTYPE, devmajor=1, devminor=5), b""),
            (entry("disk", type=tarfile.BLKTYPE, devmajor=8), b""),
            (entry("pipe", type=tarfile.FIFOTYPE), b""),
            (entry("folder", type=tarfile.DIRTYPE), b""),
            (entry("a.txt", b"read"), b"read"),
        ]
    )
    assert walk(tmp_path, "d.tar", data) == {
        "d.tar": "",
        "d.tar/a.txt": "read",
        "d.tar/device": "[not-a-file]",
        "d.tar/disk": "[not-a-file]",
        "d.tar/hard": "[link]",
        "d.tar/link": "[link]",
        "d.tar/pipe": "[not-a-file]",
    }


def test_a_member_below_a_link_does_not_follow_it(tmp_path: Path) -> None:
    (tmp_path / "secret").mkdir()
    data = tar_of(
        [
            (entry("out", type=tarfile.SYMTYPE, linkname="secret"), b""),
            (entry("out/a.txt", b"planted"), b"planted"),
        ]
    )
    assert walk(tmp_path, "d.tar", data)["d.tar/out"] == "[link]"
    assert list((tmp_path / "secret").iterdir()) == []


def test_links_in_a_zip_are_not_opened(tmp_path: Path) -> None:
    stream = io.BytesIO()
    with zipfile.ZipFile(stream, "w") as made:
        for name, kind in (("link", stat.S_IFLNK), ("pipe", stat.S_IFIFO), ("file", stat.S_IFREG)):
            info = zipfile.ZipInfo(name)
            info.external_attr = (kind | 0o644) << 16
            made.writestr(info, "/etc/passwd")
    assert list(walk(tmp_path, "d.zip", stream.getvalue()).values()) == [
        "",
        "/etc/passwd",
        "[link]",
        "[not-a-file]",
    ]


@pytest.mark.filterwarnings("ignore:Duplicate name")
def test_a_name_listed_twice_is_not_opened(tmp_path: Path) -> None:
    stream = io.BytesIO()
    with zipfile.ZipFile(stream, "w") as made:
        for name, text in (("a.txt", "1"), ("./a.txt", "2"), ("b.txt", "3"), ("B.txt", "4")):
            made.writestr(name, text)
    assert walk(tmp_path, "d.zip", stream.getvalue()) == {
        "d.zip": "",
        "d.zip/B.txt": "4",
        "d.zip/a.txt": "[duplicate-member]",
        "d.zip/b.txt": "3",
    }
    twice = tar_of([(entry("a.txt", b"1"), b"1"), (entry("a.txt", b"2"), b"2")])
    assert walk(tmp_path, "d.tar", twice)["d.tar/a.txt"] == "[duplicate-member]"


def test_an_encrypted_member_leaves_the_others_readable(tmp_path: Path) -> None:
    data = bytearray(zipped({"a.txt": b"1", "b.txt": b"2"}))
    directory = data.index(b"PK\1\2")
    data[6] |= 1
    data[directory + 8] |= 1
    assert list(walk(tmp_path, "d.zip", bytes(data)).values()) == ["", "[encrypted]", "2"]


def test_a_compression_that_is_not_read(tmp_path: Path) -> None:
    data = bytearray(zipped({"a.txt": b"1" * 99}))
    directory = data.index(b"PK\1\2")
    struct.pack_into("<H", data, 8, 9)  # Deflate64, APPNOTE 6.3, 4.4.5
    struct.pack_into("<H", data, directory + 10, 9)
    assert walk(tmp_path, "d.zip", bytes(data))["d.zip/a.txt"] == "[unsupported-compression]"


def test_a_member_that_inflates_without_end(tmp_path: Path) -> None:
    bomb = zipped({"a.txt": bytes(30 << 20), "b.txt": b"sound"})
    assert list(walk(tmp_path, "d.zip", bomb).values()) == ["", "[inflation-ratio]", "sound"]


def test_a_directory_that_lies_about_sizes(tmp_path: Path) -> None:
    bomb = bytearray(zipped({"a.txt": bytes(30 << 20)}))
    directory = bomb.index(b"PK\1\2")
    for at in (22, directory + 24):
        struct.pack_into("<L", bomb, at, 10)
    (_, outcome) = walk(tmp_path, "d.zip", bytes(bomb)).values()
    assert outcome in ("[damaged-archive]", "[inflation-ratio]")


def test_members_on_the_same_bytes_are_not_opened(tmp_path: Path) -> None:
    seen = walk(tmp_path, "d.zip", overlapping(b"text " * 100, 5))
    assert set(list(seen.values())[1:]) == {"[overlapping-members]"}


SMALL = Limits(unpacked_floor=10_000, ratio=2, entries=50)


def test_bombs_in_bombs_share_one_budget(tmp_path: Path) -> None:
    noise = random.Random(1).randbytes(3000)
    layer = zipped({f"{n}.bin": noise for n in range(9)})
    # Each layer alone is within the ratio; what all together come to is not.
    nested = zipped({f"{n}.zip": layer for n in range(4)})
    seen = walk_reasons(tmp_path, "d.zip", nested, Limits(unpacked_floor=60_000, ratio=1))
    assert seen[-2:] == ["size-budget", "size-budget"]
    assert 10 < len(seen) < 36


def walk_reasons(tmp_path: Path, name: str, data: bytes, limits: Limits) -> list[str]:
    (tmp_path / name).write_bytes(data)
    with Shelf(limits) as shelf:
        return [
            one.reason if isinstance(one, Unread) else "" for one in find([tmp_path / name], shelf)
        ]


def test_too_many_members(tmp_path: Path) -> None:
    many = {f"{n}.txt": b"" for n in range(60)}
    for name, data in (("d.zip", zipped(many)), ("d.tar", tarred(many))):
        assert walk_reasons(tmp_path, name, data, SMALL)[1:] == ["too-many-members"]
    inner = zipped({f"{n}.txt": b"x" for n in range(30)})
    seen = walk_reasons(tmp_path, "d.zip", zipped({"1.zip": inner, "2.zip": inner}), SMALL)
    assert seen[-1] == "size-budget"
    assert len(seen) == 1 + 50 + 1


@pytest.mark.parametrize("name", ["d.tar.gz", "d.tar.bz2", "d.tar.xz"])
def test_a_compressed_tar_that_inflates_without_end(name: str, tmp_path: Path) -> None:
    bomb = WRITERS[name]({"a.txt": bytes(3 << 20)})
    assert walk_reasons(tmp_path, name, bomb, SMALL)[1:] == ["size-budget"]


@pytest.mark.parametrize("name", WRITERS)
@pytest.mark.parametrize("share", [0.1, 0.5, 0.8])
def test_a_truncated_archive_says_so(name: str, share: float, tmp_path: Path) -> None:
    noise = random.Random(2).randbytes(30_000)
    data = WRITERS[name]({"a.txt": noise[:100], "b.bin": noise, "c.bin": noise})
    (tmp_path / name).write_bytes(data[: int(len(data) * share)])
    found = list(find([tmp_path / name]))
    assert [one.reason for one in found if isinstance(one, Unread)].count("damaged-archive") >= 1


@pytest.mark.parametrize("name", WRITERS)
def test_archives_that_are_none(name: str, tmp_path: Path) -> None:
    assert walk(tmp_path, name, b"")[f"{name}+"] == "[empty]"
    text = b"This is a text, and a long one. " * 100
    assert walk(tmp_path, name, text)[f"{name}+"] in ("[content-mismatch]", "[damaged-archive]")
    assert walk(tmp_path, name, b"%PDF-1.7\n")[f"{name}+"] in (
        "[content-mismatch]",
        "[damaged-archive]",
    )
    assert walk(tmp_path, name, WRITERS[name]({}))[f"{name}+"] == "[empty]"


def test_a_damaged_header_hides_nothing(tmp_path: Path) -> None:
    data = bytearray(tarred({"a.txt": b"1", "b.txt": b"2"}))
    data[1024 + 3] ^= 0xFF  # in the second header's name: its checksum is wrong now
    seen = walk(tmp_path, "d.tar", bytes(data))
    assert seen == {"d.tar": "", "d.tar+": "[damaged-archive]", "d.tar/a.txt": "1"}


def test_what_follows_the_end_mark_or_precedes_the_first_member_is_told(tmp_path: Path) -> None:
    two = tarred({"a.txt": b"1"}) + tarred({"b.txt": b"2"})
    assert walk(tmp_path, "d.tar", two)["d.tar+"] == "[hidden-data]"
    two = zipped({"a.txt": b"1"}) + zipped({"b.txt": b"2"})
    assert walk(tmp_path, "d.zip", two) == {
        "d.zip": "",
        "d.zip+": "[hidden-data]",
        "d.zip/b.txt": "2",
    }


def test_a_size_below_zero_ends(tmp_path: Path) -> None:
    """tarfile of Python 3.11.7 goes round for ever on such a header (CVE-2025-8194)."""
    size = (-1024 & ((1 << 88) - 1)).to_bytes(11, "big")
    data = with_header(tarred({"a.txt": b"1", "b.txt": b"2"}), 124, b"\xff" + size)
    assert walk(tmp_path, "d.tar", data)["d.tar+"] == "[damaged-archive]"


def test_a_header_of_a_gigabyte_is_not_held(tmp_path: Path) -> None:
    huge = entry("x", type=tarfile.XHDTYPE)
    data = with_header(tar_of([(huge, b"")]), 124, b"%011o\0" % (1 << 30))
    path = tmp_path / "d.tar"
    path.write_bytes(data)
    with path.open("r+b") as stream:
        stream.truncate(1 << 30)  # a sparse file: it takes no room
    found = list(find([path]))
    assert [one.reason for one in found if isinstance(one, Unread)] == ["damaged-archive"]


def test_settings_in_an_archive_are_not_obeyed(tmp_path: Path) -> None:
    data = zipped({"dossiercheck.toml": b'fail_on = "critical"'})
    assert walk(tmp_path, "d.zip", data)["d.zip/dossiercheck.toml"] == "[settings]"


def test_memory_is_flat_over_members(tmp_path: Path) -> None:
    noise = random.Random(3).randbytes(1 << 20)
    peaks = []
    for count in (4, 40):
        path = tmp_path / f"{count}.zip"
        path.write_bytes(zipped({f"{n:02}.bin": noise for n in range(count)}, zipfile.ZIP_STORED))
        tracemalloc.start()
        with Shelf() as shelf:
            for one in list(find([path], shelf)):
                assert isinstance(one, Found)
                if not one.archive:
                    assert len(one.read()) == 1 << 20
        peaks.append(tracemalloc.get_traced_memory()[1])
        tracemalloc.stop()
    assert peaks[1] < peaks[0] + (1 << 20)


def test_a_file_that_changed_after_it_was_found_is_unread(tmp_path: Path) -> None:
    path = tmp_path / "d.zip"
    path.write_bytes(zipped({"a.txt": b"Chemical name: ethanol"}, zipfile.ZIP_STORED))
    with Shelf() as shelf:
        found = list(find([path], shelf))
        shelf.close()
        path.write_bytes(zipped({"a.txt": b"Chemical name: propane"}, zipfile.ZIP_STORED))
        unread = [one for entry in found[1:] for one in pipeline._read_one(entry)]  # type: ignore[arg-type]
    assert [one.reason for one in unread if isinstance(one, Unread)] == ["changed"]


def test_what_was_found_is_read_in_another_process(tmp_path: Path) -> None:
    (tmp_path / "d.zip").write_bytes(zipped({"in.zip": zipped({"a.txt": b"there"})}))
    found = pickle.loads(pickle.dumps(list(find([tmp_path / "d.zip"]))))
    assert found[-1].read() == b"there"


def test_a_zipped_dossier_says_what_the_folder_says(tmp_path: Path) -> None:
    settings = Settings()
    book = rulebook.load(settings)
    text = b"Compound: A\nChemical name: (2R)-2-aminopropanoic acid\nSMILES: C[C@H](N)C(O)=O\n"
    files = {"m3/a.txt": text, "m3/b.txt": text.replace(b"2R", b"2S")}
    for name, data in files.items():
        path = tmp_path / "folder" / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_bytes(data)
    (tmp_path / "d.zip").write_bytes(zipped(files))
    folder = pipeline.review([tmp_path / "folder"], settings, book)
    archive = pipeline.review([tmp_path / "d.zip"], settings, book)
    assert [one.path for one in archive.sources] == ["d.zip", "d.zip/m3/a.txt", "d.zip/m3/b.txt"]
    assert archive.unread == ()
    assert folder.findings
    assert [(f.rule, f.message) for f in archive.findings] == [
        (f.rule, f.message) for f in folder.findings
    ]
