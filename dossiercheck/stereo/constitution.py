"""How the constitutions of two structures compare, before any stereo is looked at."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass

from rdkit import Chem
from rdkit.Chem import rdMolHash
from rdkit.Chem.MolStandardize import rdMolStandardize

from dossiercheck.stereo.formula import difference, molecular_formula
from dossiercheck.stereo.perception import quiet
from dossiercheck.stereo.structure import Structure

SAME = "same"
CHARGE = "charge form"
MOBILE = "mobile hydrogen"
TAUTOMER = "tautomer"
SALT = "salt form"
DIFFERENT = "different"


# As chemists write them, where Hill order reads oddly.
_USUAL = {"ClH": "HCl", "BrH": "HBr", "H3O4P": "H3PO4", "H2O4S": "H2SO4"}


@dataclass(frozen=True, slots=True)
class Constitution:
    """`verdict` is one of the constants above; `detail` says what differs, for a reader."""

    verdict: str
    detail: str = ""


def compare_constitution(one: Structure, two: Structure) -> Constitution:
    """Compare two constitutions, the narrowest likeness first.

    Charge form: equal once proton transfers are undone (an amine hydrochloride drawn as ions).
    Mobile hydrogen: equal in the formula, connection and hydrogen layers of the standard InChI.
    Tautomer: hydrogen and double bonds exchanged further than InChI's mobile hydrogen reaches.
    Salt form: the largest component is the same, the others differ.
    """
    if one.flat == two.flat:
        return Constitution(SAME)
    labels = _isotopes(one), _isotopes(two)
    if labels[0] != labels[1]:
        return Constitution(
            DIFFERENT, f"isotopes: {labels[0] or 'none'} against {labels[1] or 'none'}"
        )
    with quiet():
        parts = [Counter(_neutral(s.flat).split(".")) for s in (one, two)]
        if parts[0] == parts[1]:
            return Constitution(CHARGE, "drawn with other charges")
        # A zwitterion beside a charge that no proton balances (a sulfonium, a quaternary amine)
        # stays one above; with every proton put back it is the same as the cation it comes from.
        protonated = [Counter(_neutral(s.flat, force=True).split(".")) for s in (one, two)]
        if protonated[0] == protonated[1]:
            return Constitution(CHARGE, "drawn with a proton more or less")
        # Part by part, so that an acid is found in its sodium salt.
        alone = [Counter(_neutral(p) for p in s.flat.split(".")) for s in (one, two)]
        largest = [max(part, key=_weight) for part in alone]
        if (len(parts[0]) > 1 or len(parts[1]) > 1) and (
            largest[0] == largest[1] or _mobile(*largest)
        ):
            return Constitution(SALT, _components(*parts))
        if _mobile(one.flat, two.flat):
            return Constitution(MOBILE, "the same with a mobile hydrogen elsewhere")
        formulas = molecular_formula(one), molecular_formula(two)
        if formulas[0] == formulas[1] and _tautomer(one.flat, two.flat):
            return Constitution(TAUTOMER, "another tautomer")
    if formulas[0] == formulas[1]:
        return Constitution(DIFFERENT, f"both are {formulas[0]}, connected differently")
    return Constitution(DIFFERENT, difference(*formulas))


def parent(structure: Structure) -> str:
    """The largest component without charges and stereo, as SMILES: what a salt, a solvate and the
    free base or acid of a substance have in common."""
    with quiet():
        return max((_neutral(part) for part in structure.flat.split(".")), key=_weight)


def _neutral(smiles: str, force: bool = False) -> str:
    mol = Chem.MolFromSmiles(smiles)
    if mol is None:
        return smiles
    try:
        neutral = rdMolStandardize.Uncharger(True, force).uncharge(mol)
    except (RuntimeError, ValueError):
        return smiles
    return str(Chem.MolToSmiles(neutral))


def _isotopes(structure: Structure) -> str:
    """The isotopes stated, with their numbers, as text."""
    found = Counter(
        f"{atom.GetIsotope()}{atom.GetSymbol()}"
        for atom in structure.mol.GetAtoms()
        if atom.GetIsotope()
    )
    return ", ".join(f"{number} × {label}" for label, number in sorted(found.items()))


def _weight(smiles: str) -> tuple[int, int, str]:
    mol = Chem.MolFromSmiles(smiles)
    if mol is None:
        return (0, 0, smiles)
    carbons = sum(atom.GetAtomicNum() == 6 for atom in mol.GetAtoms())
    return (carbons, mol.GetNumHeavyAtoms(), smiles)


def _mobile(one: str, two: str) -> bool:
    """Equal formula, connections, hydrogens, charge and isotopes in the standard InChI."""
    layers = []
    for smiles in (one, two):
        mol = Chem.MolFromSmiles(smiles)
        inchi = Chem.MolToInchi(mol) if mol is not None else ""
        if not inchi:
            return False
        parts = inchi.split("/")
        layers.append(parts[1:2] + [part for part in parts[2:] if part[0] in "chqpi"])
    return layers[0] == layers[1]


def _tautomer(one: str, two: str) -> bool:
    hashes = set()
    for smiles in (one, two):
        mol = Chem.MolFromSmiles(smiles)
        if mol is None:
            return False
        hashes.add(rdMolHash.MolHash(mol, rdMolHash.HashFunction.HetAtomTautomerv2))
    return len(hashes) == 1


def _components(one: Counter[str], two: Counter[str]) -> str:
    """Which components only one side has, as formulas; `one` is the reference."""
    texts = []
    for title, extra in (("only in the reference", one - two), ("only here", two - one)):
        if extra:
            listed = " + ".join(
                f"{count} × {_formula(smiles)}" if count > 1 else _formula(smiles)
                for smiles, count in sorted(extra.items(), key=lambda item: _weight(item[0]))
            )
            texts.append(f"{title}: {listed}")
    return "; ".join(texts)


def _formula(smiles: str) -> str:
    mol = Chem.MolFromSmiles(smiles)
    text = smiles if mol is None else str(molecular_formula(Structure(mol, smiles)))
    return _USUAL.get(text, text)
