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
    NUMBERS,
    PART,
    RELATION,
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

TRIGGER = re.compile(
    r"enantio|antipode|racem|scalemic|diastereo|epimer|\bmeso\b|chiral|stereo|asymmetric|isomer"
    r"|optical|rotat|configur|retention|inversion|\[\s?(?:α|alpha)|\bcis\b|\btrans\b|threo|erythro"
    r"|mirror image|\be\.?e\.?\b|-form\b",
    re.IGNORECASE,
)


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
_NAMED = rf"(?:{LABEL.pattern}|{INVENTED})"
_GENERIC = (
    r"(?:[Tt]he|[Tt]his) (?:compound|molecule|substance|material|structure|product)|[Ii]t|[Tt]hey"
)
_LEAD = (
    r"(?:[A-Z][\w /-]{2,40}: )?"
    r"(?:(?:Therefore|Thus|Hence|Accordingly|Consequently|Moreover|Furthermore|In contrast"
    r"(?: to [^,]{2,40})?"
    r"|Unlike [^,]{2,40}|As (?:shown|drawn|confirmed|described|established)[^,]{0,60}"
    r"|By X-ray[^,]{0,60}),? )?"
)


def _subject(tag: str = "") -> str:
    return (
        rf"(?:(?:{_KINDS_OF},? )??(?P<label{tag}>{_NAMED})(?![\w-])(?:'s)?"
        rf"|(?P<part{tag}>{PART})(?!\w)|(?P<generic{tag}>{_GENERIC})){ASIDE}?"
    )


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
    rf"{_LEAD}[Tt]he {RELATION} of (?:the )?(?P<other>{_NAMED}|{PART})"
    rf"(?!\w){ASIDE}? is {_subject()}(?P<tail>.*)"
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
        rf"{_LEAD}{_ABSOLUTE} (?:at|of) {_CENTRE}{_AT}(?: (?:in|of) {_subject()})? {_DETERMINED} "
        rf"(?P<letters>{LETTERS})(?P<tail>.*)",
        rf"{_LEAD}{_ABSOLUTE} of {_subject()}(?: at {_AT})? {_DETERMINED} (?P<letters>{LETTERS})"
        rf"(?P<tail>.*)",
        rf"{_LEAD}[Ii]n {_subject()}, ?{_ABSOLUTE} (?:at|of) {_CENTRE}{_AT} {_DETERMINED} "
        rf"(?P<letters>{LETTERS})(?P<tail>.*)",
        rf"{_LEAD}{_AT}(?: (?:in|of) {_subject()})? (?:is|are|has|have) (?:the )?(?:absolute )?"
        rf"(?P<letters>{LETTERS})"
        r"(?:[- ]configur(?:ed|ation))?(?P<tail>.*)",
        rf"{_LEAD}{_ABSOLUTE} {_DETERMINED} (?P<letters>{LETTERS})(?P<at>(?!))?(?P<tail>.*)",
    )
)
_THERE = re.compile(
    rf"{_LEAD}(?:[Tt]here are (?P<said>.+?) in {_subject('1')}|[Ii]n {_subject('2')},? there "
    rf"(?:are|is) (?P<more>.+))"
    r"(?P<tail>[.\s]*)"
)
_COUNTS = "|".join(sorted(NUMBERS, key=len, reverse=True))
_POSSIBLE = re.compile(
    rf"{_LEAD}(?:(?P<count>(?i:\d{{1,3}}|{_COUNTS})) stereoisomers (?:of {_subject('1')} )?are "
    rf"(?:theoretically )?possible"
    rf"(?: for {_subject('2')})?|{_subject('3')} can (?:theoretically )?exist (?:in|as) (?P<more>"
    rf"(?i:\d{{1,3}}|{_COUNTS})) "
    r"(?:different )?stereoisomers)(?P<tail>.*)"
)
_STEP = tuple(
    re.compile(pattern)
    for pattern in (
        rf"{_LEAD}{_subject('1')} is (?:converted|transformed|taken|turned) "
        rf"(?:in)?to {_subject()} with (?:clean |complete |full |overall )?"
        rf"(?P<step>retention|inversion)(?: of (?:the )?configuration)?(?: at {_AT})?(?P<tail>.*)",
        rf"{_LEAD}[Tt]he (?:conversion|transformation|reaction|substitution"
        rf"|displacement) of {_subject('1')} (?:in)?to {_subject()}"
        r" (?:proceeds|occurs|takes place|runs|goes)"
        rf" with (?:clean |complete |full |overall )?(?P<step>retention|inversion)(?: of "
        rf"(?:the )?configuration)?(?: at {_AT})?(?P<tail>.*)",
        rf"{_LEAD}{_subject()} is (?:obtained|formed|prepared|made) from {_subject('1')} with "
        rf"(?:clean |complete |full |overall )?"
        rf"(?P<step>retention|inversion)(?: of (?:the )?configuration)?(?: at {_AT})?(?P<tail>.*)",
    )
)
_EXCESS = tuple(
    re.compile(pattern)
    for pattern in (
        rf"{_LEAD}{_subject()} (?:has|had|shows|showed|was obtained with|is obtained with) "
        rf"(?:an? )?(?:enantiomeric excess|e\.?e\.?)"
        r" of (?:>|≥|not less than |at least )?(?P<excess>\d+(?:\.\d+)?) ?%(?P<tail>.*)",
        rf"{_LEAD}[Tt]he enantiomeric excess (?:\(e\.?e\.?\) )?of {_subject()} (?:is|was) (?:>|≥"
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

_VERB = (
    r"\b(?:(?:may|might|could|can|must|should|will|appears to|seems to|is (?:believed|thought"
    r"|assumed|expected"
    r"|presumed|considered|supposed) to) (?:also )?(?:be|have|contain|exist as)|is|are|was|were"
    r"|exists? as|consists? of"
    r"|has|have|contains|possesses|bears)\b"
)
_FILLER = (
    r"(?: (?:an?|the|one|only|single|pure|not|no|never|also|therefore|thus|hence|both|its|their"
    r"|either|neither"
    r"|probably|presumably|likely|possibly|mostly|mainly|predominantly|essentially|believed"
    r"|assumed|expected"
    r"|considered|thought|to|be|as|mixture|pair|of|two|three|four|five|six|seven|eight|\d+"
    r"|\(?\d?[RSEZ]\)?-?))*"
)
_STRONG = (
    r" ?(?:(?:\(\d*[RSEZ](?:,\d*[RSEZ])*\)-)?(?:enantiomers?\b(?! (?:impurity|content|excess"
    r"|separation))|stereoisomers?\b"
    r"|antipodes?\b|diastereo(?:iso)?mers?\b|epimers?\b|constitutional isomers?\b)|racem(?:ate"
    r"|ic)\b|scalemic\b"
    r"|meso\b|achiral\b(?! (?:column|phase|method|HPLC))|optically (?:active|inactive|pure)\b"
    r"|enantiopure\b|homochiral\b"
    r"|enantiomerically (?:pure|enriched)\b|epimeric\b"
    r"|chiral\b(?! (?:column|phase|method|HPLC|stationary|selector|auxiliary|chromatograph|GC"
    r"|purity|separation|reagent|ligand"
    r"|switch|pool|catalyst|acid|base|resolution|impurit|liquid|assay|test|amine|SFC|additive"
    r"|shift))"
    r"|stereo(?:genic |chemical )?cent(?:re|er)s?\b|asymmetric (?:carbon|centre|center)"
    r"|stereogenic\b|(?:R|S|E|Z|\(\d*[RSEZ](?:, ?\d*[RSEZ])*\))-configured\b|(?:cis|trans|threo"
    r"|erythro)[- ](?:isomer|configured))"
)
CLAIMED = re.compile(
    rf"(?<!column )(?<!phase )(?<!method )(?<!HPLC ){_VERB}{_FILLER}{_STRONG}"
    rf"|\b[Cc]onfiguration\b[^.;]{{0,80}}\b(?:is|was|as|be)\b[^.;]{{0,30}}?(?<![\w-])\(?\d?[RS]"
    rf"(?![\w-])"
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
    _excess,
    _there,
    _plain,
    _which,
)
