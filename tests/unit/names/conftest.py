"""One parser process for all tests of names."""

from collections.abc import Iterator

import pytest

from dossiercheck.names.parser import NameParser


@pytest.fixture(scope="session")
def parser() -> Iterator[NameParser]:
    with NameParser() as running:
        yield running
