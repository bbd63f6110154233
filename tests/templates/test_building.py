"""Building: whole or not at all, the same bytes every time, and what it builds holds."""

from __future__ import annotations

from typing import TYPE_CHECKING
from zipfile import ZipFile

import pytest

from cellsection.check import check_book
from cellsection.check.findings import Verdict
from cellsection.errors import InputError, WorkbookError
from cellsection.templates import TEMPLATES, build, writing

if TYPE_CHECKING:
    from pathlib import Path

CHECKS = {"girder": 9, "crane-hall-girder": 10}  # eight comparisons and CS_FAULTS; the example adds a table value


@pytest.mark.parametrize("name", TEMPLATES)
def test_a_built_workbook_holds_on_check_with_all_its_acceptance_checks(name: str, tmp_path: Path) -> None:
    out = tmp_path / "book.xlsx"
    build(name, out)
    report = check_book(out)
    assert report.verdict is Verdict.HOLDS, report.findings
    assert (report.tally.checks, report.tally.checks_met) == (CHECKS[name], CHECKS[name])
    assert report.tally.unsaved == 0


@pytest.mark.parametrize("name", TEMPLATES)
def test_building_twice_gives_the_same_bytes(name: str, tmp_path: Path) -> None:
    first, second = tmp_path / "first.xlsx", tmp_path / "second.xlsx"
    build(name, first)
    build(name, second)
    assert first.read_bytes() == second.read_bytes()


def test_an_unknown_template_is_refused_with_the_names_there_are(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"no template 'gantry'.*girder"):
        build("gantry", tmp_path / "gantry.xlsx")
    assert not list(tmp_path.iterdir())


def test_a_failing_build_leaves_the_file_that_was_there_and_nothing_else(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def fail(*_: object) -> None:
        raise WorkbookError("no", remedy="Stop")

    out = tmp_path / "book.xlsx"
    out.write_bytes(b"before")
    monkeypatch.setattr(writing, "recalculate", fail)
    with pytest.raises(WorkbookError):
        build("girder", out)
    assert out.read_bytes() == b"before"
    assert list(tmp_path.iterdir()) == [out]


def test_a_template_is_written_into_the_current_folder_by_its_bare_name(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(tmp_path)
    build("girder", "book.xlsx")
    assert [each.name for each in tmp_path.iterdir()] == ["book.xlsx"]


@pytest.mark.parametrize(("old", "new"), [(b"<v>560</v>", b"<v>561</v>"), (b"<v>10</v>", b"<v>12</v>")])
def test_a_plate_changed_in_the_saved_file_is_caught_by_the_check(
    old: bytes, new: bytes, built: Path, tmp_path: Path
) -> None:
    edited = tmp_path / "edited.xlsx"
    with ZipFile(built) as parts, ZipFile(edited, "w") as copy:
        for each in parts.namelist():
            content = parts.read(each)
            if each == "xl/worksheets/sheet1.xml":
                assert content.count(old) == 1, "the dimension of the web"
                content = content.replace(old, new)
            copy.writestr(each, content)
    report = check_book(edited)
    assert report.verdict is Verdict.DOES_NOT_HOLD
    assert report.tally.differ > 20


def test_the_spreadsheet_application_is_not_asked_to_recalculate_on_opening(built: Path) -> None:
    with ZipFile(built) as parts:
        workbook = parts.read("xl/workbook.xml").decode()
    assert 'fullCalcOnLoad="1"' not in workbook
