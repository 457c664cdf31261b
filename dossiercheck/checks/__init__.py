"""The checks: pure functions from a case to observations. Importing this registers them all."""

from dossiercheck.checks import (  # noqa: F401
    absolute,
    axes,
    changes,
    claims,
    configuration,
    constitution,
    coverage,
    drawings,
    identity,
    kin,
    names,
    rotations,
    statements,
    submission,
    together,
)
