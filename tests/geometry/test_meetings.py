"""Where segments meet."""

from __future__ import annotations

from math import hypot, pi, sqrt, tan

import pytest
import shapely
from hypothesis import assume, given
from hypothesis import strategies as st

from cellsection.geometry import Arc, Line, Region, Segment
from cellsection.geometry.meetings import meetings, real_roots
from cellsection.geometry.outline import arc_chain, ellipse_chain
from tests.geometry.random_shapes import regions


def test_two_circles_meet_where_pythagoras_says() -> None:
    one, other = arc_chain(0, 0, 5, 0, 360), arc_chain(6, 0, 5, 0, 360)
    met = {(round(x, 12), round(y, 12)) for a in one for b in other for x, y in meetings(a, b)}
    assert met == {(3.0, 4.0), (3.0, -4.0)}


def test_a_circle_and_an_ellipse_meet_four_times() -> None:
    # x² + y² = 4 and x²/9 + y² = 1: x² = 27/8, y² = 5/8.
    met = {
        (round(abs(x), 12), round(abs(y), 12), x > 0, y > 0)
        for a in arc_chain(0, 0, 2, 45, 360)
        for b in ellipse_chain(0, 0, 3, 1)
        for x, y in meetings(a, b)
    }
    assert met == {
        (round(sqrt(27 / 8), 12), round(sqrt(5 / 8), 12), right, up) for right in (True, False) for up in (True, False)
    }


def test_concentric_circles_and_parallel_lines_do_not_meet() -> None:
    assert not [1 for a in arc_chain(0, 0, 5, 0, 360) for b in arc_chain(0, 0, 4, 0, 360) for _ in meetings(a, b)]
    assert meetings(Line(0, 0, 1, 0), Line(0, 1, 1, 1)) == []


def test_an_arc_that_a_line_only_touches_meets_it_once_or_twice_at_one_point() -> None:
    arc = Arc.circular(1, 0, -1, 0, 1.0)
    assert {(round(x, 7), round(y, 7)) for x, y in meetings(Line(-2, 1, 2, 1), arc)} <= {(0.0, 1.0), (-0.0, 1.0)}


def test_the_part_of_the_circle_behind_the_chord_is_not_met() -> None:
    arc = Arc.circular(1, 0, 0, 1, tan(pi / 8))
    assert meetings(arc, Arc.circular(-3, -0.5, 0.5, -0.5, 0.1)) == []


@given(regions(), regions())
def test_the_meetings_of_two_regions_are_those_of_their_fine_drawings(one: Region, other: Region) -> None:
    box, size = one.bounds(), max(other.bounds()[2] - other.bounds()[0], other.bounds()[3] - other.bounds()[1])
    other = other.moved(box[0] - other.bounds()[0] + size / 7, box[1] - other.bounds()[1] + size / 9)
    scale = max(size, box[2] - box[0], box[3] - box[1])
    drawn = [region.polygon(1e-5 * scale).boundary for region in (one, other)]
    crossing = shapely.intersection(*drawn)
    assume(not crossing.is_empty and crossing.geom_type in ("Point", "MultiPoint"))
    points = [(point.x, point.y) for point in shapely.get_parts(crossing)]

    def segments(region: Region) -> list[Segment]:
        return [segment for loop in region.loops for segment in loop]

    met = [point for a in segments(one) for b in segments(other) for point in meetings(a, b)]
    for x, y in met:
        assert max(outline.distance(shapely.Point(x, y)) for outline in drawn) <= 2e-5 * scale
    # Where the outlines cross at a steep angle the drawn crossing is near the exact one.
    for x, y in points:
        nearest = min((hypot(x - px, y - py) for px, py in met), default=scale)
        assert nearest <= 0.05 * scale


@given(st.lists(st.floats(-0.9, 0.9), min_size=1, max_size=4, unique=True))
def test_the_roots_of_a_polynomial_are_found(roots: list[float]) -> None:
    assume(all(abs(a - b) > 0.01 for i, a in enumerate(roots) for b in roots[:i]))
    coefficients = [1.0]
    for root in roots:
        product = [0.0, *coefficients]
        coefficients = [p - root * c for p, c in zip(product, [*coefficients, 0.0], strict=True)]
    assert real_roots(coefficients, -1.0, 1.0) == pytest.approx(sorted(roots), abs=1e-9)


def test_a_double_root_is_found_once() -> None:
    assert real_roots([0.25, -1.0, 1.0], -1.0, 1.0) == [0.5]
    assert real_roots([1.0], -1.0, 1.0) == []
    assert real_roots([1.0, 0.0, 1.0], -1.0, 1.0) == []
