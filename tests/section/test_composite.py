"""Totals of composite sections: against each other, against the parts' moments, and what is no section at all."""

from __future__ import annotations

from dataclasses import replace
from math import atan2, degrees, fsum, hypot

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellsection.errors import InputError
from cellsection.geometry import Region, cut
from cellsection.section import Part, about, ledger, radius_of_gyration, totals
from tests.geometry.random_shapes import regions, shape_regions
from tests.section.built import girder, part, sections, turned

EXACT = 1e-12


def far(parts: list[Part]) -> float:
    """Distance from the origin to the farthest corner: the natural length of the sums."""
    boxes = [each.region.bounds() for each in parts]
    return max(hypot(max(abs(left), abs(right)), max(abs(low), abs(high))) for left, low, right, high in boxes)


@given(sections)
def test_the_totals_are_the_weighted_sums_of_the_parts_moments(parts: list[Part]) -> None:
    columns = zip(*(each.region.moments() for each in parts), strict=True)
    A, Qx, Qy, Ix, Iy, Ixy = (
        fsum(each.weight * value for each, value in zip(parts, column, strict=True)) for column in columns
    )
    met, size = totals(parts), far(parts)
    assert pytest.approx(A, rel=EXACT) == met.A
    assert (met.x, met.y) == pytest.approx((Qy / A, Qx / A), abs=EXACT * size)
    origin = about(parts, 0, 0)
    for value, expected in zip(origin, (Ix, Iy, Ixy), strict=True):
        assert abs(value - expected) <= EXACT * A * size**2


@given(sections)
def test_the_ledger_adds_up_to_the_totals(parts: list[Part]) -> None:
    met, sums = totals(parts), ledger(parts).total
    assert (sums.A, sums.x, sums.y) == (met.A, met.x, met.y)
    assert sums.own_Ix + sums.Ady2 == pytest.approx(met.Ix, rel=EXACT)
    assert sums.own_Iy + sums.Adx2 == pytest.approx(met.Iy, rel=EXACT)
    size = far(parts)
    assert sums.Ay == pytest.approx(met.A * met.y, abs=EXACT * met.A * size)
    assert sums.Ax == pytest.approx(met.A * met.x, abs=EXACT * met.A * size)


@given(shape_regions(), st.floats(0.05, 0.95), st.floats(0.0, 360.0))
def test_a_part_entered_as_two_pieces_gives_the_same_totals(region: Region, share: float, turn: float) -> None:
    left, low, right, high = region.bounds()
    halves = cut(region, left + share * (right - left), low + share * (high - low), turn)
    whole, pieces = [Part("", "", region)], [Part("", "", half) for half in halves if half is not None]
    expected, met, size = totals(whole), totals(pieces), max(right - left, high - low)
    natural = max(expected.A, 1e-3 * size**2)
    assert pytest.approx(expected.A, abs=EXACT * natural) == met.A
    for symbol in ("Ix", "Iy", "Ixy", "Ip"):
        assert abs(getattr(met, symbol) - getattr(expected, symbol)) <= 2 * EXACT * natural * size**2


@given(sections, st.floats(-1e3, 1e3), st.floats(-1e3, 1e3))
def test_moving_the_section_moves_only_its_centroid(parts: list[Part], dx: float, dy: float) -> None:
    moved = [replace(each, region=each.region.moved(dx, dy)) for each in parts]
    before, after = totals(parts), totals(moved)
    assert (after.x - before.x, after.y - before.y) == pytest.approx((dx, dy), abs=1e-9)
    scale = EXACT * before.A * far([*parts, *moved]) ** 2
    assert after.A == before.A
    assert (after.Ix, after.Iy, after.Ixy) == pytest.approx((before.Ix, before.Iy, before.Ixy), abs=scale)


@given(sections, st.floats(-360.0, 360.0))
def test_turning_the_section_is_turning_the_axes_the_other_way(parts: list[Part], turn: float) -> None:
    before, after = totals(parts), totals(turned(parts, turn))
    expected = about(parts, before.x, before.y, -turn)
    scale = 10 * EXACT * before.A * far(parts) ** 2
    assert (after.Ix, after.Iy, after.Ixy) == pytest.approx(expected, abs=scale)
    assert after.Ip == pytest.approx(before.Ip, abs=scale)


@given(sections)
def test_mirroring_the_section_changes_the_sign_of_x_and_ixy(parts: list[Part]) -> None:
    before, after = totals(parts), totals([replace(each, region=each.region.mirrored()) for each in parts])
    scale = EXACT * before.A * far(parts) ** 2
    assert (after.x, after.y) == pytest.approx((-before.x, before.y), abs=EXACT * far(parts))
    assert (after.Ix, after.Iy, after.Ixy) == pytest.approx((before.Ix, before.Iy, -before.Ixy), abs=scale)


@given(sections, st.floats(0.1, 10.0))
def test_one_modular_ratio_for_all_parts_scales_the_totals(parts: list[Part], n: float) -> None:
    scaled = [replace(each, n=n * each.n) for each in parts]
    before, after = totals(parts), totals(scaled)
    assert (after.A, after.Ix) == pytest.approx((n * before.A, n * before.Ix), rel=1e-11)
    assert (after.rx, after.x) == pytest.approx((before.rx, before.x), rel=1e-11, abs=1e-9)


