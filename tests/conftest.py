"""What the tests share: a real LibreOffice where there is one, and the plain surroundings of a command line."""

from __future__ import annotations

import os
import shutil

import pytest
from hypothesis import HealthCheck, settings

# No test measures time: a slow or busy machine must not fail a property.
settings.register_profile("calm", deadline=None, suppress_health_check=[HealthCheck.too_slow])
settings.load_profile("calm")

PLACES = (
    None,  # the search path
    "/Applications/LibreOffice.app/Contents/MacOS",
    r"C:\Program Files\LibreOffice\program",
)


def find_soffice() -> str | None:
    """The LibreOffice program."""
    return next((met for place in PLACES if (met := shutil.which("soffice", path=place))), None)


def pytest_runtest_setup(item: pytest.Item) -> None:
    """A test marked `libreoffice` is skipped where there is none, and fails in CI, where there has to be one."""
    if item.get_closest_marker("libreoffice") and not find_soffice():
        if os.environ.get("CI", "").lower() not in ("", "0", "false"):
            pytest.fail("LibreOffice is missing and CI is set; .ci/run installs it", pytrace=False)
        pytest.skip("LibreOffice is missing; run.py test says how to get it")


@pytest.fixture(scope="session")
def soffice() -> str:
    """Path of the LibreOffice program, for tests marked `libreoffice`."""
    found = find_soffice()
    assert found, "mark the test with pytest.mark.libreoffice"
    return found
