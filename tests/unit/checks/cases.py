"""The smallest dossiers that give each finding, and the sound ones that look like them.

A case is one substance or more, as records; `expected` are the rules that must speak, with the
grades of the catalogue; nothing else may, save what `remarks` allows. Names and configurations
are IUPAC 2013 or common practice.
"""

from __future__ import annotations

from dataclasses import dataclass, field

from tests.unit.stereo.forms import in_space, v2000, v3000

CONFIGURATION = "name-and-drawing/configuration-differs"
MIRROR = "name-and-drawing/mirror-image"
NAME_SILENT = "name-and-drawing/name-silent"
DRAWING_SILENT = "name-and-drawing/drawing-silent"
CONSTITUTION = "name-and-drawing/constitution-differs"
KIND = "name-and-drawing/stereo-kind-differs"
SALT = "name-and-drawing/salt-differs"
TAUTOMER = "name-and-drawing/tautomer-differs"
CHARGE = "name-and-drawing/charge-differs"
UNDETERMINED = "name-and-drawing/descriptor-undetermined"
AXIS_OPEN = "name-and-drawing/axis-undetermined"
AXIS_DIFFERS = "name-and-drawing/axis-differs"
BIARYL_NAME = "-2'-amino-6'-chloro-6-methyl[1,1'-biphenyl]-2-ol"
# A biphenyl with four different groups beside the bond between its rings, a wedge there: M.
BIARYL = """axis


 16 17  0  0  0  0  0  0  0  0999 V2000
    0.7500   -2.5981    0.0000 N   0  0  0  0  0  0  0  0  0  0  0  0
    1.5000   -1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
    3.0000   -1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
    3.7500   -0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
    3.0000    1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
    1.5000    1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
    0.7500    2.5981    0.0000 Cl  0  0  0  0  0  0  0  0  0  0  0  0
    0.7500    0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -0.7500    0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -1.5000    1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -0.7500    2.5981    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -3.0000    1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -3.7500    0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -3.0000   -1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -1.5000   -1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -0.7500   -2.5981    0.0000 O   0  0  0  0  0  0  0  0  0  0  0  0
  1  2  1  0
  2  3  1  0
  3  4  2  0
  4  5  1  0
  5  6  2  0
  6  7  1  0
  8  6  1  1
  8  9  1  0
  9 10  2  0
 10 11  1  0
 10 12  1  0
 12 13  2  0
 13 14  1  0
 14 15  2  0
 15 16  1  0
  8  2  2  0
 15  9  1  0
M  END
"""
NOT_STEREOGENIC = "name/locant-not-stereogenic"
NO_LOCANT = "name/no-such-locant"
DUPLICATE = "name/duplicate-descriptor"
CONTRADICTORY = "name/contradictory-descriptors"
OVERRIDES = "name/overrides-implied"
LOST_SPACE = "name/lost-space"
NOT_INTERPRETABLE = "name/not-interpretable"
OPEN = "name/position-open"
NOTATION = "identity/notation-differs"
INCHIKEY = "identity/inchikey-differs"
FORMULA = "identity/formula-differs"
MASS = "identity/mass-differs"
CHECK_DIGIT = "identity/registry-check-digit"
WEDGE = "drawing/wedge-not-stereogenic"
AMBIGUOUS = "drawing/wedge-ambiguous"
# Butan-2-ol with its chain in a straight line through the centre and the wedge upright on it.
STEM = """stem


  5  4  0  0  0  0  0  0  0  0999 V2000
   -1.5000    0.0000    0.0000 C   0  0
    0.0000    0.0000    0.0000 C   0  0
    0.0000    1.5000    0.0000 O   0  0
    1.5000    0.0000    0.0000 C   0  0
    3.0000    0.0000    0.0000 C   0  0
  1  2  1  0
  2  3  1  1
  2  4  1  0
  4  5  1  0
M  END
"""
UNDEFINED = "drawing/undefined-centre"
WAVY = "drawing/wavy-bond"
STATED_KIND = "statement/kind-differs"
UNMARKED = "statement/racemate-not-marked"
STATED_COUNT = "statement/centre-count-differs"
ACROSS = "across-documents/structures-differ"
FLACK = "absolute-structure/flack-not-conclusive"
NO_FLACK = "absolute-structure/flack-missing"
INVERTED = "absolute-structure/inverted"
BOTH_HANDS = "absolute-structure/racemic-space-group"


@dataclass(frozen=True, slots=True)
class Case:
    title: str
    records: tuple[dict[str, str], ...]
    expected: tuple[str, ...] = ()
    remarks: tuple[str, ...] = ()
    unread: tuple[str, ...] = ()
    contains: dict[str, str] = field(default_factory=dict)


