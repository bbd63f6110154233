"""Every shape against a second drawing of it, and every impossible dimension refused by name."""

from __future__ import annotations

from math import pi, sqrt

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellsection.errors import InputError
from cellsection.geometry import SHAPES, Region
from tests.geometry.drawn_by_shapely import SHORT, drawing, integrals
from tests.geometry.random_shapes import dimensions, shape_regions


@pytest.mark.parametrize("word", SHAPES)
@settings(max_examples=20)
@given(data=st.data())
def test_every_shape_agrees_with_a_fine_polygon_drawn_without_the_library(word: str, data: st.DataObject) -> None:
    dims = data.draw(dimensions(word))
    region, shape = SHAPES[word].build(**dims), drawing(word, **dims)
    left, low, right, high = region.bounds()
    size = max(right - left, high - low)
    expected = integrals(shape)
    natural = [size**2, size, size, size**4, size**4, size**4]
    for met, wanted, scale in zip(region.centroidal(), expected, natural, strict=True):
        assert abs(met - wanted) <= 8 * SHORT * scale
    assert region.bounds() == pytest.approx(shape.bounds, abs=1e-5 * size)


@settings(max_examples=200)
@given(shape_regions())
def test_no_shape_crosses_itself_and_each_is_closed(region: Region) -> None:
    left, low, right, high = region.bounds()
    shape = region.polygon(1e-4 * max(right - left, high - low))
    assert shape.is_valid
    assert shape.geom_type == "Polygon"
    assert Region.from_loops(*region.local).moments().A > 0.0


I = {"h": 300, "b": 150, "tw": 7, "tf": 10}  # noqa: E741 - the shape's own letter
C = {"h": 100, "b": 50, "tw": 6, "tf": 8}
L = {"h": 75, "b": 50, "t": 6}
BOX = {"b": 100, "h": 60, "tw": 5, "tf": 10}
LIPPED = {"h": 200, "b": 70, "c": 20, "t": 2}


@pytest.mark.parametrize(
    ("word", "dims", "column"),
    [
        ("rectangle", {"b": 0, "h": 10}, "b"),
        ("rectangle", {"b": 10, "h": -1}, "h"),
        ("rectangle", {"b": 10}, "h"),
        ("rectangle", {"b": 10, "h": 10, "tw": 3}, "tw"),
        ("rectangle", {"b": float("nan"), "h": 10}, "b"),
        ("rectangle", {"b": float("inf"), "h": 10}, "b"),
        ("triangle", {"b": 10, "h": 10, "a": float("nan")}, "a"),
        ("circle", {"d": 0}, "d"),
        ("circle", {"d": 1e-60}, "d"),
        ("circle", {"d": 1e60}, "d"),
        ("fillet", {"r": float("inf")}, "r"),
        ("sector", {"r": 10, "angle": 360}, "angle"),
        ("segment", {"r": 10, "angle": 0}, "angle"),
        ("segment", {"r": 10, "angle": 400}, "angle"),
        ("tube", {"d": 10, "t": 5}, "t"),
        ("tube", {"d": 10, "t": 0}, "t"),
        ("box", BOX | {"tw": 50}, "tw"),
        ("box", BOX | {"tf": 31}, "tf"),
        ("box", BOX | {"ro": 31}, "ro"),
        ("box", BOX | {"ri": 21, "ro": 25}, "ri"),
        ("box", BOX | {"ro": 5, "ri": 6}, "ri"),
        ("box", BOX | {"ro": 30}, "ro"),
        ("I", I | {"tf": 150}, "tf"),
        ("I", I | {"tf": 300}, "tf"),
        ("I", I | {"tf2": 290}, "tf2"),
        ("I", I | {"tw": 150}, "tw"),
        ("I", I | {"b2": 7}, "tw"),
        ("I", I | {"b2": 0}, "b2"),
        ("I", I | {"tf2": 0}, "tf2"),
        ("I", I | {"r": 72}, "r"),
        ("I", I | {"b2": 20, "r": 7}, "r"),
        ("I", I | {"h": 30, "r": 6}, "r"),
        ("I", I | {"r": -1}, "r"),
        ("tee", I | {"tf": 300}, "tf"),
        ("tee", I | {"r": 71.6}, "r"),
        ("channel", C | {"tf": 50}, "tf"),
        ("channel", C | {"tw": 50}, "tw"),
        ("channel", C | {"slope": 8}, "slope"),
        ("channel", C | {"slope": -0.08}, "slope"),
        ("channel", C | {"tf": 45, "slope": 0.3}, "tf"),
        ("channel", C | {"r2": 9}, "r2"),
        ("channel", C | {"r": 43}, "r"),
        ("channel", C | {"r": 37, "r2": 7.5}, "r"),
        ("angle", L | {"t": 50}, "t"),
        ("angle", L | {"r2": 7}, "r2"),
        ("angle", L | {"r": 40, "r2": 5}, "r"),
        ("lipped channel", LIPPED | {"c": 100}, "c"),
        ("lipped channel", LIPPED | {"c": 2}, "t"),
        ("lipped channel", LIPPED | {"r": 19}, "r"),
        ("lipped channel", LIPPED | {"t": 35}, "t"),
        ("lipped channel", LIPPED | {"c": 90, "r": 34}, "r"),
        ("zed", LIPPED | {"c": 201}, "c"),
        ("zed", LIPPED | {"c": 1}, "t"),
        ("zed", {"h": 200, "b": 70, "t": 70}, "t"),
        ("zed", {"h": 200, "b": 70, "t": 2, "r": 69}, "r"),
        ("fillet", {"r": 0}, "r"),
        ("plate", {"x": 0, "y": 0, "x2": 10, "y2": 0, "t": 0}, "t"),
        ("plate", {"x": 1, "y": 1, "x2": 1, "y2": 1, "t": 5}, "x2"),
    ],
)
def test_impossible_dimensions_are_refused_by_name(word: str, dims: dict[str, float], column: str) -> None:
    with pytest.raises(InputError) as met:
        SHAPES[word].build(**dims)
    assert met.value.column == column
    text = str(met.value)
    assert "\n" not in text
    assert len(text) < 255
    assert met.value.remedy[0].isupper()
    assert not met.value.remedy.endswith(".")


