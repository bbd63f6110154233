"""Blocks moved, mirrored, joined and written out: the section goes where it should, whatever its shapes are."""

from __future__ import annotations

from math import radians

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellsection.errors import InputError
from cellsection.geometry import DATUMS, SHAPES, cosine_sine
from cellsection.section.assembly import joined_rows, mirrored_rows, moved_rows, written
from cellsection.section.parts import read_rows
from cellsection.section.rows import PartRow
from tests.geometry.random_shapes import dimensions

SYMBOLS = ("A", "x", "y", "Ix", "Iy", "Ixy")
few = settings(max_examples=15, deadline=None)  # for each shape
NODES = ((0.0, 0.0), (70.0, 5.0), (60.0, 40.0), (-10.0, 25.0))
lengths = st.floats(-1e3, 1e3)
angles = st.one_of(st.sampled_from([0.0, 30.0, 90.0, -90.0, 180.0, 270.0]), st.floats(-360.0, 360.0))


@st.composite
def part_rows(draw: st.DrawFn, word: str) -> PartRow:
    """A part of one shape, anywhere, turned, mirrored, by any datum, with any weight."""
    sizes = {} if word == "polygon" else draw(dimensions(word))
    weight = {"sign": draw(st.sampled_from([1, -1])), "n": draw(st.sampled_from([1.0, 7.0, 0.125]))}
    if word == "plate":
        return PartRow(None, word, dims=sizes, **weight)
    free = {
        "x": draw(lengths),
        "y": draw(lengths),
        "turn": draw(angles),
        "mirrored": draw(st.booleans()),
        "datum": "" if word == "polygon" else draw(st.sampled_from(["", *DATUMS])),
        "nodes": NODES if word == "polygon" else (),
    }
    return PartRow(None, word, dims=sizes, **free, **weight)


def integrals(row: PartRow) -> tuple[float, ...]:
    """Area, place, and second moments about the part's own centroid."""
    return tuple(row.part().region.centroidal())


def agree(made: tuple[float, ...], wanted: tuple[float, ...], reach: float) -> None:
    """Areas and second moments to a part in 1e9 of the size of each, places to one of how far out they are."""
    A, _, _, Ix, Iy, _ = wanted
    for k, scale in enumerate((A, reach, reach, Ix + Iy, Ix + Iy, Ix + Iy)):
        assert made[k] == pytest.approx(wanted[k], abs=1e-9 * abs(scale)), SYMBOLS[k]


def reach(row: PartRow, *more: float) -> float:
    return max(1.0, *map(abs, row.part().region.bounds()), *map(abs, more))


WORDS = [*SHAPES, "polygon"]


@pytest.mark.parametrize("word", WORDS)
@few
@given(data=st.data())
def test_a_moved_part_keeps_its_moments_and_goes_along(word: str, data: st.DataObject) -> None:
    row, dx, dy = data.draw(part_rows(word)), data.draw(lengths), data.draw(lengths)
    A, x, y, *own = integrals(row)
    agree(integrals(moved_rows([row], dx, dy)[0]), (A, x + dx, y + dy, *own), reach(row, dx, dy))


@pytest.mark.parametrize("word", WORDS)
@few
@given(data=st.data())
def test_a_turned_part_transforms_as_a_tensor_does(word: str, data: st.DataObject) -> None:
    row, turn, about = data.draw(part_rows(word)), data.draw(angles), (data.draw(lengths), data.draw(lengths))
    A, x, y, Ix, Iy, Ixy = integrals(row)
    c, s = cosine_sine(turn)
    px, py = x - about[0], y - about[1]
    wanted = (
        A,
        about[0] + c * px - s * py,
        about[1] + s * px + c * py,
        # ∫y² dA and ∫x² dA of the points (c·x - s·y, s·x + c·y)
        s * s * Iy + c * c * Ix + 2 * s * c * Ixy,
        c * c * Iy + s * s * Ix - 2 * s * c * Ixy,
        c * s * (Iy - Ix) + (c * c - s * s) * Ixy,
    )
    agree(integrals(moved_rows([row], 0.0, 0.0, turn, about)[0]), wanted, reach(row, *about))


@pytest.mark.parametrize("axis", ["x", "y"])
@pytest.mark.parametrize("word", WORDS)
@few
@given(data=st.data())
def test_a_mirrored_part_lies_across_the_line(word: str, axis: str, data: st.DataObject) -> None:
    row, position = data.draw(part_rows(word)), data.draw(lengths)
    A, x, y, Ix, Iy, Ixy = integrals(row)
    place = (x, 2 * position - y) if axis == "x" else (2 * position - x, y)
    agree(integrals(mirrored_rows([row], axis, position)[0]), (A, *place, Ix, Iy, -Ixy), reach(row, position))


