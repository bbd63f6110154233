"""Complex numbers, which a cell holds as text: "3+4i", "-2.5j", "7"."""

from __future__ import annotations

import cmath
import math
import re
from collections.abc import Callable
from typing import Any

from cellsection.workbook.builtins.registry import ErrorResult, builtin
from cellsection.workbook.builtins.traits import cells_of
from cellsection.workbook.coercion import DIV0, NUM, VALUE, number_text, text_of
from cellsection.workbook.values import ErrorValue, Scalar

DIGITS = r"(?:\d++\.?\d*+|\.\d++)(?:[eE][+-]?\d++)?"  # possessive: no digit is gone through twice
IMAGINARY = re.compile(rf"(?P<imaginary>[+-]?(?:{DIGITS})?)(?P<unit>[ij])")
FULL = re.compile(rf"(?P<real>[+-]?{DIGITS})(?:(?P<imaginary>[+-](?:{DIGITS})?)(?P<unit>[ij]))?")


def read(cell: Scalar) -> tuple[complex, str]:
    """A complex number and the letter of its imaginary unit, "" where it has none."""
    if isinstance(cell, bool):
        raise ErrorResult(VALUE)
    if cell is None or isinstance(cell, float):
        return complex(cell or 0.0), ""
    text = text_of(cell)
    if isinstance(text, ErrorValue):
        raise ErrorResult(text)
    if match := IMAGINARY.fullmatch(text.strip()):
        real = 0.0
    elif match := FULL.fullmatch(text.strip()):
        real = float(match["real"])
    else:
        raise ErrorResult(NUM)
    imaginary = match["imaginary"]
    if imaginary in ("", "+", "-"):  # a unit without digits is one of it
        imaginary += "1"
    return complex(real, float(imaginary or 0)), match["unit"] or ""


def written(z: complex, unit: str) -> str:
    """A complex number as text with up to 15 significant digits in each part."""
    if not (math.isfinite(z.real) and math.isfinite(z.imag)):
        raise ErrorResult(NUM)
    if z.imag == 0:
        return number_text(z.real)
    size = "" if abs(z.imag) == 1 else number_text(abs(z.imag))
    sign = "-" if z.imag < 0 else "+" if z.real else ""
    return (number_text(z.real) if z.real else "") + sign + size + (unit or "i")


def one_unit(units: list[str]) -> str:
    """The letter that all numbers use; #VALUE! where i and j are mixed."""
    met = set(units) - {""}
    if len(met) > 1:
        raise ErrorResult(VALUE)
    return met.pop() if met else "i"


@builtin("COMPLEX", "measure measure text?")
def complex_(real: float, imaginary: float, unit: str = "i") -> str:
    if unit not in ("i", "j", ""):
        raise ErrorResult(VALUE)
    return written(complex(real, imaginary), unit)


@builtin("IMREAL", "value")
def imreal(cell: Scalar) -> float:
    return read(cell)[0].real


@builtin("IMAGINARY", "value")
def imaginary_(cell: Scalar) -> float:
    return read(cell)[0].imag


@builtin("IMABS", "value")
def imabs(cell: Scalar) -> float:
    return abs(read(cell)[0])


@builtin("IMARGUMENT", "value")
def imargument(cell: Scalar) -> float:
    z = read(cell)[0]
    if z == 0:
        raise ErrorResult(DIV0)
    return cmath.phase(z)


def power(z: complex, exponent: float) -> complex:
    """A power by modulus and argument, as the standard defines it."""
    if z == 0:
        if exponent <= 0:
            raise ErrorResult(NUM)
        return 0j
    r, angle = abs(z) ** exponent, cmath.phase(z) * exponent
    return complex(r * math.cos(angle), r * math.sin(angle))


@builtin("IMPOWER", "value measure")
def impower(cell: Scalar, exponent: float) -> str:
    z, unit = read(cell)
    return written(power(z, exponent), unit)


@builtin("IMSUB", "value value")
def imsub(a: Scalar, b: Scalar) -> str:
    (x, u), (y, v) = read(a), read(b)
    return written(x - y, one_unit([u, v]))


@builtin("IMDIV", "value value")
def imdiv(a: Scalar, b: Scalar) -> str:
    (x, u), (y, v) = read(a), read(b)
    if y == 0:
        raise ErrorResult(NUM)
    return written(x / y, one_unit([u, v]))


def listed(arguments: tuple[Any, ...]) -> tuple[list[complex], str]:
    """All numbers among the arguments, blanks left out, and their letter."""
    found = [read(cell) for argument in arguments for cell in cells_of(argument) if cell is not None]
    return [z for z, _ in found], one_unit([unit for _, unit in found])


@builtin("IMSUM", "range+")
def imsum(*arguments: Any) -> str:
    numbers, unit = listed(arguments)
    return written(sum(numbers, 0j), unit)


@builtin("IMPRODUCT", "range+")
def improduct(*arguments: Any) -> str:
    numbers, unit = listed(arguments)
    result = 1 + 0j
    for z in numbers:
        result *= z
    return written(result if numbers else 0j, unit)


def nonzero(z: complex) -> complex:
    """A divisor or the argument of a logarithm; #NUM! of zero."""
    if z == 0:
        raise ErrorResult(NUM)
    return z


FUNCTIONS: dict[str, Callable[[complex], complex]] = {
    "IMCONJUGATE": lambda z: z.conjugate(),
    "IMSQRT": lambda z: power(z, 0.5) if z else 0j,
    "IMEXP": cmath.exp,
    "IMLN": lambda z: cmath.log(nonzero(z)),
    "IMLOG10": lambda z: cmath.log(nonzero(z)) / math.log(10),
    "IMLOG2": lambda z: cmath.log(nonzero(z)) / math.log(2),
    "IMSIN": cmath.sin,
    "IMCOS": cmath.cos,
    "IMTAN": cmath.tan,
    "IMSINH": cmath.sinh,
    "IMCOSH": cmath.cosh,
    "IMSEC": lambda z: 1 / nonzero(cmath.cos(z)),
    "IMCSC": lambda z: 1 / nonzero(cmath.sin(z)),
    "IMCOT": lambda z: 1 / nonzero(cmath.tan(z)),
    "IMSECH": lambda z: 1 / nonzero(cmath.cosh(z)),
    "IMCSCH": lambda z: 1 / nonzero(cmath.sinh(z)),
}


def declare_functions() -> None:
    """The functions of one complex number."""
    for name, function in FUNCTIONS.items():

        def call(cell: Scalar, function: Callable[[complex], complex] = function) -> str:
            z, unit = read(cell)
            return written(function(z), unit)

        builtin(name, "value")(call)


declare_functions()
