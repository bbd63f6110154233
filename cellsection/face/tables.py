"""Tables in and out: lists, arrays and DataFrames as the cells that a cell function takes and gives.

numpy and pandas are looked up among what is loaded already: who hands one in has loaded it.
"""

from __future__ import annotations

import sys
from collections.abc import Sequence
from typing import Any

from cellsection.errors import InputError

__all__ = ["cells", "common_kind", "in_kind", "numbers_or_objects"]


def cells(value: Any, *, headed: bool) -> Any:
    """A value as cells: a single one, or rows of them; a flat list or a Series is a column.

    headed : a parts block, so that the columns of a DataFrame are its header row, and a list's rows may end early
    """
    kind = kind_of(value)
    if kind == "frame":
        return framed(value, headed)
    if kind == "array":
        if value.ndim > 2:
            raise InputError(f"an array of {value.ndim} dimensions is no table", remedy="Give rows and columns")
        return cells(value.tolist(), headed=headed)
    if not is_list(value):
        return value.item() if kind == "scalar" else value
    rows = [row if is_list(row) else row.tolist() if kind_of(row) == "array" else None for row in value]
    if all(row is None for row in rows):
        return tuple((cells(cell, headed=False),) for cell in value)
    width = max(len(row) for row in rows if row is not None)
    for number, row in enumerate(rows, start=1):
        if row is None or (len(row) < width and not headed):
            raise InputError("the rows are not all as long", remedy=f"Give {width} cells in each", row=number)
        if headed and len(row) > len(rows[0] or ()):
            raise InputError("the row is longer than the header row", remedy="Shorten it, or add a header", row=number)
    return tuple(
        tuple(cells(cell, headed=False) for cell in (*row, *[None] * (width - len(row))))
        for row in rows
        if row is not None
    )


def kind_of(value: Any) -> str:
    """What a value is where it is not plain Python: a "frame" (DataFrame or Series), an "array", a numpy "scalar"."""
    numpy, pandas = sys.modules.get("numpy"), sys.modules.get("pandas")
    if pandas is not None and isinstance(value, (pandas.DataFrame, pandas.Series)):
        return "frame"
    if numpy is not None and isinstance(value, numpy.ndarray):
        return "array"
    return "scalar" if numpy is not None and isinstance(value, numpy.generic) else ""


def is_list(value: Any) -> bool:
    """A list or tuple, not a text."""
    return isinstance(value, Sequence) and not isinstance(value, (str, bytes))


def framed(value: Any, headed: bool) -> tuple[tuple[Any, ...], ...]:
    """A DataFrame or Series as cells, what is missing in it as blanks; its index too where it has a name."""
    import pandas

    frame = value.to_frame() if isinstance(value, pandas.Series) else value
    if headed and any(name is not None for name in frame.index.names):
        frame = frame.reset_index()
    missing = frame.isna().to_numpy()
    plain = frame.astype(object).to_numpy()
    rows = tuple(
        tuple(None if gone else cells(cell, headed=False) for cell, gone in zip(row, gaps, strict=True))
        for row, gaps in zip(plain.tolist(), missing.tolist(), strict=True)
    )
    return (tuple(frame.columns), *rows) if headed else rows


def common_kind(given: Sequence[Any]) -> str:
    """What a result should be, after what was given: "frame" before "array" before "" for lists."""
    inside = [row for value in given if is_list(value) for row in value[:1]]
    kinds = {kind_of(value) for value in (*given, *inside)}
    return next((kind for kind in ("frame", "array") if kind in kinds), "")


def in_kind(rows: Sequence[Sequence[Any]], kind: str, columns: Sequence[str] = ()) -> Any:
    """A table of cells as a DataFrame, an array, or a list of lists.

    columns : of a DataFrame; none where the first row holds them. Rows named by symbol or side are so indexed.
    """
    if kind == "frame":
        import pandas

        body = [list(row) for row in (rows if columns else rows[1:])]
        frame = pandas.DataFrame(body, columns=list(columns or rows[0]))
        return frame.set_index(columns[0]) if columns and columns[0] in ("symbol", "side") else frame
    if kind == "array":
        return numbers_or_objects([list(row) for row in rows])
    return [list(row) for row in rows]


def numbers_or_objects(values: list[Any]) -> Any:
    """An array of floats where all are, else of objects."""
    import numpy

    flat = [cell for row in values for cell in (row if isinstance(row, list) else [row])]
    return numpy.array(values, dtype=float if all(isinstance(cell, float) for cell in flat) else object)
