"""A TOML file that knows the line of each of its keys, so that a mistake can be pointed at."""

from __future__ import annotations

import difflib
import re
import tomllib
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

Step = str | int
_PART = r"""(?:[A-Za-z0-9_-]+|"(?:[^"\\\n]|\\.)*"|'[^'\n]*')"""
_DOTTED = rf"{_PART}(?:\s*\.\s*{_PART})*"
_HEADER = re.compile(rf"\s*\[(\[?)\s*({_DOTTED})\s*\]")
_ASSIGNED = re.compile(rf"\s*({_DOTTED})\s*=(.*)", re.DOTALL)
_PARSER_LINE = re.compile(r"\s*\(at line (\d+), column \d+\)")


class TomlError(Exception):
    """A mistake in a TOML file, printed as `file:line: what is wrong`; line 0 is no line, for a
    file that cannot be opened or a folder."""

    def __init__(self, path: Path, line: int, problem: str) -> None:
        super().__init__(f"{path}:{line}: {problem}" if line else f"{path}: {problem}")
        self.path = path
        self.line = line
        self.problem = problem


@dataclass(frozen=True, slots=True)
class TomlFile:
    """A parsed file. `lines` gives the 1-based line for each key, by its steps from the top
    ("rules", "name/lost-space", "grade"); entries of an array of tables count from 0."""

    path: Path
    data: Mapping[str, Any]
    lines: Mapping[tuple[Step, ...], int]
    error: type[TomlError] = TomlError

    def line(self, *steps: Step) -> int:
        """The line of a key, or of the nearest table around it (1 where there is none)."""
        for length in range(len(steps), 0, -1):
            if steps[:length] in self.lines:
                return self.lines[steps[:length]]
        return 1

    def mistake(self, problem: str, *steps: Step) -> TomlError:
        """The error to raise for a mistake at a key."""
        return self.error(self.path, self.line(*steps), problem)

    def table(self, *steps: Step) -> Mapping[str, Any]:
        """The table at a key, empty where the file has none."""
        found: Any = self.data
        for step in steps:
            if isinstance(found, Mapping) and step not in found:
                return {}
            found = found[step]
        if not isinstance(found, Mapping):
            raise self.mistake(f"'{steps[-1]}' must be a table", *steps)
        return found

    def keys_among(self, known: Iterable[str], *steps: Step) -> None:
        """Refuse a key that the table at `steps` may not have."""
        known = tuple(known)
        for key in self.table(*steps):
            if key not in known:
                raise self.mistake(f"unknown key '{key}'{suggestion(key, known)}", *steps, key)

    def text(self, *steps: Step, default: str | None = None) -> str:
        """A string that is not blank; refused where it is missing and has no default."""
        value = self._value(str, "text in quotes", *steps, default=default)
        if not value.strip() and value != default:
            raise self.mistake(f"'{steps[-1]}' is blank", *steps)
        return str(value)

    def texts(self, *steps: Step, default: tuple[str, ...] | None = None) -> tuple[str, ...]:
        """A list of strings."""
        value = self._value(list, "a list of texts in quotes", *steps, default=default)
        if not all(isinstance(entry, str) and entry.strip() for entry in value):
            raise self.mistake(f"'{steps[-1]}' must be a list of texts in quotes", *steps)
        return tuple(value)

    def flag(self, *steps: Step) -> bool:
        """True or false; false where missing."""
        return bool(self._value(bool, "true or false", *steps, default=False))

    def entries(self, name: str, *steps: Step) -> int:
        """How many entries the array of tables `name` has; each is read by its number."""
        found = self.table(*steps).get(name, [])
        if not isinstance(found, list) or not all(isinstance(entry, dict) for entry in found):
            raise self.mistake(f"'{name}' must be written as [[{name}]] tables", *steps, name)
        return len(found)

    def one_of(self, words: Iterable[str], *steps: Step, default: str | None = None) -> str:
        """A string from a fixed list of words."""
        word, words = self.text(*steps, default=default), tuple(words)
        if word not in words:
            raise self.mistake(f"'{steps[-1]}' is '{word}'{suggestion(word, words)}", *steps)
        return word

    def _value(self, kind: type, wanted: str, *steps: Step, default: Any) -> Any:
        table = self.table(*steps[:-1])
        value = table.get(str(steps[-1]), default)
        if value is None:
            raise self.mistake(f"the key '{steps[-1]}' is missing", *steps[:-1])
        if value is not default and not isinstance(value, kind):
            raise self.mistake(f"'{steps[-1]}' must be {wanted}", *steps)
        return value


