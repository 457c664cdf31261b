"""`dossiercheck.toml`: what a user tells the program about one dossier or one house.

Everything in it is optional. A mistake in it is refused with file and line before anything is
read, because a setting that is silently not obeyed would make a dossier look checked.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

from dossiercheck import tomlfile
from dossiercheck.model import Grade
from dossiercheck.tomlfile import TomlError, TomlFile

FILE_NAME = "dossiercheck.toml"
FORMATS = ("html", "json", "text")
COLUMN_ROLES = (
    "name",
    "smiles",
    "inchi",
    "inchikey",
    "formula",
    "mass",
    "registry",
    "label",
    "stereo",
    "absolute",
    "flack",
    "rotation",
    "space_group",
    "molfile",
    "ignore",
)


class SettingsError(TomlError):
    """A mistake in the settings, as one line with file and line number."""


@dataclass(frozen=True, slots=True)
class RegisterEntry:
    """A substance that the user declares: what the dossier may call it, what part it plays
    ("drug substance", "impurity", …) and, where given, what it is."""

    id: str
    aliases: tuple[str, ...] = ()
    role: str = ""
    smiles: str = ""
    name: str = ""


@dataclass(frozen=True, slots=True)
class RuleOverride:
    """What the user changes about one rule. `off` is the justification for switching it off, ""
    where it stays on; `params` replace the rule's own one by one; `line` is where it is said."""

    grade: Grade | None = None
    params: Mapping[str, Any] = field(default_factory=dict)
    off: str = ""
    line: int = 1


@dataclass(frozen=True, slots=True)
class Settings:
    """The settings in force. `columns` maps a heading, as printed, to one of COLUMN_ROLES;
    `path` is the file they came from, None where there was none."""

    columns: Mapping[str, str] = field(default_factory=dict)
    register: tuple[RegisterEntry, ...] = ()
    rules: Mapping[str, RuleOverride] = field(default_factory=dict)
    fail_on: Grade = Grade.MINOR
    jobs: int = 1
    formats: tuple[str, ...] = ("html", "json")
    path: Path | None = None


def find(given: Sequence[Path]) -> Path | None:
    """The settings file in the first folder among the paths given, if it has one."""
    folder = next((path for path in given if path.is_dir()), None)
    if folder is None or not (folder / FILE_NAME).is_file():
        return None
    return folder / FILE_NAME


def load(path: Path | None) -> Settings:
    """Read a settings file; the defaults where `path` is None.

    Raises SettingsError at the first mistake.
    """
    if path is None:
        return Settings()
    file = tomlfile.load(path, SettingsError)
    file.keys_among(("columns", "fail_on", "formats", "jobs", "rules", "substance"))
    return Settings(
        columns=_columns(file),
        register=_register(file),
        rules={name: _override(file, name) for name in file.table("rules")},
        fail_on=Grade(file.one_of(Grade, "fail_on", default=Grade.MINOR)),
        jobs=_jobs(file),
        formats=_formats(file),
        path=path,
    )


def _columns(file: TomlFile) -> dict[str, str]:
    return {
        heading: file.one_of(COLUMN_ROLES, "columns", heading) for heading in file.table("columns")
    }


def _register(file: TomlFile) -> tuple[RegisterEntry, ...]:
    entries: list[RegisterEntry] = []
    called: dict[str, str] = {}
    for number in range(file.entries("substance")):
        at = ("substance", number)
        file.keys_among(("aliases", "id", "name", "role", "smiles"), *at)
        entry = RegisterEntry(
            id=file.text(*at, "id"),
            aliases=file.texts(*at, "aliases", default=()),
            role=file.text(*at, "role", default=""),
            smiles=file.text(*at, "smiles", default=""),
            name=file.text(*at, "name", default=""),
        )
        for label in (entry.id, *entry.aliases):
            if called.setdefault(label, entry.id) != entry.id:
                raise file.mistake(f"'{label}' is given to two substances", *at)
        if entry.id in (earlier.id for earlier in entries):
            raise file.mistake(f"the substance '{entry.id}' is declared twice", *at, "id")
        entries.append(entry)
    return tuple(entries)


def _override(file: TomlFile, rule: str) -> RuleOverride:
    at = ("rules", rule)
    file.keys_among(("grade", "justification", "off", "params"), *at)
    grade = file.one_of(Grade, *at, "grade") if "grade" in file.table(*at) else None
    off = file.flag(*at, "off")
    if off and "justification" not in file.table(*at):
        raise file.mistake(
            f"'{rule}' is switched off without a 'justification'; the report prints it", *at, "off"
        )
    if not off and "justification" in file.table(*at):
        raise file.mistake("'justification' goes with off = true", *at, "justification")
    return RuleOverride(
        grade=Grade(grade) if grade else None,
        params=dict(file.table(*at, "params")),
        off=file.text(*at, "justification") if off else "",
        line=file.line(*at),
    )


def _jobs(file: TomlFile) -> int:
    jobs = file.data.get("jobs", 1)
    if not isinstance(jobs, int) or isinstance(jobs, bool) or jobs < 1:
        raise file.mistake("'jobs' must be a whole number from 1", "jobs")
    return jobs


def _formats(file: TomlFile) -> tuple[str, ...]:
    formats = file.texts("formats", default=("html", "json"))
    for name in formats:
        if name not in FORMATS:
            raise file.mistake(
                f"unknown format '{name}'{tomlfile.suggestion(name, FORMATS)}", "formats"
            )
    if not formats:
        raise file.mistake("'formats' names no format", "formats")
    return formats
