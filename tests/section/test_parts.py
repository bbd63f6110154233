"""Parts blocks that cannot be right: each is refused in one line with row, column, fault and remedy."""

from __future__ import annotations

from datetime import date
from math import inf, nan
from typing import NamedTuple

import pytest

from cellsection.catalogue import CATALOGUE
from cellsection.errors import InputError
from cellsection.section.parts import read_block

LONGEST = 250  # of a message: with its mark it stays below the 255 letters that a cell may get


class Refusal(NamedTuple):
    """A block, the row and column its refusal names, and words of the fault and the remedy."""

    block: list[list[object]]
    row: int
    column: str
    fault: str
    remedy: str


def part(row: int, column: str, fault: str, remedy: str, **cells: object) -> Refusal:
    """A block of one part, its headers as given; a space in a header is written _."""
    block: list[list[object]] = [[name.replace("_", " ") for name in cells], list(cells.values())]
    return Refusal(block, row, column, fault, remedy)


def block(row: int, column: str, fault: str, remedy: str, *rows: list[object]) -> Refusal:
    """A block as it stands."""
    return Refusal([*rows], row, column, fault, remedy)


def corners(row: int, column: str, fault: str, remedy: str, *points: tuple[object, object]) -> Refusal:
    """A block of one polygon."""
    nodes: list[list[object]] = [["node", x, y] for x, y in points]
    return Refusal([["shape", "x", "y"], ["polygon", None, None], *nodes], row, column, fault, remedy)


CIRCLE = {"shape": "circle", "d": 30}
BEAM = {"shape": "I", "h": 400, "b": 200, "tw": 10, "tf": 20}
PLATE = {"shape": "plate", "x": 0, "y": 0, "x2": 100, "y2": 0, "t": 10}

