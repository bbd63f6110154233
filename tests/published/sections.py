"""A section as an engineer types it: a parts block, and the cell functions asked about it.

Everything the published values are compared with comes through the catalogue, the way a workbook calls it.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from cellsection.catalogue import CATALOGUE

__all__ = ["Block", "Section", "block"]

Cell = float | str | None
Block = tuple[tuple[Cell, ...], ...]
NO_LENGTH = {"part", "shape", "turn", "sign", "n", "datum", "angle", "slope"}


def block(unit: str = "", *parts: dict[str, Cell]) -> Block:
    """A parts block with a row a part; length columns carry the unit in their headers.

    >>> block("mm", {"shape": "rectangle", "b": 200.0, "h": 12.0})
    (('shape', 'b [mm]', 'h [mm]'), ('rectangle', 200.0, 12.0))
    """
    columns = list(dict.fromkeys(column for part in parts for column in part))
    header = tuple(column if column in NO_LENGTH or not unit else f"{column} [{unit}]" for column in columns)
    return (header, *(tuple(part.get(column) for column in columns) for part in parts))


@dataclass(frozen=True)
class Section:
    """A parts block and the results the cell functions give for it, in the block's own length unit."""

    block: Block

    def call(self, function: str, *arguments: object) -> object:
        return CATALOGUE[function].call(self.block, *arguments)

    @cached_property
    def totals(self) -> dict[str, float]:
        """CS_TOTALS by symbol: A x y Ix Iy Ixy Ip rx ry I1 I2 angle."""
        return {symbol: value for symbol, value, _unit in self.call("CS_TOTALS")}

    @cached_property
    def principal(self) -> dict[str, float]:
        """CS_PRINCIPAL by symbol: I1 I2 angle r1 r2."""
        return {symbol: value for symbol, value, _unit in self.call("CS_PRINCIPAL")}

    def fibre(self, side: str) -> tuple[float, float]:
        """CS_FIBRES at one side (top, bottom, left, right): distance from the centroid and elastic modulus."""
        return {name: (distance, modulus) for name, distance, modulus in self.call("CS_FIBRES")}[side]

    def about(self, x: float, y: float) -> dict[str, float]:
        """CS_ABOUT the axes through a point, by symbol: Ix Iy Ixy."""
        return {symbol: value for symbol, value, _unit in self.call("CS_ABOUT", x, y)}

    @cached_property
    def ledger(self) -> list[dict[str, float]]:
        """CS_LEDGER as rows by column: a row a part, then the totals row."""
        header, *rows = self.call("CS_LEDGER")
        header = [name.partition(" [")[0] for name in header]
        return [dict(zip(header, row, strict=True)) for row in rows]
