"""The data that travels down the line. Imports nothing of ours.

Everything here is frozen: a stage receives values and yields new ones. The last type,
`Review`, is what every report format is made from.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from enum import StrEnum
from typing import NamedTuple


class Kind(StrEnum):
    """What sort of thing a place says about a substance."""

    DRAWING = "drawing"
    NAME = "name"
    NOTATION = "notation"
    COORDINATES = "coordinates"
    STATEMENT = "statement"
    PROPERTY = "property"


class Role(StrEnum):
    """The form in which it is said; decides how the text is interpreted."""

    MOLFILE = "molfile"
    NAME = "systematic name"
    SMILES = "SMILES"
    INCHI = "InChI"
    INCHIKEY = "InChIKey"
    FORMULA = "molecular formula"
    MASS = "relative molecular mass"
    REGISTRY = "registry number"
    STEREO = "stereochemistry statement"
    ROTATION = "optical rotation"
    ABSOLUTE = "claim of absolute configuration"
    FLACK = "Flack parameter"
    SPACE_GROUP = "space group"

    @property
    def kind(self) -> Kind:
        """The kind of evidence a text in this role is, before it is looked into."""
        return _KINDS[self]


_KINDS = {
    Role.MOLFILE: Kind.DRAWING,
    Role.NAME: Kind.NAME,
    Role.SMILES: Kind.NOTATION,
    Role.INCHI: Kind.NOTATION,
    Role.INCHIKEY: Kind.NOTATION,
    Role.FORMULA: Kind.PROPERTY,
    Role.MASS: Kind.PROPERTY,
    Role.REGISTRY: Kind.PROPERTY,
    Role.STEREO: Kind.STATEMENT,
    Role.ROTATION: Kind.PROPERTY,
    Role.ABSOLUTE: Kind.STATEMENT,
    Role.FLACK: Kind.PROPERTY,
    Role.SPACE_GROUP: Kind.PROPERTY,
}


class Grade(StrEnum):
    """The trade's deficiency grades (common practice), gravest first."""

    CRITICAL = "critical"
    MAJOR = "major"
    MINOR = "minor"
    REMARK = "remark"

    @property
    def gravity(self) -> int:
        """0 for the gravest; sort key."""
        return _GRAVITY[self]


_GRAVITY = {grade: number for number, grade in enumerate(Grade)}


class State(StrEnum):
    """What one evidence says of one stereogenic unit, held against the reference."""

    AGREES = "agrees"
    DIFFERS = "differs"
    SILENT = "silent"
    UNDETERMINED = "undetermined"


@dataclass(frozen=True, slots=True)
class Source:
    """One file of the dossier. `path` is relative to what was given, with forward slashes."""

    path: str
    sha256: str
    size: int
    format: str


@dataclass(frozen=True, slots=True)
class Place:
    """Where in a source. Numbers are 1-based as a person counts; `span` is 0-based characters
    of the paragraph, line, cell or field value, end excluded. `path` is an XPath of local names in
    an XML source ("/document/component[2]"), a JSONPath in a JSON source ("$.entry[0]"). `box` is
    left, top, right and bottom in points from the top left corner of the page as it is shown."""

    source: str
    section: str | None = None
    sheet: str | None = None
    table: int | None = None
    row: int | None = None
    column: str | None = None
    paragraph: int | None = None
    line: int | None = None
    record: int | None = None
    field: str | None = None
    span: tuple[int, int] | None = None
    path: str | None = None
    page: int | None = None
    box: tuple[float, float, float, float] | None = None

    def __str__(self) -> str:
        """The place as one phrase, without the source's path."""
        parts = [
            f"page {self.page}" if self.page else "",
            f"section {self.section}" if self.section else "",
            f"sheet {self.sheet}" if self.sheet else "",
            f"table {self.table}" if self.table else "",
            f"record {self.record}" if self.record else "",
            f"field {self.field}" if self.field else "",
            f"row {self.row}" if self.row else "",
            f"column {self.column}" if self.column else "",
            f"paragraph {self.paragraph}" if self.paragraph else "",
            f"line {self.line}" if self.line else "",
            f"at {self.path}" if self.path else "",
            f"characters {self.span[0] + 1}–{self.span[1]}" if self.span else "",
        ]
        return ", ".join(part for part in parts if part) or "whole file"


@dataclass(frozen=True, slots=True)
class Unread:
    """A source or place that gave no evidence. `reason` is a short slug, `detail` a sentence."""

    place: Place
    reason: str
    detail: str
    text: str = ""


# --- what a reader yields: the source's own shape, not yet its meaning ---------------------


@dataclass(frozen=True, slots=True)
class Pending:
    """A tracked change that nobody has accepted or rejected yet. `start`, `end` are 0-based
    characters of the text as it reads now: what was put in stands there; what was taken out
    (`removed`) stood there."""

    start: int
    end: int
    removed: str = ""


