"""A review made by hand: an invented sponsor's invented substance, with one of everything that a
report has to show. The coordinates are from a general-purpose layout, written down here once; the
molfile texts are written from them. Formulae and names were checked once with RDKit and OPSIN."""

from dataclasses import replace

from dossiercheck.model import (
    Concordance,
    Derived,
    Drawing,
    DrawnAtom,
    DrawnBond,
    Evidence,
    Exhibit,
    Finding,
    Grade,
    Place,
    Review,
    Role,
    RuleEntry,
    Source,
    State,
    SubstanceEntry,
    UnitCell,
    UnitRow,
    Unread,
)
from dossiercheck.stereo.descriptors import confirmed
from dossiercheck.stereo.perception import from_molblock
from dossiercheck.stereo.showing import shown

CAUTION = (
    "Every finding must be confirmed by a qualified reviewer. Local regulatory guidance takes "
    "precedence. The absence of findings is no proof that the dossier is consistent."
)
HOSTILE = (
    "</style></script><script>alert('x')</script>\" onload='x' \u202egnp.evil\u202c\u200b\x1b[31m"
)

_STYLES = {"-": "plain", "w": "wedge", "h": "hash", "~": "wavy", "x": "crossed"}
_CORE = (
    "-0.61 -4.15 C 0 3 | 0.17 -2.87 O 0 0 | 1.67 -2.90 C 0 0 | 2.39 -4.21 O 0 0 |"
    " 2.44 -1.61 C 0 1 | 3.94 -1.64 C 0 2 | 4.72 -0.36 C 0 0 | 6.22 -0.39 C 0 1 |"
    " 6.99 0.89 C 0 1 | 6.27 2.21 C 0 1 | 4.77 2.24 C 0 1 | 3.99 0.95 C 0 1 | 1.72 -0.30 N 0 1 |"
    " 0.22 -0.27 C 0 0 | -0.56 -1.55 O 0 0 | -0.51 1.05 C 0 1 | 0.13 2.40 C 0 2 |"
    " -0.96 3.43 C 0 1 | -0.78 4.92 O 0 1 | -2.28 2.71 C 0 2 | -1.99 1.23 N 0 0 |"
    " -3.02 0.14 C 0 0 | -2.58 -1.30 O 0 0 | -4.48 0.48 C 0 1 | -5.51 -0.62 C 0 1 |"
    " -6.97 -0.27 C 0 1 | -7.99 -1.37 C 0 3 | "
)
_CORE_BONDS = (
    "0 1 1 - | 1 2 1 - | 2 3 2 - | 2 4 1 - | 4 5 1 w | 5 6 1 - | 6 7 2 - | 7 8 1 - | 8 9 2 - |"
    " 9 10 1 - | 10 11 2 - | 4 12 1 - | 12 13 1 - | 13 14 2 - | 15 13 1 w | 15 16 1 - |"
    " 16 17 1 - | 17 18 1 h | 17 19 1 - | 19 20 1 - | 20 21 1 - | 21 22 2 - | 21 23 1 - |"
    " 23 24 2 - | 24 25 1 - | 25 26 1 w | 25 27 1 - | 11 6 1 - | 20 15 1 -"
)
_TARTRATE = (
    " | -3.16 8.70 O 0 1 | -1.98 7.77 C 0 0 | -2.20 6.29 O 0 0 | -0.59 8.33 C 0 1 |"
    " -0.37 9.81 O 0 1 | 0.59 7.40 C 0 1 | 0.37 5.92 O 0 1 | 1.98 7.96 C 0 0 | 2.20 9.44 O 0 0 |"
    " 3.16 7.03 O -1 0"
)
_TARTRATE_BONDS = (
    " | 28 29 1 - | 29 30 2 - | 29 31 1 - | 31 32 1 h | 31 33 1 - | 33 34 1 h | 33 35 1 - |"
    " 35 36 2 - | 35 37 1 -"
)
_NAPHTHALENE = (
    "-3.47 1.76 C 0 3 | -3.08 0.31 C 0 1 | -4.14 -0.75 O 0 1 | -1.63 -0.08 C 0 0 |"
    " -1.25 -1.53 C 0 1 | 0.20 -1.92 C 0 1 | 1.26 -0.86 C 0 0 | 2.71 -1.24 C 0 1 |"
    " 3.77 -0.18 C 0 1 | 3.39 1.27 C 0 1 | 1.94 1.65 C 0 1 | 0.88 0.59 C 0 0 | -0.57 0.98 C 0 1"
)
_NAPHTHALENE_BONDS = (
    "1 0 1 w | 1 2 1 - | 1 3 1 - | 3 4 1 - | 4 5 2 - | 5 6 1 - | 6 7 2 - | 7 8 1 - | 8 9 2 - |"
    " 9 10 1 - | 10 11 2 - | 11 12 1 - | 12 3 2 - | 11 6 1 -"
)


