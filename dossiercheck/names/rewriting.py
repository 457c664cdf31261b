"""A printed name with descriptors left out, turned round or respelled.

Every rewriting works on the cleaned text and by the places that `descriptors` found, so the
rest of the name stays as printed.
"""

from __future__ import annotations

from collections.abc import Collection, Iterable, Mapping, Sequence

from dossiercheck.names.descriptors import PrintedDescriptor

_OPPOSITES = (
    "R S,r s,RS SR,R/S S/R,R* S*,E Z,e z,M P,Ra Sa,Rp Sp,Rm Sm,aR aS,pR pS,"
    "cis trans,alpha beta,D L,d l"
)
OPPOSITE: Mapping[str, str] = {
    a: b for pair in _OPPOSITES.split(",") for x, y in [pair.split()] for a, b in ((x, y), (y, x))
}


def rewritten(
    text: str,
    descriptors: Sequence[PrintedDescriptor],
    *,
    drop: Collection[int] = (),
    change: Mapping[int, str] | None = None,
    spaces: Iterable[int] = (),
) -> str:
    """The name without the descriptors in `drop`, with other letters for those in `change`,
    and with a space put in before each place in `spaces`."""
    edits: list[tuple[int, int, str]] = [(place, place, " ") for place in spaces]
    for index, letters in (change or {}).items():
        if index not in drop:
            edits.append((*descriptors[index].at, letters))
    brackets: dict[int, list[int]] = {}
    for index, descriptor in enumerate(descriptors):
        if descriptor.bracket >= 0:
            brackets.setdefault(descriptor.bracket, []).append(index)
        elif index in drop:
            edits.append((*_word(text, descriptor), ""))
    for members in brackets.values():
        gone = [index for index in members if index in drop]
        if gone and len(gone) == len(members):
            edits.append((*_bracket(text, descriptors[gone[0]], descriptors[gone[-1]]), ""))
        else:
            edits += [(*_item(text, descriptors[index]), "") for index in gone]
    for start, end, new in sorted(edits, reverse=True):
        text = text[:start] + new + text[end:]
    return text.strip().removesuffix(",").replace("(,", "(").replace("[,", "[").replace(",)", ")")


def _item(text: str, descriptor: PrintedDescriptor) -> tuple[int, int]:
    start, end = descriptor.item
    return (start, end + 1) if text[end : end + 1] == "," else (start, end)


def _bracket(text: str, first: PrintedDescriptor, last: PrintedDescriptor) -> tuple[int, int]:
    """The whole bracket, with one hyphen where the name would keep one too many."""
    start, end = first.item[0] - 1, last.item[1] + 1
    before = text[start - 1 : start]
    if text[end : end + 1] == "-" and before in ("", "-", "[", "(", "{", " ", ","):
        end += 1
    elif end == len(text) and before == "-":
        start -= 1
    return start, end


def _word(text: str, descriptor: PrintedDescriptor) -> tuple[int, int]:
    """The word with its brackets and the hyphen or comma that bound it; a locant before it
    stays, for it is a substituent's as well."""
    start, end = descriptor.at
    if text[start - 1 : start] == "(" and text[end : end + 1] == ")":
        start, end = start - 1, end + 1
    before = text[start - 1 : start]
    if text[end : end + 1] in ("-", ",") and (not before or before in "-[({ ,"):
        end += 1
    return start, end
