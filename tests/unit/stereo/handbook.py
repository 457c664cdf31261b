"""Structures whose descriptors are published, each with the section of IUPAC 2013 it belongs to.

Source: the validation suite of R. M. Hanson, S. Musacchio, J. W. Mayfield, M. J. Vainio,
A. Yerin and D. Redkin, J. Chem. Inf. Model. 2018, 58, 1755 (its entry number stands first); the
sections are those of the IUPAC Recommendations 2013 that the suite cites for the entry, and the
sequence rule that decides stands last. Descriptors are written "atom number in the SMILES, from
1, and letter"; a double bond is cited at both of its atoms.
"""

from __future__ import annotations

import re

PUBLISHED = r"""
VS003 | C[S@@](=O)C | | P-93.3.3.2 | two ligands equal
VS005 | OC=1C=CC=CC1[C@H](C2=CC=CC=C2O)O | | | two ligands equal
VS007 | O[C@@H](C=1C=CC=C[13CH]1)C=2[13CH]=CC=CC2 | | | two ligands equal
VS008 | C=1[C@@H]2C=C[C@H](C1)C=C2 | | P-93.5.2.3 | three ligands equal
VS013 | CC\C(\C(\C)=N\O)=N\O | 3Z 4E 6E 8Z | P-93.4.2.1.3 | 1a
VS014 | [O-][N+](C=1C=CC(=CC1)[S@@](OCC)=O)=O | 9R | P-93.3.4.1 | 1a
VS015 | [SiH3][C@]([GeH3])(OC)SC | 2R | P-92.2.1.1.1 | 1a
VS016 | O=C([C@H]([C@H]([C@@H](C(O)=O)Cl)Cl)Cl)O | 3R 5R | P-93.4.1.2 | 1a
VS017 | O=C([C@@H]([C@H]([C@H](C(O)=O)Cl)Cl)Cl)O | 3S 5S | P-93.4.1.2 | 1a
VS018 | C1[C@@H]2C=C[C@H](CCCCCC\C=C\C1)CC2 | 2S 5R 12E 13E | P-93.5.2.3 | 1a
VS019 | C1CCCCC\C=C\C1 | 7E 8E | P-93.5.1.4.1 | 1a
VS020 | CCCCCCCCCC/C(=C(\C#N)/Br)/I | 11Z 12Z | P-92.4.1 | 1a
VS021 | C[C@H](CC)O | 2R | P-93.1.1 | 1a
VS022 | C[C@](CC)([2H])O | 2S | P-93.4.1.1 | 1a
VS024 | C[C@H]1[C@@H]2CC[C@H]1[C@H](C2=O)Br | 2S 3S 6R 7R | P-93.5.2.1 | 1a
VS027 | Cl[C@@H]([C@H]1CCCO1)F | 2S 3R | | 1a
VS028 | C[C@H]1CCC[C@@]12C[C@H](CCC2)C | 2S 6R 8S | P-93.5.3.1 | 1a
VS031 | [Br-].C[N@+](C=1C=CC=CC1)(CC=2C=CC=CC2)CC=C | 3R | P-93.2.2 | 1a
VS032 | O[C@H](/C=N\C)C1=NC=CC=C1 | 2S 3Z 4Z | | 1a
VS036 | N(=N\C1=CC=CC=C1)\C2=CC=CC=C2 | 1Z 2Z | P-93.4.2.1.3 | 1a
VS038 | CC(C)O[P@](C)(F)=O | 5R | | 1a
VS041 | C/C(=C/1\C=2C(=CC=CC2)C=C1)/CC | 2E 3E | P-93.5.1.4.2.1 | 1a
VS045 | CC[N@@+](C=1C=CC=CC1)([O-])C | 3S | P-93.2.3 | 1a
VS047 | O=C(O)[C@H]([C@H](C)Cl)O | 4R 5S | P-93.4.1.2 | 1a
VS050 | C1[C@H]2[C@@H](C[C@H]3[C@@H]1CCCC3)CCCC2 | 2S 3R 5S 6R | P-93.5.4.1 | 1a
VS060 | C/C=C\C | 2Z 3Z | P-91.3 | 1a
VS061 | C/C=C/C | 2E 3E | P-93.4.2.1.1 | 1a
VS064 | CC[C@H](C1CC1)Cl | 3R | P-92.2.1.3 | 1a
VS071 | O=[P@@](C=1C=CC=CC1)(C)CCC | 2S | P-93.2.3 | 1a
VS074 | C[S@](=O)C=1C=CC=CC1 | 2S | P-93.3.4.1 | 1a
VS080 | C[C@H]1[C@H](CCCC1)C | 2R 3S | P-92.2.1.3 | 1a
VS090 | C[C@H](C=C)O | 2R | P-92.1.4.2 | 1a
VS092 | O[C@H](CO)C=O | 2R | P-92.2.1.2 | 1a
VS094 | Cl[C@@H](C=1C=CC=CC1)CC | 2R | P-91.3 | 1a
VS096 | O/N=C(\C1=CC=C(C=C1)Cl)/C2=CC=CC=C2 | 2Z 3Z | P-93.4.2.1.3 | 1a
VS098 | O[C@H]1[C@@H](CC[C@H](C1)C)C(C)C | 2R 3S 6R | P-93.5.1.1.1 | 1a
VS104 | C[Si@H](CCC)O | 2R | P-93.2.6 | 1a
VS106 | N1CC[C@@H]2[C@@H]1CCCC2 | 4R 5S | P-93.5.4.1 | 1a
VS110 | ClC1=CC=C(C=C1)/C(=C/C2=CC=CC=C2)/C3=CC=CC=C3 | 8E 9E | P-93.4.2.1.1 | 1a
VS119 | C[C@H]([C@@](C)(Cl)[2H])Cl | 2R 3R | P-93.4.1.2 | 1a
VS138 | C[P@@](C=1C=CC=CC1)CCC | 2R | P-93.3.4.1 | 1a
VS148 | O=C(\C=C\C(=O)O)O | 3E 4E | P-93.4.2.1.1 | 1a
VS162 | Cl[C@H](Br)F | 2R | P-91.3 | 1a
VS171 | O[C@@H](C(CCC1CC1)(CCC2CC2)CCC3CC3)C45CCC(CC4)CC5 | 2S | P-92.2.2 | 1b
VS172 | C1[C@H]2CC=C[C@@H]12 | 2R 6S | P-92.2.2 | 1b
VS175 | C[C@](CC)(CO)[13CH2]C | 2R | | 2
VS179 | O[C@@H](C[125I])CI | 2S | P-92.3 | 2
VS181 | [2H][C@@H](Br)Cl | 2R | | 2
VS182 | C[C@H](O)[2H] | 2R | P-92.3 | 2
VS184 | C\C=C\[2H] | 2E 3E | P-93.4.2.1.1 | 2
VS188 | C\C=C/1\C/C(/C1)=C\C | 2E 3E 5E 7E | P-92.4.2 | 3
VS194 | C/C=C\CCC[C@@H](CCC/C=C/C)O | 2Z 3Z 7R 11E 12E | P-92.4.2 | 3
VS195 | C/C=C\C[C@@H](C/C=C/C)O | 2Z 3Z 5R 7E 8E | P-93.4.2.4 | 3
VS196 | Cl[C@H]1[C@H]([C@H]([C@@H]([C@@H]([C@H]1Cl)Cl)Cl)Cl)Cl | 2R 3S 4S 5R 6S 7R | P-93.5.1.1.2 | 4b
VS197 | Cl[C@H]1[C@@H]([C@H]([C@@H]([C@@H]([C@H]1Cl)Cl)Cl)Cl)Cl | 2R 3R 4R 5R 6S 7S | P-92.5.2.2 | 4b
VS199 | O=C([C@H]([C@H]([C@@H]([C@@H]([C@H](C(O)=O)Cl)Cl)Cl)Cl)Cl)O | 3R 4R 5R 6R 7S | P-92.5.2.2 | 4b
VS206 | C[C@@H]1CC[C@@H](CC1)[C@@H]2CC[C@@H](CC2)C | 2s 5s 8s 11s | P-93.5.7.2 | 5
VS209 | Cl[C@@H]1[C@H]([C@@H]([C@H]([C@@H]([C@H]1Cl)Cl)Cl)Cl)Cl | 2r 3r 4r 5r 6r 7r | P-93.5.1.1.2 | 5
VS210 | Cl[C@H]1[C@H]([C@H]([C@H]([C@H]([C@H]1Cl)Cl)Cl)Cl)Cl | 2s 3s 4s 5s 6s 7s | P-93.5.1.1.2 | 5
VS211 | C1[C@@H]2CCCC[C@@H]2CCC1 | 2s 7s | P-93.5.4.1 | 5
VS212 | C1[C@@H]2CCCC[C@H]2CCC1 | 2r 7r | P-93.5.4.1 | 5
VS213 | O[C@H]1CC[C@@](CC1)(Cl)C | 2r 5r | P-93.5.1.1.2 | 5
VS214 | CC[C@@H]1CC/C(/CC1)=C\2/CC[C@H](CC2)CC | 3s 6E 9E 12s | P-93.5.1.4.2.2 | 5
VS219 | O[C@H]1C[C@@H](C1)O | 2r 4r | P-92.6 | 5
VS221 | O[C@@H]1CC[C@H](CC1)O | 2r 5r | P-93.5.1.1.2 | 5
VS222 | O[C@H]1CC[C@H](CC1)O | 2s 5s | P-93.5.1.1.2 | 5
VS227 | O=C([C@H]([C@@H]([C@H](C(O)=O)Cl)Cl)Cl)O | 3R 4r 5S | P-93.4.1.2 | 5
VS228 | O=C([C@H]([C@H]([C@H](C(O)=O)Cl)Cl)Cl)O | 3R 4s 5S | P-93.4.1.2 | 5
VS229 | C/C=C(/[C@H](Cl)C)\[C@H](C)Cl | 2e 3e 4R 7S | P-92.6 | 5
VS230 | S[C@H]1[C@H](C[C@H](C1)S)S | 2R 3S 5r | P-93.5.1.1.1 | 5
VS235 | CN1[C@@H]2C[C@H](C[C@H]1CC2)OC([C@H](CO)C=3C=CC=CC3)=O | 3S 5r 7R 12S | P-93.5.2.2.1 | 5
VS236 | C[C@@H]([C@H]([C@@H](C)S)S)S | 2S 3r 4R | P-92.6 | 5
VS238 | C[C@H]1[C@H]2CCC[C@@H]1CC2 | 2s 3S 7R | | 5
VS246 | C/C=C/1\CC[C@H](C)CC1 | 2z 3z 6R | | 5
VS247 | O/N=C/1\CC[C@@H](CC1)C | 2z 3z 6R | P-93.5.1.4.2.2 | 5
VS251 | C[C@H]([C@@H]([C@H](C([C@@H](C)Cl)[C@H](Cl)C)O)[C@H](C)Cl)Cl | 2R 3s 4S 6R 9R 13S | P-92.5.1 | 4a
VS254 | Cl[C@H]1[C@@H]([C@H]([C@H]([C@@H]([C@H]1Cl)Cl)Cl)Cl)Cl | 2S 3r 4R 5S 6r 7R | P-93.5.1.1.2 | 4b
VS257 | Cl[C@H]([C@@H]1CC[C@H](CC1)C)C | 2S 3r 6S | | 4b
VS260 | C[C@@H]1CC[C@@H](CC1)[C@@H]2CC[C@@H](C[C@@H]2O)C | 2R 5s 8S 11S 13S | P-93.5.7.2 | 4b
VS276 | C[C@H]([C@@H]([C@H]([C@@H]([C@@H](C)Cl)[C@@H](Cl)C)O)[C@H](C)Cl)Cl | 2R 3s 4R 5r 6R 9S 13S | P-92.5.3 | 4c
VS279 | O[C@@H](C[C@H]1CC[C@@H](CC1)C)C[C@@H]2CC[C@@H](CC2)C | 2R 4r 7S 12s 15S | P-93.6 | 4c
VS285 | O=C1[C@]2(NCC1)C(CCN2)=O | 3R | P-93.5.3.2 | 6
VS286 | C1[C@@]2(CC[C@]13CCCC3)C[C@@]4(CC2)CCCC4 | 2S | P-93.5.3.2 | 6
VS288 | O=C1[C@@]2(CCCC2=O)CCC1 | 3S | P-93.5.3.2 | 6
VS291 | C1[C@@]2(OCC1)OCCC2 | 2R | P-93.5.3.2 | 6
VS294 | O[C@H]1O[C@@]2(O[C@H]1O)O[C@H]([C@H](O2)O)O | 2S 4R 6R 9R 10S | | 6
VS298 | Cl[C@H]1C[C@]2(C1)C[C@H](C2)Cl | 2R 4S 7R | P-93.5.3.5 | 6
"""


def entries() -> list[tuple[str, str, frozenset[str]]]:
    """Entry number, SMILES, descriptors."""
    rows = [re.split(r"\s*\|\s*", line) for line in PUBLISHED.strip().splitlines()]
    return [(row[0], row[1], frozenset(row[2].split())) for row in rows]
