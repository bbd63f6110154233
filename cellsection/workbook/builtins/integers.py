"""Whole numbers: divisors, factorials, combinations, number bases, bits, Roman numerals, random numbers."""

from __future__ import annotations

import math
from typing import Any

from cellsection.workbook.builtins.mathematics import fail
from cellsection.workbook.builtins.registry import Context, builtin
from cellsection.workbook.builtins.traits import cells_of, is_area, numbers
from cellsection.workbook.coercion import NUM, VALUE
from cellsection.workbook.operators import check_array
from cellsection.workbook.values import Scalar

DIGITS = "0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ"
ROMAN = (
    (1000, "M"), (900, "CM"), (500, "D"), (400, "CD"), (100, "C"), (90, "XC"), (50, "L"), (40, "XL"), (10, "X"),
    (9, "IX"), (5, "V"), (4, "IV"), (1, "I"),
)  # fmt: skip


def naturals(arguments: Any) -> list[int]:
    """Arguments as whole numbers from 0; text in a cell is #VALUE!, as the application's reference says."""
    if any(isinstance(cell, str) for argument in arguments if is_area(argument) for cell in cells_of(argument)):
        fail(VALUE)
    found = [int(x) for x in numbers(arguments)]
    if any(x < 0 for x in found):
        fail(NUM)
    return found


@builtin("GCD", "range+")
def gcd(*arguments: Any) -> float:
    return float(math.gcd(*naturals(arguments)))


@builtin("LCM", "range+")
def lcm(*arguments: Any) -> float:
    given, multiple = list(naturals(arguments)), 1
    if 0 in given:
        return 0.0
    for each in given:
        multiple = math.lcm(multiple, each)
        if multiple >> 1024:  # no float holds it any more, and it would only grow
            return fail(NUM)
    return float(multiple)


@builtin("FACT", "number")
def fact(x: float) -> float:
    return float(math.factorial(int(x))) if 0 <= x < 171 else fail(NUM)


@builtin("FACTDOUBLE", "number")
def factdouble(x: float) -> float:
    n = int(x)
    if n < -1 or n > 300:
        return fail(NUM)
    return float(math.prod(range(n, 0, -2))) if n > 0 else 1.0


def choices(n: int, k: int) -> float:
    """Number of ways to choose k out of n; #NUM! where it is beyond a number, told from its logarithm first."""
    if not n >= k >= 0:
        return fail(NUM)
    if math.lgamma(n + 1) - math.lgamma(k + 1) - math.lgamma(n - k + 1) > 710:
        return fail(NUM)
    return float(math.comb(n, k)) if min(k, n - k) < 10_000 else fail(NUM)


@builtin("COMBIN", "number number")
def combin(n: float, k: float) -> float:
    return choices(int(n), int(k))


@builtin("COMBINA", "number number")
def combina(n: float, k: float) -> float:
    a, b = int(n), int(k)
    if a < 0 or b < 0 or (a == 0 and b > 0):
        return fail(NUM)
    return choices(a + b - 1, b) if a else 1.0


@builtin("PERMUT", "number number")
def permut(n: float, k: float) -> float:
    a, b = int(n), int(k)
    if not a >= b >= 0 or math.lgamma(a + 1) - math.lgamma(a - b + 1) > 710:
        return fail(NUM)
    return float(math.perm(a, b))


@builtin("PERMUTATIONA", "number number")
def permutationa(n: float, k: float) -> float:
    return float(int(n)) ** int(k) if n >= 0 and k >= 0 else fail(NUM)


