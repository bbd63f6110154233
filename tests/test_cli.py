"""The command line, run in this process and as a process of its own."""

from __future__ import annotations

import json
import subprocess
import sys
from dataclasses import fields
from pathlib import Path

import pytest
from click.testing import CliRunner, Result

import cellsection
from cellsection.cli import commands
from cellsection.cli.progress import Progress
from cellsection.workbook.book import Limits
from tests.check.small_book import link_other_book, write_book

GOOD = {"A1": 300.0, "A2": 20.0, "B1": ("A1*A2", 6000.0), "B2": ("SUM(A1:A2)", 320.0), "B3": ('"flange"', "flange")}
PARTS = {
    "A1": "shape", "B1": "b", "C1": "h", "D1": "y",
    "A2": "rectangle", "B2": 300.0, "C2": 20.0, "D2": 10.0,
    "A3": "rectangle", "B3": 12.0, "C3": 400.0, "D3": 220.0,
}  # fmt: skip


def run(*arguments: object) -> Result:
    return CliRunner().invoke(commands, list(map(str, arguments)))


def process(*arguments: object, cwd: Path | None = None) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-m", "cellsection", *map(str, arguments)]
    return subprocess.run(command, capture_output=True, text=True, encoding="utf-8", cwd=cwd, check=False)


@pytest.fixture
def good(tmp_path: Path) -> Path:
    return write_book(tmp_path / "good.xlsx", GOOD)


@pytest.fixture
def bad(tmp_path: Path) -> Path:
    return write_book(tmp_path / "bad.xlsx", {**GOOD, "B1": ("A1*A2", 6001.0)})


@pytest.fixture
def partly(tmp_path: Path) -> Path:
    return write_book(tmp_path / "partly.xlsx", {**GOOD, "C1": ("NOSUCHFUNCTION(A1)", 5.0), "C2": ("C1+1", 6.0)})


def test_a_book_that_holds_exits_0_in_two_calm_lines(good: Path) -> None:
    result = run("check", good)
    assert result.exit_code == 0
    assert result.output.splitlines()[:2] == [f"{good}: holds", "  3 formula cells on 1 sheet: all hold"]


def test_a_book_that_does_not_hold_exits_1_and_names_the_cell(bad: Path) -> None:
    result = run("check", bad)
    assert result.exit_code == 1
    (line,) = [line for line in result.output.splitlines() if "Girder!B1" in line]
    assert line.split()[:3] == ["Girder!B1", "6001", "6000"]
    assert "=A1*A2" in line


def test_a_wider_tolerance_lets_it_hold(bad: Path) -> None:
    assert run("check", bad, "--relative", "1e-3").exit_code == 0
    assert run("check", bad, "--absolute", "1.5").exit_code == 0


def test_an_unsupported_function_exits_2_and_is_named_with_its_dependants(partly: Path) -> None:
    result = run("check", partly)
    assert result.exit_code == 2
    assert "NOSUCHFUNCTION" in result.output
    assert "1 cell depends on it, not verified: Girder!C2" in result.output


def test_a_cell_without_a_saved_value_exits_2(tmp_path: Path) -> None:
    result = run("check", write_book(tmp_path / "unsaved.xlsx", {**GOOD, "C1": ("A1+1", None)}))
    assert result.exit_code == 2
    assert "No saved value (1)" in result.output


@pytest.mark.parametrize(
    ("name", "content"),
    [
        ("missing.xlsx", None),
        ("text.xlsx", b"not a zip"),
        ("empty.xlsx", b""),
        ("old.xls", b"\xd0\xcf\x11\xe0\xa1\xb1"),
    ],
)
def test_a_file_that_cannot_be_read_exits_3_with_one_line(tmp_path: Path, name: str, content: bytes | None) -> None:
    path = tmp_path / name
    if content is not None:
        path.write_bytes(content)
    result = process("check", path)
    assert result.returncode == 3
    headline, reason, *_ = result.stdout.splitlines()
    assert headline == f"{path}: unreadable"
    assert name in reason
    assert "Traceback" not in result.stdout + result.stderr


def test_the_worst_of_many_books_counts(good: Path, bad: Path, partly: Path) -> None:
    assert run("check", good, partly).exit_code == 2
    assert run("check", bad, partly, good).exit_code == 1
    assert run("check", good.with_name("none.xlsx"), bad).exit_code == 3


def test_many_books_end_with_a_count(good: Path, bad: Path) -> None:
    closing = run("check", good, bad, good).output.splitlines()[-1]
    assert closing == "3 books: 2 hold, 1 does not hold. Tolerance: relative 1e-9, absolute 1e-12."


