"""Records of a structure file to evidence: the drawing, and the data fields beside it."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace

from dossiercheck.language.lists import parts, synonyms
from dossiercheck.language.roles import (
    Aside,
    Meaning,
    is_nothing,
    is_other_label,
    is_own,
    looks_systematic,
    meaning_of,
    says_itself,
)
from dossiercheck.model import Evidence, Field, Record, Role, Unread

_ONE_LINE = (
    Role.SMILES,
    Role.INCHI,
    Role.INCHIKEY,
    Role.FORMULA,
    Role.MASS,
    Role.REGISTRY,
    Role.ABSOLUTE,
    Role.FLACK,
    Role.SPACE_GROUP,
)

_LINES = "The field has several lines; whether they are one value is not certain."
_OPEN = {"unknown", "not known", "not determined"}


def record_evidence(record: Record, columns: Mapping[str, str]) -> Iterator[Evidence | Unread]:
    """The molfile, then the fields in their order; all of one group.

    A label field names the substance; without one the record's title does.
    """
    group = f"{record.place.source}#record{record.place.record}"
    fields = [(field, _meaning(field, columns)) for field in record.fields]
    called = [(f.name, f.value.strip()) for f, m in fields if m is Aside.LABEL]
    label = called[0][1] if called else record.title
    also = tuple(value for name, value in called[1:] if is_other_label(name))
    for said in _said(record, fields, group, label):
        yield replace(said, also=also) if also and isinstance(said, Evidence) else said


def _said(
    record: Record, fields: Sequence[tuple[Field, Meaning | None]], group: str, label: str
) -> Iterator[Evidence | Unread]:
    if record.molblock:
        yield Evidence("", Role.MOLFILE, record.molblock, record.place, group, label)
    for field, meaning in fields:
        value = field.value.strip()
        if not isinstance(meaning, Role | Aside) or (is_nothing(value) and not _is_open(field)):
            continue
        if meaning is Aside.COUNT:
            # The number says nothing without its heading.
            text = f"{field.name}: {value}"
            yield Evidence("", Role.STEREO, text, field.place, group, label)
        elif meaning is Aside.SYNONYMS:
            for span in synonyms(field.value, 0, len(field.value)):
                place = replace(field.place, span=span)
                yield Evidence("", Role.NAME, field.value[slice(*span)], place, group, label)
        elif meaning is Role.NAME and len(listed := parts(field.value, 0, len(field.value))) > 1:
            for span in listed:
                name, place = field.value[slice(*span)], replace(field.place, span=span)
                if "\n" in name:
                    yield Unread(place, "several-lines", _LINES, name[:2000])
                else:
                    yield Evidence("", meaning, name, place, group, label)
        elif isinstance(meaning, Role):
            if "\n" in value and (meaning is Role.NAME or meaning in _ONE_LINE):
                yield Unread(field.place, "several-lines", _LINES, value[:2000])
            else:
                text = field.value if meaning is Role.MOLFILE else value
                yield Evidence("", meaning, text, field.place, group, label)


def _is_open(field: Field) -> bool:
    """True where the value says that the stereochemistry is not known: that is something said,
    and a drawing beside it may say otherwise."""
    said = field.value.strip().casefold()
    return said in _OPEN and meaning_of(field.name) is Role.STEREO


def _meaning(field: Field, columns: Mapping[str, str]) -> Meaning | None:
    meaning = meaning_of(field.name, columns)
    if is_nothing(field.value):
        return Role.STEREO if _is_open(field) else None
    itself = says_itself(field.value)
    if (
        itself
        and not is_own(field.name, columns)
        and meaning in (None, Role.SMILES, Role.INCHI, Role.INCHIKEY)
    ):
        return itself
    if meaning is Aside.NAME_OR_LABEL:
        return Role.NAME if looks_systematic(field.value) else Aside.LABEL
    return meaning
