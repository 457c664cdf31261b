"""Claims in passages and cells, as evidence with their places, or as unread."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from dossiercheck.language.changes import touched
from dossiercheck.language.claims import ROTATION, Claim, cell_claim, claims
from dossiercheck.language.wrapped import placed
from dossiercheck.model import Cell, Evidence, Passage, Role, Unread

_REASONS = {True: "statement-not-attributed", False: "statement-not-understood"}


def claim_evidence(
    holder: Passage | Cell,
    start: int,
    end: int,
    under: str,
    before: str = "",
    group: str = "",
) -> Iterator[Evidence | Unread]:
    """The claims of one line from `start` to `end`; `under` and `before` as in `claims`.

    In a cell, `group` is that of its row: a claim without a subject of its own belongs to it.
    """
    text = holder.text[start:end]
    whole = cell_claim(text) if group else None
    if whole is not None:
        yield _said(holder, start, text, replace(whole, label=under), group)
        return
    for claim in claims(text, under or group, before):
        own = claim.label in (under, group) and bool(group)
        label = under if claim.label == group else claim.label
        yield _said(holder, start, text, replace(claim, label=label), group if own else "")


def _said(
    holder: Passage | Cell, start: int, text: str, claim: Claim, group: str
) -> Evidence | Unread:
    words = text[claim.start : claim.end]
    place = holder.at(start + claim.start, start + claim.end)
    if claim.why:
        reason = _REASONS["which substance" in claim.why or "of what substance" in claim.why]
        return Unread(place, reason, claim.why, words)
    role = Role.ROTATION if claim.form == ROTATION else Role.STEREO
    said = Evidence("", role, words, place, group, claim.label, other=claim.other)
    return touched(placed(said, holder), holder.pending, holder.text)
