"""HL7 Structured Product Labeling (SPL), release 4: substances, and the description of a product.

A substance-indexing document has `identifiedSubstance` elements with the substance's code, name
and moieties; a characteristic coded C103240 of the NCI Thesaurus is a chemical structure whose
value's media type says what it is written in (FDA, "Structured Product Labeling (SPL)
Implementation Guide with Validation Procedures", part substance indexing). A product label has
sections; the one with the LOINC code 34089-3 is the description.
"""

from __future__ import annotations

import base64
import binascii
from collections.abc import Iterator
from itertools import count

from lxml import etree

from dossiercheck.limits import Refused, decode
from dossiercheck.model import Item, Place, Source, Unread
from dossiercheck.readers import entry
from dossiercheck.readers.splbody import HL7, section_items, words_in
from dossiercheck.readers.xmlpath import path_of

_DESCRIPTION = "34089-3"
_MEDIA = {
    "application/x-inchi": entry.INCHI,
    "application/x-inchi-key": entry.INCHIKEY,
    "application/x-inchikey": entry.INCHIKEY,
    "application/x-smiles": entry.SMILES,
    "application/x-daylight-smiles": entry.SMILES,
    "chemical/x-daylight-smiles": entry.SMILES,
    "chemical/x-inchi": entry.INCHI,
}
_MOLFILES = {"application/x-mdl-molfile", "chemical/x-mdl-molfile"}
_TYPE = "{http://www.w3.org/2001/XMLSchema-instance}type"
_NAMES = {"systematic name": entry.NAME, "iupac name": entry.NAME, "chemical name": entry.NAME}


def read_root(source: Source, root: etree._Element) -> Iterator[Item]:
    """Yield a record for each substance and moiety, then the description's text."""
    numbers = count(1)
    found = False
    for outer in root.iter(f"{{{HL7}}}identifiedSubstance"):
        # The role and the substance in it have the same name; the inner one is the substance.
        if outer.find(f"{{{HL7}}}identifiedSubstance") is None:
            for item in _substance(source, outer, numbers):
                found = True
                yield item
    others = 0
    paragraphs = count(1)
    for section in root.iter(f"{{{HL7}}}section"):
        if _is_description(section):
            if not any(_is_description(above) for above in section.iterancestors()):
                for item in section_items(source, section, paragraphs):
                    found = True
                    yield item
        elif section.find(f"{{{HL7}}}text") is not None and not any(
            _is_description(above) for above in section.iterancestors()
        ):
            others += 1
    where = Place(source.path, path=path_of(root))
    if others:
        detail = f"{others} sections other than the description have text that is not read."
        yield Unread(where, "section-not-read", detail)
    elif not found:
        detail = "The document has no substance and no description section."
        yield Unread(where, "no-substance", detail)


def _is_description(section: etree._Element) -> bool:
    code = _child(section, "code")
    return code is not None and code.get("code") == _DESCRIPTION


def _substance(source: Source, node: etree._Element, numbers: Iterator[int]) -> Iterator[Item]:
    """The substance's own values, and its moieties: a single one is the whole substance unless
    it has a code of its own, of several each is a part."""
    path = path_of(node)
    name = _name(node)
    whole = entry.Entry(Place(source.path, path=path, record=next(numbers)), name)
    _values(whole, node, path)
    moieties = [*node.iterchildren(f"{{{HL7}}}moiety")]
    own = _code(node)
    parts: list[entry.Entry] = []
    for number, moiety in enumerate(moieties, 1):
        part = _child(moiety, "partMoiety")
        code = _code(part) if part is not None else ""
        called = _name(part) if part is not None else ""
        where = path_of(moiety, node, path)
        alone = len(moieties) == 1 and _amount(moiety) in ("", "1")
        if (alone and not code) or (len(moieties) == 1 and code == own != ""):
            _values(whole, moiety, where)
        elif moiety.find(f"{{{HL7}}}subjectOf") is not None:
            title = called or (f"{name}, moiety {number}" if name else "")
            one = entry.Entry(Place(source.path, path=where, record=next(numbers)), title)
            _values(one, moiety, where)
            parts.append(one)
    for one in (whole, *parts):
        yield from one.items()
    if not any(one.fields or one.molblock or one.unread for one in (whole, *parts)):
        yield Unread(whole.place, "no-structure", "The substance has no structure.", name)


def _amount(moiety: etree._Element) -> str:
    """The number of moieties to one of the substance, as written; "" where it is not said."""
    numerator = moiety.find(f"{{{HL7}}}quantity/{{{HL7}}}numerator")
    if numerator is None:
        return ""
    value = numerator.get("value") or ""
    return "1" if value in ("1", "1.0") else value or "?"


def _values(found: entry.Entry, node: etree._Element, base: str) -> None:
    for named in node.iterchildren(f"{{{HL7}}}asNamedEntity"):
        code = _child(named, "code")
        kind = (code.get("displayName") or "").casefold() if code is not None else ""
        found.add(_NAMES.get(kind, entry.OTHER_NAME), _name(named), path_of(named, node, base))
    for characteristic in node.iterfind(f"{{{HL7}}}subjectOf/{{{HL7}}}characteristic"):
        path = path_of(characteristic, node, base)
        for value in characteristic.iterchildren(f"{{{HL7}}}value"):
            _value(found, _child(characteristic, "code"), value, path)


def _value(
    found: entry.Entry, code: etree._Element | None, value: etree._Element, path: str
) -> None:
    heading = (code.get("displayName") or code.get("code") or "") if code is not None else ""
    kind = (value.get(_TYPE) or "").rpartition(":")[2]
    media = (value.get("mediaType") or "").strip().lower()
    if kind == "ED" or media:
        _encapsulated(found, value, media, path)
    elif kind == "PQ" or value.get("unit"):
        unit = value.get("unit") or ""
        text = value.get("value") or ""
        found.add(heading, f"{text} {unit}" if unit not in ("", "1") else text, path)
    else:
        said = value.get("displayName") or _text(value) or value.get("value") or value.get("code")
        found.add(heading, said or "", path)


def _encapsulated(found: entry.Entry, value: etree._Element, media: str, path: str) -> None:
    if _child(value, "reference") is not None:
        detail = "The value stands in another file, which is not opened."
        found.refuse(path, "external-part", detail)
        return
    text = words_in(value)
    if value.get("compression"):
        found.refuse(path, "structure-format", "The value is compressed and is not read.")
        return
    if (value.get("representation") or "TXT").upper() == "B64":
        try:
            text, _ = decode(base64.b64decode("".join(text.split()), validate=True))
        except (binascii.Error, ValueError, Refused):
            found.refuse(path, "encoding", "The value is not text in base 64.")
            return
    if media in _MOLFILES:
        found.add_molfile(text, path)
    elif media in _MEDIA:
        found.add(_MEDIA[media], text.strip(), path)
    else:
        kind = media or "not stated"
        detail = f"A value of the media type {kind} is not read."
        found.refuse(path, "structure-format", detail, text.strip())


def _name(node: etree._Element) -> str:
    name = _child(node, "name")
    return _text(name) if name is not None else ""


def _text(node: etree._Element) -> str:
    return " ".join(words_in(node).split())


def _code(node: etree._Element) -> str:
    code = _child(node, "code")
    return (code.get("code") or "") if code is not None else ""


def _child(node: etree._Element, name: str) -> etree._Element | None:
    return node.find(f"{{{HL7}}}{name}")
