"""What a heading says its values are, and what a value says of itself.

The synonyms are the headings that dossiers, specifications and structure files use (common
practice). They match whole: letters and digits alone count, upper and lower case are one, and a
unit in brackets at the end is passed over. Nothing is matched by a part of a heading: "exact
mass" is not a relative molecular mass.
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Mapping
from enum import StrEnum
from types import MappingProxyType

from dossiercheck.language.crystal import measured
from dossiercheck.model import Role
from dossiercheck.stereo.spacegroup import space_group


class Aside(StrEnum):
    """What a heading can say that is no evidence in itself."""

    LABEL = "label"
    COUNT = "number of stereocentres"
    NAME_OR_LABEL = "name or label"
    SYNONYMS = "synonyms"
    IGNORED = "ignore"


Meaning = Role | Aside

# Values of the settings' column mapping.
KEYS: Mapping[str, Meaning] = MappingProxyType(
    {
        "name": Role.NAME,
        "smiles": Role.SMILES,
        "inchi": Role.INCHI,
        "inchikey": Role.INCHIKEY,
        "formula": Role.FORMULA,
        "mass": Role.MASS,
        "registry": Role.REGISTRY,
        "stereo": Role.STEREO,
        "rotation": Role.ROTATION,
        "absolute": Role.ABSOLUTE,
        "flack": Role.FLACK,
        "space_group": Role.SPACE_GROUP,
        "molfile": Role.MOLFILE,
        "label": Aside.LABEL,
        "ignore": Aside.IGNORED,
    }
)

# Headings under which a second label of the same substance stands. Others that mean a label may
# name another substance in the same row: an impurity and the intermediate it comes from.
_OTHER_LABELS = """
    code | laboratory code | lab code | company code | compound code | substance code
    impurity code | internal code | INN | INN name | international non-proprietary name
    recommended INN | trivial name | common name | substance name | compound name | abbreviation
    impurity name | designation
    """

NO_COLUMNS: Mapping[str, str] = MappingProxyType({})

_SYNONYMS: Mapping[Meaning, str] = {
    Role.NAME: """
        IUPAC name | name (IUPAC) | IUPAC | IUPAC systematic name | IUPAC chemical name
        systematic name | systematic IUPAC name | systematic chemical name | other systematic name
        chemical name | chemical name (IUPAC) | chemical names | full chemical name
        other chemical name | alternative chemical name | alternative systematic name
        CAS name | CAS index name | name (CAS) | CAS chemical name | index name
        semi-systematic name | preferred IUPAC name | IUPAC names | chemical IUPAC name
        _chemical_name_systematic
        """,
    Role.SMILES: """
        SMILES | isomeric SMILES | canonical SMILES | canonical isomeric SMILES | SMILES string
        SMILES code | SMILES notation | extended SMILES | line notation | line notation (SMILES)
        stereo SMILES | absolute SMILES | isosmiles
        """,
    Role.INCHI: """
        InChI | standard InChI | std InChI | InChI string | InChI code | IUPAC InChI
        international chemical identifier
        """,
    Role.INCHIKEY: """
        InChIKey | InChI key | standard InChIKey | std InChIKey | standard InChI key | InChI-Key
        """,
    Role.FORMULA: """
        molecular formula | empirical formula | mol formula | mol. formula | formula | MF | M.F.
        sum formula | chemical formula | gross formula | Hill formula | molecular formula (Hill)
        total formula | elemental formula | _chemical_formula_sum
        """,
    Role.MASS: """
        relative molecular mass | molecular weight | molecular mass | molar mass | MW | M.W. | Mr
        mol weight | mol. weight | mol wt | mol. wt. | mol mass | formula weight | FW | RMM | MWt
        average molecular weight | average molecular mass | average mass | relative molar mass
        molecular weight (average) | rel. molecular mass | rel. mol. mass | M_r
        _chemical_formula_weight
        """,
    Role.REGISTRY: """
        CAS number | CAS No | CAS no. | CAS RN | CASRN | CAS | CAS registry number
        CAS registry no | CAS reg no | CAS reg. no. | registry number | registry no | CAS #
        CAS registry number (RN) | CAS nr | chemical abstracts registry number
        chemical abstracts service registry number | chemical abstracts service number | RN
        """,
    Role.STEREO: """
        stereochemistry | chirality | stereochemical description | stereo description
        stereochemistry statement | stereochemistry comment | configuration | optical form
        absolute configuration | stereo | stereochemical form | stereoisomeric form
        stereochemical configuration | isomeric form | isomer type | stereo type
        stereochemical type | chirality statement | chiral form | stereochemical purity
        stereochemistry type | optical activity | optical activity type
        """,
    Role.ROTATION: """
        specific rotation | optical rotation | specific optical rotation | specific rotation [α]D
        specific optical rotation [α]D | optical rotation [α]D | [α]D | [α]D20 | [α]20D | [α]D25
        specific rotatory power | angle of optical rotation
        """,
    Role.ABSOLUTE: "_chemical_absolute_configuration",
    Role.FLACK: """
        Flack parameter | Flack parameter x | Flack x | Flack x parameter | Flack
        absolute structure parameter | _refine_ls_abs_structure_Flack
        """,
    Role.SPACE_GROUP: """
        space group | space group symbol | space group (No.) | crystal space group
        Hermann-Mauguin symbol | _space_group_name_H-M_alt | _symmetry_space_group_name_H-M
        _space_group_IT_number | _symmetry_Int_Tables_number | _space_group_symop_operation_xyz
        """,
    Role.MOLFILE: "molfile | mol file | molblock | mol block | connection table",
    Aside.COUNT: """
        number of stereocentres | number of stereocenters | number of stereogenic centres
        number of stereogenic centers | number of chiral centres | number of chiral centers
        stereocentres | stereocenters | stereogenic centres | stereogenic centers
        chiral centres | chiral centers | no. of stereocentres | no. of stereocenters
        no. of chiral centres | no. of chiral centers | asymmetric carbon atoms
        number of asymmetric carbon atoms | number of asymmetric centres
        """,
    Aside.LABEL: """
        compound | substance | code | impurity | ID | label | laboratory code | lab code | material
        company code | compound code | substance code | compound ID | substance ID | compound label
        compound no | compound number | intermediate | starting material | drug substance | reagent
        substance name | compound name | trivial name | common name | INN | INN name
        international non-proprietary name | recommended INN | name of substance
        impurity code | impurity name | material name | designation | identifier | internal code
        _chemical_name_common
        abbreviation | reference standard | analyte | related substance | degradation product
        """,
    Aside.NAME_OR_LABEL: "name | names",
    Aside.SYNONYMS: "synonym | synonyms | other names | other name | further names | synonym(s)",
    Aside.IGNORED: """
        exact mass | monoisotopic mass | monoisotopic molecular mass | nominal mass | accurate mass
        structure | structural formula | chemical structure
        EC number | EINECS number | UNII
        """,
}

_UNIT = re.compile(
    r"[(\[]\s*(?:g\s*[/·.]?\s*mol(?:\s*[-−–⁻]?[1¹])?|kg\s*/\s*kmol|da|u|amu|daltons?|average"
    r"|calculated|calc\.?|theoretical|if applicable|if available)\s*[)\]]\s*$"
    r"|,?\s+(?:in\s+)?g/mol\s*$",
    re.IGNORECASE,
)
# With the conditions in brackets: "Specific rotation (methanol, 589 nm)".
_ROTATION = re.compile(r"(?:specific )?(?:optical )?rotation\s*[(\[][^()]*[)\]]\s*$", re.IGNORECASE)
_KEY = re.compile(r"[A-Z]{14}-[A-Z]{10}-[A-Z]")
_NOTHING = {
    "",
    "-",
    "–",
    "—",
    "--",
    "---",
    "n/a",
    "na",
    "n.a.",
    "n. a.",
    "none",
    "nil",
    "not applicable",
}
_NOTHING |= {
    "not available",
    "not assigned",
    "not known",
    "unknown",
    "tbd",
    "t.b.d.",
    "/",
    "n.d.",
    "?",
}
_NOTHING |= {"not determined", "to be determined", "not stated", "see structure", "null", "nan"}
_NOTHING |= {"unspecified", "not specified"}


def plain(heading: str) -> str:
    """A heading as it is compared: its letters and digits in one case, compatibility forms and
    diacritics undone."""
    text = unicodedata.normalize("NFKD", heading).casefold()
    return "".join(letter for letter in text if letter.isalnum() or letter in "#")


def _index() -> dict[str, Meaning]:
    index: dict[str, Meaning] = {}
    for meaning, synonyms in _SYNONYMS.items():
        for synonym in re.split(r"[|\n]", synonyms):
            if synonym.strip():
                index[plain(synonym)] = meaning
    return index


_INDEX = _index()


def meaning_of(heading: str, columns: Mapping[str, str] = NO_COLUMNS) -> Meaning | None:
    """What the values under a heading are, None where the heading does not say.

    `columns`, the user's own mapping of heading to one of `KEYS`, wins over the synonyms.
    Raises `KeyError` for a value in it that is none of `KEYS`.
    """
    if columns:
        asked = plain(heading)
        for given, key in columns.items():
            if given == heading or plain(given) == asked:
                return KEYS[key]
    if len(heading) > 80:
        return None
    found = _INDEX.get(plain(heading)) or _INDEX.get(plain(_UNIT.sub("", heading)))
    return found or (Role.ROTATION if _ROTATION.match(heading) else None)


_OTHERS = {plain(one) for one in re.split(r"[|\n]", _OTHER_LABELS) if one.strip()}


def is_other_label(heading: str) -> bool:
    """Whether what stands under a heading is another label of the same substance."""
    return plain(heading) in _OTHERS


def is_own(heading: str, columns: Mapping[str, str]) -> bool:
    """True when the user's own mapping names this heading."""
    asked = plain(heading)
    return any(given == heading or plain(given) == asked for given in columns)