@pytest.mark.parametrize("axis", ["x", "y"])
@pytest.mark.parametrize("word", WORDS)
@few
@given(data=st.data())
def test_the_outline_lies_across_the_line_too(word: str, axis: str, data: st.DataObject) -> None:
    # Moments alone would not tell an unsymmetric shape from its mirror image turned about.
    row, position = data.draw(part_rows(word)), data.draw(lengths)
    xmin, ymin, xmax, ymax = row.part().region.bounds()
    made = mirrored_rows([row], axis, position)[0].part().region.bounds()
    p = 2 * position
    wanted = (xmin, p - ymax, xmax, p - ymin) if axis == "x" else (p - xmax, ymin, p - xmin, ymax)
    assert made == pytest.approx(wanted, abs=1e-9 * reach(row, position))


@pytest.mark.parametrize("word", WORDS)
@few
@given(data=st.data())
def test_mirroring_twice_brings_a_part_back(word: str, data: st.DataObject) -> None:
    row, position = data.draw(part_rows(word)), data.draw(lengths)
    for axis in ("x", "y"):
        twice = mirrored_rows(mirrored_rows([row], axis, position), axis, position)[0]
        agree(integrals(twice), integrals(row), reach(row, position))


@pytest.mark.parametrize("unit", ["", "mm", "in"])
@pytest.mark.parametrize("word", WORDS)
@few
@given(data=st.data())
def test_a_written_block_is_read_as_it_was(word: str, unit: str, data: st.DataObject) -> None:
    rows = [data.draw(part_rows(word)) for _ in range(2)]
    read, named = read_rows(written(rows, unit))
    assert named == unit
    assert [each.part().weight for each in read] == [each.part().weight for each in rows]
    assert [integrals(each) for each in read] == [integrals(each) for each in rows]


def test_everything_that_a_row_says_is_written() -> None:
    header = [
        "part",
        "shape",
        "d",
        "x",
        "y",
        "turn",
        "sign",
        "n",
        "datum",
        "mirrored",
        "strength",
        "stage",
        "no tension",
    ]
    block = (tuple(header), ("bar", "circle", 20.0, 1.0, 2.0, 30.0, -1.0, 7.0, "top", 1.0, 500.0, 2.0, "yes"))
    assert written(*read_rows(block)) == block


def test_blanks_are_written_where_other_rows_have_entries() -> None:
    block = (
        ("shape", "b", "h", "d", "x", "y"),
        ("rectangle", 9.0, 4.0, None, 0.0, 0.0),
        ("circle", None, None, 2.0, 0.0, 0.0),
    )
    assert written(*read_rows(block)) == block


def test_joined_blocks_are_in_the_unit_of_the_first() -> None:
    inches = read_rows([["shape", "b [in]", "h [in]", "y [in]"], ["rectangle", 2, 1, 3]])
    polygon = read_rows(
        [["shape", "x [cm]", "y [cm]"], ["polygon", 1, 0], ["node", 0, 0], ["node", 1, 0], ["node", 0, 1]]
    )
    plate = read_rows([["shape", "x [m]", "y [m]", "x2 [m]", "y2 [m]", "t [m]"], ["plate", 0, 0, 1, 0, 0.01]])
    sector = read_rows([["shape", "r [mm]", "angle", "turn"], ["sector", 10, 90, 45]])
    rows, unit = joined_rows([sector, inches, polygon, plate])
    assert unit == "mm"
    assert (rows[0].dims, rows[0].turn) == ({"r": 10.0, "angle": 90.0}, 45.0)
    assert (rows[1].dims, rows[1].y) == (pytest.approx({"b": 50.8, "h": 25.4}), pytest.approx(76.2))
    assert (rows[2].x, rows[2].nodes[1]) == (10.0, pytest.approx((10.0, 0.0)))
    assert rows[3].dims == pytest.approx({"x": 0.0, "y": 0.0, "x2": 1000.0, "y2": 0.0, "t": 10.0})


def test_a_block_with_a_unit_is_not_joined_to_one_without() -> None:
    with pytest.raises(InputError, match="one block is in mm and another names no length unit"):
        joined_rows([read_rows([["shape", "d"], ["circle", 2]]), read_rows([["shape", "d [mm]"], ["circle", 2]])])


def test_degrees_are_degrees() -> None:
    row = moved_rows([PartRow(None, "circle", dims={"d": 2.0}, x=10.0)], 0.0, 0.0, 90.0)[0]
    assert (row.x, row.y) == (0.0, 10.0)
    assert radians(row.turn) == pytest.approx(1.5707963267948966)
