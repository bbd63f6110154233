"""Where a datum puts a part, mirrored and turned."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellsection.errors import InputError
from cellsection.geometry import DATUMS, SHAPES, Region, datum_point, placed
from tests.geometry.random_shapes import shape_regions

CHANNEL = SHAPES["channel"].build(h=100, b=50, tw=6, tf=10, r=8)


@given(shape_regions(), st.sampled_from(DATUMS), st.floats(-1e3, 1e3), st.floats(-1e3, 1e3), st.booleans())
def test_the_datum_lies_where_it_is_put(region: Region, datum: str, x: float, y: float, mirrored: bool) -> None:
    there = placed(region, x, y, datum=datum, mirrored=mirrored)
    assert datum_point(there, datum) == pytest.approx((x, y), abs=1e-9)


@given(shape_regions(), st.floats(-360.0, 360.0))
def test_turning_keeps_the_centroid_where_it_is_put(region: Region, turn: float) -> None:
    there = placed(region, 30, -40, turn=turn).centroidal()
    assert (there.x, there.y) == pytest.approx((30, -40), abs=1e-9)


def test_a_part_turns_about_its_datum() -> None:
    # A channel on its back as a cap over a beam: web on top, the back of the web at y = 300.
    cap = placed(CHANNEL, 0, 300, turn=-90, datum="left")
    assert cap.bounds() == pytest.approx((-50.0, 250.0, 50.0, 300.0))
    assert cap.centroidal().y > 275.0


def test_the_datum_is_a_point_of_the_mirrored_shape() -> None:
    mirrored = placed(CHANNEL, 0, 0, datum="left", mirrored=True)
    assert mirrored.bounds() == pytest.approx((0.0, -50.0, 50.0, 50.0))
    assert mirrored.centroidal().x > 25.0  # the web is on the right now


@pytest.mark.parametrize(
    ("datum", "bounds"),
    [
        ("centre", (-100.0, -6.0, 100.0, 6.0)),
        ("bottom", (-100.0, 0.0, 100.0, 12.0)),
        ("top", (-100.0, -12.0, 100.0, 0.0)),
        ("left", (0.0, -6.0, 200.0, 6.0)),
        ("right", (-200.0, -6.0, 0.0, 6.0)),
        ("bottom left", (0.0, 0.0, 200.0, 12.0)),
        ("bottom right", (-200.0, 0.0, 0.0, 12.0)),
        ("top left", (0.0, -12.0, 200.0, 0.0)),
        ("top right", (-200.0, -12.0, 0.0, 0.0)),
        ("centroid", (-100.0, -6.0, 100.0, 6.0)),
    ],
)
def test_each_datum_word_names_its_point_of_the_box(datum: str, bounds: tuple[float, ...]) -> None:
    assert placed(SHAPES["rectangle"].build(b=200, h=12), 0, 0, datum=datum).bounds() == bounds


@pytest.mark.parametrize(("x", "y", "column"), [(float("nan"), 0, "x"), (0, float("inf"), "y"), (1e60, 0, "x")])
def test_a_place_that_is_no_number_is_refused(x: float, y: float, column: str) -> None:
    with pytest.raises(InputError, match="not a number to compute with") as met:
        placed(CHANNEL, x, y)
    assert met.value.column == column


def test_a_turn_that_is_no_number_is_refused() -> None:
    with pytest.raises(InputError, match="angle nan is not a number"):
        placed(CHANNEL, 0, 0, turn=float("nan"))


def test_an_unknown_datum_is_refused_with_the_words_there_are() -> None:
    with pytest.raises(InputError, match="'middle' is not known") as met:
        placed(CHANNEL, 0, 0, datum="middle")
    assert met.value.column == "datum"
    assert "bottom left" in met.value.remedy
