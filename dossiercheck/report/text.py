"""The result as plain lines for a terminal or a log: findings, then what was not read, then counts.

No wrapping, no colour, nothing that depends on the screen; control characters are made visible.
"""

from __future__ import annotations

from dossiercheck.report.document import Json
from dossiercheck.report.verdict import WHOLE, number_of
from dossiercheck.report.visible import one_line


def summary(document: Json) -> str:
    """The document in lines: grade, substance, sentence, then each exhibit's place below."""
    lines = []
    labels = {"": WHOLE, **{s["id"]: s["label"] or s["id"] for s in document["substances"]}}
    findings: dict[str, list[Json]] = {}
    for finding in document["findings"]:
        findings.setdefault(finding["id"], []).append(finding)
    for group in document["by_substance"]:
        label = labels.get(group["substance"], group["substance"])
        for key in group["findings"]:
            finding = findings[key].pop(0)
            grade = finding["grade"].upper()
            lines.append(f"{grade:<8}  {one_line(label)}: {one_line(finding['message'])}")
            lines += [
                f"    {one_line(one['title'])} in {_place(one['place'])}"
                for one in finding["exhibits"]
            ]
            lines.append(f"    rule {one_line(finding['rule'])}")
    if document["unread"]:
        lines += ["", f"Not read: {number_of(len(document['unread']), 'place')}"]
        lines += [
            f"    {_place(one['place'])}: {one_line(one['detail'] or one['reason'])}"
            for one in document["unread"]
        ]
    counts = document["counts"]
    if lines:
        lines.append("")
    lines.append(
        f"Examined {number_of(counts['sources'], 'source')}, "
        f"{number_of(counts['substances'], 'substance')}, evidence from "
        f"{number_of(counts['evidence'], 'place')}."
    )
    lines.append(one_line(document["verdict"]))
    lines.append(one_line(document["caution"]))
    return "\n".join(lines) + "\n"


def _place(place: Json) -> str:
    return one_line(f"{place['source']}, {place['phrase']}")
