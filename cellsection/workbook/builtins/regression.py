"""Least squares lines and curves: LINEST, LOGEST, TREND and GROWTH."""

from __future__ import annotations

import math

from cellsection.workbook.builtins.registry import ErrorResult, builtin
from cellsection.workbook.builtins.traits import numbers, whole
from cellsection.workbook.coercion import NA, NUM, REF, VALUE, logical_of
from cellsection.workbook.values import Array, ErrorValue, Scalar


def variables_of(x: Array | None, count: int) -> list[list[float]]:
    """The independent variables, each a list as long as the dependent one; 1, 2, 3 ... where none are given."""
    if x is None:
        return [[float(k + 1) for k in range(count)]]
    cells = [[plain_number(cell) for cell in row] for row in x]
    if len(cells) * len(cells[0]) == count:
        return [[cell for row in cells for cell in row]]
    if len(cells) == count:
        return [list(column) for column in zip(*cells, strict=True)]
    if len(cells[0]) == count:
        return [list(row) for row in cells]
    raise ErrorResult(REF)


def dot(a: list[float], b: list[float]) -> float:
    """Inner product."""
    return math.fsum(p * q for p, q in zip(a, b, strict=True))


def orthogonal(columns: list[list[float]]) -> tuple[list[list[float]], list[list[float]], list[int]]:
    """Q and R of the columns by Gram-Schmidt, twice over to keep its digits, and which columns are independent.

    A column that the ones before it make up (to 1e-12 of its length) is left out; its coefficient is 0.
    """
    Q: list[list[float]] = []
    R: list[list[float]] = []
    kept: list[int] = []
    for k, column in enumerate(columns):
        rest, shares = list(column), [0.0] * len(Q)
        for _ in range(2):
            for i, q in enumerate(Q):
                share = dot(q, rest)
                shares[i] += share
                rest = [v - share * w for v, w in zip(rest, q, strict=True)]
        length = math.sqrt(dot(rest, rest))
        if length > 1e-12 * math.sqrt(dot(column, column)):
            Q.append([v / length for v in rest])
            R.append([*shares, length])
            kept.append(k)
    return Q, R, kept


def inverse_of(R: list[list[float]]) -> list[list[float]]:
    """Inverse of the triangle R, whose k-th list is its k-th column down to the diagonal; rows of the inverse."""
    n = len(R)
    inverse = [[0.0] * n for _ in range(n)]
    for k in range(n):
        inverse[k][k] = 1.0 / R[k][k]
        for i in range(k):
            inverse[i][k] = -math.fsum(inverse[i][m] * R[k][m] for m in range(i, k)) / R[k][k]
    return inverse


def fitted(y: Array, x: Array | None, constant: bool, statistics: bool) -> list[list[float | ErrorValue]]:
    """Least squares, coefficients in reverse order as the application lists them; with statistics five rows.

    Source: linear regression by orthogonal decomposition, any text on statistics or numerical analysis. With a constant
    the columns are centred first, so that the solution keeps its digits.
    """
    values = list(numbers((y,)))
    n = len(values)
    if not n or n != sum(len(row) for row in y):
        raise ErrorResult(VALUE)
    columns = variables_of(x, n)
    m = len(columns)
    centre = [math.fsum(column) / n if constant else 0.0 for column in columns]
    level = math.fsum(values) / n if constant else 0.0
    Q, R, kept = orthogonal([[v - c for v in column] for column, c in zip(columns, centre, strict=True)])
    inverse, shares = inverse_of(R), [dot(q, [v - level for v in values]) for q in Q]
    slopes = [0.0] * m
    for row, k in enumerate(kept):
        slopes[k] = dot(inverse[row], shares)
    intercept = level - dot(slopes, centre)
    listing: list[float | ErrorValue] = [*slopes[::-1], intercept if constant else 0.0]
    if not statistics:
        return [listing]
    predicted_values = [intercept + math.fsum(s * c[k] for s, c in zip(slopes, columns, strict=True)) for k in range(n)]
    rss = math.fsum((v - p) ** 2 for v, p in zip(values, predicted_values, strict=True))
    tss = math.fsum((v - level) ** 2 for v in values)
    freedom = n - len(kept) - constant
    sey = math.sqrt(rss / freedom) if freedom > 0 else 0.0
    errors = [0.0] * m
    for row, k in enumerate(kept):
        errors[k] = sey * math.sqrt(dot(inverse[row], inverse[row]))
    lever = [math.fsum(inverse[row][c] * centre[k] for row, k in enumerate(kept)) for c in range(len(kept))]
    error_of_constant: float | ErrorValue = sey * math.sqrt(1 / n + dot(lever, lever)) if constant else NA
    blanks: list[float | ErrorValue] = [NA] * (m - 1)
    f: float | ErrorValue = (tss - rss) / len(kept) / (rss / freedom) if freedom > 0 and rss and kept else NUM
    return [
        listing, [*errors[::-1], error_of_constant], [1 - rss / tss if tss else 1.0, sey, *blanks],
        [f, float(freedom), *blanks], [tss - rss, rss, *blanks],
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


def logarithms(y: Array) -> Array:
    """Logarithms of an array of nothing but positive numbers, as a column."""
    values = list(numbers((y,)))
    if len(values) != sum(map(len, y)):
        raise ErrorResult(VALUE)
    if min(values, default=0.0) <= 0:
        raise ErrorResult(NUM)
    return tuple((math.log(v),) for v in values)


@builtin("LOGEST", "array array? value? value?")
def logest(y: Array, x: Array | None = None, constant: Scalar = None, statistics: Scalar = None) -> Array:
    found = fitted(logarithms(y), x, chosen(constant, True), chosen(statistics, False))
    found[0] = [math.exp(c) for c in found[0]]  # type: ignore[arg-type]
    return tuple(map(tuple, found))


def plain_number(cell: Scalar) -> float:
    """A cell that must be a number."""
    if isinstance(cell, ErrorValue):
        raise ErrorResult(cell)
    if cell.__class__ is not float:
        raise ErrorResult(VALUE)
    return cell


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
    return shaped([math.exp(v) for v in predicted(logarithms(y), x, new, constant)], new or x or y)
