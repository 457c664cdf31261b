"""The quick answer for the usual case: both are one and the same stereoisomer."""

from __future__ import annotations

from rdkit import Chem
from rdkit.Chem import rdqueries

from dossiercheck.stereo.cip.molecule import HYDROGEN, LONE_PAIR
from dossiercheck.stereo.graph import Centre, Geometry
from dossiercheck.stereo.graph import same_centre as _same_centre
from dossiercheck.stereo.graph import same_geometry as _same_geometry
from dossiercheck.stereo.structure import Structure, geometry, marked_atoms, stereo_bonds

_CHARGED = rdqueries.FormalChargeEqualsQueryAtom(0, negate=True)
_CHIRAL = Chem.SubstructMatchParameters()
_CHIRAL.useChirality = True
_CHIRAL.maxMatches = 1

# The library looks at chirality only once every atom is placed, so that a peptide with one
# inverted centre and k phenyl rings costs it 2 to the k placements: 60 residues ran for minutes.
_PLACEMENTS = 200


class _TooMany(Exception):
    """More placements than the quick answer is worth."""


class _Counter:
    """Counts the placements that the library proposes, and stops it."""

    seen = 0

    def __call__(self, _mol: Chem.Mol, _atoms: object) -> bool:
        self.seen += 1
        if self.seen > _PLACEMENTS:
            raise _TooMany
        return True


_COUNTER = _Counter()
_CHIRAL.setExtraFinalCheck(_COUNTER)


def same_stereoisomer(one: Structure, two: Structure) -> dict[int, int]:
    """A mapping that shows both to be one stereoisomer, or {} where none was found quickly.

    The library proposes the mapping; every unit is then compared under it by our own parities,
    and neither side may carry a mark that the other lacks. {} means "look closer".
    """
    if one.mol.GetNumAtoms() != two.mol.GetNumAtoms() or one.hill != two.hill:
        return {}
    # The library lets an uncharged atom match a charged one: a zwitterion is not its neutral form.
    if len(one.mol.GetAtomsMatchingQuery(_CHARGED)) != len(two.mol.GetAtomsMatchingQuery(_CHARGED)):
        return {}
    if one.doubt:
        return {}
    units = one.units
    if len(marked_atoms(two)) + len(stereo_bonds(two)) != len(units):
        return {}
    _COUNTER.seen = 0
    try:
        found = two.mol.GetSubstructMatch(one.mol, _CHIRAL)
    except _TooMany:
        return {}
    if not found:
        return {}
    mapping = dict(enumerate(found))
    for unit in units:
        image = tuple(mapping[atom] for atom in unit.atoms)
        if unit.kind == "centre":
            here, there = _centre(one, unit.atoms[0]), _centre(two, image[0])
            if not (here and there and _same_centre(here, there, mapping)):
                return {}
        else:
            bond, other = _bond(one, unit.atoms), _bond(two, image)
            if not (bond and other and _same_geometry(bond, other, mapping)):
                return {}
    return mapping


def _centre(structure: Structure, index: int) -> Centre | None:
    atom = structure.mol.GetAtomWithIdx(index)
    tag = atom.GetChiralTag()
    if tag not in (Chem.ChiralType.CHI_TETRAHEDRAL_CCW, Chem.ChiralType.CHI_TETRAHEDRAL_CW):
        return None
    order = [other.GetIdx() for other in atom.GetNeighbors()]
    if len(order) == 3:
        order.append(HYDROGEN if atom.GetTotalNumHs() else LONE_PAIR)
    sign = 1 if tag == Chem.ChiralType.CHI_TETRAHEDRAL_CCW else -1
    return Centre(tuple(order), sign)


def _bond(structure: Structure, atoms: tuple[int, ...]) -> Geometry | None:
    if structure.mol.GetBondBetweenAtoms(*atoms) is None:
        return None
    shown = geometry(structure.mol, atoms)
    return Geometry((atoms[0], atoms[1]), shown[:2], shown[2]) if shown else None
