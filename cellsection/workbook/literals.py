"""Values as the files spell them: numbers, dates, durations. What cannot be read is an error value that says so."""

from __future__ import annotations

import re
from datetime import datetime, time, timedelta
from math import isfinite

from cellsection.workbook.values import ErrorValue, Scalar

__all__ = ["read_date", "read_duration", "read_number"]

DURATION = re.compile(
    r"(-?)P(?:(\d+)Y)?(?:(\d+)M)?(?:(\d+)D)?(?:T(?:(\d+)H)?(?:(\d+)M)?(?:(\d+(?:[.,]\d+)?)S)?)?", re.ASCII
)
DAY = timedelta(days=1)
EPOCH, EPOCH_1904 = datetime(1899, 12, 30), datetime(1904, 1, 1)
LEAP = datetime(1900, 3, 1)  # from here on serial numbers agree with the calendar, see read_date


def unreadable(text: str, what: str) -> ErrorValue:
    """The value of a cell whose saved value cannot be read."""
    return ErrorValue("#NUM!", f'its saved value "{text[:24]}" is no {what}')


def read_number(text: str) -> Scalar:
    """A number; blank space is a blank.

    >>> read_number("1.5E3"), read_number(" "), str(read_number("1_000"))
    (1500.0, None, '#NUM!')
    """
    if not text.strip():
        return None
    try:
        number = float(text)
    except ValueError:
        return unreadable(text, "number")
    return number if isfinite(number) and text.isascii() and "_" not in text else unreadable(text, "number")


def read_date(text: str, epoch: datetime = EPOCH, day_60: bool = False) -> Scalar:
    """An ISO date, a date with its time or a time alone, as a serial number counted from `epoch`.

    day_60 : serial numbers count a 29 February 1900 that never was, as the .xlsx application does by its 1900 system

    >>> read_date("2024-03-01T12:00:00"), read_date("1900-01-01", day_60=True), read_date("06:00:00")
    (45352.5, 1.0, 0.25)
    """
    try:
        if ":" in text and "-" not in text:
            clock = time.fromisoformat(text.rstrip("Zz"))
            return (datetime.combine(epoch, clock) - epoch) / DAY
        moment = datetime.fromisoformat(text.rstrip("Zz")).replace(tzinfo=None)
        return (moment - epoch) / DAY - (1.0 if day_60 and moment < LEAP else 0.0)
    except (ValueError, OverflowError):
        return unreadable(text, "date")


def read_duration(text: str) -> Scalar:
    """A duration as days.

    >>> read_duration("PT12H30M"), read_duration("-P1DT06H00M00S"), str(read_duration("noon"))
    (0.5208333333333334, -1.25, '#NUM!')
    """
    match = DURATION.fullmatch(text)
    if match is None or match[2] or match[3]:  # years and months have no length of their own
        return unreadable(text, "duration")
    days, hours, minutes = (int(each or 0) for each in match.group(4, 5, 6))
    total = days + (hours * 3600 + minutes * 60 + float((match[7] or "0").replace(",", "."))) / 86400
    return -total if match[1] else total
