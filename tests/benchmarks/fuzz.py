"""One fuzz target a reader: changed files in, records, passages, tables and unread out.

`python -m tests.benchmarks.fuzz [--seconds 60] [--reader NAME] [--seed N] [--jobs N] [--input N]`

Held of every input: the reader raises nothing, and neither does the search of its items for
evidence; what is unread has a reason and a sentence; all text can be written as UTF-8; a second
reading says the same; and all of it within `LIMIT` seconds and `MEMORY` bytes. The inputs are
those of `fuzzchange`, so `--reader NAME --seed N --input NUMBER` runs one again and shows it. What
broke a reader once is a case of `tests/hostile`.
"""

from __future__ import annotations

import argparse
import hashlib
import json
import re
import resource
import sys
import tempfile
import time
import traceback
from collections import Counter
from concurrent.futures import ThreadPoolExecutor
from dataclasses import asdict, dataclass, field
from itertools import count
from multiprocessing import get_context
from multiprocessing.connection import Connection
from pathlib import Path
from typing import Any

from dossiercheck.find import Found, find
from dossiercheck.language import gather
from dossiercheck.lifecycle import lifecycle
from dossiercheck.limits import Refused
from dossiercheck.model import Item, Source, Unread
from dossiercheck.readers import reader_for
from dossiercheck.sequences import submission
from dossiercheck.shelf import Shelf
from tests.benchmarks.fuzzchange import changed
from tests.benchmarks.fuzzseeds import SEEDS
from tests.unit.sequence import BOOK

LIMIT = 60.0  # seconds by the clock for two readings; other work on the machine counts in
MEMORY = 1 << 30  # beside what the program itself takes
_SLUG = re.compile(r"[a-z0-9]+(-[a-z0-9]+)*")


@dataclass(slots=True)
class Tally:
    """What became of a reader's inputs. `faults`: what went wrong -> numbers of the inputs."""

    reader: str
    inputs: int = 0
    whole: int = 0
    partly: int = 0
    unread: int = 0
    slowest: float = 0.0
    slowest_input: int = 0
    faults: dict[str, list[int]] = field(default_factory=dict)

    def fault(self, what: str, number: int) -> None:
        self.faults.setdefault(what, []).append(number)


def items_of(reader: str, name: str, data: bytes) -> list[Any]:
    """All that the program finds in a file, archives and submission sequences laid into a folder."""
    if reader not in ("zip", "tar", "ectd"):
        return _items(Source(name, hashlib.sha256(data).hexdigest(), len(data), ""), data)
    with tempfile.TemporaryDirectory() as folder, Shelf() as shelf:
        (Path(folder) / name).write_bytes(data)
        if reader == "ectd":
            (Path(folder) / "m3").mkdir()
            (Path(folder) / "m3" / "a.txt").write_text("x")
        found = list(find([Path(folder)], shelf))
        files = [one for one in found if isinstance(one, Found)]
        items: list[Any] = [one for one in found if isinstance(one, Unread)]
        cycle = lifecycle(submission(files, [one.place.source for one in items]))
        outcome = BOOK.judge_submission(cycle)
        items += [*cycle.unread, *outcome.findings, *outcome.unread]
        for one in files:
            try:
                items += [] if one.archive else _items(one.source, one.read())
            except Refused as refused:
                items.append(refused.reason)
        return items


def _items(source: Source, data: bytes) -> list[Item]:
    reader = reader_for(source.path, data[:512])
    return list(reader(source, data)) if reader else []


def look(reader: str, name: str, data: bytes, once: bool = False) -> tuple[str, str]:
    """(outcome, fault): "whole", "partly" or "unread", and what went wrong, "" for nothing.
    `once`: it is not read a second time."""
    try:
        items = items_of(reader, name, data)
        evidence = list(gather([one for one in items if not isinstance(one, str)]))
        said = repr((items, evidence))
        again = items if once else items_of(reader, name, data)
    except Exception as error:
        return "unread", _where(error)
    unread = [one for one in (*items, *evidence) if isinstance(one, Unread)]
    fault = ""
    if again != items:
        fault = "the second reading differs"
    elif re.search(r"\\ud[89a-f]|[\ud800-\udfff]", said) and _surrogates(items, evidence):
        fault = "half of a surrogate pair came through"
    elif bad := [one for one in unread if not _SLUG.fullmatch(one.reason) or not one.detail]:
        fault = f"an unread entry without reason or sentence: {bad[0].reason!r}"
    read = len(items) - sum(isinstance(one, (Unread, str)) for one in items)
    return ("unread" if not read else "partly" if unread else "whole"), fault


def _surrogates(*things: Any) -> bool:
    for one in things:
        try:
            json.dumps(_plain(one), ensure_ascii=False).encode()
        except UnicodeEncodeError:
            return True
    return False


