"""The review as one plain document: what `findings.json` holds and every other format is made of.

Only dicts, lists, strings, numbers, booleans and None, in a fixed order of keys. The published
schema is `templates/findings.schema.json`. Order: sources by path, unread by place, rules by id,
where the order of the review says nothing; substances, evidence and findings as the review
has them. A place leaves out what is not stated; everything else is always there.
"""

from __future__ import annotations

import gc
from collections.abc import Iterable, Mapping
from math import isfinite
from typing import Any

from dossiercheck.model import (
    Concordance,
    Drawing,
    Evidence,
    Exhibit,
    Finding,
    Grade,
    Place,
    Review,
    RuleEntry,
    Source,
    State,
    SubstanceEntry,
    UnitRow,
    Unread,
)
from dossiercheck.report.derived import derived_json
from dossiercheck.report.verdict import verdict

VERSION = "1"
SCHEMA = f"urn:dossiercheck:findings:{VERSION}"

Json = dict[str, Any]


def document(review: Review) -> Json:
    """The whole review as plain data, with the counts that a headline needs."""
    # Millions of small dicts and no cycle among them: the collector's passes over them double
    # the time of a large review and can free nothing.
    collecting = gc.isenabled()
    gc.disable()
    try:
        return _document(review)
    finally:
        if collecting:
            gc.enable()


def _document(review: Review) -> Json:
    counts = count(review)
    return {
        "schema": SCHEMA,
        "version": VERSION,
        "verdict": verdict(counts),
        "caution": review.caution,
        "counts": counts,
        "sources": [_source(one) for one in sorted(review.sources, key=lambda one: one.path)],
        "unread": [_unread(one) for one in sorted(review.unread, key=_unread_order)],
        "by_substance": _by_substance(review),
        "findings": [_finding(one) for one in review.findings],
        "substances": [_substance(one) for one in review.substances],
        "rules": [_rule(one) for one in sorted(review.rules, key=lambda one: one.id)],
        "method": dict(review.method),
    }


def count(review: Review) -> Json:
    """How many of what; `cells` are the cells of all concordances by their state."""
    grades = {grade.value: 0 for grade in Grade}
    for finding in review.findings:
        grades[finding.grade.value] += 1
    states = {state.value: 0 for state in State}
    evidence = 0
    compared = 0
    for entry in review.substances:
        evidence += len(entry.evidence)
        if entry.concordance is not None:
            compared += 1
            for row in entry.concordance.rows:
                for cell in row.cells:
                    states[cell.state.value] += 1
    return {
        "sources": len(review.sources),
        "evidence": evidence,
        "substances": len(review.substances),
        "substances_compared": compared,
        "substances_with_findings": len({f.substance for f in review.findings} - {""}),
        "findings": len(review.findings),
        "findings_on_the_whole": sum(not finding.substance for finding in review.findings),
        "grades": grades,
        "unread": len(review.unread),
        "cells": states,
        "rules": sum(not rule.off for rule in review.rules),
        "rules_off": sum(bool(rule.off) for rule in review.rules),
    }


def _by_substance(review: Review) -> list[Json]:
    """The findings' ids by substance, the gravest substance first, each gravest first."""
    labels = {entry.id: entry.label for entry in review.substances}
    ranks = {entry.id: rank for rank, entry in enumerate(review.substances)}
    held: dict[str, list[Finding]] = {}
    for finding in review.findings:
        held.setdefault(finding.substance, []).append(finding)
    for findings in held.values():
        findings.sort(key=lambda one: one.grade.gravity)

    def order(item: tuple[str, list[Finding]]) -> tuple[list[int], int, str]:
        tally = [-sum(one.grade is grade for one in item[1]) for grade in Grade]
        return tally, ranks.get(item[0], len(ranks)), item[0]

    return [
        {
            "substance": substance,
            "label": labels.get(substance, ""),
            "gravest": findings[0].grade.value,
            "findings": [finding.id for finding in findings],
        }
        for substance, findings in sorted(held.items(), key=order)
    ]


def _source(source: Source) -> Json:
    return {
        "path": source.path,
        "sha256": source.sha256,
        "size": source.size,
        "format": source.format,
    }


def _unread_order(unread: Unread) -> tuple[Any, ...]:
    place = unread.place
    return (
        place.source,
        place.page or 0,
        place.sheet or "",
        place.table or 0,
        place.record or 0,
        place.paragraph or 0,
        place.row or 0,
        place.line or 0,
        place.span or (0, 0),
        unread.reason,
        unread.detail,
    )


