"""Cutting a region in two loses nothing, and what is cut lies on its side."""

from __future__ import annotations

from math import hypot

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellsection.geometry import SHAPES, Moments, Region, cosine_sine, cut, placed, reach, spans
from cellsection.geometry.moments import summed
from tests.geometry.random_shapes import regions

EXACT = 1e-12


def scale(region: Region) -> Moments:
    """The natural size of each integral: the area times powers of the distance from the origin to the far corner.

    For strips thinner than a thousandth of their box that area is a thousandth of the box: where a line cuts them is
    rounded by an EPSILON of the box, and no digit beyond that is theirs.
    """
    left, low, right, high = region.bounds()
    far = hypot(max(abs(left), abs(right)), max(abs(low), abs(high)))
    A = max(region.moments().A, 1e-3 * max(right - left, high - low) ** 2)
    return Moments(A, A * far, A * far, A * far**2, A * far**2, A * far**2)


def assert_same(met: Moments, expected: Moments, natural: Moments) -> None:
    for one, other, size in zip(met, expected, natural, strict=True):
        assert abs(one - other) <= EXACT * size


@settings(max_examples=300)
@given(regions(), st.floats(-0.1, 1.1), st.floats(-0.1, 1.1), st.floats(-360.0, 360.0))
def test_splitting_any_shape_by_any_line_keeps_all_integrals(
    region: Region, across: float, up: float, turn: float
) -> None:
    left, low, right, high = region.bounds()
    x, y = left + across * (right - left), low + up * (high - low)
    halves = [half for half in cut(region, x, y, turn) if half is not None]
    assert_same(summed(half.moments() for half in halves), region.moments(), scale(region))


@given(regions(), st.sampled_from([0.0, 0.25, 0.5, 0.75, 1.0]), st.sampled_from([0.0, 90.0, 180.0, -90.0]))
def test_splitting_through_corners_and_along_sides_keeps_all_integrals(
    region: Region, share: float, turn: float
) -> None:
    left, low, right, high = region.bounds()
    corners = [(segment.x1, segment.y1) for loop in region.loops for segment in loop]
    places = [*corners[:4], (left + share * (right - left), low + share * (high - low))]
    for x, y in places:
        halves = [half for half in cut(region, x, y, turn) if half is not None]
        assert_same(summed(half.moments() for half in halves), region.moments(), scale(region))


@settings(max_examples=50)
@given(regions(), st.lists(st.tuples(st.floats(0.0, 1.0), st.floats(0.0, 1.0), st.floats(0.0, 180.0)), max_size=4))
def test_splitting_into_many_pieces_keeps_all_integrals(
    region: Region, lines: list[tuple[float, float, float]]
) -> None:
    left, low, right, high = region.bounds()
    pieces = [region]
    for across, up, turn in lines:
        x, y = left + across * (right - left), low + up * (high - low)
        pieces = [half for piece in pieces for half in cut(piece, x, y, turn) if half is not None]
    assert_same(summed(piece.moments() for piece in pieces), region.moments(), scale(region))


@given(regions(), st.floats(0.0, 1.0), st.floats(-360.0, 360.0))
def test_the_halves_lie_on_their_sides(region: Region, share: float, turn: float) -> None:
    left, low, right, high = region.bounds()
    x, y = left + share * (right - left), low + share * (high - low)
    c, s = cosine_sine(turn)
    level, size = c * y - s * x, max(right - left, high - low)
    above, below = cut(region, x, y, turn)
    slack = 1e-11 * (size + abs(level))
    if above:
        assert above.bounds(turn)[1] >= level - slack
        assert above.moments().A > 0.0
    if below:
        assert below.bounds(turn)[3] <= level + slack
        assert below.moments().A > 0.0


def test_a_line_beside_a_region_leaves_it_whole() -> None:
    tube = SHAPES["tube"].build(d=10, t=1)
    above, below = cut(tube, 0, -1)
    assert above is not None
    assert below is None
    assert above.moments() == tube.moments()


def test_a_line_along_a_side_leaves_the_region_whole() -> None:
    above, below = cut(SHAPES["rectangle"].build(b=30, h=10), 0, 10)
    assert above is None
    assert below is not None
    assert below.moments().A == 300.0


def test_a_tube_is_cut_into_one_half_and_a_channel_into_two_flanges() -> None:
    half, _ = cut(SHAPES["tube"].build(d=10, t=1), 5, 5)
    flanges, web = cut(SHAPES["channel"].build(h=100, b=50, tw=6, tf=10), 20, 0, 90)  # above is left of x = 20
    assert half is not None
    assert flanges is not None
    assert web is not None
    assert len(half.local) == 1
    assert len(flanges.local) == 1
    assert len(web.local) == 2


def test_a_hole_clear_of_the_line_stays_a_hole() -> None:
    box = SHAPES["box"].build(b=100, h=60, tw=5, tf=10, ro=8, ri=4)
    lower, sliver = cut(box, 0, 55, 180)
    assert lower is not None
    assert sliver is not None
    assert lower.moments().A > 0.0
    # The outer outline comes first, so that it is the one that is drawn.
    assert lower.outline(40)[0] in [(segment.x1, segment.y1) for segment in lower.loops[0]]
    assert lower.bounds() == (0.0, 0.0, 100.0, 55.0)


def test_the_plastic_axis_of_a_tee_halves_its_area() -> None:
    tee = SHAPES["tee"].build(h=60, b=90, tw=30, tf=20)
    # 3000 in all: 300 of the flange 90 wide go with the stem of 1200, so 1500/90 from the top.
    above, below = cut(tee, 0, 60 - 1500 / 90)
    assert above is not None
    assert below is not None
    assert pytest.approx(1500.0, rel=1e-14) == above.moments().A
    assert pytest.approx(1500.0, rel=1e-14) == below.moments().A


@given(regions(), st.floats(0.001, 0.999), st.floats(0.0, 360.0))
def test_spans_add_up_to_the_change_of_area(region: Region, share: float, direction: float) -> None:
    ux, uy = cosine_sine(direction)
    left, _low, right, _high = region.bounds(direction)
    level, step = left + share * (right - left), 1e-5 * (right - left)
    widths = [sum(end - start for start, end in spans(region, ux, uy, level + k * step)) for k in (0.25, 0.5, 0.75)]
    if max(widths) - min(widths) > 0.1 * max(widths):
        return  # a side runs along the line somewhere near: the width jumps there
    _below, beyond = cut(region, ux * level, uy * level, direction + 90)
    _, far = cut(region, ux * (level + step), uy * (level + step), direction + 90)
    strip = (beyond.moments().A if beyond else 0.0) - (far.moments().A if far else 0.0)
    assert strip == pytest.approx(step * widths[1], rel=1e-2, abs=1e-9 * region.moments().A)


def test_spans_at_a_level_of_corners_are_those_just_below() -> None:
    box = SHAPES["box"].build(b=100, h=60, tw=5, tf=10)
    assert spans(box, 0, 1, 50) == [(0.0, 5.0), (95.0, 100.0)]
    assert spans(box, 0, 1, 60) == [(0.0, 100.0)]
    assert spans(box, 0, 1, 0) == []
    assert spans(SHAPES["circle"].build(d=10), 0, 1, 10) == [pytest.approx((5.0, 5.0), abs=1e-4)]


def test_reach_of_a_region_that_no_cut_out_touches_is_its_bound() -> None:
    circle = placed(SHAPES["circle"].build(d=10), 3, 4)
    assert reach([circle], [placed(SHAPES["circle"].build(d=4), 3, 4)], 0) == 8.0