def one(title: str, *expected: str, **evidence: str) -> Case:
    return Case(title, (evidence,), expected)


THREONINE = "C[C@@H](O)[C@H](N)C(=O)O"
ALLO = "C[C@H](O)[C@H](N)C(=O)O"
MIRRORED = "C[C@H](O)[C@@H](N)C(=O)O"
THR = "(2S,3R)-2-amino-3-hydroxybutanoic acid"
PEA = "C[C@H](N)c1ccccc1"  # (1S)-1-phenylethan-1-amine
TRIOL = "C[C@@H](O)[C@H](O)[C@@H](O)C"  # (2R,3r,4S)
BINOL = "Oc1ccc2ccccc2c1-c1c(O)ccc2ccccc12"
MENTHOL = "C[C@@H]1CC[C@@H](C(C)C)[C@H](O)C1"  # (1R,2S,5R)


def wavy(smiles: str) -> str:
    return v3000(smiles).replace(" CFG=3", " CFG=2").replace(" CFG=1", " CFG=2")


def wedged(smiles: str, begin: int, end: int) -> str:
    """A wedge added to a drawing, from one atom (1-based) to another."""
    lines = v2000(smiles).split("\n")
    for number, line in enumerate(lines):
        if line[:6] in (f"{begin:3}{end:3}", f"{end:3}{begin:3}") and len(line) == 12:
            lines[number] = f"{begin:3}{end:3}{line[6:9]}  1"
    return "\n".join(lines)


