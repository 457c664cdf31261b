"""Crystallographic information files: a structure determination's molecule and what it claims.

Each data block that lists atoms becomes a record: the formula unit's connection table in three
dimensions, and beside it the block's own name, formula, space group, Flack parameter and claim
of absolute configuration. A block of which the molecule is not certain keeps these fields and is
unread as far as its atoms go.
"""

from __future__ import annotations

import re
from collections.abc import Iterator

from gemmi import cif

from dossiercheck.limits import DEFAULT, Refused, decode
from dossiercheck.model import Field, Item, Place, Record, Source, Unread
from dossiercheck.readers import cifsites
from dossiercheck.readers.content import guarded, whole
from dossiercheck.readers.disorder import Parts, parts
from dossiercheck.readers.packing import Crystal, species
from dossiercheck.stereo.crystal import BOTH, RELATIVE, Content, content
from dossiercheck.stereo.formula import Formula, molecular_formula, parse_formula
from dossiercheck.stereo.spacegroup import group_of_operations, space_group

SUFFIXES = frozenset({".cif"})

FORMULA = "_chemical_formula_sum"
WEIGHT = "_chemical_formula_weight"
CLAIM = "_chemical_absolute_configuration"
_FIELDS = (
    "_chemical_name_common",
    "_chemical_name_systematic",
    FORMULA,
    WEIGHT,
    CLAIM,
    "_refine_ls_abs_structure_Flack",
    "_chemical_optical_rotation",
)
# Block codes that a program or a journal gives to any structure.
_NO_LABEL = re.compile(
    r"[ivx]{1,4}|\d{0,3}[a-z]?|global|shelxl?|data|block\d*|publication\w*", re.I
)


@guarded("")
def read(source: Source, data: bytes) -> Iterator[Item]:
    """Yield a record for each block with atoms, and what of it could not be read."""
    if len(data) > DEFAULT.member_bytes:
        raise Refused("size-budget", f"The file has {len(data)} bytes.")
    text, _ = decode(data)
    try:
        document = cif.read_string(text)
    except (ValueError, RuntimeError) as error:
        said = str(error).splitlines()[0] if str(error) else "the file could not be parsed"
        raise Refused("damaged", f"The file does not keep to the format: {said}") from error
    if len(document) > DEFAULT.members:
        raise Refused("size-budget", f"The file has {len(document)} data blocks.")
    if not len(document):
        yield whole(source, "empty", "The file has no data block.")
    for number, block in enumerate(document, 1):
        yield from _block(Place(source.path, record=number), block)


def _block(place: Place, block: cif.Block) -> Iterator[Item]:
    title = "" if _NO_LABEL.fullmatch(block.name) else block.name
    fields = [
        Field(tag, value, Place(place.source, record=place.record, field=tag))
        for tag in _FIELDS
        if (value := cifsites.value(block, tag))
    ]
    aside: list[Unread] = []
    molblock = ""
    try:
        fields += _symmetry(place, block)
        if not cifsites.has_sites(block):
            raise Refused("no-structure", "The block lists no atoms in fractional coordinates.")
        crystal = cifsites.crystal(block)
        found, note = _molecule(crystal, cifsites.value(block, CLAIM))
        unit = _unit(found, cifsites.value(block, FORMULA))
        molblock = found.molblock
        if note:
            aside.append(Unread(place, "disorder", note, block.name))
        if unit != 1:
            fields = [field for field in fields if field.name not in (FORMULA, WEIGHT)]
            detail = f"Formula and weight are given for {unit:g} times the molecules found."
            aside.append(Unread(place, "formula-unit", detail, block.name))
    except Refused as refused:
        aside.append(Unread(place, refused.reason, refused.detail, block.name))
    if molblock or fields:
        yield Record(title, molblock, tuple(fields), place)
    yield from aside


def _symmetry(place: Place, block: cif.Block) -> Iterator[Field]:
    """The space group in the block's own words; its operations where it has no other."""
    listed = "; ".join(cifsites.listed_operations(block))
    if listed or any(cifsites.value(block, tag) for tag in cifsites.SYMBOLS):
        cifsites.operations(block)
    for tag in cifsites.SYMBOLS:
        text = cifsites.value(block, tag)
        if space_group(text):
            yield Field(tag, text, Place(place.source, record=place.record, field=tag))
            return
    if listed:
        tag = "_space_group_symop_operation_xyz"
        yield Field(tag, listed, Place(place.source, record=place.record, field=tag))


def _molecule(crystal: Crystal, claim: str) -> tuple[Content, str]:
    """The crystal's formula unit, and what was left aside of its disorder."""
    group = group_of_operations(crystal.operations)
    hand = BOTH if group and not group.sohncke else RELATIVE if claim == "unk" else ""
    found = parts(crystal.sites)
    main = content(species(crystal, found.major), hand)
    for other in found.others:
        try:
            minor = content(species(crystal, other), hand)
        except Refused as refused:
            raise Refused(
                "unresolved-disorder",
                f"A minor part of the disorder makes no certain molecule: {refused.detail}"
                f" ({_left_aside(found)})",
            ) from refused
        if minor.smiles != main.smiles:
            raise Refused(
                "unresolved-disorder",
                f"The parts of the disorder are not one stereoisomer ({_left_aside(found)}).",
            )
    note = ""
    if found.note:
        note = (
            "Of the disorder the part that is there most often was read; the others, which are"
            f" the same stereoisomer, were left aside: {found.note}."
        )
    return main, note


def _left_aside(found: Parts) -> str:
    return found.note or "no part was left aside"


def _unit(found: Content, printed: str) -> float:
    """How many of the formula units found the printed formula stands for.

    Raises `Refused` where it is no multiple: hydrogens or a solvent were not placed.
    """
    stated = parse_formula(printed) if printed else None
    if stated is None:
        raise Refused(
            "formula-not-stated",
            "Without a formula nothing shows whether all hydrogens and solvents are listed.",
        )
    computed = molecular_formula(found.structure)
    ratios = {stated.counts.get(e, 0) / n for e, n in computed.counts.items()}
    if len(ratios) != 1 or set(stated.counts) != set(computed.counts):
        raise Refused("atoms-and-formula-differ", _missing(stated, computed))
    ratio = ratios.pop()
    if abs(max(ratio, 1 / ratio) % 1) > 1e-6:
        raise Refused("atoms-and-formula-differ", _missing(stated, computed))
    return ratio


def _missing(stated: Formula, computed: Formula) -> str:
    return (
        f"The formula is {stated}, but the atoms listed make {computed}: hydrogens or a solvent"
        " are not listed, or too many are."
    )
