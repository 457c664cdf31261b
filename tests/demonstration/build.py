"""Writes `samples/`: the clean dossier, the planted one, and the manifest of what is planted."""

from __future__ import annotations

import json
import sys
from collections.abc import Iterable
from pathlib import Path

from tests.demonstration.documents import documents
from tests.demonstration.drawings import Edit
from tests.demonstration.error import Planted
from tests.demonstration.planted_impurities import CHARACTERISATION
from tests.demonstration.planted_manufacture import MANUFACTURE
from tests.demonstration.substances import BASE, DRUG, Substance

PLANTED = (*MANUFACTURE, *CHARACTERISATION)
SAMPLES = Path(__file__).parents[2] / "samples"

SETTINGS = f"""# Invented sponsor, invented substances; the registry numbers are invented too.
# What this dossier calls its substances.

[[substance]]
id = "{DRUG.label}"
aliases = ["Drug substance", "BQT-2291"]
role = "drug substance"

[[substance]]
id = "{BASE.label}"
aliases = ["Dorvaquelan free base", "BQT-2291 base"]
role = "free base"
"""

HEADER = """# What is planted in `planted/`; `clean/` is the same dossier without it. Not part of a dossier.
#
# Brindlequay Therapeutics, dorvaquelan, BQT-2291 and the registry numbers are invented (the
# numbers have a valid check digit and lie above every number given out when this was written).
# The line of a text file, the row of a sheet or table (its heading counted), the record and field
# of a structure file are counted from 1. Each rule under `expect` must report the place; nothing
# else may be reported above remark.
"""


class Dossier:
    """Hands the documents their values, true or spoilt, and counts which errors were planted."""

    def __init__(self, errors: Iterable[Planted] = ()) -> None:
        self.texts = {(e.document, e.substance.label, e.name): e for e in errors if e.name}
        self.drawings = {(e.document, e.substance.label): e for e in errors if e.edit}
        self.used: set[str] = set()

    def say(self, document: str, substance: Substance, field: str, value: str) -> str:
        """The value that the document prints."""
        error = self.texts.get((document, substance.label, field))
        if error is None:
            return value
        if value.count(error.old) != 1:
            raise ValueError(f"{error.id}: '{error.old}' is not once in '{value}'")
        self.used.add(error.id)
        return value.replace(error.old, error.new)

    def draw(self, document: str, substance: Substance) -> Edit | None:
        """The change to the drawing, None where it is drawn as it should be."""
        error = self.drawings.get((document, substance.label))
        if error is None:
            return None
        self.used.add(error.id)
        return error.edit

    def files(self) -> dict[str, bytes]:
        """The dossier's files, settings included."""
        made = documents(self.say, self.draw)
        missing = {e.id for e in (*self.texts.values(), *self.drawings.values())} - self.used
        if missing:
            raise ValueError(f"not planted: {sorted(missing)}")
        return {"dossiercheck.toml": SETTINGS.encode(), **made}


def manifest() -> str:
    """The planted errors as TOML."""
    entries = []
    for error in PLANTED:
        place = ", ".join(f"{key} = {_toml(value)}" for key, value in error.place.items())
        lines = [
            "[[error]]",
            f"id = {_toml(error.id)}",
            f"kind = {_toml(error.kind)}",
            f"sentence = {_toml(error.sentence)}",
            f"substance = {_toml(error.substance.label)}",
            f"source = {_toml(error.document)}",
            f"place = {{ {place} }}",
            f"expect = [{', '.join(_toml(rule) for rule in error.expect)}]",
        ]
        if error.locant:
            lines.append(f"locant = {_toml(error.locant)}")
        entries.append("\n".join(lines) + "\n")
    return "\n".join((HEADER, *entries))


def sample_files() -> dict[str, bytes]:
    """Everything under `samples/`, by its path there."""
    return {
        **{f"clean/{path}": data for path, data in Dossier().files().items()},
        **{f"planted/{path}": data for path, data in Dossier(PLANTED).files().items()},
        "planted-manifest.toml": manifest().encode("utf-8"),
    }


def _toml(value: int | str) -> str:
    return json.dumps(value, ensure_ascii=False)


def main() -> None:
    """Write the samples."""
    for path, data in sample_files().items():
        target = SAMPLES / path
        target.parent.mkdir(parents=True, exist_ok=True)
        target.write_bytes(data)
    sys.stderr.write(f"{len(sample_files())} files under {SAMPLES}\n")


if __name__ == "__main__":
    main()