@pytest.mark.parametrize(
    ("word", "dims"),
    [
        ("I", I | {"r": 71.5}),  # the flange's outstand
        ("I", I | {"h": 34, "r": 7}),  # half of the clear depth
        ("I", {"h": 0.9, "b": 0.3, "tw": 0.1, "tf": 0.1, "r": 0.1}),  # (0.3 - 0.1)/2 is not 0.1 in binary
        ("tee", I | {"r": 71.5}),
        ("channel", C | {"r": 42, "r2": 2}),
        ("channel", C | {"r": 36, "r2": 8}),
        ("angle", L | {"r": 38, "r2": 6}),  # the whole tip round, the whole inside of the short leg
        ("box", BOX | {"ro": 30, "ri": 20}),
        ("box", BOX | {"ri": 20}),  # sharp outside, filleted inside
        ("lipped channel", LIPPED | {"r": 18}),  # the lip is its bend
        ("zed", LIPPED | {"r": 18}),
        ("zed", {"h": 200, "b": 70, "t": 2, "r": 68}),
    ],
)
def test_a_radius_may_fill_its_space_exactly(word: str, dims: dict[str, float]) -> None:
    shape = SHAPES[word].build(**dims).polygon(1e-3)
    assert shape.is_valid
    assert shape.geom_type == "Polygon"


@pytest.mark.parametrize("size", [1e-48, 1e-12, 1e12, 1e49])
def test_any_length_that_is_accepted_is_computed_with(size: float) -> None:
    ring = SHAPES["tube"].build(d=size, t=size / 10).centroidal()
    assert ring.Ix == pytest.approx(pi / 64 * (1 - 0.8**4) * size**4, rel=1e-13)


def test_round_tubes_of_box_and_tube_agree() -> None:
    # A square hollow section whose radii fill it is a round one.
    tube, box = SHAPES["tube"].build(d=100, t=10), SHAPES["box"].build(b=100, h=100, tw=10, tf=10, ro=50, ri=40)
    assert box.centroidal() == pytest.approx(tube.centroidal(), rel=1e-13, abs=1e-8)


