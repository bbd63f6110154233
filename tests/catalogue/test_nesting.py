"""Blocks made, changed, joined and summed in one formula: the totals go as the section does."""

from __future__ import annotations

from math import cos, radians, sin
from typing import TYPE_CHECKING, Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellsection.catalogue import CATALOGUE
from cellsection.geometry import DATUMS, SHAPES
from tests.catalogue.sheet import in_workbook
from tests.geometry.random_shapes import dimensions

if TYPE_CHECKING:
    from pathlib import Path

Block = tuple[tuple[Any, ...], ...]
few = settings(max_examples=25, deadline=None)
MOMENTS = ("Ix", "Iy", "Ixy")
places = st.floats(-500.0, 500.0)
angles = st.one_of(st.sampled_from([0.0, 30.0, 90.0, -90.0, 180.0]), st.floats(-360.0, 360.0))


def call(name: str, *raw: Any) -> Any:
    return CATALOGUE[name].call(*raw)


def totals(block: Block) -> dict[str, float]:
    return {symbol: value for symbol, value, _unit in call("CS_TOTALS", block)}


@st.composite
def blocks(draw: st.DrawFn, word: str, unit: str = "", parts: int = 3) -> Block:
    """A block of solid parts of one shape and a rectangle among them, turned, mirrored, by random datums."""
    lines: list[dict[str, Any]] = []
    for shape in [word] * draw(st.integers(1, parts)) + ["rectangle"]:
        line: dict[str, Any] = {"shape": shape, **draw(dimensions(shape)), "n": draw(st.sampled_from([None, 7.0, 0.5]))}
        if shape != "plate":
            line |= {"x": draw(places), "y": draw(places), "turn": draw(angles), "mirrored": draw(st.booleans())}
            line["datum"] = draw(st.sampled_from([None, *DATUMS]))
        lines.append(line)
    header = list(dict.fromkeys(name for line in lines for name in line))
    plain = {"shape", "angle", "slope", "n", "turn", "mirrored", "datum"}
    shown = tuple(f"{name} [{unit}]" if unit and name not in plain else name for name in header)
    return (shown, *(tuple(line.get(name) for name in header) for line in lines))


def agree(made: dict[str, float], wanted: dict[str, float], reach: float) -> None:
    """A to a part in 1e12, places to one of how far out they are, second moments to one of the larger."""
    size = 1e-12 * max(1.0, reach)
    I = 1e-9 * (wanted["Ix"] + wanted["Iy"]) + 8 * size * wanted["A"] * max(1.0, reach)  # noqa: E741 - the trade's symbol
    assert made["A"] == pytest.approx(wanted["A"], rel=1e-12)
    for symbol in ("x", "y"):
        assert made[symbol] == pytest.approx(wanted[symbol], abs=1e3 * size)
    for symbol in (*MOMENTS, "Ip", "I1", "I2"):
        assert made[symbol] == pytest.approx(wanted[symbol], abs=I), symbol


WORDS = list(SHAPES)


@pytest.mark.parametrize("word", WORDS)
@few
@given(data=st.data(), dx=places, dy=places, turn=angles)
def test_a_moved_section_has_the_totals_of_the_section_moved(
    word: str, data: st.DataObject, dx: float, dy: float, turn: float
) -> None:
    block = data.draw(blocks(word))
    old, new = totals(block), totals(call("CS_MOVED", block, dx, dy, turn))
    c, s = cos(radians(turn)), sin(radians(turn))
    wanted = old | {
        "x": c * old["x"] - s * old["y"] + dx,
        "y": s * old["x"] + c * old["y"] + dy,
        "Ix": c * c * old["Ix"] + s * s * old["Iy"] + 2 * s * c * old["Ixy"],
        "Iy": s * s * old["Ix"] + c * c * old["Iy"] - 2 * s * c * old["Ixy"],
        "Ixy": (c * c - s * s) * old["Ixy"] - s * c * (old["Ix"] - old["Iy"]),
    }
    agree(new, wanted, 3e3)


