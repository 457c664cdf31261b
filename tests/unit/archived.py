"""Archives made by the tests, sound and hostile."""

from __future__ import annotations

import io
import struct
import tarfile
import zipfile
from collections.abc import Mapping


def zipped(files: Mapping[str, bytes], method: int = zipfile.ZIP_DEFLATED) -> bytes:
    stream = io.BytesIO()
    with zipfile.ZipFile(stream, "w", method) as made:
        for name, data in files.items():
            info = zipfile.ZipInfo(name)
            info.compress_type = method
            made.writestr(info, data)
    return stream.getvalue()


def entry(name: str, data: bytes = b"", **more: object) -> tarfile.TarInfo:
    info = tarfile.TarInfo(name)
    info.size = len(data)
    for key, value in more.items():
        setattr(info, key, value)
    return info


def tarred(files: Mapping[str, bytes], mode: str = "w") -> bytes:
    return tar_of([(entry(name, data), data) for name, data in files.items()], mode)


def tar_of(entries: list[tuple[tarfile.TarInfo, bytes]], mode: str = "w") -> bytes:
    stream = io.BytesIO()
    with tarfile.open(fileobj=stream, mode=mode) as made:  # type: ignore[call-overload]
        for info, data in entries:
            made.addfile(info, io.BytesIO(data))
    return stream.getvalue()


def with_header(block: bytes, at: int, value: bytes) -> bytes:
    """A tar whose first header has other bytes at a position, its checksum made to fit
    (POSIX.1-2001, ustar interchange format: checksum at 148, counted as eight spaces)."""
    header = bytearray(block[:512])
    header[at : at + len(value)] = value
    header[148:156] = b" " * 8
    header[148:156] = b"%06o\0 " % sum(header)
    return bytes(header) + block[512:]


def overlapping(data: bytes, copies: int) -> bytes:
    """A zip whose members all stand on the same bytes (APPNOTE 6.3, 4.3.7, 4.3.12, 4.3.16)."""
    import zlib

    body = zlib.compress(data, 9)[2:-4]
    crc = zlib.crc32(data)
    local = struct.pack("<4s5H3L2H", b"PK\3\4", 20, 0, 8, 0, 33, crc, len(body), len(data), 5, 0)
    out = local + b"a.txt" + body
    directory = b"".join(
        struct.pack(
            "<4s6H3L5H2L", b"PK\1\2", 20, 20, 0, 8, 0, 33, crc, len(body), len(data),
            5, 0, 0, 0, 0, 0, 0,
        )
        + b"a.tx%d" % number
        for number in range(copies)
    )  # fmt: skip
    end = struct.pack("<4s4H2LH", b"PK\5\6", 0, 0, copies, copies, len(directory), len(out), 0)
    return out + directory + end
