"""HL7 FHIR R5 `SubstanceDefinition`, in JSON and XML, single, contained or in a `Bundle`.

Elements after HL7 FHIR R5, "Resource SubstanceDefinition": `structure` with `representation`,
`molecularFormula`, `molecularWeight`, `stereochemistry` and `opticalActivity`; `moiety`; `name`;
`code`. The code systems bound there are examples only, so a code is taken by its display, text or
code, whichever there are. Only a name whose type says that it is systematic becomes a name.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import replace
from itertools import count
from typing import Any

from lxml import etree

from dossiercheck.limits import Refused
from dossiercheck.model import Item, Place, Source, Unread
from dossiercheck.readers import entry
from dossiercheck.readers.fhirnode import Node, from_json, from_xml

_SUBSTANCE = "SubstanceDefinition"
_SYSTEMATIC = {"systematic", "systematicname", "iupac", "iupacname", "sys", "systematiciupacname"}
_OTHERS = {"brand": "brand name", "scientific": "scientific name"}
_FORMATS = {
    "smiles": entry.SMILES,
    "inchi": entry.INCHI,
    "inchikey": entry.INCHIKEY,
    "chemicalxdaylightsmiles": entry.SMILES,
    "chemicalxinchi": entry.INCHI,
    "applicationxinchi": entry.INCHI,
    "applicationxinchikey": entry.INCHIKEY,
    "applicationxsmiles": entry.SMILES,
}
_MOLFILES = {"molfile", "mol", "sdf", "applicationxmdlmolfile", "applicationxmdlsdfile"}
_MOLFILES |= {"chemicalxmdlmolfile", "chemicalxmdlsdfile"}
_OF_MOIETY = ("molecularFormula", "stereochemistry", "opticalActivity", "modifierExtension")
_AVERAGES = {"average", "averagemolecularweight", "relativemolecularmass", "molecularweight"}
_UNITS = {"", "gmol", "gmol1", "gpermol", "da", "dalton", "u", "amu", "1", "kgkmol"}


def read_object(value: dict[str, Any], place: Place, numbers: Iterator[int]) -> Iterator[Item]:
    """Yield a record for each `SubstanceDefinition` under a resource in JSON."""
    try:
        tree = from_json(value, place.path or "$")
    except Refused as refused:
        yield Unread(place, refused.reason, refused.detail)
        return
    yield from _resources(tree, place, numbers)


def read_root(source: Source, root: etree._Element) -> Iterator[Item]:
    """Yield a record for each `SubstanceDefinition` under a resource in XML."""
    yield from _resources(from_xml(root), Place(source.path), count(1))


def _resources(tree: Node, place: Place, numbers: Iterator[int]) -> Iterator[Item]:
    others: Counter[str] = Counter()
    found = False
    for resource in tree.resources():
        if resource.type == _SUBSTANCE:
            found = True
            yield from _substance(resource, replace(place, path=resource.path), numbers)
        elif resource.type != "Bundle":
            others[resource.type] += 1
    for kind, number in others.items():
        where = replace(place, path=tree.path)
        detail = f"{number} FHIR resources of the type {kind} are not read."
        yield Unread(where, "no-reader", detail)
    if not found and not others:
        yield Unread(replace(place, path=tree.path), "empty", "The resource holds no substance.")


def _substance(node: Node, place: Place, numbers: Iterator[int]) -> Iterator[Item]:
    found = entry.Entry(replace(place, record=next(numbers)), _title(node))
    if not _modified(found, node):
        for name in node.all("name"):
            _name(found, name)
        for structure in node.all("structure"):
            _structure(found, structure)
        for weight in node.all("molecularWeight"):
            _weight(found, weight)
        for code in (*node.all("identifier"), *node.all("code")):
            _registry(found, code)
    yield from found.items()
    if not found.fields and not found.molblock and not found.unread:
        yield Unread(found.place, "no-substance", "The resource says nothing of a structure.")
    for number, moiety in enumerate(node.all("moiety"), 1):
        if any(moiety.all(name) for name in _OF_MOIETY):
            title = moiety.value("name") or (f"{found.title}, moiety {number}" * bool(found.title))
            part = entry.Entry(replace(place, path=moiety.path, record=next(numbers)), title)
            _moiety(part, moiety)
            yield from part.items()


def _moiety(part: entry.Entry, moiety: Node) -> None:
    """A moiety is a part: what is said of it must not count as said of the whole."""
    if _modified(part, moiety):
        return
    _codes(part, moiety)
    for formula in moiety.all("molecularFormula"):
        part.add(entry.FORMULA, formula.text, formula.path)


def _modified(found: entry.Entry, node: Node) -> bool:
    """True where a modifier extension may turn the meaning round; whoever does not know it must
    not go on (HL7 FHIR R5, section 2.1.5.0, extensibility)."""
    for extension in node.all("modifierExtension"):
        detail = "A modifier extension may change what is said here; it is not understood."
        found.refuse(extension.path, "modifier-extension", detail)
        return True
    return False


def _structure(found: entry.Entry, structure: Node) -> None:
    if _modified(found, structure):
        return
    for representation in structure.all("representation"):
        if not _modified(found, representation):
            _representation(found, representation)
    for formula in structure.all("molecularFormula"):
        found.add(entry.FORMULA, formula.text, formula.path)
    for weight in structure.all("molecularWeight"):
        _weight(found, weight)
    _codes(found, structure)


def _codes(found: entry.Entry, node: Node) -> None:
    for name, heading in (("stereochemistry", entry.STEREO), ("opticalActivity", entry.ROTATION)):
        for concept in node.all(name):
            for text in _said(concept):
                found.add(heading, text, concept.path)


def _representation(found: entry.Entry, node: Node) -> None:
    text = node.value("representation")
    formats = _codes_in(node.all("format"))
    path = next((kid.path for kid in node.all("representation")), node.path)
    if not text.strip():
        if node.all("document"):
            detail = "The structure stands in another document, which is not opened."
            found.refuse(node.path, "external-part", detail)
        return
    kinds = {_FORMATS.get(said, "molfile" if said in _MOLFILES else "") for said in formats} - {""}
    if len(kinds) != 1:
        detail = (
            "Two formats are stated for one structure."
            if kinds
            else f"The format {', '.join(formats) or '(none stated)'} of the structure is not read."
        )
        found.refuse(node.path, "structure-format", detail, text)
    elif kinds == {"molfile"}:
        found.add_molfile(text, path)
    else:
        found.add(kinds.pop(), text, path)


def _weight(found: entry.Entry, node: Node) -> None:
    """A relative molecular mass in g/mol; exact masses, ranges, polymer averages and other units
    are other things."""
    if _modified(found, node):
        return
    kinds = _codes_in(node.all("type"))
    for amount in node.all("amount"):
        value, unit = amount.value("value"), amount.value("unit") or amount.value("code")
        if not value:
            continue
        if (
            (kinds and not _AVERAGES & set(kinds))
            or "exact" in kinds
            or amount.value("comparator")
            or plain(unit) not in _UNITS
        ):
            kind = ", ".join(kinds) or "not stated"
            detail = f"The weight is not taken for a relative molecular mass (type {kind})."
            found.refuse(amount.path, "other-mass", detail, f"{value} {unit}".strip())
        else:
            found.add(entry.MASS, value, amount.path)


def _name(found: entry.Entry, node: Node) -> None:
    if _modified(found, node):
        return
    text = node.value("name")
    path = next((kid.path for kid in node.all("name")), node.path)
    kinds = _codes_in(node.all("type"))
    if not _SYSTEMATIC & set(kinds):
        heading = next((_OTHERS[kind] for kind in kinds if kind in _OTHERS), None)
        found.add(heading or entry.OTHER_NAME, text, path)
    elif not _is_english(node):
        detail = "The systematic name is in another language than English."
        found.refuse(path, "name-language", detail, text)
    else:
        found.add(entry.NAME, text, path)
    # A translation is of the same type in another language, a synonym of a type of its own.
    for inner in node.all("synonym"):
        _name(found, inner)
    for inner in node.all("translation"):
        found.add(entry.OTHER_NAME, inner.value("name"), inner.path)


def _is_english(node: Node) -> bool:
    codes = {c.value("code") for lang in node.all("language") for c in lang.all("coding")} - {""}
    return not codes or any(code.lower().partition("-")[0] == "en" for code in codes)


def _registry(found: entry.Entry, node: Node) -> None:
    """A code or identifier whose system says that it is a CAS registry number."""
    places = [node, *(c for concept in node.all("code") for c in concept.all("coding"))]
    for one in places:
        system = one.value("system").lower()
        if "cas.org" in system or system.endswith("2.16.840.1.113883.6.61"):
            found.add(entry.REGISTRY, one.value("value") or one.value("code"), one.path)


def _title(node: Node) -> str:
    """The preferred name, else the first that is not systematic, else the first."""
    names = [name for name in node.all("name") if name.value("name").strip()]
    preferred = [name for name in names if name.value("preferred") == "true"]
    others = [name for name in names if not _SYSTEMATIC & set(_codes_in(name.all("type")))]
    for name in (*preferred, *others, *names):
        return name.value("name").strip()
    return node.value("id")


def _said(concept: Node) -> list[str]:
    """What a CodeableConcept says, each once: the display of each coding, else its code, and the
    text where there is no coding."""
    said = [c.value("display") or c.value("code") for c in concept.all("coding")]
    found = list(dict.fromkeys(text.strip() for text in said if text.strip()))
    return found or [text for text in (concept.value("text").strip(), concept.text.strip()) if text]


def _codes_in(concepts: tuple[Node, ...]) -> list[str]:
    """Every display, code and text of the concepts, as codes are compared."""
    said: list[str] = []
    for concept in concepts:
        said += [c.value(key) for c in concept.all("coding") for key in ("display", "code")]
        said += [concept.value("text"), concept.text]
    return list(dict.fromkeys(plain(text) for text in said if text.strip()))


def plain(text: str) -> str:
    """Letters and digits in one case, as codes are compared."""
    return "".join(letter for letter in text.casefold() if letter.isalnum())
