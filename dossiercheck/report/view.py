"""Arranges the document for the page: what is written out, what takes one row, which columns.

Nothing is decided here about the dossier; the page and `findings.json` say the same.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from dossiercheck.report.document import Json
from dossiercheck.report.verdict import WHOLE

FULL_FINDINGS = 400
FULL_SUBSTANCES = 200
_COLUMNS = 6
_GROUPS = (
    ("Structures, names and notations", ("drawing", "coordinates", "name", "notation")),
    ("Properties", ("property",)),
    ("Statements", ("statement",)),
)


@dataclass(frozen=True, slots=True)
class Group:
    """The findings of one substance; `anchor` leads to its concordance."""

    label: str
    anchor: str
    gravest: str
    findings: tuple[Json, ...]


@dataclass(frozen=True, slots=True)
class Block:
    """Some columns of a concordance with their rows; the reference is always the first column.

    Each row is (unit, cells), each cell a dict or None where an evidence says nothing of a unit.
    """

    columns: tuple[Json, ...]
    rows: tuple[tuple[Json, tuple[Json | None, ...]], ...]
    constitution: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Substance:
    """A substance with its evidence in groups, its concordance in blocks, its findings' links."""

    entry: Json
    label: str
    anchor: str
    findings: tuple[Json, ...]
    evidence: tuple[tuple[str, tuple[Json, ...]], ...]
    blocks: tuple[Block, ...]
    states: dict[str, int]


@dataclass(frozen=True, slots=True)
class Page:
    """What the template writes, in its order."""

    groups: tuple[Group, ...]
    brief: tuple[Json, ...]
    substances: tuple[Substance, ...]
    rows: tuple[Substance, ...]
    rules: dict[str, Json]
    labels: dict[str, str]
    anchors: dict[str, str]


def page(
    document: Json, full_findings: int = FULL_FINDINGS, full_substances: int = FULL_SUBSTANCES
) -> Page:
    """The document arranged, gravest first.

    The first `full_findings` findings are written out, the others take one row each. Substances
    without a finding are written out when they are `full_substances` or fewer.
    """
    findings = _by_id(document["findings"])
    labels = {"": WHOLE, **{s["id"]: s["label"] or s["id"] for s in document["substances"]}}
    anchors = {one["id"]: f"s{at}" for at, one in enumerate(document["substances"], 1)}
    groups: list[Group] = []
    brief: list[Json] = []
    number = 0
    held: dict[str, tuple[Json, ...]] = {}
    written: set[str] = set()
    entries = {one["id"]: one for one in document["substances"]}
    for item in document["by_substance"]:
        key = item["substance"]
        room = max(0, full_findings - number)
        every = []
        for one in item["findings"]:
            number += 1
            every.append({**findings[one].pop(0), "number": number})
        held[key] = tuple(every)
        if room:
            written.add(key)
            anchor = anchors.get(key, "")
            shown = tuple(_with_citations(one, entries.get(key), anchor) for one in every[:room])
            groups.append(Group(labels.get(key, key), anchor, item["gravest"], shown))
        brief += every[room:]
    clean = sum(one["id"] not in held for one in document["substances"])
    full: list[Substance] = []
    rows: list[Substance] = []
    for entry in document["substances"]:
        key = entry["id"]
        whole = key in written or (key not in held and clean <= full_substances)
        view = _substance(entry, labels[key], anchors[key], held.get(key, ()), whole)
        (full if whole else rows).append(view)
    # Substances that a finding speaks of come before the others.
    full.sort(key=lambda one: not one.findings)
    rules = {one["id"]: one for one in document["rules"]}
    return Page(tuple(groups), tuple(brief), tuple(full), tuple(rows), rules, labels, anchors)


def _by_id(findings: list[Json]) -> dict[str, list[Json]]:
    """Findings by id; a list each, so that two of one id are both shown."""
    found: dict[str, list[Json]] = {}
    for finding in findings:
        found.setdefault(finding["id"], []).append(finding)
    return found


def is_long(text: str) -> bool:
    """Whether a text, a connection table above all, is folded rather than set in full."""
    return text.count("\n") > 7 or len(text) > 1500


def evidence_anchor(anchor: str, position: int) -> str:
    """The id of a substance's evidence on the page, `position` counted from 1."""
    return f"{anchor}e{position}"


def _with_citations(finding: Json, entry: Json | None, anchor: str) -> Json:
    """The finding with, for each exhibit whose long text is that of a listed evidence, a link to
    it: a connection table is set once on the page, not once a finding."""
    listed = {}
    for position, one in enumerate(entry["evidence"] if entry else (), 1):
        listed[one["id"]] = (one["text"], evidence_anchor(anchor, position))
    exhibits = []
    for exhibit in finding["exhibits"]:
        text, target = listed.get(exhibit["evidence"], ("", ""))
        same = text == exhibit["text"] and is_long(text) and not exhibit["marks"]
        exhibits.append({**exhibit, "cited": target if same else ""})
    return {**finding, "exhibits": exhibits}


def _substance(
    entry: Json, label: str, anchor: str, findings: tuple[Json, ...], whole: bool
) -> Substance:
    concordance = entry["concordance"]
    states: dict[str, int] = {}
    for row in concordance["rows"] if concordance else ():
        for cell in row["cells"]:
            states[cell["state"]] = states.get(cell["state"], 0) + 1
    if not whole:
        return Substance(entry, label, anchor, findings, (), (), states)
    groups = []
    evidence = [
        {**one, "anchor": evidence_anchor(anchor, position)}
        for position, one in enumerate(entry["evidence"], 1)
    ]
    for title, kinds in _GROUPS:
        members = tuple(one for one in evidence if one["kind"] in kinds)
        if members:
            groups.append((title, members))
    blocks = _blocks(entry, concordance) if concordance else ()
    return Substance(entry, label, anchor, findings, tuple(groups), blocks, states)


def _blocks(entry: Json, concordance: Json) -> tuple[Block, ...]:
    """The concordance in widths that a page holds."""
    reference = concordance["reference"]
    constitution = {reference: "reference", **concordance["constitution"]}
    spoken = set(constitution)
    cells: list[dict[str, Json]] = []
    for row in concordance["rows"]:
        cells.append({cell["evidence"]: cell for cell in row["cells"]})
        spoken |= cells[-1].keys()
    known = {one["id"]: one for one in entry["evidence"]}
    order = [one for one in known if one in spoken and one != reference]
    order += sorted(spoken.difference(known, {reference}))
    first: dict[str, Any] = {"id": reference, "role": "", "place": None}
    found = []
    for start in range(0, max(len(order), 1), _COLUMNS):
        ids = [reference, *order[start : start + _COLUMNS]]
        found.append(
            Block(
                tuple(known.get(one, {**first, "id": one}) for one in ids),
                tuple(
                    (row, tuple(held.get(one) for one in ids))
                    for row, held in zip(concordance["rows"], cells, strict=True)
                ),
                tuple(constitution.get(one, "") for one in ids),
            )
        )
    return tuple(found)
