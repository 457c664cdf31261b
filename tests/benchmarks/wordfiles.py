"""Names set into Word documents by independent writers and read back.

    python -m tests.benchmarks.wordfiles [names]

Names of the wwPDB chemical component dictionary (package `biotite`), as they are printed there,
go into sentences and table cells in two ways: by python-docx, each descriptor letter italic in a
run of its own and raised locants as superscripts; and by LibreOffice (Debian package
`libreoffice-writer-nogui`, asked for here only), which writes that document anew, and another one
from HTML. What the line then takes for a name is held against what was set.
"""

from __future__ import annotations

import re
import subprocess
import sys
import tempfile
from collections import Counter
from collections.abc import Iterable, Sequence
from html import escape
from pathlib import Path
from random import Random

import docx

from dossiercheck.language import gather
from dossiercheck.model import Evidence, Role, Source, Unread
from dossiercheck.names.typography import clean
from dossiercheck.readers import word
from tests.benchmarks import opsin
from tests.benchmarks.dictionary import Dictionary

_SEED = 20_261_201
_SENTENCES = (
    "The product {} was obtained as a white solid.",
    "Impurity {n} ({}) was not detected.",
    "It was shown to be {}, which melts above 80 °C.",
    "Hydrolysis gives {}; the acid is removed by washing.",
)
_PIECES = re.compile(
    r"(?P<raised>~[\d,]+~)|(?P<curled>~\{[^}]*\})|(?<=[\d(,])(?P<letter>[RSEZ])(?=[,)])"
)


def names(count: int) -> list[str]:
    """Names with a bracketed descriptor that the parser understands, in a fixed random order."""
    book = Dictionary()
    ids = list(book.ids)
    Random(_SEED).shuffle(ids)
    likely: list[str] = []
    for identifier in ids:
        # The dictionary breaks its lines anywhere, so that a break says nothing of a space.
        name = re.sub(r"\s*\n\s*", "", book.name(identifier)).strip()
        if re.search(r"\((?:\d+[a-z]?'*)?[RSEZ][,)]|~\{[RSEZ]\}", name) and len(name) < 300:
            likely.append(name)
        if len(likely) >= 2 * count:
            break
    known = opsin.parse(clean(name).text for name in likely)
    return [name for name in likely if known.get(clean(name).text)][:count]


def pieces(name: str) -> Iterable[tuple[str, str]]:
    """(text, "italic", "raised" or "") as a typist would set the name."""
    at = 0
    for match in _PIECES.finditer(name):
        yield name[at : match.start()], ""
        kind = match.lastgroup
        text = match[0].strip("~{}")
        yield text, "raised" if kind == "raised" else "italic"
        at = match.end()
    yield name[at:], ""


def write_docx(chosen: Sequence[str], path: Path) -> None:
    """Three of four names in a sentence, one in a table with a heading."""
    made = docx.Document()
    for number, name in enumerate(chosen):
        if number % 4 == 3:
            table = made.add_table(2, 2)
            table.cell(0, 0).text, table.cell(0, 1).text = "Code", "Chemical name"
            table.cell(1, 0).text = f"QX-{number:04d}"
            paragraph, before, after = table.cell(1, 1).paragraphs[0], "", ""
        else:
            paragraph = made.add_paragraph()
            before, after = _around(number)
        paragraph.add_run(before)
        for text, how in pieces(name):
            run = paragraph.add_run(text)
            run.italic = how == "italic" or None
            run.font.superscript = how == "raised" or None
        paragraph.add_run(after)
    made.save(str(path))


def write_html(chosen: Sequence[str], path: Path) -> None:
    """The same as a page."""
    tags = {"": ("", ""), "italic": ("<i>", "</i>"), "raised": ("<sup>", "</sup>")}
    body = []
    for number, name in enumerate(chosen):
        set_ = "".join(f"{tags[how][0]}{escape(t)}{tags[how][1]}" for t, how in pieces(name))
        before, after = _around(number)
        if number % 4 == 3:
            body.append(
                "<table><tr><td>Code</td><td>Chemical name</td></tr>"
                f"<tr><td>QX-{number:04d}</td><td>{set_}</td></tr></table>"
            )
        else:
            body.append(f"<p>{escape(before)}{set_}{escape(after)}</p>")
    page = f"<html><head><meta charset='utf-8'></head><body>{''.join(body)}</body></html>"
    path.write_text(page, encoding="utf-8")


def by_libreoffice(path: Path, folder: Path, source: str) -> Path:
    """The document as LibreOffice writes it."""
    command = ["soffice", f"-env:UserInstallation=file://{folder}/profile", "--headless"]
    command += [f"--infilter={source}"] if source else []
    command += ["--convert-to", "docx:MS Word 2007 XML", "--outdir", str(folder), str(path)]
    subprocess.run(command, check=True, capture_output=True, timeout=600)
    return folder / f"{path.stem}.docx"


def score(path: Path, chosen: Sequence[str]) -> Counter[str]:
    """How each name that was set came back, in the order of the document."""
    data = path.read_bytes()
    found = list(gather(word.read(Source(path.name, "", len(data), "docx"), data)))
    said = [one for one in found if isinstance(one, Evidence) and one.role is Role.NAME]
    left = Counter(clean(one.text).text for one in said)
    wanted = [clean(name).text for name in chosen]
    counts: Counter[str] = Counter()
    missed = []
    for name in wanted:
        if left[name]:
            left[name] -= 1
            counts["whole"] += 1
        else:
            missed.append(name)
    others = [name for name, number in left.items() for _ in range(number)]
    structures = opsin.parse([*missed, *others])
    right = Counter(filter(None, (structures.get(name) for name in missed)))
    for name in others:
        structure = structures.get(name)
        if structure and right[structure]:
            right[structure] -= 1
            counts["other words, same structure"] += 1
        else:
            counts["wrong structure" if structure else "not interpretable"] += 1
            print(f"  {'wrong' if structure else 'no name'}: {name}", file=sys.stderr)
    counts["unread"] = sum(isinstance(one, Unread) for one in found)
    counts["set"] = len(wanted)
    return counts


def _around(number: int) -> tuple[str, str]:
    before, _, after = _SENTENCES[number % len(_SENTENCES)].partition("{}")
    return before.replace("{n}", str(number)), after


def main(count: int) -> None:
    """Print one line of counts a writer."""
    chosen = names(count)
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        write_docx(chosen, folder / "written.docx")
        (folder / "second").mkdir()
        (folder / "third").mkdir()
        write_html(chosen, folder / "page.html")
        documents = {
            "python-docx": folder / "written.docx",
            "LibreOffice from DOCX": by_libreoffice(folder / "written.docx", folder / "second", ""),
            "LibreOffice from HTML": by_libreoffice(
                folder / "page.html", folder / "third", "HTML (StarWriter)"
            ),
        }
        for writer, path in documents.items():
            print(f"{writer:22} {dict(sorted(score(path, chosen).items()))}")


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 1000)
