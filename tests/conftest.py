"""What every test shares: how hypothesis searches, and what becomes of a test whose tool is missing."""

import os
import shutil
from collections.abc import Callable, Generator

import hypothesis
import pytest

# A bare machine skips what needs a tool it lacks; continuous integration has installed them all, so there a
# skip is a failure: nothing may quietly go untested.
REQUIRE_ALL = os.environ.get("FERRULE_REQUIRE_ALL") == "1"

# The machine may be busy, so no deadline; in continuous integration the same examples every time.
hypothesis.settings.register_profile("ferrule", deadline=None, derandomize=bool(os.environ.get("CI")))
hypothesis.settings.load_profile("ferrule")


@pytest.fixture(scope="session")
def tool() -> Callable[[str, str], str]:
    """Find a program by name; where it is missing, skip and say which Debian package brings it."""

    def find(program: str, package: str) -> str:
        path = shutil.which(program)
        if path is None:
            pytest.skip(f"{program} is missing: apt-get install {package}")
        return path

    return find


def failed(report: pytest.TestReport | pytest.CollectReport) -> None:
    """Turn a skip into a failure with the same reason, where everything is required."""
    if REQUIRE_ALL and report.skipped and not hasattr(report, "wasxfail"):
        reason = report.longrepr[2] if isinstance(report.longrepr, tuple) else report.longrepr
        report.outcome = "failed"
        report.longrepr = f"FERRULE_REQUIRE_ALL=1 allows no skip. {reason}"


@pytest.hookimpl(wrapper=True)
def pytest_runtest_makereport() -> Generator[None, pytest.TestReport, pytest.TestReport]:
    """Watch over skips in a test."""
    report = yield
    failed(report)
    return report


@pytest.hookimpl(wrapper=True)
def pytest_make_collect_report() -> Generator[None, pytest.CollectReport, pytest.CollectReport]:
    """Watch over skips of a whole module."""
    report = yield
    failed(report)
    return report