def test_the_textbook_values_of_circle_parts() -> None:
    # Handbook tables of plane areas, as in Gere, Mechanics of Materials, appendix (from memory).
    r = 2.0
    half, quarter = SHAPES["half circle"].build(d=2 * r), SHAPES["sector"].build(r=r, angle=90)
    assert half.centroidal().Ix == pytest.approx((pi / 8 - 8 / (9 * pi)) * r**4, rel=1e-13)
    assert quarter.centroidal().x == pytest.approx(4 * r / (3 * pi), rel=1e-14)
    assert quarter.moments().Ixy == pytest.approx(r**4 / 8, rel=1e-14)
    assert SHAPES["fillet"].build(r=r).centroidal().x == pytest.approx((10 - 3 * pi) / (12 - 3 * pi) * r, rel=1e-14)


def test_the_segment_of_a_half_turn_is_the_half_circle() -> None:
    half, segment = SHAPES["half circle"].build(d=6).centroidal(), SHAPES["segment"].build(r=3, angle=180).centroidal()
    assert (segment.A, segment.y, segment.Ix, segment.Iy) == pytest.approx(
        (half.A, half.y, half.Ix, half.Iy), rel=1e-14
    )


def test_a_flat_segment_keeps_its_digits() -> None:
    # Of a circle a million times as large: the parabola's 2/3·chord·rise and 8/35 + 4/25 - ... of it.
    segment = SHAPES["segment"].build(r=1e6, angle=1e-4).centroidal()
    chord = 2e6 * sqrt(1 - 0.9999999999996192**2)  # of cos 0.00005°, good to three digits only
    assert segment.Iy / segment.A == pytest.approx(chord**2 / 20, rel=1e-3)
    rise = 1e6 * 2 * (pi / 180 * 0.5e-4 / 2) ** 2
    # Ix of a parabolic segment about its centroid: A·rise²·(8/35 - 4/25).
    assert segment.Ix / segment.A == pytest.approx(rise**2 * (8 / 35 - 4 / 25), rel=1e-9)


def test_the_sides_of_triangles_and_trapezoids_lean_where_a_says() -> None:
    triangle = SHAPES["triangle"]
    assert triangle.build(b=6, h=4).bounds() == triangle.build(b=6, h=4, a=3).bounds()
    assert triangle.build(b=6, h=4, a=-2).bounds() == (-2.0, 0.0, 6.0, 4.0)
    trapezoid = SHAPES["trapezoid"]
    assert trapezoid.build(b=6, b2=2, h=4).centroidal() == trapezoid.build(b=6, b2=2, h=4, a=2).centroidal()
    # 6·4 + 2·triangles: h/3·(b + 2·b2)/(b + b2) for the centroid.
    assert trapezoid.build(b=6, b2=2, h=4).centroidal().y == pytest.approx(4 / 3 * (6 + 4) / (6 + 2))


def test_the_unlipped_zed_is_the_letters_shape() -> None:
    zed = SHAPES["zed"].build(h=200, b=90, t=15)
    assert zed.bounds() == (0.0, 0.0, 165.0, 200.0)
    top_left, bottom_right = zed.outline(20), zed.outline(20)
    assert (0.0, 200.0) in top_left
    assert (165.0, 0.0) in bottom_right


@pytest.mark.parametrize("word", SHAPES)
def test_every_shape_says_what_it_is(word: str) -> None:
    shape = SHAPES[word]
    assert shape.word == word
    assert shape.help
    assert not set(shape.required) & set(shape.optional)


def test_dimensions_keep_the_order_of_the_design() -> None:
    letters = {word: " ".join(shape.required) for word, shape in SHAPES.items()}
    assert letters == {
        "rectangle": "b h",
        "triangle": "b h",
        "trapezoid": "b b2 h",
        "circle": "d",
        "half circle": "d",
        "sector": "r angle",
        "segment": "r angle",
        "ellipse": "b h",
        "tube": "d t",
        "box": "b h tw tf",
        "I": "h b tw tf",
        "tee": "h b tw tf",
        "channel": "h b tw tf",
        "angle": "h b t",
        "zed": "h b t",
        "lipped channel": "h b c t",
        "fillet": "r",
        "plate": "x y x2 y2 t",
    }
