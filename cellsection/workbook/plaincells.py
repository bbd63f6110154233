"""The fast way to put values into a sheet: where each cell to be changed is spelt as all applications spell it.

Nothing but a cell can look like one where there is no comment, no CDATA section and no processing instruction (a
declaration at the very beginning aside), as an attribute never holds a "<". So a pattern finds the formula cells as
surely as a parser does, in a tenth of the time.
"""

from __future__ import annotations

import re
from collections.abc import Mapping

from cellsection.workbook.addresses import address
from cellsection.workbook.book import Position
from cellsection.workbook.values import Scalar
from cellsection.workbook.xlsxvalues import saved_form

__all__ = ["with_plain_values"]

FORMULA_CELL = re.compile(
    rb"""<c r="([A-Z]{1,3}[0-9]{1,7})"((?: s="[0-9]+")?)(?: t="[a-zA-Z]+")?>"""
    rb"""(<f(?: [^<>]*)?(?:/>|>[^<]*</f>))<v(?: [^<>]*)?(?:/>|>[^<]*</v>)</c>"""
)


def with_plain_values(data: bytes, values: Mapping[Position, Scalar], rich: Mapping[str, str]) -> bytes | None:
    """A sheet part with new values in its formula cells; None where one of them is not plain, or not there."""
    start, end = data.find(b"<sheetData>"), data.find(b"</sheetData>")
    if start < 0 or end < start or b"<!" in data or data.find(b"<?", 1) >= 0:
        return None
    wanted = {address(place).encode(): value for place, value in values.items()}
    put = 0

    def cell(met: re.Match[bytes]) -> bytes:
        nonlocal put
        place, style, formula = met.groups()
        if place not in wanted:
            return met[0]
        put += 1
        kind, v = saved_form(wanted[place], b"", rich)
        return b'<c r="%b"%b%b>%b%b</c>' % (place, style, kind, formula, v)

    cells = FORMULA_CELL.sub(cell, data[start:end])
    return b"".join((data[:start], cells, data[end:])) if put == len(wanted) else None