@builtin("MULTINOMIAL", "range+")
def multinomial(*arguments: Any) -> float:
    if any(isinstance(cell, bool) for argument in arguments for cell in cells_of(argument)):
        return fail(VALUE)
    parts = naturals(arguments)
    if sum(parts) > 170:
        return fail(NUM)
    return float(math.factorial(sum(parts)) // math.prod(map(math.factorial, parts)))


@builtin("BASE", "number number number?")
def base(x: float, radix: float, least: float = 0.0) -> str:
    n, r, width = int(x), int(radix), int(least)
    if not (0 <= n < 2**53 and 2 <= r <= 36 and 0 <= width <= 255):
        fail(NUM)
    text = ""
    while n:
        n, rest = divmod(n, r)
        text = DIGITS[rest] + text
    return (text or ("" if width else "0")).rjust(width, "0")


@builtin("DECIMAL", "text number")
def decimal(text: str, radix: float) -> float:
    if not 2 <= int(radix) <= 36:
        return fail(NUM)
    try:
        return float(int(text.strip() or "0", int(radix)))
    except ValueError:
        return fail(NUM)


def from_base(text: str, radix: int) -> float:
    """A number of at most ten digits, the first bit of the tenth its sign."""
    bits = {2: 10, 8: 30, 16: 40}[radix]
    if len(text) > 10:
        return fail(NUM)
    try:
        n = int(text or "0", radix)
    except ValueError:
        return fail(NUM)
    if "-" in text or "_" in text:
        return fail(NUM)
    return float(n - 2**bits if n >= 2 ** (bits - 1) else n)


def to_base(n: float, radix: int, places: float | None) -> str:
    """A whole number in another base, negative ones as complements of ten digits."""
    bits = {2: 10, 8: 30, 16: 40}[radix]
    value = int(n)  # "if number is not an integer, it is truncated"
    if not -(2 ** (bits - 1)) <= value < 2 ** (bits - 1):
        fail(NUM)
    text = format(value % 2**bits, {2: "b", 8: "o", 16: "X"}[radix])
    if places is None or value < 0:
        return text
    if int(places) < len(text) or int(places) > 10:
        fail(NUM)
    return text.rjust(int(places), "0")


def declare_bases() -> None:
    """BIN2DEC, DEC2BIN, BIN2HEX and the others of their table."""
    radices = {"BIN": 2, "OCT": 8, "HEX": 16}
    for name, radix in radices.items():
        builtin(f"{name}2DEC", "text")(lambda text, radix=radix: from_base(text, radix))
        builtin(f"DEC2{name}", "number number?")(lambda x, places=None, radix=radix: to_base(x, radix, places))
        for other, target in radices.items():
            if other != name:
                builtin(f"{name}2{other}", "text number?")(
                    lambda text, places=None, radix=radix, target=target: to_base(
                        from_base(text, radix), target, places
                    )
                )


declare_bases()


def bits(x: float) -> int:
    """A whole number of at most 48 bits."""
    if x < 0 or x != int(x) or x >= 2**48:
        fail(NUM)
    return int(x)


@builtin("BITAND", "number number")
def bitand(x: float, y: float) -> float:
    return float(bits(x) & bits(y))


@builtin("BITOR", "number number")
def bitor(x: float, y: float) -> float:
    return float(bits(x) | bits(y))


@builtin("BITXOR", "number number")
def bitxor(x: float, y: float) -> float:
    return float(bits(x) ^ bits(y))


def shifted(x: float, by: float) -> float:
    """X moved left by so many bits, right where it is negative."""
    n = int(by)
    if abs(n) > 53:
        return fail(NUM)
    result = bits(x) << n if n >= 0 else bits(x) >> -n
    return float(result) if result < 2**48 else fail(NUM)


@builtin("BITLSHIFT", "number number")
def bitlshift(x: float, by: float) -> float:
    return shifted(x, by)


@builtin("BITRSHIFT", "number number")
def bitrshift(x: float, by: float) -> float:
    return shifted(x, -by)


@builtin("ROMAN", "context number value?")
def roman(context: Context, x: float, form: Scalar = None) -> str:
    if form not in (None, 0.0, True):
        context.unsupported("ROMAN in a shortened form")
    n = int(x)
    if not 0 <= n <= 3999:
        fail(VALUE)
    text = ""
    for value, letters in ROMAN:
        while n >= value:
            text += letters
            n -= value
    return text


@builtin("ARABIC", "text")
def arabic(text: str) -> float:
    rest, sign, result = text.strip().upper(), 1, 0
    if rest.startswith("-"):
        rest, sign = rest[1:], -1
    for value, letters in ROMAN:
        while rest.startswith(letters):
            result += value
            rest = rest[len(letters) :]
    return float(sign * result) if not rest else fail(VALUE)


@builtin("RAND", "context", volatile="chance")
def rand(context: Context) -> float:
    return context.chance().random()


@builtin("RANDBETWEEN", "context number number", volatile="chance")
def randbetween(context: Context, low: float, high: float) -> float:
    first, last = math.ceil(low), math.floor(high)
    return float(context.chance().randint(first, last)) if first <= last else fail(NUM)


@builtin("RANDARRAY", "context number? number? number? number? logical?", volatile="chance")
def randarray(
    context: Context, rows: float = 1, columns: float = 1, low: float = 0, high: float = 1, whole: bool = False
) -> Any:
    if rows < 1 or columns < 1:
        fail(VALUE)
    check_array(int(rows) * int(columns))

    random = context.chance()

    def draw() -> float:
        return float(random.randint(int(low), int(high))) if whole else random.uniform(low, high)

    return tuple(tuple(draw() for _ in range(int(columns))) for _ in range(int(rows)))
