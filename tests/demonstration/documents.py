"""The documents of the dossier: what each says, in its own format.

Every value that a planted error may spoil is asked for through `say`, by document, substance and
field; every drawing through `draw`.
"""

from __future__ import annotations

import csv
import io
import re
from collections.abc import Callable, Iterable, Sequence

from tests.demonstration import office
from tests.demonstration import substances as s
from tests.demonstration.drawings import Edit, molblock, record
from tests.demonstration.substances import Substance

Say = Callable[[str, Substance, str, str], str]
Draw = Callable[[str, Substance], Edit | None]

ROOT = "m3/32-body-data/32s-drug-sub"
NOMENCLATURE = f"{ROOT}/32s1-gen-info/nomenclature.docx"
STRUCTURE = f"{ROOT}/32s1-gen-info/structure.sdf"
PROPERTIES = f"{ROOT}/32s1-gen-info/general-properties.txt"
MATERIALS = f"{ROOT}/32s2-manuf/starting-materials.csv"
MATERIAL_DRAWINGS = f"{ROOT}/32s2-manuf/starting-materials.sdf"
RACEMATE = f"{ROOT}/32s2-manuf/starting-material-1.mol"
INTERMEDIATES = f"{ROOT}/32s2-manuf/intermediates.xlsx"
INTERMEDIATE_DRAWINGS = f"{ROOT}/32s2-manuf/intermediates.sdf"
ROUTE = f"{ROOT}/32s2-manuf/route-description.md"
IMPURITIES = f"{ROOT}/32s3-charac/impurities.xlsx"
IMPURITY_DRAWINGS = f"{ROOT}/32s3-charac/impurities.sdf"
STEREOCHEMISTRY = f"{ROOT}/32s3-charac/stereochemistry.md"
SPECIFICATION = f"{ROOT}/32s4-contr-drug-sub/specification.tsv"
IDENTIFICATION = f"{ROOT}/32s4-contr-drug-sub/identification.txt"
STANDARDS = f"{ROOT}/32s5-ref-stand/reference-standards.sdf"


def documents(say: Say, draw: Draw) -> dict[str, bytes]:
    """Every document of the dossier, by its path."""
    texts = {
        STRUCTURE: _records(STRUCTURE, (s.DRUG, s.BASE), draw),
        PROPERTIES: _properties(say),
        MATERIALS: _materials(say),
        MATERIAL_DRAWINGS: _records(MATERIAL_DRAWINGS, s.MATERIALS[1:], draw),
        RACEMATE: molblock(s.ALDEHYDE, draw(RACEMATE, s.ALDEHYDE)),
        INTERMEDIATE_DRAWINGS: _records(INTERMEDIATE_DRAWINGS, s.INTERMEDIATES, draw),
        ROUTE: _route(say),
        IMPURITY_DRAWINGS: _impurity_drawings(say, draw),
        STEREOCHEMISTRY: _stereochemistry(say),
        SPECIFICATION: _specification(say),
        IDENTIFICATION: _identification(),
        STANDARDS: _standards(draw),
    }
    return {
        NOMENCLATURE: _nomenclature(say),
        INTERMEDIATES: _intermediates(say),
        IMPURITIES: _impurities(say),
        **{path: text.encode("utf-8") for path, text in texts.items()},
    }


def _records(path: str, substances: Iterable[Substance], draw: Draw) -> str:
    return "".join(record(one, {}, draw(path, one)) for one in substances)


def _nomenclature(say: Say) -> bytes:
    drug, base = s.DRUG, s.BASE

    def value(one: Substance, field: str, text: str) -> str:
        return say(NOMENCLATURE, one, field, text)

    rows = [
        ("Substance", drug.label),
        ("Company code", "BQT-2291"),
        ("Chemical name", value(drug, "name", drug.name).replace("-", "\u2011")),
        ("Molecular formula", value(drug, "formula", drug.parts)),
        ("Relative molecular mass", value(drug, "mass", drug.mass)),
        ("CAS registry number", value(drug, "registry", drug.registry)),
        ("SMILES", value(drug, "smiles", drug.line)),
        ("InChI", value(drug, "inchi", drug.inchi)),
        ("InChIKey", value(drug, "inchikey", drug.inchikey)),
        ("Stereochemistry", value(drug, "stereo", f"{drug.stereo}, {drug.counted}")),
    ]
    cells = [
        (
            office.paragraph(left),
            office.formula_paragraph(right) if "formula" in left else office.paragraph(right),
        )
        for left, right in rows
    ]
    return office.document(
        [
            office.heading("3.2.S.1 General information (Dorvaquelan tartrate)"),
            office.heading("3.2.S.1.1 Nomenclature", 2),
            office.paragraph("Invented by Brindlequay Therapeutics, an invented sponsor."),
            office.table(cells),
            office.heading("3.2.S.1.2 Structure", 2),
            office.paragraph("The drawn structures of salt and base are in structure.sdf."),
            office.paragraph(f"Substance: {base.label}"),
            office.paragraph(f"Systematic name: {value(base, 'name', base.other_name)}"),
            office.formula_paragraph(f"Molecular formula: {value(base, 'formula', base.formula)}"),
            office.paragraph(f"CAS registry number: {value(base, 'registry', base.registry)}"),
            office.paragraph(f"Stereochemistry: {value(base, 'stereo', base.stereo)}"),
        ]
    )


