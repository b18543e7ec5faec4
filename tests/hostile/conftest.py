"""One process from which all hostile audits are forked."""

from collections.abc import Iterator

import pytest

from config.bench.audits import Audits


@pytest.fixture(scope="session")
def audits() -> Iterator[Audits]:
    """Run the whole command, each time in a process of its own."""
    with Audits() as running:
        yield running