@dataclass(frozen=True, slots=True)
class Field:
    """A named value of a record."""

    name: str
    value: str
    place: Place


@dataclass(frozen=True, slots=True)
class Record:
    """One entry of a structure file: a connection table and its data fields."""

    title: str
    molblock: str
    fields: tuple[Field, ...]
    place: Place


class Stretch(NamedTuple):
    """Where on a page the characters `start` to `end` of a text stand, in one line."""

    start: int
    end: int
    page: int
    box: tuple[float, float, float, float]


@dataclass(frozen=True, slots=True)
class Cell:
    """One table cell. A merged cell is repeated where it reaches, with the same place.
    `breaks` and `stretches` as in a passage."""

    text: str
    place: Place
    pending: tuple[Pending, ...] = ()
    breaks: tuple[int, ...] = ()
    stretches: tuple[Stretch, ...] = ()

    def at(self, start: int, end: int) -> Place:
        """The place of the characters from `start` to `end`."""
        return _at(self.place, self.stretches, start, end)


@dataclass(frozen=True, slots=True)
class Table:
    """Rows of cells as laid out; whether the first row is a heading is not yet decided."""

    rows: tuple[tuple[Cell, ...], ...]
    place: Place
    headings: tuple[str, ...] = ()
    caption: str = ""


@dataclass(frozen=True, slots=True)
class Passage:
    """One paragraph or line of running text under its headings (outermost first).

    `breaks` are the offsets of those line feeds in `text` at which the layout ended a line and
    not the author: what stands on both sides may be one word, cut with a hyphen or without. Any
    other line feed ends what stands before it. `stretches` say where on the pages the text is.
    """

    text: str
    place: Place
    headings: tuple[str, ...] = ()
    pending: tuple[Pending, ...] = ()
    breaks: tuple[int, ...] = ()
    stretches: tuple[Stretch, ...] = ()

    def at(self, start: int, end: int) -> Place:
        """The place of the characters from `start` to `end`."""
        return _at(self.place, self.stretches, start, end)


Item = Record | Table | Passage | Unread


def _at(place: Place, stretches: tuple[Stretch, ...], start: int, end: int) -> Place:
    """With the span, and with the page and box of its beginning where these are known; inside a
    stretch its characters count as equally wide."""
    place = replace(place, span=(start, end))
    boxes = []
    page = None
    for one in stretches:
        if one.end <= start or one.start >= end or page not in (None, one.page):
            continue
        page = one.page
        left, top, right, bottom = one.box
        width = (right - left) / (one.end - one.start)
        boxes.append(
            (
                left + width * max(start - one.start, 0),
                top,
                right - width * max(one.end - end, 0),
                bottom,
            )
        )
    if not boxes:
        return place
    lefts, tops, rights, bottoms = zip(*boxes, strict=True)
    return replace(place, page=page, box=(min(lefts), min(tops), max(rights), max(bottoms)))


# --- evidence -----------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Evidence:
    """One thing that one place says about one substance.

    `text` is verbatim. `group` is the same for evidence that stands together (a record, a row,
    a block of labelled fields), "" for a name that stands alone in running text. `label` is what
    the place calls the substance, "" where it gives none. `pending` are the tracked changes that
    touch it, their characters counted in `text`. `instead` are other extents of a name that ends
    or begins at a line end, each with its own text and place; none is left once it is settled.
    `also` are further labels that the place gives, `under` is what the headings above name, and
    `apart` is true where the sentence speaks of a relative ("its enantiomer, …"). `hints` are words
    set beside a name that are a label if the dossier uses one of them as such. `other` is the label
    of the substance that a statement compares with, where its words only point to it (“its
    enantiomer”).
    """

    id: str
    role: Role
    text: str
    place: Place
    group: str = ""
    label: str = ""
    pending: tuple[Pending, ...] = ()
    instead: tuple[Evidence, ...] = ()
    other: str = ""
    also: tuple[str, ...] = ()
    under: str = ""
    apart: bool = False
    hints: tuple[str, ...] = ()

    @property
    def kind(self) -> Kind:
        """Kind of evidence by role; a molfile with 3D coordinates is told apart later."""
        return self.role.kind


# --- drawings as data ---------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class DrawnAtom:
    """`x`, `y` as in the source's connection table, y upwards; `hydrogens` attached but not
    drawn; `mark` is a short text set beside a highlighted atom ("3R → 3S"), "" for none."""

    x: float
    y: float
    element: str
    charge: int = 0
    hydrogens: int = 0
    isotope: int = 0
    highlight: bool = False
    mark: str = ""


@dataclass(frozen=True, slots=True)
class DrawnBond:
    """`begin`, `end` are 0-based into the atoms; a wedge's narrow end is at `begin`.
    `style`: plain, wedge, hash, wavy, crossed, aromatic (order 4 in the source)."""

    begin: int
    end: int
    order: int
    style: str = "plain"
    highlight: bool = False


