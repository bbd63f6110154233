"""What a girder workbook is filled with: the title block, the parts, the notes."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, TypeAlias

if TYPE_CHECKING:
    from datetime import date

__all__ = ["COLUMNS", "LETTER", "Content", "Entry", "starter"]

Entry: TypeAlias = dict[str, float | str]

# The parts block, column by column; the text in the cell is the header that the section functions read.
COLUMNS = {
    "B": "part",
    "C": "shape",
    "D": "b [mm]",
    "E": "h [mm]",
    "F": "tw [mm]",
    "G": "tf [mm]",
    "H": "t [mm]",
    "I": "r [mm]",
    "J": "d [mm]",
    "K": "x [mm]",
    "L": "y [mm]",
    "M": "turn",
    "N": "sign",
    "O": "n",
    "P": "datum",
}

# The same by the word alone: {"part": "B", "shape": "C", "b": "D", ...}
LETTER = {header.split(" [")[0]: column for column, header in COLUMNS.items()}


@dataclass(frozen=True)
class Content:
    """One filled girder workbook; an entry is one part, its values by header without the unit."""

    parts: tuple[Entry, ...]
    title: str = "Built-up girder"
    project: str = ""
    member: str = ""
    prepared_by: str = ""
    checked_by: str = ""
    issued: date | None = None
    revision: str = ""
    gap: float | None = None  # pieces up to this far apart count as connected
    notes: tuple[str, ...] = field(default=())


def starter() -> Content:
    """A plain welded I from three plates, to be typed over."""
    return Content(
        parts=(
            {"part": "bottom flange", "shape": "rectangle", "b": 220, "h": 20, "x": 0, "y": 0, "datum": "bottom"},
            {"part": "web", "shape": "rectangle", "b": 10, "h": 560, "x": 0, "y": 20, "datum": "bottom"},
            {"part": "top flange", "shape": "rectangle", "b": 220, "h": 20, "x": 0, "y": 580, "datum": "bottom"},
        ),
        notes=("Starter section: a plain welded I from three plates. Type your own parts over it.",),
    )
