"""The substances of the demonstration: all invented, or common reagents under their own names.

A structure is written once, as SMILES with enhanced-stereo groups; names are written by hand.
Everything else that the dossiers print (formula, mass, InChI, InChIKey, drawings) is computed
from the SMILES, so that the clean dossier agrees with itself by construction and the tests may
hold the hand-written names against it.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from rdkit import Chem
from rdkit.Chem.rdMolDescriptors import CalcMolFormula

# Abridged standard atomic weights, IUPAC Commission on Isotopic Abundances and Atomic Weights
# (Prohaska et al., Pure Appl. Chem. 2022, 94, 573, table 2); the elements of the demonstration.
WEIGHTS = {
    "H": 1.008,
    "C": 12.011,
    "N": 14.007,
    "O": 15.999,
    "F": 18.998,
    "Cl": 35.45,
}


@dataclass(frozen=True)
class Substance:
    """`number` is the first part of an invented registry number; `stereo` the statement that the
    dossier makes; `centres` how many stereogenic centres it says there are."""

    label: str
    smiles: str
    name: str
    stereo: str
    other_name: str = ""
    number: int = 0
    centres: int = 0

    @cached_property
    def mol(self) -> Chem.Mol:
        """The structure, with enhanced-stereo groups where the SMILES carries them."""
        return Chem.MolFromSmiles(self.smiles)

    @property
    def mixed(self) -> bool:
        """True where a line notation without enhanced stereo cannot say what is meant."""
        return "|" in self.smiles

    @property
    def counted(self) -> str:
        """How many stereocentres there are, in words."""
        number = ("no", "one", "two", "three", "four", "five", "six", "seven")[self.centres]
        return f"{number} stereocentre{'' if self.centres == 1 else 's'}"

    @property
    def line(self) -> str:
        """Canonical SMILES; without stereo marks for a racemate (common practice), with the
        groups of extended SMILES for a relative configuration."""
        if self.stereo == "relative configuration":
            whole = Chem.CanonicalizeStereoGroups(self.mol)
            only = Chem.CXSmilesFields.CX_ENHANCEDSTEREO
            return Chem.MolToCXSmiles(whole, Chem.SmilesWriteParams(), only)
        return Chem.MolToSmiles(self.mol, isomericSmiles=not self.mixed)

    @property
    def inchi(self) -> str:
        """Standard InChI; without stereo for a racemic or relative structure, which it cannot say."""
        line = Chem.MolToSmiles(self.mol, isomericSmiles=not self.mixed)
        return Chem.MolToInchi(Chem.MolFromSmiles(line))

    @property
    def inchikey(self) -> str:
        """InChIKey of `inchi`."""
        return Chem.InchiToInchiKey(self.inchi)

    @property
    def formula(self) -> str:
        """Hill formula of everything drawn together."""
        return CalcMolFormula(self.mol)

    @property
    def parts(self) -> str:
        """Formula component by component, largest first: `C20H29FN2O4 · C4H6O6`."""
        whole = sorted(Chem.GetMolFrags(self.mol, asMols=True), key=lambda m: -m.GetNumAtoms())
        return " · ".join(CalcMolFormula(part) for part in whole)

    @property
    def mass(self) -> str:
        """Relative molecular mass with two decimals."""
        atoms = Chem.AddHs(self.mol).GetAtoms()
        return f"{sum(WEIGHTS[atom.GetSymbol()] for atom in atoms):.2f}"

    @property
    def registry(self) -> str:
        """An invented number of the registry's form with a valid check digit; "" for none.

        Check digit: sum of digits times their position from the right, modulo 10.
        """
        if not self.number:
            return ""
        digits = str(self.number)
        total = sum(n * int(d) for n, d in enumerate(reversed(digits), start=1))
        return f"{digits[:-2]}-{digits[-2:]}-{total % 10}"


_ARYL = "{3-[(2S)-butan-2-yloxy]-4-fluorophenyl}"
_ACID = f"(3S,4R)-4-{_ARYL}-1-methylpyrrolidine-3-carboxyl"
_BASE = f"(3S,4R)-4-{_ARYL}-N-[(3R,4S)-4-hydroxyoxolan-3-yl]-1-methylpyrrolidine-3-carboxamide"

DRUG = Substance(
    "Dorvaquelan tartrate",
    "CC[C@H](C)Oc1cc(ccc1F)[C@H]1[C@@H](CN(C1)C)C(=O)N[C@@H]1COC[C@H]1O"
    ".OC(=O)[C@H](O)[C@@H](O)C(O)=O",
    f"{_BASE} (2R,3R)-2,3-dihydroxybutanedioic acid (1:1)",
    "single enantiomer",
    other_name=(
        "(3R,4S)-3-{3-[(2S)-butan-2-yloxy]-4-fluorophenyl}-4-{[(3R,4S)-4-hydroxyoxolan-3-yl]"
        "carbamoyl}-1-methylpyrrolidin-1-ium (2R,3R)-3-carboxy-2,3-dihydroxypropanoate"
    ),
    number=990041731,
    centres=7,
)
BASE = Substance(
    "Dorvaquelan",
    "CC[C@H](C)Oc1cc(ccc1F)[C@H]1[C@@H](CN(C1)C)C(=O)N[C@@H]1COC[C@H]1O",
    _BASE,
    "single enantiomer",
    other_name=(
        "(3S,4R)-4-[3-[(1S)-1-methylpropoxy]-4-fluoro-phenyl]-N-[(3R,4S)-4-hydroxytetrahydrofuran"
        "-3-yl]-1-methyl-pyrrolidine-3-carboxamide"
    ),
    number=990041808,
    centres=5,
)

# Starting materials and reagents.
ALDEHYDE = Substance(
    "Starting material 1",
    "CC[C@@H](C)Oc1cc(C=O)ccc1F |&1:2|",
    "rac-3-[(2R)-butan-2-yloxy]-4-fluorobenzaldehyde",
    "racemate",
    other_name="3-[(2RS)-butan-2-yloxy]-4-fluorobenzaldehyde",
    number=990042112,
    centres=1,
)
AMINE = Substance(
    "Starting material 2",
    "C[C@H](N)c1ccccc1",
    "(1S)-1-phenylethan-1-amine",
    "single enantiomer",
    other_name="(αS)-α-methylbenzenemethanamine",
    number=990042265,
    centres=1,
)
FURAN = Substance(
    "Starting material 3",
    "C1OCC=C1",
    "2,5-dihydrofuran",
    "achiral",
    number=990042387,
)
LEUCINE = Substance(
    "Reagent 1",
    "CC(=O)N[C@@H](CC(C)C)C(=O)O",
    "N-acetyl-L-leucine",
    "single enantiomer",
    other_name="(2S)-2-acetamido-4-methylpentanoic acid",
    centres=1,
)
DIONE = Substance(
    "Reagent 2", "CC1(C)CC(=O)CC(=O)C1", "5,5-dimethylcyclohexane-1,3-dione", "achiral"
)
TARTARIC = Substance(
    "Reagent 3",
    "OC(=O)[C@H](O)[C@@H](O)C(O)=O",
    "(2R,3R)-2,3-dihydroxybutanedioic acid",
    "single enantiomer",
    other_name="L-(+)-tartaric acid",
    centres=2,
)

# Intermediates.
RESOLVED = Substance(
    "Intermediate 1",
    "CC[C@H](C)Oc1cc(C=O)ccc1F",
    "3-[(2S)-butan-2-yloxy]-4-fluorobenzaldehyde",
    "single enantiomer",
    other_name="4-fluoro-3-[(1S)-1-methylpropoxy]benzaldehyde",
    centres=1,
)
ENOATE = Substance(
    "Intermediate 2",
    "CC[C@H](C)Oc1cc(ccc1F)/C=C/C(=O)OCC",
    f"ethyl (2E)-3-{_ARYL}prop-2-enoate",
    "single enantiomer",
    other_name="ethyl (2E)-3-[4-fluoro-3-[(1S)-1-methylpropoxy]phenyl]acrylate",
    centres=1,
)
PYRROLIDINE = Substance(
    "Intermediate 3",
    "CC[C@H](C)Oc1cc(ccc1F)[C@@H]1[C@H](CN(C1)C)C(=O)OCC |a:2,&1:12,13|",
    f"ethyl (3RS,4SR)-4-{_ARYL}-1-methylpyrrolidine-3-carboxylate",
    "racemic at the pyrrolidine",
    other_name=f"ethyl rac-(3R,4S)-4-{_ARYL}-1-methylpyrrolidine-3-carboxylate",
    centres=3,
)
LEUCINATE = Substance(
    "Intermediate 4",
    "CC[C@H](C)Oc1cc(ccc1F)[C@H]1[C@@H](CN(C1)C)C(=O)OCC.CC(=O)N[C@@H](CC(C)C)C(=O)O",
    f"ethyl {_ACID}ate N-acetyl-L-leucinate",
    "single enantiomer",
    other_name=f"ethyl {_ACID}ate (2S)-2-acetamido-4-methylpentanoic acid (1:1)",
    centres=4,
)
ACID_SALT = Substance(
    "Intermediate 5",
    "CC[C@H](C)Oc1cc(ccc1F)[C@H]1[C@@H](CN(C1)C)C(=O)O.Cl",
    f"{_ACID}ic acid hydrochloride",
    "single enantiomer",
    centres=3,
)
EPOXIDE = Substance(
    "Intermediate 6",
    "[C@H]12COC[C@@H]2O1",
    "(1R,5S)-3,6-dioxabicyclo[3.1.0]hexane",
    "meso",
    other_name="(1S,5R)-3,6-dioxabicyclo[3.1.0]hexane",
    centres=2,
)
AMINOALCOHOL = Substance(
    "Intermediate 7",
    "c1ccccc1[C@H](C)N[C@H]1[C@@H](COC1)O",
    "(3S,4R)-4-{[(1S)-1-phenylethyl]amino}oxolan-3-ol",
    "single enantiomer",
    centres=3,
)
AMINE_SALT = Substance(
    "Intermediate 8",
    "N[C@H]1[C@@H](COC1)O.Cl",
    "(3S,4R)-4-aminooxolan-3-ol hydrochloride",
    "single enantiomer",
    centres=2,
)

# Impurities. A to F are stereoisomers of the drug substance's base.
IMPURITIES = (
    Substance(
        "Impurity A",
        "CC[C@@H](C)Oc1cc(ccc1F)[C@@H]1[C@H](CN(C1)C)C(=O)N[C@H]1COC[C@@H]1O",
        "(3R,4S)-4-{3-[(2R)-butan-2-yloxy]-4-fluorophenyl}-N-[(3S,4R)-4-hydroxyoxolan-3-yl]"
        "-1-methylpyrrolidine-3-carboxamide",
        "single enantiomer",
        centres=5,
    ),
    Substance(
        "Impurity B",
        "CC[C@H](C)Oc1cc(ccc1F)[C@H]1[C@H](CN(C1)C)C(=O)N[C@@H]1COC[C@H]1O",
        f"(3R,4R)-4-{_ARYL}-N-[(3R,4S)-4-hydroxyoxolan-3-yl]-1-methylpyrrolidine-3-carboxamide",
        "single enantiomer",
        centres=5,
    ),
    Substance(
        "Impurity C",
        "CC[C@H](C)Oc1cc(ccc1F)[C@@H]1[C@@H](CN(C1)C)C(=O)N[C@@H]1COC[C@H]1O",
        f"(3S,4S)-4-{_ARYL}-N-[(3R,4S)-4-hydroxyoxolan-3-yl]-1-methylpyrrolidine-3-carboxamide",
        "single enantiomer",
        centres=5,
    ),
    Substance(
        "Impurity D",
        "CC[C@@H](C)Oc1cc(ccc1F)[C@H]1[C@@H](CN(C1)C)C(=O)N[C@@H]1COC[C@H]1O",
        "(3S,4R)-4-{3-[(2R)-butan-2-yloxy]-4-fluorophenyl}-N-[(3R,4S)-4-hydroxyoxolan-3-yl]"
        "-1-methylpyrrolidine-3-carboxamide",
        "single enantiomer",
        centres=5,
    ),
    Substance(
        "Impurity E",
        "CC[C@H](C)Oc1cc(ccc1F)[C@H]1[C@@H](CN(C1)C)C(=O)N[C@H]1COC[C@@H]1O",
        f"(3S,4R)-4-{_ARYL}-N-[(3S,4R)-4-hydroxyoxolan-3-yl]-1-methylpyrrolidine-3-carboxamide",
        "single enantiomer",
        centres=5,
    ),
    Substance(
        "Impurity F",
        "CC[C@H](C)Oc1cc(ccc1F)[C@H]1[C@@H](CN(C1)C)C(=O)N[C@@H]1COC[C@@H]1O",
        f"(3S,4R)-4-{_ARYL}-N-[(3R,4R)-4-hydroxyoxolan-3-yl]-1-methylpyrrolidine-3-carboxamide",
        "single enantiomer",
        centres=5,
    ),
    Substance(
        "Impurity G",
        "CC[C@H](C)Oc1cc(ccc1F)[C@H]1[C@@H](CNC1)C(=O)N[C@@H]1COC[C@H]1O",
        f"(3S,4R)-4-{_ARYL}-N-[(3R,4S)-4-hydroxyoxolan-3-yl]pyrrolidine-3-carboxamide",
        "single enantiomer",
        centres=5,
    ),
    Substance(
        "Impurity H",
        "CC[C@H](C)Oc1cc(ccc1F)[C@H]1[C@@H](CN(C1)C)C(=O)O",
        f"{_ACID}ic acid",
        "single enantiomer",
        centres=3,
    ),
    Substance(
        "Impurity I",
        "CC[C@H](C)Oc1cc(ccc1F)/C=C\\C(=O)OCC",
        f"ethyl (2Z)-3-{_ARYL}prop-2-enoate",
        "single enantiomer",
        centres=1,
    ),
    Substance(
        "Impurity J",
        "Oc1cc(ccc1F)[C@H]1[C@@H](CN(C1)C)C(=O)N[C@@H]1COC[C@H]1O",
        "(3S,4R)-4-(4-fluoro-3-hydroxyphenyl)-N-[(3R,4S)-4-hydroxyoxolan-3-yl]"
        "-1-methylpyrrolidine-3-carboxamide",
        "single enantiomer",
        centres=4,
    ),
    Substance(
        "Impurity K",
        "CC[C@H](C)Oc1cc(ccc1F)[C@H]1[C@@H](CN(C1)C)C(=O)OCC",
        f"ethyl {_ACID}ate",
        "single enantiomer",
        centres=3,
    ),
    Substance(
        "Impurity L",
        "O[C@H]1[C@@H](COC1)NC(=O)N[C@@H]1COC[C@H]1O",
        "N,N′-bis[(3R,4S)-4-hydroxyoxolan-3-yl]urea",
        "single enantiomer",
        centres=4,
    ),
    Substance(
        "Impurity M",
        "O1C[C@H]([C@H](C1)O)O",
        "(3R,4S)-oxolane-3,4-diol",
        "meso",
        centres=2,
    ),
    Substance(
        "Impurity N",
        "C(CCC)Oc1cc(ccc1F)[C@@H]1[C@H](CN(C1)C)C(=O)OCC |o1:12,13|",
        "ethyl rel-(3R,4S)-4-(3-butoxy-4-fluorophenyl)-1-methylpyrrolidine-3-carboxylate",
        "relative configuration",
        other_name=(
            "ethyl (3R*,4S*)-4-(3-butoxy-4-fluorophenyl)-1-methylpyrrolidine-3-carboxylate"
        ),
        centres=2,
    ),
    Substance(
        "Impurity O",
        "CC[C@H](C)Oc1cc(ccc1F)[C@H]1[C@@H](CNC1)C(=O)O",
        f"(3S,4R)-4-{_ARYL}pyrrolidine-3-carboxylic acid",
        "single enantiomer",
        centres=3,
    ),
    Substance(
        "Impurity P",
        "CC[C@H](C)Oc1cc(ccc1Cl)[C@H]1[C@@H](CN(C1)C)C(=O)N[C@@H]1COC[C@H]1O",
        "(3S,4R)-4-{3-[(2S)-butan-2-yloxy]-4-chlorophenyl}-N-[(3R,4S)-4-hydroxyoxolan-3-yl]"
        "-1-methylpyrrolidine-3-carboxamide",
        "single enantiomer",
        centres=5,
    ),
    # Drawn only: it has no systematic name in the dossier.
    Substance(
        "Impurity Q",
        "CC[C@H](C)Oc1cccc(c1)[C@H]1[C@@H](CN(C1)C)C(=O)N[C@@H]1COC[C@H]1O",
        "",
        "single enantiomer",
        centres=5,
    ),
)

MATERIALS = (ALDEHYDE, AMINE, FURAN, LEUCINE, DIONE, TARTARIC)
INTERMEDIATES = (
    RESOLVED,
    ENOATE,
    PYRROLIDINE,
    LEUCINATE,
    ACID_SALT,
    EPOXIDE,
    AMINOALCOHOL,
    AMINE_SALT,
)
ALL = (DRUG, BASE, *MATERIALS, *INTERMEDIATES, *IMPURITIES)
