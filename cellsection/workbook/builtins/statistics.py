"""Counting, means, spread, order statistics and regression."""

from __future__ import annotations

import math
from typing import Any

from cellsection.workbook.builtins.mathematics import fail, paired, total
from cellsection.workbook.builtins.registry import Context, ErrorResult, builtin
from cellsection.workbook.builtins.traits import cells_of, numbers, numbers_a
from cellsection.workbook.coercion import DIV0, NA, NUM, VALUE, number_of
from cellsection.workbook.values import Array, ErrorValue, Scalar


@builtin("COUNT", "range+")
def count(*arguments: Any) -> float:
    found = 0
    for argument in arguments:
        if isinstance(argument, tuple) or hasattr(argument, "cells"):
            found += sum(cell.__class__ is float for cell in cells_of(argument))
        else:
            found += not isinstance(number_of(argument), ErrorValue)
    return float(found)


@builtin("COUNTA", "range+")
def counta(*arguments: Any) -> float:
    found = 0
    for argument in arguments:
        if isinstance(argument, tuple) or hasattr(argument, "cells"):
            found += sum(cell is not None for cell in cells_of(argument))
        else:
            found += 1
    return float(found)


def mean(values: list[float]) -> float:
    """Arithmetic mean; #DIV/0! of nothing."""
    return total(values) / len(values) if values else fail(DIV0)


@builtin("AVERAGE", "range+")
def average(*arguments: Any) -> float:
    return mean(list(numbers(arguments)))


@builtin("AVERAGEA", "range+")
def averagea(*arguments: Any) -> float:
    return mean(list(numbers_a(arguments)))


@builtin("MIN", "range+")
def min_(*arguments: Any) -> float:
    return min(numbers(arguments), default=0.0)


@builtin("MAX", "range+")
def max_(*arguments: Any) -> float:
    return max(numbers(arguments), default=0.0)


@builtin("MINA", "range+")
def mina(*arguments: Any) -> float:
    return min(numbers_a(arguments), default=0.0)


@builtin("MAXA", "range+")
def maxa(*arguments: Any) -> float:
    return max(numbers_a(arguments), default=0.0)


def squares(values: list[float]) -> float:
    """Sum of squared deviations from the mean, in two passes."""
    m = mean(values)
    return total((x - m) ** 2 for x in values)


def variance(values: list[float], sample: bool) -> float:
    """Variance of a sample or of a whole population."""
    n = len(values) - sample
    return squares(values) / n if n > 0 else fail(DIV0)


def declare_spread() -> None:
    """VAR, STDEV and the spellings of both."""
    for names, sample, take, root in (
        ("VAR VAR.S", True, numbers, False),
        ("VARP VAR.P", False, numbers, False),
        ("VARA", True, numbers_a, False),
        ("VARPA", False, numbers_a, False),
        ("STDEV STDEV.S", True, numbers, True),
        ("STDEVP STDEV.P", False, numbers, True),
        ("STDEVA", True, numbers_a, True),
        ("STDEVPA", False, numbers_a, True),
    ):

        def spread(*arguments: Any, sample: bool = sample, take: Any = take, root: bool = root) -> float:
            result = variance(list(take(arguments)), sample)
            return math.sqrt(result) if root else result

        builtin(names, "range+")(spread)


declare_spread()


@builtin("DEVSQ", "range+")
def devsq(*arguments: Any) -> float:
    values = list(numbers(arguments))
    return squares(values) if values else fail(NUM)


@builtin("AVEDEV", "range+")
def avedev(*arguments: Any) -> float:
    values = list(numbers(arguments))
    m = mean(values) if values else fail(NUM)
    return total(abs(x - m) for x in values) / len(values)


@builtin("GEOMEAN", "range+")
def geomean(*arguments: Any) -> float:
    values = list(numbers(arguments))
    if not values or min(values) <= 0:
        return fail(NUM)
    product = math.prod(values)
    if 1e-300 < product < 1e300:
        return float(product ** (1 / len(values)))
    return math.exp(total(map(math.log, values)) / len(values))


