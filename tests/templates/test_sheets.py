"""What stands on the sheets: names, entry limits, array areas, chart, page."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from openpyxl import load_workbook
from openpyxl.utils import range_boundaries
from openpyxl.worksheet.formula import ArrayFormula

from cellsection.catalogue import CATALOGUE
from cellsection.geometry import SHAPES as GEOMETRY_SHAPES
from cellsection.templates import TEMPLATES
from cellsection.templates.books import girder
from cellsection.templates.content import COLUMNS
from cellsection.templates.drawing import POINTS
from cellsection.templates.entry import DATUMS, SHAPES
from cellsection.templates.layout import FAULT_ROWS, FIRST, GIRDER, HEAD, LAST, PARTS

if TYPE_CHECKING:
    from pathlib import Path

    from openpyxl import Workbook
    from openpyxl.worksheet.worksheet import Worksheet


@pytest.fixture(scope="module")
def book(built: Path) -> Workbook:
    """The built template, its formulas."""
    return load_workbook(built)


@pytest.fixture(scope="module")
def saved(built: Path) -> Workbook:
    """The built template, its values."""
    return load_workbook(built, data_only=True)


def table(sheet: Worksheet, area: str) -> tuple[tuple[object, ...], ...]:
    return tuple(tuple(cell.value for cell in row) for row in sheet[area])


def arrays(book: Workbook) -> dict[tuple[str, str], str]:
    return {
        (sheet.title, cell.value.ref): cell.value.text
        for sheet in book
        for row in sheet.iter_rows()
        for cell in row
        if isinstance(cell.value, ArrayFormula)
    }


def test_the_sheets_come_in_the_order_of_reading(book: Workbook) -> None:
    assert book.sheetnames == ["Girder", "Ledger", "Read me", "Workings"]
    assert book.active.title == "Girder"


def test_the_parts_range_is_a_parts_block_of_the_catalogue(book: Workbook, saved: Workbook) -> None:
    assert book.defined_names["parts"].attr_text == f"Girder!$B${HEAD}:$P${LAST}"
    block = table(saved[GIRDER], f"B{HEAD}:P{LAST}")
    assert CATALOGUE["CS_TOTALS"].call(block, "A") == pytest.approx(2 * 220 * 20 + 10 * 560)


def size(area: str) -> tuple[int, int]:
    """Rows and columns of an area."""
    left, top, right, bottom = range_boundaries(area)
    return bottom - top + 1, right - left + 1


def test_the_ledger_has_room_for_every_part_its_header_and_its_totals(book: Workbook, saved: Workbook) -> None:
    block = table(saved[GIRDER], f"B{HEAD}:P{LAST}")
    width = len(CATALOGUE["CS_LEDGER"].call(block)[0])
    sizes = [size(ref) for (_, ref), text in arrays(book).items() if "CS_LEDGER" in text]
    assert sorted(sizes) == [(1, width), (1 + PARTS, width)]


def test_the_list_of_faults_is_as_wide_as_a_fault(book: Workbook) -> None:
    twice = (("shape", "b", "h"), ("rectangle", 4.0, 2.0), ("rectangle", 4.0, 2.0))
    (width,) = {len(row) for row in CATALOGUE["CS_FAULTS"].call(twice)}
    (area,) = [ref for (_, ref), text in arrays(book).items() if "CS_FAULTS" in text]
    assert size(area) == (FAULT_ROWS, width)


def test_array_formulas_stand_on_the_sheet_that_is_not_read(book: Workbook) -> None:
    assert {sheet for sheet, _ in arrays(book)} == {"Workings"}


def test_every_part_of_the_table_has_an_outline_of_the_length_asked_for(book: Workbook, saved: Workbook) -> None:
    outlines = [ref for (_, ref), text in arrays(book).items() if "CS_OUTLINE" in text]
    block = table(saved[GIRDER], f"B{HEAD}:P{LAST}")
    points = CATALOGUE["CS_OUTLINE"].call(block, 1, POINTS)
    assert [size(ref) for ref in outlines] == [(len(points), len(points[0]))] * PARTS


def test_the_drawing_has_a_line_a_part_one_for_it_as_a_cut_out_and_its_axes_and_dimensions() -> None:
    (chart,) = girder()[GIRDER]._charts
    assert len(chart.series) == 2 * PARTS + 6


def test_no_cell_shows_an_error(saved: Workbook) -> None:
    shown = [
        (sheet.title, cell.coordinate)
        for sheet in saved
        for row in sheet.iter_rows()
        for cell in row
        if cell.data_type == "e" or str(cell.value).startswith("#")
    ]
    assert not shown


def test_every_input_column_has_its_limits_with_a_word_of_help(book: Workbook) -> None:
    rules = book[GIRDER].data_validations.dataValidation
    covered = {str(area).split(":")[0]: rule for rule in rules for area in rule.sqref.ranges}
    gap = book.defined_names["gap"].attr_text.replace("$", "").split("!")[1]
    assert set(covered) == {gap, *(f"{column}{FIRST}" for column in COLUMNS if column != "B")}  # B is a free label
    for rule in covered.values():
        assert rule.allow_blank
        assert 0 < len(rule.prompt) <= 255
        assert 0 < len(rule.error) <= 225
        assert len(rule.promptTitle) <= 32
        assert len(rule.errorTitle) <= 32
        assert rule.formula1


def test_a_list_of_choices_is_short_enough_for_both_applications(book: Workbook) -> None:
    lists = [rule for rule in book[GIRDER].data_validations.dataValidation if rule.type == "list"]
    assert len(lists) == 3
    assert all(len(rule.formula1) <= 255 for rule in lists)


@pytest.mark.parametrize("word", SHAPES)
def test_a_shape_on_offer_has_the_dimensions_the_geometry_asks_for_and_a_column_for_each(word: str) -> None:
    required, _, optional = SHAPES[word].partition(", ")
    shape = GEOMETRY_SHAPES[word]
    assert set(required.split()) == set(shape.required)
    assert set(optional.split()) <= set(shape.optional)
    columns = {header.split(" [")[0] for header in COLUMNS.values()}
    assert {*required.split(), *optional.split()} <= columns


def test_only_input_cells_are_unlocked_and_no_formula_is(book: Workbook) -> None:
    for sheet in book:
        assert sheet.protection.sheet
        assert not sheet.protection.password
        unlocked = [cell for row in sheet.iter_rows() for cell in row if not cell.protection.locked]
        assert not [cell.coordinate for cell in unlocked if cell.data_type == "f"]
        assert bool(unlocked) == (sheet.title == GIRDER)


def test_both_axes_of_the_drawing_keep_one_scale() -> None:
    (chart,) = girder()[GIRDER]._charts
    across = chart.x_axis.scaling.max - chart.x_axis.scaling.min
    up = chart.y_axis.scaling.max - chart.y_axis.scaling.min
    size = chart.anchor.ext
    assert across / up == pytest.approx(size.width / size.height, rel=1e-5)
    assert (chart.layout.manualLayout.w, chart.layout.manualLayout.h) == (1, 1)


@pytest.mark.parametrize("name", TEMPLATES)
def test_every_sheet_is_set_up_for_one_a4_page_with_its_number_in_the_footer(name: str) -> None:
    for sheet in TEMPLATES[name].book():
        assert sheet.page_setup.paperSize == 9
        assert (sheet.page_setup.fitToWidth, sheet.page_setup.fitToHeight) == (1, 1)
        assert sheet.sheet_properties.pageSetUpPr.fitToPage
        assert sheet.oddFooter.right.text == "sheet &P of &N"
        assert sheet.print_area


def test_the_datums_on_offer_are_read_by_the_section_functions() -> None:
    for datum in DATUMS:
        block = (("shape", "b", "h", "x", "y", "datum"), ("rectangle", 40.0, 10.0, 0.0, 0.0, datum))
        assert CATALOGUE["CS_TOTALS"].call(block, "A") == 400.0
