"""The faults of built-up sections, and the sound sections that have none."""

from __future__ import annotations

import subprocess
import sys
from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellsection.geometry import SHAPES, Region, placed
from cellsection.section import Part, faults
from tests.section.built import girder, part, turned

SOUND: dict[str, list[Part]] = {
    "girder": girder(),
    "girder, turned": turned(girder(), 33.3, 7, 9),
    "I with a cover plate": [
        part("I", datum="bottom", h=300, b=150, tw=7.1, tf=10.7, r=15),
        part("rectangle", 0, 300, datum="bottom", b=180, h=12),
    ],
    "I with a channel cap": [
        part("I", 0, 0, datum="top", h=300, b=150, tw=7.1, tf=10.7, r=15),
        part("channel", 0, 8.5, turn=-90, datum="left", h=200, b=75, tw=8.5, tf=11.5, r=11.5),
    ],
    "plate and fillets": [
        *girder(),
        part("fillet", 5, 20, datum="bottom left", r=8),
        part("fillet", -5, 20, turn=90, datum="bottom left", r=8),
    ],
    "bolt holes": [*girder(), *(part("rectangle", x, 0, datum="bottom", b=22, h=20, sign=-1) for x in (-60, 60))],
    "a hole through two plates": [
        part("rectangle", 0, 0, datum="bottom", b=200, h=10),
        part("rectangle", 0, 10, datum="bottom", b=200, h=10),
        part("rectangle", 0, 0, datum="bottom", b=22, h=20, sign=-1),
    ],
    "bars in the holes cut for them": [
        part("rectangle", b=250, h=600),
        *(part("circle", x, -250, d=25, sign=-1) for x in (-75, 0, 75)),
        *(part("circle", x, -250, turn=17, d=25, n=8) for x in (-75, 0, 75)),
    ],
    "a tube in the hole cut for it": [
        part("rectangle", b=400, h=400),
        part("circle", 0, 0, d=200, sign=-1),
        part("circle", 0, 0, d=200, n=7),
        part("circle", 0, 0, d=180, sign=-1, n=7),
    ],
    "a concrete filled tube": [part("tube", d=200, t=10, n=7), part("circle", turn=12.3, d=180)],
    "two tubes side by side": [part("tube", -50, 0, d=100, t=5), part("tube", 50, 0, d=100, t=5)],
    "tube on a plate": [part("tube", 0, 50, d=100, t=5), part("rectangle", 0, 0, datum="top", b=200, h=10)],
}


@pytest.mark.parametrize("name", SOUND)
def test_a_sound_section_has_no_faults(name: str) -> None:
    assert faults(SOUND[name]) == ()


def test_strips_that_meet_at_an_angle_overlap_at_their_square_ends() -> None:
    strips = [Region.strip(0, 0, 300, 400, t=2), Region.strip(300, 400, 600, 0, t=2)]
    met = faults([Part(f"strip {i}", "plate", strip) for i, strip in enumerate(strips)])
    assert len(met) == 1
    assert "strip 0" in met[0].part


def test_overlapping_solids_are_named_with_their_area() -> None:
    web = part("rectangle", 0, 0, datum="bottom", b=10, h=500, label="web", row=3)
    flange = part("rectangle", 0, 0, datum="bottom", b=200, h=20, label="flange", row=4)
    met = faults([web, flange], unit="mm")
    assert len(met) == 1
    assert met[0].part == "web"
    assert met[0].fault == "covers 200 mm² together with flange"
    assert met[0].effect == "that area counts twice"
    assert faults([web, flange])[0].fault == "covers 200 together with flange"


def test_a_cut_out_that_takes_the_overlap_away_again_makes_it_sound() -> None:
    web = part("rectangle", 0, 0, datum="bottom", b=10, h=500)
    flange = part("rectangle", 0, 0, datum="bottom", b=200, h=20)
    assert faults([web, flange, part("rectangle", 0, 0, datum="bottom", b=10, h=20, sign=-1)]) == ()


def test_three_parts_over_each_other_are_three_pairs() -> None:
    met = faults([part("rectangle", b=10, h=10, label=label) for label in "abc"])
    assert [(fault.part, fault.fault[-1]) for fault in met] == [("a", "b"), ("a", "c"), ("b", "c")]


def test_parts_of_one_label_are_told_apart_by_their_rows() -> None:
    met = faults([part("rectangle", b=10, h=10, label="plate", row=row) for row in (2, 3)])
    assert (met[0].part, met[0].fault) == ("plate (row 2)", "covers 100 together with plate (row 3)")
    unnamed = [replace(part("rectangle", b=10, h=10, row=row), label="") for row in (2, 3)]
    assert faults(unnamed)[0].part == "row 2"


def test_a_cut_out_half_outside_is_named_with_the_area_outside() -> None:
    met = faults([*girder(), part("circle", 100, 10, d=20, sign=-1, label="hole")], unit="mm")
    assert [(fault.part, fault.fault) for fault in met] == [
        ("hole", "cut-out, 157.1 mm² outside the solid parts"),
    ]


def test_a_cut_out_in_the_air_is_wholly_outside() -> None:
    met = faults([*girder(), part("circle", 60, 250, d=20, sign=-1, label="hole")])
    assert met[0].fault == "cut-out, all of it outside the solid parts"
    assert met[0].remedy.startswith("Move the cut-out")


