"""Names in documents: found whole with the right structure, read wrongly, or invented.

`python -m tests.benchmarks.documents [--names N] [--prose PAGES] [--speed PAGES] [--json FILE]`

1. Names of dictionary records (`corpus`) in sentences, labelled fields and table cells, laid out
   by independent engines (`layouts`). A name is *right* when its structure is the one that its
   plain text has, *wrong* when it is another, and else undetermined or unread; names that the
   program does not understand as plain text are counted and left out. Evidence where no name was
   written is *false*.
2. Prose without names, full of what tempts: descriptors, locants, codes, reference numbers.
3. CPU time of reading a long PDF over that of the PDF library extracting its bare text, each in a
   process tree of its own.
"""

from __future__ import annotations

import argparse
import hashlib
import json
import random
import re
import subprocess
import sys
import tempfile
from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

from dossiercheck.language import gather
from dossiercheck.model import Evidence, Role, Source, Unread
from dossiercheck.names import NameParser, NameReading, read_names
from dossiercheck.names.joining import choose
from dossiercheck.readers import reader_for
from dossiercheck.stereo.perception import from_smiles
from dossiercheck.stereo.structure import Unreadable
from tests.benchmarks import corpus, layouts, printed
from tests.benchmarks.layouts import Content, Style

_SENTENCES = (
    "The solution of {} in ethanol was stirred at room temperature until no starting material was left.",
    "After drying, {} was obtained as a white solid in a yield of 82 %.",
    "The impurity was identified as {}, which is formed under basic conditions.",
    "It is known that {} is stable for two years when it is protected from light.",
    "Residual {} (not more than 0.10 %) is controlled in the release specification.",
    "The reference standard of {} was characterised by nuclear magnetic resonance spectroscopy.",
    "Coupling with {} gave the next intermediate, and it was used without further purification.",
    "The batch consisted of {} and less than 0.2 % of its enantiomer.",
)
_FILLER = (
    "The manufacturing process was developed over several campaigns and has been transferred to the commercial site.",
    "All steps are carried out under an inert atmosphere, and the temperature is recorded throughout.",
    "The specification was set on the basis of batch analyses and of the results of the stability programme.",
    "No significant difference between the batches was observed under accelerated conditions.",
    "Samples were withdrawn after 3, 6, 9 and 12 months and analysed by the validated procedures.",
)
_TEMPTING = (
    "The (R)-isomer was not detected, and the (S)-enantiomer met the limit (see Table 3-2).",
    "Peaks (1R) and (2S) of Figure 4-1 belong to the baseline; the ratio was 1,2:1.",
    "Lots DX-101-A, DX-101-B and 3-(R)-12 were compared with batch 2-(4)-07 of the other site.",
    "See section 3.2.S.4.1, 2,3-dimensional plots and the 1-to-1 comparison in appendix A-1.",
    "An (E)-to-(Z) isomerisation cannot take place, since no double bond is present.",
    "The configuration was assigned as (2R,3S) by crystallography and confirmed by synthesis.",
    "Both (R)- and (S)-configured material was made, and the racemic form serves as a standard.",
    "A pre-treatment at 20-25 °C for 10-15 min (n = 3) is followed by step (S)-2 of the scheme.",
)


@dataclass(slots=True)
class Tally:
    """Counts over the names of some documents."""

    names: int = 0
    right: int = 0
    wrong: list[str] = field(default_factory=list)
    undetermined: int = 0
    unread: list[str] = field(default_factory=list)
    silent: list[str] = field(default_factory=list)
    false: list[str] = field(default_factory=list)
    pages: int = 0

    def add(self, other: Tally) -> None:
        self.names += other.names
        self.right += other.right
        self.undetermined += other.undetermined
        self.pages += other.pages
        self.unread += other.unread
        self.wrong += other.wrong
        self.silent += other.silent
        self.false += other.false

    def figures(self) -> dict[str, Any]:
        shares = {
            "right_share": round(self.right / self.names, 4) if self.names else None,
            "wrong_share": round(len(self.wrong) / self.names, 4) if self.names else None,
        }
        counts = {
            "names": self.names,
            "right": self.right,
            "wrong": len(self.wrong),
            "undetermined": self.undetermined,
            "unread": len(self.unread),
            "silent": len(self.silent),
            "false": len(self.false),
            "pages": self.pages,
        }
        return counts | shares


@dataclass(frozen=True, slots=True)
class Said:
    """What a document was understood to say: names with readings, and what is unread."""

    names: tuple[tuple[Evidence, NameReading], ...]
    undetermined: tuple[str, ...]
    unread: tuple[str, ...]
    pages: int


