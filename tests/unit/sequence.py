"""Submission sequences made by the tests: invented leaves with true checksums."""

from __future__ import annotations

import hashlib
from collections.abc import Mapping
from html import escape
from pathlib import Path

from dossiercheck import rulebook
from dossiercheck.find import Found, find
from dossiercheck.lifecycle import Lifecycle, lifecycle
from dossiercheck.model import Review, Unread
from dossiercheck.sequences import submission
from dossiercheck.settings import Settings
from dossiercheck.shelf import Shelf

DOCTYPE = '<!DOCTYPE ectd:ectd SYSTEM "util/dtd/ich-ectd-3-2.dtd">'
SETTINGS = Settings()
BOOK = rulebook.load(SETTINGS)
FAMILY = "across-documents/"


def md5(data: bytes | str) -> str:
    return hashlib.md5(data.encode() if isinstance(data, str) else data).hexdigest()


def leaf(href: str, content: bytes | str = "", **said: str) -> str:
    """A leaf element; attributes by their names with _ for -, `title` as its title."""
    title = said.pop("title", "A document")
    given = {
        "ID": f"id-{md5(href)[:6]}",
        "operation": "new",
        "checksum": md5(content),
        "checksum_type": "md5",
        "xlink:href": href,
        **said,
    }
    attributes = " ".join(f'{k.replace("_", "-")}="{escape(v)}"' for k, v in given.items())
    return f"<leaf {attributes}><title>{escape(title)}</title></leaf>"


def index(*leaves: str, doctype: str = DOCTYPE, m1: str = "") -> str:
    """An index.xml whose leaves are all filed under 3.2.S.1.2."""
    return (
        f'<?xml version="1.0" encoding="UTF-8"?>{doctype}\n'
        '<ectd:ectd xmlns:ectd="http://www.ich.org/ectd"'
        ' xmlns:xlink="http://www.w3c.org/1999/xlink" dtd-version="3.2">'
        f"<m1-administrative-information-and-prescribing-information>{m1}"
        "</m1-administrative-information-and-prescribing-information>"
        '<m3-quality><m3-2-body-of-data><m3-2-s-drug-substance substance="a" manufacturer="b">'
        "<m3-2-s-1-general-information><m3-2-s-1-2-structure>"
        + "\n".join(leaves)
        + "</m3-2-s-1-2-structure></m3-2-s-1-general-information></m3-2-s-drug-substance>"
        "</m3-2-body-of-data></m3-quality></ectd:ectd>"
    )


def laid(folder: Path, files: Mapping[str, bytes | str]) -> Path:
    for name, content in files.items():
        path = folder / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_bytes(content.encode() if isinstance(content, str) else content)
    return folder


def cycle_of(folder: Path) -> Lifecycle:
    with Shelf() as shelf:
        found = list(find([folder], shelf))
        files = [one for one in found if isinstance(one, Found)]
        return lifecycle(
            submission(files, [u.place.source for u in found if isinstance(u, Unread)])
        )


def findings(folder: Path) -> list[tuple[str, str]]:
    """(rule without its family, message) of what is said of the submission as a whole."""
    outcome = BOOK.judge_submission(cycle_of(folder))
    assert outcome.unread == ()
    return [(one.rule.removeprefix(FAMILY), one.message) for one in outcome.findings]


def said(review: Review) -> list[tuple[str, str]]:
    return [
        (one.rule.removeprefix(FAMILY), one.message)
        for one in review.findings
        if one.substance == ""
    ]
