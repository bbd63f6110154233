"""Tests over a folder of workbooks that is no part of the project: named by CELLSECTION_BOOKS, left out without it."""

from __future__ import annotations

import os
from pathlib import Path

import pytest

KINDS = (".xlsx", ".xlsm", ".ods")


def books_at_hand() -> list[Path]:
    """The workbooks under the folder that CELLSECTION_BOOKS names."""
    folder = os.environ.get("CELLSECTION_BOOKS", "")
    found = sorted(each for each in Path(folder).rglob("*") if each.suffix.lower() in KINDS) if folder else []
    if folder and not found:
        raise pytest.UsageError(f"CELLSECTION_BOOKS names {folder}, where there is no workbook")
    return found


def pytest_generate_tests(metafunc: pytest.Metafunc) -> None:
    """A test with the argument `book_at_hand` runs once for each book."""
    if "book_at_hand" in metafunc.fixturenames:
        books = books_at_hand()
        metafunc.parametrize("book_at_hand", books, ids=[each.name for each in books])


def pytest_collection_modifyitems(config: pytest.Config, items: list[pytest.Item]) -> None:
    """Without a folder its tests are deselected, which the last line of the run says; they do not count as passed."""
    if not os.environ.get("CELLSECTION_BOOKS"):
        left_out = [each for each in items if "book_at_hand" in getattr(each, "fixturenames", ())]
        config.hook.pytest_deselected(items=left_out)
        items[:] = [each for each in items if each not in left_out]