def _properties(say: Say) -> str:
    base = s.BASE
    return (
        "3.2.S.1.3 General properties\n"
        "\n"
        f"Substance: {base.label}\n"
        f"Chemical name: {say(PROPERTIES, base, 'name', base.name)}\n"
        f"Molecular formula: {say(PROPERTIES, base, 'formula', base.formula)}\n"
        f"Relative molecular mass: {say(PROPERTIES, base, 'mass', base.mass)}\n"
        f"InChIKey: {say(PROPERTIES, base, 'inchikey', base.inchikey)}\n"
        "\n"
        "White to off-white crystals, freely soluble in methanol, sparingly soluble in water.\n"
        "The specific rotation of Dorvaquelan is −31.4° (c 1.0, methanol, 20 °C, 589 nm).\n"
    )


def _delimited(rows: Iterable[Sequence[str]], delimiter: str) -> str:
    buffer = io.StringIO()
    csv.writer(buffer, delimiter=delimiter, lineterminator="\r\n").writerows(rows)
    return buffer.getvalue()


def _materials(say: Say) -> str:
    heading = (
        "Material",
        "Systematic name",
        "Other chemical name",
        "CAS registry number",
        "Molecular formula",
        "Relative molecular mass",
        "SMILES",
        "InChIKey",
        "Stereochemistry",
    )
    fields = ("name", "other_name", "registry", "formula", "mass", "line", "inchikey", "stereo")
    rows = [
        (one.label, *(say(MATERIALS, one, field, getattr(one, field)) for field in fields))
        for one in s.MATERIALS
    ]
    return _delimited([heading, *rows], ",")


def _intermediates(say: Say) -> bytes:
    rows = [
        (
            "Stage",
            "Intermediate",
            "Systematic name",
            "Molecular formula",
            "Relative molecular mass",
            "Other chemical name",
            "Stereochemistry",
        )
    ]
    stages = {0: "Pyrrolidine acid", 5: "Amino alcohol"}
    for number, one in enumerate(s.INTERMEDIATES):
        rows.append(
            (
                stages.get(number, ""),
                one.label,
                say(INTERMEDIATES, one, "name", one.name),
                say(INTERMEDIATES, one, "formula", one.parts),
                say(INTERMEDIATES, one, "mass", one.mass),
                say(INTERMEDIATES, one, "other_name", one.other_name),
                say(INTERMEDIATES, one, "stereo", one.stereo),
            )
        )
    widths = {"A": 16, "B": 16, "C": 60, "D": 24, "F": 60, "G": 24}
    return office.workbook("Intermediates", rows, ("A2:A6", "A7:A9"), widths)


def _route(say: Say) -> str:
    def name(one: Substance, text: str = "") -> str:
        return say(ROUTE, one, "name", text or one.name)

    return f"""# 3.2.S.2.2 Description of manufacturing process and process controls

## Stage 1: pyrrolidine acid

Starting material 1, {name(s.ALDEHYDE, s.ALDEHYDE.other_name)}, is separated on a chiral column.

The second band is Intermediate 1, {name(s.RESOLVED)}.

Olefination gives Intermediate 2, {name(s.ENOATE)}; the isomer of opposite geometry is controlled.

Cycloaddition gives Intermediate 3, {name(s.PYRROLIDINE)}, a pair of diastereomers.

With Reagent 1 ({name(s.LEUCINE, s.LEUCINE.other_name)}) one of the two crystallises.

The crystals are Intermediate 4, {name(s.LEUCINATE, s.LEUCINATE.other_name)}.

Acid hydrolysis gives Intermediate 5, {name(s.ACID_SALT)}.

## Stage 2: amino alcohol

Starting material 3 is epoxidised to Intermediate 6, {name(s.EPOXIDE)}, which is meso.

Starting material 2, {name(s.AMINE, s.AMINE.other_name)}, opens it.

The less soluble product is Intermediate 7, {name(s.AMINOALCOHOL)}.

Hydrogenolysis gives Intermediate 8, {name(s.AMINE_SALT)}.

## Stage 3: drug substance

Residual aldehyde is taken up with Reagent 2.

Intermediates 5 and 8 are coupled to Dorvaquelan, {name(s.BASE)}.

Reagent 3, {name(s.TARTARIC)}, converts it into the drug substance.
"""


