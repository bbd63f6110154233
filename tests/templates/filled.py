"""The girder template filled with other parts, built and recalculated as a person would have it saved."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from cellsection.hosts.headless import recalculate
from cellsection.templates.books import girder
from cellsection.templates.content import COLUMNS, LETTER
from cellsection.templates.layout import FIRST, LAST
from cellsection.templates.writing import write_book
from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path

    from cellsection.templates.content import Entry

__all__ = ["filled", "values", "wrong"]


def filled(
    out: Path, parts: Sequence[Entry | None], headers: dict[str, str] | None = None, gap: float | None = None
) -> Path:
    """The template with these parts, row by row from the top of its table; None leaves a row blank.

    headers : other texts for columns of the header row, by letter
    gap : what counts as connected
    """
    book = girder()
    sheet = book["Girder"]
    for row in range(FIRST, LAST + 1):
        for column in COLUMNS:
            sheet[f"{column}{row}"].value = None
    for row, entry in enumerate(parts, start=FIRST):
        for word, value in (entry or {}).items():
            sheet[f"{LETTER[word]}{row}"].value = value
    for column, text in (headers or {}).items():
        sheet[f"{column}{FIRST - 1}"].value = text
    sheet[book.defined_names["gap"].attr_text.split("!")[1].replace("$", "")].value = gap
    write_book(book, out)
    return out


def values(path: Path) -> dict[tuple[str, str], Any]:
    """The recalculated value of every formula cell, by sheet and address."""
    return {(cell.sheet, cell.address): cell.value for cell in recalculate(path).cells}


def wrong(path: Path) -> list[tuple[str, str, str]]:
    """The formula cells that show an error, with its reason."""
    return [(*place, each.message) for place, each in values(path).items() if isinstance(each, ErrorValue)]
