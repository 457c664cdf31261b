"""Defined terms: "Dorvaline maleate (hereinafter DX-101)", "Impurity B (DX-102)".

Only a definition in so many words, or a code in brackets directly behind a label, counts. Both
sides must be labels; what a systematic name is called is read with the name (`labels.beside`).
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from dataclasses import dataclass

from dossiercheck.language.labels import LABEL, NAMED, is_label, is_relation, named
from dossiercheck.model import Place

_PART = r"(?:drug substance|active (?:pharmaceutical ingredient|substance|ingredient))"
_LABEL = rf"(?P<label>{LABEL.pattern}|\b{NAMED.pattern})"
_OTHER = rf"(?:the )?[“\"'‘«]?(?P<other>{LABEL.pattern}|{_PART}|{NAMED.pattern})"
_VERB = r"""(?:
    here(?:in)?after,?\s+(?:(?:referred\sto\sas|called|named|designated|abbreviated)\s+)?
  | (?:(?:also|further|below|(?:is|was)\s+(?:here|below|also)?)\s*)?
    (?:referred\sto|known|designated|coded|abbreviated)\s+(?:below\s|herein\s|hereafter\s)?as\s+
  | (?:company|laboratory|internal|development|compound|impurity)\s+code:?\s+
)"""
_DEFINED = re.compile(rf"{_LABEL}\s*,?\s*[(\[]?\s*(?x:{_VERB}){_OTHER}")
_BRACKETED = re.compile(rf"{_LABEL}\s+[(\[](?P<other>{LABEL.pattern})[)\]]")


@dataclass(frozen=True, slots=True)
class Term:
    """`other` is another name of what is called `label`; `said` is how the text puts it.
    `plain` is false where only a bracket says so: then the label must be one elsewhere too."""

    label: str
    other: str
    said: str
    place: Place
    plain: bool = True


def terms(text: str, place: Place) -> Iterator[Term]:
    """The definitions of one passage or heading, in their order."""
    text = " ".join(text.split())
    found = [
        *((match, "is defined as", True) for match in _DEFINED.finditer(text)),
        *((match, "stands in brackets behind", False) for match in _BRACKETED.finditer(text)),
    ]
    for match, said, plain in sorted(found, key=lambda one: one[0].start()):
        label = match["label"]
        # "the enantiomer of Dorvaline (Impurity A)": the bracket names the enantiomer.
        if is_relation(text[: match.start()]):
            continue
        if is_label(label) or named(label):
            yield Term(label, match["other"], said, place, plain)


def beside(label: str, others: Iterable[str], place: Place) -> Iterator[Term]:
    """The codes that stand in fields of their own beside a label."""
    for other in others:
        if label and len(re.sub(r"\W", "", other)) > 2 and re.search(r"[A-Za-z]", other):
            yield Term(label, other, "stands beside", place)
