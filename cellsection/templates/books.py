"""The workbooks, put together from their sheets."""

from __future__ import annotations

from typing import TYPE_CHECKING

from openpyxl import Workbook

from cellsection.templates.bending import bending_sheet
from cellsection.templates.content import starter
from cellsection.templates.crane_hall import crane_hall
from cellsection.templates.drawing import section_chart
from cellsection.templates.girder import CHART_AT, girder_sheet
from cellsection.templates.guide import guide_sheet
from cellsection.templates.ledger import ledger_sheet
from cellsection.templates.workings import traces, workings_sheet

if TYPE_CHECKING:
    from cellsection.templates.content import Content

__all__ = ["crane_hall_girder", "girder"]


def girder() -> Workbook:
    """The template, with a plain welded I to type over."""
    book = _girder_book(starter())
    guide_sheet(book)
    workings_sheet(book)
    return book


def crane_hall_girder() -> Workbook:
    """The filled example."""
    book = _girder_book(crane_hall())
    bending_sheet(book)
    guide_sheet(book)
    workings_sheet(book)
    return book


def _girder_book(content: Content) -> Workbook:
    book = Workbook()
    book.remove(book.worksheets[0])
    sheet = girder_sheet(book, content)
    ledger_sheet(book)
    section_chart(sheet, CHART_AT, traces())
    return book
