"""The one or two sentences at the head of a report: what was found and what was not looked at."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

WHOLE = "The dossier as a whole"  # heading of findings that are of no substance


def verdict(counts: Mapping[str, Any]) -> str:
    """The result in plain words from a document's counts. Never says that a dossier is sound."""
    return f"{_found(counts)} {_missed(counts)}"


def _found(counts: Mapping[str, Any]) -> str:
    total = counts["findings"]
    if total:
        grades = [f"{number} {name}" for name, number in counts["grades"].items() if number]
        about = counts["substances_with_findings"]
        on = [number_of(about, "substance")] if about else []
        on += ["the dossier as a whole"] if counts["findings_on_the_whole"] else []
        return f"{number_of(total, 'finding')} on {' and '.join(on)}: {', '.join(grades)}."
    if not counts["evidence"]:
        return "Nothing could be compared: no place of the dossier gave evidence."
    return "No discrepancy was found in what could be read and compared."


def _missed(counts: Mapping[str, Any]) -> str:
    parts = []
    if counts["unread"]:
        verb = "was" if counts["unread"] == 1 else "were"
        parts.append(f"{number_of(counts['unread'], 'place')} {verb} not read")
    doubtful = counts["cells"]["undetermined"]
    if doubtful:
        verb = "stayed"
        parts.append(f"{number_of(doubtful, 'comparison')} {verb} undetermined")
    if not parts:
        return "No place was left unread."
    return " and ".join(parts) + "."


def number_of(number: int, noun: str) -> str:
    """`1 finding`, `2 findings`; thousands set apart by a comma."""
    return f"{number:,} {noun}{'' if number == 1 else 's'}"
