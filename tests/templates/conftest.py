"""The girder template, built once for all tests that only read it."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

from cellsection.templates import build

if TYPE_CHECKING:
    from pathlib import Path


@pytest.fixture(scope="session")
def built(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The file; not to be written to."""
    out = tmp_path_factory.mktemp("templates") / "girder.xlsx"
    build("girder", out)
    return out
