"""Extreme fibres and elastic moduli, with notches, in turned axes, against fine drawings."""

from __future__ import annotations

from dataclasses import replace
from math import cos, pi, radians, sin, sqrt

import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st

from cellsection.errors import InputError
from cellsection.section import Part, about, fibres, principal, totals
from tests.section.built import girder, part, sections, turned

SIDES = ("top", "bottom", "left", "right")


@settings(max_examples=60)
@given(sections, st.floats(-360.0, 360.0))
def test_the_fibres_are_those_of_a_fine_drawing_at_any_angle(parts: list[Part], turn: float) -> None:
    boxes = [each.region.bounds() for each in parts]
    size = max(max(right - left, high - low) for left, low, right, high in boxes)
    drawn = shapely.union_all([each.region.polygon(1e-5 * size) for each in parts])
    centroid = totals(parts)
    rotated = shapely.affinity.rotate(drawn, -turn, origin=(centroid.x, centroid.y))
    left, low, right, high = rotated.bounds
    expected = {
        "top": high - centroid.y,
        "bottom": centroid.y - low,
        "left": centroid.x - left,
        "right": right - centroid.x,
    }
    met = fibres(parts, turn)
    Ix, Iy, _Ixy = about(parts, centroid.x, centroid.y, turn)
    for side in SIDES:
        fibre = getattr(met, side)
        assert fibre.distance == pytest.approx(expected[side], abs=3e-5 * size)
        assert fibre.modulus * fibre.distance == pytest.approx(Ix if side in ("top", "bottom") else Iy, rel=1e-9)


@given(sections, st.floats(-360.0, 360.0))
def test_turning_the_section_and_the_axes_changes_nothing(parts: list[Part], turn: float) -> None:
    before, after = fibres(parts), fibres(turned(parts, turn), turn)
    size = sum(each.region.bounds()[2] - each.region.bounds()[0] for each in parts) + 1e3
    for side in SIDES:
        assert getattr(after, side).distance == pytest.approx(getattr(before, side).distance, abs=1e-10 * size)


def test_the_moduli_of_textbook_figures() -> None:
    # Handbook values: b·h²/6, π·d³/32, and b·h²/24 at the apex of a triangle, b·h²/12 at its base.
    assert fibres([part("rectangle", b=60, h=120)]).left.modulus == pytest.approx(120 * 60**2 / 6)
    assert fibres([part("circle", d=50)], turn=33).top.modulus == pytest.approx(pi * 50**3 / 32)
    triangle = fibres([part("triangle", b=60, h=90)])
    assert triangle.top.modulus == pytest.approx(60 * 90**2 / 24)
    assert triangle.bottom.modulus == pytest.approx(60 * 90**2 / 12)


def test_the_principal_moduli_of_an_equal_angle_come_with_its_angle() -> None:
    angle = [part("angle", datum="bottom left", h=100, b=100, t=10)]
    axes = principal(angle)
    met = fibres(angle, turn=axes.angle)
    # Axis 1 at 45 degrees is the line of symmetry; the tips of the legs are h/sqrt 2 off it, less t/sqrt 2 on one side.
    assert met.top.distance == pytest.approx(100 / sqrt(2))
    assert met.bottom.distance == pytest.approx(100 / sqrt(2))
    assert met.top.modulus == pytest.approx(axes.I1 / (100 / sqrt(2)))
    c = totals(angle).x
    assert met.left.distance == pytest.approx(c * sqrt(2))  # the heel
    assert met.left.modulus == pytest.approx(axes.I2 / (c * sqrt(2)))


def test_holes_inside_do_not_move_the_fibres_but_the_centroid_does() -> None:
    holes = [part("circle", x, 10, d=22, sign=-1) for x in (-60, 60)]
    whole, net = fibres(girder()), fibres([*girder(), *holes])
    shift = totals([*girder(), *holes]).y - 250.0
    assert shift > 0.0
    assert net.bottom.distance == pytest.approx(250.0 + shift)
    assert net.top.distance == pytest.approx(250.0 - shift)
    assert net.right.distance == whole.right.distance == 100.0


def test_a_groove_along_the_edge_moves_the_fibre() -> None:
    groove = part("rectangle", 0, 500, datum="top", b=200, h=5, sign=-1)
    section = [*girder(), groove]
    assert fibres(section).top.distance == pytest.approx(495.0 - totals(section).y)


def test_a_notch_trims_the_fibre_only_in_the_axes_in_which_it_is_extreme() -> None:
    plate = part("rectangle", datum="bottom left", b=100, h=100)
    corner = part("rectangle", 100, 100, datum="top right", b=20, h=20, sign=-1)
    section, c = [plate, corner], totals([plate, corner]).x
    assert fibres(section).top.distance == pytest.approx(100.0 - c)
    # Along the diagonal the corner (100, 100) is gone, and (100, 80) and (80, 100) are left.
    diagonal = 180 * cos(radians(45))
    assert fibres(section, turn=45).right.distance == pytest.approx(diagonal - c * sqrt(2))


def test_a_groove_cut_by_a_cutter_of_a_round_profile() -> None:
    # The top flange keeps its corners.
    bite = part("half circle", 0, 500, turn=180, datum="bottom", d=30, sign=-1)
    section = [*girder(), bite]
    assert fibres(section).top.distance == pytest.approx(500.0 - totals(section).y)


def test_a_section_whose_material_is_on_one_side_only_is_refused() -> None:
    # The cut-out counts ten times what it takes away: the centroid leaves the plate.
    parts = [part("rectangle", datum="bottom", b=100, h=100), part("rectangle", 0, 95, b=80, h=10, sign=-1, n=11.2)]
    with pytest.raises(InputError):
        fibres(parts)


@given(st.floats(-360.0, 360.0))
def test_left_and_right_are_top_and_bottom_of_a_quarter_turn(turn: float) -> None:
    section = [part("channel", h=100, b=50, tw=6, tf=8.5, r=8.5), part("circle", 20, 60, d=30)]
    met, quarter = fibres(section, turn), fibres(section, turn + 90)
    assert quarter.top.distance == pytest.approx(met.left.distance, rel=1e-12)
    assert quarter.left.distance == pytest.approx(met.bottom.distance, rel=1e-12)
    assert quarter.right.modulus == pytest.approx(met.top.modulus, rel=1e-11)


def test_the_modular_ratio_changes_the_moment_and_not_the_fibre() -> None:
    plain = [part("rectangle", b=60, h=120)]
    stiff = [replace(plain[0], n=8.0)]
    assert fibres(stiff).top.distance == fibres(plain).top.distance
    assert fibres(stiff).top.modulus == 8 * fibres(plain).top.modulus


def test_a_tilted_plate_has_its_corner_as_extreme_fibre() -> None:
    met = fibres([part("rectangle", turn=30, b=100, h=20)])
    assert met.top.distance == pytest.approx(50 * sin(radians(30)) + 10 * cos(radians(30)))
