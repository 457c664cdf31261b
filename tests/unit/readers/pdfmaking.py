"""PDF files made object by object, so that a test can say exactly what is in them."""

from __future__ import annotations

import zlib
from collections.abc import Sequence
from dataclasses import dataclass, field


@dataclass(slots=True)
class Maker:
    """Objects by number from 1; 1 is the catalogue and 2 the page tree."""

    objects: list[bytes] = field(default_factory=lambda: [b"", b""])
    pages: list[int] = field(default_factory=list)
    catalogue: bytes = b""

    def add(self, content: bytes | str) -> int:
        data = content.encode("latin-1") if isinstance(content, str) else content
        self.objects.append(data)
        return len(self.objects)

    def stream(self, data: bytes, entries: str = "", packed: bool = True) -> int:
        body = zlib.compress(data) if packed else data
        coding = "/Filter /FlateDecode " if packed else ""
        head = f"<< {coding}{entries} /Length {len(body)} >>\nstream\n".encode("latin-1")
        return self.add(head + body + b"\nendstream")

    def page(
        self,
        content: str | bytes,
        resources: str = "",
        box: tuple[float, float, float, float] = (0, 0, 595, 842),
        more: str = "",
    ) -> int:
        data = content.encode("latin-1") if isinstance(content, str) else content
        stream = self.stream(data)
        fonts = resources or self.fonts()
        edges = " ".join(map(str, box))
        number = self.add(
            f"<< /Type /Page /Parent 2 0 R /MediaBox [{edges}] /Resources << {fonts} >> "
            f"/Contents {stream} 0 R {more} >>"
        )
        self.pages.append(number)
        return number

    def fonts(self) -> str:
        return (
            "/Font << /F1 << /Type /Font /Subtype /Type1 /BaseFont /Helvetica "
            "/Encoding /WinAnsiEncoding >> "
            "/F2 << /Type /Font /Subtype /Type1 /BaseFont /Helvetica-Bold >> "
            "/FS << /Type /Font /Subtype /Type1 /BaseFont /Symbol >> >>"
        )

    def bytes(self, kids: Sequence[int] | None = None, trailer: str = "") -> bytes:
        kids = self.pages if kids is None else kids
        self.objects[0] = b"<< /Type /Catalog /Pages 2 0 R " + self.catalogue + b" >>"
        listed = " ".join(f"{kid} 0 R" for kid in kids)
        if not self.objects[1]:
            self.objects[1] = f"<< /Type /Pages /Kids [{listed}] /Count {len(kids)} >>".encode()
        out = bytearray(b"%PDF-1.7\n%\xe2\xe3\xcf\xd3\n")
        places = []
        for number, content in enumerate(self.objects, 1):
            places.append(len(out))
            out += f"{number} 0 obj\n".encode() + content + b"\nendobj\n"
        start = len(out)
        out += f"xref\n0 {len(places) + 1}\n0000000000 65535 f \n".encode()
        for place in places:
            out += f"{place:010d} 00000 n \n".encode()
        size = len(places) + 1
        out += f"trailer\n<< /Size {size} /Root 1 0 R {trailer} >>\n".encode()
        out += f"startxref\n{start}\n%%EOF\n".encode()
        return bytes(out)


def escaped(text: str) -> str:
    return text.replace("\\", "\\\\").replace("(", "\\(").replace(")", "\\)")


def show(text: str, x: float, y: float, size: float = 10, font: str = "F1", more: str = "") -> str:
    """One line at x, y (from the bottom left)."""
    return f"BT /{font} {size} Tf {more} 1 0 0 1 {x} {y} Tm ({escaped(text)}) Tj ET\n"


def lines(*texts: str, x: float = 72, y: float = 760, step: float = 12, size: float = 10) -> str:
    return "".join(show(text, x, y - step * n, size) for n, text in enumerate(texts))


def ruled(xs: Sequence[float], ys: Sequence[float]) -> str:
    """Lines of a table at these places."""
    drawn = [f"{x} {ys[0]} m {x} {ys[-1]} l S\n" for x in xs]
    drawn += [f"{xs[0]} {y} m {xs[-1]} {y} l S\n" for y in ys]
    return "0.5 w\n" + "".join(drawn)


def one_page(content: str, **more: str) -> bytes:
    made = Maker()
    made.page(content, more=more.get("more", ""))
    return made.bytes()
