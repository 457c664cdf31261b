"""The catalogue for a reader: a line a rule, or one rule's page with its examples."""

from __future__ import annotations

import json
import textwrap
from collections.abc import Iterable, Iterator
from typing import Any

from dossiercheck.rulefile import Example, Rule

_WIDTH = 88


def listing(rules: Iterable[Rule]) -> str:
    """Id, grade and title of each rule in columns."""
    rules = tuple(rules)
    widest = max((len(rule.id) for rule in rules), default=0)
    return "".join(
        f"{rule.id:<{widest}}  {'off' if rule.off else rule.grade:<8}  {rule.title}\n"
        for rule in rules
    )


def page(rule: Rule) -> str:
    """Everything that the rule says of itself."""
    lines = [rule.id, rule.title, ""]
    lines += _entry("grade", rule.grade)
    if rule.off:
        lines += _entry("off", rule.off)
    lines += _entry("why", rule.why)
    lines += _entry("basis", rule.basis)
    lines += _entry("needs", ", ".join(rule.needs))
    lines += _entry("says", rule.message)
    lines += _entry("remedy", rule.remedy)
    if rule.params:
        given = ", ".join(f"{name} = {value}" for name, value in rule.params.items())
        lines += _entry("params", given)
    for number, example in enumerate(rule.examples, 1):
        lines += ["", *_example(number, example)]
    return "\n".join(lines) + "\n"


def as_json(rules: Iterable[Rule]) -> str:
    """The rules as a JSON list, with their examples."""
    return json.dumps([_fields(rule) for rule in rules], ensure_ascii=False, indent=2) + "\n"


def _entry(name: str, text: str) -> list[str]:
    return textwrap.wrap(
        text,
        _WIDTH,
        initial_indent=f"{name:<8}",
        subsequent_indent=" " * 8,
        break_long_words=False,
        break_on_hyphens=False,
    )


def _example(number: int, example: Example) -> Iterator[str]:
    outcome = "gives this finding" if example.finding else "gives nothing"
    yield f"Example {number}: {outcome}"
    if example.note:
        yield from textwrap.wrap(
            example.note, _WIDTH - 2, initial_indent="  ", subsequent_indent="  "
        )
    for place, record in enumerate(example.records):
        if place:
            yield "  and elsewhere in the dossier"
        for key, value in record.items():
            if key == "molfile":
                yield f"  {key}:"
                yield from (f"    {line}" for line in value.rstrip("\n").split("\n"))
            else:
                yield f"  {key}: {value}"
    for name, text in example.files.items():
        yield f"  file {name}:"
        yield from (f"    {line}" for line in text.rstrip("\n").split("\n"))


def _fields(rule: Rule) -> dict[str, Any]:
    return {
        "id": rule.id,
        "title": rule.title,
        "grade": str(rule.grade),
        "why": rule.why,
        "basis": rule.basis,
        "check": rule.check,
        "needs": list(rule.needs),
        "message": rule.message,
        "remedy": rule.remedy,
        "params": dict(rule.params),
        "off": rule.off,
        "examples": [
            {
                "expect": "finding" if example.finding else "nothing",
                "note": example.note,
                "records": [dict(record) for record in example.records],
                "files": dict(example.files),
            }
            for example in rule.examples
        ],
    }