def test_a_folder_stands_for_its_books(good: Path, bad: Path, tmp_path: Path) -> None:
    (tmp_path / "~$good.xlsx").write_bytes(b"the lock file of an open book")
    result = run("check", tmp_path)
    assert [line for line in result.output.splitlines() if line.endswith("hold") and ".xlsx:" in line] == [
        f"{bad}: does not hold"
    ]
    assert f"{good}: holds" in result.output
    assert result.exit_code == 1


def test_a_folder_without_books_is_refused(tmp_path: Path) -> None:
    result = process("check", tmp_path)
    assert result.returncode == 4
    assert result.stderr.startswith("cellsection: there are no workbooks")


def test_json_says_the_same_as_data(good: Path, bad: Path) -> None:
    result = process("check", good, bad, "--json")
    made = json.loads(result.stdout)
    assert result.returncode == made["exit code"] == 1
    assert [book["verdict"] for book in made["books"]] == ["holds", "does not hold"]
    assert made["books"][1]["findings"][0]["address"] == "Girder!B1"
    assert result.stderr == ""


def test_books_are_checked_in_several_processes_in_their_order(good: Path, bad: Path) -> None:
    made = json.loads(process("check", good, bad, good, "--json", "--jobs", 2).stdout)
    assert [Path(book["book"]).name for book in made["books"]] == ["good.xlsx", "bad.xlsx", "good.xlsx"]


def test_json_lines_are_one_object_a_book_each_readable_apart(good: Path, bad: Path) -> None:
    result = process("check", good, bad, good, "--jsonl", "--jobs", 2, "--clock", "2026-12-01")
    lines = [json.loads(line) for line in result.stdout.splitlines()]
    assert [(Path(line["book"]).name, line["verdict"]) for line in lines] == [
        ("good.xlsx", "holds"),
        ("bad.xlsx", "does not hold"),
        ("good.xlsx", "holds"),
    ]
    assert {(line["schema"], line["clock"]) for line in lines} == {("cellsection check line 1", "2026-12-01")}
    assert (result.returncode, result.stderr) == (1, "")


def test_json_and_json_lines_together_are_refused(good: Path) -> None:
    result = run("check", good, "--json", "--jsonl")
    assert result.exit_code == 4
    assert "two ways" in result.output


def test_cells_that_read_another_book_are_counted_and_its_saved_values_named(tmp_path: Path) -> None:
    cells = {"A1": ("[1]Loads!A1*2", 14.0), "A2": ("[1]Loads!A1*3", 21.0), "A3": ("A1+A2", 35.0)}
    path = link_other_book(write_book(tmp_path / "linked.xlsx", cells), "Loads.xlsx", 7.0)
    assert run("check", path).output.splitlines()[1:3] == [
        "  3 formula cells on 1 sheet: all hold; 2 read saved values of other books",
        "  reads saved values of another book (Loads.xlsx), 2 cells: Girder!A1:A2",
    ]
    (made,) = json.loads(run("check", path, "--json").output)["books"]
    assert made["reading other books"] == 2


def test_a_book_that_asks_for_iteration_is_told_to(tmp_path: Path) -> None:
    # x = (x + 2)/2 has the one solution 2
    cells = {"A1": ("(B1+2)/2", 2.0), "B1": ("A1", 2.0)}
    path = write_book(tmp_path / "circle.xlsx", cells, settings='<calcPr iterate="1"/>')
    calm = run("check", path)
    assert calm.exit_code == 0
    cells["C1"] = ("A1*3", 7.0)  # 6, so that the report is laid out
    laid_out = run("check", write_book(path, cells, settings='<calcPr iterate="1"/>'))
    (made,) = json.loads(run("check", path, "--json").output)["books"]
    for told in (calm.output, laid_out.output, " ".join(note["text"] for note in made["notes"])):
        assert "the book asks for" in told
        assert "100 rounds at most" in told
    assert "Cells that do not hold (1)" in laid_out.output
    assert run("check", write_book(path, cells)).output.count("Circular references (1)") == 1


def test_what_depends_on_the_date_is_verified_for_a_given_moment(tmp_path: Path) -> None:
    # 46357 is 2026-12-01 in the 1900 date system: 2026-01-01 is 46023, and 334 days later it is December
    path = write_book(tmp_path / "today.xlsx", {"A1": ("TODAY()", 46357.0), "A2": ("A1+1", 46358.0)})
    assert "2 volatile (compared by kind)" in run("check", path).output
    assert "2 formula cells on 1 sheet: all hold" in run("check", path, "--clock", "2026-12-01").output
    assert run("check", path, "--clock", "2026-12-02").exit_code == 1
    unknown = run("check", path, "--clock", "saved")
    assert "2 volatile (compared by kind)" in unknown.output
    assert "today.xlsx does not say when it was saved, so that" in unknown.output
    broken = tmp_path / "broken.xlsx"
    broken.write_bytes(b"not a zip")
    assert "does not say when" not in run("check", broken, "--clock", "saved").output


