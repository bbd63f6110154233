"""The Python face: the cell functions on lists, arrays and DataFrames, all of one mind; nothing loaded too early."""

from __future__ import annotations

import inspect
import subprocess
import sys
from typing import Any

import numpy as np
import pandas as pd
import pytest

import cellsection
from cellsection.catalogue import CATALOGUE
from cellsection.errors import InputError

GIRDER = [
    ["part", "shape", "b [mm]", "h [mm]", "d [mm]", "y [mm]", "sign", "n"],
    ["flange", "rectangle", 200, 20, None, 0, None, None],
    ["web", "rectangle", 10, 460, None, 240, None, 7],
    ["hole", "circle", None, None, 9, 240, -1, 7],
]
FRAME = pd.DataFrame(GIRDER[1:], columns=GIRDER[0])
ARRAY = np.array(GIRDER, dtype=object)
KINDS = {"lists": GIRDER, "tuples": tuple(map(tuple, GIRDER)), "array": ARRAY, "frame": FRAME}
# Every function that takes a block, with what else it is given.
CALLS: dict[str, tuple[Any, ...]] = {
    "moved": (5, -3, 30),
    "mirrored": ("x", 100),
    "joined": (),
    "totals": (),
    "ledger": (),
    "about": (1, 2, 30),
    "principal": (),
    "fibres": (15,),
    "outline": ("web", 24),
}


def rows_of(result: Any) -> list[list[Any]]:
    """A result of any kind as rows without headers, blanks None."""
    if isinstance(result, pd.DataFrame):
        frame = result.reset_index() if result.index.name else result
        return [[None if pd.isna(cell) else cell for cell in row] for row in frame.astype(object).to_numpy().tolist()]
    return [list(row) for row in result]


def test_the_face_is_the_catalogue_under_its_names_without_the_prefix() -> None:
    assert {f"CS_{name.upper()}" for name in cellsection.__all__} == set(CATALOGUE)
    assert list(cellsection.__all__) == sorted(cellsection.__all__)


@pytest.mark.parametrize("name", cellsection.__all__)
def test_a_function_takes_the_arguments_of_its_cell_function(name: str) -> None:
    parameters = inspect.signature(getattr(cellsection, name)).parameters.values()
    arguments = CATALOGUE[f"CS_{name.upper()}"].arguments
    assert [each.name for each in parameters] == [each.name for each in arguments]
    for parameter, argument in zip(parameters, arguments, strict=True):
        left_out = parameter.default is not inspect.Parameter.empty
        assert left_out == argument.optional
        assert (parameter.kind is inspect.Parameter.VAR_POSITIONAL) == argument.repeats


def test_the_package_alone_loads_nothing() -> None:
    code = (
        "import sys, cellsection; cellsection.__version__, dir(cellsection);"
        "heavy = {'numpy', 'pandas', 'shapely', 'scipy', 'cellsection.face', 'cellsection.catalogue'};"
        "sys.exit(', '.join(heavy & set(sys.modules)))"
    )
    assert (
        subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=False).stderr.strip() == ""
    )


def test_lists_need_neither_numpy_nor_pandas() -> None:
    code = (
        "import sys, cellsection; cellsection.ledger([['shape', 'd'], ['circle', 30]]);"
        "sys.exit(', '.join({'numpy', 'pandas'} & set(sys.modules)))"
    )
    assert (
        subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=False).stderr.strip() == ""
    )


def test_what_is_not_there_is_an_attribute_error() -> None:
    with pytest.raises(AttributeError, match="no attribute 'twisted'"):
        cellsection.twisted  # noqa: B018
    assert set(cellsection.__all__) <= set(dir(cellsection))


@pytest.mark.parametrize("kind", KINDS)
@pytest.mark.parametrize("name", CALLS)
def test_all_kinds_agree_with_the_cell_function(name: str, kind: str) -> None:
    result = getattr(cellsection, name)(KINDS[kind], *CALLS[name])
    cells = CATALOGUE[f"CS_{name.upper()}"].call(GIRDER, *CALLS[name])
    assert isinstance(cells, tuple)
    wanted = [[None if cell == "" else cell for cell in row] for row in cells]
    headed = cells[0][0] in ("part", "shape")
    if kind == "frame":
        assert isinstance(result, pd.DataFrame)
        assert not headed or list(result.columns) == wanted[0]
        assert rows_of(result) == wanted[1:] if headed else rows_of(result) == wanted
    else:
        assert isinstance(result, np.ndarray if kind == "array" else list)
        assert rows_of(result) == wanted


@pytest.mark.parametrize("kind", KINDS)
def test_one_number_is_a_float(kind: str) -> None:
    for number in (cellsection.totals(KINDS[kind], "A"), cellsection.principal(KINDS[kind], "angle")):
        assert type(number) is float


