"""Tracked changes that nobody has accepted or rejected, where they touch evidence."""

from __future__ import annotations

from collections.abc import Iterator

from dossiercheck.checks.exhibits import exhibit
from dossiercheck.checks.registry import Observation, Params, check
from dossiercheck.concordance import Case
from dossiercheck.language.changes import before


@check(needs=("structure",), fields=("now", "before"))
def pending_change(case: Case, params: Params) -> Iterator[Observation]:
    """A pending change puts something into an evidence or takes something out of it."""
    for reading in case.readings:
        said = reading.evidence
        if not said.pending:
            continue
        earlier = before(said)
        spans = [(one.start, one.end) for one in said.pending if one.end > one.start]
        note = f"before the change: {earlier}" if earlier.strip() else "put in by the change"
        shown = exhibit(reading, spans=spans, note=note)
        yield Observation(
            {"now": said.text.strip(), "before": earlier.strip() or "nothing"}, (shown,)
        )