def said(path: Path, parser: NameParser) -> Said:
    """The names of a document as the line has them before they are attributed."""
    data = path.read_bytes()
    reader = reader_for(path.name, data[:512])
    assert reader is not None
    source = Source(path.name, hashlib.sha256(data).hexdigest(), len(data), path.suffix[1:])
    items = list(reader(source, data))
    found = list(gather(items))
    names: list[tuple[Evidence, NameReading]] = []
    undetermined: list[str] = []
    unread = [entry.text for entry in found if isinstance(entry, Unread)]
    evidence = [e for e in found if isinstance(e, Evidence) and e.role is Role.NAME]
    extents = [(one, *one.instead) for one in evidence]
    readings = iter(read_names([one.text for some in extents for one in some], parser))
    for some in extents:
        own = [next(readings) for _ in some]
        chosen, doubt = choose([one.text for one in some], own)
        if doubt:
            undetermined.append(max((one.text for one in some), key=len))
        elif own[chosen].structure is None:
            unread.append(some[chosen].text)
        else:
            names.append((some[chosen], own[chosen]))
    pages = max((item.place.page or 0 for item in items), default=0)
    return Said(tuple(names), tuple(undetermined), tuple(unread), pages)


def key(text: str) -> str:
    """A name without what a layout may put in or take out."""
    gone = " \n\t-‐‑\u00ad\u2060\u00a0"
    return "".join(c for c in text.casefold() if c not in gone)


def identity(reading: NameReading) -> str:
    """Equal for one stereoisomer."""
    assert reading.structure is not None
    try:
        return str(from_smiles(reading.structure.smiles).smiles)
    except Unreadable:
        return reading.structure.smiles


def score(path: Path, written: dict[str, str], parser: NameParser) -> Tally:
    """Hold a document against what was written into it: name -> identity."""
    document = said(path, parser)
    wanted = {key(name): (name, identity_) for name, identity_ in written.items()}
    tally = Tally(names=len(wanted), pages=document.pages)
    met: set[str] = set()
    for evidence, reading in document.names:
        mine = key(evidence.text)
        if mine in wanted:
            if mine in met:
                continue
            met.add(mine)
            if identity(reading) == wanted[mine][1]:
                tally.right += 1
            else:
                tally.wrong.append(evidence.text)
            continue
        part = next((k for k in wanted if (mine in k or k in mine) and k not in met), None)
        if part is None:
            tally.false.append(evidence.text)
        else:
            met.add(part)
            tally.wrong.append(f"{evidence.text!r} of {wanted[part][0]!r}")
    doubts = [key(text) for text in document.undetermined]
    unread = [key(text) for text in document.unread if text]
    for mine, (name, _) in wanted.items():
        if mine in met:
            continue
        if any(mine in text or text in mine for text in doubts):
            tally.undetermined += 1
        elif any(mine in text or (len(text) > 6 and text in mine) for text in unread):
            tally.unread.append(name)
        else:
            tally.silent.append(name)
    return tally


