"""One rule of the catalogue: the file `<family>/<slug>.toml`, read and bound to its check.

A rule file says what matters and why, in words for a reviewer; the check it names says what is
the case. Whatever is wrong with the file is refused at start, with file and line.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from pathlib import Path
from string import Formatter
from typing import Any

from dossiercheck import tomlfile
from dossiercheck.checks import registry
from dossiercheck.checks.registry import Check
from dossiercheck.model import Grade, Kind
from dossiercheck.tomlfile import TomlError, TomlFile

FAMILIES = (
    "name",
    "drawing",
    "name-and-drawing",
    "statement",
    "identity",
    "across-documents",
    "absolute-structure",
    "coverage",
)
STRUCTURE = "structure"  # a need that any evidence meets from which a structure can be had
SEQUENCE = "sequence"  # a need that only a submission as a whole meets
DOSSIER = "dossier"  # a need that only all substances together meet
_GIVES_STRUCTURE = frozenset({Kind.DRAWING, Kind.NOTATION, Kind.COORDINATES, Kind.NAME})
_KEYS = (
    "basis",
    "check",
    "example",
    "grade",
    "message",
    "needs",
    "params",
    "remedy",
    "title",
    "why",
)
EVIDENCE_KEYS = (
    "absolute",
    "flack",
    "formula",
    "inchi",
    "inchikey",
    "label",
    "mass",
    "molfile",
    "name",
    "registry",
    "rotation",
    "smiles",
    "space_group",
    "stereo",
)
_OUTCOMES = ("finding", "nothing")
_SLUG = re.compile(r"[a-z][a-z0-9]*(?:-[a-z0-9]+)*")


class RuleError(TomlError):
    """A mistake in a rule file, as one line with file and line number."""


@dataclass(frozen=True, slots=True)
class Example:
    """Evidence under which a rule must speak or be silent. Each record is what one place of the
    dossier says, by EVIDENCE_KEYS; `files` are texts by their names in the dossier, for what
    records cannot say; `note` tells a reader what to look at."""

    finding: bool
    records: tuple[Mapping[str, str], ...]
    note: str = ""
    files: Mapping[str, str] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class Rule:
    """One entry of the catalogue. `off` is the justification for switching it off, or ""."""

    id: str
    title: str
    grade: Grade
    why: str
    basis: str
    check: str
    needs: tuple[str, ...]
    message: str
    remedy: str
    params: Mapping[str, Any]
    examples: tuple[Example, ...]
    off: str = ""

    def applies(self, kinds: frozenset[str] | None) -> bool:
        """Whether a case with these kinds of evidence is to be judged by it (None: any case)."""
        if self.off:
            return False
        return kinds is None or all(
            not _GIVES_STRUCTURE.isdisjoint(kinds) if need == STRUCTURE else need in kinds
            for need in self.needs
        )


def read_folder(folder: Path) -> Iterator[Rule]:
    """Every rule of a folder, in the order of their paths.

    Raises RuleError, also for a folder without any rule.
    """
    if not folder.is_dir():
        raise RuleError(folder, 0, "is not a folder of rules")
    files = sorted(folder.rglob("*.toml"))
    if not files:
        raise RuleError(folder, 0, "holds no rule; a rule is a file <family>/<slug>.toml")
    for path in files:
        yield read(path, folder)


def read(path: Path, folder: Path) -> Rule:
    """One rule file of a folder, validated against the check it names.

    Raises RuleError with the line of the mistake.
    """
    file = tomlfile.load(path, RuleError)
    family, _, slug = path.relative_to(folder).with_suffix("").as_posix().rpartition("/")
    if family not in FAMILIES:
        hint = tomlfile.suggestion(family, FAMILIES)
        raise file.mistake(f"a rule stands in the folder of its family, not in '{family}'{hint}")
    if not _SLUG.fullmatch(slug):
        raise file.mistake(
            f"the file name '{slug}' is not made of small letters and digits joined by hyphens"
        )
    file.keys_among(_KEYS)
    check = _check(file)
    return Rule(
        id=f"{family}/{slug}",
        title=file.text("title"),
        grade=Grade(file.one_of(Grade, "grade")),
        why=_flowing(file.text("why")),
        basis=_flowing(file.text("basis")),
        check=check.name,
        needs=_needs(file),
        message=_message(file, check),
        remedy=_flowing(file.text("remedy")),
        params=_params(file, check),
        examples=tuple(_examples(file)),
    )


def typed(check: Check, name: str, value: Any) -> Any:
    """A parameter's value as the check wants it.

    Raises ValueError, with the reason as its text.
    """
    if name not in check.params:
        hint = tomlfile.suggestion(name, check.params)
        raise ValueError(f"the check '{check.name}' has no parameter '{name}'{hint}")
    wanted = check.params[name]
    if wanted is float and type(value) is int:
        return float(value)
    if type(value) is not wanted:  # not isinstance: true is not the number 1
        raise ValueError(f"the parameter '{name}' must be of type {wanted.__name__}")
    return value


def _flowing(text: str) -> str:
    """A text that the file breaks into lines, as one paragraph."""
    return " ".join(text.split())


def _check(file: TomlFile) -> Check:
    name = file.text("check")
    if name not in registry.CHECKS:
        hint = tomlfile.suggestion(name, registry.CHECKS)
        raise file.mistake(f"no check is called '{name}'{hint}", "check")
    return registry.CHECKS[name]


def _needs(file: TomlFile) -> tuple[str, ...]:
    needs = file.texts("needs")
    known = (*Kind, STRUCTURE, SEQUENCE, DOSSIER)
    for need in needs:
        if need not in known:
            hint = tomlfile.suggestion(need, known)
            raise file.mistake(f"'{need}' is no kind of evidence{hint}", "needs")
    if not needs:
        raise file.mistake("'needs' names no kind of evidence", "needs")
    return needs


def _message(file: TomlFile, check: Check) -> str:
    """The template, which may use the check's fields by their plain names and nothing else."""
    template = _flowing(file.text("message"))
    try:
        parts = list(Formatter().parse(template))
    except ValueError as trouble:
        raise file.mistake(f"'message' is no template: {trouble}", "message") from trouble
    for _, name, form, conversion in parts:
        if name is not None and (name not in check.fields or form or conversion):
            hint = tomlfile.suggestion(name, check.fields)
            raise file.mistake(
                f"'message' uses {{{name}}}, which the check '{check.name}' does not offer{hint}",
                "message",
            )
    return template