def load(path: Path, error: type[TomlError] = TomlError) -> TomlFile:
    """Read a file.

    Raises `error` where it cannot be opened, is not UTF-8 or is not TOML.
    """
    try:
        text = path.read_text(encoding="utf-8-sig")
    except OSError as trouble:
        raise error(path, 0, f"cannot be read: {trouble.strerror or trouble}") from trouble
    except UnicodeDecodeError as trouble:
        line = trouble.object[: trouble.start].count(b"\n") + 1
        raise error(path, line, "is not UTF-8 text") from trouble
    try:
        data = tomllib.loads(text)
    except tomllib.TOMLDecodeError as trouble:
        found = _PARSER_LINE.search(str(trouble))
        line = int(found[1]) if found else text.count("\n") + 1
        raise error(path, line, f"not TOML: {_PARSER_LINE.sub('', str(trouble))}") from trouble
    return TomlFile(path, data, _key_lines(text), error)


def suggestion(word: str, known: Iterable[str]) -> str:
    """`; did you mean 'x'?` where one of the known words is close, else the list of them."""
    words = sorted(known)
    close = difflib.get_close_matches(word.lower(), words, n=1)
    if close:
        return f"; did you mean '{close[0]}'?"
    return f"; known: {', '.join(words)}" if words else ""


def _key_lines(text: str) -> dict[tuple[Step, ...], int]:
    """Where each key stands. The text is valid TOML already, so a light reading is enough: what
    it must not do is take a line inside a long string for a key."""
    lines: dict[tuple[Step, ...], int] = {}
    counts: dict[tuple[Step, ...], int] = {}
    table: tuple[Step, ...] = ()
    open_quote = ""
    for number, line in enumerate(text.split("\n"), 1):
        if open_quote:
            rest = line.partition(open_quote)[2]
            open_quote = "" if open_quote in line else open_quote
            if not open_quote:
                open_quote = _left_open(rest)
            continue
        if header := _HEADER.match(line):
            table = _resolve(_parts(header[2]), counts)
            if header[1]:
                counts[table] = counts.get(table, -1) + 1
                lines.setdefault(table, number)
                table = (*table, counts[table])
            for length in range(1, len(table) + 1):
                lines.setdefault(table[:length], number)
        elif assigned := _ASSIGNED.match(line):
            steps: tuple[Step, ...] = table
            for part in _parts(assigned[1]):
                steps = (*steps, part)
                lines.setdefault(steps, number)
            open_quote = _left_open(assigned[2])
        else:
            open_quote = _left_open(line)
    return lines


def _parts(dotted: str) -> list[str]:
    return [part[1:-1] if part[0] in "\"'" else part for part in re.findall(_PART, dotted)]


def _resolve(parts: list[str], counts: Mapping[tuple[Step, ...], int]) -> tuple[Step, ...]:
    """A header's steps, with the index of the latest entry wherever it passes through an array
    of tables (but not after its last part: that may open a new entry)."""
    steps: tuple[Step, ...] = ()
    for part in parts:
        if steps in counts:
            steps = (*steps, counts[steps])
        steps = (*steps, part)
    return steps


def _left_open(value: str) -> str:
    """The triple quote that a line leaves open, or ""."""
    place = 0
    while found := re.compile(r"\"\"\"|'''|\"(?:[^\"\\]|\\.)*\"|'[^']*'|#").search(value, place):
        token = found[0]
        if token == "#":
            return ""
        if token not in ('"""', "'''"):
            place = found.end()
            continue
        end = value.find(token, found.end())
        if end < 0:
            return token
        place = end + 3
    return ""
