"""The headless host: a saved workbook recalculated with the section functions bound, no application needed.

The catalogue is imported when the first formula names one of its functions, so a plain book never loads it.
"""

from __future__ import annotations

from collections.abc import Callable
from datetime import datetime
from pathlib import Path
from typing import Literal

from cellsection.workbook.book import Limits
from cellsection.workbook.recalculate import recalculate as recalculate_book
from cellsection.workbook.results import Recalculation

__all__ = ["recalculate", "section_function"]


def section_function(name: str) -> Callable[..., object] | None:
    """The section function a formula names, or None; old LibreOffice versions write CS.TOTALS for CS_TOTALS."""
    spelled = name.replace(".", "_", 1)
    if not spelled.startswith("CS_"):
        return None
    from cellsection.catalogue import CATALOGUE

    function = CATALOGUE.get(spelled)
    return None if function is None else function.call


def recalculate(
    path: str | Path,
    *,
    limits: Limits | None = None,
    clock: datetime | Literal["saved"] | None = None,
    seed: int | None = None,
) -> Recalculation:
    """Recalculate a saved workbook, section functions included. The file is not changed.

    clock : the moment that TODAY and NOW give, "saved" for the day on which the book was saved; else the present
    seed : makes random numbers come out the same again
    Raises WorkbookError where the file cannot be read.
    """
    return recalculate_book(path, resolve=section_function, limits=limits, clock=clock, seed=seed)
