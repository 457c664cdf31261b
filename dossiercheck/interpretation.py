"""Evidence to meaning: a structure, a name's reading, or the reason why there is none."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from dossiercheck.language.crystal import CLAIMS, Measured, measured
from dossiercheck.language.rotation import Rotation, read_rotation
from dossiercheck.language.statements import Statement, read_statement
from dossiercheck.model import Evidence, Kind, Role, Unread
from dossiercheck.names.parser import NameParser
from dossiercheck.names.reading import NamedStructure, NameReading, read_names
from dossiercheck.stereo import notation
from dossiercheck.stereo.formula import Formula, parse_formula
from dossiercheck.stereo.perception import from_inchi, from_molblock, from_smiles
from dossiercheck.stereo.spacegroup import SpaceGroup, space_group
from dossiercheck.stereo.structure import StereoGroup, Structure, Unreadable

_NUMBER = re.compile(
    r"(?<![\d.,])(?:(\d{1,3}(?:,\d{3})+)(\.\d+)|([1-9],\d{3})()"
    r"|(\d{1,3}(?:[ \u00a0\u2009\u202f]\d{3})+|\d+)([.,]\d+)?)(?!\d|[.,]\d)"
)
_EITHER = re.compile(r"\d\d,\d{3}")


@dataclass(eq=False, slots=True)
class Reading:
    """One evidence with what was understood of it.

    `structure` is what a drawing, notation or name says; `name` the details of a name;
    `formula`, `mass` (value, number of printed decimals) of a property, `statement` of a claim,
    `rotation` of a printed one;
    `flack`, `space_group` and `claim` (a code of `CLAIMS`) come from a crystal structure.
    `refusal` says why nothing was understood, "" where something was; `reason` is its slug.
    `like` is the drawing it was laid on and the mapping from there, so that both can be shown in
    one orientation.
    """

    evidence: Evidence
    structure: Structure | None = None
    name: NameReading | None = None
    formula: Formula | None = None
    mass: tuple[float, int] | None = None
    statement: Statement | None = None
    rotation: Rotation | None = None
    flack: Measured | None = None
    space_group: SpaceGroup | None = None
    claim: str = ""
    reason: str = ""
    refusal: str = ""
    like: tuple[Structure, Mapping[int, int]] | None = None

    @property
    def kind(self) -> Kind:
        """The kind of evidence, drawings and 3D coordinates told apart."""
        if self.structure is not None and self.structure.dimension == 3:
            return Kind.COORDINATES
        return self.evidence.kind

    @property
    def unread(self) -> Unread | None:
        """The refusal as an entry of the unread list."""
        if not self.refusal:
            return None
        said = self.evidence
        text = said.text if said.role is not Role.MOLFILE else ""
        return Unread(said.place, self.reason, self.refusal, text)


def interpret(evidence: Sequence[Evidence], parser: NameParser) -> list[Reading]:
    """Understand each evidence, in order. Names go to the parser together, for speed."""
    named = [said for said in evidence if said.role is Role.NAME]
    names = iter(read_names([said.text for said in named], parser))
    return [
        _name(said, next(names)) if said.role is Role.NAME else _safely(said) for said in evidence
    ]


def structure_of(named: NamedStructure) -> Structure:
    """The structure a name stands for, its locants on its atoms. Raises `Unreadable`."""
    everywhere = frozenset(range(len(named.labels)))
    groups = [
        StereoGroup(
            "or" if group.kind == "or" else "and",
            frozenset(group.atoms) if group.kind != "rac" else everywhere,
        )
        for group in named.groups
        if group.kind in ("rac", "and", "or")
    ]
    return from_smiles(named.smiles, groups, named.labels)


def _name(said: Evidence, name: NameReading) -> Reading:
    if name.structure is None:
        refusal = name.refusal
        detail = refusal.detail if refusal else "the name could not be interpreted"
        undetermined = refusal is not None and refusal.reason == "several-joinings"
        reason = "undetermined-name" if undetermined else "name-not-interpretable"
        return Reading(said, name=name, reason=reason, refusal=detail)
    try:
        return Reading(said, structure_of(name.structure), name)
    except Unreadable as error:
        detail = f"the name leads to no sound structure: {error}"
        return Reading(said, name=name, reason="name-not-interpretable", refusal=detail)


def _safely(said: Evidence) -> Reading:
    """One place that the program stumbles over is unread; the others go on."""
    try:
        return _other(said)
    except Exception as error:
        detail = f"reading stopped with {type(error).__name__}: {error}".splitlines()[0]
        return Reading(said, reason="reading-failed", refusal=detail)


def _other(said: Evidence) -> Reading:
    text = said.text.strip()
    try:
        match said.role:
            case Role.MOLFILE:
                return Reading(said, from_molblock(said.text))
            case Role.SMILES:
                return Reading(said, from_smiles(text))
            case Role.INCHI:
                return Reading(said, from_inchi(text))
    except Unreadable as error:
        return Reading(said, reason="structure-not-readable", refusal=str(error))
    match said.role:
        case Role.INCHIKEY:
            if not notation.KEY.fullmatch(text.removeprefix("InChIKey=").strip()):
                return Reading(said, reason="malformed", refusal="not the form of an InChIKey")
        case Role.FORMULA:
            formula = parse_formula(text)
            if formula is None:
                return Reading(said, reason="malformed", refusal="not read as a formula")
            return Reading(said, formula=formula)
        case Role.MASS:
            mass = printed_number(text)
            if mass is None:
                return Reading(said, reason="malformed", refusal="not read as one number")
            return Reading(said, mass=mass)
        case Role.ABSOLUTE | Role.FLACK | Role.SPACE_GROUP:
            return _of_crystal(said, text)
        case Role.STEREO:
            statement = read_statement(text)
            if statement is None:
                refusal = "the statement is not one the program understands for certain"
                return Reading(said, reason="statement-not-understood", refusal=refusal)
            return Reading(said, statement=statement)
        case Role.ROTATION:
            rotation = read_rotation(text)
            if rotation is None:
                return Reading(said, reason="malformed", refusal="not read as one optical rotation")
            return Reading(said, rotation=rotation)
    return Reading(said)


def _of_crystal(said: Evidence, text: str) -> Reading:
    if said.role is Role.FLACK and (value := measured(text)):
        return Reading(said, flack=value)
    if said.role is Role.SPACE_GROUP and (group := space_group(text)):
        return Reading(said, space_group=group)
    if said.role is Role.ABSOLUTE and text.casefold() in CLAIMS:
        return Reading(said, claim=text.casefold())
    wanted = {
        Role.FLACK: "a number with its standard uncertainty",
        Role.SPACE_GROUP: "a known space group",
    }.get(said.role, "one of the codes " + ", ".join(CLAIMS))
    return Reading(said, reason="malformed", refusal=f"not read as {wanted}")


def printed_number(text: str) -> tuple[float, int] | None:
    """The one number in a text and how many decimals it prints; None for none or several.

    A comma is a decimal comma, but before full groups of three and a point, or as the only mark
    behind one digit ("1,234"), it groups thousands; "12,345" may be either and is not read. A
    space groups thousands; "g/mol" and the like are passed over.
    """
    found = [tuple(filter(None, groups)) for groups in _NUMBER.findall(text)]
    if len(found) != 1 or _EITHER.fullmatch("".join(found[0])):
        return None
    whole, decimals = (*found[0], "")[:2]
    digits = re.sub(r"\D", "", whole)
    return float(f"{digits}.{decimals[1:] or '0'}"), max(len(decimals) - 1, 0)
