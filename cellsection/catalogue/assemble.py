"""Functions that make and change parts blocks."""

from __future__ import annotations

from collections.abc import Sequence

from cellsection.catalogue.arguments import (
    Cell,
    ReadBlock,
    block,
    blocks,
    choice,
    column,
    number,
    table,
)  # fmt: skip
from cellsection.catalogue.record import CellFunction, Example, Returns
from cellsection.errors import InputError
from cellsection.geometry import SHAPES
from cellsection.section.assembly import Rows, joined_rows, mirrored_rows, moved_rows, written
from cellsection.section.parts import read_rows
from cellsection.section.rows import is_blank, shape_word

__all__ = ["ASSEMBLE"]

BLOCK = Returns("parts block", "a parts block with its header row, to be nested in other functions")
GEOMETRY = "rigid motions of the plane (elementary geometry)"


def spread(values: Sequence[Cell] | None, count: int, name: str) -> list[Cell]:
    """One value for each part: as given, the one given for all, or blank."""
    if values is None:
        return [None] * count
    if len(values) not in (1, count):
        raise InputError(
            f"{len(values)} values are given for {count} parts",
            remedy="Give one value for all parts, or one for each",
            argument=name,
        )
    return list(values) * count if len(values) == 1 else list(values)


def parts(
    shape: Sequence[Cell],
    size: Sequence[Sequence[float | None]],
    at: Sequence[Sequence[float | None]],
    turn: Sequence[Cell] | None,
    sign: Sequence[Cell] | None,
    n: Sequence[Cell] | None,
    datum: Sequence[Cell] | None,
) -> Rows:
    """A parts block from separate ranges of dimensions and offsets; rows blank in all of them are skipped."""
    count = len(size)
    if len(at) != count or len(at[0]) not in (1, 2):
        raise InputError(
            f"{len(at)} x {len(at[0])} offsets are given for {count} parts",
            remedy="Give a row a part: y alone, or x and y",
            argument="at",
        )
    optional = {"turn": turn, "sign": sign, "n": n, "datum": datum}
    columns = {name: spread(values, count, name) for name, values in optional.items()}
    header: list[str] = ["shape"]
    lines: list[dict[str, Cell]] = []
    numbers: list[int] = []  # the row of each line as the engineer counts it
    for k, (cell, sizes) in enumerate(zip(spread(shape, count, "shape"), size, strict=True)):
        if is_blank(cell if len(shape) > 1 else None) and all(value is None for value in (*sizes, *at[k])):
            continue
        word = typed_shape(cell, k + 1)
        dims, place = sized(word, sizes, k + 1), offsets(at[k], k + 1)
        lines.append({"shape": word, **dims, **place, **{each: columns[each][k] for each in columns}})
        header += [name for name in lines[-1] if name not in header]
        numbers.append(k + 1)
    if not lines:
        raise InputError("all rows are blank", remedy="Give the dimensions of a part", argument="size")
    rows: list[list[Cell]] = [list(header), *([line.get(name) for name in header] for line in lines)]
    try:
        read, _ = read_rows(rows)
        for row in read:
            row.part()  # impossible dimensions are told here, where the row is known
    except InputError as problem:
        row_number = None if problem.row is None else numbers[problem.row - 2]
        where = problem.column if problem.column in ("shape", "at", *columns) else "size"
        raise InputError(
            problem.fault, remedy=problem.remedy, argument=where, row=row_number, column=problem.column
        ) from None
    return written(read, "")


def sized(word: str, sizes: Sequence[float | None], row: int) -> dict[str, Cell]:
    """All dimensions of a shape by their letters, the blank ones too."""
    names = (*SHAPES[word].required, *SHAPES[word].optional)
    if any(value is not None for value in sizes[len(names) :]):
        raise InputError(
            f"{word} takes {len(names)} dimensions ({' '.join(names)}), more are given",
            remedy="Clear what is too much",
            argument="size",
            row=row,
        )
    return dict(zip(names, (*sizes, *[None] * len(names)), strict=False))


def offsets(place: Sequence[float | None], row: int) -> dict[str, Cell]:
    """Where a part is."""
    if None in place:
        raise InputError(
            "an offset is blank", remedy="Enter 0 or where the part is", argument="at", row=row,
            column=str(place.index(None) + 1),
        )  # fmt: skip
    x, y = (0.0, *place) if len(place) == 1 else place
    return {"x": x, "y": y}


def typed_shape(cell: Cell, row: int) -> str:
    """The shape of a row of CS_PARTS."""
    if not isinstance(cell, str) or not cell.strip():
        raise InputError("no shape is named", remedy="Give a shape by its word", argument="shape", row=row)
    try:
        word = shape_word(cell)
    except InputError as problem:
        raise InputError(problem.fault, remedy=problem.remedy, argument="shape", row=row) from None
    if word in ("polygon", "node", "plate"):
        raise InputError(
            f"a {word} has no place here",
            remedy="Use CS_POLYGON for a polygon, and a parts block for plates between two points",
            argument="shape",
            row=row,
        )
    return word


def polygon(points: Sequence[Sequence[float]], sign: float | None, n: float | None) -> Rows:
    """A parts block of one polygon from the coordinates of its corners."""
    if len(points[0]) != 2:
        raise InputError(
            f"the corners have {len(points[0])} columns", remedy="Give two columns, x and y", argument="points"
        )
    rows: list[list[Cell]] = [["shape", "x", "y", "sign", "n"], ["polygon", None, None, sign, n]]
    rows += [["node", x, y, None, None] for x, y in points]
    try:
        read, _ = read_rows(rows)
        read[0].part()
    except InputError as problem:
        place = {"sign": "sign", "n": "n"}.get(problem.column, "points")
        raise InputError(problem.fault, remedy=problem.remedy, argument=place) from None
    return written(read, "")


