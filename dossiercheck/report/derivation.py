"""What `derive` prints: text for a terminal, one line of JSON a record, or a page."""

from __future__ import annotations

import json
from collections.abc import Iterable, Iterator
from textwrap import wrap
from typing import Any

from dossiercheck.derive import Answer
from dossiercheck.model import Derived
from dossiercheck.report import html
from dossiercheck.report.derived import derived_json, heading
from dossiercheck.report.document import drawing_json
from dossiercheck.report.visible import one_line
from dossiercheck.stereo.cip.derivation import Comparison, Side
from dossiercheck.stereo.cip.words import Namer, comparing, namer_for, ranking
from dossiercheck.stereo.descriptors import Descriptor
from dossiercheck.stereo.showing import position
from dossiercheck.stereo.structure import Structure

Json = dict[str, Any]

FORMATS = ("text", "json", "html")
_WIDTH = 80


def printed(answers: Iterable[Answer], form: str) -> Iterator[bytes]:
    """The records in a format, as UTF-8, piece by piece."""
    if form == "html":
        yield _page(answers)
        return
    made = _line if form == "json" else _text
    for number, answer in enumerate(answers):
        gap = "\n" if number and form == "text" else ""
        # Half a surrogate pair has no UTF-8; this handler writes it as JSON's own escape.
        yield (gap + made(answer)).encode("utf-8", errors="backslashreplace")


def _text(answer: Answer) -> str:
    """A record as lines of at most 80 characters."""
    lines = _wrapped(f"Record {answer.number}: {one_line(answer.given)}".rstrip(": "), "")
    if answer.refusal:
        return "\n".join([*lines, *_wrapped(f"Not read: {one_line(answer.refusal)}.")]) + "\n"
    lines += _wrapped(f"Read as {answer.read_as}.")
    for note in answer.notes:
        lines += _wrapped(f"Note: {one_line(note)}")
    for derived in answer.derived():
        head = heading(derived_json(derived))
        lines += ["", *_wrapped(head[0].upper() + head[1:])]
        for step in derived.steps:
            lines += _wrapped(step, "    ")
    lines += _rest(answer)
    return "\n".join(lines) + "\n"


def _rest(answer: Answer) -> list[str]:
    """What has no letter, so that nothing looks complete that is not."""
    lines: list[str] = []
    if not answer.units:
        lines += ["", *_wrapped("No unit has a configuration here.")]
    if answer.open:
        assert answer.structure is not None
        units = "; ".join(_cited(answer.structure, unit.atoms, unit.kind) for unit in answer.open)
        lines += ["", *_wrapped(f"Stereogenic, but without a configuration: {units}.")]
    return lines


def _cited(structure: Structure, atoms: Iterable[int], kind: str) -> str:
    name = namer_for(structure)
    return f"{kind} {'–'.join(name(atom + 1, '') for atom in atoms)}"


def _wrapped(line: str, indent: str = "  ") -> list[str]:
    return wrap(
        line, _WIDTH, initial_indent=indent, subsequent_indent=indent + "  ", break_on_hyphens=False
    )


def _line(answer: Answer) -> str:
    """A record as one line of JSON; `units` is null where it was not read, with `unread`."""
    found: Json = {"units": None}
    if answer.structure is not None:
        name = namer_for(answer.structure)
        pairs = zip(answer.units, answer.derived(), strict=True)
        found["units"] = [_unit(answer.structure, unit, shown, name) for unit, shown in pairs]
        found["unspecified"] = [
            {"kind": unit.kind, "atoms": [position(answer.structure, atom) for atom in unit.atoms]}
            for unit in answer.open
        ]
    else:
        found["unread"] = answer.refusal
    found |= {"record": answer.number, "input": answer.given, "read_as": answer.read_as}
    found["notes"] = list(answer.notes)
    return json.dumps(found, ensure_ascii=False) + "\n"


def _unit(structure: Structure, unit: Descriptor, shown: Derived, name: Namer) -> Json:
    steps: list[Json] = []
    if unit.derivation is not None:
        ranks = unit.derivation.ranks
        ends = dict.fromkeys(rank.end for rank in ranks)
        for end, told in zip(ends, ranking(ranks, name), strict=True):
            rows = [
                {"rank": one.rank, "ligand": _at(structure, one.ligand), "label": one.label}
                for one in ranks
                if one.end == end
            ]
            end = _at(structure, end)
            steps.append({"step": "ranks", "text": told, "end": end, "ranks": rows})
        steps += [_comparison(structure, one, name) for one in unit.derivation.comparisons]
        steps += [{"step": "reading", "text": told} for told in unit.reading]
    return {
        "kind": unit.kind,
        "atoms": list(shown.atoms),
        "locant": shown.locant,
        "descriptor": shown.descriptor or None,
        "certain": bool(shown.descriptor),
        "ours": unit.ours or None,
        "library": unit.library or None,
        "note": shown.note,
        "derivation": steps,
    }


def _comparison(structure: Structure, comparison: Comparison, name: Namer) -> Json:
    return {
        "step": "comparison",
        "text": comparing(comparison, name),
        "rule": comparison.rule,
        "sphere": comparison.sphere,
        "higher": _side(structure, comparison.higher),
        "lower": _side(structure, comparison.lower),
        "reference": comparison.reference or None,
    }


def _side(structure: Structure, side: Side) -> Json:
    return {
        "ligand": _at(structure, side.ligand),
        "path": [_at(structure, atom) for atom in side.path],
        "set": [
            {
                "atom": _at(structure, entry.atom),
                "label": entry.label,
                "value": entry.value,
                "duplicate": entry.duplicate,
                "descriptor": entry.descriptor or None,
            }
            for entry in side.entries
        ],
    }


def _at(structure: Structure, atom: int) -> int:
    """The source's number of an atom, 0 for one that is not drawn."""
    return position(structure, atom - 1) if atom else 0


def _page(answers: Iterable[Answer]) -> bytes:
    """All records as one page that needs nothing but itself."""
    records = []
    for answer in answers:
        drawing = answer.drawing
        records.append(
            {
                "number": answer.number,
                "given": answer.given,
                "read_as": answer.read_as,
                "refusal": answer.refusal,
                "notes": answer.notes,
                "drawing": drawing_json(drawing),
                "units": [derived_json(one) for one in answer.derived(drawing)],
                "open": [
                    _cited(answer.structure, unit.atoms, unit.kind)
                    for unit in answer.open
                    if answer.structure is not None
                ],
            }
        )
    return html.derivations(records)
