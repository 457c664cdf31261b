"""Electronic submission sequences: what their XML says of the files, held against the files.

These checks see the submission as a whole and no substance; they need "sequence".
"""

from __future__ import annotations

import posixpath
from collections.abc import Iterator

from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.lifecycle import Lifecycle
from dossiercheck.model import Exhibit, Place
from dossiercheck.sequences import INDEX, INDEX_CHECKSUM, Leaf, itself_and_above


@check(needs=("sequence",), fields=("file", "stated", "found"))
def leaf_checksum_differs(case: Lifecycle, params: Params) -> Iterator[Observation]:
    """The file is not the one that the checksum was made from."""
    md5 = case.submission.md5
    for one in case.submission.sequences:
        index = posixpath.join(one.folder, INDEX)
        stated = one.index_checksum.lower()
        if stated and index in md5 and md5[index] != stated:
            where = Place(posixpath.join(one.folder, INDEX_CHECKSUM))
            sides = (Exhibit("", "Checksum as stated", stated, where), _file(index, md5[index]))
            yield Observation({"file": INDEX, "stated": stated, "found": md5[index]}, sides)
    for leaf in case.submission.leaves:
        stated = leaf.checksum.lower()
        if leaf.checksum_type.lower() != "md5" or not stated or leaf.file not in md5:
            continue
        found = md5[leaf.file]
        if leaf.operation != "delete" and found != stated:
            yield Observation(
                {"file": leaf.href, "stated": leaf.checksum, "found": found},
                (_leaf(leaf, leaf.checksum), _file(leaf.file, found)),
            )


@check(needs=("sequence",), fields=("leaf", "sequence", "reason"))
def leaf_file_missing(case: Lifecycle, params: Params) -> Iterator[Observation]:
    """A leaf names a file that is not there."""
    files = case.submission.files
    capitals = {name.casefold(): name for name in files}
    for leaf in case.submission.leaves:
        if leaf.operation == "delete" or leaf.file in files:
            continue
        if not leaf.href:
            reason = "it names no file"
        elif not leaf.file:
            reason = f"“{leaf.href}” is no path within the dossier"
        elif case.submission.holder(leaf.file):
            reason = f"there is no file “{leaf.href}”"
            if leaf.file.casefold() in capitals:
                reason += f"; “{capitals[leaf.file.casefold()]}” differs from it in capitals only"
        else:
            continue
        values = {"leaf": _called(leaf), "sequence": _sequence(leaf), "reason": reason}
        yield Observation(values, (_leaf(leaf, leaf.href),))


@check(needs=("sequence",), fields=("file", "sequence"))
def file_in_no_leaf(case: Lifecycle, params: Params) -> Iterator[Observation]:
    """A file lies in a sequence and no leaf leads to it."""
    submission = case.submission
    named = {leaf.file for leaf in submission.leaves}
    for name in sorted(submission.files - submission.structure):
        one = submission.holder(name)
        if one and named.isdisjoint(itself_and_above(name)):
            file = name.removeprefix(f"{one.folder}/")
            values = {"file": file, "sequence": one.number or "given"}
            yield Observation(values, (Exhibit("", "File", file, Place(name)),))


@check(needs=("sequence",), fields=("leaf", "sequence", "done", "later"))
def leaf_not_current(case: Lifecycle, params: Params) -> Iterator[Observation]:
    """A later sequence has replaced or deleted the leaf."""
    for one in case.ended:
        values = {
            "leaf": _called(one.leaf),
            "sequence": _sequence(one.leaf),
            "done": "deleted" if one.by.operation == "delete" else "replaced",
            "later": _sequence(one.by),
        }
        yield Observation(values, (_leaf(one.leaf, one.leaf.href), _leaf(one.by, one.by.modified)))


@check(needs=("sequence",), fields=("leaf", "sequence", "reason"))
def leaf_reference_broken(case: Lifecycle, params: Params) -> Iterator[Observation]:
    """What a leaf says of the leaf that it modifies cannot hold."""
    for one in case.broken:
        values = {
            "leaf": _called(one.leaf),
            "sequence": _sequence(one.leaf),
            "reason": one.why,
        }
        yield Observation(values, (_leaf(one.leaf, one.leaf.modified or one.leaf.operation),))


def _called(leaf: Leaf) -> str:
    name = leaf.title or leaf.id or leaf.href
    return f"{leaf.section} “{name}”" if leaf.section else f"“{name}”"


def _sequence(leaf: Leaf) -> str:
    return posixpath.basename(leaf.sequence) or "given"


def _leaf(leaf: Leaf, text: str) -> Exhibit:
    said = f"leaf {leaf.id}, {leaf.operation}" if leaf.id else f"leaf, {leaf.operation}"
    return Exhibit("", f"Leaf {_called(leaf)}", text, leaf.place, note=said)


def _file(name: str, digest: str) -> Exhibit:
    return Exhibit("", "MD5 checksum of the file as it is", digest, Place(name))
