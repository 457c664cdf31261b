"""A Word paragraph's text with its tracked changes, and paragraphs that a change runs together."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field, replace

from lxml import etree

from dossiercheck.model import Pending
from dossiercheck.readers.package import child, local


@dataclass(slots=True)
class ParagraphText:
    """`text` of the paragraph; `pending` the tracked changes in it; `unread` as (reason, detail,
    text); `boxes` are the contents of text boxes anchored in it. `joins` is true where a tracked
    change takes the paragraph's end out, so that the next one goes on in the same line."""

    text: str = ""
    unread: list[tuple[str, str, str]] = field(default_factory=list)
    boxes: list[etree._Element] = field(default_factory=list)
    pending: tuple[Pending, ...] = ()
    joins: bool = False


def joined(contents: Iterable[ParagraphText]) -> list[ParagraphText]:
    """Paragraphs as they read now: one whose end is taken out goes on in the next."""
    result: list[ParagraphText] = []
    for content in contents:
        if result and result[-1].joins:
            result[-1] = continued(result[-1], content)
        else:
            result.append(content)
    return result


def continued(first: ParagraphText, second: ParagraphText) -> ParagraphText:
    """Two paragraphs as one line, the end between them a pending change."""
    at = len(first.text)
    between = (Pending(at, at, "\n"),) if first.text.strip() and second.text.strip() else ()
    return ParagraphText(
        first.text + second.text,
        first.unread + second.unread,
        first.boxes + second.boxes,
        (*first.pending, *between, *shifted(second.pending, at)),
        second.joins,
    )


def shifted(pending: Iterable[Pending], by: int) -> tuple[Pending, ...]:
    """The changes where their text stands `by` characters further on."""
    return tuple(
        replace(change, start=change.start + by, end=change.end + by) for change in pending
    )


def mark_removed(paragraph: etree._Element) -> bool:
    """True where a tracked change takes the paragraph's end out."""
    properties = child(paragraph, "pPr")
    mark = child(properties, "rPr") if properties is not None else None
    return mark is not None and any(local(one) in ("del", "moveFrom") for one in mark)
