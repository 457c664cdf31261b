"""What rests on a weak attribution is undetermined, and never a grave finding.

A finding that holds two evidences against each other says something only if both speak of one
substance. Where that is not firm, the finding becomes a remark which says so. Evidence of one
group speaks of one substance, whichever it is; so does evidence held against itself.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from dossiercheck.model import Concordance, Evidence, Finding, Grade, State
from dossiercheck.substances import Substance


def graded(substance: Substance, findings: Iterable[Finding]) -> tuple[Finding, ...]:
    """The findings, those that rest on a weak attribution as remarks."""
    if not substance.weak:
        return tuple(findings)
    known = {said.id: said for said in substance.evidence}
    return tuple(_graded(substance, finding, known) for finding in findings)


def shown(substance: Substance, table: Concordance | None) -> Concordance | None:
    """The concordance, with what a weakly attributed evidence shows otherwise undetermined."""
    if table is None or not substance.weak:
        return table
    weak = substance.weak
    rows = tuple(
        replace(
            row,
            cells=tuple(
                replace(cell, state=State.UNDETERMINED, note=cell.note or _DOUBT)
                if cell.evidence in weak and cell.state in (State.DIFFERS, State.SILENT)
                else cell
                for cell in row.cells
            ),
        )
        for row in table.rows
    )
    return replace(table, rows=rows)


_DOUBT = "whether it speaks of this substance is not certain"


def _graded(substance: Substance, finding: Finding, known: dict[str, Evidence]) -> Finding:
    quoted = [known[one.evidence] for one in finding.exhibits if one.evidence in known]
    groups = {said.group or said.id for said in quoted}
    doubtful = [said for said in quoted if said.id in substance.weak]
    if len(groups) < 2 or not doubtful or finding.grade is Grade.REMARK:
        return finding
    why = substance.attribution[doubtful[0].id].partition(": ")[2]
    message = (
        f"Undetermined, as it is not certain that “{_short(doubtful[0])}” speaks of"
        f" {substance.label} ({why}); if it does: {finding.message}"
    )
    return replace(finding, grade=Grade.REMARK, message=message)


def _short(said: Evidence) -> str:
    text = " ".join(said.text.split())
    return text if len(text) <= 60 else f"{text[:57]}…"