def drawing(atoms: str, bonds: str) -> Drawing:
    """Atoms as `x y element charge hydrogens`, bonds as `begin end order style`, split by `|`."""
    drawn = []
    for line in atoms.split("|"):
        x, y, element, charge, hydrogens = line.split()
        drawn.append(DrawnAtom(float(x), float(y), element, int(charge), int(hydrogens)))
    linked = []
    for line in bonds.split("|"):
        begin, end, order, style = line.split()
        linked.append(DrawnBond(int(begin), int(end), int(order), _STYLES[style]))
    return Drawing(tuple(drawn), tuple(linked))


def marked(plain: Drawing, marks: dict[int, str]) -> Drawing:
    """The drawing with a ring and a text at each of the given atoms (0-based)."""
    atoms = tuple(
        replace(atom, highlight=True, mark=marks[index]) if index in marks else atom
        for index, atom in enumerate(plain.atoms)
    )
    return replace(plain, atoms=atoms)


def molfile(drawn: Drawing, title: str) -> str:
    """A V2000 connection table of the drawing (columns as in BIOVIA's CTfile Formats)."""
    stereo = {"plain": 0, "wedge": 1, "hash": 6, "wavy": 4, "crossed": 3, "aromatic": 0}
    lines = [title, "  by hand", ""]
    lines.append(f"{len(drawn.atoms):3d}{len(drawn.bonds):3d}  0  0  1  0  0  0  0  0999 V2000")
    lines += [
        f"{atom.x:10.4f}{atom.y:10.4f}{0:10.4f} {atom.element:<3} 0  0" for atom in drawn.atoms
    ]
    lines += [
        f"{bond.begin + 1:3d}{bond.end + 1:3d}{bond.order:3d}{stereo[bond.style]:3d}"
        for bond in drawn.bonds
    ]
    return "\n".join([*lines, "M  END"])


BASE = drawing(_CORE + "-7.40 1.16 N 0 2", _CORE_BONDS)
SALT = drawing(_CORE + "-7.40 1.16 N 1 3" + _TARTRATE, _CORE_BONDS + _TARTRATE_BONDS)
CARBINOL = drawing(_NAPHTHALENE, _NAPHTHALENE_BONDS)

NAME = (
    "methyl (2S)-2-({[(2S,4R)-1-[(2E,4R)-4-aminopent-2-enoyl]-4-hydroxypyrrolidin-2-yl]"
    "carbonyl}amino)-3-phenylpropanoate"
)
WRONG_NAME = NAME.replace("(2S,4R)-1-", "(2S,4S)-1-")
SILENT_NAME = NAME.replace("(2E,4R)-", "(4R)-")
SMILES = "COC(=O)[C@H](Cc1ccccc1)NC(=O)[C@@H]1C[C@@H](O)CN1C(=O)/C=C/[C@@H](C)N"
INCHIKEY = "FFHPXBVXWPJZPT-BJOCCUAESA-N"

_GENERAL = "m3/32-body-data/32s-drug-sub/ovestrilide/general-information.docx"
_MADE = "m3/32-body-data/32s-drug-sub/ovestrilide/manufacture.docx"
_SDF = "m3/32-body-data/32s-drug-sub/ovestrilide/structures.sdf"
_LIST = "m3/32-body-data/32s-drug-sub/ovestrilide/impurities.xlsx"
_LETTER = "m1/cover-letter.txt"
_SCAN = "m3/32-body-data/32s-drug-sub/ovestrilide/annex-2.docx"

