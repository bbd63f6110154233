"""Regions: what moving, turning and mirroring does to the integrals, bounds, outlines, and bad corners."""

from __future__ import annotations

from math import hypot

import pytest
import shapely
import sympy as sp
from hypothesis import assume, given
from hypothesis import strategies as st

from cellsection.errors import InputError
from cellsection.geometry import SHAPES, Line, Region, second_moments
from tests.geometry.random_shapes import regions, shape_regions
from tests.geometry.test_cut import EXACT, assert_same, scale

SQUARE = [(0.0, 0.0), (4.0, 0.0), (4.0, 4.0), (0.0, 4.0)]


@given(regions(), st.floats(-1e3, 1e3), st.floats(-1e3, 1e3))
def test_moving_transfers_the_integrals_by_the_parallel_axis_theorem(region: Region, dx: float, dy: float) -> None:
    A, Qx, Qy, Ix, Iy, Ixy = region.moments()
    moved = region.moved(dx, dy)
    expected = type(region.moments())(
        A,
        Qx + A * dy,
        Qy + A * dx,
        Ix + 2 * dy * Qx + A * dy**2,
        Iy + 2 * dx * Qy + A * dx**2,
        Ixy + dx * Qx + dy * Qy + A * dx * dy,
    )
    far = hypot(dx, dy) + scale(region).Qx / A
    natural = type(expected)(A, A * far, A * far, A * far**2, A * far**2, A * far**2)
    assert_same(moved.moments(), expected, natural)


@given(regions(), st.floats(-360.0, 360.0))
def test_turning_transforms_the_integrals(region: Region, turn: float) -> None:
    before, after = region.moments(), region.turned(turn).moments()
    natural = scale(region)
    # The axes turned the other way see the region as the turned region is seen.
    expected = second_moments(before.Ix, before.Iy, before.Ixy, -turn)
    assert abs(after.A - before.A) <= EXACT * natural.A
    for met, wanted in zip(after[3:], expected, strict=True):
        assert abs(met - wanted) <= EXACT * natural.Ix
    assert hypot(after.Qx, after.Qy) == pytest.approx(hypot(before.Qx, before.Qy), abs=EXACT * natural.Qx)


@given(regions(), st.floats(-360.0, 360.0), st.floats(-1e3, 1e3), st.floats(-1e3, 1e3))
def test_turning_about_a_point_keeps_the_point(region: Region, turn: float, x: float, y: float) -> None:
    before, after = region.centroidal(), region.turned(turn, about=(x, y)).centroidal()
    distance = hypot(before.x - x, before.y - y)
    assert hypot(after.x - x, after.y - y) == pytest.approx(distance, rel=EXACT, abs=1e-9)


@given(regions())
def test_mirroring_turns_the_signs_of_x(region: Region) -> None:
    A, Qx, Qy, Ix, Iy, Ixy = region.moments()
    assert_same(region.mirrored().moments(), type(region.moments())(A, Qx, -Qy, Ix, Iy, -Ixy), scale(region))
    assert_same(region.mirrored().mirrored().moments(), region.moments(), scale(region))


@given(shape_regions(), st.sampled_from([1e3, 1e6, 1e9]))
def test_a_part_far_away_keeps_the_digits_of_its_own_moments(region: Region, distance: float) -> None:
    own, far = region.centroidal(), region.moved(distance, -distance).centroidal()
    assert far.A == own.A
    assert (far.Ix, far.Iy, far.Ixy) == (own.Ix, own.Iy, own.Ixy)


def test_a_polygon_typed_far_away_keeps_its_digits() -> None:
    far = Region.from_points([(x + 2.0**30, y - 2.0**30) for x, y in SQUARE])
    assert far.centroidal()[3:] == Region.from_points(SQUARE).centroidal()[3:]


integer = st.integers(-20, 20)


@given(st.lists(st.tuples(integer, integer), min_size=3, max_size=9, unique=True))
def test_shapely_and_sympy_agree_on_polygons(points: list[tuple[int, int]]) -> None:
    outline = shapely.Polygon(points)
    assume(outline.is_valid and outline.area > 0.0)
    met = Region.from_points(points).moments()
    exact = sp.Polygon(*points)
    assert isinstance(exact, sp.Polygon)
    assert pytest.approx(outline.area, rel=1e-13) == met.A
    assert pytest.approx(float(abs(exact.area)), rel=1e-13) == met.A
    assert (met.Qy / met.A, met.Qx / met.A) == pytest.approx(tuple(outline.centroid.coords[0]), rel=1e-11, abs=1e-11)
    own = Region.from_points(points).centroidal()
    # sympy takes the sense of the outline for the sign of its moments.
    sign = 1 if exact.area > 0 else -1
    Ix, Iy, Ixy = (sign * float(value) for value in exact.second_moment_of_area())
    assert (own.Ix, own.Iy, own.Ixy) == pytest.approx((Ix, Iy, Ixy), rel=1e-10, abs=1e-10)


@given(regions(), st.floats(-360.0, 360.0))
def test_the_bounds_enclose_a_fine_drawing_tightly(region: Region, turn: float) -> None:
    left, low, right, high = region.bounds()
    chord = 1e-6 * max(right - left, high - low)
    drawn = shapely.affinity.rotate(region.polygon(chord), -turn, origin=(0, 0)).bounds
    assert region.bounds(turn) == pytest.approx(drawn, abs=2 * chord)


def test_the_bounds_of_a_circle_are_exact_in_its_own_axes_and_in_turned_ones() -> None:
    circle = SHAPES["circle"].build(d=10)
    assert circle.bounds() == (0.0, 0.0, 10.0, 10.0)
    reach = 5 * 2**0.5
    assert circle.bounds(45) == pytest.approx((reach - 5, -5.0, reach + 5, 5.0), abs=1e-14)


