"""Rows of a parts block that are right: blanks, labels, defaults, polygons with their nodes."""

from __future__ import annotations

import pytest

from cellsection.errors import InputError
from cellsection.section.parts import read_block, read_rows
from cellsection.section.rows import PartRow

TRIANGLE = [["shape", "x", "y"], ["polygon", None, None], ["node", 0, 0], ["node", 120, 0], ["node", 0, 90]]


def test_blank_rows_are_skipped_whether_none_or_empty_text() -> None:
    rows, _ = read_rows([["shape", "d"], [None, None], ["circle", 2], ["", " "], ["circle", 3], [None, ""]])
    assert [(row.row, row.dims["d"]) for row in rows] == [(3, 2.0), (5, 3.0)]


def test_a_row_that_ends_early_is_blank_from_there() -> None:
    rows, _ = read_rows([["shape", "d", "x", "n"], ["circle", 2], [], ["circle", 3, 5]])
    assert [(row.dims["d"], row.x, row.n) for row in rows] == [(2.0, 0.0, 1.0), (3.0, 5.0, 1.0)]


def test_blank_cells_take_their_defaults() -> None:
    row = read_rows([["shape", "d"], ["circle", 2]])[0][0]
    assert (row.x, row.y, row.turn, row.sign, row.n, row.datum, row.mirrored) == (0.0, 0.0, 0.0, 1, 1.0, "", False)
    assert (row.label, row.strength, row.stage, row.no_tension) == ("", None, None, False)


@pytest.mark.parametrize(("label", "shown"), [(3.0, "3"), (3, "3"), (2.5, "2.5"), (" web ", "web"), (True, "TRUE")])
def test_a_label_may_be_a_number(label: object, shown: str) -> None:
    assert read_rows([["part", "shape", "d"], [label, "circle", 2]])[0][0].label == shown


@pytest.mark.parametrize("mark", [1, 1.0, True, "yes", "Yes ", "TRUE"])
def test_yes_is_said_in_several_ways(mark: object) -> None:
    assert read_rows([["shape", "d", "no tension"], ["circle", 2, mark]])[0][0].no_tension


@pytest.mark.parametrize("mark", [0, False, "no", "FALSE", None, ""])
def test_no_is_said_in_several_ways(mark: object) -> None:
    assert not read_rows([["shape", "d", "no tension"], ["circle", 2, mark]])[0][0].no_tension


@pytest.mark.parametrize("word", ["half circle", "Half  Circle", " HALF CIRCLE "])
def test_a_shape_is_named_in_any_case(word: str) -> None:
    assert read_rows([["shape", "d"], [word, 2]])[0][0].shape == "half circle"


def test_a_polygon_is_typed_by_its_nodes() -> None:
    block = read_block([*TRIANGLE, ["polygon", 10, 0], ["node", 0, 0], ["node", 1, 0], ["node", 0, 1]])
    assert [part.region.moments().A for part in block.parts] == [5400.0, 0.5]


def test_nodes_are_relative_to_the_place_of_their_polygon_and_turn_about_it() -> None:
    rows = [["shape", "x", "y", "turn"], ["polygon", 100, 50, 90], ["node", 0, 0], ["node", 20, 0], ["node", 0, 10]]
    assert read_block(rows).parts[0].region.bounds() == pytest.approx((90.0, 50.0, 100.0, 70.0), rel=1e-12)


def test_nodes_are_in_the_unit_of_their_columns() -> None:
    rows = [["shape", "x [cm]", "y [mm]"], ["polygon", 0, 0], ["node", 0, 0], ["node", 2, 0], ["node", 0, 10]]
    block = read_block(rows)
    assert (block.unit, block.parts[0].region.moments().A) == ("cm", pytest.approx(1.0, rel=1e-15))


def test_a_plate_runs_between_its_points() -> None:
    header = ["shape", "x", "y", "x2", "y2", "t", "turn", "datum", "mirrored"]
    part = read_block([header, ["plate", 0, 0, 30, 40, 2, 0, None, 0]]).parts[0]
    assert part.region.centroidal()[:3] == pytest.approx((100.0, 15.0, 20.0), rel=1e-12)  # 50 long, 2 thick


def test_a_row_out_of_no_block_tells_the_dimension_alone() -> None:
    with pytest.raises(InputError, match=r"^column d: d = 0 is not positive\. Enter a length greater than 0\.$"):
        PartRow(None, "circle", dims={"d": 0.0}).part()
