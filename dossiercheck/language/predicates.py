"""What can be said of a substance's stereochemistry in plain words, phrase by phrase.

`predicate` reads what follows "DX-101 is" or "DX-101 has", or the whole of a field's value. Every
word must belong to a phrase known here: what is left over makes the whole not understood.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass, fields, replace

from dossiercheck.language.labels import LABEL
from dossiercheck.language.scope import NAME, is_certain
from dossiercheck.language.words import SALTS, SENTENCE_WORDS

NUMBERS = {
    word: number
    for number, word in enumerate(
        ("no", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten")
    )
}
NUMBERS |= {"sixteen": 16, "twelve": 12, "thirty-two": 32, "a single": 1, "a": 1}


@dataclass(frozen=True, slots=True)
class Statement:
    """What one place claims of a substance.

    `kind` is racemic, relative, absolute, achiral, "mixture" (of stereoisomers, in whatever
    ratio: epimers, or several), "active" (rotates polarised light), "inactive", "chiral",
    "scalemic" (enriched in one enantiomer), "not racemic", or "" where none is claimed. `centres`,
    `bonds` and `isomers` are the numbers claimed of stereogenic centres, of stereogenic double
    bonds and of possible stereoisomers, None where none is. `letters` are (locant, descriptor),
    the locant "" where none is given; `words` are "cis", "threo", "D" and the like. `relation` (to
    the substance called `other`) is "enantiomer", "diastereomer", "epimer", "racemate",
    "constitutional isomer" or "stereoisomer", `at` the locants of the centres it speaks of. `step`
    is "retention" or "inversion" on the way from `other`. `excess` is an enantiomeric excess in
    per cent.
    """

    kind: str = ""
    centres: int | None = None
    bonds: int | None = None
    isomers: int | None = None
    letters: tuple[tuple[str, str], ...] = ()
    words: tuple[str, ...] = ()
    relation: str = ""
    other: str = ""
    at: tuple[str, ...] = ()
    step: str = ""
    excess: float | None = None


INVENTED = rf"[A-Z][a-z]{{5,24}}(?: {SALTS}){{0,2}}"
PART = (
    r"(?:[Tt]he )?(?:[Dd]rug substance|[Aa]ctive (?:pharmaceutical ingredient|substance|ingredient)"
    r"|API)"
)
# An invented name inside a sentence, where only the name of a substance can stand.
LOWER = (
    r"(?!(?:water|methanol|ethanol|acetone|toluene|lactose|several|either|neither|another|unknown"
    r"|different|opposite|defined|natural|racemic|chiral|achiral|inversion|retention|rotation"
    r"|(?:di)?chloromethane|chloroform|hexane|course|which|these|those|known|single|double)\b)"
    rf"[a-z]{{6,24}}(?: {SALTS}){{0,2}}"
)
SHORT_CODE = r"(?<![\w-])[A-Z]{2,4}-(?:\d|[A-Z])(?![\w-])"
LABELLED = rf"(?:{LABEL.pattern}|{SHORT_CODE}|{PART}|{INVENTED})"
# Capitalised words that begin sentences about stereochemistry and are no substance.
_OPENERS = """
    crystals samples batches racemate enantiomer isomers isomer chirality product products
    retention inversion reduction addition configuration methanol ethanol stereochemistry
    rotation racemization racemisation epimerization epimerisation resolution synthesis
    enantiomers specific optical absolute relative possible single hydrolysis treatment
    reaction distillation hydrogenation oxidation alkylation acylation coupling
    chromatography crystallisation crystallization diastereomers diastereomer epimers epimer
    stereoisomers stereoisomer solution racemic several chiral achiral column solvents
    solids residual analysis neither another impurities intermediates compounds substances
    materials reagents attempts results studies molecule molecules number optically starting
    intermediate
    """
_NO_LABELS = SENTENCE_WORDS | frozenset(_OPENERS.split())
_INVENTED_WORD = re.compile(INVENTED)


def is_name_of_one(text: str) -> bool:
    """Whether a label is one, and not a capitalised word of the sentence."""
    if not _INVENTED_WORD.fullmatch(text) or LABEL.fullmatch(text):
        return True
    first = text.split()[0].casefold()
    return first not in _NO_LABELS and not first.endswith(
        ("ly", "ing", "tion", "ward", "wards", "ment", "ness", "isation", "graphy")
    )


# In brackets or as a systematic name behind a label.
ASIDE = rf"(?:,? ?(?:\((?:[^()]++|\([^()]*+\))*+\)|{NAME}++),?)"
# A colon or comma before what was already said twice would be another sentence.
_LETTER = r"[RSEZrs]"
_LOCANT = r"\d{1,2}[a-z]?['′]?"
_ONE = rf"(?:{_LOCANT})?{_LETTER}"
LETTERS = rf"(?:\({_ONE}(?:, ?{_ONE})*\)|{_LOCANT}{_LETTER}(?:, ?{_LOCANT}{_LETTER})*|[RSEZ])"
AT = rf"(?:C[-‐‑–]?|carbon |carbon atom |position |atom C?)(?P<{{0}}>{_LOCANT})(?!\w)"
AT_ANY = rf"(?:C[-‐‑–]?|carbon |carbon atom |position |atom C?){_LOCANT}(?!\w)"
_ATS = rf"{AT_ANY}(?:(?:, | and ){AT_ANY})*"
_COUNT = r"(?P<count>\d{1,3}|" + "|".join(sorted(NUMBERS, key=len, reverse=True)) + ")"
_CENTRES = (
    r"(?:(?:defined|specified|fixed|tetrahedral|possible)\s)?"
    r"(?:stereo(?:genic |chemical )?|chiral(?:ity)? |asymmetric )(?:cent(?:er|re)s?|carbons?"
    r"(?: atoms?)?)"
    r"(?: (?:in the molecule|in all|in total))?"
)
_BONDS = (
    r"(?:stereogenic (?:C=C )?|stereo)(?:double )?bonds?"
    r"|double bonds? capable of \(?E/Z\)?[- ]isomerism"
)
_ISOMERS = (
    r"(?:possible |theoretical )?stereoisomers(?: (?:are|is) possible)?(?: in all| in total)?"
)
_OTHER = rf"(?:(?:the )?(?P<other>{LABELLED})|(?P<lower>{LOWER}))(?![\w-]){ASIDE}?"
_FORM = r"(?: (?:compound|substance|form|material|solid|molecule|mixture|modification))?"


def _kind(kind: str) -> Callable[[re.Match[str]], Statement]:
    return lambda found: Statement(kind)


_COUNTS: dict[str, Callable[[int], Statement]] = {
    "centres": lambda count: Statement(centres=count),
    "bonds": lambda count: Statement(bonds=count),
    "isomers": lambda count: Statement(isomers=count),
}


def _counted(what: str) -> Callable[[re.Match[str]], Statement]:
    return lambda found: _COUNTS[what](number(found["count"]))


def number(word: str) -> int:
    """A number in digits or as a word of NUMBERS."""
    return int(word) if word.isdigit() else NUMBERS[word.lower()]


def letters_of(printed: str, locants: tuple[str, ...] = ()) -> tuple[tuple[str, str], ...]:
    """The pairs of "(2S,3R)": ("2", "S"), ("3", "R"). One bare letter is
    put at the locants given."""
    found = re.findall(rf"({_LOCANT})?({_LETTER})", printed)
    if len(found) == 1 and not found[0][0] and locants:
        return tuple((locant, found[0][1]) for locant in locants)
    return tuple((locant, letter) for locant, letter in found)


def locants_of(printed: str | None) -> tuple[str, ...]:
    """The locants of "C-3 and C-4": "3", "4"."""
    return tuple(re.findall(rf"(?<![\d])({_LOCANT})(?!\w)", printed or ""))


def _lettered(found: re.Match[str]) -> Statement:
    letters = letters_of(found["letters"], locants_of(found["at"]))
    noun = found["noun"] if "noun" in found.re.groupindex else ""
    whole = noun in ("enantiomer", "antipode") and any(c in "RS" for _, c in letters)
    return Statement("absolute" if whole else "", letters=letters)


_RELATIONS = {
    "enantiomer": r"enantiomer|(?:optical )?antipode|mirror image",
    "diastereomer": r"diastereo(?:iso)?mer|geometric(?:al)? isomer",
    "epimer": r"epimer",
    "racemate": r"racemate|racemic (?:form|modification|mixture)",
    "constitutional isomer": (
        r"constitutional isomer|structural isomer|regioisomer|positional isomer"
    ),
    "stereoisomer": r"stereoisomer",
}
RELATION = "(?P<relation>" + "|".join(_RELATIONS.values()) + ")"


def relation_of(word: str) -> str:
    """The canonical name of a relation."""
    bare = word.removesuffix("s")
    return next(name for name, words in _RELATIONS.items() if re.fullmatch(words, bare))


def _related(found: re.Match[str]) -> Statement:
    relation = relation_of(found["relation"])
    at = [found[name] for name in ("at", "at2", "at3") if name in found.re.groupindex]
    locants = tuple(locant for one in at for locant in locants_of(one))
    kind = "racemic" if relation == "racemate" else ""
    other = ""
    if "other" in found.re.groupindex:
        other = found["other"] or found["lower"]
    return Statement(kind, relation=relation, other=other, at=locants)


def _lettered_relative(found: re.Match[str]) -> Statement:
    return replace(_related(found), letters=letters_of(found["letters"]))


def _worded(found: re.Match[str]) -> Statement:
    return Statement(words=(_GREEK.get(found["word"].lower(), found["word"]),))


_GREEK = {"alpha": "α", "beta": "β", "cis": "cis", "trans": "trans"}
_GREEK |= {word: word for word in ("syn", "anti", "threo", "erythro", "endo", "exo")}
_WORD = r"(?P<word>[Cc]is|[Tt]rans|syn|anti|[Tt]hreo|[Ee]rythro|endo|exo|α|β|[Aa]lpha|[Bb]eta|[DL])"
_ITSELF = (
    r"(?:isomer|form|enantiomer|diastereo(?:iso)?mer|anomer|compound|configuration|configured)"
)

_PHRASES: tuple[tuple[re.Pattern[str], Callable[[re.Match[str]], Statement]], ...] = tuple(
    (re.compile(pattern), build)
    for pattern, build in (
        (
            r"(?:single|pure|sole|one|only one) (?:pure )?(?:enantiomer|stereoisomer)\b(?! of)|"
            rf"(?:enantiomerically|optically|stereochemically) pure{_FORM}|enantiopure{_FORM}"
            rf"|homochiral{_FORM}",
            _kind("absolute"),
        ),
        (
            rf"(?:not (?:a |the )?(?:racemate\b(?! of)|racemic{_FORM})|non-racemic{_FORM})",
            _kind("not racemic"),
        ),
        (rf"not (?:a )?chiral{_FORM}(?! [a-z])", _kind("achiral")),
        (rf"not (?:an )?achiral{_FORM}", _kind("chiral")),
        (r"not optically active|optically inactive", _kind("inactive")),
        (r"not optically inactive|optically active", _kind("active")),
        (
            r"(?:true |equimolar |1:1 )?(?:racemate\b(?! of)|racemic(?: (?:mixture|modification"
            r"|compound|form"
            r"|substance|material))?(?! (?:of|at|in)\b))|(?:1:1|equimolar|racemic"
            r"|50:50) mixture of (?:the )?(?:two |both )?enantiomers"
            r"(?! of)",
            _kind("racemic"),
        ),
        (
            r"scalemic(?: mixture| form)?|enantiomerically enriched|enantioenriched",
            _kind("scalemic"),
        ),
        (
            r"(?:mixture|pair) of (?:the )?(?:two |three |four |both )?(?:diastereo(?:iso)?mers"
            r"|epimers|stereoisomers)"
            rf"(?: at {_ATS})?(?! of)|(?:diastereo(?:iso)?meric|epimeric) mixture"
            rf"|epimeric at {_ATS}",
            _kind("mixture"),
        ),
        (r"meso(?:[- ](?:compound|form|isomer))?(?! of)", _kind("achiral")),
        (r"achiral(?: (?:compound|molecule|substance))?", _kind("achiral")),
        (
            r"chiral(?: (?:compound|molecule|substance))?(?! (?!with\b|and\b|having\b)[a-z])",
            _kind("chiral"),
        ),
        (r"dextrorotatory|l(?:a)?evorotatory", _kind("active")),
        (rf"{_COUNT} {_CENTRES}\b", _counted("centres")),
        (rf"{_COUNT} (?:{_BONDS})\b", _counted("bonds")),
        (rf"{_COUNT} {_ISOMERS}\b", _counted("isomers")),
        (rf"(?:one )?of (?:the )?{_COUNT} (?:possible )?stereoisomers", _counted("isomers")),
        (r"no (?:stereogenic|chiral) elements?", lambda found: Statement(centres=0)),
        (r"(?P<letters>\([RSEZ]\))(?P<at>(?!))?", _lettered),
        (
            rf"(?P<letters>{LETTERS})[-‐‑ ](?P<noun>enantiomer|isomer|stereoisomer|epimer|antipode"
            rf"|form|diastereo(?:iso)?mer|configured|configuration)(?:(?<=configured) (?:compound"
            rf"|alkene))?"
            rf"(?: at (?P<at>{_ATS}))?",
            _lettered,
        ),
        (
            rf"(?:absolute )?configuration (?:is )?(?P<letters>{LETTERS})(?: at (?P<at>{_ATS}))?",
            _lettered,
        ),
        (
            rf"absolute (?P<letters>{LETTERS})[- ]configuration(?: at (?P<at>{_ATS}))?",
            _lettered,
        ),
        (rf"(?P<letters>[RSEZ]) at (?P<at>{_ATS})", _lettered),
        (
            rf"{RELATION}(?: at (?P<at>{_ATS}))? of {_OTHER}(?: (?:at|in) (?P<at2>{_ATS}))?",
            _related,
        ),
        (
            rf"(?P<letters>{LETTERS})[-‐‑ ](?P<relation>enantiomer|antipode|epimer|diastereo"
            rf"(?:iso)?mer)"
            rf" of {_OTHER}",
            _lettered_relative,
        ),
        (rf"(?:C-?)?(?P<at>{_LOCANT})[- ](?P<relation>epimer) of {_OTHER}", _related),
        (rf"{_WORD}[-‐‑ ]?{_ITSELF}\b(?! of)", _worded),
        (r"(?P<word>cis|trans|threo|erythro)(?:-configured)?(?![\w-])", _worded),
        (r"relative configuration(?: only)?", _kind("relative")),
    )
)
_DETERMINER = re.compile(r"(?:(?:an?|the|only|as|also|therefore|thus|hence|present as) )*")
_JOINT = re.compile(
    r",? and (?:is |has |contains |bears )?(?:therefore |thus |hence |also )?"
    r"|,? (?:with|having|containing|bearing) (?:a total of )?|, (?:i\.e\. |namely )?"
    r"| that (?:is|has|contains) | of (?:the )?(?=[\dRSEZ(])"
)
_TAIL = re.compile(
    rf"(?:,? ?(?:\([^()]*\)|:? ?{NAME}++"
    r"|(?:as (?:shown|confirmed|drawn|established|determined|described|depicted"
    r"|proved|proven|demonstrated|given|received)"
    r"|(?:shown|confirmed|established|determined|demonstrated) "
    r"(?:by|in)"
    r"|see|according to the (?:drawing|structure)|by (?:design|X-ray|chiral|single-crystal"
    r"|synthesis)"
    r"|which (?:was|were|is|has been) (?:confirmed|established|determined|shown|assigned"
    r"|controlled)"
    r"|all of defined configuration|in the solid state)\b[^;]*)?)*[.\s;]*"
)


# What goes on about something else, without another word on stereochemistry.
_GOES_ON = re.compile(
    r"(?:,? and (?:is|was|were|has been) (?:selected|limited|used|isolated|developed|characterised"
    r"|controlled|marketed|made|obtained|prepared|formed|specified|removed|stored)\b"
    r"|: (?:a |an |the )?(?:mirror|plane|both|its|one))[^;]*"
)
_MORE = re.compile(
    r"enantio|racem|isomer|epimer|chiral|configur|stereo|optical|meso|(?<![\w-])\(?\d?[RSEZ][),]?(?!\w)"
)


def tail_is_plain(rest: str) -> bool:
    """Whether what follows a claim takes nothing from it."""
    if _GOES_ON.fullmatch(rest):
        return is_certain(rest) and not _MORE.search(rest)
    return _TAIL.fullmatch(rest) is not None and is_certain(rest)


def predicate(text: str) -> Statement | None:
    """What a masked text claims, every word of it understood; None else."""
    at, said = 0, Statement()
    while True:
        at += len(_DETERMINER.match(text, at)[0])  # type: ignore[index]
        found, one = _phrase(text, at)
        merged = _merged(said, one) if one else None
        if found is None or merged is None:
            return None
        said, at = merged, found.end()
        joint = _JOINT.match(text, at)
        if joint is None or tail_is_plain(text[at:]):
            return said if tail_is_plain(text[at:]) else None
        at = joint.end()


def _phrase(text: str, at: int) -> tuple[re.Match[str] | None, Statement | None]:
    longest: re.Match[str] | None = None
    said: Statement | None = None
    for pattern, build in _PHRASES:
        found = pattern.match(text, at)
        if found is None and text[at : at + 1].isupper():
            found = pattern.match(text[:at] + text[at].lower() + text[at + 1 :], at)
        if found and (longest is None or found.end() > longest.end()):
            one = build(found)
            if one.other and not is_name_of_one(one.other):
                continue
            longest, said = found, one
    return longest, said


def _merged(one: Statement, two: Statement) -> Statement | None:
    """Both together; None where they say different things of one and the same."""
    changes = {}
    for name in (field.name for field in fields(Statement)):
        mine, more = getattr(one, name), getattr(two, name)
        if more in ("", None, ()):
            continue
        if name in ("letters", "words", "at") and mine:
            more = (*mine, *(item for item in more if item not in mine))
        elif mine not in ("", None, ()) and mine != more:
            return None
        changes[name] = more
    return replace(one, **changes)
