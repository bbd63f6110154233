"""Serial numbers and calendar days, in the 1900 system with its day 60 that never was, and in the 1904 system."""

from __future__ import annotations

import math
from datetime import date, timedelta

from cellsection.workbook.builtins.registry import ErrorResult
from cellsection.workbook.coercion import NUM

__all__ = ["LAST", "clock_of", "date_of", "day_of", "serial_of", "weekday_of"]

EPOCH_1900, EPOCH_1904 = date(1899, 12, 30), date(1904, 1, 1)
LAST = 2_958_465  # 9999-12-31


def day_of(serial: float, date1904: bool = False, decimals: int = 0) -> tuple[int, int, int, int]:
    """Year, month, day, and weekday from Monday = 0. Raises #NUM! outside the calendar."""
    whole = math.floor(serial + 0.5 / 86400 / 10**decimals)
    if date1904:
        if not 0 <= whole <= LAST - 1462:
            raise ErrorResult(NUM)
        day = EPOCH_1904 + timedelta(days=whole)
        return day.year, day.month, day.day, day.weekday()
    if not 0 <= whole <= LAST:
        raise ErrorResult(NUM)
    if whole == 60:
        return 1900, 2, 29, 2
    if whole == 0:
        return 1900, 1, 0, 5
    day = EPOCH_1900 + timedelta(days=whole if whole > 60 else whole + 1)
    return day.year, day.month, day.day, (whole + 5) % 7


def clock_of(serial: float, decimals: int = 0) -> tuple[int, int, float]:
    """Hour, minute and second of a serial number, the second rounded to its decimals."""
    fraction = serial - math.floor(serial)
    ticks = round(fraction * 86400 * 10**decimals) % (86400 * 10**decimals)
    seconds = ticks / 10**decimals
    return int(seconds // 3600), int(seconds % 3600 // 60), round(seconds % 60, decimals)


def serial_of(year: int, month: int, day: int, date1904: bool = False) -> float:
    """Serial number of year, month and day; months and days beyond their end run over. Raises #NUM! outside."""
    year += (month - 1) // 12
    month = (month - 1) % 12 + 1
    if not 1900 <= year <= 9999:
        raise ErrorResult(NUM)
    if date1904:
        result = (date(year, month, 1) - EPOCH_1904).days + day - 1
    else:
        first = (date(year, month, 1) - EPOCH_1900).days
        first = first if first > 60 else first - 1
        result = first + day - 1
    if not 0 <= result <= LAST:
        raise ErrorResult(NUM)
    return float(result)


def date_of(serial: float, date1904: bool = False) -> date:
    """A real calendar day for counting; the day that never was counts as the last of February."""
    year, month, day, _ = day_of(serial, date1904)
    if (year, month, day) == (1900, 2, 29):
        return date(1900, 2, 28)
    return date(year, month, day) if day else date(1899, 12, 31)


def weekday_of(serial: float, date1904: bool = False) -> int:
    """Weekday from Monday = 0."""
    return day_of(serial, date1904)[3]
