"""A register as the program would write it: what it inferred, for a person to correct.

The text is TOML as `dossiercheck.toml` has it. Comments say where each name was found. Fed back,
it gives the same substances.
"""

from __future__ import annotations

import json
import re
from collections import Counter
from collections.abc import Iterator

from dossiercheck.calling import key_of
from dossiercheck.model import Evidence, Grade, Place, Review, Role, SubstanceEntry

_GRAVE = (Grade.CRITICAL, Grade.MAJOR)
_HEAD = """\
# Substances as dossiercheck inferred them. Nothing here was confirmed by anyone: correct it, and
# keep it as dossiercheck.toml. Comments say where each thing was found.
"""


def proposed(review: Review) -> str:
    """The `[[substance]]` entries for all substances of a review, as TOML.

    A substance that no label names is a comment only, and so is a structure which a critical or
    major finding puts in doubt, and an alias that two substances have.
    """
    owners = Counter(
        key
        for entry in review.substances
        for key in {key_of(label) for label in (entry.label, *_labels(entry))}
    )
    disputed = {one.substance for one in review.findings if one.grade in _GRAVE}
    return "\n".join(
        [
            _HEAD,
            *(
                line
                for entry in review.substances
                for line in _entry(entry, owners, entry.id in disputed)
            ),
        ]
    )


def _entry(entry: SubstanceEntry, owners: Counter[str], disputed: bool) -> Iterator[str]:
    labels = _labels(entry)
    if not labels:
        yield from _unlabelled(entry)
        return
    own = key_of(entry.label)
    yield "[[substance]]"
    first = next((place for label, place in labels.items() if key_of(label) == own), None)
    yield f"id = {_quoted(entry.label)}" + (f"  # {_where(first)}" if first else "")
    aliases: list[str] = []
    for label, place in labels.items():
        if key_of(label) == own or key_of(label) in map(key_of, aliases):
            continue
        if owners[key_of(label)] > 1:
            yield f"# {_quoted(label)} is left out: two substances are called so; {_where(place)}"
            continue
        aliases.append(label)
    if aliases:
        yield "aliases = ["
        yield from (f"  {_quoted(label)},  # {_where(labels[label])}" for label in aliases)
        yield "]"
    if entry.role:
        why = f"  # {_plain(entry.inferred)}" if entry.inferred else ""
        yield f"role = {_quoted(entry.role)}{why}"
    yield from _reference(entry, disputed)
    yield ""


def _reference(entry: SubstanceEntry, disputed: bool) -> Iterator[str]:
    """The structure, or else the first name; as a comment where it is in doubt."""
    named = next((said for said in entry.evidence if said.role is Role.NAME), None)
    place = _held(entry)
    mark = "# in doubt, see the findings: " if disputed else ""
    if entry.smiles:
        yield f"{mark}smiles = {_quoted(entry.smiles)}" + (f"  # {_where(place)}" if place else "")
    elif named and not disputed:
        # Not as a setting: the program did not read a structure out of it for certain.
        yield f"# name = {_quoted(_plain(named.text))}  # {_where(named.place)}"


def _held(entry: SubstanceEntry) -> Place | None:
    reference = entry.concordance.reference if entry.concordance else ""
    return next((said.place for said in entry.evidence if said.id == reference), None)


def _unlabelled(entry: SubstanceEntry) -> Iterator[str]:
    yield f"# Without a label: {_plain(entry.label)}"
    if entry.smiles:
        yield f"# smiles = {_quoted(entry.smiles)}"
    yield ""


def _labels(entry: SubstanceEntry) -> dict[str, Place]:
    """What evidence of the substance is called, with the place of the first."""
    found: dict[str, Place] = {}
    for said in entry.evidence:
        for label in _called(said):
            found.setdefault(label, said.place)
    return found


def _called(said: Evidence) -> Iterator[str]:
    for label in (said.label, *said.also):
        if key_of(label):
            yield _plain(label)


def _where(place: Place) -> str:
    return _plain(f"{place.source}, {place}")


def _quoted(text: str) -> str:
    """A basic string: TOML takes the escapes of JSON, but not a bare DEL."""
    return json.dumps(text, ensure_ascii=False).replace("\x7f", "\\u007f")


def _plain(text: str) -> str:
    """One line without control characters, fit for a comment."""
    return re.sub(r"[\x00-\x1f\x7f]+", " ", " ".join(text.split()))