_NOMENCLATURE = Place(_GENERAL, section="3.2.S.1.1", table=1, row=2, column="Chemical name")
_STRUCTURE = Place(_SDF, record=1)
_LINE = Place(_GENERAL, section="3.2.S.1.2", paragraph=7, line=1)
_ROUTE = Place(_MADE, section="3.2.S.2.2", paragraph=19, span=(41, 150))
_FORMULA = Place(_GENERAL, section="3.2.S.1.2", table=1, row=4, column="Molecular formula")
_KEY = Place(_SDF, record=1, field="INCHIKEY")
_KIND = Place(_GENERAL, section="3.2.S.1.2", paragraph=9, span=(12, 58))
_REGISTRY = Place(_LIST, sheet="Identity", row=2, column="Registry number")

OVESTRILIDE = SubstanceEntry(
    id="S1",
    label="Ovestrilide",
    evidence=(
        Evidence(
            "E1", Role.MOLFILE, molfile(BASE, "OVE-118"), _STRUCTURE, "sdf#record1", "OVE-118"
        ),
        Evidence("E2", Role.NAME, WRONG_NAME, _NOMENCLATURE, "docx#table1row2", "Ovestrilide"),
        Evidence("E3", Role.SMILES, SMILES, _LINE, "docx#block2", "Ovestrilide"),
        Evidence("E4", Role.NAME, SILENT_NAME, _ROUTE, "", "OVE-118"),
        Evidence("E5", Role.INCHIKEY, INCHIKEY, _KEY, "sdf#record1", "OVE-118"),
        Evidence("E6", Role.FORMULA, "C20H29N3O5", _FORMULA, "docx#block2", "Ovestrilide"),
        Evidence("E7", Role.MASS, "389.5", replace(_FORMULA, row=5), "docx#block2", "Ovestrilide"),
        Evidence("E8", Role.STEREO, "a single enantiomer with three stereocentres", _KIND),
        Evidence("E9", Role.REGISTRY, "2918374-55-1", _REGISTRY, "xlsx#row2", "OVE-118"),
    ),
    attribution={
        "E1": "Its record title is the substance's code, OVE-118.",
        "E2": "Stands in a table row labelled Ovestrilide, which the text equates with OVE-118.",
        "E3": "Stands in the block labelled Ovestrilide.",
        "E4": "Its constitution is that of E1, and the paragraph names OVE-118.",
        "E5": "A data field of the same record as E1.",
        "E6": "Stands in the block labelled Ovestrilide.",
        "E7": "Stands in the block labelled Ovestrilide.",
        "E8": "The paragraph's subject is Ovestrilide.",
        "E9": "Stands in a row labelled OVE-118.",
    },
    concordance=Concordance(
        reference="E1",
        constitution={
            "E1": "reference",
            "E2": "same",
            "E3": "same",
            "E4": "same",
            "E5": "first block agrees",
        },
        rows=(
            UnitRow(
                "U1",
                "centre",
                (5,),
                "2",
                (
                    UnitCell("E1", State.AGREES, "S"),
                    UnitCell("E2", State.AGREES, "S"),
                    UnitCell("E3", State.AGREES, "S"),
                    UnitCell("E4", State.AGREES, "S"),
                ),
            ),
            UnitRow(
                "U2",
                "centre",
                (16,),
                "2′",
                (
                    UnitCell("E1", State.AGREES, "S"),
                    UnitCell("E2", State.AGREES, "S"),
                    UnitCell("E3", State.AGREES, "S"),
                    UnitCell("E4", State.AGREES, "S"),
                ),
            ),
            UnitRow(
                "U3",
                "centre",
                (18,),
                "4′",
                (
                    UnitCell("E1", State.AGREES, "R"),
                    UnitCell("E2", State.DIFFERS, "S"),
                    UnitCell("E3", State.AGREES, "R"),
                    UnitCell("E4", State.AGREES, "R"),
                ),
            ),
            UnitRow(
                "U4",
                "centre",
                (26,),
                "4″",
                (
                    UnitCell("E1", State.AGREES, "R"),
                    UnitCell("E2", State.AGREES, "R"),
                    UnitCell(
                        "E3",
                        State.UNDETERMINED,
                        "R or S",
                        "Two computations of the descriptor do not agree.",
                    ),
                    UnitCell("E4", State.AGREES, "R"),
                ),
            ),
            UnitRow(
                "U5",
                "double bond",
                (24, 25),
                "2″",
                (
                    UnitCell("E1", State.AGREES, "E"),
                    UnitCell("E2", State.AGREES, "E"),
                    UnitCell("E3", State.AGREES, "E"),
                    UnitCell("E4", State.SILENT, "—"),
                ),
            ),
        ),
    ),
    drawing=BASE,
)