def test_two_cut_outs_at_one_place_take_away_twice() -> None:
    holes = [part("circle", 60, 10, d=18, sign=-1, label=label) for label in ("hole", "copy")]
    met = faults([*girder(), *holes], unit="mm")
    assert [(fault.part, fault.effect) for fault in met] == [("hole", "that area is taken away twice")]
    assert "together with the cut-out copy" in met[0].fault


def test_a_cut_out_of_another_modular_ratio_is_named_with_the_right_one() -> None:
    slab = part("rectangle", b=1000, h=200, n=0.125, label="slab")
    duct = part("circle", d=80, sign=-1, label="duct")
    met = faults([slab, duct])
    assert [fault.part for fault in met] == ["duct"]
    assert met[0].fault == "cut-out with n = 1 in slab with n = 0.125"
    assert met[0].remedy == "Enter n = 0.125 for the cut-out"
    assert faults([slab, replace(duct, n=0.125)]) == ()


def test_a_loose_piece_is_named_with_its_distance() -> None:
    parts = [*girder(), part("rectangle", 0, 512, datum="bottom", b=180, h=12, label="cover")]
    met = faults(parts, unit="mm")
    assert [(fault.part, fault.fault) for fault in met] == [
        ("cover", "not connected with the rest: 12 mm apart"),
    ]
    assert faults(parts, gap=11.9) != ()
    assert faults(parts, gap=12.0) == ()


def test_laced_channels_are_connected_by_the_gap_between_them() -> None:
    chords = [part("channel", x, 0, h=200, b=75, tw=8, tf=11, label=f"chord {x}") for x in (-150, 150)]
    met = faults(chords)
    assert len(met) == 1
    assert faults(chords, gap=300) == ()


def test_a_slot_parts_the_section_only_where_a_gap_is_named() -> None:
    slotted = [*girder(), part("rectangle", 0, 250, b=10, h=30, sign=-1)]
    assert faults(slotted) == ()
    met = faults(slotted, gap=0)
    assert len(met) == 1
    assert "30 apart" in met[0].fault
    assert "web" in met[0].part
    assert faults(slotted, gap=30) == ()


def test_cut_outs_that_leave_nothing_are_reported_and_not_computed() -> None:
    plate = part("rectangle", b=100, h=10, label="plate")
    met = faults([plate, replace(plate, sign=-1, label="hole")])
    assert [fault.part for fault in met] == ["all parts"]
    assert met[0].fault.startswith("the net area is zero")
    assert met[0].effect == "there are no totals"


def test_nothing_at_all_is_a_fault_too() -> None:
    assert [fault.fault for fault in faults([])] == ["there is no part"]
    assert len(faults([part("circle", d=10, sign=-1)])) >= 2


@pytest.mark.parametrize("turn", [0.0, 30.0, 77.7])
def test_an_overlap_is_found_however_the_section_is_turned(turn: float) -> None:
    parts = [*girder(), part("rectangle", 0, 499, datum="bottom", b=180, h=12, label="cover")]
    met = faults(turned(parts, turn))
    assert len(met) == 1
    assert "covers 180 together" in met[0].fault


def test_every_fault_is_one_line_with_a_remedy() -> None:
    parts = [
        *girder(),
        part("rectangle", 0, 0, b=10, h=100),
        part("circle", 900, 900, d=5),
        part("circle", 60, 250, d=20, sign=-1, n=3),
        part("circle", 60, 10, d=20, sign=-1, n=3),
    ]
    met = faults(parts)
    assert len(met) >= 4
    for fault in met:
        assert all(text and "\n" not in text for text in fault)
        assert sum(map(len, fault)) < 255


ON_A_GRID = st.tuples(*[st.integers(1, 5)] * 2, *[st.integers(-4, 4)] * 2, st.sampled_from((1, 1, -1)))


@given(st.lists(ON_A_GRID, min_size=2, max_size=6))
def test_parts_on_a_grid_that_touch_and_overlap_in_every_way_are_all_judged(rows: list[tuple[int, ...]]) -> None:
    block = [
        Part("", "rectangle", placed(SHAPES["rectangle"].build(b=10 * b, h=10 * h), 5 * x, 5 * y), sign)
        for b, h, x, y, sign in rows
    ]
    for fault in faults(block):
        assert all(fault)


def test_a_flange_made_thicker_into_its_web_is_named() -> None:
    web = placed(SHAPES["rectangle"].build(b=10, h=560), 0, 300)
    flanges = [placed(SHAPES["rectangle"].build(b=220, h=h), 0, y) for h, y in ((20, 590), (40, 10))]
    block = [
        Part("top", "rectangle", flanges[0]),
        Part("web", "rectangle", web),
        Part("bottom", "rectangle", flanges[1]),
    ]
    (fault,) = faults(block)  # 10 wide, 10 deep: from 20 to 30
    assert (fault.part, fault.fault) == ("web", "covers 100 together with bottom")


def test_plates_side_by_side_are_judged_without_the_drawing_library() -> None:
    command = (
        "import sys; from cellsection.catalogue import CATALOGUE;"
        "rows = (('shape', 'b', 'h', 'y'), ('rectangle', 10., 400., 0.), ('rectangle', 200., 20., 210.));"
        "assert CATALOGUE['CS_FAULTS'].call(rows) == 'no faults';"
        "assert 'shapely' not in sys.modules;"
        "loose = (*rows, ('rectangle', 200., 20., 300.));"
        "assert 'not connected' in CATALOGUE['CS_FAULTS'].call(loose)[0][1];"
        "assert 'shapely' in sys.modules"
    )
    subprocess.run([sys.executable, "-c", command], check=True)
