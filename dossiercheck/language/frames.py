"""The frames in which a sentence makes a claim: subject, verb and what is said.

All work on masked text (`scope.masked`). A frame is found only where the whole clause is
understood; its label is "" where the subject is a pronoun or missing.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass, replace

from dossiercheck.language.labels import LABEL
from dossiercheck.language.predicates import (
    ASIDE,
    AT_ANY,
    INVENTED,
    LETTERS,
    LOWER,
    NUMBERS,
    PART,
    RELATION,
    SHORT_CODE,
    Statement,
    is_name_of_one,
    letters_of,
    locants_of,
    number,
    predicate,
    relation_of,
    tail_is_plain,
)
from dossiercheck.language.scope import NAME, is_certain


@dataclass(frozen=True, slots=True)
class Framed:
    """A clause that claims something; spans count in the clause. `other` is "its" where the
    substance that is compared is only pointed to."""

    start: int
    end: int
    label: str = ""
    statement: Statement | None = None
    other: str = ""
    why: str = ""
    form: str = ""


_KINDS_OF = (
    r"(?:[Tt]he )?(?:[Dd]rug substance|[Aa]ctive substance|[Ii]mpurity|[Ii]ntermediate"
    r"|[Ss]tarting material"
    r"|[Pp]roduct|[Cc]ompound|[Ss]alt|[Ff]ree base|[Rr]eagent|[Mm]etabolite)"
)
_NAMED = rf"(?:{LABEL.pattern}|{SHORT_CODE}|{INVENTED})"
_GENERIC = (
    r"(?:[Tt]he|[Tt]his) (?:compound|molecule|substance|material|structure|product)|[Ii]t|[Tt]hey"
    r"|[Tt]he (?:only |one )?(?:stereogenic |chiral |asymmetric )?(?:centre|center|stereocentre)"
    r"|[Tt]he (?:stereogenic )?double bond"
)
_LEAD = (
    r"(?:[A-Z][\w /-]{2,40}: )?"
    r"(?:(?:Therefore|Thus|Hence|Accordingly|Consequently|Moreover|Furthermore|In contrast"
    r"(?: to [^,]{2,40})?"
    r"|Unlike [^,]{2,40}|As (?:shown|drawn|confirmed|described|established)[^,]{0,60}"
    r"|By X-ray[^,]{0,60}"
    r"|By (?:single-crystal )?X-ray (?:diffraction|crystallography)[^,;]{0,80}?"
    r"(?= the absolute)),? )?"
)


def _subject(tag: str = "", lower: str = "") -> str:
    """`lower` lets an invented name stand in small letters, where nothing else can stand."""
    small = rf"|(?P<low{tag}>{LOWER})(?![\w-])" if lower else ""
    return (
        rf"(?:(?:{_KINDS_OF},? )??(?P<label{tag}>{_NAMED})(?![\w-])(?:'s)?"
        rf"|(?P<part{tag}>{PART})(?!\w)|(?P<generic{tag}>{_GENERIC})(?!\w){small})"
        rf"(?:{ASIDE}|, the [a-z]+,)?"
    )


_SMALL, _SMALL_1, _SMALL_2 = (_subject(tag, lower="y") for tag in ("", "1", "2"))
_IS = (
    r"(?:is|are|was|were|remains|(?:has|have) been (?:shown|found|confirmed|proved) to be"
    r"|(?:is|was|were|are) (?:shown|found|confirmed|proved|established) to be"
    r"|(?:is|was|are|were) (?:manufactured|supplied|used|isolated|obtained|developed|marketed"
    r"|present|prepared"
    r"|produced|made|purchased|formed|drawn|defined) (?:only |exclusively )?as"
    r"|exists? as|occurs? as|consists? of|corresponds to|represents|is composed of|is called)"
)
_HAS = (
    r"(?:has|have|had|contains?|possesses|possess|bears?|comprises|includes|features|shows"
    r"|(?:can |may )?exists? (?:in|as)(?= \w+ (?:possible )?stereoisomers))"
)
_BETWEEN = re.compile(
    rf"{_LEAD}{_subject('1')} and {_subject('2')} are (?:a pair of |two |the )?"
    rf"(?P<relation>enantiomers"
    rf"|antipodes|diastereo(?:iso)?mers|epimers|constitutional isomers|stereoisomers)"
    rf"(?: at (?P<at>{AT_ANY}))?(?: of (?:each other|one another))?(?P<tail>.*)"
)
_REVERSED = re.compile(
    rf"{_LEAD}[Tt]he {RELATION} of (?:the )?(?P<other>{_NAMED}|{PART}|{LOWER})"
    # A small-letter word after "is" is a participle ("is controlled") sooner than a name.
    rf"(?![\w-]){ASIDE}? is {_subject()}(?P<tail>.*)"
)
_PLAIN = re.compile(
    rf"{_LEAD}(?:[Tt]he (?:molecule|structure) of )?{_subject()} (?:{_IS}|{_HAS}) (?P<said>.+)"
)
_ITS = re.compile(
    rf"{_LEAD}{_subject()} (?:is|was) its (?P<relation>enantiomer|antipode|diastereo(?:iso)?mer"
    rf"|epimer"
    rf"|constitutional isomer)(?: at (?P<at>{AT_ANY}))?(?P<tail>.*)"
)
_DETERMINED = (
    r"(?:is|was|has been)(?: (?:unambiguously |unequivocally )?(?:determined|established|assigned"
    r"|confirmed|shown|found)"
    r"(?: by [^,.;]{2,60}?)?(?: to be| as)?)?"
)
_ABSOLUTE = r"(?:[Tt]he )?(?:[Aa]bsolute )?(?:[Ss]tereochemical )?[Cc]onfiguration"
_AT = rf"(?P<at>{AT_ANY}(?:(?:, | and ){AT_ANY})*)"
_CENTRE = (
    r"(?:the (?:stereogenic |chiral |asymmetric )?"
    r"(?:centre|center|carbon atom|stereocentre|stereocenter) )?"
)
_CONFIGURATION = tuple(
    re.compile(pattern)
    for pattern in (
        rf"{_LEAD}{_ABSOLUTE} (?:at|of) {_CENTRE}{_AT}(?: (?:in|of) {_SMALL})? {_DETERMINED} "
        rf"(?P<letters>{LETTERS})(?P<tail>.*)",
        rf"{_LEAD}{_ABSOLUTE} of {_SMALL}(?: at {_AT})? {_DETERMINED} (?P<letters>{LETTERS})"
        rf"(?P<tail>.*)",
        rf"{_LEAD}[Ii]n {_SMALL}, ?{_ABSOLUTE} (?:at|of) {_CENTRE}{_AT} {_DETERMINED} "
        rf"(?P<letters>{LETTERS})(?P<tail>.*)",
        rf"{_LEAD}{_AT}(?: (?:in|of) {_SMALL})? (?:is|are|has|have) (?:the )?(?:absolute )?"
        rf"(?P<letters>{LETTERS})"
        r"(?:[- ]configur(?:ed|ation))?(?P<tail>.*)",
        rf"{_LEAD}{_ABSOLUTE} {_DETERMINED} (?P<letters>{LETTERS})(?P<at>(?!))?(?P<tail>.*)",
        rf"{_LEAD}{_AT}(?: (?:in|of) {_SMALL})? (?:is a pseudoasymmetric centre and )?has the "
        rf"descriptor (?P<letters>{LETTERS}|[rs])(?P<tail>.*)",
    )
)
_THERE = re.compile(
    rf"{_LEAD}(?:[Tt]here are (?P<said>.+?) in {_SMALL_1}|[Ii]n {_SMALL_2},? there "
    rf"(?:are|is) (?P<more>.+))"
    r"(?P<tail>[.\s]*)"
)
_COUNTS = "|".join(sorted(NUMBERS, key=len, reverse=True))
_POSSIBLE = re.compile(
    rf"{_LEAD}(?:(?P<count>(?i:\d{{1,3}}|{_COUNTS})) stereoisomers (?:of {_SMALL_1} )?are "
    rf"(?:theoretically )?possible"
    rf"(?: for {_subject('2')})?|{_subject('3')} can (?:theoretically )?exist (?:in|as) (?P<more>"
    rf"(?i:\d{{1,3}}|{_COUNTS})) "
    r"(?:different )?stereoisomers)(?P<tail>.*)"
)
_STEP = tuple(
    re.compile(pattern)
    for pattern in (
        rf"{_LEAD}{_subject('1')} is (?:converted|transformed|taken|turned) "
        rf"(?:in)?to {_SMALL} with (?:clean |complete |full |overall )?"
        rf"(?P<step>retention|inversion)(?: of (?:the )?configuration)?(?: at {_AT})?(?P<tail>.*)",
        rf"{_LEAD}[Tt]he (?:conversion|transformation|reaction|substitution"
        rf"|displacement) of {_subject('1')} (?:in)?to {_SMALL}"
        r" (?:proceeds|occurs|takes place|runs|goes)"
        rf" with (?:clean |complete |full |overall )?(?P<step>retention|inversion)(?: of "
        rf"(?:the )?configuration)?(?: at {_AT})?(?P<tail>.*)",
        rf"{_LEAD}{_subject()} is (?:obtained|formed|prepared|made) from {_subject('1')} with "
        rf"(?:clean |complete |full |overall )?"
        rf"(?P<step>retention|inversion)(?: of (?:the )?configuration)?(?: at {_AT})?(?P<tail>.*)",
        rf"{_LEAD}[A-Z][a-z]{{4,20}} of {_SMALL_1} with (?:clean |complete |full |overall )?"
        rf"(?P<step>retention|inversion)(?: of (?:the )?configuration)?(?: at {_AT})? "
        rf"(?:gives|yields|affords|leads to|furnishes) {_SMALL}(?P<tail>.*)",
    )
)
_RELATIONSHIP = re.compile(
    rf"{_LEAD}[Ii]n {_SMALL},? the [^,.;]{{3,80}} (?:are|is|stand) (?:in (?:the |a )?)?"
    r"(?P<word>cis|trans)(?: relationship| to (?:each other|one another)| to the [^,.;]{3,40})?"
    r"(?P<tail>.*)"
)
_EXCESS = tuple(
    re.compile(pattern)
    for pattern in (
        rf"{_LEAD}{_subject()} (?:has|had|shows|showed|was obtained with|is obtained with) "
        rf"(?:an? )?(?:enantiomeric excess|e\.?e\.?)"
        r" of (?:>|≥|not less than |at least )?(?P<excess>\d+(?:\.\d+)?) ?%(?P<tail>.*)",
        rf"{_LEAD}[Tt]he enantiomeric excess (?:\(e\.?e\.?\) )?of {_SMALL} (?:is|was) (?:>|≥"
        rf"|not less than |at least )?"
        r"(?P<excess>\d+(?:\.\d+)?) ?%(?P<tail>.*)",
        r"(?P<label>(?!))?(?P<part>(?!))?(?:[Ee]nantiomeric excess|e\.?e\.?)[:=]? ?(?:>|≥"
        r"|not less than |at least )?(?P<excess>\d+(?:\.\d+)?) ?%(?P<tail>.*)",
    )
)
_WHICH = re.compile(
    rf"(?P<label>{LABEL.pattern}|{INVENTED})(?![\w-]){ASIDE}*,? (?:which|that) (?:is|was|has"
    rf"|contains) (?P<said>.+)"
)
_APPOSED = re.compile(
    rf"(?P<label>{LABEL.pattern}|{INVENTED})(?:, | \(){NAME}++\)?, (?P<said>(?:an?|the) .+)"
)


def framed(clause: str) -> Framed | None:
    """The frame of a masked clause that is understood, None where there is none."""
    bare = clause.rstrip()
    for one in _FRAMES:
        found = one(bare)
        if found is not None:
            return replace(found, end=len(bare.rstrip(" .;")))
    return None


def _who(found: re.Match[str], tag: str = "") -> str | None:
    """The label of a subject, "" for a pronoun; None where a capitalised word is no label."""
    groups = found.re.groupindex
    label = found[f"label{tag}"] if f"label{tag}" in groups else None
    if label:
        return label if is_name_of_one(label) else None
    low = found[f"low{tag}"] if f"low{tag}" in groups else None
    if low:
        return low
    part = found[f"part{tag}"] if f"part{tag}" in groups else None
    return re.sub(r"^[Tt]he ", "", part) if part else ""


def _between(clause: str) -> Framed | None:
    found = _BETWEEN.fullmatch(clause)
    if found is None or not tail_is_plain(found["tail"]):
        return None
    one, two = _who(found, "1"), _who(found, "2")
    if not one or not two:
        return None
    said = Statement(relation=relation_of(found["relation"]), other=two, at=locants_of(found["at"]))
    return Framed(0, 0, one, said)


def _reversed(clause: str) -> Framed | None:
    found = _REVERSED.fullmatch(clause)
    if found is None or not tail_is_plain(found["tail"]):
        return None
    label = _who(found)
    if not label or not is_name_of_one(found["other"]):
        return None
    relation = relation_of(found["relation"])
    kind = "racemic" if relation == "racemate" else ""
    other = re.sub(r"^[Tt]he ", "", found["other"])
    return Framed(0, 0, label, Statement(kind, relation=relation, other=other))


def _plain(clause: str) -> Framed | None:
    found = _PLAIN.fullmatch(clause)
    if found is None:
        return None
    label = _who(found)
    said = predicate(found["said"])
    return Framed(0, 0, label, said) if said and label is not None else None


def _its(clause: str) -> Framed | None:
    found = _ITS.fullmatch(clause)
    if found is None or not tail_is_plain(found["tail"]):
        return None
    label = _who(found)
    if not label:
        return None
    said = Statement(relation=relation_of(found["relation"]), at=locants_of(found["at"]))
    return Framed(0, 0, label, said, other="its")


def _configuration(clause: str) -> Framed | None:
    for pattern in _CONFIGURATION:
        found = pattern.fullmatch(clause)
        if found is None or not tail_is_plain(found["tail"]):
            continue
        label = _who(found)
        letters = letters_of(found["letters"], locants_of(found["at"]))
        if label is not None and letters:
            return Framed(0, 0, label, Statement(letters=letters))
    return None


def _there(clause: str) -> Framed | None:
    found = _THERE.fullmatch(clause)
    if found is None:
        return None
    tag = "1" if found["said"] else "2"
    label, said = _who(found, tag), predicate(found["said"] or found["more"])
    return Framed(0, 0, label, said) if said and label is not None else None


def _possible(clause: str) -> Framed | None:
    found = _POSSIBLE.fullmatch(clause)
    if found is None or not tail_is_plain(found["tail"]):
        return None
    tag = "3" if found["more"] else "1" if found["label1"] or found["part1"] else "2"
    label = _who(found, tag)
    if label is None:
        return None
    return Framed(0, 0, label, Statement(isomers=number(found["count"] or found["more"])))


def _step(clause: str) -> Framed | None:
    for pattern in _STEP:
        found = pattern.fullmatch(clause)
        if found is None or not tail_is_plain(found["tail"]):
            continue
        label, other = _who(found), _who(found, "1")
        if label and other:
            at = locants_of(found["at"])
            return Framed(0, 0, label, Statement(step=found["step"], other=other, at=at))
    return None


def _relationship(clause: str) -> Framed | None:
    found = _RELATIONSHIP.fullmatch(clause)
    if found is None or not tail_is_plain(found["tail"]) or not is_certain(clause):
        return None
    label = _who(found)
    return Framed(0, 0, label, Statement(words=(found["word"],))) if label is not None else None


def _excess(clause: str) -> Framed | None:
    for pattern in _EXCESS:
        found = pattern.fullmatch(clause)
        if found and tail_is_plain(found["tail"]):
            label = _who(found)
            if label is not None:
                return Framed(0, 0, label, Statement(excess=float(found["excess"])))
    return None


def _which(clause: str) -> Framed | None:
    for pattern in (_WHICH, _APPOSED):
        for found in pattern.finditer(clause):
            said = predicate(found["said"])
            if said and is_name_of_one(found["label"]) and is_certain(clause[: found.start()]):
                return Framed(found.start(), 0, found["label"], said)
    return None


_FRAMES: tuple[Callable[[str], Framed | None], ...] = (
    _between,
    _its,
    _reversed,
    _configuration,
    _possible,
    _step,
    _relationship,
    _excess,
    _there,
    _plain,
    _which,
)