TARTRATE = SubstanceEntry(
    id="S2",
    label="Ovestrilide hydrogen tartrate",
    evidence=(
        Evidence("E10", Role.MOLFILE, molfile(SALT, "OVE-118-T"), Place(_SDF, record=2)),
        Evidence(
            "E11", Role.NAME, f"{NAME} hydrogen maleate", Place(_LETTER, line=14, span=(22, 168))
        ),
    ),
    attribution={"E10": "Its own record.", "E11": "The line gives the code OVE-118-T."},
    concordance=Concordance(
        "E10", (), {"E10": "reference", "E11": "main component same, counter-ion differs"}
    ),
    drawing=SALT,
)

_CARBINOL_ROW = UnitRow(
    "U1",
    "centre",
    (2,),
    "1",
    (UnitCell("E12", State.AGREES, "S"), UnitCell("E13", State.AGREES, "S")),
)
CLEAN = SubstanceEntry(
    id="S3",
    label="Resolving agent",
    evidence=(
        Evidence("E12", Role.MOLFILE, molfile(CARBINOL, "RA-1"), Place(_SDF, record=3)),
        Evidence(
            "E13",
            Role.NAME,
            "(1S)-1-(naphthalen-2-yl)ethan-1-ol",
            Place(_LIST, sheet="Starting materials", row=3, column="Name"),
        ),
    ),
    attribution={"E12": "Its own record.", "E13": "Its constitution is that of E12."},
    concordance=Concordance("E12", (_CARBINOL_ROW,), {"E12": "reference", "E13": "same"}),
    drawing=CARBINOL,
)
NAMED_ONLY = SubstanceEntry(
    id="S4",
    label="",
    evidence=(Evidence("E14", Role.NAME, "butan-2-ol", Place(_MADE, paragraph=31, span=(4, 14))),),
    attribution={"E14": "Fits no other substance."},
    concordance=None,
)


def _span(text: str, part: str) -> tuple[int, int]:
    start = text.index(part)
    return start, start + len(part)


def derived(*atoms: int) -> Derived:
    """How a unit of the base, as it is drawn, has its descriptor."""
    structure = from_molblock(molfile(BASE, "OVE-118"))
    found = confirmed(structure, atoms)
    assert found is not None
    return shown(structure, found, BASE)


_CONFIGURATION = Finding(
    id="F1",
    rule="name-and-drawing/configuration-differs",
    grade=Grade.CRITICAL,
    substance="S1",
    message="The name says 4S for the pyrrolidine centre that the drawing shows as R.",
    remedy="Decide which is right from the synthesis or the absolute structure, and correct the other.",
    unit="U3",
    locant="4′",
    exhibits=(
        Exhibit(
            "E1",
            "Drawing",
            OVESTRILIDE.evidence[0].text,
            _STRUCTURE,
            drawing=marked(BASE, {17: "R, not S"}),
            derived=(derived(17),),
        ),
        Exhibit(
            "E2",
            "Systematic name",
            WRONG_NAME,
            _NOMENCLATURE,
            marks=((_span(WRONG_NAME, "4S")),),
            note="Flipping this descriptor moves atom 18 and no other.",
        ),
    ),
    derivation=(
        "Atom 18 bears O19, C17, C20 and H.",
        "Sphere 1, Rule 1a: O19 (8) ranks above C17 and C20 (6), H (1) lowest.",
        "Sphere 2: C20 {N,H,H} ranks above C17 {C,H,H}.",
        "O19 → C20 → C17 seen with H away turns clockwise: R.",
    ),
)

