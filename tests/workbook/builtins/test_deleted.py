"""Never a silent wrong value: a function taken away is reported with its cells, and so is all that hangs on it."""

from __future__ import annotations

from pathlib import Path

import pytest
from click.testing import CliRunner

from cellsection.cli import commands
from cellsection.workbook import compile as compiling
from cellsection.workbook.book import Book, Formula, Sheet
from cellsection.workbook.builtins import BUILTINS
from cellsection.workbook.compile import ALL_FORMS
from cellsection.workbook.recalculate import recalculated
from cellsection.workbook.results import Status
from tests.workbook.small import saved

NAMES = sorted({*BUILTINS, *ALL_FORMS})


def call(name: str) -> str:
    """A call with as many arguments as the function needs at least."""
    return f"{name}({','.join(['1'] * (BUILTINS[name].least if name in BUILTINS else 3))})"


@pytest.mark.parametrize("name", NAMES)
def test_a_function_taken_away_is_named_and_its_dependants_are_not_verified(
    name: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    if name in BUILTINS:
        monkeypatch.delitem(BUILTINS, name)
    if name in ALL_FORMS:
        monkeypatch.delitem(compiling.ALL_FORMS, name)
    text = f"{name}(1,1,1)"
    sheet = Sheet("S", {(1, 1): 1.0, (1, 2): 2.0, (1, 3): "no"})
    sheet.formulas = {
        (1, 1): Formula(text, 1, 1),
        (1, 2): Formula("A1+1", 1, 2),
        (1, 3): Formula(f'IF(SUM({text},1)>0,"yes","no")' if name != "SUM" else f'"yes"&{text}', 1, 3),
    }
    if name == "IF":
        sheet.formulas[1, 3] = Formula(f'"yes"&{text}', 1, 3)
    first, dependant, within = recalculated(Book("book", "xlsx", [sheet])).cells
    assert (first.status, first.value, first.reason) == (Status.UNSUPPORTED, 1.0, f"function {name}")
    assert (dependant.status, dependant.value) == (Status.NOT_VERIFIED, 2.0)
    assert f"S!A1: function {name}" in dependant.reason
    assert (within.status, within.value) == (Status.UNSUPPORTED, "no")


@pytest.mark.parametrize("name", ["SUM", "VLOOKUP", "IF", "LET", "TODAY", "SQRT"])
def test_the_check_of_a_book_with_it_names_the_cells_and_exits_2(
    name: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    book = saved(tmp_path, {"Girder": {"B2": f"<f>{call(name)}</f><v>7</v>", "C2": "<f>B2*2</f><v>14</v>"}})
    monkeypatch.delitem(ALL_FORMS if name in ALL_FORMS else BUILTINS, name)
    result = CliRunner().invoke(commands, ["check", str(book)])
    assert result.exit_code == 2
    assert f"function {name}" in result.output
    assert "Girder!B2" in result.output
    assert "Girder!C2" in result.output


@pytest.mark.parametrize("name", sorted(BUILTINS))
def test_a_wrong_number_of_arguments_is_a_finding_and_never_a_value(name: str) -> None:
    declared = BUILTINS[name]
    counts = [declared.least - 1] if declared.least else []
    counts += [declared.most + 1] if declared.most is not None else []
    sheet = Sheet("S")
    for row, count in enumerate(counts, start=1):
        sheet.formulas[row, 1] = Formula(f"{name}({','.join(['A9'] * count)})", row, 1)
    for cell in recalculated(Book("book", "xlsx", [sheet])).cells:
        assert cell.status is Status.UNSUPPORTED, cell.formula
        assert name in cell.reason
        assert "argument" in cell.reason
