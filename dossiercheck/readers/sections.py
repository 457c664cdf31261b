"""Numbered headings as a CTD document has them, and the stack of headings one stands under."""

from __future__ import annotations

import re
from dataclasses import dataclass, field

# Module and section numbers as in ICH M4 (granularity annex): "3.2.S.1.1", "2.3.P.2", "3.2.R".
_CTD = re.compile(r"([1-5]\.\d+(?:\.[SPAR](?:\.\d+)*))(?![\w.])[.:]?[ \t]+(\S.{0,140})")
_PLAIN = re.compile(r"(\d{1,2}(?:\.\d{1,2}){1,5})\.?[ \t]+([A-Z][^\n]{1,100})")


@dataclass(frozen=True, slots=True)
class Heading:
    """A heading with its number, "" where it has none; `level` 1 is outermost."""

    text: str
    level: int
    number: str = ""


def numbered_heading(line: str) -> Heading | None:
    """The heading that a line is by its number alone, None when it is running text."""
    line = line.strip()
    if line.endswith((".", ";", ",")):
        return None
    ctd = _CTD.fullmatch(line)
    if ctd:
        return Heading(line, ctd[1].count(".") + 1, ctd[1])
    plain = _PLAIN.fullmatch(line)
    if plain and not re.match(r"[A-Z][a-z]?\b[^a-z]*$", plain[2]):
        return Heading(line, plain[1].count(".") + 1, plain[1])
    return None


def number_of(text: str) -> str:
    """The section number a heading's text begins with, "" when it begins with none."""
    match = re.match(r"(\d+(?:\.(?:\d+|[SPAR]))*)\.?[ \t]+\S", text)
    return match[1] if match else ""


@dataclass(slots=True)
class Outline:
    """The headings above the present place, outermost first."""

    stack: list[Heading] = field(default_factory=list)

    def enter(self, heading: Heading) -> None:
        """Take a heading: it closes those of its level and deeper."""
        self.stack = [above for above in self.stack if above.level < heading.level]
        self.stack.append(heading)

    @property
    def headings(self) -> tuple[str, ...]:
        """Their texts."""
        return tuple(heading.text for heading in self.stack)

    @property
    def section(self) -> str | None:
        """The number of the innermost heading that has one."""
        return next((h.number for h in reversed(self.stack) if h.number), None)
