"""Words by which a sentence plainly claims something of stereochemistry, understood or not.

`TRIGGER` is the quick question whether a text can speak of stereochemistry at all. `CLAIMED` finds
a verb of being or having before a word of stereochemistry, hedges and negations between them
allowed: what it finds and no frame understands is reported as not understood. Chiral columns,
limits and processes have no such verb before the word.
"""

from __future__ import annotations

import re

TRIGGER = re.compile(
    r"enantio|antipode|racem|scalemic|diastereo|epimer|\bmeso\b|chiral|stereo|asymmetric|isomer"
    r"|optical|rotat|configur|retention|inversion|\[\s?(?:α|alpha)|\bcis\b|\btrans\b|threo|erythro"
    r"|mirror image|anomer|\be\.?e\.?\b|-form\b"
    r"|(?<![\w-])C-?\d{1,2}[a-z]?\b[^.;:]{0,40}?\b(?:is|has)\b",
    re.IGNORECASE,
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
    r" ?(?:(?:\(\d*[RSEZ](?:,\d*[RSEZ])*\)-)?(?:isomer\b|enantiomers?\b(?! (?:impurity|content"
    r"|excess"
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
    r"|erythro)(?=[-.,; ]|$))"
)
_ELSE = (
    r"\bwith (?:\w+ )?(?:retention|inversion)\b(?! times?)|\b(?:is|are|was) (?:not )?(?:retained"
    r"|inverted)\b"
    r"|\bdescriptor (?:is )?\(?[RSEZrs]\)?(?![\w-])"
    r"|(?<![\w-])C-?\d{1,2}[a-z]?\b[^.;:]{0,40}?\b(?:is|has)\b[^.;:]{0,25}?(?<![\w-])\(?[RSrs]\)?"
    r"(?![\w-])"
    r"|\bcan(?:not)? be (?:described|regarded|classed|considered) as[^.;]{0,20}?(?:optical|racem"
    r"|meso|chiral)"
    r"|\b(?:are|is|stand) (?:in (?:the )?)?(?:cis|trans) (?:to|relationship)\b"
)
CLAIMED = re.compile(
    rf"(?<!column )(?<!phase )(?<!method )(?<!HPLC ){_VERB}{_FILLER}{_STRONG}|{_ELSE}"
    rf"|\b[Cc]onfiguration\b[^.;]{{0,80}}\b(?:is|was|as|be)\b[^.;]{{0,30}}?(?<![\w-])\(?\d?[RS]"
    rf"(?![\w-])"
)