def test_a_run_that_cannot_start_its_processes_is_refused_in_one_line(good: Path) -> None:
    code = "from cellsection.cli import main; main()"  # from no file, so that no process can begin by importing it
    done = subprocess.run(
        [sys.executable, "-", "check", good, good, "--jobs", "2"],
        input=code,
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 4
    assert "cellsection: processes for checking books cannot be started here." in done.stderr


def test_random_numbers_come_out_the_same_for_a_seed(tmp_path: Path) -> None:
    path = write_book(tmp_path / "random.xlsx", {"A1": ("IF(RAND()<2,1,0)", 1.0)})
    result = run("check", path, "--seed", 7)
    assert "1 volatile (compared by kind)" in result.output
    assert result.output.splitlines()[-1].endswith("Random numbers begin from 7.")


def test_a_very_long_time_limit_is_no_obstacle(good: Path, bad: Path) -> None:
    assert process("check", good, bad, "--jobs", 2, "--limit", "seconds=1e300").returncode == 1


def test_a_limit_refuses_a_book_that_asks_for_more(good: Path) -> None:
    result = run("check", good, "--limit", "parts=2", "--limit", "cells=1_000")
    assert result.exit_code == 3
    assert "2" in result.output


@pytest.mark.parametrize(
    ("option", "given", "says"),
    [
        ("--limit", "books=3", "there is no limit 'books'. The limits are unzipped_bytes, ratio, parts, markup_bytes"),
        ("--limit", "cells", "cells takes a whole number above 0. Write for example cells=4000000."),
        ("--limit", "cells=many", "cells takes a whole number above 0"),
        ("--limit", "cells=0", "cells takes a whole number above 0"),
        ("--limit", "cells=1.5", "cells takes a whole number above 0"),
        ("--limit", "seconds=inf", "seconds takes a number above 0. Write for example seconds=60."),
        ("--limit", "seconds=nan", "seconds takes a number above 0"),
        ("--clock", "soon", "that is no date"),
        ("--clock", "2026-13-01", "that is no date"),
        ("--clock", "2026-12-01T10:00Z", "time zone"),
        ("--clock", "1850-01-01", "Write a later date"),
        ("--seed", "-1", "a seed is a whole number"),
        ("--seed", "9" * 5000, "a seed is a whole number"),
    ],
)
def test_a_wrong_limit_clock_or_seed_is_refused_in_one_line(good: Path, option: str, given: str, says: str) -> None:
    result = run("check", good, option, given)
    assert result.exit_code == 4
    assert result.output.startswith(f"cellsection: {option} ")
    assert says in result.output
    assert len(result.output.splitlines()) == 1


def test_every_limit_is_named_in_the_help_with_its_default() -> None:
    shown = " ".join(run("check", "--help").output.split())
    for each in fields(Limits):
        assert f"{each.name}={each.default:.15g}" in shown


def test_a_terminal_shows_a_bar_and_a_pipe_none(good: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    assert process("check", *[good] * 5).stderr == ""
    monkeypatch.setattr("cellsection.cli.progress.sys.stderr.isatty", lambda: True, raising=False)
    with Progress([good] * 5) as progress:
        assert progress.bar is not None
        for done in range(1, 6):
            progress.withdraw()
            progress.advance()
            assert progress.done == done


def test_no_book_is_changed_by_a_check(bad: Path) -> None:
    before = bad.read_bytes()
    run("check", bad)
    assert bad.read_bytes() == before
    assert list(bad.parent.iterdir()) == [bad]


def test_section_functions_and_acceptance_checks_are_recalculated(tmp_path: Path) -> None:
    # A = 300*20 + 12*400 = 10800, by hand
    cells = {
        **PARTS,
        "F1": ('CS_TOTALS(A1:D3,"A")', 10800.0),
        "F2": ("CS_AGREES(F1,10800)", True),
        "F3": ("CS_FAULTS(A1:D3)", "no faults"),
    }
    result = run("check", write_book(tmp_path / "girder.xlsx", cells))
    assert result.output.splitlines()[1:3] == [
        "  3 formula cells on 1 sheet: all hold",
        "  2 acceptance checks: all met",
    ]
    assert result.exit_code == 0


def test_a_refused_part_is_told_with_row_column_and_remedy(tmp_path: Path) -> None:
    cells = {**PARTS, "C3": 0.0, "F1": ('CS_TOTALS(A1:D3,"A")', 10800.0), "F2": ("F1/2", 5400.0)}
    result = run("check", write_book(tmp_path / "girder.xlsx", cells))
    assert result.exit_code == 1
    assert "Errors (1)" in result.output
    assert "#VALUE!  Girder!F1  CS_TOTALS" in result.output
    assert "row 3, column h" in " ".join(result.output.split())
    assert "passed on to 1 cell: Girder!F2" in result.output


def test_an_unmet_acceptance_check_exits_1_though_saved_so(tmp_path: Path) -> None:
    cells = {**PARTS, "F1": ('CS_AGREES(CS_TOTALS(A1:D3,"A"),10801)', False)}
    result = run("check", write_book(tmp_path / "girder.xlsx", cells))
    assert result.exit_code == 1
    assert "Acceptance checks not met (1)" in result.output


HEAVY = (
    "numpy",
    "pandas",
    "openpyxl",
    "scipy",
    "shapely",
    "rich",
    "xlwings",
    "cellsection.catalogue",
    "cellsection.section",
)


def test_checking_a_plain_book_loads_nothing_it_does_not_use(good: Path) -> None:
    looking = (
        "import sys, runpy\n"
        f"sys.argv = ['cellsection', 'check', {str(good)!r}]\n"
        "sys.setprofile(lambda *_: None)\n"  # so that the end is not cut short
        "try:\n    runpy.run_module('cellsection', run_name='__main__')\n"
        "finally:\n    print('LOADED', *sorted(sys.modules))\n"
    )
    done = subprocess.run([sys.executable, "-c", looking], capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
    loaded = done.stdout.partition("LOADED")[2].split()
    assert "cellsection.hosts.headless" in loaded
    assert [name for name in HEAVY if name in loaded] == []


# Other commands


def test_the_version_is_printed() -> None:
    assert process("--version").stdout.strip() == f"cellsection {cellsection.__version__}"


@pytest.mark.parametrize("command", [[], ["check"], ["functions"], ["start"]])
def test_help_of_every_command_shows_an_example(command: list[str]) -> None:
    result = run(*command, "--help")
    assert result.exit_code == 0
    assert "Example" in result.output
    assert f"cellsection {' '.join(command)}".strip() in result.output


def test_help_of_the_check_explains_the_exit_codes() -> None:
    shown = run("check", "--help").output
    assert [code for code in "01234" if f"\n    {code}  " in shown] == list("01234")


@pytest.mark.parametrize(
    "arguments",
    [
        ["check"],
        ["check", "a.xlsx", "--relative", "lots"],
        ["check", "a.xlsx", "--relative", "-1"],
        ["weigh"],
        ["--loud"],
    ],
)
def test_a_wrong_command_line_exits_4_without_a_traceback(arguments: list[str]) -> None:
    result = process(*arguments)
    assert result.returncode == 4
    assert "Error: " in result.stderr
    assert "Traceback" not in result.stderr


def test_every_cell_function_is_listed_with_its_help() -> None:
    from cellsection.catalogue import CATALOGUE

    shown = run("functions").output
    for name, function in CATALOGUE.items():
        assert name in shown
        assert function.help.split()[0] in shown


def test_one_cell_function_is_explained_in_full() -> None:
    result = run("functions", "cs_totals")
    assert result.exit_code == 0
    for piece in ("CS_TOTALS(parts", "parts", "which", "Example", "Source"):
        assert piece in result.output


def test_an_unknown_cell_function_is_refused_with_the_nearest() -> None:
    result = process("functions", "CS_TOTAL")
    assert result.returncode == 4
    assert "CS_TOTALS" in result.stderr


def test_a_template_is_started_and_holds(tmp_path: Path) -> None:
    out = tmp_path / "crane girder.xlsx"
    result = process("start", "girder", out)
    assert result.returncode == 0, result.stderr
    assert f'cellsection check "{out}"' in result.stdout
    assert run("check", out).exit_code == 0


def test_every_template_is_named_in_the_help() -> None:
    from cellsection.templates import TEMPLATES

    shown = run("start", "--help").output
    assert [name for name in TEMPLATES if f"\n    {name} " not in shown] == []


@pytest.mark.parametrize(
    ("template", "name", "says"),
    [
        ("girder", "there.xlsx", "not overwritten"),
        ("girder", "girder.ods", "girder.xlsx"),
        ("girder", "no such folder/girder.xlsx", "no folder"),
        ("bridge", "bridge.xlsx", "girder"),
    ],
)
def test_a_template_that_cannot_be_started_is_refused_in_one_line(
    tmp_path: Path, template: str, name: str, says: str
) -> None:
    there = tmp_path / "there.xlsx"
    there.write_bytes(b"the engineer's own work")
    result = process("start", template, tmp_path / name)
    assert result.returncode == 4
    assert says in result.stderr
    assert len(result.stderr.splitlines()) == 1
    assert there.read_bytes() == b"the engineer's own work"
    assert list(tmp_path.iterdir()) == [there]
