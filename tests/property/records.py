"""Sound records: name and structure that say the same.

Names after IUPAC 2013 (amino acids P-103, sugars P-102, terpenes and the rest systematic) or
common practice; structures as every handbook has them. `TURNED` has one descriptor of each name
turned round, chosen so that the result is another stereoisomer and still a name.
"""

from __future__ import annotations

import re

SOUND: dict[str, str] = {
    "(2S)-2-aminopropanoic acid": "C[C@H](N)C(=O)O",
    "(2S)-2-amino-3-phenylpropanoic acid": "N[C@@H](Cc1ccccc1)C(=O)O",
    "(2R)-2-amino-3-sulfanylpropanoic acid": "N[C@@H](CS)C(=O)O",
    "(2S)-2-amino-3-(1H-indol-3-yl)propanoic acid": "N[C@@H](Cc1c[nH]c2ccccc12)C(=O)O",
    "(2S)-2-amino-3-(4-hydroxyphenyl)propanoic acid": "N[C@@H](Cc1ccc(O)cc1)C(=O)O",
    "(2S)-2,6-diaminohexanoic acid": "NCCCC[C@H](N)C(=O)O",
    "(2S,3R)-2-amino-3-hydroxybutanoic acid": "C[C@@H](O)[C@H](N)C(=O)O",
    "(2S,3S)-2-amino-3-methylpentanoic acid": "CC[C@H](C)[C@H](N)C(=O)O",
    "(2S)-pyrrolidine-2-carboxylic acid": "OC(=O)[C@@H]1CCCN1",
    "(2R,3R)-2,3-dihydroxybutanedioic acid": "OC(=O)[C@H](O)[C@@H](O)C(=O)O",
    "(2S)-2-hydroxypropanoic acid": "C[C@H](O)C(=O)O",
    "(2R)-2-hydroxy-2-phenylacetic acid": "O[C@@H](C(=O)O)c1ccccc1",
    "(2R,3S,4R,5R)-2,3,4,5,6-pentahydroxyhexanal": "OC[C@@H](O)[C@@H](O)[C@H](O)[C@@H](O)C=O",
    "(2R,3R,4R)-2,3,4,5-tetrahydroxypentanal": "OC[C@@H](O)[C@@H](O)[C@@H](O)C=O",
    "(2R)-2,3-dihydroxypropanal": "OC[C@@H](O)C=O",
    "(2S,3R,4S,5S,6R)-6-(hydroxymethyl)oxane-2,3,4,5-tetrol": (
        "OC[C@H]1O[C@H](O)[C@H](O)[C@@H](O)[C@@H]1O"
    ),
    "(1R,2S,5R)-5-methyl-2-(propan-2-yl)cyclohexan-1-ol": "C[C@@H]1CC[C@@H](C(C)C)[C@H](O)C1",
    "(4R)-1-methyl-4-(prop-1-en-2-yl)cyclohex-1-ene": "CC1=CC[C@H](C(C)=C)CC1",
    "(5R)-2-methyl-5-(prop-1-en-2-yl)cyclohex-2-en-1-one": "CC1=CC[C@@H](C(C)=C)CC1=O",
    "(3R)-3,7-dimethyloct-6-en-1-ol": "C[C@H](CCC=C(C)C)CCO",
    "(3R)-3,7-dimethylocta-1,6-dien-3-ol": "C[C@](O)(C=C)CCC=C(C)C",
    "ethyl (2S)-2-hydroxypropanoate": "CCOC(=O)[C@H](C)O",
    "methyl (2R)-2-amino-2-phenylacetate hydrochloride": "COC(=O)[C@H](N)c1ccccc1.Cl",
    "(1S)-1-phenylethan-1-amine hydrochloride": "C[C@H](N)c1ccccc1.Cl",
    "sodium (2S)-2-(6-methoxynaphthalen-2-yl)propanoate": (
        "C[C@H](C(=O)[O-])c1ccc2cc(OC)ccc2c1.[Na+]"
    ),
    "(2R)-2-[4-(2-methylpropyl)phenyl]propanoic acid": "CC(C)Cc1ccc(cc1)[C@@H](C)C(=O)O",
    "(2E)-3-phenylprop-2-enoic acid": "OC(=O)/C=C/c1ccccc1",
    "(2Z)-but-2-enedioic acid": "OC(=O)/C=C\\C(=O)O",
    "(2E,4E)-hexa-2,4-dienoic acid": "C/C=C/C=C/C(=O)O",
    "(9Z)-octadec-9-enoic acid": "CCCCCCCC/C=C\\CCCCCCCC(=O)O",
    "(1R,2S)-2-(methylamino)-1-phenylpropan-1-ol": "C[C@H](NC)[C@H](O)c1ccccc1",
    "4-[(1R)-1-hydroxy-2-(methylamino)ethyl]benzene-1,2-diol": "CNC[C@H](O)c1ccc(O)c(O)c1",
    "N-[(2S)-1-hydroxybutan-2-yl]acetamide": "CC[C@@H](CO)NC(C)=O",
}

_LETTER = re.compile(r"(?<=\d)[RSEZ]")
_OTHER = {"R": "S", "S": "R", "E": "Z", "Z": "E"}


def turned(name: str) -> str:
    """The name with its first descriptor turned round."""
    return _LETTER.sub(lambda match: _OTHER[match[0]], name, count=1)
