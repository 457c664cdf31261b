"""What was found when the sound records that the program flags were read."""

from __future__ import annotations

import tomllib
from dataclasses import dataclass
from functools import cache
from pathlib import Path

_FILE = Path(__file__).with_name("flagged_records.toml")


@dataclass(frozen=True, slots=True)
class Verdict:
    """`verdict`: dictionary (a true error of the dictionary), program (a false alarm) or
    unclear; `reason` in a few words."""

    id: str
    verdict: str
    reason: str


@cache
def verdicts() -> dict[str, Verdict]:
    """The verdict for each record that was read."""
    read = tomllib.loads(_FILE.read_text(encoding="utf-8"))
    return {name: Verdict(name, entry["verdict"], entry["reason"]) for name, entry in read.items()}
