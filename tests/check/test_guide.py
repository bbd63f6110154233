"""The guide to checking says what is so: its options, limits, keys and examples."""

from __future__ import annotations

import json
import re
from dataclasses import fields
from pathlib import Path
from typing import TYPE_CHECKING, Any

import distributed
import pytest

from cellsection.check import Report, Tolerance, check_book
from cellsection.check.record import line_record, record
from cellsection.cli.check import check
from cellsection.workbook.book import Limits
from tests.check.small_book import write_book

if TYPE_CHECKING:
    from collections.abc import Callable

GUIDE = (Path(__file__).parents[2] / "docs" / "checking.md").read_text(encoding="utf-8")
EXAMPLES = re.findall(r"```python\n(.*?)```", GUIDE, re.DOTALL)


def rows(heading: str) -> dict[str, list[str]]:
    """The table under a heading: first cell of a row, without its backticks -> the other cells."""
    section = GUIDE.partition(f"\n## {heading}\n")[2].partition("\n## ")[0]
    cells = [
        [cell.strip() for cell in line.strip("|").split(" | ")] for line in section.splitlines() if line[:2] == "| "
    ]
    return {first.strip("`"): rest for first, *rest in cells}


def test_every_option_is_in_the_guide() -> None:
    told = " ".join(rows("What may be given"))
    options = [option for each in check.params for option in each.opts if option.startswith("--")]
    assert [option for option in options if option not in told] == []


def test_every_limit_is_in_the_guide_with_its_default() -> None:
    told = {name: row[0].replace(",", "") for name, row in rows("Limits").items() if name != "limit"}
    assert told == {each.name: f"{each.default:.15g}" for each in fields(Limits)}


def test_the_keys_of_the_json_are_those_the_guide_shows() -> None:
    shown = json.loads(re.findall(r"```json\n(.*?)```", GUIDE, re.DOTALL)[0])
    made = record([Report("girder.xlsx", Tolerance())])
    assert list(shown) == list(made)
    assert list(shown["books"][0]) == list(made["books"][0])
    assert list(shown["books"][0]["formula cells"]) == list(made["books"][0]["formula cells"])
    line = line_record(Report("girder.xlsx", Tolerance()))
    assert set(line) == {*made, *made["books"][0]} - {"books"}
    assert f"`{line['schema']}`" in GUIDE


@pytest.mark.parametrize("example", EXAMPLES, ids=lambda example: example.strip().splitlines()[0])
def test_the_examples_in_python_run(
    example: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    (tmp_path / "archive" / "2019").mkdir(parents=True)
    books = [tmp_path / "girder.xlsx", tmp_path / "archive" / "a.xlsx", tmp_path / "archive" / "2019" / "b.xlsx"]
    for path in books:
        assert check_book(write_book(path, {"A1": 300.0, "B1": ("A1*2", 600.0)})).verdict.words == "holds"
    monkeypatch.chdir(tmp_path)
    monkeypatch.setattr(distributed, "Client", in_this_process(distributed.Client))
    exec(compile(example, "docs/checking.md", "exec"), {"__name__": "__main__"})
    printed = capsys.readouterr().out.splitlines()
    assert [line for line in printed if "fault" in line or "unreadable" in line] == []


def in_this_process(client: Callable[..., Any]) -> Callable[..., Any]:
    """A cluster for tests, which starts no processes and opens no dashboard."""
    return lambda: client(processes=False, n_workers=1, threads_per_worker=1, dashboard_address=None)
