"""The files of a dossier in one fixed order, and what cannot be opened."""

from __future__ import annotations

import hashlib
from pathlib import Path

from dossiercheck.find import Found, find
from dossiercheck.model import Unread


def names(*paths: Path) -> list[str]:
    return [e.source.path if isinstance(e, Found) else e.place.source for e in find(paths)]


def lay(folder: Path, *files: str) -> None:
    for name in files:
        path = folder / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_text(name, encoding="utf-8")


def test_the_order_is_that_of_the_names_whatever_the_disk_says(tmp_path: Path) -> None:
    lay(tmp_path, "b.txt", "a/z.txt", "a/b/c.sdf", "B.txt", "a.txt", "10.txt", "9.txt")
    assert names(tmp_path) == [
        "10.txt",
        "9.txt",
        "B.txt",
        "a.txt",
        "a/b/c.sdf",
        "a/z.txt",
        "b.txt",
    ]


def test_a_source_has_its_hash_size_and_format(tmp_path: Path) -> None:
    (tmp_path / "A.SDF").write_bytes(b"12345")
    (found,) = find([tmp_path])
    assert isinstance(found, Found)
    assert found.source.sha256 == hashlib.sha256(b"12345").hexdigest()
    assert (found.source.size, found.source.format) == (5, "sdf")


def test_hidden_files_and_the_settings_are_not_part_of_the_dossier(tmp_path: Path) -> None:
    lay(tmp_path, ".hidden", ".git/config", "a.txt", "dossiercheck.toml", "a/.DS_Store")
    assert names(tmp_path) == ["a.txt"]


def test_several_folders_keep_their_names_apart(tmp_path: Path) -> None:
    lay(tmp_path, "one/a.txt", "two/a.txt", "c.txt")
    assert names(tmp_path / "one", tmp_path / "two", tmp_path / "c.txt") == [
        "one/a.txt",
        "two/a.txt",
        "c.txt",
    ]


def test_a_link_that_leads_out_is_unread_and_one_inside_is_read(tmp_path: Path) -> None:
    lay(tmp_path, "secret.txt", "dossier/a.txt")
    (tmp_path / "dossier" / "out.txt").symlink_to(tmp_path / "secret.txt")
    (tmp_path / "dossier" / "in.txt").symlink_to(tmp_path / "dossier" / "a.txt")
    (tmp_path / "dossier" / "up").symlink_to(tmp_path, target_is_directory=True)
    (tmp_path / "dossier" / "broken").symlink_to(tmp_path / "dossier" / "nothing")
    found = {e.place.source: e for e in find([tmp_path / "dossier"]) if isinstance(e, Unread)}
    assert found["out.txt"].reason == "link"
    assert found["up"].reason == "link"
    assert found["broken"].reason == "not-a-file"
    assert names(tmp_path / "dossier") == ["a.txt", "broken", "in.txt", "out.txt", "up"]


def test_a_path_that_is_not_there_is_unread(tmp_path: Path) -> None:
    (entry,) = find([tmp_path / "nothing.txt"])
    assert isinstance(entry, Unread)
    assert entry.reason == "not-a-file"
