"""Formulas made to be expensive: each ends within the time and the size allowed, and says so where it was cut short."""

from __future__ import annotations

import faulthandler
import re
import subprocess
import sys
import time
from collections.abc import Iterator
from contextlib import suppress
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellsection.workbook.book import Limits
from cellsection.workbook.builtins.traits import Wildcard
from cellsection.workbook.machine import TimeUp
from cellsection.workbook.results import Status
from cellsection.workbook.timelimit import time_limit
from tests.workbook.small import Cell, Results, results

SHORT = Limits(seconds=1.0)
PATIENCE = 120  # seconds after which a test that hangs is ended with its process, and so fails
NAMES = {"endless": "LAMBDA(n,endless(n+1))", "forked": "LAMBDA(n,IF(n=0,1,forked(n-1)+forked(n-1)))"}


@pytest.fixture(autouse=True)
def _watchdog() -> Iterator[None]:
    faulthandler.dump_traceback_later(PATIENCE, exit=True)
    yield
    faulthandler.cancel_dump_traceback_later()


def alone(folder: Path, formula: str, limits: Limits = SHORT) -> Results:
    cells: dict[str, Cell] = {
        "A1": 1.0,
        "A2": "x",
        "B1": "a" * 60,
        "B2": "a" * 30_000,
        "A1048576": 1.0,
        "Z9": f"={formula}",
    }
    return results(folder, cells, NAMES, limits=limits)


@pytest.mark.parametrize(
    "formula",
    [
        "SUM(MMULT(SEQUENCE(1400,1400),SEQUENCE(1400,1400)))",
        "MINVERSE(SEQUENCE(1400,1400)^0.5)",
        "SUM(FREQUENCY(SEQUENCE(1000000),SEQUENCE(1000000)))",
        "SUM(MATCH(SEQUENCE(100000),SEQUENCE(100000),0))",
        "SUM(SMALL(SEQUENCE(100000),SEQUENCE(100000)))",
        "SUM(MAKEARRAY(1400,1400,LAMBDA(r,c,SUM(SEQUENCE(100000)))))",
        "REDUCE(SEQUENCE(1000),SEQUENCE(1000000),LAMBDA(a,b,a+b))",
        "forked(60)",
    ],
)
def test_a_formula_that_takes_too_long_is_broken_off_and_told(tmp_path: Path, formula: str) -> None:
    cell = alone(tmp_path, formula).cells["Z9"]
    assert cell.status is Status.NOT_VERIFIED
    assert "time limit of 1 s" in cell.reason


@pytest.mark.parametrize(
    "formula",
    [
        "SUM(A:XFD)", "SUM(SEQUENCE(1E9))", "SEQUENCE(1048576,16384)", "SUM(RANDARRAY(1E6,1E6))",
        "SUM(OFFSET(A1,0,0,1048576,16384))", "SUM(SEQUENCE(100000)*TRANSPOSE(SEQUENCE(100000)))",
        "SUM(MAKEARRAY(1E6,1E6,LAMBDA(r,c,r)))", 'SUM(INDIRECT("A:XFD"))', "SUM(MUNIT(1E6))", "endless(1)",
        "SUM(IF(SEQUENCE(5000)>TRANSPOSE(SEQUENCE(5000)),1,2))", "REDUCE(1,SEQUENCE(100),LAMBDA(a,b,VSTACK(a,a)))",
        "SUM(MAP(SEQUENCE(5000),SEQUENCE(1,5000),LAMBDA(a,b,a)))",
    ],
)  # fmt: skip
def test_a_formula_that_grows_without_bounds_is_not_computed(tmp_path: Path, formula: str) -> None:
    cell = alone(tmp_path, formula, Limits(seconds=100.0, array_cells=200_000)).cells["Z9"]
    assert cell.status is Status.UNSUPPORTED or str(cell.value) in ("#VALUE!", "#NUM!")