def _unread(unread: Unread) -> Json:
    return {
        "place": _place(unread.place),
        "reason": unread.reason,
        "detail": unread.detail,
        "text": unread.text,
    }


def _place(place: Place) -> Json:
    found: Json = {"source": place.source, "phrase": str(place)}
    if place.section is not None:
        found["section"] = place.section
    if place.sheet is not None:
        found["sheet"] = place.sheet
    if place.table is not None:
        found["table"] = place.table
    if place.row is not None:
        found["row"] = place.row
    if place.column is not None:
        found["column"] = place.column
    if place.paragraph is not None:
        found["paragraph"] = place.paragraph
    if place.line is not None:
        found["line"] = place.line
    if place.record is not None:
        found["record"] = place.record
    if place.field is not None:
        found["field"] = place.field
    if place.span is not None:
        found["span"] = list(place.span)
    if place.path is not None:
        found["path"] = place.path
    if place.page is not None:
        found["page"] = place.page
    if place.box is not None:
        found["box"] = [round(edge, 1) for edge in place.box]
    return found


def _finding(finding: Finding) -> Json:
    return {
        "id": finding.id,
        "rule": finding.rule,
        "grade": finding.grade.value,
        "substance": finding.substance,
        "message": finding.message,
        "remedy": finding.remedy,
        "unit": finding.unit,
        "locant": finding.locant,
        "exhibits": [_exhibit(one) for one in finding.exhibits],
        "derivation": list(finding.derivation),
    }


def _exhibit(exhibit: Exhibit) -> Json:
    return {
        "evidence": exhibit.evidence,
        "title": exhibit.title,
        "text": exhibit.text,
        "marks": [list(span) for span in exhibit.marks],
        "place": _place(exhibit.place),
        "note": exhibit.note,
        "drawing": drawing_json(exhibit.drawing),
        "derivations": [derived_json(one) for one in exhibit.derived],
    }


def _substance(entry: SubstanceEntry) -> Json:
    return {
        "id": entry.id,
        "label": entry.label,
        "evidence": [_evidence(one, entry.attribution) for one in entry.evidence],
        "concordance": _concordance(entry.concordance, (one.id for one in entry.evidence)),
        "drawing": drawing_json(entry.drawing),
    }


def _evidence(evidence: Evidence, attribution: Mapping[str, str]) -> Json:
    return {
        "id": evidence.id,
        "kind": evidence.kind.value,
        "role": evidence.role.value,
        "text": evidence.text,
        "label": evidence.label,
        "group": evidence.group,
        "place": _place(evidence.place),
        "attribution": attribution.get(evidence.id, ""),
    }


def _concordance(concordance: Concordance | None, order: Iterable[str]) -> Json | None:
    if concordance is None:
        return None
    constitution = concordance.constitution
    known = [one for one in order if one in constitution]
    known += sorted(set(constitution).difference(known))
    return {
        "reference": concordance.reference,
        "constitution": {one: constitution[one] for one in known},
        "rows": [_row(row) for row in concordance.rows],
    }


def _row(row: UnitRow) -> Json:
    return {
        "unit": row.unit,
        "kind": row.kind,
        "atoms": list(row.atoms),
        "locant": row.locant,
        "cells": [
            {
                "evidence": cell.evidence,
                "state": cell.state.value,
                "shows": cell.shows,
                "note": cell.note,
            }
            for cell in row.cells
        ],
    }


def drawing_json(drawing: Drawing | None) -> Json | None:
    """A drawing with atoms and bonds as rows, which take a third of the room of objects."""
    if drawing is None:
        return None
    return {
        "laid_out": drawing.laid_out,
        "atoms": [
            [
                atom.element,
                # JSON has no NaN: a coordinate that is not a number is null.
                atom.x if isfinite(atom.x) else None,
                atom.y if isfinite(atom.y) else None,
                atom.charge,
                atom.hydrogens,
                atom.isotope,
            ]
            for atom in drawing.atoms
        ],
        "bonds": [[bond.begin, bond.end, bond.order, bond.style] for bond in drawing.bonds],
        "marked_atoms": [
            {"atom": index, "text": atom.mark}
            for index, atom in enumerate(drawing.atoms)
            if atom.highlight or atom.mark
        ],
        "marked_bonds": [index for index, bond in enumerate(drawing.bonds) if bond.highlight],
    }


def _rule(rule: RuleEntry) -> Json:
    return {
        "id": rule.id,
        "title": rule.title,
        "grade": rule.grade.value,
        "why": rule.why,
        "basis": rule.basis,
        "remedy": rule.remedy,
        "off": rule.off,
    }
