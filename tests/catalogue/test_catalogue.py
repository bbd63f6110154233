"""Every cell function is complete, and its example gives what it says: in Python and out of a saved workbook."""

from __future__ import annotations

import tomllib
from pathlib import Path

import pytest

import cellsection
from cellsection.catalogue import CATALOGUE, CellFunction
from tests.catalogue.sheet import in_python, in_workbook

ROOT = Path(__file__).resolve().parents[2]
FUNCTIONS = [pytest.param(function, id=name) for name, function in CATALOGUE.items()]
every = pytest.mark.parametrize("function", FUNCTIONS)


def same(made: object, wanted: object) -> None:
    """Equal, numbers to a part in 1e12."""
    if isinstance(wanted, tuple):
        assert isinstance(made, tuple)
        assert [len(row) for row in made] == [len(row) for row in wanted]
        for one, other in zip(made, wanted, strict=True):
            for value, reference in zip(one, other, strict=True):
                same(value, reference)
    elif isinstance(wanted, float):
        assert made == pytest.approx(wanted, rel=1e-12, abs=1e-12)
    else:
        assert made == wanted
        assert type(made) is type(wanted)


@every
def test_it_is_declared_in_full(function: CellFunction) -> None:
    assert function.help.endswith(".")
    assert function.source
    assert function.returns.layout
    assert function.returns.help
    for argument in function.arguments:
        assert argument.help
        assert argument.kind
        assert argument.dimension in ("", "L", "L²", "°")
        assert not argument.default or argument.optional


@every
def test_its_example_is_one_that_can_be_followed_by_hand(function: CellFunction) -> None:
    assert function.example.why
    assert function.name in function.example.formula
    assert all(len({len(row) for row in rows}) == 1 for rows in function.example.cells.values())


@every
def test_its_example_gives_its_result_in_python(function: CellFunction) -> None:
    same(in_python(function.example.formula, function.example.cells), function.example.result)


@every
def test_its_example_gives_its_result_in_a_saved_workbook(function: CellFunction, tmp_path: Path) -> None:
    example = function.example
    rows, columns = (len(example.result), len(example.result[0])) if isinstance(example.result, tuple) else (1, 1)
    same(in_workbook(tmp_path, example.formula, example.cells, rows, columns), example.result)


@every
def test_its_example_gives_its_result_as_an_array_formula_too(function: CellFunction, tmp_path: Path) -> None:
    # An area one row and one column too large is filled up with #N/A, as the application does; the result stays.
    example = function.example
    table = example.result if isinstance(example.result, tuple) else ((example.result,),)
    made = in_workbook(tmp_path, example.formula, example.cells, len(table), len(table[0]) + 1)
    same(made[0][0], table[0][0])


def test_the_first_set_of_functions_is_there() -> None:
    names = "PARTS POLYGON MOVED MIRRORED JOINED TOTALS LEDGER ABOUT PRINCIPAL FIBRES FAULTS OUTLINE AGREES EDITION"
    assert list(CATALOGUE) == [f"CS_{name}" for name in names.split()]


def test_the_version_is_said_once() -> None:
    project = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))["project"]
    assert project["version"] == cellsection.__version__
    assert CATALOGUE["CS_EDITION"].call().split()[:2] == ["cellsection", cellsection.__version__]
