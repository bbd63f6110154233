"""How one kind of value turns into another, and how two compare: the application's rules, in one place."""

from __future__ import annotations

import re
from datetime import date
from math import isfinite
from unicodedata import combining, normalize

from cellsection.workbook.values import ErrorValue, Scalar

__all__ = [
    "CALC",
    "DIV0",
    "NA",
    "NAME",
    "NULL",
    "NUM",
    "REF",
    "SPILL",
    "VALUE",
    "compared",
    "equal",
    "logical_of",
    "number_of",
    "number_text",
    "serial",
    "text_number",
    "text_of",
]

NULL, DIV0, VALUE, REF, NAME, NUM, NA = (
    ErrorValue(code) for code in ("#NULL!", "#DIV/0!", "#VALUE!", "#REF!", "#NAME?", "#NUM!", "#N/A")
)
SPILL, CALC = ErrorValue("#SPILL!"), ErrorValue("#CALC!")

# Possessive where digits or blanks follow one another, so that no text of any length is gone through again and again.
PLAIN = re.compile(r"[+-]?(?:\d++\.?\d*+|\.\d++)(?:[eE][+-]?\d++)?")
GROUPED = re.compile(
    r"(?P<open>\()?(?P<sign>[+-])?\$?(?P<number>\d{1,3}(?:,\d{3})+(?:\.\d*)?|\d++\.?\d*+(?:[eE][+-]?\d++)?|\.\d++)(?P<percent>%?)(?(open)\))"
)
ISO_DATE = re.compile(r"(\d{4})[-/](\d{1,2})[-/](\d{1,2})(?:[ T]++(.+))?")
US_DATE = re.compile(r"(\d{1,2})/(\d{1,2})/(\d{4}|\d{2})(?:\s++(.+))?")
WORD_DATE = re.compile(r"(\d{1,2})[- ]([A-Za-z]{3,9})[- ](\d{4}|\d{2})|([A-Za-z]{3,9}) (\d{1,2}), ?(\d{4})")
CLOCK = re.compile(r"(\d{1,4}):(\d{1,2})(?::(\d{1,2}(?:\.\d*)?))?(?:\s*([AaPp])\.?[Mm]\.?)?")
MONTHS = ("jan", "feb", "mar", "apr", "may", "jun", "jul", "aug", "sep", "oct", "nov", "dec")


def serial(year: int, month: int, day: int) -> float | None:
    """Serial number of a calendar day in the 1900 system, with its day 60 that never was; None where there is none."""
    if (year, month, day) == (1900, 2, 29):
        return 60.0
    try:
        days = (date(year, month, day) - date(1899, 12, 30)).days
    except ValueError:
        return None
    return float(days if days > 60 else days - 1) if days > 0 else None


def text_number(text: str) -> float | None:
    """The number, date or time that a text spells, None where it spells none."""
    text = text.strip()
    if PLAIN.fullmatch(text):
        number = float(text)
        return number if isfinite(number) else None
    match = GROUPED.fullmatch(text)
    if match:
        number = float(match["number"].replace(",", "")) / (100 if match["percent"] else 1)
        if not isfinite(number):
            return None
        return -number if (match["sign"] == "-") != bool(match["open"]) else number
    return date_number(text)


def date_number(text: str) -> float | None:
    """The serial number of a date, a time or both written as text."""
    if CLOCK.fullmatch(text):
        return clock_number(text)
    if match := ISO_DATE.fullmatch(text):
        parts, clock = (int(match[1]), int(match[2]), int(match[3])), match[4]
    elif match := US_DATE.fullmatch(text):
        parts, clock = (full_year(match[3]), int(match[1]), int(match[2])), match[4]
    elif match := WORD_DATE.fullmatch(text):
        word = (match[2] or match[4])[:3].lower()
        if word not in MONTHS:
            return None
        parts, clock = (full_year(match[3] or match[6]), MONTHS.index(word) + 1, int(match[1] or match[5])), None
    else:
        return None
    days = serial(*parts)
    time = clock_number(clock) if clock else 0.0
    return None if days is None or time is None else days + time


