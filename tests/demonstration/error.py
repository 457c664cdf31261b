"""What a planted error is."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from tests.demonstration.drawings import Edit
from tests.demonstration.substances import Substance


@dataclass(frozen=True)
class Planted:
    """One error. A text error replaces `old` by `new` in one field of one document; a drawing
    error edits one connection table. `place` gives the numbers of the place in its document;
    `expect` lists the rules that must speak of it, the one that cites `locant` first."""

    id: str
    kind: str
    sentence: str
    substance: Substance
    document: str
    place: Mapping[str, int | str]
    expect: tuple[str, ...]
    name: str = ""
    old: str = ""
    new: str = ""
    edit: Edit | None = field(default=None, compare=False)
    locant: str = ""