FINDINGS = (
    _CONFIGURATION,
    Finding(
        "F2",
        "name-and-drawing/name-silent",
        Grade.MAJOR,
        "S1",
        "The name in the description of the route leaves the double bond open that the drawing shows as E.",
        "Add the descriptor 2E to the name.",
        (
            Exhibit("E1", "Drawing", BASE and OVESTRILIDE.evidence[0].text, _STRUCTURE,
                    drawing=marked(BASE, {23: "E", 24: ""}), derived=(derived(23, 24),)),
            Exhibit("E4", "Systematic name", SILENT_NAME, _ROUTE, (_span(SILENT_NAME, "pent-2-enoyl"),)),
        ),
        unit="U5",
        locant="2″",
    ),
    Finding(
        "F3",
        "identity/formula-differs",
        Grade.MAJOR,
        "S1",
        "The printed formula C20H29N3O5 has two hydrogen atoms more than the drawing, C20H27N3O5.",
        "Correct the formula, or the drawing if a double bond is drawn too many.",
        (
            Exhibit("E6", "Molecular formula", "C20H29N3O5", _FORMULA, ((3, 6),)),
            Exhibit("E1", "Drawing", OVESTRILIDE.evidence[0].text, _STRUCTURE, drawing=BASE,
                    note="Computed from the drawing: C20H27N3O5."),
        ),
    ),
    Finding(
        "F4",
        "statement/centre-count-differs",
        Grade.MAJOR,
        "S1",
        "The text speaks of three stereocentres; the drawing has four.",
        "Correct the number in the text.",
        (
            Exhibit("E8", "Stereochemistry statement", "a single enantiomer with three stereocentres",
                    _KIND, ((25, 30),)),
            Exhibit("E1", "Drawing", OVESTRILIDE.evidence[0].text, _STRUCTURE,
                    drawing=marked(BASE, {4: "1", 15: "2", 17: "3", 25: "4"})),
        ),
    ),
    Finding(
        "F5",
        "identity/registry-check-digit",
        Grade.REMARK,
        "S1",
        "The check digit of 2918374-55-1 does not follow from its other digits.",
        "Compare with the registry record.",
        (Exhibit("E9", "Registry number", "2918374-55-1", _REGISTRY, ((11, 12),)),),
    ),
    Finding(
        "F6",
        "name-and-drawing/salt-differs",
        Grade.CRITICAL,
        "S2",
        "The drawing is a hydrogen tartrate, the name says hydrogen maleate.",
        "Name the counter-ion that is in the drug substance, in both places.",
        (
            Exhibit("E10", "Drawing", TARTRATE.evidence[0].text, Place(_SDF, record=2),
                    drawing=marked(SALT, {30: "counter-ion"})),
            Exhibit("E11", "Systematic name", f"{NAME} hydrogen maleate",
                    Place(_LETTER, line=14, span=(22, 168)),
                    (_span(f"{NAME} hydrogen maleate", "hydrogen maleate"),)),
        ),
    ),
)  # fmt: skip

RULES = (
    RuleEntry(
        "name-and-drawing/configuration-differs",
        "Name and drawing give a unit opposite configurations",
        Grade.CRITICAL,
        "A name and a drawing that part at one unit describe two different substances. An assessor "
        "cannot tell which of them was made, tested and given to patients.",
        "ICH Q6A, section 3.3.1 d (chiral drug substances); IUPAC 2013, P-93.1",
        "Decide which is right, and correct the other.",
    ),
    RuleEntry(
        "name-and-drawing/name-silent",
        "Name leaves open what the drawing specifies",
        Grade.MAJOR,
        "A descriptor left out makes the name that of a mixture or of an unknown isomer.",
        "IUPAC 2013, P-91.2",
        "Add the descriptor.",
    ),
    RuleEntry(
        "identity/formula-differs",
        "Printed formula is not that of the structure",
        Grade.MAJOR,
        "The formula is what mass balance and reference standards are computed from.",
        "common practice",
        "Correct the formula.",
    ),
    RuleEntry(
        "statement/centre-count-differs",
        "Stated number of stereocentres is not that of the structure",
        Grade.MAJOR,
        "Text and structure are read by different people; both must count alike.",
        "common practice",
        "Correct the number.",
    ),
    RuleEntry(
        "identity/registry-check-digit",
        "Registry number's check digit is wrong",
        Grade.REMARK,
        "A wrong check digit shows a mistyped number.",
        "common practice",
        "Compare with the registry.",
    ),
    RuleEntry(
        "name-and-drawing/salt-differs",
        "Name and drawing have different salt parts",
        Grade.CRITICAL,
        "The counter-ion is part of the identity of a drug substance.",
        "common practice",
        "Name the counter-ion that is present.",
    ),
    RuleEntry(
        "drawing/wavy-bond",
        "Drawing has a wavy bond",
        Grade.REMARK,
        "A wavy bond says that a configuration is open.",
        "IUPAC 2006 graphical representation, ST-1.3",
        "Draw the configuration.",
        off="Scaffold drawings of intermediates are meant to be open in this dossier.",
    ),
)

