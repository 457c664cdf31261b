"""Descriptors of phosphorus or sulfur that the parser silently put on a carbon atom.

`[(R)-(…)(hydroxy)phosphoryl]`: phosphorus with OH and =O is no centre to the parser, and it
gives the letter to the next centre that it finds further inside, even against a D or L printed
there. Such a descriptor is found by turning it round. It is left out where a phosphorus or
sulfur atom could bear it as well.
"""

from __future__ import annotations

from dataclasses import replace

from dossiercheck.names.hetero import hetero_centres, speaks_of_hetero
from dossiercheck.names.named import NameReading
from dossiercheck.names.notation import NotationError, read_extended, read_notation
from dossiercheck.names.parser import NameParser
from dossiercheck.names.refused import Rest, is_stereo_refusal, least_left_out
from dossiercheck.names.rewriting import rewritten
from dossiercheck.names.tying import ties


def left_out(reading: NameReading, rest: Rest, parser: NameParser) -> Rest:
    """The answer for the name without its misplaced descriptors; `rest` where there are none."""
    text, descriptors = reading.cleaned.text, reading.descriptors
    suspects = [
        i
        for i, d in enumerate(descriptors)
        if d.text in ("R", "S") and i not in rest.dropped and speaks_of_hetero(text, d)
    ]
    if not suspects or rest.parse.smiles is None:
        return rest
    try:
        structure = read_extended(rest.parse.smiles)
    except NotationError:
        return rest
    notation = read_notation(structure.smiles)
    centres = hetero_centres(notation)
    if all(notation.marks[atom] for atom in centres):
        return rest
    so_far = replace(reading, structure=structure, dropped=rest.dropped)
    wrong = {
        tied.descriptor
        for tied in ties(so_far, suspects, parser)
        if tied.atoms and tied.atoms[0] not in centres
    }
    if not wrong:
        return rest
    drop = rest.dropped | wrong
    name = rewritten(text, descriptors, drop=drop, spaces=reading.respaced)
    again = Rest(parser.parse([name])[0], drop)
    if is_stereo_refusal(again.parse):
        again = least_left_out(text, descriptors, again, parser, reading.respaced)
    return again
