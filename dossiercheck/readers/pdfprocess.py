"""The other side of `pdfserver`: a PDF's pages, whatever the file does to the process it is in.

A page that takes too long or kills the process is unread, and the next process begins behind it.
"""

from __future__ import annotations

import marshal
import os
import queue
import subprocess
import sys
import threading
from collections.abc import Iterator
from contextlib import suppress
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import dossiercheck
from dossiercheck.limits import Refused
from dossiercheck.readers.pdfpage import PdfPage, unpack

_PACKAGE_ROOT = str(Path(dossiercheck.__file__).parent.parent)


@dataclass(frozen=True, slots=True)
class PdfLimits:
    """Budgets of one document: seconds to open it and for each page, bytes of memory of the
    process beside the document itself, processes lost, pages."""

    seconds: float = 30.0
    memory: int = 1536 << 20
    losses: int = 5
    pages: int = 20_000


@dataclass(frozen=True, slots=True)
class Opened:
    """The document opened. `bookmarks` are (level from 0, title, page from 0 or -1); `notes` are
    (reason, detail) of what is not read in it."""

    pages: int
    bookmarks: tuple[tuple[int, str, int], ...]
    notes: tuple[tuple[str, str], ...]


@dataclass(frozen=True, slots=True)
class BadPage:
    """A page, from 1, that gave nothing."""

    number: int
    reason: str
    detail: str


def pages(data: bytes, limits: PdfLimits) -> Iterator[Opened | PdfPage | BadPage]:
    """First `Opened`, then every page in order. Raises `Refused` where the document does not open:
    "encrypted", "damaged", "no-pages", "time-budget", "process-died"."""
    first = losses = count = 0
    while True:
        child = _Child(data, first, limits)
        at: int | None = None
        try:
            while True:
                message = child.next()
                kind = message[0]
                if kind == "refused":
                    raise Refused(message[1], message[2])
                if kind == "opened":
                    if count == 0:
                        count = _checked(message[1], limits)
                        yield Opened(count, tuple(message[2]), tuple(message[3]))
                elif kind == "page":
                    at = message[1]
                elif kind == "end":
                    return
                elif at is not None:
                    yield _page(at, message)
                    first, at = at + 1, None
        except _Lost as lost:
            losses += 1
            if count == 0:
                raise Refused(lost.reason, f"The document does not open: {lost.detail}.") from None
            yield BadPage(first + 1, lost.reason, f"The page was not read: {lost.detail}.")
            first += 1
        finally:
            child.end()
        if first >= count:
            return
        if losses >= limits.losses:
            detail = "The page was not looked at: too many pages before it could not be read."
            yield from (BadPage(n + 1, "not-reached", detail) for n in range(first, count))
            return


def _checked(count: int, limits: PdfLimits) -> int:
    if count == 0:
        raise Refused("no-pages", "The document has no page that can be reached.")
    if count > limits.pages:
        raise Refused("page-budget", f"The document has {count} pages.")
    return count


def _page(index: int, message: tuple[Any, ...]) -> PdfPage | BadPage:
    if message[0] == "content":
        return unpack(message[1])
    return BadPage(index + 1, message[1], message[2])


class _Lost(Exception):
    def __init__(self, reason: str, detail: str) -> None:
        super().__init__(detail)
        self.reason = reason
        self.detail = detail


class _Child:
    """One process, with threads that write to it and read from it so that waiting can end."""

    def __init__(self, data: bytes, first: int, limits: PdfLimits) -> None:
        memory = limits.memory + 2 * len(data)
        self._seconds = limits.seconds
        environment = dict(os.environ)
        known = environment.get("PYTHONPATH", "")
        environment["PYTHONPATH"] = os.pathsep.join(filter(None, (_PACKAGE_ROOT, known)))
        self._process = subprocess.Popen(
            [sys.executable, "-P", "-m", "dossiercheck.readers.pdfserver", str(first), str(memory)],
            stdin=subprocess.PIPE,
            stdout=subprocess.PIPE,
            stderr=subprocess.DEVNULL,
            env=environment,
        )
        # A few pages may wait; the process stands still until they are taken.
        self._messages: queue.Queue[tuple[Any, ...] | None] = queue.Queue(maxsize=16)
        self._over = False
        self._threads = [
            threading.Thread(target=self._write, args=(data,), daemon=True),
            threading.Thread(target=self._read, daemon=True),
        ]
        for thread in self._threads:
            thread.start()

    def next(self) -> tuple[Any, ...]:
        """The next message; raises `_Lost`."""
        try:
            message = self._messages.get(timeout=self._seconds)
        except queue.Empty:
            raise _Lost("time-budget", f"no answer within {self._seconds:g} s") from None
        if message is None:
            raise _Lost("process-died", "the process that reads it died on it")
        return message

    def end(self) -> None:
        """Kill and reap."""
        self._over = True
        with suppress(OSError):
            self._process.kill()
        self._process.wait()
        for thread in self._threads:
            thread.join(timeout=5)
        for pipe in (self._process.stdin, self._process.stdout):
            with suppress(OSError):
                if pipe:
                    pipe.close()

    def _write(self, data: bytes) -> None:
        assert self._process.stdin is not None
        with suppress(OSError, ValueError):
            self._process.stdin.write(data)
            self._process.stdin.close()

    def _read(self) -> None:
        assert self._process.stdout is not None
        stream = self._process.stdout
        with suppress(OSError, ValueError, EOFError):
            while len(head := stream.read(8)) == 8:
                size = int.from_bytes(head, "little")
                body = stream.read(size)
                if len(body) < size:
                    break
                self._put(marshal.loads(body))
        self._put(None)

    def _put(self, message: tuple[Any, ...] | None) -> None:
        while not self._over:
            with suppress(queue.Full):
                self._messages.put(message, timeout=0.2)
                return