def clock_number(text: str) -> float | None:
    """The part of a day that a time of day spells."""
    match = CLOCK.fullmatch(text)
    if match is None:
        return None
    hours, minutes, seconds = int(match[1]), int(match[2]), float(match[3] or 0)
    if match[4]:
        if not 1 <= hours <= 12:
            return None
        hours = hours % 12 + (12 if match[4] in "Pp" else 0)
    return None if minutes > 59 or seconds >= 60 else (hours * 3600 + minutes * 60 + seconds) / 86400


def full_year(text: str) -> int:
    """A year of two digits as the application reads it: 00-29 is 20xx."""
    year = int(text)
    return year if len(text) == 4 else year + (2000 if year < 30 else 1900)


def number_of(value: Scalar) -> float | ErrorValue:
    """A value as a number: a blank is 0, TRUE is 1, text that spells a number is that number."""
    if value.__class__ is float:
        return value
    if value is None:
        return 0.0
    if isinstance(value, ErrorValue):
        return value
    if isinstance(value, str):
        number = text_number(value)
        return VALUE if number is None else number
    return float(value)


def text_of(value: Scalar) -> str | ErrorValue:
    """A value as text, the way & joins it."""
    if isinstance(value, (str, ErrorValue)):
        return value
    if value is None:
        return ""
    if isinstance(value, bool):
        return "TRUE" if value else "FALSE"
    return number_text(value)


def number_text(x: float) -> str:
    """A number in general format with up to 15 significant digits.

    >>> number_text(0.1 + 0.2), number_text(1e21), number_text(1e-7)
    ('0.3', '1E+21', '0.0000001')
    """
    if x == int(x) and abs(x) < 1e15:
        return str(int(x))
    digits, exponent_text = f"{abs(x):.14e}".split("e")
    mantissa, exponent = digits.rstrip("0").rstrip("."), int(exponent_text)
    sign = "-" if x < 0 else ""
    significant = mantissa.replace(".", "")
    if exponent >= 21 or exponent < -9 or (exponent < 0 and len(significant) - exponent > 20):
        return f"{sign}{mantissa}E{'+' if exponent >= 0 else '-'}{abs(exponent):02d}"
    if exponent >= len(significant) - 1:
        return sign + significant + "0" * (exponent - len(significant) + 1)
    if exponent >= 0:
        return f"{sign}{significant[: exponent + 1]}.{significant[exponent + 1 :]}"
    return f"{sign}0.{'0' * (-exponent - 1)}{significant}"


def logical_of(value: Scalar) -> bool | ErrorValue:
    """A value as a logical: numbers are true unless zero, the words TRUE and FALSE count, other text does not."""
    if isinstance(value, (bool, ErrorValue)):
        return value
    if value is None:
        return False
    if isinstance(value, str):
        return {"TRUE": True, "FALSE": False}.get(value.strip().upper(), VALUE)
    return value != 0.0


def near(a: float, b: float) -> bool:
    """Equal to 15 significant digits."""
    if a == b:
        return True
    return abs(a - b) <= 5e-16 * max(abs(a), abs(b)) * 2 and f"{a:.14e}" == f"{b:.14e}"


def rank(value: Scalar) -> int:
    """Numbers come before text, text before logicals."""
    return 2 if isinstance(value, bool) else 1 if isinstance(value, str) else 0


def unaccented(text: str) -> str:
    """A text without its accents: words are put in order by their letters first."""
    return "".join(c for c in normalize("NFD", text) if not combining(c))


def compared(a: Scalar, b: Scalar) -> int:
    """-1, 0 or 1 as a comes before, with or after b; neither is an error value."""
    if a is None:
        a = "" if isinstance(b, str) else False if isinstance(b, bool) else 0.0
    if b is None:
        b = "" if isinstance(a, str) else False if isinstance(a, bool) else 0.0
    if (rank_a := rank(a)) != (rank_b := rank(b)):
        return -1 if rank_a < rank_b else 1
    if isinstance(a, str) and isinstance(b, str):
        x, y = a.casefold(), b.casefold()
        if x != y and not (x.isascii() and y.isascii()):  # an accent decides only between words alike without it
            x, y = (unaccented(x), x), (unaccented(y), y)  # type: ignore[assignment]
        return (x > y) - (x < y)
    if isinstance(a, float) and isinstance(b, float) and near(a, b):
        return 0
    return (a > b) - (a < b)  # type: ignore[operator]


def equal(a: Scalar, b: Scalar) -> bool:
    """Whether the application's = holds; errors equal nothing."""
    return compared(a, b) == 0