@given(regions(), st.integers(30, 120))
def test_an_outline_has_exactly_the_points_asked_for_and_every_corner(region: Region, points: int) -> None:
    path = region.outline(points)
    assert len(path) == points
    assert path[0] == path[-1]
    assert {(segment.x1, segment.y1) for segment in region.loops[0]} <= set(path)


def test_an_outline_without_arcs_repeats_its_last_point() -> None:
    assert Region.from_points(SQUARE).outline(7) == [*SQUARE, SQUARE[0], SQUARE[0], SQUARE[0]]


def test_spare_points_go_to_the_arcs() -> None:
    circle = SHAPES["circle"].build(d=10)
    assert len(set(circle.outline(41))) == 40
    assert all(hypot(x - 5, y - 5) == pytest.approx(5.0) for x, y in circle.outline(41))


def test_an_outline_of_too_few_points_says_how_many_it_needs() -> None:
    with pytest.raises(InputError, match="12 sides") as met:
        SHAPES["I"].build(h=300, b=150, tw=7, tf=10).outline(12)
    assert met.value.remedy == "Ask for 13 points or more"


@pytest.mark.parametrize("sense", [1, -1])
def test_the_sense_in_which_corners_are_listed_does_not_matter(sense: int) -> None:
    region = Region.from_points(SQUARE[::sense])
    assert region.moments().A == 16.0
    assert region.loops[0][0] in {Line(0, 0, 4, 0), Line(4, 4, 0, 4), Line(4, 0, 4, 4), Line(0, 4, 0, 0)}


def test_repeated_corners_are_dropped() -> None:
    assert len(Region.from_points([*SQUARE[:2], *SQUARE[1:], SQUARE[0]]).loops[0]) == 4


def test_a_cut_that_leads_to_a_hole_is_allowed() -> None:
    hole = [(1.0, 1.0), (1.0, 3.0), (3.0, 3.0), (3.0, 1.0), (1.0, 1.0)]
    region = Region.from_points([*SQUARE, SQUARE[0], *hole])
    assert region.moments().A == 12.0
    assert region.polygon(1.0).area == pytest.approx(12.0)


@pytest.mark.parametrize(
    ("points", "fault"),
    [
        ([(0, 0), (1, 1)], "2 different corners"),
        ([(0, 0), (1, 1), (0, 0), (1, 1)], "2 different corners"),
        ([(0, 0), (1, 1), (3, 3)], "on one line"),
        ([(0, 0), (2, 2), (2, 0), (0, 2.5)], "side 1-2 meets side 3-4"),
        ([(0, 0), (4, 0), (4, 4), (0, 4), (5, 2)], "side 2-3 meets side 4-5"),
        # Two rounds of the same square: nothing crosses, everything counts twice.
        ([*SQUARE, *SQUARE], "crosses itself"),
        ([(0, 0), (float("nan"), 0), (1, 1)], "x = nan is not a number"),
        ([(0, 0), (float("inf"), 0), (1, 1)], "x = inf is not a number"),
        # Two triangles with a common corner, run through in opposite senses.
        ([(0, 0), (2, 0), (1, 1), (0, 2.2), (2, 2.2), (1, 1)], "crosses itself"),
    ],
)
def test_corners_that_bound_no_area_once_are_refused(points: list[tuple[float, float]], fault: str) -> None:
    with pytest.raises(InputError, match=fault):
        Region.from_points(points)


@pytest.mark.parametrize("first", range(7))
@pytest.mark.parametrize("tip", [100.0, 5.0])
def test_an_outline_that_runs_to_a_corner_and_straight_back_is_refused(first: int, tip: float) -> None:
    # Outwards it would feign an extreme fibre, inwards it would be a slit without width.
    points = [(0.0, 0.0), (10.0, 0.0), (10.0, 10.0), (5.0, 10.0), (5.0, tip), (5.0, 10.0), (0.0, 10.0)]
    corner = (4 - first) % 7 + 1
    with pytest.raises(InputError, match=f"the outline runs to corner {corner} and straight back"):
        Region.from_points(points[first:] + points[:first])


def test_two_triangles_that_touch_at_a_corner_are_one_region() -> None:
    assert Region.from_points([(0, 0), (2, 0), (1, 1), (2, 2), (0, 2), (1, 1)]).moments().A == 2.0


def test_a_long_outline_that_crosses_itself_is_refused_through_shapely() -> None:
    zigzag = [(float(i), float(i % 2)) for i in range(200)]
    with pytest.raises(InputError, match="crosses itself"):
        Region.from_points([*zigzag, (150.0, 5.0), (150.5, -5.0), (0.0, -5.0)])


def test_an_open_outline_and_one_of_the_wrong_sense_are_refused() -> None:
    square = Region.from_points(SQUARE).loops[0]
    with pytest.raises(InputError, match="not closed"):
        Region.from_loops(square[:3])
    with pytest.raises(InputError, match="encloses no area"):
        Region.from_loops([side.reversed() for side in reversed(square)])
    assert Region.from_loops(square).moments().A == 16.0


def test_a_plate_of_no_thickness_is_refused() -> None:
    with pytest.raises(InputError, match="t = -10 is not positive"):
        Region.strip(0, 0, 100, 0, t=-10)


def test_a_plate_of_no_length_is_refused() -> None:
    with pytest.raises(InputError, match="ends where it starts"):
        Region.strip(1, 2, 1, 2, t=10)