def _impurities(say: Say) -> bytes:
    origin = {
        "A": "Enantiomer of the base",
        "B": "Epimerisation",
        "C": "Cycloaddition",
        "D": "Starting material 1",
        "E": "Intermediate 7",
        "F": "Intermediate 6",
        "G": "Demethylation",
        "H": "Hydrolysis",
        "I": "Intermediate 2",
        "J": "Dealkylation",
        "K": "Intermediate 4",
        "L": "Coupling",
        "M": "Starting material 3",
        "N": "Starting material 1",
        "O": "Demethylation and hydrolysis",
        "P": "Starting material 1",
        "Q": "Hydrodefluorination",
    }
    rows = [("Impurity", "Systematic name", "Origin", "SMILES", "Other chemical name")]
    rows += [
        (
            one.label,
            say(IMPURITIES, one, "name", one.name),
            origin[one.label[-1]],
            say(IMPURITIES, one, "line", one.line) if one.name else "",
            say(IMPURITIES, one, "other_name", one.other_name),
        )
        for one in s.IMPURITIES
    ]
    return office.workbook("Impurities", rows, (), {"A": 14, "B": 70, "C": 28, "D": 60, "E": 40})


def _impurity_drawings(say: Say, draw: Draw) -> str:
    fields = {
        "Molecular formula": "formula",
        "Relative molecular mass": "mass",
        "InChI": "inchi",
        "InChIKey": "inchikey",
    }
    # the minor ones, seen in development only, have no registered identifier
    minor = ("E", "J", "Q")
    parts = []
    for one in s.IMPURITIES:
        printed = {
            heading: say(IMPURITY_DRAWINGS, one, field, getattr(one, field))
            for heading, field in fields.items()
            if not (field.startswith("inchi") and one.label[-1] in minor)
        }
        parts.append(record(one, printed, draw(IMPURITY_DRAWINGS, one)))
    return "".join(parts)


def _stereochemistry(say: Say) -> str:
    base, mirror = s.BASE, s.IMPURITIES[0]
    parts = [
        "# 3.2.S.3.1 Elucidation of structure and other characteristics\n",
        "## Absolute configuration\n",
        f"Dorvaquelan, {_emphasised(base.name)}, was correlated with its salt by crystallography.\n",
        f"Impurity A, {mirror.name}, is its enantiomer.\n",
        "## Stereochemistry of the impurities\n",
    ]
    for one in s.IMPURITIES:
        stated = say(STEREOCHEMISTRY, one, "stereo", f"{one.stereo}, {one.counted}")
        parts.append(f"Substance: {one.label}\nStereochemistry: {stated}\n")
    return "\n".join(parts)


def _emphasised(name: str) -> str:
    """A name with its descriptors in Markdown's italics."""
    return re.sub(r"(?<=\d)([RS])(?=[,)])", r"*\1*", name)


def _specification(say: Say) -> str:
    limits = {"A": "0.10", "B": "0.15", "D": "0.15", "G": "0.15", "H": "0.15", "O": "0.10"}
    rows = [("Impurity", "Chemical name", "Limit (per cent)")]
    rows += [
        (one.label, say(SPECIFICATION, one, "name", one.name), limits[one.label[-1]])
        for one in s.IMPURITIES
        if one.label[-1] in limits
    ]
    drug = s.DRUG
    # the company code is an alias in the settings
    rows.append(("BQT-2291", say(SPECIFICATION, drug, "name", drug.other_name), ""))
    return _delimited(rows, "\t")


def _identification() -> str:
    return (
        "3.2.S.4.2 Analytical procedures\n"
        "\n"
        "Identity is tested by infrared spectrum, and on a chiral column against the standard.\n"
    )


def _standards(draw: Draw) -> str:
    return "".join(
        record(one, {"Lot": f"RS-{number:03d}"}, draw(STANDARDS, one))
        for number, one in enumerate((s.BASE, *(s.IMPURITIES[n] for n in (0, 1, 8, 10))), start=1)
    )
