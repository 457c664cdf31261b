"""Finds the files that travel with the package: the rule catalogue, the templates, the samples.

An installed wheel carries them inside the package; a checkout has them beside it. An editable
install also carries a copy, made once and never refreshed, in a folder that is not the package's
own: looking next to this file, and nowhere else, passes it by.
"""

from __future__ import annotations

from pathlib import Path

_PACKAGE = Path(__file__).resolve().parent


def rules() -> Path:
    """The folder of the rule catalogue."""
    return _folder("rules")


def templates() -> Path:
    """The folder of the report's templates."""
    return _folder("templates")


def samples() -> Path:
    """The folder of the demonstration dossiers."""
    return _folder("samples")


def _folder(name: str) -> Path:
    for folder in (_PACKAGE / "_data" / name, _PACKAGE.parent / name):
        if folder.is_dir():
            return folder
    raise FileNotFoundError(
        f"the folder '{name}' of dossiercheck is missing; the installation is incomplete"
    )