@builtin("HARMEAN", "range+")
def harmean(*arguments: Any) -> float:
    values = list(numbers(arguments))
    return len(values) / total(1 / x for x in values) if values and min(values) > 0 else fail(NUM)


@builtin("MEDIAN", "range+")
def median(*arguments: Any) -> float:
    values = sorted(numbers(arguments))
    if not values:
        return fail(NUM)
    half = len(values) // 2
    return values[half] if len(values) % 2 else (values[half - 1] + values[half]) / 2


def modes(arguments: Any) -> list[float]:
    """The values met most often, in the order they are first met."""
    counts: dict[float, int] = {}
    for x in numbers(arguments):
        counts[x] = counts.get(x, 0) + 1
    most = max(counts.values(), default=0)
    if most < 2:
        raise ErrorResult(NA)
    return [x for x, found in counts.items() if found == most]


@builtin("MODE MODE.SNGL", "range+")
def mode(*arguments: Any) -> float:
    return modes(arguments)[0]


@builtin("MODE.MULT", "range+")
def mode_mult(*arguments: Any) -> Array:
    return tuple((x,) for x in modes(arguments))


@builtin("LARGE", "range number")
def large(area: Any, k: float) -> float:
    values = sorted(numbers((area,)), reverse=True)
    place = math.ceil(k)
    return values[place - 1] if 1 <= place <= len(values) else fail(NUM)


@builtin("SMALL", "range number")
def small(area: Any, k: float) -> float:
    values = sorted(numbers((area,)))
    place = math.ceil(k)
    return values[place - 1] if 1 <= place <= len(values) else fail(NUM)


def rank(x: float, area: Any, upwards: float) -> tuple[int, int]:
    """Rank of a value and how many share it."""
    values = list(numbers((area,)))
    ties = values.count(x)
    if not ties:
        raise ErrorResult(NA)
    return 1 + sum((y < x) if upwards else (y > x) for y in values), ties


@builtin("RANK RANK.EQ", "number range number?")
def rank_eq(x: float, area: Any, upwards: float = 0.0) -> float:
    return float(rank(x, area, upwards)[0])


@builtin("RANK.AVG", "number range number?")
def rank_avg(x: float, area: Any, upwards: float = 0.0) -> float:
    first, ties = rank(x, area, upwards)
    return first + (ties - 1) / 2


def between(values: list[float], place: float) -> float:
    """Value at a place counted from 0 in sorted values, by straight interpolation."""
    low = math.floor(place)
    high = min(low + 1, len(values) - 1)
    return values[low] + (place - low) * (values[high] - values[low])


@builtin("PERCENTILE PERCENTILE.INC", "range number")
def percentile_inc(area: Any, k: float) -> float:
    values = sorted(numbers((area,)))
    return between(values, k * (len(values) - 1)) if values and 0 <= k <= 1 else fail(NUM)


@builtin("PERCENTILE.EXC", "range number")
def percentile_exc(area: Any, k: float) -> float:
    values = sorted(numbers((area,)))
    place = k * (len(values) + 1) - 1
    return between(values, place) if values and 0 <= place <= len(values) - 1 and 0 < k < 1 else fail(NUM)


@builtin("QUARTILE QUARTILE.INC", "range number")
def quartile_inc(area: Any, quarter: float) -> float:
    return percentile_inc(area, int(quarter) / 4) if 0 <= int(quarter) <= 4 else fail(NUM)


@builtin("QUARTILE.EXC", "range number")
def quartile_exc(area: Any, quarter: float) -> float:
    return percentile_exc(area, int(quarter) / 4) if 1 <= int(quarter) <= 3 else fail(NUM)


def rank_share(area: Any, x: float, digits: float, exclusive: bool) -> float:
    """Share of the values below x, cut to a number of digits."""
    values = sorted(numbers((area,)))
    if not values or digits < 1:
        return fail(NUM)
    if x < values[0] or x > values[-1]:
        return fail(NA)
    below = sum(y < x for y in values)
    if x in values:
        place = float(below)
    else:
        place = below - 1 + (x - values[below - 1]) / (values[below] - values[below - 1])
    share = (place + 1) / (len(values) + 1) if exclusive else (place / (len(values) - 1) if len(values) > 1 else 1.0)
    scale = 10.0 ** int(digits)
    return math.floor(float(f"{share * scale:.13g}")) / scale


