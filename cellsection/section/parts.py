"""The parts block: a header row, then a row a part, read into rows that know what they are, and into parts.

Everything that cannot be read is an InputError that names the row (the header is row 1), the column and the remedy.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from cellsection.errors import InputError
from cellsection.section.headers import read_header
from cellsection.section.part import Part
from cellsection.section.rows import PartRow, RowReader, is_blank, is_number

__all__ = ["Block", "read_block", "read_rows"]


@dataclass(frozen=True, slots=True)
class Block:
    """The parts of a block, and its length unit ("" where its headers name none)."""

    parts: tuple[Part, ...]
    unit: str


def read_block(rows: Sequence[Sequence[object]]) -> Block:
    """The parts of a block: `rows` is its header row and the rows below, blanks None or "".

    Raises InputError naming row, column and remedy.

    >>> block = read_block([("shape", "b [mm]", "h [cm]"), ("rectangle", 200, 1.2)])
    >>> block.unit, round(block.parts[0].region.moments().A, 9)
    ('mm', 2400.0)
    """
    part_rows, unit = read_rows(rows)
    return Block(tuple(row.part() for row in part_rows), unit)


def read_rows(rows: Sequence[Sequence[object]]) -> tuple[tuple[PartRow, ...], str]:
    """The rows of a block, each with its nodes if it is a polygon, and the length unit."""
    if len(rows) < 2 or not rows[0]:
        raise InputError(
            "a parts block needs a header row and at least one part",
            remedy="Let the range begin at the headers",
            row=1,
        )
    width = len(rows[0])
    for number, row in enumerate(rows[1:], start=2):
        if any(not is_blank(cell) for cell in row[width:]):
            raise InputError("the row is longer than the header row", remedy="Shorten it, or add a header", row=number)
    used = [any(is_number(row[k]) for row in rows[1:] if k < len(row)) for k in range(width)]
    columns, unit = read_header(rows[0], used)
    headers = {column.name: column.header for column in columns}
    found: list[PartRow] = []
    for number, row in enumerate(rows[1:], start=2):
        cells = {
            column.name: (column, row[column.index])
            for column in columns
            if column.index < len(row) and not is_blank(row[column.index])
        }
        if not cells:
            continue
        reader = RowReader(number, cells, headers)
        word = reader.shape()
        if word == "node":
            if not found or found[-1].shape != "polygon":
                raise reader.fault("shape", "a node stands here without a polygon above it", "Put a polygon row first")
            found[-1] = replace(found[-1], nodes=(*found[-1].nodes, reader.node()))
        else:
            found.append(reader.part_row(word))
    if not found:
        raise InputError("the block has headers but no part", remedy="Enter a part below the headers", row=2)
    for part_row in found:
        if part_row.shape == "polygon" and len(part_row.nodes) < 3:
            raise InputError(
                f"the polygon has {len(part_row.nodes)} nodes, it needs three or more",
                remedy="Follow it with node rows that hold x and y of its corners",
                row=part_row.row,
                column=headers["shape"],
            )
    return tuple(found), unit