SOURCES = tuple(
    Source(path, f"{number:064x}", 4096 * number + 17, form)
    for number, (path, form) in enumerate(
        [
            (_SDF, "SDF"),
            (_GENERAL, "DOCX"),
            (_MADE, "DOCX"),
            (_LIST, "XLSX"),
            (_LETTER, "text"),
            (_SCAN, "unknown"),
        ],
        start=0x7A61,
    )
)

UNREAD = (
    Unread(
        Place(_SCAN), "encrypted", "The file is protected by a password and could not be opened."
    ),
    Unread(
        Place(_SDF, record=4),
        "bad-record",
        "The counts line promises 31 atoms and 12 follow.",
        "31 33  0  0  1  0  0  0  0  0999 V2000",
    ),
    Unread(
        Place(_MADE, section="3.2.S.2.2", paragraph=22, span=(0, 36)),
        "name-not-interpreted",
        "The name ends in the middle of a bracket.",
        "(3R)-3-[(tert-butoxycarbonyl)amino-4",
    ),
)

METHOD = {
    "Program": "dossiercheck 0.1.0",
    "Reference": "Per substance the drawing with most specified units; the others are held against it.",
    "Alignment": "Best of all automorphisms of the constitution; salts and mobile hydrogens set apart.",
    "Descriptors": "Two independent computations; where they part the descriptor is undetermined.",
    "Structure library": "RDKit 2026.09.1",
    "Name parser": "OPSIN, in py2opsin 1.2.0",
    "Settings": "defaults",
}


def review() -> Review:
    """The review with everything in it."""
    return Review(
        sources=SOURCES,
        unread=UNREAD,
        substances=(OVESTRILIDE, TARTRATE, CLEAN, NAMED_ONLY),
        findings=FINDINGS,
        rules=RULES,
        method=METHOD,
        caution=CAUTION,
    )


def empty() -> Review:
    """A review that found nothing to read."""
    return Review((), (), (), (), RULES, METHOD, CAUTION)


def clean() -> Review:
    """A review with nothing to report."""
    return replace(review(), unread=(), findings=(), substances=(CLEAN,))


def many(number: int, template: SubstanceEntry = CLEAN) -> Review:
    """A review of `number` alike substances without a finding."""
    entries = tuple(
        replace(template, id=f"S{index}", label=f"Substance {index}") for index in range(number)
    )
    return replace(clean(), substances=entries)


def hostile() -> Review:
    """The review with text in every field that would break out of HTML, JSON or a terminal."""
    place = Place(HOSTILE, HOSTILE, HOSTILE, 1, 2, HOSTILE, field=HOSTILE)
    bad = DrawnAtom(0.0, 0.0, HOSTILE, highlight=True, mark=HOSTILE)
    picture = Drawing((bad, replace(bad, x=1.5, y=0.3)), (DrawnBond(0, 1, 1),))
    exhibit = Exhibit(HOSTILE, HOSTILE, HOSTILE, place, ((3, 40),), picture, HOSTILE)
    finding = Finding(
        HOSTILE, HOSTILE, Grade.CRITICAL, HOSTILE, HOSTILE, HOSTILE, (exhibit, exhibit), HOSTILE,
        HOSTILE, (HOSTILE,),
    )  # fmt: skip
    evidence = Evidence(HOSTILE, Role.NAME, HOSTILE, place, HOSTILE, HOSTILE)
    cell = UnitCell(HOSTILE, State.DIFFERS, HOSTILE, HOSTILE)
    row = UnitRow(HOSTILE, HOSTILE, (1, 2), HOSTILE, (cell,))
    entry = SubstanceEntry(
        HOSTILE, HOSTILE, (evidence,), {HOSTILE: HOSTILE},
        Concordance(HOSTILE, (row,), {HOSTILE: HOSTILE}), picture,
    )  # fmt: skip
    rule = RuleEntry(HOSTILE, HOSTILE, Grade.MAJOR, HOSTILE, HOSTILE, HOSTILE, HOSTILE)
    return Review(
        (Source(HOSTILE, HOSTILE, 1, HOSTILE),),
        (Unread(place, HOSTILE, HOSTILE, HOSTILE),),
        (entry,),
        (finding,),
        (rule,),
        {HOSTILE: HOSTILE},
        HOSTILE,
    )
