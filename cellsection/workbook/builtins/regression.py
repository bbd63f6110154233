"""Least squares lines and curves: LINEST, LOGEST, TREND and GROWTH."""

from __future__ import annotations

import math

from cellsection.workbook.builtins.registry import ErrorResult, builtin
from cellsection.workbook.builtins.traits import numbers, whole
from cellsection.workbook.coercion import NA, NUM, REF, VALUE, logical_of, number_of
from cellsection.workbook.values import Array, ErrorValue, Scalar


def design(x: Array | None, y: list[float], constant: bool) -> tuple[list[list[float]], int]:
    """Rows of the design matrix (highest column first is left to the caller), and the number of variables."""
    if x is None:
        columns = [[float(k + 1) for k in range(len(y))]]
    else:
        cells = [[plain_number(cell) for cell in row] for row in x]
        if len(cells) * len(cells[0]) == len(y):
            columns = [[cell for row in cells for cell in row]]
        elif len(cells) == len(y):
            columns = [list(column) for column in zip(*cells, strict=True)]
        elif len(cells[0]) == len(y):
            columns = [list(row) for row in cells]
        else:
            raise ErrorResult(REF)
    rows = [[*(column[k] for column in columns), *([1.0] if constant else [])] for k in range(len(y))]
    return rows, len(columns)


def fitted(y: Array, x: Array | None, constant: bool, statistics: bool) -> list[list[float | ErrorValue]]:
    """Least squares by QR, coefficients in reverse order as the application lists them; with statistics five rows."""
    import numpy as np

    values = list(numbers((y,)))
    if not values or len(values) != sum(len(row) for row in y):
        raise ErrorResult(VALUE)
    rows, variables = design(x, values, constant)
    if len(rows) != len(values):
        raise ErrorResult(REF)
    matrix, right = np.array(rows, dtype=float), np.array(values, dtype=float)
    if constant:  # centred, so that the solution keeps its digits
        centre = matrix[:, :variables].mean(axis=0)
        shifted, level = matrix[:, :variables] - centre, right.mean()
        solution, *_ = np.linalg.lstsq(shifted, right - level, rcond=None)
        coefficients = np.append(solution, level - solution @ centre)
    else:
        coefficients, *_ = np.linalg.lstsq(matrix, right, rcond=None)
    listing: list[float | ErrorValue] = [float(c) for c in coefficients[:variables][::-1]]
    listing.append(float(coefficients[variables]) if constant else 0.0)
    if not statistics:
        return [listing]
    residual = right - matrix @ coefficients
    rss = float(residual @ residual)
    tss = float(((right - right.mean()) ** 2).sum()) if constant else float(right @ right)
    freedom = len(values) - variables - constant
    sey = math.sqrt(rss / freedom) if freedom > 0 else 0.0
    with np.errstate(over="ignore"):  # what overflows ends as #NUM! by itself
        inverse = np.linalg.pinv(matrix.T @ matrix)
    errors = [sey * math.sqrt(max(float(inverse[k, k]), 0.0)) for k in range(matrix.shape[1])]
    deviation: list[float | ErrorValue] = [*errors[:variables][::-1], errors[variables] if constant else NA]
    blanks: list[float | ErrorValue] = [NA] * (variables - 1)
    f: float | ErrorValue = (tss - rss) / variables / (rss / freedom) if freedom > 0 and rss else NUM
    return [
        listing, deviation, [1 - rss / tss if tss else 1.0, sey, *blanks], [f, float(freedom), *blanks],
        [tss - rss, rss, *blanks],
    ]  # fmt: skip


def chosen(option: Scalar, default: bool) -> bool:
    """An option that also counts as left out where it is written but empty."""
    truth = default if option is None else logical_of(option)
    if isinstance(truth, ErrorValue):
        raise ErrorResult(truth)
    return truth


@builtin("LINEST", "array array? value? value?")
def linest(y: Array, x: Array | None = None, constant: Scalar = None, statistics: Scalar = None) -> Array:
    return tuple(map(tuple, fitted(y, x, chosen(constant, True), chosen(statistics, False))))


@builtin("LOGEST", "array array? value? value?")
def logest(y: Array, x: Array | None = None, constant: Scalar = None, statistics: Scalar = None) -> Array:
    values = list(numbers((y,)))
    if min(values, default=0.0) <= 0:
        raise ErrorResult(NUM)
    found = fitted(tuple((math.log(v),) for v in values), x, chosen(constant, True), chosen(statistics, False))
    found[0] = [math.exp(c) for c in found[0]]  # type: ignore[arg-type]
    return tuple(map(tuple, found))


def plain_number(cell: Scalar) -> float:
    """A cell that must be a number."""
    number = number_of(cell)
    if isinstance(number, ErrorValue):
        raise ErrorResult(VALUE)
    return number


def predicted(y: Array, x: Array | None, new: Array | None, constant: bool) -> list[float]:
    """Values of the fitted line at new places."""
    values = list(numbers((y,)))
    coefficients = fitted(y, x, constant, False)[0]
    *slopes, level = [float(c) for c in coefficients]  # type: ignore[arg-type]
    count_new = len(values) if new is None and x is None else 0
    if count_new:
        rows = [[float(k + 1)] for k in range(count_new)]
    else:
        source = whole(new if new is not None else x)
        cells = [[plain_number(cell) for cell in row] for row in source]
        if len(slopes) == 1:
            rows = [[cell] for row in cells for cell in row]
        else:
            rows = cells if len(cells[0]) == len(slopes) else [list(column) for column in zip(*cells, strict=True)]
    return [level + sum(m * v for m, v in zip(slopes[::-1], row, strict=True)) for row in rows]


def shaped(values: list[float], like: Array) -> Array:
    """A list laid out upright or level like an array."""
    return (tuple(values),) if len(like) == 1 and len(like[0]) > 1 else tuple((v,) for v in values)


@builtin("TREND", "array array? array? logical?")
def trend(y: Array, x: Array | None = None, new: Array | None = None, constant: bool = True) -> Array:
    return shaped(predicted(y, x, new, constant), new or x or y)


@builtin("GROWTH", "array array? array? logical?")
def growth(y: Array, x: Array | None = None, new: Array | None = None, constant: bool = True) -> Array:
    values = list(numbers((y,)))
    if min(values, default=0.0) <= 0:
        raise ErrorResult(NUM)
    logs = tuple((math.log(v),) for v in values)
    return shaped([math.exp(v) for v in predicted(logs, x, new, constant)], new or x or y)
