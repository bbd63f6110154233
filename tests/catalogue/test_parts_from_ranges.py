"""CS_PARTS: a parts block out of the separate ranges that a workbook already has."""

from __future__ import annotations

from typing import Any

import pytest

from cellsection.catalogue import CATALOGUE
from cellsection.errors import InputError

PARTS, TOTALS = CATALOGUE["CS_PARTS"].call, CATALOGUE["CS_TOTALS"].call
BLANK = (None,)


@pytest.mark.parametrize("blank", [None, "", " "])
def test_rows_that_are_blank_in_all_ranges_are_skipped(blank: Any) -> None:
    made = PARTS(
        (("rectangle",), (blank,), ("circle",), (blank,)),
        ((200.0, 20.0), (None, ""), (30.0, None), (None, None)),
        ((0.0,), BLANK, (5.0,), ("",)),
    )
    assert made == PARTS((("rectangle",), ("circle",)), ((200.0, 20.0), (30.0, None)), ((0.0,), (5.0,)))


def test_one_shape_for_all_does_not_fill_blank_rows() -> None:
    assert PARTS("circle", ((30.0,), BLANK), ((0.0,), BLANK)) == PARTS("circle", ((30.0,),), ((0.0,),))


def test_rows_after_a_blank_one_keep_their_numbers_in_messages() -> None:
    with pytest.raises(InputError) as caught:
        PARTS("tube", ((30.0, 3.0), (None, None), (30.0, 20.0)), ((0.0,), BLANK, (1.0,)))
    assert (caught.value.argument, caught.value.row, caught.value.column) == ("size", 3, "t")


def test_a_missing_dimension_is_to_be_entered_not_a_column_to_be_added() -> None:
    with pytest.raises(InputError) as caught:
        PARTS("rectangle", ((200.0,),), ((0.0,),))
    assert str(caught.value) == "size, row 1, column h: the rectangle needs h. Enter h; it takes b h."


@pytest.mark.parametrize(("place", "column"), [((None, 5.0), "1"), ((5.0, None), "2")])
def test_a_blank_offset_beside_dimensions_is_missed(place: Any, column: str) -> None:
    with pytest.raises(InputError, match="an offset is blank") as caught:
        PARTS("circle", ((30.0,),), (place,))
    assert (caught.value.argument, caught.value.row, caught.value.column) == ("at", 1, column)


def test_ranges_that_are_blank_throughout_are_no_part() -> None:
    with pytest.raises(InputError, match="all rows are blank"):
        PARTS("circle", (BLANK, BLANK), (BLANK, BLANK))


def test_optional_dimensions_follow_the_needed_ones() -> None:
    # IPE 300: A = 53.8 cm² (mills' section tables, from memory)
    block = PARTS("I", ((300.0, 150.0, 7.1, 10.7, 15.0),), ((0.0,),))
    assert TOTALS(block, "A") == pytest.approx(5380.0, abs=5.0)
