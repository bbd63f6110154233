"""How far the material reaches past notches, against fine drawings."""

from __future__ import annotations

from math import sqrt

import pytest
import shapely
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from cellsection.errors import InputError
from cellsection.geometry import SHAPES, Region, placed, reach
from cellsection.geometry.overlap import layers, surplus
from tests.geometry.random_shapes import regions, shape_regions

PLATE = SHAPES["rectangle"].build(b=100, h=20)


def hole(d: float, x: float, y: float) -> Region:
    return placed(SHAPES["circle"].build(d=d), x, y)


def test_a_hole_inside_moves_nothing() -> None:
    assert reach([PLATE], [hole(10, 50, 10)], 90) == 20.0


def test_a_notch_that_leaves_part_of_the_edge_moves_nothing() -> None:
    assert reach([PLATE], [hole(10, 50, 20)], 90) == 20.0


def test_a_groove_over_the_whole_edge_moves_it() -> None:
    groove = placed(SHAPES["rectangle"].build(b=120, h=8), 50, 20, datum="top")
    assert reach([PLATE], [groove], 90) == 12.0
    assert reach([PLATE], [groove], -90) == 0.0
    assert reach([PLATE], [groove], 0) == 100.0


def test_a_round_cut_leaves_the_crossing_of_its_arc_with_the_sides() -> None:
    # A circle of radius 60 about (50, 70) takes away the top: at the sides x = 0 and 100 it stands at 70 - sqrt(1100).
    assert reach([PLATE], [hole(120, 50, 70)], 90) == pytest.approx(20.0)
    assert reach([PLATE], [hole(120, 50, 60)], 90) == pytest.approx(min(20.0, 60 - sqrt(60**2 - 50**2)))
    assert reach([PLATE], [hole(140, 50, 60)], 90) == pytest.approx(60 - sqrt(70**2 - 50**2))


def test_a_corner_cut_off_moves_the_reach_towards_that_corner() -> None:
    corner = Region.from_points([(100, 20), (80, 20), (100, 0)])
    # Along the diagonal the cut from (80, 20) to (100, 0) is what is left: both its ends are at 100/sqrt 2.
    assert reach([PLATE], [corner], 45) == pytest.approx(100 / sqrt(2))


def test_a_bar_in_the_hole_that_is_cut_for_it_is_material() -> None:
    groove = placed(SHAPES["rectangle"].build(b=100, h=8), 50, 20, datum="top")
    bar = placed(SHAPES["rectangle"].build(b=30, h=14), 50, 12, datum="bottom")
    assert reach([PLATE, bar], [groove], 90) == 26.0
    flush = placed(SHAPES["rectangle"].build(b=30, h=8), 50, 20, datum="top")
    assert reach([PLATE, flush], [groove], 90) == 20.0


def test_one_cut_out_takes_one_layer_of_two() -> None:
    groove = placed(SHAPES["rectangle"].build(b=100, h=8), 50, 20, datum="top")
    assert reach([PLATE, PLATE], [groove], 90) == 20.0
    assert reach([PLATE, PLATE], [groove, groove], 90) == 12.0


def test_cut_outs_that_trim_only_together_are_seen() -> None:
    left = placed(SHAPES["rectangle"].build(b=60, h=5), 0, 20, datum="top left")
    right = placed(SHAPES["rectangle"].build(b=60, h=3), 100, 20, datum="top right")
    assert reach([PLATE], [left], 90) == 20.0
    assert reach([PLATE], [left, right], 90) == 17.0


def test_a_sliver_of_rounding_does_not_count() -> None:
    turned = placed(PLATE, 0, 0, turn=33.3)
    groove = placed(SHAPES["rectangle"].build(b=100, h=8), 0, 6, datum="centre")
    groove = groove.turned(33.3)
    assert reach([turned], [groove], 90 + 33.3) == pytest.approx(2.0, abs=1e-12)


def test_no_material_left_is_refused() -> None:
    with pytest.raises(InputError, match="leave no material"):
        reach([PLATE], [PLATE], 90)


@settings(max_examples=40)
@given(
    st.lists(regions(), min_size=1, max_size=3),
    st.lists(st.tuples(shape_regions(), st.floats(0.0, 1.0), st.floats(0.0, 360.0)), min_size=1, max_size=3),
    st.floats(0.0, 360.0),
)
def test_the_reach_is_that_of_a_fine_drawing(
    solids: list[Region], cutters: list[tuple[Region, float, float]], direction: float
) -> None:
    # Solids in one heap, cut-outs around it.
    solids = [placed(region, 0, 0, datum="centre") for region in solids]
    size = max(value for region in solids for value in region.bounds())
    cut_outs = [
        placed(region, 1.2 * size * share, 0, turn=turn, datum="centre").turned(turn) for region, share, turn in cutters
    ]
    chord = 1e-4 * size
    net = surplus(
        layers(region.polygon(chord) for region in solids), layers(region.polygon(chord) for region in cut_outs)
    )
    # Slivers of the drawing, and what hangs on them, are not compared.
    opened = net.buffer(-20 * chord).buffer(20 * chord)
    assume(not opened.is_empty)
    high = shapely.affinity.rotate(net, -direction, origin=(0, 0)).bounds[2]
    low = shapely.affinity.rotate(opened, -direction, origin=(0, 0)).bounds[2]
    assume(high - low < 1e-2 * size)
    assert low - 50 * chord <= reach(solids, cut_outs, direction) <= high + 50 * chord