BAD_NUMBERS = {
    "text stands where a dimension should": part(
        2, "b", '"wide" is text', "Retype as a number", shape="rectangle", b="wide", h=20
    ),
    "a number is stored as text": part(2, "b", '"200" is text', "Retype as a number", shape="rectangle", b="200", h=20),
    "a decimal comma makes it text": part(2, "d", '"12,5" is text', "Retype as a number", shape="circle", d="12,5"),
    "a unit is typed into the cell": part(2, "d", '"30 mm" is text', "Retype as a number", shape="circle", d="30 mm"),
    "a text runs over two lines": part(
        2, "d", '"30 or 40" is text', "Retype as a number", shape="circle", d="30\nor 40"
    ),
    "a logical is no dimension": part(
        2, "d", "TRUE is a logical, not a number", "Enter a number", shape="circle", d=True
    ),
    "a NaN is no dimension": part(2, "d", "nan is not a finite number", "Enter a number", shape="circle", d=nan),
    "a dimension is infinite": part(2, "d", "inf is not a finite number", "Enter a number", shape="circle", d=inf),
    "an offset is infinite": part(2, "y", "-inf is not a finite number", "Enter a number", **CIRCLE, y=-inf),
    "a number is beyond all lengths": part(
        2, "d", "too large to compute with", "Enter a number", shape="circle", d=1e200
    ),
    "a number has too many digits": part(
        2, "d", "too large to compute with", "Enter a number", shape="circle", d=10**400
    ),
    "a number is beneath all lengths": part(2, "d", "too small", "Enter", shape="circle", d=1e-320),
    "a date is no dimension": part(2, "d", "is not a number", "Enter a number", shape="circle", d=date(2026, 12, 1)),
}
BAD_CELLS = {
    "a dimension is blank": part(
        2, "h", "the rectangle needs h", "Enter h; it takes b h", shape="rectangle", b=200, h=None
    ),
    "a dimension has no column": part(2, "h", "the rectangle needs h", "Add a column h", shape="rectangle", b=200),
    "a dimension belongs to another shape": part(
        2, "tw", "the rectangle does not use tw", "Clear the cell; it takes b h", shape="rectangle", b=200, h=20, tw=10
    ),
    "a shape is misspelt": part(
        2,
        "shape",
        '"rectangel" is not a shape',
        "Use the word that is meant: rectangle",
        shape="rectangel",
        b=200,
        h=20,
    ),
    "a shape is unheard of": part(
        2, "shape", '"quaver" is not a shape', "Choose from rectangle, triangle", shape="quaver", b=200
    ),
    "a shape is a whole sentence": part(
        2,
        "shape",
        '"two plates welded t…" is not a shape',
        "Choose from rectangle",
        shape="two plates welded to a third one along their edges",
        b=200,
    ),
    "a shape is a number": part(2, "shape", "3 is not a shape", "Enter a shape by its word", shape=3.0, b=200),
    "a row has no shape": block(
        3, "shape", "entries but no shape", "Name its shape", ["shape", "d"], ["circle", 30], [None, 40]
    ),
    "a sign is 2": part(
        2, "sign", "sign 2 is neither 1 nor -1", "Enter 1 for solid, -1 for a cut-out", **CIRCLE, sign=2
    ),
    "a sign is 0": part(
        2, "sign", "sign 0 is neither 1 nor -1", "Enter 1 for solid, -1 for a cut-out", **CIRCLE, sign=0
    ),
    "a sign is a word": part(2, "sign", '"minus" is text', "Retype as a number", **CIRCLE, sign="minus"),
    "a modular ratio is 0": part(2, "n", "modular ratio 0 is not positive", "Enter E of the part", **CIRCLE, n=0),
    "a modular ratio is negative": part(
        2, "n", "modular ratio -7 is not positive", "Enter E of the part", **CIRCLE, n=-7
    ),
    "a datum is not known": part(
        2, "datum", '"upper left" is not a datum', "Choose from centroid, centre, bottom", **CIRCLE, datum="Upper left"
    ),
    "a datum is a number": part(2, "datum", "5 is not text", "Enter datum in words", **CIRCLE, datum=5.0),
    "a stage is not whole": part(2, "stage", "stage 1.5 is not a whole number", "Enter 1, 2, 3", **CIRCLE, stage=1.5),
    "a strength is negative": part(
        2, "strength", "strength -235 is not positive", "Enter the yield strength", **CIRCLE, strength=-235
    ),
    "a mirrored mark is neither yes nor no": part(
        2, "mirrored", '"perhaps" is neither yes nor no', "Enter yes, or leave", **CIRCLE, mirrored="perhaps"
    ),
    "a no-tension mark is neither yes nor no": part(
        2, "no tension", "2 is neither yes nor no", "Enter yes, or leave", **CIRCLE, no_tension=2
    ),
}
BAD_HEADERS = {
    "there is no shape column": block(
        1, "", 'there is no column "shape"', "Include the header row", ["b", "h"], [200, 20]
    ),
    "there are only headers": block(1, "", "needs a header row and at least one part", "headers", ["shape", "d"]),
    "all rows below the headers are blank": block(
        2, "", "headers but no part", "Enter a part", ["shape", "d"], [None, None], ["", " "]
    ),
    "there is nothing at all": block(1, "", "needs a header row and at least one part", "headers"),
    "the headers are left out of the range": block(
        1, "", "the header of column 2 is 200, not text", "Let the first row", ["rectangle", 200, 20], ["circle", 30]
    ),
    "numbers stand below no header": block(
        1, "", "column 3 holds numbers but has no header", "Give it a header", ["shape", "d", None], ["circle", 30, 5]
    ),
    "a row is longer than the headers": block(
        2, "", "longer than the header row", "Shorten it, or add a header", ["shape", "d"], ["circle", 30, 5]
    ),
    "a header has an underscore": block(
        1, "t_w", 'looks like "tw"', 'Write "tw"', ["shape", "h", "b", "t_w", "tf"], ["I", 400, 200, 10, 20]
    ),
    "a unit stands in round brackets": block(
        1, "b (mm)", 'looks like "b"', '"b [mm]"', ["shape", "b (mm)", "h"], ["rectangle", 200, 20]
    ),
    "a unit stands in no brackets": block(1, "d mm", 'looks like "d"', '"d [mm]"', ["shape", "d mm"], ["circle", 30]),
    "a sign header is misspelt": block(
        1, "sgn", 'looks like "sign"', 'Write "sign"', ["shape", "d", "sgn"], ["circle", 30, -1]
    ),
    "a datum header is in the plural": block(
        1, "datums", 'looks like "datum"', 'Write "datum"', ["shape", "d", "datums"], ["circle", 30, "top"]
    ),
    "a header stands twice": block(
        1, "B", 'there are two columns "b"', "Keep one of them", ["shape", "b", "h", "B"], ["rectangle", 200, 20, 10]
    ),
    "a length unit is unknown": block(
        1, "d [mil]", '"mil" is not a known length unit', "Use one of mm, cm, m", ["shape", "d [mil]"], ["circle", 3]
    ),
    "a length column is in an area unit": block(
        1, "a [mm²]", '"mm²" is not a known length unit', "Use one of", ["shape", "d [mm]", "a [mm²]"], ["circle", 3, 7]
    ),
    "only one of two length columns has a unit": block(
        1, "h", "h names no length unit while another column is in mm", "Write h [mm]",
        ["shape", "b [mm]", "h"], ["rectangle", 200, 20],
    ),
    "an angle is in a length unit": block(
        1, "turn [mm]", '"mm" is not the unit of an angle', "degrees", ["shape", "d", "turn [mm]"], ["circle", 30, 5]
    ),
    "an angle is in radians": block(
        1, "turn [rad]", '"rad" is not the unit of an angle', "degrees", ["shape", "d", "turn [rad]"], ["circle", 30, 1]
    ),
    "a sign has a unit": block(
        1, "sign [mm]", "sign has no unit", "Write the header as sign", ["shape", "d", "sign [mm]"], ["circle", 30, 1]
    ),
}  # fmt: skip
BAD_SHAPES = {
    "a width is negative": part(2, "b", "b = -200 is not positive", "Enter a length", shape="rectangle", b=-200, h=20),
    "a plate ends where it starts": part(
        2, "x2", "the plate ends where it starts", "Enter x2, y2 different from x, y", **{**PLATE, "x2": 0}
    ),
    "a plate has no thickness": part(2, "t", "t = 0 is not positive", "Enter a length", **{**PLATE, "t": 0}),
    "a plate is turned": part(2, "turn", "takes its direction from its two points", "Clear turn", **PLATE, turn=30),
    "a plate has a datum": part(2, "datum", "a plate is placed by its points", "Clear datum", **PLATE, datum="top"),
    "a plate is mirrored": part(2, "mirrored", "from its two points", "Clear mirrored", **PLATE, mirrored=1),
    "flanges are thicker than half of the depth": part(
        2, "tf", "tf = 250 is not below 200, half of the depth h", "Enter a thinner flange", **{**BEAM, "tf": 250}
    ),
    "a root radius is too large": part(2, "r", "r = 300 is more than", "Enter a smaller radius", **BEAM, r=300),
    "a wall fills its tube": part(
        2, "t", "t = 50 is not below 50", "Use a circle, or enter a thinner wall", shape="tube", d=100, t=50
    ),
    "a wall is lost beside its diameter": part(
        2, "", "the area is lost in rounding", "Check the dimensions and their units", shape="tube", d=1e20, t=1
    ),
    "a sector has no angle": part(2, "angle", "angle = 0 is not positive", "an angle", shape="sector", r=9, angle=0),
    "a sector turns more than once": part(
        2, "angle", "angle = 400 is not below 360", "Use a circle", shape="sector", r=100, angle=400
    ),
    "the column of a unit is named as typed": block(
        2, "TW [mm]", "tw = 300 is not below", "Enter",
        ["shape", "h [mm]", "b [mm]", "TW [mm]", "tf [mm]"], ["I", 400, 200, 300, 20],
    ),
}  # fmt: skip
BAD_POLYGONS = {
    "a node stands before its polygon": block(
        2, "shape", "a node stands here without a polygon", "Put a polygon row", ["shape", "x", "y"], ["node", 0, 0]
    ),
    "a node follows another shape": block(
        3, "shape", "a node stands here without a polygon", "Put a polygon row first",
        ["shape", "d", "x", "y"], ["circle", 30, None, None], ["node", None, 0, 0],
    ),
    "a polygon has two nodes": corners(
        2, "shape", "the polygon has 2 nodes", "Follow it with node rows", (0, 0), (10, 0)
    ),
    "a node has no y": corners(4, "y", "y is missing", "Enter y", (0, 0), (10, None), (0, 10)),
    "a node holds text": corners(3, "x", '"0" is text', "Retype as a number", ("0", 0), (10, 0), (0, 10)),
    "a node has a modular ratio": block(
        3, "n", "a node has no n", "Clear the cell; a node has x and y",
        ["shape", "x", "y", "n"], ["polygon", 0, 0, 7], ["node", 0, 0, 7], ["node", 9, 0, 7], ["node", 0, 9, 7],
    ),
    "sides of a polygon cross": corners(
        2, "x", "the outline crosses itself where side 2-3 meets side 4-1", "List the corners in the order",
        (0, 0), (40, 0), (10, 30), (30, 30),
    ),
    "sides of a polygon cross so that its area is nought": corners(
        2, "x", "it crosses itself", "in their order", (0, 0), (10, 10), (10, 0), (0, 10)
    ),
    "a polygon only has repeated corners": corners(
        2, "x", "the outline has 2 different corners", "Enter three corners", (0, 0), (10, 0), (10, 0), (0, 0)
    ),
    "all corners lie on one line": corners(2, "x", "on one line", "enclose an area", (0, 0), (10, 5), (20, 10)),
    "a polygon has a datum": block(
        2, "datum", "a polygon is placed by its points", "Clear datum in this row",
        ["shape", "x", "y", "datum"], ["polygon", 0, 0, "top"], ["node", 0, 0], ["node", 9, 0], ["node", 0, 9],
    ),
    "a polygon has a width": block(
        2, "b", "the polygon does not use b", "Clear the cell; it takes node rows below it",
        ["shape", "x", "y", "b"], ["polygon", 0, 0, 5], ["node", 0, 0], ["node", 9, 0], ["node", 0, 9],
    ),
}  # fmt: skip
BAD = BAD_NUMBERS | BAD_CELLS | BAD_HEADERS | BAD_SHAPES | BAD_POLYGONS


