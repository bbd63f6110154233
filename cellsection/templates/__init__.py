"""Workbooks to start from, and the filled example: built, recalculated headlessly, written whole or not at all.

    build("girder", Path("crane girder.xlsx"))

openpyxl loads when a workbook is built, not before.
"""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

from cellsection.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Callable

    from openpyxl import Workbook

__all__ = ["TEMPLATES", "Template", "build"]


def _girder() -> Workbook:
    from cellsection.templates.books import girder

    return girder()


def _crane_hall_girder() -> Workbook:
    from cellsection.templates.books import crane_hall_girder

    return crane_hall_girder()


@dataclass(frozen=True)
class Template:
    """A workbook that can be started from.

    book : the workbook with its formulas, values not yet cached
    help : one line for a person choosing
    """

    book: Callable[[], Workbook]
    help: str


TEMPLATES = {
    "girder": Template(_girder, "a built-up girder: parts, section, drawing, faults, checks; starts as a welded I"),
    "crane-hall-girder": Template(
        _crane_hall_girder,
        "the filled example: a rolled crane girder with a channel cap, a bottom plate, its bending",
    ),
}


def build(name: str, out: str | Path) -> None:
    """Write a template workbook with its values cached; a file that is there already is replaced, whole or not at all.

    name : a key of TEMPLATES
    out : the .xlsx file

    Raises InputError for a name that is not known, OSError where the file cannot be written.
    """
    if name not in TEMPLATES:
        raise InputError(f"there is no template {name!r}", remedy=f"Choose one of: {', '.join(TEMPLATES)}")
    from cellsection.templates.writing import write_book

    write_book(TEMPLATES[name].book(), Path(out))
