r"""The parser's extended SMILES, read as text: atoms, locants, marks of configuration.

Only what is needed to compare two answers for almost the same name; no chemistry is perceived.
OpenSMILES (2016), sections 3.8 and 3.9, for the meaning of `@`, `/` and `\`.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cached_property

from dossiercheck.names.named import NamedStructure, StereoGroup

_TOKEN = re.compile(
    r"(?P<atom>\[[^\]]*\]|Br|Cl|[BCNOPSFIbcnops*])|(?P<bond>[-=#$:/\\])|(?P<ring>%\d\d|\d)"
    r"|(?P<open>\()|(?P<close>\))|(?P<dot>\.)"
)
_ATOM = re.compile(r"\[[^\]]*\]|Br|Cl|[BCNOPSFIbcnops*]")
_CENTRE = re.compile(r"\[(\d*)([A-Z][a-z]?|[a-z])(@@?)(H\d?)?([+-]\d*)?\]")
_ORGANIC = frozenset(["B", "C", "N", "O", "P", "S", "F", "Cl", "Br", "I"])


class NotationError(ValueError):
    """The parser's answer is not the SMILES that was expected."""


@dataclass(frozen=True)
class Notation:
    """A SMILES text as a graph. `atoms` are the atom tokens in order, `marks` their `@`, `@@`
    or "", `bonds` (begin, end, symbol as written from begin to end)."""

    smiles: str
    atoms: tuple[str, ...]
    marks: tuple[str, ...]
    bonds: tuple[tuple[int, int, str], ...]

    @cached_property
    def neighbours(self) -> tuple[tuple[int, ...], ...]:
        """For each atom the atoms bound to it, ascending."""
        found: list[set[int]] = [set() for _ in self.atoms]
        for begin, end, _ in self.bonds:
            found[begin].add(end)
            found[end].add(begin)
        return tuple(tuple(sorted(each)) for each in found)

    @cached_property
    def double_bonds(self) -> dict[tuple[int, int], str]:
        """For each double bond with a configuration: `cis` or `trans`, as the lowest-numbered
        neighbours of its two ends stand to each other."""
        side: dict[tuple[int, int], int] = {}
        for begin, end, symbol in self.bonds:
            if symbol in ("/", "\\"):
                up = 1 if symbol == "/" else -1
                side[begin, end] = up
                side[end, begin] = -up
        found = {}
        for begin, end, symbol in self.bonds:
            if symbol == "=":
                sides = [self._side(side, begin, end), self._side(side, end, begin)]
                if all(sides):
                    key = (min(begin, end), max(begin, end))
                    found[key] = "cis" if sides[0] == sides[1] else "trans"
        return found

    def _side(self, side: dict[tuple[int, int], int], atom: int, other: int) -> int:
        """On which side of the double bond the lowest-numbered neighbour of `atom` stands."""
        ends = [n for n in self.neighbours[atom] if n != other]
        for position, end in enumerate(ends):
            if (atom, end) in side:
                return side[atom, end] if position == 0 else -side[atom, end]
        return 0

    @cached_property
    def constitution(self) -> str:
        """The SMILES text without any mark of configuration, bare where brackets only held
        such a mark; equal for two answers that number their atoms alike."""
        return re.sub(r"[/\\]", "", _CENTRE.sub(_bare, self.smiles))

    def distances(self, start: int) -> dict[int, int]:
        """Bonds from `start` to every atom that hangs together with it."""
        reached, edge = {start: 0}, [start]
        while edge:
            following = []
            for atom in edge:
                for neighbour in self.neighbours[atom]:
                    if neighbour not in reached:
                        reached[neighbour] = reached[atom] + 1
                        following.append(neighbour)
            edge = following
        return reached


def _bare(centre: re.Match[str]) -> str:
    isotope, element, _, hydrogens, charge = centre.groups(default="")
    if not isotope and not charge and element in _ORGANIC:
        return element
    return f"[{isotope}{element}{hydrogens}{charge}]"


def read_notation(smiles: str) -> Notation:
    """Read a plain SMILES text. NotationError when it does not add up."""
    atoms: list[str] = []
    bonds: list[tuple[int, int, str]] = []
    rings: dict[str, tuple[int, str]] = {}
    branches: list[int] = []
    last, symbol, place = -1, "", 0
    while place < len(smiles):
        token = _TOKEN.match(smiles, place)
        if not token:
            raise NotationError(f"unexpected {smiles[place]!r} in {smiles}")
        place, text = token.end(), token.group()
        match token.lastgroup:
            case "atom":
                atoms.append(text)
                if last >= 0:
                    bonds.append((last, len(atoms) - 1, symbol))
                last, symbol = len(atoms) - 1, ""
            case "bond":
                symbol = text
            case "ring":
                if text in rings:
                    begin, first = rings.pop(text)
                    if symbol in ("/", "\\") and not first:
                        bonds.append((last, begin, symbol))
                    else:
                        bonds.append((begin, last, first or symbol))
                else:
                    rings[text] = (last, symbol)
                symbol = ""
            case "open":
                branches.append(last)
            case "close":
                if not branches:
                    raise NotationError(f"brackets do not pair in {smiles}")
                last = branches.pop()
            case _:
                last, symbol = -1, ""
    if rings or branches:
        raise NotationError(f"rings or brackets do not pair in {smiles}")
    marks = tuple("@@" if "@@" in a else "@" if "@" in a else "" for a in atoms)
    return Notation(smiles, tuple(atoms), marks, tuple(bonds))


def read_extended(answer: str) -> NamedStructure:
    """The parser's `SMILES |$_AV:locants$,groups|`. NotationError when it does not add up."""
    smiles, _, extension = answer.partition(" |")
    count = len(_ATOM.findall(smiles))
    labels: tuple[str, ...] = ("",) * count
    groups: list[StereoGroup] = []
    if extension:
        if not extension.endswith("|"):
            raise NotationError(f"unfinished extension in {answer}")
        extension = extension[:-1]
        if extension.startswith("$"):
            text, _, extension = extension[1:].partition("$")
            labels = tuple(text.removeprefix("_AV:").split(";"))
            labels += ("",) * (count - len(labels))  # empty ones at the end are not written
            if len(labels) != count:
                raise NotationError(f"{len(labels)} locants for {count} atoms in {answer}")
        parts = re.findall(r"r|[&oa]\d*:\d+(?:,\d+)*", extension)
        groups.extend(_group(part, smiles) for part in parts)
    return NamedStructure(smiles, labels, tuple(groups))


def _group(part: str, smiles: str) -> StereoGroup:
    if part == "r":
        marked = tuple(i for i, m in enumerate(read_notation(smiles).marks) if m)
        return StereoGroup("rac", 1, marked)
    head, _, atoms = part.partition(":")
    kind = {"&": "and", "o": "or", "a": "abs"}[head[0]]
    return StereoGroup(kind, int(head[1:] or 1), tuple(int(a) for a in atoms.split(",")))