@dataclass(frozen=True, slots=True)
class Drawing:
    """A structure to be shown. `laid_out` is true when the program, not the source, placed the
    atoms (a name or a line notation has no coordinates of its own)."""

    atoms: tuple[DrawnAtom, ...]
    bonds: tuple[DrawnBond, ...]
    laid_out: bool = False


@dataclass(frozen=True, slots=True)
class RankPlace:
    """One ligand of a unit in a drawing: its rank, its atom (0-based; -1 where it is not drawn:
    a hydrogen or a lone pair), what to call it, and the unit's atom it hangs from. `held` is the
    rank that its place holds after two exchanges, "" where nothing is exchanged."""

    rank: str
    atom: int
    label: str
    end: int
    held: str = ""


@dataclass(frozen=True, slots=True)
class Sight:
    """A unit as a drawing is read. `atoms` are 0-based: the centre, or the two ends, for an axis
    the near end first. `turn` is the sense in which a, b and c follow as drawn, by the places
    they hold: 1 counter-clockwise, -1 clockwise, 0 where it is not read so. `numbers` are atoms
    (0-based) that the derivation cites, with the text that it calls them."""

    kind: str
    atoms: tuple[int, ...]
    ranks: tuple[RankPlace, ...]
    turn: int = 0
    numbers: tuple[tuple[int, str], ...] = ()


# --- concordance --------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class UnitCell:
    """What one evidence says of one unit. `shows` is its descriptor ("R", "E", "R or S", "—");
    `note` says why where the state alone does not."""

    evidence: str
    state: State
    shows: str
    note: str = ""


@dataclass(frozen=True, slots=True)
class UnitRow:
    """One stereogenic unit of the substance. `atoms` are 1-based positions in the reference
    evidence; `locant` is the name's own locant for it where a name says one."""

    unit: str
    kind: str
    atoms: tuple[int, ...]
    locant: str
    cells: tuple[UnitCell, ...]


@dataclass(frozen=True, slots=True)
class Concordance:
    """Units × evidence for one substance, `reference` being the evidence the others are held
    against. `constitution` says for each structural evidence how its constitution compares."""

    reference: str
    rows: tuple[UnitRow, ...]
    constitution: Mapping[str, str] = field(default_factory=dict)


# --- findings -----------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Derived:
    """How a structure leads to the descriptor of one unit, in sentences.

    `atoms` are 1-based positions in the evidence; `descriptor` is "" where it is not certain,
    `ours` and `library` are the letters of the two computations ("" for none) and `note` says why
    they do not settle it. `sight` belongs to the drawing shown beside it.
    """

    kind: str
    atoms: tuple[int, ...]
    locant: str
    descriptor: str
    ours: str
    library: str
    note: str
    steps: tuple[str, ...]
    sight: Sight | None = None


@dataclass(frozen=True, slots=True)
class Exhibit:
    """One side of a finding: an evidence verbatim, with the characters of it that matter
    (`marks`, 0-based spans into `text`) and a drawing where there is one to show; `derived` has
    the derivation of each unit that the finding speaks of."""

    evidence: str
    title: str
    text: str
    place: Place
    marks: tuple[tuple[int, int], ...] = ()
    drawing: Drawing | None = None
    note: str = ""
    derived: tuple[Derived, ...] = ()


@dataclass(frozen=True, slots=True)
class Finding:
    """What a rule says of a substance, or with `substance` "" of the dossier as a whole."""

    id: str
    rule: str
    grade: Grade
    substance: str
    message: str
    remedy: str
    exhibits: tuple[Exhibit, ...]
    unit: str = ""
    locant: str = ""
    derivation: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class SubstanceEntry:
    """A substance as the report lists it; `attribution` gives for each evidence how firmly and why
    it is held to speak of this substance. `role` is the part that it plays, by the register or, as
    `inferred` says, by the dossier; `smiles` its reference structure where a SMILES can say it."""

    id: str
    label: str
    evidence: tuple[Evidence, ...]
    attribution: Mapping[str, str]
    concordance: Concordance | None
    drawing: Drawing | None = None
    role: str = ""
    inferred: str = ""
    smiles: str = ""


@dataclass(frozen=True, slots=True)
class RuleEntry:
    """A rule as the report prints it; `off` holds the justification of a rule switched off."""

    id: str
    title: str
    grade: Grade
    why: str
    basis: str
    remedy: str
    off: str = ""


@dataclass(frozen=True, slots=True)
class Review:
    """The whole result: every output format is made from this and nothing else."""

    sources: tuple[Source, ...]
    unread: tuple[Unread, ...]
    substances: tuple[SubstanceEntry, ...]
    findings: tuple[Finding, ...]
    rules: tuple[RuleEntry, ...]
    method: Mapping[str, str]
    caution: str
