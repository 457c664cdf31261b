"""What must not matter: the order of atoms and columns, line endings, the typography of a name.

Each example is one dossier of all the records, sound and turned, written in one drawn way; the
verdict on each record is held against the verdict on the plainest writing.
"""

from __future__ import annotations

import csv
import io
from collections.abc import Iterator, Mapping
from pathlib import Path
from random import Random
from tempfile import TemporaryDirectory

from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from rdkit import Chem

from dossiercheck import pipeline, rulebook
from dossiercheck.model import Grade
from dossiercheck.settings import Settings
from tests.property.records import SOUND, turned
from tests.unit.stereo.forms import v2000

SETTINGS = Settings()
RULES = rulebook.load(SETTINGS)
RECORDS: Mapping[str, tuple[str, str]] = {
    f"{kind} {number}": (name if kind == "sound" else turned(name), smiles)
    for number, (name, smiles) in enumerate(SOUND.items(), 1)
    for kind in ("sound", "turned")
}

# Unicode, general category Pd and its look-alikes; primes; spaces. From the Unicode Standard 15.
HYPHENS = "-‐‑‒–—―−﹣－"
PRIMES = "'′’‘ʹʼ＇"
SPACES = " \u00a0\u2009\u202f\u2002\u2003"

Verdict = tuple[tuple[str, str], ...]
relaxed = settings(
    max_examples=12, deadline=None, suppress_health_check=list(HealthCheck), derandomize=True
)


def verdicts(folder: Path) -> dict[str, Verdict]:
    """For each record the rules above remark that speak, with their locants."""
    review = pipeline.review([folder], SETTINGS, RULES)
    labels = {entry.id: entry.label for entry in review.substances}
    found: dict[str, list[tuple[str, str]]] = {label: [] for label in RECORDS}
    for finding in review.findings:
        if finding.grade is not Grade.REMARK:
            found[labels[finding.substance]].append((finding.rule, finding.locant))
    assert not review.unread, review.unread
    return {label: tuple(sorted(said)) for label, said in found.items()}


def sdf(drawings: Mapping[str, str]) -> str:
    return "".join(
        f"{label}{drawings[label][drawings[label].index(chr(10)) :].rstrip()}\n"
        f">  <IUPAC name>\n{name}\n\n$$$$\n"
        for label, (name, _) in RECORDS.items()
    )


def plain_drawings() -> dict[str, str]:
    return {label: v2000(smiles) for label, (_, smiles) in RECORDS.items()}


def checked(name: str, data: bytes) -> dict[str, Verdict]:
    with TemporaryDirectory() as folder:
        Path(folder, name).write_bytes(data)
        return verdicts(Path(folder))


PLAIN = checked("records.sdf", sdf(plain_drawings()).encode())


def test_the_plainest_writing_is_judged_rightly() -> None:
    # The turned ones are other stereoisomers; meso compounds would have been the exception.
    assert all(not said for label, said in PLAIN.items() if label.startswith("sound"))
    assert all(said for label, said in PLAIN.items() if label.startswith("turned"))


@relaxed
@given(st.integers(0, 2**32))
def test_the_order_of_the_atoms_does_not_matter(seed: int) -> None:
    random = Random(seed)
    drawings = {}
    for label, text in plain_drawings().items():
        mol = Chem.MolFromMolBlock(text, removeHs=False)
        order = list(range(mol.GetNumAtoms()))
        random.shuffle(order)
        drawings[label] = Chem.MolToMolBlock(Chem.RenumberAtoms(mol, order))
    assert checked("records.sdf", sdf(drawings).encode()) == PLAIN


@relaxed
@given(st.sampled_from(["\n", "\r\n", "\r"]), st.booleans())
def test_line_endings_do_not_matter(ending: str, mark: bool) -> None:
    text = sdf(plain_drawings()).replace("\n", ending)
    assert checked("records.sdf", text.encode("utf-8-sig" if mark else "utf-8")) == PLAIN


@relaxed
@given(st.permutations(["Code", "IUPAC name", "SMILES", "Remark"]), st.sampled_from(",;\t"))
def test_the_order_of_the_columns_does_not_matter(columns: list[str], comma: str) -> None:
    stream = io.StringIO()
    rows = csv.writer(stream, delimiter=comma)
    rows.writerow(columns)
    for label, (name, smiles) in RECORDS.items():
        cells = {"Code": label, "IUPAC name": name, "SMILES": smiles, "Remark": "none"}
        rows.writerow([cells[column] for column in columns])
    found = checked("table.csv", stream.getvalue().encode())
    assert {k: bool(v) for k, v in found.items()} == {k: bool(v) for k, v in PLAIN.items()}


def typeset(name: str, random: Random) -> Iterator[str]:
    """The name as a typist or a layout program may write it."""
    for character in name:
        if character == "-":
            yield random.choice(HYPHENS)
        elif character == "'":
            yield random.choice(PRIMES)
        elif character == " ":
            yield random.choice(SPACES)
        elif character in "RSEZ" and random.random() < 0.3:
            yield random.choice(["~{%s}", "*%s*", "<i>%s</i>", "\u200b%s"]) % character
        else:
            yield character


@relaxed
@given(st.integers(0, 2**32))
def test_the_typography_of_a_name_does_not_matter(seed: int) -> None:
    random = Random(seed)
    drawings = plain_drawings()
    text = "".join(
        f"{label}{drawings[label][drawings[label].index(chr(10)) :].rstrip()}\n"
        f">  <IUPAC name>\n{''.join(typeset(name, random))}\n\n$$$$\n"
        for label, (name, _) in RECORDS.items()
    )
    assert checked("records.sdf", text.encode()) == PLAIN
