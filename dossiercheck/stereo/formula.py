"""Molecular formulas and relative molecular masses, from structures and as printed."""

from __future__ import annotations

import re
import unicodedata
from collections import Counter
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from fractions import Fraction

from rdkit import Chem

from dossiercheck.stereo.structure import Structure
from dossiercheck.stereo.weights import WEIGHTS

_ELEMENT = re.compile(r"([A-Z][a-z]?)(\d*)")
_ATOMS = re.compile(r"(?:\[(\d+)([A-Z][a-z]?)\]|([A-Z][a-z]?))(\d*)")
_SUBSCRIPTS = str.maketrans("₀₁₂₃₄₅₆₇₈₉₊₋·•∙⋅*,−–", "0123456789+-·····.--")
_RAISED = re.compile("[⁰¹²³⁴⁵⁶⁷⁸⁹]*[⁺⁻]$")
_DECIMAL = re.compile(r"\d+\.\d+(?=[A-Z(])")
_ION = re.compile(r"[A-Z][a-z]?\d[+-]")
_CHARGE = re.compile(r"(?:\^?(\d*)([+-])|\((\d*)([+-])\)|([+-])(\d+))$")


@dataclass(frozen=True, slots=True)
class Formula:
    """Element counts and net charge.

    Deuterium and tritium are counted as D and T; other isotopes as their element, `shift` being
    the mass they add.
    """

    counts: Mapping[str, int]
    charge: int = 0
    shift: float = field(default=0.0, compare=False)

    def __str__(self) -> str:
        """Hill order (E. A. Hill, J. Am. Chem. Soc. 1900, 22, 478): C, H, then alphabetical."""
        rest = sorted(e for e in self.counts if e not in {"C", "H"} or "C" not in self.counts)
        order = ["C", "H", *rest] if "C" in self.counts else rest
        text = "".join(
            f"{e}{self.counts[e] if self.counts[e] != 1 else ''}"
            for e in order
            if self.counts.get(e)
        )
        sign = "+" if self.charge > 0 else "-"
        if abs(self.charge) > 1:
            return f"{text}({abs(self.charge)}{sign})"
        return f"{text}{sign}" if self.charge else text


# No substance has such a formula; brackets in brackets would else count to any number.
_LONGEST = 1000
_MOST = 10**9
_MANY_DIGITS = re.compile(r"\d{10}")


def molecular_formula(structure: Structure) -> Formula:
    """The formula of all components together, hydrogens included; deuterium is D."""
    body, charge = structure.hill, 0
    found = re.search(r"([+-])(\d*)$", body)
    if found:
        charge = int(found.group(1) + (found.group(2) or "1"))
        body = body[: found.start()]
    counts: Counter[str] = Counter()
    shift = 0.0
    for nucleons, labelled, plain, number in _ATOMS.findall(body):
        element, amount = labelled or plain, int(number or 1)
        counts[element] += amount
        if nucleons:
            one = Chem.GetPeriodicTable().GetMassForIsotope(element, int(nucleons))
            shift += amount * (one - WEIGHTS[element][0])
    return Formula(dict(counts), charge, shift)


def parse_formula(text: str) -> Formula | None:
    """A printed formula, or None where it is not one.

    Reads subscripts, a trailing charge, dots between components with multipliers ("C8H11N · HCl",
    "2 C8H11N . H2SO4") and brackets ("(C8H11N)2·H2SO4"). A half of a component is read where the
    whole comes to full atoms. None for a charge that could be part of a count ("SO42-").
    """
    if len(text) > _LONGEST or _MANY_DIGITS.search(text):
        return None
    raised = _RAISED.sub(lambda m: f"^{unicodedata.normalize('NFKC', m[0])}", text)
    plain = re.sub(r"</?su[bp]>|[\s_{}$\u200b]", "", raised.translate(_SUBSCRIPTS))
    charge = 0
    found = _CHARGE.search(plain)
    if found and found.start() > 0:
        digits, sign, inside, bare, lead, after = found.groups()
        size = int(digits or inside or after or 1)
        charge = size if (sign or bare or lead) == "+" else -size
        # "C2H3O2-" prints a charge of one; the digit belongs to the element before it. Of an
        # element alone ("Ca2+") it is the charge; of two digits nobody can tell.
        if digits and plain[found.start()] != "^" and not _ION.fullmatch(plain):
            if len(digits) > 1:
                return None
            charge = 1 if charge > 0 else -1
            plain = plain[: found.start()] + digits
        else:
            plain = plain[: found.start()]
    total: Counter[str] = Counter()
    for part in _parts(plain):
        counted = _count(part)
        if counted is None:
            return None
        factor, counts = counted
        for element, number in counts.items():
            amount = factor * number
            if amount.denominator != 1:
                return None
            total[element] += int(amount)
    return Formula(dict(total), charge) if total else None