@pytest.mark.parametrize("kind", KINDS)
def test_several_symbols_give_as_many_numbers(kind: str) -> None:
    A, Ix = cellsection.totals(GIRDER, "A"), cellsection.totals(GIRDER, "Ix")
    assert cellsection.totals(GIRDER, ["A", "Ix"]) == [A, Ix]
    assert cellsection.totals(GIRDER, ["A"]) == [A]
    result = cellsection.totals(KINDS[kind], np.array(["A", "Ix"]) if kind == "array" else ["A", "Ix"])
    if kind == "frame":
        assert result.loc["Ix", "value"] == Ix
    else:
        assert list(result) == [A, Ix]
    assert isinstance(result, {"array": np.ndarray, "frame": pd.DataFrame}.get(kind, list))


def test_rows_of_a_frame_are_found_by_symbol_and_side() -> None:
    assert cellsection.totals(FRAME).loc["Ix", "unit"] == "mm⁴"
    assert cellsection.fibres(FRAME).loc["top", "distance"] == cellsection.fibres(GIRDER)[0][1]


def test_a_named_index_is_a_column() -> None:
    indexed = FRAME.set_index("part")
    assert rows_of(cellsection.ledger(indexed)) == rows_of(cellsection.ledger(FRAME))


def test_typed_columns_of_a_frame_are_plain_numbers() -> None:
    typed = FRAME.convert_dtypes()
    assert rows_of(cellsection.totals(typed)) == rows_of(cellsection.totals(FRAME))


def test_a_numeric_array_is_a_table_of_floats() -> None:
    points = np.array([[0, 0], [120, 0], [0, 90]], dtype=np.int32)
    block = cellsection.polygon(points)
    assert isinstance(block, np.ndarray)
    assert cellsection.totals(block, "A") == 5400.0
    assert cellsection.outline(block, 1, 4).dtype == float
    assert (
        cellsection.totals(cellsection.polygon([np.array([0.0, 0.0]), np.array([120, 0]), np.array([0, 90])]), "A")
        == 5400
    )


@pytest.mark.parametrize(
    "column", [["rectangle", "circle"], np.array(["rectangle", "circle"]), pd.Series(["rectangle", "circle"])]
)
def test_columns_come_flat_as_arrays_or_as_series(column: Any) -> None:
    size, at = pd.DataFrame({"b": [200, 30], "h": [20, np.nan]}), np.array([0, 25])
    block = cellsection.parts(column, size, at, n=np.float64(7))
    assert isinstance(block, pd.DataFrame)
    assert cellsection.totals(block, "A") == pytest.approx(7 * (4000 + 706.8583470577034), rel=1e-12)


def test_a_row_of_lists_may_end_early() -> None:
    assert cellsection.totals([["shape", "d", "x", "y"], ["circle", 30]], "x") == 0.0


def test_faults_are_a_text_or_rows() -> None:
    assert cellsection.faults(GIRDER) == "no faults"
    twice = cellsection.faults(pd.concat([FRAME, FRAME]))
    assert list(twice.columns) == ["part", "fault", "effect", "remedy"]


def test_agreement_is_a_bool() -> None:
    assert cellsection.agrees(np.float64(1.0), 1) is True
    assert cellsection.agrees(1.0, 1.1, 0.05) is False


BAD = {
    "it is a number": (3, "parts, row 1: "),
    "it is empty": ([], "parts, row 1: "),
    "it has three dimensions": (np.zeros((2, 2, 2)), "parts: an array of 3 dimensions"),
    "a row is no list": ([["shape", "d"], "circle"], "parts, row 2: the rows are not all as long"),
    "a row is longer than its headers": ([["shape", "d"], ["circle", 30, 5]], "row 2: "),
    "a list holds NaN": ([["shape", "d"], ["circle", float("nan")]], "parts, row 2, column d: nan"),
    "an array holds NaN": (np.array([["shape", "d"], ["circle", np.nan]], dtype=object), "parts, row 2, column d: nan"),
    "a frame has no headers": (pd.DataFrame([["circle", 30]]), "parts, row 1: the header of column 1 is 0"),
    "a frame holds a time": (
        pd.DataFrame({"shape": ["circle"], "d": [pd.Timestamp(2026, 12, 1)]}),
        "row 2, column d: ",
    ),
    "a frame lacks a dimension": (
        pd.DataFrame({"shape": ["circle"], "d": [np.nan]}),
        "row 2, column d: the circle needs d",
    ),
}


@pytest.mark.parametrize(("block", "says"), BAD.values(), ids=BAD)
def test_a_block_is_refused_in_one_line_when(block: Any, says: str) -> None:
    with pytest.raises(InputError) as caught:
        cellsection.totals(block, "A")
    assert says in str(caught.value)
    assert len(str(caught.value).splitlines()) == 1


def test_symbols_in_a_table_are_refused() -> None:
    with pytest.raises(InputError, match="which: the symbols are a table"):
        cellsection.totals(GIRDER, [["A", "x"], ["Ix", "Iy"]])