def contents(names: Sequence[str], rng: random.Random) -> Content:
    """Half of the names in sentences, a quarter in fields, a quarter in a table."""
    half, rest = len(names) // 2, len(names) - len(names) // 2
    paragraphs = []
    for start in range(0, half, 2):
        text = [rng.choice(_FILLER)]
        for name in names[start : min(start + 2, half)]:
            text += [rng.choice(_SENTENCES).format(name), rng.choice(_FILLER)]
        paragraphs.append(" ".join(text))
    fields = []
    for name in names[half : half + rest // 2]:
        fields += [
            f"Chemical name: {name}",
            f"Molecular weight: {rng.randint(150, 700)}.{rng.randint(10, 99)}",
            rng.choice(_FILLER),
        ]
    rows = [("Code", "Chemical name")]
    rows += [(f"QX-{rng.randint(100, 999)}", name) for name in names[half + rest // 2 :]]
    return Content(tuple(paragraphs), tuple(fields), tuple(rows))


def sample(count: int, parser: NameParser) -> tuple[dict[str, str], int]:
    """Names that are understood as plain text with what they say, and how many were passed by."""
    found: dict[str, str] = {}
    left_out = 0
    taken: set[str] = set()
    for record in corpus.load(None).records:
        # What a naming program remarks behind its name is no part of it.
        name = re.sub(r" \((?:non-)?preferred name\)$", "", printed.bare(record.name))
        (reading,) = read_names([name], parser)
        if reading.structure is None or key(name) in taken or "$" in name:
            left_out += 1
            continue
        taken.add(key(name))
        found[name] = identity(reading)
        if len(found) == count:
            break
    return found, left_out


def laid_out(
    names: dict[str, str], folder: Path, engines: Sequence[str], parser: NameParser
) -> Iterator[tuple[str, Style, Tally]]:
    """Each engine and style with the same names, sixty to a document."""
    rng = random.Random(4)
    listed = list(names)
    for engine in engines:
        write = layouts.docx if engine == "docx" else layouts.engines()[engine]
        suffix = "docx" if engine == "docx" else "pdf"
        for number, start in enumerate(range(0, len(listed), 60)):
            style = layouts.styles()[number % len(layouts.styles())]
            some = listed[start : start + 60]
            path = folder / f"{engine}-{number}.{suffix}"
            write(contents(some, rng), style, path)
            yield engine, style, score(path, {name: names[name] for name in some}, parser)


def prose(pages: int, folder: Path, parser: NameParser) -> Tally:
    """False names in prose without any."""
    rng = random.Random(7)
    tally = Tally()
    for number, style in enumerate(layouts.styles()):
        text = tuple(
            " ".join(rng.choice(_FILLER + _TEMPTING) for _ in range(9)) for _ in range(pages * 2)
        )
        path = folder / f"prose-{number}.pdf"
        layouts.reportlab(Content(text, (), (("Code", "Remark"), ("A", "none"))), style, path)
        tally.add(score(path, {}, parser))
        if tally.pages >= pages:
            break
    return tally


# --- speed ---------------------------------------------------------------------------------


# Both sides begin with nothing imported and print CPU seconds of themselves and their children,
# and the peak memory of the larger process in MB.
_BEGIN = "import resource, sys; path = sys.argv[1]\n"
_BARE = """
import pypdfium2
for page in pypdfium2.PdfDocument(path):
    page.get_textpage().get_text_range()
"""
_READ = """
from dossiercheck.model import Source
from dossiercheck.readers import pdf
with open(path, "rb") as file:
    data = file.read()
for _ in pdf.read(Source("a.pdf", "", len(data), "pdf"), data):
    pass
"""
_END = """
used = [resource.getrusage(who) for who in (resource.RUSAGE_SELF, resource.RUSAGE_CHILDREN)]
seconds = sum(one.ru_utime + one.ru_stime for one in used)
print(seconds, max(one.ru_maxrss for one in used) / 1024)
"""


def speed(pages: int, folder: Path, repeats: int = 3) -> dict[str, Any]:
    """The least CPU time of each side, the sides alternating."""
    rng = random.Random(9)
    text = tuple(" ".join(rng.choice(_FILLER) for _ in range(6)) for _ in range(pages * 4))
    rows = [("Test", "Result")]
    rows += [(f"Item {n}", rng.choice(_FILLER)) for n in range(pages * 8)]
    path = folder / "speed.pdf"
    layouts.reportlab(Content(text, (), tuple(rows)), Style(1, 11, True), path)
    best: dict[str, tuple[float, float]] = {}
    for _ in range(repeats):
        for side, code in (("bare", _BARE), ("read", _READ)):
            run = subprocess.run(
                [sys.executable, "-c", _BEGIN + code + _END, str(path)],
                check=True,
                stdout=subprocess.PIPE,
                text=True,
            )
            seconds, peak = map(float, run.stdout.split())
            best[side] = min(best.get(side, (seconds, peak)), (seconds, peak))
    import pypdfium2

    return {
        "pages": len(pypdfium2.PdfDocument(path)),
        "bare_seconds": round(best["bare"][0], 2),
        "read_seconds": round(best["read"][0], 2),
        "ratio": round(best["read"][0] / best["bare"][0], 2),
        "peak_mb": round(best["read"][1]),
    }


def main() -> None:
    arguments = argparse.ArgumentParser()
    arguments.add_argument("--names", type=int, default=1000)
    arguments.add_argument("--prose", type=int, default=200)
    arguments.add_argument("--speed", type=int, default=400)
    arguments.add_argument("--engines", nargs="*")
    arguments.add_argument("--json", type=Path)
    arguments.add_argument("--show", action="store_true", help="print what was read wrongly")
    given = arguments.parse_args()
    result: dict[str, Any] = {}
    with NameParser() as parser, tempfile.TemporaryDirectory() as made:
        folder = Path(made)
        if given.names:
            names, left_out = sample(given.names, parser)
            result["left_out"] = left_out
            wanted = given.engines or [*layouts.engines(), "docx"]
            tallies: dict[str, Tally] = {}
            seen: Counter[str] = Counter()
            for engine, _, tally in laid_out(names, folder, wanted, parser):
                tallies.setdefault(engine, Tally()).add(tally)
                seen[engine] += 1
            result["engines"] = {name: tally.figures() for name, tally in tallies.items()}
            if given.show:
                for name, tally in tallies.items():
                    for kind in ("wrong", "unread", "silent", "false"):
                        for text in getattr(tally, kind):
                            sys.stderr.write(f"{name} {kind}: {text!r}\n")
        if given.prose:
            tally = prose(given.prose, folder, parser)
            result["prose"] = {"pages": tally.pages, "false": len(tally.false)}
        if given.speed:
            result["speed"] = speed(given.speed, folder)
    text = json.dumps(result, indent=2)
    if given.json:
        given.json.write_text(text + "\n", encoding="utf-8")
    sys.stdout.write(text + "\n")


if __name__ == "__main__":
    main()
