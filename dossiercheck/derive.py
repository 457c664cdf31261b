"""One structure or a file of them, with every unit's descriptor and how it follows."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from itertools import chain, islice
from pathlib import Path

from dossiercheck.interpretation import structure_of
from dossiercheck.limits import DEFAULT, Refused, decode, unify_line_ends
from dossiercheck.model import Derived, Drawing, Record, Source, Unread
from dossiercheck.names import NameParser, NameReading, read_names
from dossiercheck.readers import molfile
from dossiercheck.stereo.descriptors import Descriptor, descriptors
from dossiercheck.stereo.drawing import drawing_of
from dossiercheck.stereo.notation import KEY
from dossiercheck.stereo.perception import from_inchi, from_molblock, from_smiles, quiet
from dossiercheck.stereo.showing import shown
from dossiercheck.stereo.structure import Structure, Unit, Unreadable

DRAWN = (".mol", ".sdf", ".sd")
LINES = (".smi", ".smiles", ".txt")
STDIN = "-"
_PIECE = 200
_TABLE = re.compile(r"^M  END", re.MULTILINE)
# A SMILES, then its extension block between bars or a title behind it.
_COLUMNS = re.compile(r"(\S+)(?:\s+(\|[^|]*\|))?(?:\s+(.*))?")


class CannotRead(Exception):
    """The input as a whole gave nothing; the message says why."""


@dataclass(frozen=True, slots=True)
class Answer:
    """One record.

    `given` is its text, or for a connection table its title; `read_as` is what it was taken for;
    `open` are stereogenic units without a configuration; `assumed` are atoms (0-based) whose
    configuration nobody stated, with the reason; `notes` say what to mind. Where nothing was read
    `structure` is None and `refusal` says why.
    """

    number: int
    given: str
    read_as: str = ""
    structure: Structure | None = None
    units: tuple[Descriptor, ...] = ()
    open: tuple[Unit, ...] = ()
    assumed: Mapping[int, str] = field(default_factory=dict)
    notes: tuple[str, ...] = ()
    refusal: str = ""

    def derived(self, drawing: Drawing | None = None) -> tuple[Derived, ...]:
        """The units in sentences; with `drawing`, also as they are seen in it."""
        if self.structure is None:
            return ()
        return tuple(
            shown(
                self.structure,
                unit,
                drawing,
                next((self.assumed[atom] for atom in unit.atoms if atom in self.assumed), ""),
            )
            for unit in self.units
        )

    @property
    def drawing(self) -> Drawing | None:
        """The structure in its own coordinates, or laid out where it has none."""
        return drawing_of(self.structure) if self.structure is not None else None


@dataclass(slots=True)
class Counted:
    """Answers on their way to the printer, counted as they pass."""

    records: int = 0
    unread: int = 0

    def over(self, answers: Iterable[Answer]) -> Iterator[Answer]:
        """The answers themselves."""
        for answer in answers:
            self.records += 1
            self.unread += bool(answer.refusal)
            yield answer

    def __str__(self) -> str:
        """What was not read, as a sentence."""
        return f"{self.unread} of {self.records} records could not be read"


def is_file(given: str) -> bool:
    """Whether an argument is a path and not a structure."""
    if given == STDIN:
        return True
    try:
        if Path(given).exists():
            return True
    except (OSError, ValueError):  # a long name, or one with a NUL, is no path
        return False
    return given.lower().endswith((*DRAWN, *LINES)) and not given.startswith("InChI=")


def answers(given: str, stdin: bytes = b"") -> Iterator[Answer]:
    """The answers to a structure, a name or a file (`STDIN` for the bytes given), in order.

    Raises CannotRead where there is no such file, where it is of no kind that is read, and where
    there is one record alone that cannot be read; ParserMissing where a name cannot be asked for.
    """
    found = _answers(given, stdin)
    first = list(islice(found, 2))
    if not first:
        raise CannotRead(f"{given}: no record was found")
    if len(first) == 1 and first[0].refusal:
        one = first[0]
        what = f" ({one.read_as})" if one.read_as else ""
        raise CannotRead(f"'{one.given or given}'{what} cannot be read: {one.refusal}")
    return chain(first, found)


def _answers(given: str, stdin: bytes) -> Iterator[Answer]:
    if not is_file(given):
        return _of_lines([(1, given.strip())], columns=False)
    suffix, data = ("", stdin) if given == STDIN else _file(Path(given))
    if len(data) > DEFAULT.source_bytes:
        raise CannotRead(f"{given}: {len(data)} bytes, more than the budget")
    try:
        text = unify_line_ends(decode(data)[0])
    except Refused as refused:
        raise CannotRead(f"{given}: {refused.detail}") from refused
    if not text.strip():
        raise CannotRead(f"{given}: there is nothing in it")
    if suffix in DRAWN or _TABLE.search(text):
        items = molfile.read(Source(given, "", len(data), suffix.lstrip(".")), data)
        return _of_tables(items)
    lines = (line.strip() for line in text.split("\n") if line.strip())
    return _of_lines(list(enumerate(lines, 1)), columns=suffix in (".smi", ".smiles"))


def _file(path: Path) -> tuple[str, bytes]:
    suffix = path.suffix.lower()
    if path.is_dir():
        raise CannotRead(f"{path} is a folder; give a file, a name or a notation")
    if suffix not in (*DRAWN, *LINES):
        known = ", ".join((*DRAWN, *LINES))
        raise CannotRead(f"{path}: files that are read end in {known}")
    try:
        return suffix, path.read_bytes()
    except FileNotFoundError:
        raise CannotRead(f"no such file: {path}") from None
    except OSError as error:
        raise CannotRead(f"{path}: {error.strerror or error}") from error


def _of_tables(items: Iterator[Record | object]) -> Iterator[Answer]:
    number = 0
    for item in items:
        if isinstance(item, Record):
            number = item.place.record or number + 1
            if item.molblock:
                yield _table(number, item.title, item.molblock)
        elif isinstance(item, Unread) and item.reason != "stray-lines":
            number = item.place.record or number + 1
            yield Answer(number, item.text, "connection table", refusal=item.detail)


def _table(number: int, title: str, molblock: str) -> Answer:
    try:
        return _answer(number, title, "connection table", from_molblock(molblock))
    except Unreadable as error:
        return Answer(number, title, "connection table", refusal=str(error))


def _of_lines(lines: Sequence[tuple[int, str]], columns: bool) -> Iterator[Answer]:
    """Lines that are a SMILES, an InChI or a name each; with `columns` a SMILES and its title."""
    with NameParser() as parser:
        for start in range(0, len(lines), _PIECE):
            piece = lines[start : start + _PIECE]
            read = [_notation(number, line, columns) for number, line in piece]
            names = [
                line
                for (_, line), answer in zip(piece, read, strict=True)
                if answer.refusal and not answer.read_as
            ]
            named = iter(read_names(names, parser) if names else ())
            for (_, line), answer in zip(piece, read, strict=True):
                if answer.refusal and not answer.read_as:
                    yield _named(answer, line, next(named))
                else:
                    yield answer


def _notation(number: int, line: str, columns: bool) -> Answer:
    """A line as a notation; `read_as` stays "" where it may still be a name."""
    if line.startswith("InChI="):
        try:
            return _answer(number, line, "InChI", from_inchi(line))
        except Unreadable as error:
            return Answer(number, line, "InChI", refusal=str(error))
    if KEY.fullmatch(line.removeprefix("InChIKey=")):
        why = "an InChIKey is a hash: no structure can be had from it"
        return Answer(number, line, "InChIKey", refusal=why)
    parts = _COLUMNS.fullmatch(line)
    first, block, title = parts.groups("") if parts else (line, "", "")
    whole = not title or columns or "\t" in line
    try:
        if not whole:
            raise Unreadable("it has spaces")
        found = _answer(number, title or line, "SMILES", from_smiles(f"{first} {block}".strip()))
    except Unreadable as error:
        return Answer(number, line, "SMILES" if columns else "", refusal=str(error))
    return found


def _named(answer: Answer, line: str, name: NameReading) -> Answer:
    """What a line is as a name, where it is no notation."""
    if name.structure is not None:
        try:
            structure = structure_of(name.structure)
        except Unreadable as error:
            why = f"the name leads to no sound structure: {error}"
            return Answer(answer.number, line, "systematic name", refusal=why)
        found = _answer(answer.number, line, "systematic name", structure)
        assumed = {
            atom: fault.detail
            for fault in name.faults
            if fault.slug == "assumed-configuration"
            for atom in fault.atoms
        }
        notes = dict.fromkeys(fault.detail for fault in name.faults)
        return replace(found, assumed=assumed, notes=(*notes, *found.notes))
    first, *rest = line.split(maxsplit=1)
    if rest:
        try:
            return _answer(answer.number, rest[0], "SMILES", from_smiles(first))
        except Unreadable:
            pass  # what stands before the first space is no SMILES: the name's refusal says more
    detail = name.refusal.detail if name.refusal else "it could not be interpreted"
    why = f"neither a SMILES ({answer.refusal}) nor a systematic name ({detail})"
    return Answer(answer.number, line, refusal=why)


def _answer(number: int, given: str, read_as: str, structure: Structure) -> Answer:
    try:
        with quiet():
            units = descriptors(structure)
            bare = structure.undefined
    except Exception as error:
        why = f"the derivation stopped with {type(error).__name__}: {error}".splitlines()[0]
        return Answer(number, given, read_as, refusal=why)
    told = [structure.doubt] if structure.doubt else []
    if structure.groups:
        told.append(
            f"The source calls the configuration {structure.kind}: the letters are those of the "
            "one stereoisomer that is shown."
        )
    return Answer(number, given, read_as, structure, units, bare, notes=tuple(told))