CASES = [
    # --- one unit and the whole ------------------------------------------------------------
    one("sound threonine", name=THR, molfile=v2000(THREONINE)),
    one("3S for 3R", CONFIGURATION, name=THR.replace("3R", "3S"), molfile=v2000(THREONINE)),
    one("2R for 2S", CONFIGURATION, name=THR.replace("2S", "2R"), molfile=v2000(THREONINE)),
    one("both turned", MIRROR, name=THR.replace("2S,3R", "2R,3S"), molfile=v2000(THREONINE)),
    one("one centre turned", CONFIGURATION, name="(1R)-1-phenylethan-1-amine", molfile=v2000(PEA)),
    one(
        "two of three turned",
        CONFIGURATION,
        CONFIGURATION,
        name="(1S,2R,5R)-5-methyl-2-(propan-2-yl)cyclohexan-1-ol",
        molfile=v2000(MENTHOL),
    ),
    one(
        "menthol", name="(1R,2S,5R)-5-methyl-2-(propan-2-yl)cyclohexan-1-ol", molfile=v2000(MENTHOL)
    ),
    one(
        "in other words", name="(1R,2S,5R)-2-isopropyl-5-methylcyclohexanol", molfile=v2000(MENTHOL)
    ),
    one("trivial name", name="L-threonine", molfile=v2000(THREONINE)),
    one("trivial name, other form", MIRROR, name="D-threonine", molfile=v2000(THREONINE)),
    one("coordinates", CONFIGURATION, name=THR.replace("3R", "3S"), molfile=in_space(THREONINE)),
    one("sound coordinates", name=THR, molfile=in_space(THREONINE)),
    one("only a SMILES", CONFIGURATION, name=THR.replace("3R", "3S"), smiles=THREONINE),
    one(
        "meso from either end",
        name="(2R,3S)-2,3-dihydroxybutanedioic acid",
        molfile=v2000("OC(=O)[C@H](O)[C@H](O)C(=O)O"),
    ),
    one(
        "meso for R,R",
        CONFIGURATION,
        name="(2R,3S)-2,3-dihydroxybutanedioic acid",
        molfile=v2000("OC(=O)[C@H](O)[C@@H](O)C(=O)O"),
    ),
    one(
        "S,S for R,R",
        MIRROR,
        name="(2S,3S)-2,3-dihydroxybutanedioic acid",
        molfile=v2000("OC(=O)[C@H](O)[C@@H](O)C(=O)O"),
    ),
    one(
        "E for Z",
        CONFIGURATION,
        name="(2E)-but-2-enedioic acid",
        molfile=v2000("OC(=O)/C=C\\C(=O)O"),
    ),
    one("sound Z", name="(2Z)-but-2-enedioic acid", molfile=v2000("OC(=O)/C=C\\C(=O)O")),
    one("cis for Z", name="cis-but-2-enedioic acid", molfile=v2000("OC(=O)/C=C\\C(=O)O")),
    one(
        "oxime E for Z",
        CONFIGURATION,
        name="(E)-N-(1-phenylethylidene)hydroxylamine",
        molfile=v2000("CC(=N/O)/c1ccccc1"),
    ),
    one(
        "oxime Z for E",
        CONFIGURATION,
        name="(Z)-N-(1-phenylethylidene)hydroxylamine",
        molfile=v2000("CC(=N\\O)/c1ccccc1"),
    ),
    one(
        "oxime E",
        name="(E)-N-(1-phenylethylidene)hydroxylamine",
        molfile=v2000("CC(=N\\O)/c1ccccc1"),
    ),
    one(
        "sulfoxide",
        name="(S)-(methanesulfinyl)benzene",
        molfile=v2000("C[S@](=O)c1ccccc1").replace("", ""),
    ),
    one("pseudoasymmetric", name="(2R,3r,4S)-pentane-2,3,4-triol", molfile=v2000(TRIOL)),
    one(
        "pseudoasymmetric turned",
        CONFIGURATION,
        name="(2R,3s,4S)-pentane-2,3,4-triol",
        molfile=v2000(TRIOL),
    ),
    one(
        "an end of a meso compound turned",
        CONFIGURATION,
        name="(2R,4R)-pentane-2,3,4-triol",
        molfile=v2000(TRIOL),
    ),
    one(
        "trans ring",
        name="(1r,4r)-4-methylcyclohexane-1-carboxylic acid",
        molfile=v2000("C[C@H]1CC[C@H](C(=O)O)CC1"),
    ),
    one(
        "cis ring for trans",
        CONFIGURATION,
        name="cis-4-methylcyclohexane-1-carboxylic acid",
        molfile=v2000("C[C@H]1CC[C@H](C(=O)O)CC1"),
    ),
    # --- silence ---------------------------------------------------------------------------
    one(
        "silent name", NAME_SILENT, name="2-amino-3-hydroxybutanoic acid", molfile=v2000(THREONINE)
    ),
    one(
        "silent at one",
        NAME_SILENT,
        name="(2S)-2-amino-3-hydroxybutanoic acid",
        molfile=v2000(THREONINE),
    ),
    one("silent drawing", DRAWING_SILENT, name=THR, molfile=v2000("CC(O)C(N)C(=O)O")),
    one("drawing silent at one", DRAWING_SILENT, name=THR, molfile=v2000("CC(O)[C@H](N)C(=O)O")),
    one(
        "silent double bond",
        NAME_SILENT,
        name="but-2-enedioic acid",
        molfile=v2000("OC(=O)/C=C\\C(=O)O"),
    ),
    one("achiral", name="2-aminoethan-1-ol", molfile=v2000("NCCO")),
    one("imine hydrogen", name="benzenecarboximidamide", molfile=v2000("NC(=N)c1ccccc1")),
    one(
        "silent drawing, letter without locant",
        DRAWING_SILENT,
        name="(Z)-cyclooctene",
        molfile=v2000("C1=CCCCCCC1"),
    ),
    # --- axes: judged where a drawing shows one, else nothing looks judged -----------------
    *(
        one(f"biaryl {letter}", *found, name=f"({letter}){BIARYL_NAME}", molfile=BIARYL)
        for letter, found in (
            ("P", [AXIS_DIFFERS]),
            ("Sa", [AXIS_DIFFERS]),
            ("S", [AXIS_DIFFERS]),
            ("M", []),
            ("Ra", []),
            ("R", []),
        )
    ),
    *(
        Case(title, ({"name": name, "molfile": v2000(smiles)},), (), (AXIS_OPEN,))
        for title, name, smiles in (
            ("axis M", "(M)-[1,1'-binaphthalene]-2,2'-diol", BINOL),
            ("axis Ra", "(Ra)-[1,1'-binaphthalene]-2,2'-diol", BINOL),
            ("axis R", "(R)-[1,1'-binaphthalene]-2,2'-diol", BINOL),
            ("axis 1R", "(1R)-[1,1'-binaphthalene]-2,2'-diol", BINOL),
            ("allene M", "(2M)-penta-2,3-diene", "CC=C=CC"),
        )
    ),
    one("axis left open", name="[1,1'-binaphthalene]-2,2'-diol", molfile=v2000(BINOL)),
    # --- constitution ----------------------------------------------------------------------
    one(
        "one carbon more",
        CONSTITUTION,
        name="(2S,3R)-2-amino-3-hydroxypentanoic acid",
        molfile=v2000(THREONINE),
    ),
    one(
        "position",
        CONSTITUTION,
        name="(2R)-2-amino-4-hydroxybutanoic acid",
        molfile=v2000(THREONINE),
    ),
    one(
        "hydrochloride drawn, base named",
        SALT,
        name="(1S)-1-phenylethan-1-amine",
        molfile=v2000(f"{PEA}.Cl"),
    ),
    one(
        "hydrochloride", name="(1S)-1-phenylethan-1-amine hydrochloride", molfile=v2000(f"{PEA}.Cl")
    ),
    one(
        "other salt",
        SALT,
        name="(1S)-1-phenylethan-1-amine hydrobromide",
        molfile=v2000(f"{PEA}.Cl"),
    ),
    one(
        "stoichiometry",
        SALT,
        name="(1S)-1-phenylethan-1-amine dihydrochloride",
        molfile=v2000(f"{PEA}.Cl"),
    ),
    one(
        "acid for sodium salt",
        SALT,
        name="(2S)-2-phenylpropanoic acid",
        molfile=v2000("C[C@H](C(=O)[O-])c1ccccc1.[Na+]"),
    ),
    one(
        "sodium salt",
        name="sodium (2S)-2-phenylpropanoate",
        molfile=v2000("C[C@H](C(=O)[O-])c1ccccc1.[Na+]"),
    ),
    one(
        "salt and centre",
        SALT,
        CONFIGURATION,
        name="(1R)-1-phenylethan-1-amine",
        molfile=v2000(f"{PEA}.Cl"),
    ),
    Case(
        "zwitterion",
        ({"name": THR, "molfile": v2000("C[C@@H](O)[C@H]([NH3+])C(=O)[O-]")},),
        (),
        (CHARGE,),
    ),
    Case(
        "hydrochloride as ions",
        (
            {
                "name": "(1S)-1-phenylethan-1-amine hydrochloride",
                "molfile": v2000("C[C@H]([NH3+])c1ccccc1.[Cl-]"),
            },
        ),
        (),
        (CHARGE,),
    ),
    Case(
        "zwitterion and centre",
        ({"name": THR.replace("3R", "3S"), "molfile": v2000("C[C@@H](O)[C@H]([NH3+])C(=O)[O-]")},),
        (CONFIGURATION,),
        (CHARGE,),
    ),
    one("mobile hydrogen", name="4-methyl-1H-imidazole", molfile=v2000("Cc1cnc[nH]1")),
    one(
        "enol for ketone", TAUTOMER, name="4-hydroxypent-3-en-2-one", molfile=v2000("CC(=O)CC(C)=O")
    ),
    one("labelled", CONSTITUTION, name="ethan-1-ol", smiles="[2H]CCO"),
    # --- racemic, relative, absolute -------------------------------------------------------
    one("racemate, drawn as one", KIND, name="rac-(1S)-1-phenylethan-1-amine", molfile=v2000(PEA)),
    one("racemate", name="rac-(1S)-1-phenylethan-1-amine", molfile=v3000(f"{PEA} |&1:1|")),
    one(
        "racemate, other letter",
        name="rac-(1R)-1-phenylethan-1-amine",
        molfile=v3000(f"{PEA} |&1:1|"),
    ),
    one(
        "one named, racemate drawn",
        KIND,
        name="(1S)-1-phenylethan-1-amine",
        molfile=v3000(f"{PEA} |&1:1|"),
    ),
    one(
        "racemate in the notation", KIND, name="(1S)-1-phenylethan-1-amine", smiles=f"{PEA} |&1:1|"
    ),
    one(
        "relative named",
        KIND,
        name="rel-(2S,3R)-2-amino-3-hydroxybutanoic acid",
        molfile=v2000(THREONINE),
    ),
    one(
        "relative",
        name="rel-(2S,3R)-2-amino-3-hydroxybutanoic acid",
        molfile=v3000(f"{THREONINE} |o1:1,3|"),
    ),
    one(
        "relative, the other way",
        name="rel-(2R,3S)-2-amino-3-hydroxybutanoic acid",
        molfile=v3000(f"{THREONINE} |o1:1,3|"),
    ),
    one(
        "relative, other diastereomer",
        CONFIGURATION,
        name="rel-(2R,3R)-2-amino-3-hydroxybutanoic acid",
        molfile=v3000(f"{THREONINE} |o1:1,3|"),
    ),
    one(
        "racemate without descriptor", name="1-phenylethan-1-amine", molfile=v3000(f"{PEA} |&1:1|")
    ),
    one("racemic by word, flat", name="rac-1-phenylethan-1-amine", molfile=v2000("CC(N)c1ccccc1")),
    # --- the name by itself ----------------------------------------------------------------
    one(
        "no centre there",
        NOT_STEREOGENIC,
        name="(2S,4R)-2-aminopentanoic acid",
        molfile=v2000("CCC[C@H](N)C(=O)O"),
    ),
    one(
        "locant moved",
        NOT_STEREOGENIC,
        name="(3S)-2-aminopentanoic acid",
        molfile=v2000("CCC[C@H](N)C(=O)O"),
    ),
    one(
        "no such locant",
        NO_LOCANT,
        name="(2S,9R)-2-aminopentanoic acid",
        molfile=v2000("CCC[C@H](N)C(=O)O"),
    ),
    one(
        "locant moved out",
        NO_LOCANT,
        name="(7S)-2-aminopentanoic acid",
        molfile=v2000("CCC[C@H](N)C(=O)O"),
    ),
    one(
        "twice", DUPLICATE, name="(2S,2S)-2-aminopentanoic acid", molfile=v2000("CCC[C@H](N)C(=O)O")
    ),
    one(
        "twice for two",
        DUPLICATE,
        name="(2S,2S)-2-amino-3-hydroxybutanoic acid",
        molfile=v2000(THREONINE),
    ),
    # The parser takes one of the two; the other is doubt beside the finding, not a second one.
    Case(
        "R and S",
        ({"name": "(2S,2R)-2-aminopentanoic acid", "molfile": v2000("CCC[C@H](N)C(=O)O")},),
        (CONTRADICTORY,),
        (UNDETERMINED,),
    ),
    one("L but R", OVERRIDES, name="(2R)-L-alanine", molfile=v2000("C[C@H](N)C(=O)O")),
    one("L and S", name="(2S)-L-alanine", molfile=v2000("C[C@H](N)C(=O)O")),
    one(
        "lost space",
        LOST_SPACE,
        name="ethyl(2S)-2-hydroxypropanoate",
        molfile=v2000("CCOC(=O)[C@H](C)O"),
    ),
    one("kept space", name="ethyl (2S)-2-hydroxypropanoate", molfile=v2000("CCOC(=O)[C@H](C)O")),
    Case(
        "no name",
        ({"name": "(2S)-2-aminopropanoik acid", "molfile": v2000("C[C@H](N)C(=O)O")},),
        (),
        (NOT_INTERPRETABLE,),
        ("name-not-interpretable",),
    ),
    # --- notation, formula, mass, registry number ------------------------------------------
    one("other SMILES", NOTATION, molfile=v2000(THREONINE), smiles=ALLO),
    one("mirrored SMILES", NOTATION, molfile=v2000(THREONINE), smiles=MIRRORED),
    one("flat SMILES", NOTATION, molfile=v2000(THREONINE), smiles="CC(O)C(N)C(=O)O"),
    one("same SMILES, other order", molfile=v2000(THREONINE), smiles="N[C@@H]([C@@H](C)O)C(O)=O"),
    one(
        "InChI",
        molfile=v2000(THREONINE),
        inchi="InChI=1S/C4H9NO3/c1-2(6)3(5)4(7)8/h2-3,6H,5H2,1H3,(H,7,8)/t2-,3+/m1/s1",
    ),
    one(
        "mirrored InChI",
        NOTATION,
        molfile=v2000(THREONINE),
        inchi="InChI=1S/C4H9NO3/c1-2(6)3(5)4(7)8/h2-3,6H,5H2,1H3,(H,7,8)/t2-,3+/m0/s1",
    ),
    one(
        "InChI of another centre",
        NOTATION,
        molfile=v2000(THREONINE),
        inchi="InChI=1S/C4H9NO3/c1-2(6)3(5)4(7)8/h2-3,6H,5H2,1H3,(H,7,8)/t2-,3-/m1/s1",
    ),
    one("InChIKey", molfile=v2000(THREONINE), inchikey="AYFVYJQAPQTCCC-GBXIJSLDSA-N"),
    one(
        "InChIKey of the mirror image",
        INCHIKEY,
        molfile=v2000(THREONINE),
        inchikey="AYFVYJQAPQTCCC-STHAYSLISA-N",
    ),
    one(
        "InChIKey of the flat form",
        INCHIKEY,
        molfile=v2000(THREONINE),
        inchikey="AYFVYJQAPQTCCC-UHFFFAOYSA-N",
    ),
    Case(
        "InChIKey misspelt",
        ({"molfile": v2000(THREONINE), "inchikey": "AYFVYJQAPQTCC-GBXIJSLDSA-N"},),
        unread=("malformed",),
    ),
    one("formula", molfile=v2000(THREONINE), formula="C₄H₉NO₃"),
    one("other formula", FORMULA, molfile=v2000(THREONINE), formula="C4H11NO3"),
    one("formula of the salt", molfile=v2000(f"{PEA}.Cl"), formula="C8H11N · HCl"),
    one(
        "formula of the base beside the salt", FORMULA, molfile=v2000(f"{PEA}.Cl"), formula="C8H11N"
    ),
    Case(
        "formula not read",
        ({"molfile": v2000(THREONINE), "formula": "see 3.2.S.1.2"},),
        unread=("malformed",),
    ),
    one("mass", molfile=v2000(THREONINE), mass="119.12"),
    one("mass in words", molfile=v2000(THREONINE), mass="119,12 g/mol"),
    one("coarse mass", molfile=v2000(THREONINE), mass="119.1"),
    one("whole mass", molfile=v2000(THREONINE), mass="119"),
    one("mass, two digits swapped", MASS, molfile=v2000(THREONINE), mass="119.21"),
    one("mass off by a hydrogen", MASS, molfile=v2000(THREONINE), mass="120.13"),
    one("mass of the base beside the salt", MASS, molfile=v2000(f"{PEA}.Cl"), mass="121.18"),
    one("registry number", molfile=v2000(THREONINE), registry="72-19-5"),
    one("wrong check digit", CHECK_DIGIT, molfile=v2000(THREONINE), registry="72-19-6"),
    one("digits swapped", CHECK_DIGIT, molfile=v2000(THREONINE), registry="27-19-5"),
    # One wrong name beside right data is one error, and one wrong drawing is too.
    one(
        "all data right, name turned",
        CONFIGURATION,
        name=THR.replace("3R", "3S"),
        molfile=v2000(THREONINE),
        smiles=THREONINE,
        inchikey="AYFVYJQAPQTCCC-GBXIJSLDSA-N",
        formula="C4H9NO3",
        mass="119.12",
        registry="72-19-5",
        stereo="single enantiomer, two stereogenic centres",
    ),
    one(
        "all data right, SMILES turned",
        NOTATION,
        name=THR,
        molfile=v2000(THREONINE),
        smiles=ALLO,
        inchikey="AYFVYJQAPQTCCC-GBXIJSLDSA-N",
        formula="C4H9NO3",
        mass="119.12",
    ),
    one(
        "name of another compound with its own data",
        CONSTITUTION,
        name="(2S,3R)-2-amino-3-hydroxypentanoic acid",
        molfile=v2000(THREONINE),
        formula="C4H9NO3",
        mass="119.12",
    ),
    # --- the drawing by itself -------------------------------------------------------------
    one("wedge at CH2", WEDGE, molfile=wedged("CCCO", 2, 1)),
    one(
        "wedge at CH2 beside a centre",
        WEDGE,
        name="(2S)-butan-2-ol",
        molfile=wedged("C[C@H](O)CC", 4, 5),
    ),
    one("wedge at an equal-armed carbon", WEDGE, molfile=wedged("CC(O)C", 2, 3)),
    one("wedge at an allene's end", molfile=wedged("CC=C=CC", 2, 1)),
    one("wedge on a stem", AMBIGUOUS, molfile=STEM),
    one("wedge on a bent stem", molfile=STEM.replace("1.5000    0.0000", "1.2990   -0.7500")),
    one("open centre", UNDEFINED, molfile=v2000("C[C@H](O)C(C)CC")),
    one("open centre of a stated racemate", molfile=v2000("CC(O)CC"), stereo="racemate"),
    one("open centre of a racemate by name", name="rac-butan-2-ol", molfile=v2000("CC(O)CC")),
    Case("wavy bond", ({"molfile": wavy("C[C@H](O)CC")},), (), (WAVY,)),
    Case(
        "one part racemic by name, the other drawn",
        (
            {
                "name": "(+)-1-methylpiperidin-3-yl (±)-hydroxy(phenyl)acetate",
                "molfile": v2000("CN1CCC[C@@H](OC(=O)C(O)c2ccccc2)C1"),
            },
        ),
        # The open centre is the racemic one; of a part only, the drawing would have to say so.
        (NAME_SILENT, DRAWING_SILENT),
    ),
    Case(
        "letters without locants in another order",
        (
            {
                "name": "(E,Z)-hexa-2,4-dienoic acid",
                "molfile": v2000(r"C/C=C/C=C\C(=O)O"),
            },
        ),
        (),
        (UNDETERMINED, UNDETERMINED),
    ),
    Case(
        "letters without locants, in no order",
        (
            {
                "name": "(E,E)-hexa-2,4-dienoic acid",
                "molfile": v2000(r"C/C=C/C=C\C(=O)O"),
            },
        ),
        (CONFIGURATION,),
    ),
    Case(
        "name without a locant",
        ({"name": "chlorobenzoic acid", "molfile": v2000("OC(=O)c1ccc(Cl)cc1")},),
        (),
        (OPEN,),
    ),
    # --- statements ------------------------------------------------------------------------
    one("stated racemate, one drawn", UNMARKED, molfile=v2000(THREONINE), stereo="racemate"),
    one("stated racemate, one centre drawn", STATED_KIND, molfile=v2000(PEA), stereo="racemate"),
    one("stated racemate, one written", STATED_KIND, smiles=THREONINE, stereo="racemate"),
    one("mixture stated, all drawn", STATED_KIND, molfile=v2000(THREONINE), stereo="MIXED"),
    one("epimers stated, one centre open", smiles="C[C@@H](O)C(N)C(=O)O", stereo="EPIMERIC"),
    one(
        "stated single, racemate drawn",
        STATED_KIND,
        molfile=v3000(f"{PEA} |&1:1|"),
        stereo="single enantiomer",
    ),
    one("stated single", molfile=v2000(THREONINE), stereo="single enantiomer"),
    one("stated achiral, chiral drawn", STATED_KIND, molfile=v2000(THREONINE), stereo="achiral"),
    one("meso stated", molfile=v2000("OC(=O)[C@H](O)[C@H](O)C(=O)O"), stereo="meso"),
    one(
        "single stated, meso drawn",
        STATED_KIND,
        molfile=v2000("OC(=O)[C@H](O)[C@H](O)C(=O)O"),
        stereo="single enantiomer",
    ),
    one(
        "four stated, two drawn",
        STATED_COUNT,
        molfile=v2000(THREONINE),
        stereo="four stereocentres",
    ),
    one("two stated", molfile=v2000(THREONINE), stereo="two stereogenic centres"),
    one("open ones count", UNDEFINED, molfile=v2000("C[C@H](O)C(C)CC"), stereo="2 chiral centres"),
    one(
        "centres of the parent",
        molfile=v2000(f"{THREONINE}.OC(=O)[C@H](O)[C@@H](O)C(=O)O"),
        stereo="two stereocentres",
    ),
    one(
        "centres of the whole salt",
        molfile=v2000(f"{THREONINE}.OC(=O)[C@H](O)[C@@H](O)C(=O)O"),
        stereo="four stereocentres",
    ),
    one(
        "centres of neither",
        STATED_COUNT,
        molfile=v2000(f"{THREONINE}.OC(=O)[C@H](O)[C@@H](O)C(=O)O"),
        stereo="three stereocentres",
    ),
    Case(
        "an α,β-unsaturated ester has one stereogenic double bond",
        ({"smiles": "COC(=O)/C=C/C", "stereo": "two stereogenic double bonds"},),
        ("statement/double-bond-count-differs",),
    ),
    Case(
        "tartaric acid has three stereoisomers",
        (
            {
                "smiles": "O[C@H](C(=O)O)[C@@H](O)C(=O)O",
                "stereo": "four possible stereoisomers",
            },
        ),
        ("statement/isomer-count-differs",),
    ),
    Case(
        "a cis ring called trans",
        ({"smiles": "C[C@@H]1CCCC[C@@H]1O", "stereo": "the trans isomer"},),
        ("statement/arrangement-differs",),
    ),
    Case(
        "a rotation of a meso form",
        ({"smiles": "O[C@@H](C(=O)O)[C@@H](C(=O)O)O", "rotation": "+12.0° (c 1, water)"},),
        ("statement/rotation-impossible",),
    ),
    Case(
        "two signs in one solvent",
        (
            {"smiles": "C[C@@H](O)C(=O)O", "rotation": "[α]D −12.5° (c 1, methanol)"},
            {"rotation": "[α]D +12.5° (c 1, methanol)"},
        ),
        ("statement/rotation-signs-differ",),
    ),
    Case(
        "two signs in two solvents",
        (
            {"smiles": "C[C@@H](O)C(=O)O", "rotation": "[α]D −12.5° (c 1, methanol)"},
            {"rotation": "[α]D +12.5° (c 1, water)"},
        ),
    ),
    Case(
        "not a racemate",
        ({"molfile": v2000(THREONINE), "stereo": "This is not a racemate."},),
        unread=("statement-not-understood",),
    ),
    # An axis is no centre, and one that is not judged is no contradiction either.
    one(
        "single stated, axis",
        molfile=v2000(BINOL),
        stereo="single enantiomer",
    ),
    one("single stated, allene", molfile=v2000("CC=C=CC"), stereo="single enantiomer"),
    one(
        "single stated, free biphenyl",
        STATED_KIND,
        molfile=v2000("c1ccc(cc1)-c1ccccc1"),
        stereo="single enantiomer",
    ),
    one(
        "single stated, achiral drawn",
        STATED_KIND,
        molfile=v2000("NCCO"),
        stereo="single enantiomer",
    ),
    # --- across documents ------------------------------------------------------------------
    Case(
        "two drawings alike",
        ({"molfile": v2000(THREONINE)}, {"molfile": v2000(THREONINE, hydrogens=True)}),
    ),
    Case(
        "two drawings apart", ({"molfile": v2000(THREONINE)}, {"molfile": v2000(ALLO)}), (ACROSS,)
    ),
    Case(
        "two drawings mirrored",
        ({"molfile": v2000(THREONINE)}, {"molfile": v2000(MIRRORED)}),
        (ACROSS,),
    ),
    Case(
        "drawing and coordinates apart",
        ({"molfile": v2000(THREONINE)}, {"molfile": in_space(ALLO)}),
        (ACROSS,),
    ),
    Case(
        "a second drawing left open",
        ({"molfile": v2000(THREONINE)}, {"molfile": v2000("CC(O)C(N)C(=O)O")}),
        (ACROSS,),
    ),
    Case(
        "a name in one, the drawing in another",
        ({"molfile": v2000(THREONINE)}, {"name": THR.replace("2S", "2R")}),
        (CONFIGURATION,),
    ),
    # --- absolute structure (H. D. Flack and G. Bernardinelli, J. Appl. Cryst. 2000, 33, 1143) ----
    one("Flack sound", molfile=in_space(THREONINE), absolute="ad", flack="0.01(3)"),
    one("Flack u of 0.04", FLACK, molfile=in_space(THREONINE), absolute="ad", flack="0.01(4)"),
    one("Flack three u", molfile=in_space(THREONINE), absolute="ad", flack="-0.09(3)"),
    one("Flack past three u", FLACK, molfile=in_space(THREONINE), absolute="ad", flack="0.10(3)"),
    one("Flack without u", FLACK, molfile=in_space(THREONINE), absolute="ad", flack="0.01"),
    one("Flack twinned", FLACK, molfile=in_space(THREONINE), absolute="rmad", flack="0.51(2)"),
    one("Flack u of 0.3, not claimed", molfile=in_space(THREONINE), flack="0.1(3)"),
    one("Flack u of 0.3, unknown", molfile=in_space(THREONINE), absolute="unk", flack="0.1(3)"),
    one("Flack u of 0.3, reference", molfile=in_space(THREONINE), absolute="rm", flack="0.1(3)"),
    one(
        "Flack of an enantiopure compound",
        molfile=in_space(THREONINE),
        absolute="ad",
        flack="0.01(9)",
        stereo="enantiopure",
    ),
    one(
        "Flack u of 0.10, enantiopure",
        FLACK,
        molfile=in_space(THREONINE),
        absolute="ad",
        flack="0.01(10)",
        stereo="enantiopure",
    ),
    one(
        "Flack under a statement",
        FLACK,
        molfile=in_space(THREONINE),
        flack="0.2(3)",
        stereo="absolute configuration by single-crystal X-ray diffraction",
    ),
    one("Flack of 1", INVERTED, molfile=in_space(THREONINE), absolute="ad", flack="0.98(2)"),
    one("Flack of 1, not claimed", INVERTED, molfile=in_space(THREONINE), flack="1.02(4)"),
    one("Flack of 1, vague", FLACK, molfile=in_space(THREONINE), absolute="ad", flack="0.9(4)"),
    Case(
        "Flack not a number",
        ({"molfile": in_space(THREONINE), "flack": "see table 3"},),
        unread=("malformed",),
    ),
    one(
        "no Flack",
        NO_FLACK,
        molfile=in_space(THREONINE),
        absolute="ad",
        space_group="P 21 21 21",
    ),
    one("no Flack, no group", molfile=in_space(THREONINE), absolute="ad"),
    one(
        "no Flack, reference molecule",
        molfile=in_space(THREONINE),
        absolute="rm",
        space_group="P 21 21 21",
    ),
    one("both hands, one drawn", BOTH_HANDS, molfile=v2000(THREONINE), space_group="P2(1)/c"),
    one("both hands, one named", BOTH_HANDS, name=THR, space_group="P -1"),
    one(
        "both hands, claimed",
        BOTH_HANDS,
        molfile=v2000("CC(O)CC"),
        stereo="racemate",
        absolute="ad",
        space_group="P b c a",
    ),
    one("both hands, racemate drawn", molfile=v3000(f"{PEA} |&1:1|"), space_group="P 21/c"),
    one("both hands, achiral", molfile=v2000("NCCO"), space_group="P 21/c"),
    one("one hand", molfile=v2000(THREONINE), space_group="P 21 21 21"),
    Case(
        "space group not known",
        ({"molfile": v2000(THREONINE), "space_group": "orthorhombic"},),
        unread=("malformed",),
    ),
]
