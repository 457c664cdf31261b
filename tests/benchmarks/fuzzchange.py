"""Seeded changes to a file: of its bytes, of its words and numbers, and of the parts in a package.

An input is named by the seed and its number, so that every one of them can be made again.
"""

from __future__ import annotations

import io
import re
import warnings
import zipfile
from collections.abc import Sequence
from random import Random

_WORD = re.compile(
    rb"<[^<>]{1,80}>|\"[^\"\n]{1,60}\"|[A-Za-z_:][\w:.\-]*|[+-]?\d+(?:\.\d+)?|\s+|[^\w\s]"
)
_NUMBERS = (
    b"0", b"-1", b"1", b"255", b"65535", b"65536", b"2147483648", b"-2147483649", b"999999999999",
    b"1e400", b"1e-400", b"nan", b"inf", b"-0", b"0.1", b"1.5", b"1_0", b"abc", b"", b"9" * 5000,
    "٣".encode(), "²".encode(),
)  # fmt: skip
_ODD = (
    b"\0", b"\xff", b"\xfe\xff", b"\xef\xbb\xbf", b"\r", b"\n", b"\t", b" ", b"\"", b"'", b"<", b">",
    b"&", b"&#0;", b"&x;", b"]]>", b"<!--", b"--", b"/", b"\\", b"{", b"}", b"[", b"]", b"(", b")",
    b";", b",", b"|", b":", b"$$$$\n", b"M  END\n", b"data_\n", b"loop_\n", b"\x1a", b"\x85",
    "\u2028".encode(), "\u00ad".encode(), "\u200b".encode(), "\ud800".encode("utf-8", "surrogatepass"),
    "İ".encode(), "ß".encode(), "𝛼".encode(), b"null", b"true", b"\\ud800", b"../", b"http://x/",
)  # fmt: skip


def changed(seeds: Sequence[tuple[str, bytes]], seed: int, number: int) -> tuple[str, bytes]:
    """The file of that number: a name and its content. Number 0 and on are the seeds themselves."""
    if number < len(seeds):
        return seeds[number]
    random = Random(f"{seed} {number}")
    name, data = random.choice(seeds)
    if data.startswith(b"PK\x03\x04") and random.random() < 0.8:
        return name, _package(data, random)
    others = [other for _, other in seeds]
    for _ in range(random.choice((1, 1, 1, 2, 2, 4, 8))):
        data = _change(data, others, random)
    return name, data


def _package(data: bytes, random: Random) -> bytes:
    """The package with one part changed, left out, twice there, or under another's name."""
    stream = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(data)) as old:
        parts = [(info.filename, old.read(info)) for info in old.infolist()]
    contents = [content for _, content in parts]
    for _ in range(random.choice((1, 1, 2, 4))):
        at = random.randrange(len(parts))
        name, content = parts[at]
        kind = random.random()
        if kind < 0.9:
            parts[at] = (name, _change(content, contents, random))
        elif kind < 0.94 and len(parts) > 1:
            del parts[at]
        elif kind < 0.97:
            parts.append((name, random.choice(contents)))
        else:
            parts[at] = (
                _change(name.encode(), [b"../x"], random).decode("latin-1") or "x",
                content,
            )
    with warnings.catch_warnings(), zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as new:
        warnings.simplefilter("ignore")
        for name, content in parts:
            new.writestr(name, content)
    return stream.getvalue()


def _change(data: bytes, others: Sequence[bytes], random: Random) -> bytes:
    return _words(data, random) if random.random() < 0.6 else _bytes(data, others, random)


def _words(data: bytes, random: Random) -> bytes:
    """One word, number, tag or quoted text replaced, repeated, dropped or moved."""
    words = [(one.start(), one.end()) for one in _WORD.finditer(data)]
    if not words:
        return random.choice(_ODD)
    start, end = random.choice(words)
    word = data[start:end]
    kind = random.randrange(6)
    if kind == 0:
        begin, finish = random.choice(words)
        word = data[begin:finish]
    elif kind == 1 or word[:1].isdigit():
        word = random.choice(_NUMBERS)
    elif kind == 2:
        word = random.choice(_ODD)
    elif kind == 3:
        word = word * random.choice((2, 3, 100, 3000))
    elif kind == 4:
        word = b""
    else:
        begin, finish = sorted((start, random.choice(words)[0]))
        return data[:begin] + data[begin:finish] * random.choice((0, 2, 3, 20)) + data[finish:]
    return data[:start] + word + data[end:]


def _bytes(data: bytes, others: Sequence[bytes], random: Random) -> bytes:
    """A bit flipped, bytes put in, taken out, cut off, or spliced with another file."""
    at = random.randrange(len(data) + 1)
    kind = random.randrange(6)
    if kind == 0 and data:
        at = random.randrange(len(data))
        return data[:at] + bytes([data[at] ^ (1 << random.randrange(8))]) + data[at + 1 :]
    if kind == 1:
        return data[:at] + random.choice(_ODD) + data[at:]
    if kind == 2:
        return data[:at] + data[at + random.choice((1, 2, 4, 16, 100)) :]
    if kind == 3:
        return data[:at]
    if kind == 4:
        other = random.choice(others)
        return data[:at] + other[random.randrange(len(other) + 1) :]
    return data[:at] + random.randbytes(random.choice((1, 2, 4, 8))) + data[at + 4 :]
