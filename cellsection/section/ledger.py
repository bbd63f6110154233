"""The hand method written out: a row a part, and the totals row."""

from __future__ import annotations

from math import fsum
from typing import TYPE_CHECKING, NamedTuple

from cellsection.section.transformed import named, transformed, weighted

if TYPE_CHECKING:
    from collections.abc import Sequence

    from cellsection.section.part import Part

__all__ = ["LEDGER_COLUMNS", "Ledger", "LedgerRow", "ledger"]

# Headers of the columns, in the order of the row's fields.
LEDGER_COLUMNS = ("part", "A", "x", "y", "A·x", "A·y", "own Ix", "own Iy", "dx", "dy", "A·dy²", "A·dx²")


class LedgerRow(NamedTuple):
    """One line of the sum: areas and own moments carry sign and modular ratio, places do not.

    A [L²] · x, y centroid of the part [L] · Ax, Ay [L³] · own_Ix, own_Iy about the part's own centroid [L⁴] ·
    dx, dy from the section's centroid to the part's [L] · Ady2, Adx2 [L⁴]
    """

    part: str
    A: float
    x: float
    y: float
    Ax: float
    Ay: float
    own_Ix: float  # noqa: N815 - the trade's symbol
    own_Iy: float  # noqa: N815
    dx: float
    dy: float
    Ady2: float
    Adx2: float


class Ledger(NamedTuple):
    """The rows and the totals row, whose x, y are the section's centroid and whose dx, dy are 0.

    Ix of the section is total.own_Ix + total.Ady2, Iy is total.own_Iy + total.Adx2.
    """

    rows: tuple[LedgerRow, ...]
    total: LedgerRow


def ledger(parts: Sequence[Part]) -> Ledger:
    """The composite section by the hand method. Errors as for `totals`.

    Source: parallel-axis theorem for composite areas, tabulated as in any text, e.g. Gere, Mechanics of Materials,
    chapter 12 (from memory).

    >>> from cellsection.geometry import SHAPES, placed
    >>> from cellsection.section import Part
    >>> flange = placed(SHAPES["rectangle"].build(b=90, h=20), 0, 50)
    >>> stem = placed(SHAPES["rectangle"].build(b=30, h=40), 0, 20)
    >>> tee = ledger([Part("flange", "rectangle", flange), Part("stem", "rectangle", stem)])
    >>> tee.rows[0].dy, tee.total.y, tee.total.own_Ix + tee.total.Ady2
    (12.0, 38.0, 868000.0)
    """
    section = transformed(parts)
    rows = []
    for part in parts:
        A, x, y, Ix, Iy, _Ixy = weighted(part)
        dx, dy = x - section.x, y - section.y
        rows.append(LedgerRow(named(part), A, x, y, A * x, A * y, Ix, Iy, dx, dy, A * dy * dy, A * dx * dx))
    Ax, Ay = fsum(row.Ax for row in rows), fsum(row.Ay for row in rows)
    own_Ix, own_Iy = fsum(row.own_Ix for row in rows), fsum(row.own_Iy for row in rows)
    Ady2, Adx2 = fsum(row.Ady2 for row in rows), fsum(row.Adx2 for row in rows)
    total = LedgerRow("total", section.A, section.x, section.y, Ax, Ay, own_Ix, own_Iy, 0.0, 0.0, Ady2, Adx2)
    return Ledger(tuple(rows), total)