@pytest.mark.parametrize(
    ("formula", "value"),  # what the application gives, from memory of its documented limits; #N/A where none matches
    [
        ('REPT("x",1E9)', "#VALUE!"),
        ('SUBSTITUTE(REPT("a",32767),"a",REPT("b",32767))', "#VALUE!"),
        ("9^9^9^9", "#NUM!"),
        ("FACT(1E9)", "#NUM!"),
        ("COMBIN(1E9,5E8)", "#NUM!"),
        ("BASE(1E300,2)", "#NUM!"),
        ("BITLSHIFT(1,1E9)", "#NUM!"),
        ("WORKDAY(1,1E9)", "#NUM!"),
        ("EDATE(1,1E15)", "#NUM!"),
        ('COUNTIF(B1:B2,"' + "*a" * 40 + 'b")', 0.0),
        ('MATCH("' + "*a" * 40 + '?b",B1:B2,0)', "#N/A"),
        ('SEARCH("' + "*a" * 40 + 'b",B2)', "#VALUE!"),
        ('SEARCH("a' + "*a" * 40 + '",B2)', 1.0),
        ('VALUE(REPT("9",32000)&"/"&REPT("9",500))', "#VALUE!"),
        ('VALUE("1/1/2026"&REPT(" ",30000)&"x")', "#VALUE!"),
    ],
)
def test_what_is_cheap_to_know_is_known(tmp_path: Path, formula: str, value: object) -> None:
    assert alone(tmp_path, formula, Limits(seconds=100.0))["Z9"] == value


@pytest.mark.parametrize(
    "pattern",
    ["(a+)+$b", "(a|aa)*c", "((a*)*)*b", "a*a*a*a*a*a*b", "(.*)(.*)\\1b", "(?=(a+))a*b\\1", "(?:a?){30}a{30}b"],
)
def test_a_regular_expression_is_never_searched_for_hours(tmp_path: Path, pattern: str) -> None:
    cell = alone(tmp_path, f'REGEXTEST(B2,"{pattern}")', Limits(seconds=60.0)).cells["Z9"]
    assert cell.status is Status.UNSUPPORTED or cell.value is False or str(cell.value) == "#VALUE!"


def test_cells_reached_before_the_time_is_up_keep_their_values(tmp_path: Path) -> None:
    found = results(
        tmp_path,
        {"A1": "=1+1", "A2": "=SUM(MMULT(SEQUENCE(1400,1400),SEQUENCE(1400,1400)))", "A3": "=2+2"},
        limits=SHORT,
    )
    assert found["A1"] == 2.0
    assert [found.cells[place].status for place in ("A2", "A3")] == [Status.NOT_VERIFIED] * 2


def busy() -> None:
    while True:
        pass


def test_a_time_limit_ends_a_loop_and_nothing_after_it() -> None:
    with pytest.raises(TimeUp), time_limit(time.monotonic() + 0.05):
        busy()
    for _ in range(200):  # one that passes just as the work is done comes out inside, or not at all
        with suppress(TimeUp), time_limit(time.monotonic() + 0.0005):
            sum(range(15_000))
    assert sum(range(1_000_000)) == 499_999_500_000


def test_a_time_limit_never_leaves_a_module_half_loaded(tmp_path: Path) -> None:
    (tmp_path / "slow_to_load.py").write_text("import time\nfor _ in range(50): time.sleep(0.01)\nDONE = True\n")
    script = (
        f"import sys, time; sys.path.insert(0, {str(tmp_path)!r})\n"
        "from cellsection.workbook.timelimit import TimeUp, time_limit\n"
        "try:\n    with time_limit(time.monotonic() + 0.1):\n        import slow_to_load\n        while True: pass\n"
        "except TimeUp:\n    print(slow_to_load.DONE)\n"
    )
    run = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, timeout=PATIENCE, check=True)
    assert run.stdout.split() == ["True"]


PATTERNS = st.text(alphabet="ab*?~B", max_size=8)


def expression(pattern: str) -> str:
    """The regular expression that a wildcard text stands for, spelled as its definition reads."""
    parts = re.findall(r"~.|~$|.", pattern)
    return "".join(
        {"*": ".*", "?": ".", "~": ""}.get(part) or (re.escape(part[-1]) if part != "~" else "") for part in parts
    )


@given(pattern=PATTERNS, text=st.text(alphabet="abB*?~", max_size=12))
def test_wildcards_mean_what_their_definition_says(pattern: str, text: str) -> None:
    reference = re.compile(expression(pattern), re.IGNORECASE | re.DOTALL)
    assert Wildcard(pattern).whole(text) == (reference.fullmatch(text) is not None)
    found = reference.search(text)
    assert Wildcard(pattern).place(text, 0) == (found.start() if found else None)
