"""A few trials of each kind in every test run; hypothesis chooses them and shrinks what fails."""

from __future__ import annotations

from pathlib import Path
from random import Random
from tempfile import TemporaryDirectory

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from cellsection.workbook.results import Status
from tests.fuzz.originals import ods_parts, xlsx_parts
from tests.fuzz.trial import KINDS, file_trial, formula_trial, trial, undamaged
from tests.fuzz.watch import Trespass, watched

CASES = sorted(Path(__file__).parent.glob("cases/*"))


@pytest.mark.parametrize("kind", sorted(KINDS))
@settings(max_examples=40, suppress_health_check=list(HealthCheck))  # what it draws is many small choices
@given(rng=st.randoms(use_true_random=False))
def test_a_random_or_damaged_book_ends_in_a_report_or_a_refusal(kind: str, rng: Random) -> None:
    with TemporaryDirectory() as folder:
        trial(rng, Path(folder), kind)


@settings(max_examples=200)
@given(text=st.text(max_size=60), spelling=st.sampled_from(["excel", "openformula"]))
def test_any_text_at_all_may_stand_where_a_formula_should(text: str, spelling: str) -> None:
    with TemporaryDirectory() as folder:
        met = formula_trial([("cell", text), ("array", text), ("dynamic", text)], spelling, Path(folder))  # type: ignore[arg-type]
    assert sum(met[status.name.lower()] for status in Status) >= 3


@pytest.mark.parametrize("suffix", [".xlsx", ".ods"])
def test_the_books_that_damage_begins_from_are_sound(tmp_path: Path, suffix: str) -> None:
    parts = xlsx_parts() if suffix == ".xlsx" else ods_parts()
    met = file_trial(undamaged(parts), suffix, tmp_path)
    assert met["read"] == 1
    assert met["written"] == 1
    assert met["unsupported"] == 0


@pytest.mark.parametrize("case", CASES, ids=[each.name for each in CASES])
def test_what_once_failed_does_so_no_more(tmp_path: Path, case: Path) -> None:
    """A file of formulas is one a line: its kind, its spelling, its text. Any other file is a book."""
    if case.suffix != ".txt":
        file_trial(case.read_bytes(), case.suffix, tmp_path)
        return
    for line in case.read_text(encoding="utf-8").splitlines():
        kind, spelling, text = line.split("\t")
        met = formula_trial([(kind, text)], spelling, tmp_path)  # type: ignore[arg-type]
        assert not any(each.startswith("fault") for each in met), met


def test_the_watch_sees_what_a_file_must_not_bring_about(tmp_path: Path) -> None:
    inside, outside = tmp_path / "inside", tmp_path / "outside"
    inside.mkdir()
    outside.write_text("")
    with watched(inside):
        (inside / "file").write_text("")
        for deed in (outside.read_text, lambda: outside.write_text("x"), outside.unlink):
            with pytest.raises(Trespass):
                deed()
    assert outside.read_text() == ""