@builtin("PERCENTRANK PERCENTRANK.INC", "range number number?")
def percentrank_inc(area: Any, x: float, digits: float = 3.0) -> float:
    return rank_share(area, x, digits, False)


@builtin("PERCENTRANK.EXC", "range number number?")
def percentrank_exc(area: Any, x: float, digits: float = 3.0) -> float:
    return rank_share(area, x, digits, True)


@builtin("SKEW", "range+")
def skew(*arguments: Any) -> float:
    values = list(numbers(arguments))
    n = len(values)
    if n < 3 or (s := math.sqrt(variance(values, True))) == 0:
        return fail(DIV0)
    m = mean(values)
    return n / ((n - 1) * (n - 2)) * total(((x - m) / s) ** 3 for x in values)


@builtin("SKEW.P", "range+")
def skew_p(*arguments: Any) -> float:
    values = list(numbers(arguments))
    if len(values) < 3 or (s := math.sqrt(variance(values, False))) == 0:
        return fail(DIV0)
    m = mean(values)
    return total(((x - m) / s) ** 3 for x in values) / len(values)


@builtin("KURT", "range+")
def kurt(*arguments: Any) -> float:
    values = list(numbers(arguments))
    n = len(values)
    if n < 4 or (s := math.sqrt(variance(values, True))) == 0:
        return fail(DIV0)
    m = mean(values)
    fourth = total(((x - m) / s) ** 4 for x in values)
    return n * (n + 1) / ((n - 1) * (n - 2) * (n - 3)) * fourth - 3 * (n - 1) ** 2 / ((n - 2) * (n - 3))


@builtin("TRIMMEAN", "range number")
def trimmean(area: Any, share: float) -> float:
    values = sorted(numbers((area,)))
    if not values or not 0 <= share < 1:
        return fail(NUM)
    cut = int(len(values) * share / 2)
    return mean(values[cut : len(values) - cut])


@builtin("STANDARDIZE", "number number number")
def standardize(x: float, m: float, s: float) -> float:
    return (x - m) / s if s > 0 else fail(NUM)


@builtin("FREQUENCY", "array array")
def frequency(data: Array, bins: Array) -> Array:
    values, given = list(numbers((data,))), list(numbers((bins,)))
    edges = sorted(set(given))
    counts = dict.fromkeys(edges, 0)
    for x in values:
        edge = next((each for each in edges if x <= each), None)
        if edge is not None:
            counts[edge] += 1
    listed = [counts.pop(edge, 0) for edge in given]  # in the order the bins are written, a repeated one counts once
    return tuple((float(each),) for each in (*listed, len(values) - sum(listed)))


# ---- two variables


def deviations(y: Array, x: Array) -> tuple[int, float, float, float, float, float]:
    """n, means of x and y, and the sums of squares and products Sxx, Syy, Sxy."""
    pairs = paired(x, y)
    n = len(pairs)
    if not n:
        raise ErrorResult(DIV0)
    mx, my = total(p[0] for p in pairs) / n, total(p[1] for p in pairs) / n
    sxx, syy = total((p[0] - mx) ** 2 for p in pairs), total((p[1] - my) ** 2 for p in pairs)
    return n, mx, my, sxx, syy, total((p[0] - mx) * (p[1] - my) for p in pairs)


@builtin("CORREL PEARSON", "array array")
def correl(y: Array, x: Array) -> float:
    _, _, _, sxx, syy, sxy = deviations(y, x)
    return sxy / math.sqrt(sxx * syy) if sxx * syy else fail(DIV0)


@builtin("RSQ", "array array")
def rsq(y: Array, x: Array) -> float:
    return correl(y, x) ** 2


@builtin("COVAR COVARIANCE.P", "array array")
def covariance_p(y: Array, x: Array) -> float:
    n, *_, sxy = deviations(y, x)
    return sxy / n


