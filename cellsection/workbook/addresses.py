"""Cell addresses as the files spell them, and how far a sheet reaches."""

from __future__ import annotations

import re

from cellsection.workbook.book import Bounds, Position, column_letters, column_number

__all__ = ["LAST_COLUMN", "LAST_ROW", "address", "read_ref"]

REFERENCE = re.compile(r"\$?([A-Za-z]{1,3})\$?([0-9]{1,7})", re.ASCII)
LAST_ROW, LAST_COLUMN = 1_048_576, 16_384


def address(position: Position) -> str:
    """The address of a cell.

    >>> address((3, 28))
    'AB3'
    """
    return f"{column_letters(position[1])}{position[0]}"


def read_ref(ref: str) -> Bounds | None:
    """A cell or a range as bounds; None where it is neither, or not on the sheet.

    >>> read_ref("B3:A1"), read_ref("C2"), read_ref("A:A"), read_ref("A0")
    ((1, 1, 3, 2), (2, 3, 2, 3), None, None)
    """
    matches = [REFERENCE.fullmatch(each) for each in ref.split(":")]
    places = [(int(m[2]), column_number(m[1])) for m in matches if m]
    if len(places) != len(matches) or len(places) > 2:
        return None
    rows, columns = sorted(place[0] for place in places), sorted(place[1] for place in places)
    within = rows[0] > 0 and rows[-1] <= LAST_ROW and columns[-1] <= LAST_COLUMN
    return (rows[0], columns[0], rows[-1], columns[-1]) if within else None
