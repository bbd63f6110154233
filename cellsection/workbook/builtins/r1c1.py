"""References by the numbers of row and column, R2C[-1], as INDIRECT may read them."""

from __future__ import annotations

import re

from cellsection.workbook.addresses import LAST_COLUMN, LAST_ROW
from cellsection.workbook.book import column_letters

__all__ = ["from_r1c1"]

R1C1 = re.compile(r"(?:R(\[-?[0-9]{1,7}\]|[0-9]{0,7}))?(?:C(\[-?[0-9]{1,5}\]|[0-9]{0,5}))?", re.ASCII | re.IGNORECASE)


def from_r1c1(text: str, row: int, column: int) -> str | None:
    """A reference by row and column numbers, relative ones in brackets, written by letters; None where it is none.

    >>> from_r1c1("R2C[-1]:R[3]C3", 5, 3), from_r1c1("Girder!C2", 1, 1), from_r1c1("R0C1", 1, 1)
    ('$B$2:$C$8', 'Girder!$B:$B', None)
    """
    sheet, mark, cells = text.rpartition("!")
    ends = []
    for end in cells.split(":"):
        match = R1C1.fullmatch(end)
        if match is None or not end:
            return None
        places = []
        for written, own, last in ((match[1], row, LAST_ROW), (match[2], column, LAST_COLUMN)):
            relative = written is not None and (written == "" or written[0] == "[")
            place = None if written is None else int(written.strip("[]") or 0) + (own if relative else 0)
            if place is not None and not 1 <= place <= last:
                return None
            places.append(place)
        down, across = places
        ends.append((f"${column_letters(across)}" if across else "") + (f"${down}" if down else ""))
        if across is None or down is None:
            ends.append(ends[-1])
    if len(ends) > 2 and ends[0] == ends[1]:
        ends = ends[1:3]
    return sheet + mark + ":".join(ends[:2])
