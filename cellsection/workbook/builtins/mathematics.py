"""Arithmetic, rounding, powers and trigonometry."""

from __future__ import annotations

import math
from typing import Any

from cellsection.workbook.builtins.registry import ErrorResult, builtin
from cellsection.workbook.builtins.traits import cells_of, numbers
from cellsection.workbook.coercion import DIV0, NUM, VALUE
from cellsection.workbook.values import Array, ErrorValue

NUMERIC = frozenset((float,))


def fail(error: ErrorValue) -> float:
    """Return an error value."""
    raise ErrorResult(error)


def total(values: Any) -> float:
    """The sum from left to right in plain double precision, as the application forms it."""
    result = 0.0
    for value in values:
        result += value
    return result


@builtin("SUM", "range+")
def sum_(*arguments: Any) -> float:
    return total(numbers(arguments))


@builtin("PRODUCT", "range+")
def product(*arguments: Any) -> float:
    values = list(numbers(arguments))
    return math.prod(values) if values else 0.0


@builtin("PERCENTOF", "range range")
def percentof(part: Any, whole: Any) -> float:
    base = total(numbers((whole,)))
    return total(numbers((part,))) / base if base else fail(DIV0)


@builtin("SUMSQ", "range+")
def sumsq(*arguments: Any) -> float:
    return total(x * x for x in numbers(arguments))


@builtin("SUMPRODUCT", "array+")
def sumproduct(*arrays: Array) -> float:
    shape = (len(arrays[0]), len(arrays[0][0]) if arrays[0] else 0)
    if any((len(a), len(a[0]) if a else 0) != shape for a in arrays):
        return fail(VALUE)
    result = 0.0
    for rows in zip(*arrays, strict=True):
        for cells in zip(*rows, strict=True):
            term = 1.0
            for cell in cells:
                if cell.__class__ is float:
                    term *= cell
                elif isinstance(cell, ErrorValue):
                    return fail(cell)
                else:
                    term = 0.0
            result += term
    return result


def paired(a: Array, b: Array) -> list[tuple[float, float]]:
    """Pairs of numbers of two arrays of one size."""
    first, second = list(cells_of(a)), list(cells_of(b))
    if len(first) != len(second):
        raise ErrorResult(ErrorValue("#N/A"))
    for cell in (*first, *second):
        if isinstance(cell, ErrorValue):
            raise ErrorResult(cell)
    return [(x, y) for x, y in zip(first, second, strict=True) if x.__class__ is float and y.__class__ is float]


@builtin("SUMX2MY2", "array array")
def sumx2my2(a: Array, b: Array) -> float:
    return total(x * x - y * y for x, y in paired(a, b))


@builtin("SUMX2PY2", "array array")
def sumx2py2(a: Array, b: Array) -> float:
    return total(x * x + y * y for x, y in paired(a, b))


@builtin("SUMXMY2", "array array")
def sumxmy2(a: Array, b: Array) -> float:
    return total((x - y) ** 2 for x, y in paired(a, b))


@builtin("SERIESSUM", "measure measure measure array")
def seriessum(x: float, n: float, m: float, coefficients: Array) -> float:
    result = 0.0
    for k, cell in enumerate(cells_of(coefficients)):
        if isinstance(cell, ErrorValue):
            return fail(cell)
        if not (cell is None or cell.__class__ is float):  # text and logicals: "any argument nonnumeric" is #VALUE!
            return fail(VALUE)
        exponent = n + k * m
        if (x == 0 and exponent <= 0) or (x < 0 and exponent != int(exponent)):
            return fail(NUM)
        result += (cell or 0.0) * x**exponent
    return result


# ---- rounding: half away from zero, on the number's 15 digits


def rounded(x: float, digits: float, how: str) -> float:
    """Round to a number of decimals: "half" away from zero, "down" towards zero, "up" away from it.

    The last bits of a double are not digits: 2.675 is held as 2.67499999999999982, and rounds to 2.68 as it is shown.
    """
    if x == 0 or not math.isfinite(x):
        return x
    places = int(digits)
    if places > 300:
        return x
    if places < -308:
        return 0.0
    scale = 10.0 ** abs(places)
    scaled = abs(x) * scale if places >= 0 else abs(x) / scale
    if scaled >= 1e15 or not math.isfinite(scaled):
        return x
    scaled = float(f"{scaled:.15g}") if how == "half" else float(f"{scaled:.14e}")
    floor = math.floor(scaled)
    if how == "half":
        whole_number = floor + (1 if scaled - floor >= 0.5 else 0)
    elif how == "up":
        whole_number = floor + (1 if scaled > floor else 0)
    else:
        whole_number = floor
    text = f"{whole_number}e{-places}"
    return math.copysign(float(text), x)