@given(sections, st.floats(-100, 100), st.floats(-100, 100), st.floats(-360, 360))
def test_a_part_and_the_same_cut_out_change_nothing(parts: list[Part], x: float, y: float, turn: float) -> None:
    extra = part("I", x, y, turn, h=200, b=100, tw=6, tf=9, r=12)
    both = [*parts, extra, replace(extra, sign=-1)]
    before, after = totals(parts), totals(both)
    scale = 10 * EXACT * (before.A + 2 * extra.region.moments().A) * far(both) ** 2
    assert pytest.approx(before.A, rel=1e-10) == after.A
    assert (after.Ix, after.Iy, after.Ixy) == pytest.approx((before.Ix, before.Iy, before.Ixy), abs=scale)


@given(regions())
def test_a_cut_out_of_itself_is_no_section(region: Region) -> None:
    with pytest.raises(InputError, match="net area is zero"):
        totals([Part("", "", region), Part("", "", region, sign=-1)])


def test_a_hole_is_the_difference_of_two_rectangles() -> None:
    tube = totals([part("rectangle", b=100, h=60), part("rectangle", b=80, h=40, sign=-1)])
    assert tube.Ix == (100 * 60**3 - 80 * 40**3) / 12
    assert tube == pytest.approx(totals([part("box", b=100, h=60, tw=10, tf=10)]), rel=1e-15)


def test_a_flitch_beam_is_the_transformed_section() -> None:
    # Two timbers 75 x 300 and a steel plate 10 x 300 between them, n = 20.
    beam = [part("rectangle", x, 0, b=75, h=300) for x in (-42.5, 42.5)]
    beam.append(part("rectangle", b=10, h=300, n=20))
    assert totals(beam).Ix == pytest.approx((2 * 75 + 20 * 10) * 300**3 / 12, rel=1e-15)


def test_a_symmetric_girder_has_clean_numbers() -> None:
    met = totals(girder())
    assert (met.x, met.y, met.Ixy, met.angle) == (0.0, 250.0, 0.0, 0.0)
    assert met.Ix == pytest.approx(10 * 460**3 / 12 + 2 * (200 * 20**3 / 12 + 4000 * 240**2), rel=1e-15)
    assert met.rx == pytest.approx((met.Ix / 12600) ** 0.5)
    assert met.Ip == met.Ix + met.Iy


def test_about_any_point_and_angle_is_the_parallel_axis_theorem_and_a_rotation() -> None:
    rectangle = [part("rectangle", datum="bottom left", b=6, h=4)]
    assert about(rectangle, 0, 0) == (6 * 4**3 / 3, 4 * 6**3 / 3, 6**2 * 4**2 / 4)
    assert about(rectangle, 3, 2, turn=90) == (4 * 6**3 / 12, 6 * 4**3 / 12, 0.0)
    # About the diagonal of a rectangle: b³h³ / (6 (b² + h²)) (handbook value, from memory).
    assert about(rectangle, 0, 0, degrees(atan2(4, 6)))[0] == pytest.approx(6**3 * 4**3 / (6 * (6**2 + 4**2)))


@pytest.mark.parametrize(
    ("parts", "fault"),
    [
        ([], "there is no part"),
        ([part("circle", d=10, sign=-1)], "net area is negative"),
        ([part("circle", d=10), part("circle", d=20, sign=-1)], "net area is negative"),
        ([part("rectangle", b=10, h=10), part("rectangle", 0, 50, b=9, h=9, sign=-1)], "Ix = .* is not positive"),
        ([part("rectangle", b=10, h=10), part("rectangle", 50, 0, b=9, h=9, sign=-1)], "Iy = .* is not positive"),
        ([part("circle", d=10, n=0)], "n = 0 is not a positive ratio"),
        ([part("circle", d=10, n=-8)], "n = -8 is not a positive ratio"),
        ([part("circle", d=10, n=float("nan"))], "n = nan is not a positive ratio"),
        ([part("circle", d=10, sign=2)], "sign = 2 is neither 1 nor -1"),
    ],
)
def test_what_is_no_section_is_refused_in_one_line(parts: list[Part], fault: str) -> None:
    for asked in (totals, ledger):
        with pytest.raises(InputError, match=fault) as met:
            asked(parts)
        assert "\n" not in str(met.value)
        assert met.value.remedy


@pytest.mark.parametrize(("x", "y", "turn"), [(float("nan"), 0, 0), (0, float("inf"), 0), (0, 0, float("nan"))])
def test_axes_that_are_no_numbers_are_refused(x: float, y: float, turn: float) -> None:
    with pytest.raises(InputError, match="is not a number"):
        about(girder(), x, y, turn)


@pytest.mark.parametrize(("second_moment", "area"), [(-1.0, 4.0), (1.0, 0.0), (0.0, 1.0), (1.0, -1.0)])
def test_a_negative_second_moment_has_no_radius_of_gyration(second_moment: float, area: float) -> None:
    with pytest.raises(InputError, match="radius of gyration"):
        radius_of_gyration(second_moment, area)
