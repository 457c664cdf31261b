"""From what readers found to evidence: headings, labelled fields, and names in running text."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping

from dossiercheck.language.prose import Prose, passage_evidence
from dossiercheck.language.records import record_evidence
from dossiercheck.language.roles import NO_COLUMNS
from dossiercheck.language.tables import table_evidence
from dossiercheck.model import Evidence, Item, Passage, Record, Table, Unread

__all__ = ["gather"]


def gather(
    items: Iterable[Item], columns: Mapping[str, str] = NO_COLUMNS
) -> Iterator[Evidence | Unread]:
    """Yield the evidence of the items in their order, ids left empty, and pass on what is unread.

    `columns` maps headings of the dossier to keys of `roles.KEYS` and wins over the synonyms.
    """
    state = Prose(columns)
    passages: list[Passage] = []
    for item in items:
        if isinstance(item, Passage):
            if passages and passages[-1].place.source != item.place.source:
                yield from passage_evidence(passages, state)
                passages = []
            passages.append(item)
            continue
        if isinstance(item, Unread):
            yield item
            continue
        yield from passage_evidence(passages, state)
        passages = []
        if isinstance(item, Table):
            yield from table_evidence(item, columns)
        elif isinstance(item, Record):
            yield from record_evidence(item, columns)
    yield from passage_evidence(passages, state)
