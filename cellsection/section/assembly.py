"""Parts blocks made and changed: moved, turned, mirrored, joined, and written out again as rows."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from typing import TypeAlias

from cellsection.errors import InputError
from cellsection.geometry import cosine_sine
from cellsection.section.headers import LENGTHS, ORDER, UNITS
from cellsection.section.rows import PartRow

__all__ = ["Rows", "converted", "joined_rows", "mirrored_rows", "moved_rows", "written"]

Cell: TypeAlias = float | str | None
Rows: TypeAlias = tuple[tuple[Cell, ...], ...]
# Shapes that are their own left-right mirror image: mirroring them needs no mark.
SYMMETRIC = frozenset(("rectangle", "circle", "half circle", "ellipse", "tube", "box", "I", "tee"))
SWAPPED = {"left": "right", "right": "left"}


def turned_point(x: float, y: float, degrees: float, about: tuple[float, float]) -> tuple[float, float]:
    """A point turned anticlockwise about another."""
    c, s = cosine_sine(degrees)
    dx, dy = x - about[0], y - about[1]
    return (about[0] + c * dx - s * dy, about[1] + s * dx + c * dy)


def moved_rows(
    rows: Sequence[PartRow], dx: float, dy: float, turn: float = 0.0, about: tuple[float, float] = (0.0, 0.0)
) -> tuple[PartRow, ...]:
    """The parts turned anticlockwise about a point [°], then moved by dx, dy [L]."""

    def place(x: float, y: float) -> tuple[float, float]:
        px, py = turned_point(x, y, turn, about) if turn else (x, y)
        return (px + dx, py + dy)

    def moved(row: PartRow) -> PartRow:
        if row.shape == "plate":
            (x, y), (x2, y2) = place(row.dims["x"], row.dims["y"]), place(row.dims["x2"], row.dims["y2"])
            return replace(row, dims={**row.dims, "x": x, "y": y, "x2": x2, "y2": y2})
        x, y = place(row.x, row.y)
        return replace(row, x=x, y=y, turn=row.turn + turn)

    return tuple(moved(row) for row in rows)


def mirrored_rows(rows: Sequence[PartRow], axis: str, position: float = 0.0) -> tuple[PartRow, ...]:
    """The parts mirrored in a line along `axis`: "x" is the line y = position, "y" the line x = position."""

    def mirrored(row: PartRow) -> PartRow:
        if row.shape == "plate":
            names = ("y", "y2") if axis == "x" else ("x", "x2")
            return replace(row, dims={**row.dims, **{name: 2 * position - row.dims[name] for name in names}})
        # In the line x = p a shape is mirrored left-right and turns the other way; y = p is that and half a turn.
        x, y = (row.x, 2 * position - row.y) if axis == "x" else (2 * position - row.x, row.y)
        turn = (180.0 if axis == "x" else 0.0) - row.turn
        if row.shape == "polygon":
            return replace(row, x=x, y=y, turn=turn, nodes=tuple((-px, py) for px, py in row.nodes))
        datum = " ".join(SWAPPED.get(word, word) for word in row.datum.split())
        return replace(row, x=x, y=y, turn=turn, datum=datum, mirrored=row.shape not in SYMMETRIC and not row.mirrored)

    return tuple(mirrored(row) for row in rows)


def converted(rows: Sequence[PartRow], unit: str, to: str) -> tuple[PartRow, ...]:
    """The parts with their lengths in another unit."""
    if unit == to:
        return tuple(rows)
    k = UNITS[unit] / UNITS[to]
    return tuple(
        replace(
            row,
            dims={name: size * k if name in LENGTHS else size for name, size in row.dims.items()},
            x=row.x * k,
            y=row.y * k,
            nodes=tuple((x * k, y * k) for x, y in row.nodes),
        )
        for row in rows
    )


def joined_rows(blocks: Sequence[tuple[tuple[PartRow, ...], str]]) -> tuple[tuple[PartRow, ...], str]:
    """The parts of all blocks in the unit of the first. Raises InputError where only some name a unit."""
    unit = blocks[0][1]
    for _, other in blocks[1:]:
        if bool(other) != bool(unit):
            raise InputError(
                f"one block is in {unit or other} and another names no length unit",
                remedy="Give both their unit in the headers, or neither",
            )
    return tuple(row for rows, own in blocks for row in converted(rows, own, unit)), unit


def written(rows: Sequence[PartRow], unit: str) -> Rows:
    """A parts block with its header row, only the columns that are used, blanks as None."""
    lines: list[dict[str, Cell]] = []
    for row in rows:
        line: dict[str, Cell] = {"part": row.label or None, "shape": row.shape, **row.dims}
        if row.shape != "plate":
            line |= {"x": row.x, "y": row.y}
        line |= {
            "turn": row.turn or None,
            "sign": float(row.sign) if row.sign != 1 else None,
            "n": row.n if row.n != 1 else None,
            "datum": row.datum or None,
            "mirrored": 1.0 if row.mirrored else None,
            "strength": row.strength,
            "stage": row.stage,
            "no tension": "yes" if row.no_tension else None,
        }
        lines.append(line)
        lines.extend({"shape": "node", "x": x, "y": y} for x, y in row.nodes)
    used = [name for name in ORDER if any(line.get(name) is not None for line in lines)]
    header = tuple(f"{name} [{unit}]" if unit and name in LENGTHS else name for name in used)
    return (header, *(tuple(line.get(name) for name in used) for line in lines))
