"""Layers, surplus and connected pieces."""

from __future__ import annotations

import pytest
import shapely
from shapely import box

from cellsection.geometry import SHAPES, placed
from cellsection.geometry.overlap import connected, flat, layers, surplus


def test_layers_count_how_deep_the_shapes_lie() -> None:
    shapes = [box(0, 0, 4, 1), box(1, 0, 4, 1), box(2, 0, 3, 1), box(10, 0, 11, 1)]
    assert [layer.area for layer in layers(shapes)] == [5.0, 3.0, 1.0]
    assert layers([]) == []


def test_shapes_that_only_touch_are_one_layer() -> None:
    assert len(layers([box(0, 0, 1, 1), box(1, 0, 2, 1)])) == 1


@pytest.mark.parametrize(("by", "area"), [(1, 4.0), (2, 2.0)])
def test_surplus_counts_more_against_fewer(by: int, area: float) -> None:
    more = layers([box(0, 0, 5, 1), box(1, 0, 4, 1)])
    # Counts from left to right: 1 2 2 2 1, less 0 0 1 0 1.
    fewer = layers([box(2, 0, 3, 1), box(4, 0, 5, 1)])
    assert surplus(more, fewer, by).area == area


def test_a_region_of_straight_sides_is_drawn_exactly_and_an_arc_within_its_doubt() -> None:
    plate, disc = flat(SHAPES["rectangle"].build(b=200, h=12)), flat(SHAPES["circle"].build(d=100))
    assert plate.shape.area == 2400.0
    assert plate.doubt < 1e-5
    short = 2500 * 3.141592653589793 - disc.shape.area
    assert 0.0 < short < disc.doubt < 1.0


def test_pieces_within_the_gap_are_taken_together() -> None:
    shape = shapely.union_all([box(0, 0, 1, 1), box(3, 0, 4, 1), box(4.5, 0, 9, 1)])
    assert [piece.area for piece in connected(shape, 0.0, 1e-9)] == [4.5, 1.0, 1.0]
    assert [piece.area for piece in connected(shape, 0.5, 1e-9)] == [5.5, 1.0]
    assert [piece.area for piece in connected(shape, 2.0, 1e-9)] == [6.5]


def test_slivers_between_chords_are_no_pieces() -> None:
    assert len(connected(shapely.union_all([box(0, 0, 1, 1), box(2, 0, 2.001, 1)]), 0.0, sliver=0.01)) == 1


def test_regions_of_several_outlines_are_drawn_with_their_holes() -> None:
    box_section = placed(SHAPES["box"].build(b=100, h=60, tw=5, tf=10), 0, 0)
    assert flat(box_section).shape.area == pytest.approx(100 * 60 - 90 * 40)
