"""The current view of a submission: which leaves later sequences have replaced or deleted.

ICH eCTD specification 3.2.2, operation attribute: *new*, *append*, *replace*, *delete*; the last
three name the leaf they modify. Only a reference that is certain ends a leaf: an earlier sequence
of the same application, one leaf of that ID, not ended already. Because references lead to
earlier sequences only, no circle of them can end anything.
"""

from __future__ import annotations

import posixpath
from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from dossiercheck.model import Unread
from dossiercheck.sequences import Leaf, Sequence, Submission

OPERATIONS = ("new", "append", "replace", "delete")


@dataclass(frozen=True, slots=True)
class Ended:
    """`leaf` was replaced or deleted by the leaf `by`."""

    leaf: Leaf
    by: Leaf


@dataclass(frozen=True, slots=True)
class Broken:
    """What `leaf` says of the leaf it modifies cannot hold, and why."""

    leaf: Leaf
    why: str


@dataclass(frozen=True, slots=True)
class _Unknown:
    """The index that a leaf refers to, and why nothing can be said of the reference."""

    xml: str
    why: str


@dataclass(frozen=True, slots=True)
class Lifecycle:
    """A submission and what became of its leaves. `unread`: what could be compared with nothing,
    references to sequences that were not given above all."""

    submission: Submission
    ended: tuple[Ended, ...] = ()
    broken: tuple[Broken, ...] = ()
    unread: tuple[Unread, ...] = ()


def lifecycle(submitted: Submission) -> Lifecycle:
    """Follow the sequences of each application in the order of their numbers."""
    ended: dict[int, Ended] = {}
    broken: list[Broken] = []
    absent: dict[tuple[str, _Unknown], list[Leaf]] = {}
    sequences = sorted(submitted.sequences, key=lambda one: (one.application, _order(one)))
    by_xml = {xml: one for one in sequences for xml in one.backbones}
    by_id: dict[tuple[str, str], list[Leaf]] = {}
    for leaf in submitted.leaves:
        by_id.setdefault((leaf.place.source, leaf.id), []).append(leaf)
    for one in sequences:
        for leaf in one.leaves:
            found = _follow(leaf, one, by_xml, by_id, submitted, ended)
            if isinstance(found, str):
                broken.append(Broken(leaf, found))
            elif isinstance(found, Leaf):
                if leaf.operation != "append":
                    ended[id(found)] = Ended(found, leaf)
            elif found is not None:
                absent.setdefault((one.folder, found), []).append(leaf)
    unread = (*submitted.unread, *_absent(absent), *_not_compared(submitted))
    return Lifecycle(submitted, tuple(ended.values()), tuple(broken), unread)


def not_current(cycle: Lifecycle) -> frozenset[str]:
    """Files of ended leaves that no current leaf names."""
    over = {id(one.leaf) for one in cycle.ended}
    current = {leaf.file for leaf in cycle.submission.leaves if id(leaf) not in over}
    return frozenset(one.leaf.file for one in cycle.ended if one.leaf.file) - current


def sections(submitted: Submission) -> dict[str, str]:
    """The CTD section of each file that leaves file under one section only."""
    filed: dict[str, set[str]] = {}
    for leaf in submitted.leaves:
        if leaf.file:
            filed.setdefault(leaf.file, set()).add(leaf.section)
    return {file: next(iter(found)) for file, found in filed.items() if len(found) == 1}


def _is_numbered(one: Sequence) -> bool:
    return one.number.isascii() and one.number.isdigit() and len(one.number) < 10


def _order(one: Sequence) -> tuple[int, str]:
    return (int(one.number) if _is_numbered(one) else 0), one.number


def _follow(
    leaf: Leaf,
    own: Sequence,
    by_xml: Mapping[str, Sequence],
    by_id: Mapping[tuple[str, str], list[Leaf]],
    submitted: Submission,
    ended: Mapping[int, Ended],
) -> Leaf | str | _Unknown | None:
    """The leaf modified, why there is none, the sequence that was not given, or nothing to do."""
    if leaf.operation not in OPERATIONS:
        return f"its operation “{leaf.operation}” is none of {', '.join(OPERATIONS)}"
    if leaf.operation == "new":
        return "it is new and yet names a leaf that it modifies" if leaf.modified else None
    if not leaf.modified:
        return "it does not say which leaf it modifies"
    xml, _ = leaf.target
    other = by_xml.get(xml)
    if other is None:
        if xml and not submitted.holder(xml):
            return _Unknown(xml, "is not among the sequences that were given")
        if xml in submitted.structure:
            return _Unknown(xml, "could not be read")
        return f"it modifies “{leaf.modified}”, and there is no such index"
    if other.application != own.application:
        return _Unknown(xml, "belongs to another application")
    if other is not own and not (_is_numbered(other) and _is_numbered(own)):
        return _Unknown(xml, "cannot be put in order: a folder's name is not a sequence number")
    if other is not own and _order(other) >= _order(own):
        return f"it modifies a leaf of the later sequence {other.number}"
    if other is own and leaf.operation != "append":
        return "it modifies a leaf of its own sequence"
    meant = by_id.get(leaf.target, [])
    if len(meant) != 1:
        many = f"{len(meant)} leaves have" if meant else "no leaf has"
        return f"it modifies “{leaf.modified}”, and {many} that ID"
    if meant[0] is leaf:
        return "it modifies itself"
    if id(meant[0]) in ended:
        by = ended[id(meant[0])].by
        did = "deleted" if by.operation == "delete" else "replaced"
        return f"the leaf it modifies was {did} already, in {posixpath.basename(by.sequence)}"
    return meant[0]


def _absent(absent: Mapping[tuple[str, _Unknown], list[Leaf]]) -> Iterator[Unread]:
    for (_, unknown), leaves in absent.items():
        which = "leaf modifies a leaf" if len(leaves) == 1 else "leaves modify leaves"
        detail = (
            f"{len(leaves)} {which} of {unknown.xml}, which {unknown.why}; what is replaced or"
            " deleted there is not known."
        )
        yield Unread(leaves[0].place, "life-cycle-unknown", detail)


def _not_compared(submitted: Submission) -> Iterator[Unread]:
    """Leaves whose file lies in a sequence that was not given, or has no checksum we can make."""
    for leaf in submitted.leaves:
        if leaf.operation == "delete" or not leaf.file:
            continue
        if leaf.file not in submitted.files:
            if not submitted.holder(leaf.file):
                detail = f"The file {leaf.href} lies in a sequence that was not given."
                yield Unread(leaf.place, "file-not-given", detail, leaf.title)
        elif not leaf.checksum:
            detail = f"The leaf states no checksum for {leaf.href}."
            yield Unread(leaf.place, "no-checksum", detail, leaf.title)
        elif leaf.checksum_type.lower() != "md5":
            detail = f"Checksums of the type “{leaf.checksum_type}” are not made: {leaf.href}."
            yield Unread(leaf.place, "checksum-type", detail, leaf.title)