def moved(
    parts: ReadBlock,
    dx: float | None,
    dy: float | None,
    turn: float | None,
    about_x: float | None,
    about_y: float | None,
) -> Rows:
    """The parts turned about a point, then moved."""
    about = (about_x or 0.0, about_y or 0.0)
    return written(moved_rows(parts.rows, dx or 0.0, dy or 0.0, turn or 0.0, about), parts.unit)


def mirrored(parts: ReadBlock, axis: str, position: float | None) -> Rows:
    """The parts mirrored in a line along an axis."""
    return written(mirrored_rows(parts.rows, axis, position or 0.0), parts.unit)


def joined(*parts: ReadBlock) -> Rows:
    """All parts of the blocks in one block."""
    rows, unit = joined_rows([(each.rows, each.unit) for each in parts])
    return written(rows, unit)


RAIL = (("part", "shape", "b", "h", "x", "y"), ("cap plate", "rectangle", 220.0, 12.0, None, 206.0))

ASSEMBLE = (
    CellFunction(
        "CS_PARTS",
        parts,
        (
            column("shape", "one shape for all parts, or a column with a shape for each"),
            table("size", "dimensions, a row a part, in the order of the shape's letters", "L", blanks=True),
            table("at", "where the datum of each part is: a column of y, or two columns x and y", "L", blanks=True),
            column("turn", "degrees anticlockwise about the datum", "°", "0"),
            column("sign", "1 for solid, -1 for a cut-out", "", "1"),
            column("n", "modular ratio, E of the part over E of reference", "", "1"),
            column("datum", "the point of the part that `at` places", "", "centroid"),
        ),
        BLOCK,
        "Gathers separate ranges of dimensions and offsets into a parts block.",
        "bookkeeping; no formula",
        Example(
            '=CS_TOTALS(CS_PARTS("rectangle",B2:C4,D2:D4),"Ix")',
            {
                "A1": (
                    ("part", "b", "h", "y"),
                    ("flange", 8.0, 1.0, 6.5),
                    ("web", 0.5, 12.0, 0.0),
                    ("flange", 8.0, 1.0, -6.5),
                )
            },
            749.3333333333334,
            "0.5·12³/12 + 2(8·1³/12 + 8·6.5²) = 749.33",
        ),
    ),
    CellFunction(
        "CS_POLYGON",
        polygon,
        (
            table("points", "corners, a row each with x and y, in either sense, the first not repeated", "L"),
            number("sign", "1 for solid, -1 for a cut-out", "", "1"),
            number("n", "modular ratio, E of the part over E of reference", "", "1"),
        ),
        BLOCK,
        "Makes a parts block of one polygon from the coordinates of its corners.",
        "bookkeeping; no formula",
        Example(
            '=CS_TOTALS(CS_POLYGON(A2:B4),"A")',
            {"A1": (("x", "y"), (0.0, 0.0), (120.0, 0.0), (0.0, 90.0))},
            5400.0,
            "a gusset of 120 by 90: 120·90/2 = 5400",
        ),
    ),
    CellFunction(
        "CS_MOVED",
        moved,
        (
            block("parts"),
            number("dx", "distance to the right", "L", "0"),
            number("dy", "distance upwards", "L", "0"),
            number("turn", "degrees anticlockwise; the parts are turned first, then moved", "°", "0"),
            number("about_x", "x of the point they are turned about", "L", "0"),
            number("about_y", "y of the point they are turned about", "L", "0"),
        ),
        BLOCK,
        "Turns a parts block about a point and moves it.",
        GEOMETRY,
        Example(
            '=CS_TOTALS(CS_MOVED(A1:F2,0,-206),"y")',
            {"A1": RAIL},
            0.0,
            "a plate at y = 206 moved down by 206",
        ),
    ),
    CellFunction(
        "CS_MIRRORED",
        mirrored,
        (
            block("parts"),
            choice("axis", 'the direction of the mirror line: "x" (level) or "y" (upright)', ("x", "y")),
            number("position", "where the line is: its y for a level line, its x for an upright one", "L", "0"),
        ),
        BLOCK,
        "Mirrors a parts block in a level or an upright line.",
        GEOMETRY,
        Example(
            '=CS_TOTALS(CS_MIRRORED(A1:F2,"x",200),"y")',
            {"A1": RAIL},
            194.0,
            "a plate at y = 206 mirrored in the line y = 200 lies at 2·200 - 206 = 194",
        ),
    ),
    CellFunction(
        "CS_JOINED",
        joined,
        (blocks("parts", "parts blocks, one or more; lengths are converted to the unit of the first"),),
        BLOCK,
        "Joins parts blocks into one.",
        "bookkeeping; no formula",
        Example(
            '=CS_TOTALS(CS_JOINED(A1:F2,CS_MIRRORED(A1:F2,"x")),"Ix")',
            {"A1": RAIL},
            2 * (220 * 12**3 / 12 + 220 * 12 * 206**2),
            "two plates 220 x 12 at 206 above and below: 2(220·12³/12 + 2640·206²) = 224 125 440",
        ),
    ),
)