def says_itself(value: str) -> Role | None:
    """The role of a value that cannot be anything else: an InChI or an InChIKey."""
    value = value.strip()
    if value.startswith(("InChI=1S/", "InChI=1/")):
        return Role.INCHI
    return Role.INCHIKEY if _KEY.fullmatch(value.removeprefix("InChIKey=")) else None


def is_nothing(value: str) -> bool:
    """True for an empty value and for the ways of saying that there is none."""
    return value.strip().casefold() in _NOTHING


_REGISTRY = re.compile(r"\d{2,7}-\d{2}-\d")
_MASS = re.compile(r"\d{2,6}(?:[.,]\d+)?(?:\s*(?:g/mol|g\s*mol[-−⁻][1¹]|Da|u))?")
_FORMULA = re.compile(r"(?:[A-Z][a-z]?\d*|[\s·.•*]|\d)+")


def could_be(role: Meaning, value: str) -> bool:
    """Whether a value has the form of a role, for telling headings and values apart.

    Sure for the roles with a strict form; for a name it asks for a locant, a bracket or an
    ending that chemical names have.
    """
    value = value.strip()
    match role:
        case Role.INCHI | Role.INCHIKEY:
            return says_itself(value) is role
        case Role.REGISTRY:
            return _REGISTRY.fullmatch(value) is not None
        case Role.MASS:
            return _MASS.fullmatch(value) is not None
        case Role.FORMULA:
            return _FORMULA.fullmatch(value) is not None and any(c.isdigit() for c in value)
        case Role.NAME | Aside.NAME_OR_LABEL:
            return looks_systematic(value)
        case Role.SMILES:
            return bool(
                re.fullmatch(r"[A-Za-z0-9@+\-\[\]()\\/=#$%.:*~]+(?:\s*\|.*\|)?", value)
            ) and (not re.fullmatch(r"[A-Z]?[a-z]{3,}", value))
        case Role.FLACK:
            return measured(value) is not None
        case Role.SPACE_GROUP:
            return space_group(value) is not None
        case Role.STEREO:
            return bool(re.search(r"enantiomer|rac|isomer|chiral|meso|\([RSEZ\d]", value))
    return False


def looks_systematic(value: str) -> bool:
    """True for what has a locant or a bracketed descriptor as only chemical names have them."""
    return bool(
        re.search(r"\d[\-‐‑–,′'][A-Za-z(\[\d]|[\])}][\-‐‑–]?[a-z]{3}|^\(?[±+RSEZ−-]\)?-", value)
        or re.search(
            r"[a-z]{2}(?:ic acid|oate|amide|amine|ylate|idine|azole|hydrochloride)$", value
        )
    )