def _parts(text: str) -> Iterator[str]:
    """Components between dots; the dot of a leading number ("0.5H2O") does not part."""
    for part in text.split("·"):
        lead = _DECIMAL.match(part)
        head = lead.group() if lead else ""
        first, *rest = re.split(r"(?<!\d)\.|(?<=[A-Za-z\d)])\.(?=\d*[A-Z(])", part[len(head) :])
        yield from (piece for piece in (head + first, *rest) if piece)


def _count(part: str) -> tuple[Fraction, Counter[str]] | None:
    lead = re.match(r"\d+(?:\.\d+)?(?:/\d+)?", part)
    factor = Fraction(1)
    if lead:
        head, _, tail = lead.group().partition("/")
        if tail and not int(tail):
            return None
        factor = Fraction(head) / int(tail or 1)
        part = part[lead.end() :].lstrip("x×")
    counts: Counter[str] = Counter()
    stack: list[Counter[str]] = []
    position = 0
    while position < len(part):
        if part[position] in "([":
            stack.append(counts)
            counts = Counter()
            position += 1
            continue
        if part[position] in ")]":
            if not stack:
                return None
            number = re.match(r"\d*", part[position + 1 :])
            times = int((number.group() if number else "") or 1)
            inner, counts = counts, stack.pop()
            for element, amount in inner.items():
                counts[element] += amount * times
            position += 1 + (number.end() if number else 0)
            continue
        found = _ELEMENT.match(part, position)
        if not found or found.group(1) not in WEIGHTS:
            return None
        counts[found.group(1)] += int(found.group(2) or 1)
        position = found.end()
    if stack or not counts or max(counts.values()) > _MOST:
        return None
    return factor, counts


def relative_mass(formula: Formula) -> float:
    """Relative molecular mass from the abridged standard atomic weights in `weights`."""
    weights = (WEIGHTS[element][0] * number for element, number in formula.counts.items())
    return sum(weights) + formula.shift


def mass_spread(formula: Formula) -> float:
    """By how much the mass moves between the editions of the standard atomic weights in use."""
    return sum(WEIGHTS[element][1] * number for element, number in formula.counts.items())


def difference(one: Formula, two: Formula) -> str:
    """What `two` has more and less than `one`, e.g. "CH2 more" or "O less, NH more"."""
    more, less = Counter[str](), Counter[str]()
    for element in {*one.counts, *two.counts}:
        change = two.counts.get(element, 0) - one.counts.get(element, 0)
        (more if change > 0 else less)[element] += abs(change)
    texts = [
        f"{Formula({e: n for e, n in side.items() if n})} {word}"
        for side, word in ((more, "more"), (less, "less"))
        if any(side.values())
    ]
    if one.charge != two.charge:
        texts.append(f"charge {two.charge:+d} against {one.charge:+d}")
    return ", ".join(texts)


def formula_of_smiles(text: str) -> Formula:
    """The formula of a SMILES the library accepts; for tests and small tools."""
    mol = Chem.MolFromSmiles(text)
    if mol is None:
        raise ValueError(f"not a SMILES: {text}")
    return molecular_formula(Structure(mol, text))
