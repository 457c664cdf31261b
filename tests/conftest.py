"""What the tests share."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from pathlib import Path

import pytest

from dossiercheck.checks import registry


@pytest.fixture
def write(tmp_path: Path) -> Callable[[str, str], Path]:
    """Write a file below the test's own folder; gives its path."""

    def writing(name: str, text: str) -> Path:
        path = tmp_path / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_text(text, encoding="utf-8")
        return path

    return writing


@pytest.fixture
def own_checks() -> Iterator[dict[str, registry.Check]]:
    """The register of checks, put back as it was after the test."""
    before = dict(registry.CHECKS)
    yield registry.CHECKS
    registry.CHECKS.clear()
    registry.CHECKS.update(before)
