"""Substance records of the public FDA/NCATS registration system, as JSON.

A record has names (each with a two-letter type), codes of other systems, a structure with its
formula, weight and stereochemistry codes, and the moieties of which it consists. Read are the
whole record and the slimmed one, in which the structure's values stand at the top. Only names of
the type "sys" are systematic; official, common, brand and code names say what the substance is
called and nothing of its structure.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import replace
from typing import Any

from dossiercheck.model import Field, Item, Place, Unread
from dossiercheck.readers import entry
from dossiercheck.stereo.formula import parse_formula

_OTHERS = {"of": "official name", "cn": entry.OTHER_NAME, "bn": "brand name", "cd": "code name"}
_VALUES = (
    ("smiles", entry.SMILES),
    ("inchi", entry.INCHI),
    ("_inchi", entry.INCHI),
    ("inchiKey", entry.INCHIKEY),
    ("_inchiKey", entry.INCHIKEY),
    ("mwt", entry.MASS),
    ("mass", entry.MASS),
    ("stereochemistry", entry.STEREO),
    ("opticalActivity", entry.ROTATION),
    ("stereoCenters", entry.CENTRES),
    ("stereoComments", "stereochemistry comment"),
)


def read_object(value: dict[str, Any], place: Place, numbers: Iterator[int]) -> Iterator[Item]:
    """Yield the record of one substance and of each moiety that has a structure of its own."""
    kind = value.get("substanceClass", "chemical")
    if kind != "chemical":
        detail = f"The substance is of the class {kind!r}; only chemical ones are read."
        yield Unread(place, "substance-class", detail, _title(value))
        return
    substance = entry.Entry(replace(place, record=next(numbers)), _title(value))
    nested = isinstance(value.get("structure"), dict)
    base = f"{place.path}.structure" if nested else f"{place.path}"
    _structure(substance, value["structure"] if nested else value, base)
    for index, name in enumerate(_list(substance, value, "names")):
        _name(substance, name, f"{place.path}.names[{index}]")
    _codes(substance, value)
    moieties = _list(substance, value, "moieties")
    parts: list[entry.Entry] = []
    for index, moiety in enumerate(moieties):
        path = f"{place.path}.moieties[{index}]"
        if any(moiety.get(key) for key in ("molfile", "smiles")):
            title = f"{substance.title}, moiety {index + 1}" if substance.title else ""
            part = entry.Entry(replace(place, path=path, record=next(numbers)), title)
            _structure(part, moiety, path)
            parts.append(part)
        else:
            formula = moiety.get("formula")
            substance.add("moiety formula", formula if isinstance(formula, str) else "", path)
    if not substance.molblock:
        detail = "The record has no connection table that could be read."
        substance.refuse(base, "no-structure", detail, substance.title)
    for one in (substance, *parts):
        yield from one.items()


def _structure(found: entry.Entry, structure: dict[str, Any], base: str) -> None:
    molfile = _text(found, structure, "molfile", base)
    if molfile:
        found.add_molfile(molfile, f"{base}.molfile")
    formula = _text(found, structure, "formula", base)
    if formula:
        whole = _total(formula)
        span = (0, len(whole)) if whole != formula else None
        where = replace(found.at(f"{base}.formula"), field=entry.FORMULA, span=span)
        found.fields.append(Field(entry.FORMULA, whole, where))
    for key, heading in _VALUES:
        found.add(heading, _text(found, structure, key, base), f"{base}.{key}")


def _total(formula: str) -> str:
    """The formula of the whole. Some exports print it before those of its components, all joined
    by dots ("C8H7NaO3.Na.C8H7O3"): where what comes first is the sum of two or more that follow,
    it is the whole, since no substance is a compound of itself and its parts."""
    first, *rest = formula.split(".")
    counted = [parse_formula(part) for part in (first, *rest)]
    if len(rest) < 2 or None in counted:
        return formula
    total: Counter[str] = Counter()
    for part in counted[1:]:
        total.update(part.counts if part else {})
    return first if counted[0] and dict(counted[0].counts) == dict(total) else formula


def _name(found: entry.Entry, name: dict[str, Any], path: str) -> None:
    text = _text(found, name, "name", path)
    kind = _text(found, name, "type", path)
    if kind != "sys":
        found.add(_OTHERS.get(kind, entry.OTHER_NAME), text, f"{path}.name")
    elif not _is_english(name):
        detail = "The systematic name is in another language than English."
        found.refuse(f"{path}.name", "name-language", detail, text)
    else:
        found.add(entry.NAME, text, f"{path}.name")


def _is_english(name: dict[str, Any]) -> bool:
    languages = name.get("languages")
    if not isinstance(languages, list) or not languages:
        return True
    return any(str(code).lower().partition("-")[0] == "en" for code in languages)


def _codes(found: entry.Entry, value: dict[str, Any]) -> None:
    """Registry numbers. One that is not primary belongs to a form or a past entry: it is kept and
    not taken for this substance's own."""
    base = f"{found.place.path}"
    for index, code in enumerate(_list(found, value, "codes")):
        path = f"{base}.codes[{index}]"
        if _text(found, code, "codeSystem", path) != "CAS":
            continue
        kind = _text(found, code, "type", path) or "PRIMARY"
        heading = entry.REGISTRY if kind == "PRIMARY" else f"CAS number, {kind.lower()}"
        found.add(heading, _text(found, code, "code", path), f"{path}.code")
    numbers = value.get("cas_primary")
    for index, number in enumerate(numbers if isinstance(numbers, list) else ()):
        found.add(entry.REGISTRY, str(number), f"{base}.cas_primary[{index}]")


def _title(value: dict[str, Any]) -> str:
    """What the record calls its substance: the name chosen for display, else the first official
    one, else the first; without any name the system's own identifier."""
    listed = value.get("names")
    names = [n for n in listed if isinstance(n, dict)] if isinstance(listed, list) else []
    names = [n for n in names if isinstance(n.get("name"), str) and n["name"].strip()]
    shown = [n for n in names if n.get("displayName") is True]
    official = [n for n in names if n.get("type") == "of"]
    for name in (*shown, *official, *names):
        return str(name["name"]).strip()
    for key in ("approvalID", "unii", "uuid"):
        if isinstance(value.get(key), str):
            return str(value[key])
    return ""


def _text(found: entry.Entry, value: dict[str, Any], key: str, base: str) -> str:
    text = value.get(key)
    if isinstance(text, str):
        return text
    if text is not None:
        what = "a list" if isinstance(text, list) else "not text"
        found.refuse(f"{base}.{key}", "unexpected-value", f"The value of {key} is {what}.")
    return ""


def _list(found: entry.Entry, value: dict[str, Any], key: str) -> list[dict[str, Any]]:
    """The objects of a list; a list of something else is unread as a whole, so that the numbers
    in paths stay right."""
    listed = value.get(key)
    if listed is None:
        return []
    if not isinstance(listed, list) or not all(isinstance(one, dict) for one in listed):
        path = f"{found.place.path}.{key}"
        found.refuse(path, "unexpected-value", f"The value of {key} is no list of objects.")
        return []
    return listed
