"""Where in the common technical document a place stands.

Section numbers are those of ICH M4Q(R1) (3.2.S drug substance, 3.2.P drug product). A file that
says no number may lie in a folder that does: the folder names of the ICH eCTD specification
3.2.2, appendix 4 (from memory: "32s1-gen-info", "32p5-contr-drug-prod").
"""

from __future__ import annotations

import re

from dossiercheck.model import Place

_NUMBER = re.compile(r"(?:(?:[23]\.2|2\.3)\.)?([SP])((?:\.\d+)*)(?![\w.])")
_FOLDER = re.compile(r"32([sp])(\d{0,2})-[a-z]")
_FILES = {
    "nomenclature": "S.1.1",
    "structure": "S.1.2",
    "general-properties": "S.1.3",
    "structure-elucidation": "S.3.1",
    "impurities": "S.3.2",
}
_DESCRIPTION = re.compile(r"(?:11\b[.:]?\s*)?description\b", re.IGNORECASE)

DESCRIPTION = "11"  # the section of a label that describes the substance (21 CFR 201.57(c)(12))


def section_of(place: Place) -> str:
    """The section as "S.1.2", "P.5.5" or "11" (the description in labelling), "" for none."""
    found = _NUMBER.match(place.section or "")
    if found:
        return found[1] + found[2]
    if place.section and _DESCRIPTION.match(place.section):
        return DESCRIPTION
    if place.section:
        return ""
    *folders, name = place.source.split("/")
    for folder in reversed(folders):
        lies_in = _FOLDER.match(folder)
        if lies_in:
            within = "".join(f".{digit}" for digit in lies_in[2])
            section = lies_in[1].upper() + within
            filed = _FILES.get(name.rpartition(".")[0].casefold(), "")
            return filed if filed.startswith(f"{section}.") else section
    return ""


def within(section: str, chapter: str) -> bool:
    """Whether a section is a chapter or one of its parts: "S.1.2" is within "S.1"."""
    return section == chapter or section.startswith(f"{chapter}.")