def _params(file: TomlFile, check: Check) -> dict[str, Any]:
    given = file.table("params")
    bound = {}
    for name, value in given.items():
        try:
            bound[name] = typed(check, name, value)
        except ValueError as trouble:
            raise file.mistake(str(trouble), "params", name) from trouble
    for name in check.params:
        if name not in bound:
            raise file.mistake(f"the check '{check.name}' needs the parameter '{name}'", "params")
    return bound


def _examples(file: TomlFile) -> Iterator[Example]:
    count = file.entries("example")
    if not count:
        raise file.mistake("a rule has at least one [[example]]")
    for number in range(count):
        at = ("example", number)
        said = ("files",) if "files" in file.table(*at) else (*EVIDENCE_KEYS, "elsewhere")
        file.keys_among((*said, "expect", "note"), *at)
        outcome = file.one_of(_OUTCOMES, *at, "expect")
        files = {name: file.text(*at, "files", name) for name in file.table(*at, "files")}
        records = [] if files else [_record(file, *at)]
        for other in range(file.entries("elsewhere", *at)):
            file.keys_among(EVIDENCE_KEYS, *at, "elsewhere", other)
            records.append(_record(file, *at, "elsewhere", other))
        note = _flowing(file.text(*at, "note", default=""))
        yield Example(outcome == "finding", tuple(records), note, files)


def _record(file: TomlFile, *at: str | int) -> Mapping[str, str]:
    record = {key: file.text(*at, key) for key in EVIDENCE_KEYS if key in file.table(*at)}
    if not record:
        raise file.mistake("an example gives evidence, such as a name and a molfile", *at)
    return record
