"""Hostile books: each is refused, or its formula reported, with bounded memory; nothing is executed or fetched."""

from __future__ import annotations

import faulthandler
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Limits
from cellsection.workbook.recalculate import recalculate
from cellsection.workbook.results import Status
from tests.fuzz.watch import watched
from tests.workbook.hostile import BOOKS, hostile_book, plain
from tests.workbook.small import zipped

PATIENCE = 300  # seconds after which a test that hangs is ended with its process, and so fails
DENSE = Limits(ratio=10**9)  # so that a book made of one thing many times reaches the cap that is meant for it
GIBIBYTE = 1 << 30


@pytest.fixture(autouse=True)
def _watchdog() -> Iterator[None]:
    faulthandler.dump_traceback_later(PATIENCE, exit=True)
    yield
    faulthandler.cancel_dump_traceback_later()


@pytest.mark.parametrize("name", [name for name in BOOKS if name not in ("300 MB of blanks", "5 million cells")])
def test_a_hostile_book_is_refused_or_its_formula_told(tmp_path: Path, name: str) -> None:
    said = BOOKS[name][1]
    path = hostile_book(tmp_path, name)
    with watched(tmp_path):
        try:
            cells = recalculate(path, limits=DENSE).cells
        except WorkbookError as refusal:
            told = str(refusal)
        else:
            told = next((cell.reason for cell in cells if cell.status is Status.UNSUPPORTED), "")
            assert told or not said
    assert said in told


def test_a_part_that_is_packed_too_densely_is_refused_before_it_is_unpacked(tmp_path: Path) -> None:
    with pytest.raises(WorkbookError, match="400 times its size"):
        recalculate(hostile_book(tmp_path, "300 MB of blanks"))


@pytest.mark.parametrize(
    ("name", "limits", "said"),
    [
        ("5 million cells", Limits(cells=20_000, ratio=10**9), "more than 20,000 cells"),
        ("4.2 million shared strings", Limits(cells=20_000, ratio=10**9), "more than 20,000 texts"),
        ("4.2 million shared strings", Limits(markup_bytes=10_000), "unpack to more than 10,000 bytes"),
        ("30,000 parts", Limits(parts=29_000), "30,004 parts, more than 29,000"),
        ("300 MB of blanks", Limits(unzipped_bytes=1_000_000), "more than 1,000,000"),
        ("300 MB of blanks", Limits(ratio=50), "more than 50 times"),
        ("brackets 3,000 deep", Limits(nesting=100), "deep nesting"),
        ("a sum of 40,000 numbers", Limits(formula_length=1000), "overlong formula"),
        ("the sum of a whole sheet", Limits(array_cells=500), "an array of 27,262,976 cells (more than 500)"),
    ],
)
def test_each_limit_can_be_set(tmp_path: Path, name: str, limits: Limits, said: str) -> None:
    path = hostile_book(tmp_path, name)
    try:
        told = " ".join(cell.reason for cell in recalculate(path, limits=limits).cells)
    except WorkbookError as refusal:
        told = str(refusal)
    assert said in told


@pytest.mark.parametrize("name", ["30,000 parts", "a sum of 40,000 numbers", "names 50,000 deep"])
def test_a_limit_raised_lets_more_through(tmp_path: Path, name: str) -> None:
    limits = Limits(parts=40_000, ratio=10**9, formula_length=100_000)
    assert len(list(recalculate(hostile_book(tmp_path, name), limits=limits).cells)) == 1


@pytest.mark.parametrize("part", sorted(plain()))
def test_a_book_that_lacks_a_part_is_refused_in_words(tmp_path: Path, part: str) -> None:
    parts = plain()
    del parts[part]
    with pytest.raises(WorkbookError) as met:
        recalculate(zipped(tmp_path / "book.xlsx", parts))
    assert met.value.remedy


@pytest.mark.parametrize("part", sorted(plain()))
@pytest.mark.parametrize("content", [b"", b"\x00" * 100, b"<a/>", b"\x89PNG\r\n", b"<?xml version='1.0'?>"])
def test_a_part_of_another_kind_is_refused_or_read_as_empty(tmp_path: Path, part: str, content: bytes) -> None:
    path = zipped(tmp_path / "book.xlsx", {**plain(), part: content})
    try:
        outcome: object = list(recalculate(path).cells)
    except WorkbookError as refusal:
        outcome = [] if refusal.remedy else f"no remedy: {refusal}"
    assert outcome == []


@pytest.mark.parametrize("keep", [0, 1, 4, 21, 30, 100, -1, -22, -60])
def test_a_truncated_file_is_refused(tmp_path: Path, keep: int) -> None:
    path = zipped(tmp_path / "book.xlsx", plain())
    path.write_bytes(path.read_bytes()[:keep])
    with pytest.raises(WorkbookError, match="Save it again"):
        recalculate(path)


@pytest.mark.skipif(sys.platform == "win32", reason="an address space cannot be limited there")
@pytest.mark.parametrize(
    "name", ["a million names", "names 50,000 deep", "elements 100,000 deep in strings", "the sum of a whole sheet"]
)
def test_a_hostile_book_is_checked_within_a_gibibyte(tmp_path: Path, name: str) -> None:
    limited = (
        f"import resource; resource.setrlimit(resource.RLIMIT_AS, ({GIBIBYTE}, {GIBIBYTE}));"
        f" import sys; sys.argv = ['cellsection', 'check', '--trace', {str(hostile_book(tmp_path, name))!r}];"
        " from cellsection.cli import main; main()"
    )
    run = subprocess.run([sys.executable, "-c", limited], capture_output=True, text=True, timeout=PATIENCE, check=False)
    assert run.returncode in (2, 3), run.stderr
    assert "Traceback" not in run.stdout + run.stderr
