"""A reader run in a process of its own, within so many seconds of processor time and bytes.

`python -m tests.hostile.limited SECONDS BYTES` takes file names and contents from standard input
(marshalled) and answers each with its items' reasons and the number of items that were read. The
budget of seconds is for each file, that of memory is beside what the program itself takes.
"""

from __future__ import annotations

import marshal
import resource
import subprocess
import sys
from collections.abc import Mapping
from pathlib import Path

from dossiercheck.model import Unread
from tests.unit.readers.reading import read

TOP = Path(__file__).parent.parent.parent
Answer = tuple[list[str], int]


def within(files: Mapping[str, tuple[str, bytes]], seconds: int, memory: int) -> dict[str, Answer]:
    """The answers, by key. A file that goes past its budget, or breaks the reader, and those
    behind it have none."""
    done = subprocess.run(
        [sys.executable, "-m", "tests.hostile.limited", str(seconds), str(memory)],
        input=b"".join(marshal.dumps((key, *file)) for key, file in files.items()),
        stdout=subprocess.PIPE,
        stderr=subprocess.DEVNULL,
        cwd=TOP,
        check=False,
    )
    answers: dict[str, Answer] = {}
    rest = done.stdout
    while rest:
        key, reasons, count = marshal.loads(rest)
        answers[key] = (reasons, count)
        rest = rest[len(marshal.dumps((key, reasons, count))) :]
    return answers


def main(seconds: int, memory: int) -> None:
    read("a.csv", b"a,b\n")
    used = int(Path("/proc/self/statm").read_text().split()[0]) * resource.getpagesize()
    resource.setrlimit(resource.RLIMIT_AS, (used + memory, resource.RLIM_INFINITY))
    while sys.stdin.buffer.peek(1):
        key, name, data = marshal.load(sys.stdin.buffer)
        spent = resource.getrusage(resource.RUSAGE_SELF)
        most = int(spent.ru_utime + spent.ru_stime) + 1 + seconds
        resource.setrlimit(resource.RLIMIT_CPU, (most, resource.RLIM_INFINITY))
        items = read(name, data)
        reasons = sorted({item.reason for item in items if isinstance(item, Unread)})
        count = sum(not isinstance(item, Unread) for item in items)
        sys.stdout.buffer.write(marshal.dumps((key, reasons, count)))
        sys.stdout.buffer.flush()


if __name__ == "__main__":
    main(int(sys.argv[1]), int(sys.argv[2]))
