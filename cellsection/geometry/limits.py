"""Dimensions that are impossible, refused in the engineer's words.

Every limit has the slack of a rounding error, so that a radius computed to fill its space exactly is accepted.
Where a dimension may equal its limit and where it must stay below is decided shape by shape, and said there.
"""

from __future__ import annotations

from cellsection.errors import InputError

__all__ = ["SMALLEST", "at_most", "below", "not_negative", "place", "positive"]

SLACK = 1e-12
# Beyond these, fourth powers leave the range of floating point numbers.
LARGEST, SMALLEST = 1e50, 1e-50


def place(column: str, value: float) -> None:
    """Refuse a coordinate or offset that is no number, or too large to compute with.

    >>> place("x", float("nan"))
    Traceback (most recent call last):
    cellsection.errors.InputError: column x: x = nan is not a number to compute with. Enter a number below 1e+50.
    """
    if not abs(value) <= LARGEST:
        raise InputError(
            f"{column} = {value:g} is not a number to compute with",
            remedy=f"Enter a number below {LARGEST:g}",
            column=column,
        )


def positive(column: str, value: float) -> None:
    """Refuse a size that is zero, negative, no number, or beyond all lengths."""
    place(column, value)
    if not value > 0.0:
        kind = "an angle" if column == "angle" else "a length"
        raise InputError(f"{column} = {value:g} is not positive", remedy=f"Enter {kind} greater than 0", column=column)
    if value < SMALLEST:
        raise InputError(f"{column} = {value:g} is too small", remedy="Enter it in a smaller unit", column=column)


def not_negative(column: str, value: float) -> None:
    """Refuse a radius, lip or slope that is negative or no number; 0 means there is none."""
    place(column, value)
    if value < 0.0:
        raise InputError(
            f"{column} = {value:g} is negative", remedy="Enter 0 or more, or leave it blank", column=column
        )


def at_most(column: str, value: float, limit: float, meaning: str, remedy: str) -> None:
    """Refuse a value above its limit; equal is accepted.

    meaning : what the limit is, in words and letters: "the clear depth h - 2·tf"

    >>> at_most("r", 30.0, 25.0, "half of the clear depth", "Enter a smaller radius")
    Traceback (most recent call last):
    cellsection.errors.InputError: column r: r = 30 is more than 25, half of the clear depth. Enter a smaller radius.
    """
    if value > limit + SLACK * abs(limit):
        raise InputError(f"{column} = {value:g} is more than {limit:g}, {meaning}", remedy=remedy, column=column)


def below(column: str, value: float, limit: float, meaning: str, remedy: str) -> None:
    """Refuse a value at or above its limit.

    >>> below("t", 25.0, 25.0, "half of d: the bore vanishes", "Use a circle")
    Traceback (most recent call last):
    cellsection.errors.InputError: column t: t = 25 is not below 25, half of d: the bore vanishes. Use a circle.
    """
    if value >= limit - SLACK * abs(limit):
        raise InputError(f"{column} = {value:g} is not below {limit:g}, {meaning}", remedy=remedy, column=column)
