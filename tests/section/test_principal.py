"""Principal axes: invariants, exact angles of symmetric sections, and what is no real section."""

from __future__ import annotations

from dataclasses import replace
from math import hypot, radians, tan

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from cellsection.errors import InputError
from cellsection.section import Part, about, principal, totals
from tests.section.built import girder, part, sections, turned

ANGLE = {"h": 100, "b": 65, "t": 8, "r": 10, "r2": 5}
turns = st.floats(-360.0, 360.0)


@given(sections)
def test_sum_and_product_of_the_principal_moments_are_invariant(parts: list[Part]) -> None:
    met, given_ = principal(parts), totals(parts)
    assert met.I1 >= met.I2 > 0.0
    assert pytest.approx(given_.Ip, rel=1e-12) == met.I1 + met.I2
    assert pytest.approx(given_.Ix * given_.Iy - given_.Ixy**2, abs=1e-11 * met.I1**2) == met.I1 * met.I2
    assert (given_.I1, given_.I2, given_.angle) == met[:3]
    assert met.r1 == pytest.approx((met.I1 / given_.A) ** 0.5)


@given(sections)
def test_about_its_own_axes_the_section_has_no_product_moment(parts: list[Part]) -> None:
    met, given_ = principal(parts), totals(parts)
    Iu, Iv, Iuv = about(parts, given_.x, given_.y, met.angle)
    assert -90.0 < met.angle <= 90.0
    assert (Iu, Iv) == pytest.approx((met.I1, met.I2), abs=1e-11 * met.I1)
    assert abs(Iuv) <= 1e-11 * met.I1


@given(sections, turns)
def test_the_axes_turn_with_the_section(parts: list[Part], turn: float) -> None:
    before, after = principal(parts), principal(turned(parts, turn))
    scale = before.I1
    assert pytest.approx((before.I1, before.I2), abs=1e-11 * scale) == (after.I1, after.I2)
    assume(1e-3 * scale < before.I1 - before.I2)
    difference = (after.angle - before.angle - turn) % 180.0
    assert min(difference, 180.0 - difference) <= 1e-6


SYMMETRIC = {
    "girder": girder(),
    "I": [part("I", h=300, b=150, tw=7.1, tf=10.7, r=15)],
    "channel": [part("channel", h=100, b=50, tw=6, tf=8.5, r=8.5, r2=4.5, slope=0.08)],
    "tube": [part("tube", d=48.3, t=4)],
    "two angles": [part("angle", -3, 0, datum="bottom right", turn=0, h=50, b=50, t=5)],
    "ellipse": [part("ellipse", b=6.1, h=4.7)],
    "half circle": [part("half circle", d=7.3)],
}
left_angle = part("angle", 3, 0, datum="bottom left", h=75, b=50, t=6, r=7, r2=3.5)
SYMMETRIC["two angles"] = [left_angle, replace(left_angle, region=left_angle.region.mirrored())]


@pytest.mark.parametrize("name", SYMMETRIC)
@given(st.floats(-1e4, 1e4), st.floats(-1e4, 1e4))
def test_a_symmetric_section_has_an_angle_of_0_or_90_and_no_product_moment(name: str, dx: float, dy: float) -> None:
    moved = [replace(each, region=each.region.moved(dx, dy)) for each in SYMMETRIC[name]]
    assert principal(moved).angle in (0.0, 90.0)
    assert totals(moved).Ixy == 0.0


@pytest.mark.parametrize("turn", [0.0, 17.3, 45.0, 90.0, -33.0])
@pytest.mark.parametrize("word", ["tube", "box"])
def test_a_section_with_equal_moments_has_the_angle_0_however_it_is_turned(word: str, turn: float) -> None:
    dims = {"tube": {"d": 48.3, "t": 4}, "box": {"b": 50, "h": 50, "tw": 4, "tf": 4, "ro": 6, "ri": 4}}[word]
    met = principal([part(word, 120, -77, turn, **dims)])
    assert met.angle == 0.0
    assert pytest.approx(met.I2, rel=1e-12) == met.I1


@pytest.mark.parametrize("turn", [0.0, 17.3, 45.0])
def test_a_thin_tube_made_of_two_discs_has_the_angle_0(turn: float) -> None:
    # The discs' moments are 25,000 times what is left of them, and their rounding with them.
    met = principal([part("circle", 9, 9, turn, d=1000), part("circle", 9, 9, 2 * turn, d=999.98, sign=-1)])
    assert met.angle == 0.0


def test_an_equal_angle_has_its_axes_at_45_degrees() -> None:
    equal = part("angle", 1000.1, 77.7, h=50, b=50, t=5, r=7, r2=3.5)
    # Legs to the right and up: most of the material lies off the falling diagonal, so Ixy < 0 and axis 1 rises.
    met = principal([equal])
    assert met.angle == 45.0
    assert principal(turned([equal], 90)).angle == pytest.approx(-45.0, abs=1e-9)


def test_the_long_way_up_gives_axis_1_along_x_and_lying_down_along_y() -> None:
    upright, flat = part("rectangle", b=10, h=100), part("rectangle", b=100, h=10)
    assert principal([upright])[:3] == (10 * 100**3 / 12, 100 * 10**3 / 12, 0.0)
    assert principal([flat])[:3] == (10 * 100**3 / 12, 100 * 10**3 / 12, 90.0)


def test_a_turned_rectangle_shows_its_turn() -> None:
    for turn in (30.0, -60.0, 89.0, -89.0):
        assert principal([part("rectangle", turn=turn, b=10, h=100)]).angle == pytest.approx(turn, abs=1e-12)


def test_the_published_unequal_angle() -> None:
    # L 100 x 65 x 8, EN 10056-1 (from memory): Iu = 144, Iv = 24.8 cm⁴, tan alpha = 0.413.
    met = principal([part("angle", **ANGLE)])
    assert pytest.approx(144, abs=0.5) == met.I1 / 1e4
    assert pytest.approx(24.8, abs=0.05) == met.I2 / 1e4
    assert abs(tan(radians(met.angle))) == pytest.approx(0.413, abs=0.0005)


@given(st.floats(1e-6, 1e-3), turns)
def test_a_very_thin_strip_keeps_its_small_moment(t: float, turn: float) -> None:
    met = principal([part("rectangle", turn=turn, b=1.0, h=t)])
    assert pytest.approx(t / 12, rel=1e-11) == met.I1
    # What is left of I2 after turning is as good as the rounding of the large moment allows.
    assert pytest.approx(t**3 / 12, abs=1e-15 * t) == met.I2
    assert hypot(met.r1, met.r2) == pytest.approx((1 / 12) ** 0.5, rel=1e-5)


def test_a_section_of_negative_least_moment_is_refused() -> None:
    # Cut-outs far off on the diagonal: Ix and Iy stay positive, I2 does not.
    parts = [part("rectangle", b=100, h=100)]
    parts += [part("rectangle", s * 100, s * 100, b=20, h=20, sign=-1) for s in (-1, 1)]
    for asked in (principal, totals):
        with pytest.raises(InputError, match=r"I2 = .* is not positive"):
            asked(parts)