@builtin("ROUND", "number number?")  # OpenFormula lets the digits be left out
def round_(x: float, digits: float = 0.0) -> float:
    return rounded(x, digits, "half")


@builtin("ROUNDUP", "number number?")
def roundup(x: float, digits: float = 0.0) -> float:
    return rounded(x, digits, "up")


@builtin("ROUNDDOWN", "number number?")
def rounddown(x: float, digits: float = 0.0) -> float:
    return rounded(x, digits, "down")


@builtin("TRUNC", "number number?")
def trunc(x: float, digits: float = 0.0) -> float:
    return rounded(x, digits, "down")


@builtin("INT", "number")
def int_(x: float) -> float:
    near = round(x)
    return float(near if x != near and abs(x - near) < 1e-15 * abs(x) * 4 and near > x else math.floor(x))


@builtin("EVEN", "number")
def even(x: float) -> float:
    return math.copysign(math.ceil(abs(x) / 2) * 2.0, x) if x else 0.0


@builtin("ODD", "number")
def odd(x: float) -> float:
    if x == 0:
        return 1.0
    n = math.ceil(abs(x))
    return math.copysign(float(n if n % 2 else n + 1), x)


def steps(x: float, step: float, up: bool) -> float:
    """The multiple of step at or beyond x, above it or below."""
    quotient = float(f"{x / step:.14e}")
    return (math.ceil(quotient) if up else math.floor(quotient)) * step


@builtin("CEILING", "number number?")
def ceiling(x: float, step: float = 1.0) -> float:
    if x == 0 or step == 0:
        return 0.0
    if x > 0 > step:
        return fail(NUM)
    return steps(x, step, True) if (x > 0) == (step > 0) else -steps(-x, step, False)


@builtin("FLOOR", "number number?")
def floor(x: float, step: float = 1.0) -> float:
    if x == 0:
        return 0.0
    if step == 0:
        return fail(DIV0)
    if x > 0 > step:
        return fail(NUM)
    return steps(x, step, False) if (x > 0) == (step > 0) else -steps(-x, step, True)


@builtin("CEILING.MATH", "number number? number?")
def ceiling_math(x: float, step: float | None = None, away: float = 0.0) -> float:
    size = abs(1.0 if step is None else step)
    if size == 0 or x == 0:
        return 0.0
    return -steps(-x, size, True) if x < 0 and away else steps(x, size, True)


@builtin("FLOOR.MATH", "number number? number?")
def floor_math(x: float, step: float | None = None, towards: float = 0.0) -> float:
    size = abs(1.0 if step is None else step)
    if size == 0 or x == 0:
        return 0.0
    return -steps(-x, size, False) if x < 0 and towards else steps(x, size, False)


@builtin("CEILING.PRECISE ISO.CEILING", "number number?")
def ceiling_precise(x: float, step: float = 1.0) -> float:
    return steps(x, abs(step), True) if step and x else 0.0


@builtin("FLOOR.PRECISE", "number number?")
def floor_precise(x: float, step: float = 1.0) -> float:
    return steps(x, abs(step), False) if step and x else 0.0


@builtin("MROUND", "number number")
def mround(x: float, step: float) -> float:
    if step == 0 or x == 0:
        return 0.0
    if (x > 0) != (step > 0):
        return fail(NUM)
    return math.floor(float(f"{x / step:.14e}") + 0.5) * step


@builtin("MOD", "number number")
def mod(x: float, y: float) -> float:
    if y == 0:
        return fail(DIV0)
    quotient = x / y
    if abs(quotient) >= 1.125e15:
        return fail(NUM)
    result = x - y * math.floor(float(f"{quotient:.15g}"))
    return 0.0 if abs(result) < abs(x) * 2.0**-49 else result


@builtin("QUOTIENT", "number number")
def quotient(x: float, y: float) -> float:
    return float(math.trunc(x / y)) if y else fail(DIV0)


@builtin("ABS", "number")
def abs_(x: float) -> float:
    return abs(x)


@builtin("SIGN", "number")
def sign(x: float) -> float:
    return float((x > 0) - (x < 0))


# ---- powers and logarithms