def test_there_are_thirty_kinds_of_bad_input_and_more() -> None:
    assert len(BAD) >= 30


@pytest.mark.parametrize("bad", BAD.values(), ids=BAD)
def test_a_block_is_refused_in_one_line_with_place_fault_and_remedy_when(bad: Refusal) -> None:
    with pytest.raises(InputError) as caught:
        read_block(bad.block)
    problem, line = caught.value, str(caught.value)
    assert (problem.row, problem.column) == (bad.row, bad.column)
    assert bad.fault in problem.fault
    assert bad.remedy in problem.remedy
    assert len(line.splitlines()) == 1
    assert len(line) <= LONGEST
    assert line.startswith(f"row {bad.row}")


@pytest.mark.parametrize("bad", BAD.values(), ids=BAD)
@pytest.mark.parametrize("name", ["CS_TOTALS", "CS_FAULTS", "CS_MOVED", "CS_JOINED"])
def test_no_function_gives_a_result_when(name: str, bad: Refusal) -> None:
    with pytest.raises(InputError) as caught:
        CATALOGUE[name].call(tuple(map(tuple, bad.block)))
    assert caught.value.argument.startswith("parts")
    assert len(str(caught.value)) <= LONGEST
    if bad.block:  # without a single cell the argument itself is missing
        assert (caught.value.row, caught.value.column) == (bad.row, bad.column)
