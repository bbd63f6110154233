"""The cell functions in Python, under their names without CS_; what the package itself hands out."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any, TypeAlias, overload

from cellsection.errors import InputError
from cellsection.face.tables import cells, common_kind, in_kind, numbers_or_objects

if TYPE_CHECKING:
    from numpy.typing import NDArray
    from pandas import DataFrame, Series

__all__ = [
    "about", "agrees", "edition", "faults", "fibres", "joined", "ledger", "mirrored", "moved", "outline", "parts",
    "polygon", "principal", "totals",
]  # fmt: skip

Cell: TypeAlias = float | str | bool | None
Table: TypeAlias = "Sequence[Sequence[Cell]] | NDArray[Any] | DataFrame"
Column: TypeAlias = "Cell | Sequence[Cell] | Sequence[Sequence[Cell]] | NDArray[Any] | Series[Any] | DataFrame"
Symbols: TypeAlias = "Sequence[str] | NDArray[Any] | Series[str]"
Result: TypeAlias = Any  # a list of lists, an array or a DataFrame, after what came in

SYMBOLS = ("symbol", "value", "unit")


def parts(
    shape: Column,
    size: Table,
    at: Table,
    turn: Column = None,
    sign: Column = None,
    n: Column = None,
    datum: Column = None,
) -> Result:
    """A parts block from separate columns of shapes, dimensions and places.

    shape : one word, or one a part
    size : (parts, k), the dimensions in the order of the shape's letters [L]
    at : (parts, 1) or (parts, 2), y or x and y of the datum of each part [L]
    turn, sign, n, datum : one value for all parts, or one a part

    >>> parts("rectangle", [[200, 20], [10, 460]], [[0], [240]])
    [['shape', 'b', 'h', 'x', 'y'], ['rectangle', 200.0, 20.0, 0.0, 0.0], ['rectangle', 10.0, 460.0, 0.0, 240.0]]
    """
    return _result("CS_PARTS", (shape, size, at, turn, sign, n, datum))


def polygon(points: Table, sign: float | None = None, n: float | None = None) -> Result:
    """A parts block of one polygon: points (corners, 2) in either sense, the first not repeated [L].

    >>> totals(polygon([(0, 0), (120, 0), (0, 90)]), "A")
    5400.0
    """
    return _result("CS_POLYGON", (points, sign, n))


def moved(
    parts: Table,
    dx: float | None = None,
    dy: float | None = None,
    turn: float | None = None,
    about_x: float | None = None,
    about_y: float | None = None,
) -> Result:
    """The block turned by `turn` degrees anticlockwise about a point, then moved by dx, dy [L].

    >>> moved([["shape", "d"], ["circle", 30]], dx=100)
    [['shape', 'd', 'x', 'y'], ['circle', 30.0, 100.0, 0.0]]
    """
    return _result("CS_MOVED", (parts, dx, dy, turn, about_x, about_y))


def mirrored(parts: Table, axis: str, position: float | None = None) -> Result:
    """The block mirrored in the line y = position along axis "x", or x = position along axis "y" [L].

    >>> totals(mirrored([["shape", "d", "y"], ["circle", 30, 206]], "x", 200), "y")
    194.0
    """
    return _result("CS_MIRRORED", (parts, axis, position))


def joined(*parts: Table) -> Result:
    """All parts of the blocks in one block, in the unit of the first.

    >>> joined([["shape", "d [mm]"], ["circle", 30]], [["shape", "d [cm]"], ["circle", 2]])
    [['shape', 'd [mm]', 'x [mm]', 'y [mm]'], ['circle', 30.0, 0.0, 0.0], ['circle', 20.0, 0.0, 0.0]]
    """
    return _result("CS_JOINED", parts)


@overload
def totals(parts: Table, which: str) -> float: ...
@overload
def totals(parts: Table, which: Symbols | None = None) -> Result: ...
def totals(parts: Table, which: Symbols | str | None = None) -> Result:
    """Rows symbol, value, unit for A x y Ix Iy Ixy Ip rx ry I1 I2 angle; one number for one symbol, a list for several.

    >>> totals([["shape", "d [mm]"], ["circle", 30]], ["A", "Ix"])
    [706.858347, 39760.782]
    """
    return _chosen("CS_TOTALS", parts, which)


def ledger(parts: Table) -> Result:
    """The hand method: the headers, a row a part (A, x, y, A·x, A·y, own Ix, own Iy, dx, dy, A·dy², A·dx²), the totals.

    >>> [row[:4] for row in ledger([["part", "shape", "b", "h"], ["web", "rectangle", 10, 400]])]
    [['part', 'A', 'x', 'y'], ['web', 4000.0, 0.0, 0.0], ['total', 4000.0, 0.0, 0.0]]
    """
    return _result("CS_LEDGER", (parts,))


def about(parts: Table, x: float | None = None, y: float | None = None, turn: float | None = None) -> Result:
    """Rows symbol, value, unit for Ix Iy Ixy about axes through (x, y) [L] turned by `turn` degrees anticlockwise.

    >>> about([["shape", "b [mm]", "h [mm]"], ["rectangle", 30, 60]], y=-30)[0]
    ['Ix', 2160000.0, 'mm⁴']
    """
    return _result("CS_ABOUT", (parts, x, y, turn), SYMBOLS)


@overload
def principal(parts: Table, which: str) -> float: ...
@overload
def principal(parts: Table, which: Symbols | None = None) -> Result: ...
def principal(parts: Table, which: Symbols | str | None = None) -> Result:
    """Rows symbol, value, unit for I1 I2 angle r1 r2; one number for one symbol, a list for several.

    >>> principal([["shape", "b", "h"], ["rectangle", 60, 30]], "angle")
    90.0
    """
    return _chosen("CS_PRINCIPAL", parts, which)


def fibres(parts: Table, turn: float | None = None) -> Result:
    """Rows side, distance, modulus for the extreme fibres top, bottom, left, right of axes turned by `turn` degrees.

    >>> fibres([["shape", "b", "h"], ["rectangle", 30, 60]])[0]
    ['top', 30.0, 18000.0]
    """
    return _result("CS_FIBRES", (parts, turn), ("side", "distance", "modulus"))


def faults(parts: Table, gap: float | None = None) -> Result:
    """The text "no faults", or rows part, fault, effect, remedy; pieces up to `gap` [L] apart count as connected.

    >>> faults([["shape", "b", "h"], ["rectangle", 30, 60]])
    'no faults'
    """
    return _result("CS_FAULTS", (parts, gap), ("part", "fault", "effect", "remedy"))


def outline(parts: Table, part: str | float, points: int | None = None) -> Result:
    """Rows x, y: exactly `points` points along the outer outline of a part, by its label or its number, and back.

    >>> outline([["shape", "b", "h"], ["rectangle", 30, 60]], 1, 5)
    [[-15.0, -30.0], [15.0, -30.0], [15.0, 30.0], [-15.0, 30.0], [-15.0, -30.0]]
    """
    return _result("CS_OUTLINE", (parts, part, points), ("x", "y"))


def agrees(value: float | str, reference: float | str, tolerance: float | None = None) -> bool:
    """Whether |value - reference| <= tolerance · |reference|, 1e-9 where none is given; texts are compared as words.

    >>> agrees(868000, 868300, 0.001)
    True
    """
    return bool(_result("CS_AGREES", (value, reference, tolerance)))


def edition() -> str:
    """Version of the package and digest of its verified catalogue, to print on a calculation.

    >>> edition().split()[0]
    'cellsection'
    """
    return str(_result("CS_EDITION", ()))


def _result(name: str, given: Sequence[Any], columns: Sequence[str] = ()) -> Any:
    """A cell function called on what was given; a table in the kind of what came in.

    columns : what a DataFrame calls the columns of the result; none where its first row says so
    """
    from cellsection.catalogue import CATALOGUE

    function = CATALOGUE[name]
    raw = []
    for k, value in enumerate(given):
        argument = function.arguments[min(k, len(function.arguments) - 1)]  # the last one may repeat
        try:
            raw.append(cells(value, headed=argument.kind.startswith("parts block")))
        except InputError as problem:
            raise InputError(problem.fault, remedy=problem.remedy, argument=argument.name, row=problem.row) from None
    result = function.call(*raw)
    if not isinstance(result, tuple):
        return result
    blanks = [[None if cell == "" else cell for cell in row] for row in result]
    return in_kind(blanks, common_kind(given), columns)


def _chosen(name: str, parts: Table, which: Symbols | str | None) -> Any:
    """All rows, the number of one symbol, or as many numbers as there are in a list of symbols."""
    if which is None or isinstance(which, str):
        return _result(name, (parts, which), SYMBOLS)
    rows = cells(which, headed=False)
    if any(len(row) != 1 for row in rows):
        raise InputError("the symbols are a table", remedy="Give them as one list", argument="which")
    symbols = [row[0] for row in rows]
    numbers = [_result(name, (parts, symbol)) for symbol in symbols]
    kind = common_kind((parts, which))
    if kind == "frame":
        return in_kind(list(zip(symbols, numbers, strict=True)), kind, SYMBOLS[:2])
    return numbers_or_objects(numbers) if kind == "array" else numbers