def _plain(things: list[Any]) -> list[Any]:
    return [asdict(one) if not isinstance(one, str) else one for one in things]


def _where(error: Exception) -> str:
    frames = traceback.extract_tb(error.__traceback__)
    ours = [
        one for one in frames if "dossiercheck" in one.filename and "/tests/" not in one.filename
    ]
    last = (ours or frames)[-1]
    at = f"{Path(last.filename).name}:{last.name}"
    return f"{type(error).__name__} in {at}: {error}".splitlines()[0][:160]


def _work(pipe: Connection, reader: str, seed: int, first: int, seconds: float) -> None:
    """In a process of its own: try inputs, and say before each which it is."""
    seeds = SEEDS[reader]()
    for number in range(min(first, len(seeds)) or len(seeds)):
        items_of(reader, *seeds[number])  # libraries are loaded before memory is bounded
    used = int(Path("/proc/self/statm").read_text().split()[0]) * resource.getpagesize()
    resource.setrlimit(resource.RLIMIT_AS, (used + MEMORY, resource.RLIM_INFINITY))
    until = time.monotonic() + seconds
    for number in count(first):
        if time.monotonic() > until:
            break
        pipe.send((number, None, "", 0.0))
        begun = time.perf_counter()
        once = reader == "pdf" and number % 8 > 0  # each reading starts a process
        outcome, fault = look(reader, *changed(seeds, seed, number), once)
        pipe.send((number, outcome, fault, time.perf_counter() - begun))
    pipe.close()


def fuzz(reader: str, seed: int, seconds: float) -> Tally:
    """Run one target; a process that hangs or dies loses the input it was at."""
    tally = Tally(reader)
    context = get_context("spawn")
    first = 0
    while seconds > 0:
        ours, theirs = context.Pipe(duplex=False)
        process = context.Process(target=_work, args=(theirs, reader, seed, first, seconds))
        process.start()
        theirs.close()
        lost = _listen(ours, tally)
        process.kill()
        process.join()
        ours.close()
        if not lost:
            break
        first, seconds = lost[0] + 1, seconds - lost[1]
    return tally


def _listen(pipe: Connection, tally: Tally) -> tuple[int, float] | None:
    """Count until the process ends; (input, seconds since its first) where it was lost."""
    begun: float | None = None
    at: int | None = None
    try:
        while pipe.poll(LIMIT if begun else 120):
            number, outcome, fault, took = pipe.recv()
            begun = begun or time.monotonic()
            at = number if outcome is None else None
            if outcome is None:
                continue
            tally.inputs += 1
            setattr(tally, outcome, getattr(tally, outcome) + 1)
            if took > tally.slowest:
                tally.slowest, tally.slowest_input = round(took, 2), number
            if fault:
                tally.fault(fault, number)
        what = f"no answer within {LIMIT:g} s"
    except EOFError:
        what = "the process died"
    if begun is None:
        raise RuntimeError(f"the target {tally.reader} did not begin: {what}")
    if at is None:
        return None
    tally.fault(what, at)
    return at, time.monotonic() - begun


def main() -> int:
    """Print a table and JSON; status 1 where a reader broke."""
    parser = argparse.ArgumentParser(prog="python -m tests.benchmarks.fuzz")
    parser.add_argument("--seconds", type=float, default=60)
    parser.add_argument("--reader", choices=sorted(SEEDS), action="append")
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--jobs", type=int, default=1)
    parser.add_argument("--input", type=int)
    given = parser.parse_args()
    chosen = given.reader or list(SEEDS)
    if given.input is not None:
        name, data = changed(SEEDS[chosen[0]](), given.seed, given.input)
        sys.stdout.buffer.write(data + b"\n")
        print(name, look(chosen[0], name, data), file=sys.stderr)
        return 0
    print(
        f"{'reader':10} {'inputs':>8} {'whole':>8} {'partly':>8} {'unread':>8} {'slowest':>8} faults"
    )
    tallies = []
    with ThreadPoolExecutor(given.jobs) as pool:
        for tally in pool.map(lambda name: fuzz(name, given.seed, given.seconds), chosen):
            tallies.append(tally)
            print(
                f"{tally.reader:10} {tally.inputs:8} {tally.whole:8} {tally.partly:8}"
                f" {tally.unread:8} {tally.slowest:8.2f} {len(tally.faults)}",
                flush=True,
            )
            for what, numbers in tally.faults.items():
                print(f"    {len(numbers)} × {what} (inputs {numbers[:5]})", flush=True)
    together = Counter({"inputs": sum(tally.inputs for tally in tallies)})
    print(json.dumps({"seed": given.seed, **together, "readers": [asdict(t) for t in tallies]}))
    return int(any(tally.faults for tally in tallies))


if __name__ == "__main__":
    raise SystemExit(main())
