"""Headers that are right: any order, any case, their units, and columns that do not count."""

from __future__ import annotations

import pytest

from cellsection.errors import InputError
from cellsection.section.headers import DIMENSIONS, KNOWN, ORDER, UNITS, read_header
from cellsection.section.parts import read_block, read_rows

# One inch is 25.4 mm and one foot 12 inches, exactly (international yard and pound, 1959; from memory).
MILLIMETRES = {"mm": 1.0, "cm": 10.0, "m": 1000.0, "in": 25.4, "ft": 304.8}


def areas(*rows: list[object]) -> list[float]:
    return [part.region.moments().A for part in read_block(rows).parts]


def test_headers_may_stand_in_any_order_and_case() -> None:
    block = read_block([["Y", "H", " Shape ", "b", "PART"], [5, 20, "Rectangle", 200, "plate"]])
    assert block.unit == ""
    assert [part.label for part in block.parts] == ["plate"]
    assert block.parts[0].region.bounds() == (-100.0, -5.0, 100.0, 15.0)


def test_a_block_without_units_is_in_any_consistent_unit() -> None:
    assert read_block([["shape", "d"], ["circle", 2]]).unit == ""


@pytest.mark.parametrize("unit", UNITS)
@pytest.mark.parametrize("first", UNITS)
def test_lengths_are_converted_to_the_first_unit(first: str, unit: str) -> None:
    rows, named = read_rows([["shape", f"b [{first}]", f"h [{unit}]"], ["rectangle", 7, 3]])
    assert named == first
    assert rows[0].dims["b"] == 7.0
    assert rows[0].dims["h"] == pytest.approx(3.0 * MILLIMETRES[unit] / MILLIMETRES[first], rel=1e-15)


@pytest.mark.parametrize("header", ["d [mm]", "d[mm]", "D  [ mm ]", "d\n[mm]"])
def test_the_unit_may_stand_apart_from_its_letter_or_on_a_line_below(header: str) -> None:
    assert read_block([["shape", header], ["circle", 2]]).unit == "mm"


def test_a_unitless_length_column_without_numbers_needs_no_unit() -> None:
    assert read_block([["shape", "d [mm]", "tw"], ["circle", 2, None]]).unit == "mm"


def test_angles_may_say_degrees_and_plain_numbers_that_they_have_no_unit() -> None:
    header = ["shape", "r [cm]", "angle [°]", "turn [deg]", "n [-]", "sign [-]", "strength [MPa]"]
    rows, unit = read_rows([header, ["sector", 10, 90, 30, 7, 1, 235]])
    assert unit == "cm"
    assert (rows[0].dims, rows[0].turn, rows[0].n) == ({"r": 10.0, "angle": 90.0}, 30.0, 7.0)


def test_a_slope_may_be_in_per_cent() -> None:
    header = ["shape", "h", "b", "tw", "tf", "slope [%]"]
    assert read_rows([header, ["channel", 200, 80, 8, 12, 8]])[0][0].dims["slope"] == pytest.approx(0.08, rel=1e-15)


@pytest.mark.parametrize(
    "header", ["remarks", "Mark", "drawing", "A0", "mass [kg/m]", "(see sheet 2)", "No.", "area", "Ay", "b1", "h0"]
)
def test_an_unknown_header_does_not_count(header: str) -> None:
    assert areas(["shape", "b", "h", header], ["rectangle", 200, 20, 12345]) == [4000.0]


@pytest.mark.parametrize("header", ["b", "b [mm]"])
def test_a_misspelt_dimension_without_numbers_below_it_does_not_count(header: str) -> None:
    assert areas(["shape", header, header.replace("b", "h"), "b (mm)"], ["rectangle", 200, 20, "note"]) == [4000.0]


@pytest.mark.parametrize(
    ("header", "meant"),
    [
        ("r1", "r"),  # the European tables' letter of the root radius
        ("R1 [mm]", "r"),
        ("radius", "r"),
        ("toe radius", "r2"),
        ("x0", "x"),
        ("y1", "y"),
        ("yc mm", "y"),
        ("modular ratio n", "n"),
        ("E", "n"),
        ("theta", "turn"),
        ("α", "turn"),
        ("y bar", "y"),
        ("ȳ", "y"),
        ("elevation", "y"),
        ("+/-", "sign"),
        ("add/deduct", "sign"),
        ("rotation", "turn"),
        ("hole", "sign"),
        ("modular ratio", "n"),
    ],
)
def test_another_name_of_a_column_that_would_be_left_out_unnoticed_is_refused(header: str, meant: str) -> None:
    with pytest.raises(InputError, match=f'looks like "{meant}"') as caught:
        read_block([["shape", "b", "h", header], ["rectangle", 200, 20, 10]])
    assert (caught.value.row, caught.value.column) == (1, header)


def test_another_name_beside_the_column_itself_does_not_count() -> None:
    assert areas(["shape", "d", "y", "y0", "yc"], ["circle", 2, 5, 7, 9]) == [pytest.approx(3.141592653589793)]


@pytest.mark.parametrize("shape", ["triangle", "rectangle"])
def test_a_column_of_areas_is_not_taken_for_the_apex_offset(shape: str) -> None:
    with pytest.raises(InputError, match="A may be an area, or the apex offset a") as caught:
        read_block([["shape", "b", "h", "A"], [shape, 60, 30, 900]])
    assert (caught.value.row, caught.value.column) == (1, "A")


def test_blank_headers_and_columns_do_not_count() -> None:
    assert areas([None, "shape", "", "d", " "], [None, "circle", None, 2, "note"]) == [pytest.approx(3.141592653589793)]


def test_every_dimension_of_every_shape_is_a_known_header() -> None:
    assert set(DIMENSIONS) <= KNOWN
    assert len(ORDER) == len(KNOWN)


@pytest.mark.parametrize("name", ORDER)
def test_every_header_that_a_returned_block_has_is_read_again(name: str) -> None:
    columns, _unit = read_header(["shape", name] if name != "shape" else ["shape"], [False, True])
    assert columns[-1].name == name


@pytest.mark.parametrize("header", ["qty", "Quantity", "no. of", "count"])
def test_a_number_of_pieces_is_refused_since_each_row_counts_once(header: str) -> None:
    with pytest.raises(InputError, match="each part counts once"):
        read_rows([("shape", "b", "h", header), ("rectangle", 200, 10, 3)])
    read_rows([("shape", "b", "h", header), ("rectangle", 200, 10, "three, see drawing")])