@builtin("COVARIANCE.S", "array array")
def covariance_s(y: Array, x: Array) -> float:
    n, *_, sxy = deviations(y, x)
    return sxy / (n - 1) if n > 1 else fail(DIV0)


@builtin("SLOPE", "array array")
def slope(y: Array, x: Array) -> float:
    _, _, _, sxx, _, sxy = deviations(y, x)
    return sxy / sxx if sxx else fail(DIV0)


@builtin("INTERCEPT", "array array")
def intercept(y: Array, x: Array) -> float:
    _, mx, my, sxx, _, sxy = deviations(y, x)
    return my - sxy / sxx * mx if sxx else fail(DIV0)


@builtin("STEYX", "array array")
def steyx(y: Array, x: Array) -> float:
    n, _, _, sxx, syy, sxy = deviations(y, x)
    return math.sqrt((syy - sxy * sxy / sxx) / (n - 2)) if n > 2 and sxx else fail(DIV0)


@builtin("FORECAST FORECAST.LINEAR", "number array array")
def forecast(at: float, y: Array, x: Array) -> float:
    _, mx, my, sxx, _, sxy = deviations(y, x)
    return my + sxy / sxx * (at - mx) if sxx else fail(DIV0)


# ---- subtotals


WORK = {
    1: average, 2: count, 3: counta, 4: max_, 5: min_, 7: lambda *a: math.sqrt(variance(list(numbers(a)), True)),
    8: lambda *a: math.sqrt(variance(list(numbers(a)), False)), 9: lambda *a: total(numbers(a)),
    10: lambda *a: variance(list(numbers(a)), True), 11: lambda *a: variance(list(numbers(a)), False),
    12: median, 13: mode,
}  # fmt: skip
PLACED = {14: large, 15: small, 16: percentile_inc, 17: quartile_inc, 18: percentile_exc, 19: quartile_exc}


def product(*arguments: Any) -> float:
    """Product of the numbers."""
    values = list(numbers(arguments))
    return math.prod(values) if values else 0.0


WORK[6] = product


def visible(context: Context, area: Any, hidden: bool, nested: bool) -> list[Scalar]:
    """Cells of an area but those in hidden rows, and those that are subtotals themselves."""
    if not hasattr(area, "cells"):
        return list(cells_of(area))
    found: list[Scalar] = []
    for r, row in enumerate(area.values()):
        if hidden and context.hidden_row(area.sheet, area.top + r):
            continue
        for c, cell in enumerate(row):
            if nested and context.formula_call(area.sheet, area.top + r, area.left + c) in ("SUBTOTAL", "AGGREGATE"):
                continue
            found.append(cell)
    return found


@builtin("SUBTOTAL", "context number range+")
def subtotal(context: Context, code: float, *areas: Any) -> float:
    kind = int(code) % 100 if int(code) > 100 else int(code)
    if kind not in range(1, 12):
        return fail(VALUE)
    cells = [cell for area in areas for cell in visible(context, area, int(code) > 100, True)]
    return float(WORK[kind]((tuple(cells),)))


@builtin("AGGREGATE", "context number number range range*")
def aggregate(context: Context, code: float, option: float, area: Any, *rest: Any) -> float:
    kind, ignore = int(code), int(option)
    if kind not in range(1, 20) or ignore not in range(8):
        return fail(VALUE)
    areas = [area] if kind >= 14 else [area, *rest]
    cells = [c for each in areas for c in visible(context, each, ignore in (1, 3, 5, 7), ignore <= 3)]
    if ignore in (2, 3, 6, 7):
        cells = [c for c in cells if not isinstance(c, ErrorValue)]
    if kind < 14:
        return float(WORK[kind]((tuple(cells),)))
    if len(rest) != 1:
        return fail(VALUE)
    place = rest[0].value(1, 1) if hasattr(rest[0], "value") else rest[0]
    number = number_of(place)
    if isinstance(number, ErrorValue):
        raise ErrorResult(number)
    return float(PLACED[kind]((tuple(cells),), number))