@pytest.mark.parametrize("word", WORDS)
@few
@given(data=st.data(), position=places, axis=st.sampled_from("xy"))
def test_a_mirrored_section_has_the_totals_of_the_section_mirrored(
    word: str, data: st.DataObject, position: float, axis: str
) -> None:
    block = data.draw(blocks(word))
    old, new = totals(block), totals(call("CS_MIRRORED", block, axis, position))
    across = "y" if axis == "x" else "x"
    agree(new, old | {across: 2 * position - old[across], "Ixy": -old["Ixy"]}, 3e3)


@pytest.mark.parametrize("word", WORDS)
@few
@given(data=st.data())
def test_a_block_split_in_two_and_joined_again_has_the_same_totals(word: str, data: st.DataObject) -> None:
    header, *rows = data.draw(blocks(word))
    chosen = data.draw(st.lists(st.booleans(), min_size=len(rows), max_size=len(rows)))
    halves = [
        (header, *(row for row, here in zip(rows, chosen, strict=True) if here == side)) for side in (True, False)
    ]
    joined = call("CS_JOINED", *(half for half in halves if len(half) > 1))
    agree(totals(joined), totals((header, *rows)), 3e3)


@few
@given(block=blocks("channel", unit="mm"), other=blocks("angle", unit="in"))
def test_units_do_not_matter_to_what_is_joined(block: Block, other: Block) -> None:
    one, two = totals(call("CS_JOINED", block, other)), totals(call("CS_JOINED", other, block))
    for symbol, power in {"A": 2, "Ix": 4, "Iy": 4, "Ip": 4, "I1": 4}.items():
        assert one[symbol] == pytest.approx(two[symbol] * 25.4**power, rel=1e-9)


@few
@given(block=blocks("channel"), dy=places)
def test_a_block_with_its_mirror_image_is_symmetric(block: Block, dy: float) -> None:
    whole = totals(
        call("CS_JOINED", block, call("CS_MIRRORED", call("CS_MOVED", call("CS_MOVED", block, 0, dy), 0, -dy), "y"))
    )
    assert whole["Ixy"] == pytest.approx(0.0, abs=1e-9 * whole["Ip"])
    assert whole["x"] == pytest.approx(0.0, abs=1e-9)


@few
@given(block=blocks("I"))
def test_a_part_cut_out_of_itself_leaves_nothing(block: Block) -> None:
    cut = (*block[0], "sign"), *((*row, -1.0) for row in block[1:])
    with pytest.raises(ValueError, match="net area is zero"):
        totals(call("CS_JOINED", block, cut))


PLATE = {
    "A1": (("shape", "b [mm]", "h [mm]"), ("rectangle", 200.0, 20.0)),
    "A4": (("shape", "d [cm]"), ("circle", 3.0)),
}


def test_functions_nest_in_a_saved_workbook(tmp_path: Path) -> None:
    formula = '=CS_TOTALS(CS_JOINED(CS_MOVED(A1:C2,0,250),A4:B5),"A")'
    assert in_workbook(tmp_path, formula, PLATE) == pytest.approx(4706.858347057703, rel=1e-12)  # 4000 + 225·π


def test_a_nested_block_fills_cells_that_are_a_block_again(tmp_path: Path) -> None:
    made = in_workbook(tmp_path, "=CS_JOINED(CS_MOVED(A1:C2,0,250),A4:B5)", PLATE, rows=3, columns=6)
    assert made[0] == ("shape", "b [mm]", "h [mm]", "d [mm]", "x [mm]", "y [mm]")
    assert made[1][:3] == ("rectangle", 200.0, 20.0)
    assert made[1][4:] == (0.0, 250.0)
    assert made[2] == ("circle", "", "", 30.0, 0.0, 0.0)
    assert call("CS_TOTALS", made, "A") == pytest.approx(4706.858347057703, rel=1e-12)
