"""Tracked changes that touch an evidence, counted in the evidence's own text."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from dossiercheck.model import Evidence, Pending


def touched(said: Evidence, pending: tuple[Pending, ...], text: str) -> Evidence:
    """The evidence with those of the changes that touch it; `text` is the whole passage or cell
    in which the changes are counted, and in which the evidence's span counts too.

    A change that only meets an end of the evidence touches it where a word reaches over that
    end: what it takes out or puts in may have belonged to a name.
    """
    if not pending:
        return said
    begin, end = said.place.span or _whole(said, text)
    kept = tuple(
        replace(one, start=max(one.start, begin) - begin, end=min(one.end, end) - begin)
        for one in pending
        if _touches(one, begin, end)
    )
    return replace(said, pending=kept) if kept else said


def before(said: Evidence) -> str:
    """The evidence's text with its changes undone: as it read before them."""
    return "".join(_pieces(said))


def _pieces(said: Evidence) -> Iterator[str]:
    at = 0
    for one in said.pending:
        yield said.text[at : one.start]
        yield one.removed
        at = one.end
    yield said.text[at:]


def _whole(said: Evidence, text: str) -> tuple[int, int]:
    """Where the evidence stands in a cell that it fills: its text may have lost an end."""
    start = text.find(said.text)
    return (start, start + len(said.text)) if start >= 0 else (0, len(text))


def _touches(one: Pending, begin: int, end: int) -> bool:
    if one.removed:
        if begin < one.start < end:
            return True
        if one.start == begin:
            return not one.removed[-1].isspace()
        return one.start == end and not one.removed[0].isspace()
    return one.start < end and one.end > begin