@builtin("SQRT", "number")
def sqrt(x: float) -> float:
    return math.sqrt(x) if x >= 0 else fail(NUM)


@builtin("SQRTPI", "number")
def sqrtpi(x: float) -> float:
    return math.sqrt(x * math.pi) if x >= 0 else fail(NUM)


@builtin("POWER", "number number")
def power(x: float, y: float) -> float:
    if x == 0 and y <= 0:
        return fail(NUM if y == 0 else DIV0)
    if x < 0 and y != int(y):
        return fail(NUM)
    return float(x**y)


@builtin("EXP", "number")
def exp(x: float) -> float:
    return math.exp(x)


@builtin("LN", "number")
def ln(x: float) -> float:
    return math.log(x) if x > 0 else fail(NUM)


@builtin("LOG10", "number")
def log10(x: float) -> float:
    return math.log10(x) if x > 0 else fail(NUM)


@builtin("LOG", "number number?")
def log(x: float, base: float = 10.0) -> float:
    if x <= 0 or base <= 0:
        return fail(NUM)
    if base == 1:
        return fail(DIV0)
    return math.log10(x) if base == 10 else math.log2(x) if base == 2 else math.log(x) / math.log(base)


@builtin("PI", "")
def pi() -> float:
    return math.pi


# ---- trigonometry


@builtin("SIN", "number")
def sin(x: float) -> float:
    return math.sin(x) if abs(x) < 2**27 else fail(NUM)


@builtin("COS", "number")
def cos(x: float) -> float:
    return math.cos(x) if abs(x) < 2**27 else fail(NUM)


@builtin("TAN", "number")
def tan(x: float) -> float:
    return math.tan(x) if abs(x) < 2**27 else fail(NUM)


def inverse(x: float) -> float:
    """1/x, or #DIV/0!."""
    return 1.0 / x if x else fail(DIV0)


def within(x: float) -> float:
    """An argument of the functions from COT to COTH; from 2^27 on it is #NUM!, as the application's reference says."""
    return x if abs(x) < 2**27 else fail(NUM)


@builtin("CSC", "number")
def csc(x: float) -> float:
    return inverse(math.sin(within(x)))


@builtin("SEC", "number")
def sec(x: float) -> float:
    return inverse(math.cos(within(x)))


@builtin("COT", "number")
def cot(x: float) -> float:
    return inverse(math.tan(within(x)))


@builtin("CSCH", "number")
def csch(x: float) -> float:
    return inverse(math.sinh(x)) if abs(within(x)) < 710 else math.copysign(2.0, x) * math.exp(-abs(x))


@builtin("SECH", "number")
def sech(x: float) -> float:
    return inverse(math.cosh(x)) if abs(within(x)) < 710 else 2.0 * math.exp(-abs(x))


@builtin("COTH", "number")
def coth(x: float) -> float:
    return inverse(math.tanh(within(x)))


@builtin("ASIN", "number")
def asin(x: float) -> float:
    return math.asin(x) if abs(x) <= 1 else fail(NUM)


@builtin("ACOS", "number")
def acos(x: float) -> float:
    return math.acos(x) if abs(x) <= 1 else fail(NUM)


@builtin("ATAN", "number")
def atan(x: float) -> float:
    return math.atan(x)


@builtin("ATAN2", "number number")
def atan2(x: float, y: float) -> float:
    return math.atan2(y, x) if x or y else fail(DIV0)


@builtin("ACOT", "number")
def acot(x: float) -> float:
    return math.pi / 2 - math.atan(x)


@builtin("ACOTH", "number")
def acoth(x: float) -> float:
    return math.atanh(1 / x) if abs(x) > 1 else fail(NUM)


@builtin("SINH", "number")
def sinh(x: float) -> float:
    return math.sinh(x)


@builtin("COSH", "number")
def cosh(x: float) -> float:
    return math.cosh(x)


@builtin("TANH", "number")
def tanh(x: float) -> float:
    return math.tanh(x)


@builtin("ASINH", "number")
def asinh(x: float) -> float:
    return math.asinh(x)


@builtin("ACOSH", "number")
def acosh(x: float) -> float:
    return math.acosh(x) if x >= 1 else fail(NUM)


@builtin("ATANH", "number")
def atanh(x: float) -> float:
    return math.atanh(x) if abs(x) < 1 else fail(NUM)


@builtin("DEGREES", "number")
def degrees(x: float) -> float:
    return math.degrees(x)


@builtin("RADIANS", "number")
def radians(x: float) -> float:
    return math.radians(x)
