"""Addresses, and many of them as few rectangles."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellsection.check.places import address, rectangles, split_address


@pytest.mark.parametrize(
    "sheet", ["Girder", "Crane hall", "O'Hara", "'quoted'", "B2", "R1C1", "Träger", "3D", "a!b", "-"]
)
def test_an_address_is_taken_apart_as_it_was_put_together(sheet: str) -> None:
    assert split_address(address(sheet, "AB12")) == (sheet, "AB12")


@pytest.mark.parametrize(
    ("sheet", "written"),
    [("Girder", "Girder!C4"), ("Träger", "Träger!C4"), ("Crane hall", "'Crane hall'!C4"), ("3D", "'3D'!C4")],
)
def test_a_sheet_is_quoted_where_a_formula_would_quote_it(sheet: str, written: str) -> None:
    assert address(sheet, "C4") == written


@pytest.mark.parametrize(
    ("cells", "written"),
    [
        (["C4"], ["Girder!C4"]),
        (["C4", "C6"], ["Girder!C4", "Girder!C6"]),
        (["C6", "C5", "C4"], ["Girder!C4:C6"]),
        (["Z9", "AA9", "AB9"], ["Girder!Z9:AB9"]),
        (["A1", "A2", "B1", "B2", "C1"], ["Girder!A1:B2", "Girder!C1"]),
        ([], []),
    ],
)
def test_neighbours_are_gathered(cells: list[str], written: list[str]) -> None:
    assert rectangles([("Girder", cell) for cell in cells]) == written


def test_sheets_keep_the_order_of_the_book() -> None:
    assert rectangles([("Web", "B2"), ("Flange", "A1"), ("Web", "A1")]) == ["Web!A1", "Web!B2", "Flange!A1"]


@given(st.sets(st.tuples(st.sampled_from("ABCDE"), st.integers(1, 6))))
def test_the_rectangles_cover_each_cell_once_and_no_other(cells: set[tuple[str, int]]) -> None:
    covered = []
    for place in rectangles([("Girder", f"{column}{row}") for column, row in cells]):
        first, _, last = split_address(place)[1].partition(":")
        last = last or first
        columns = range(ord(first[0]), ord(last[0]) + 1)
        covered += [(chr(column), row) for column in columns for row in range(int(first[1:]), int(last[1:]) + 1)]
    assert sorted(covered) == sorted(cells)
