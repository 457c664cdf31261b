"""Word lists: salts and solvates as names carry them, and words that are no substance.

Common practice of nomenclature and of English; IUPAC 2013 P-65.6 for esters and salts.
"""

from __future__ import annotations


def _one_of(words: str) -> str:
    return "(?:" + "|".join(words.split()) + ")"


# Words that stand after a name, with a multiplying prefix or without.
ANIONS = r"(?:di|tri|mono|hemi|sesqui|bis|semi)?" + _one_of(
    """
    hydrochloride hydrobromide hydroiodide chloride bromide iodide sulfate sulphate nitrate
    phosphate acetate trifluoroacetate formate oxalate malonate succinate maleate fumarate
    tartrate malate citrate lactate benzoate mesylate mesilate methanesulfonate besylate
    besilate tosylate tosilate hydrate hydroxide oxide salt solvate ethanolate methanolate
    """
)

# Words that stand before the name of an anion or after a name.
CATIONS = r"(?:di|tri|tetra|mono|hemi|bis)?" + _one_of(
    """
    sodium potassium lithium calcium magnesium zinc silver ammonium caesium cesium
    """
)

# Words after a substance's own name that belong to it: "… tartrate", "… free base".
SALTS = (
    "(?:free (?:base|acid)|"
    + _one_of(
        """
    hydrochloride hydrobromide tartrate maleate fumarate mesilate besilate tosilate sulfate
    phosphate citrate succinate acetate sodium potassium calcium hydrate monohydrate
    hemihydrate dihydrate sesquihydrate base
    """
    )[3:]
)

# Letters before a number that are no code of a substance.
NO_CODES = _one_of("ICH ISO CAS CTD NMR HPLC CHMP EMA FDA USP Ph BP JP EP IR UV MS NLT NMT")[3:-1]

# Capitalised words that begin a sentence before a comma and are no substance.
_SENTENCE = """
    accordingly additionally afterwards again alternatively because before besides briefly
    consequently conversely currently despite eventually example except figure finally
    firstly following furthermore generally hence hereafter however indeed initially instead
    lastly later likewise meanwhile moreover namely nevertheless nonetheless normally
    notably otherwise overall previously rather remarkably respectively scheme second
    secondly section similarly since still subsequently supplementary table therefore
    thereafter third thirdly though typically ultimately usually whereas within without
    structure compound substance material product impurity reagent solvent january february
    august september october november december
    """
SENTENCE_WORDS = frozenset(_SENTENCE.split())

# Words that follow a descriptor in prose and make no name with it, as in "(S)-enantiomer".
PROSE_WORDS = (
    _one_of(
        """
    enantiomer isomer stereoisomer diastereomer diastereoisomer epimer antipode form
    configuration configured config center centre stereocentre stereocenter alkene olefin
    double geometry series absolute selective isomeric enantioselective derivative analog
    analogue product compound impurity material substrate precursor catalyst ligand
    intermediate racemate alcohol amine acid ester ketone aldehyde amide salt base drug
    enriched rich isomerism assignment descriptor value type only and or to rule atom carbon
    bond state rate candidate aggregate conjugate template protocol control side wide line
    baseline crystalline origin within main chain protein determine examine racemic
    enantiopure alone phase one column detection ratio content fraction peak
    """
    )
    + "s?"
)
