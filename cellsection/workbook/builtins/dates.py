"""Dates and times."""

from __future__ import annotations

import math
from calendar import monthrange
from datetime import date
from typing import Any

from cellsection.workbook.builtins.calendar import clock_of, date_of, day_of, serial_of, weekday_of
from cellsection.workbook.builtins.mathematics import fail
from cellsection.workbook.builtins.registry import Context, ErrorResult, builtin
from cellsection.workbook.builtins.traits import cells_of
from cellsection.workbook.coercion import NUM, VALUE, date_number, number_of
from cellsection.workbook.values import ErrorValue

WEEKENDS = {
    1: (5, 6), 2: (6, 0), 3: (0, 1), 4: (1, 2), 5: (2, 3), 6: (3, 4), 7: (4, 5),
    11: (6,), 12: (0,), 13: (1,), 14: (2,), 15: (3,), 16: (4,), 17: (5,),
}  # fmt: skip


@builtin("DATE", "context number number number")
def date_(context: Context, year: float, month: float, day: float) -> float:
    y = int(year)
    if y < 0 or y >= 10_000:
        return fail(NUM)
    return serial_of(y + 1900 if y < 1900 else y, int(month), int(day), context.date1904)


@builtin("TIME", "number number number")
def time_(hour: float, minute: float, second: float) -> float:
    seconds = int(hour) * 3600 + int(minute) * 60 + int(second)
    return seconds % 86400 / 86400 if seconds >= 0 else fail(NUM)


@builtin("DATEVALUE", "text")
def datevalue(text: str) -> Any:
    serial = date_number(text.strip())
    return VALUE if serial is None else float(math.floor(serial))


@builtin("TIMEVALUE", "text")
def timevalue(text: str) -> Any:
    serial = date_number(text.strip())
    return VALUE if serial is None else serial % 1


@builtin("YEAR", "context number")
def year(context: Context, serial: float) -> float:
    return float(day_of(math.floor(serial), context.date1904)[0])


@builtin("MONTH", "context number")
def month(context: Context, serial: float) -> float:
    return float(day_of(math.floor(serial), context.date1904)[1])


@builtin("DAY", "context number")
def day(context: Context, serial: float) -> float:
    return float(day_of(math.floor(serial), context.date1904)[2])


@builtin("HOUR", "number")
def hour(serial: float) -> float:
    return float(clock_of(serial)[0]) if serial >= 0 else fail(NUM)


@builtin("MINUTE", "number")
def minute(serial: float) -> float:
    return float(clock_of(serial)[1]) if serial >= 0 else fail(NUM)


@builtin("SECOND", "number")
def second(serial: float) -> float:
    return float(clock_of(serial)[2]) if serial >= 0 else fail(NUM)


@builtin("TODAY", "context", volatile="day")
def today(context: Context) -> float:
    now = context.now()
    return serial_of(now.year, now.month, now.day, context.date1904)


@builtin("NOW", "context", volatile="time")
def now_(context: Context) -> float:
    now = context.now()
    fraction = (now.hour * 3600 + now.minute * 60 + now.second) / 86400
    return serial_of(now.year, now.month, now.day, context.date1904) + fraction


@builtin("WEEKDAY", "context number number?")
def weekday(context: Context, serial: float, kind: float = 1.0) -> float:
    d = weekday_of(math.floor(serial), context.date1904)
    k = int(kind)
    if k == 1:
        return float((d + 1) % 7 + 1)
    if k == 2:
        return float(d + 1)
    if k == 3:
        return float(d)
    return float((d - (k - 11)) % 7 + 1) if 11 <= k <= 17 else fail(NUM)


@builtin("WEEKNUM", "context number number?")
def weeknum(context: Context, serial: float, kind: float = 1.0) -> float:
    k = int(kind)
    if k == 21:
        return isoweeknum(context, serial)
    starts = {1: 6, 2: 0, 11: 0, 12: 1, 13: 2, 14: 3, 15: 4, 16: 5, 17: 6}
    if k not in starts:
        return fail(NUM)
    y = day_of(math.floor(serial), context.date1904)[0]
    first = serial_of(y, 1, 1, context.date1904)
    shift = (weekday_of(first, context.date1904) - starts[k]) % 7
    return float((math.floor(serial) - int(first) + shift) // 7 + 1)


@builtin("ISOWEEKNUM", "context number")
def isoweeknum(context: Context, serial: float) -> float:
    return float(date_of(math.floor(serial), context.date1904).isocalendar()[1])


def months_on(context: Context, serial: float, months: float) -> tuple[int, int, int]:
    """Year, month and day a number of months later."""
    y, m, d, _ = day_of(math.floor(serial), context.date1904)
    m += int(months)
    return y + (m - 1) // 12, (m - 1) % 12 + 1, d


@builtin("EDATE", "context number number")
def edate(context: Context, serial: float, months: float) -> float:
    y, m, d = months_on(context, serial, months)
    if not 1900 <= y <= 9999:
        return fail(NUM)
    return serial_of(y, m, min(d, monthrange(y, m)[1]), context.date1904)


@builtin("EOMONTH", "context number number")
def eomonth(context: Context, serial: float, months: float) -> float:
    y, m, _ = months_on(context, serial, months)
    if not 1900 <= y <= 9999:
        return fail(NUM)
    return serial_of(y, m + 1, 1, context.date1904) - 1


@builtin("DAYS", "number number")
def days(end: float, start: float) -> float:
    if start < 0 or end < 0:
        return fail(NUM)
    return float(math.floor(end) - math.floor(start))


def days_360(start: tuple[int, int, int], end: tuple[int, int, int], european: bool) -> int:
    """Days between two days of a year of twelve months of 30 days (30/360 conventions)."""
    (y1, m1, d1), (y2, m2, d2) = start, end
    if european:
        d1, d2 = min(d1, 30), min(d2, 30)
    else:
        last = d1 == monthrange(y1, m1)[1]
        if d2 == 31 and (d1 >= 30 or (m1 == 2 and last)):
            d2 = 30
        if d1 == 31 or (m1 == 2 and last):
            d1 = 30
    return (y2 - y1) * 360 + (m2 - m1) * 30 + d2 - d1


@builtin("DAYS360", "context number number logical?")
def days360(context: Context, start: float, end: float, european: bool = False) -> float:
    a, b = (day_of(each, context.date1904)[:3] for each in (start, end))  # the last half second is the next day
    return float(days_360(a, b, european))


@builtin("YEARFRAC", "context number number number?")
def yearfrac(context: Context, start: float, end: float, basis: float = 0.0) -> float:
    kind = int(basis)
    if not 0 <= kind <= 4:
        return fail(NUM)
    a, b = sorted((math.floor(start), math.floor(end)))
    return year_fraction(date_of(a, context.date1904), date_of(b, context.date1904), kind, b - a)


def year_fraction(a: date, b: date, basis: int, days_between: int) -> float:
    """Years between two days by a day count basis: 30/360 US, actual, actual/360, actual/365, 30/360 European."""
    if basis == 0:
        (y1, m1, d1), (y2, m2, d2) = (a.year, a.month, a.day), (b.year, b.month, b.day)
        last1, last2 = d1 == monthrange(y1, m1)[1], d2 == monthrange(y2, m2)[1]
        if m1 == 2 and last1 and m2 == 2 and last2:
            d2 = 30
        if m1 == 2 and last1:
            d1 = 30
        if d2 == 31 and d1 >= 30:
            d2 = 30
        if d1 == 31:
            d1 = 30
        return ((y2 - y1) * 360 + (m2 - m1) * 30 + d2 - d1) / 360
    if basis == 4:
        return days_360((a.year, a.month, a.day), (b.year, b.month, b.day), True) / 360
    if basis in (2, 3):
        return days_between / (360 if basis == 2 else 365)
    return days_between / average_year(a, b)


def average_year(a: date, b: date) -> float:
    """Length of a year for the actual/actual basis."""
    within = a.year == b.year or (b.year == a.year + 1 and (a.month, a.day) >= (b.month, b.day))
    if within:
        leap = (monthrange(a.year, 2)[1] == 29 and (a.month, a.day) <= (2, 29) and b >= date(a.year, 2, 29)) or (
            monthrange(b.year, 2)[1] == 29 and b >= date(b.year, 2, 29) and a <= date(b.year, 2, 29)
        )
        if a.year == b.year:
            leap = monthrange(a.year, 2)[1] == 29
        return 366.0 if leap else 365.0
    years = b.year - a.year + 1
    return (date(b.year + 1, 1, 1) - date(a.year, 1, 1)).days / years


@builtin("DATEDIF", "context number number text")
def datedif(context: Context, start: float, end: float, unit: str) -> float:
    if start > end:
        return fail(NUM)
    y1, m1, d1, _ = day_of(math.floor(start), context.date1904)
    y2, m2, d2, _ = day_of(math.floor(end), context.date1904)
    months = (y2 - y1) * 12 + m2 - m1 - (d2 < d1)
    kind = unit.strip().upper()
    if kind == "D":
        return float(math.floor(end) - math.floor(start))
    if kind == "M":
        return float(months)
    if kind == "Y":
        return float(months // 12)
    if kind == "YM":
        return float(months % 12)
    if kind == "MD":
        if d2 >= d1:
            return float(d2 - d1)
        previous = serial_of(y2, m2 - 1, d1, context.date1904)
        return math.floor(end) - previous
    if kind == "YD":
        year_on = y2 if (m2, d2) >= (m1, d1) else y2 - 1
        return math.floor(end) - serial_of(year_on, m1, d1, context.date1904)
    return fail(NUM)


def free_days(weekend: Any) -> tuple[int, ...]:
    """Weekend days from Monday = 0, from a number or a text of seven 0 and 1."""
    if weekend is None:
        return (5, 6)
    if isinstance(weekend, str):
        if len(weekend) != 7 or set(weekend) - {"0", "1"} or weekend == "1111111":
            raise ErrorResult(VALUE)
        return tuple(k for k, c in enumerate(weekend) if c == "1")
    number = number_of(weekend)
    if isinstance(number, ErrorValue) or int(number) not in WEEKENDS:
        raise ErrorResult(NUM)
    return WEEKENDS[int(number)]


def holidays_of(area: Any) -> set[int]:
    """Holidays as whole serial numbers."""
    found = set()
    for cell in cells_of(area) if area is not None else ():
        if cell is None:
            continue
        number = number_of(cell)
        if isinstance(number, ErrorValue):
            raise ErrorResult(number)
        found.add(math.floor(number))
    return found


def work_days(start: int, end: int, free: tuple[int, ...], holidays: set[int], date1904: bool) -> int:
    """Working days from start to end, both counted; negative where end comes first."""
    if start > end:
        return -work_days(end, start, free, holidays, date1904)
    first, n = weekday_of(start, date1904), end - start + 1
    weeks, rest = divmod(n, 7)
    free_count = weeks * len(free) + sum((first + k) % 7 in free for k in range(rest))
    off = sum(start <= h <= end and weekday_of(h, date1904) not in free for h in holidays)
    return n - free_count - off


@builtin("NETWORKDAYS", "context number number range?")
def networkdays(context: Context, start: float, end: float, holidays: Any = None) -> float:
    return float(work_days(math.floor(start), math.floor(end), (5, 6), holidays_of(holidays), context.date1904))


@builtin("NETWORKDAYS.INTL", "context number number value? range?")
def networkdays_intl(context: Context, start: float, end: float, weekend: Any = None, holidays: Any = None) -> float:
    if weekend == "1111111":  # "using 1111111 will always return 0"; WORKDAY.INTL refuses it
        return 0.0
    free = free_days(weekend)
    return float(work_days(math.floor(start), math.floor(end), free, holidays_of(holidays), context.date1904))


def work_day(start: int, steps: int, free: tuple[int, ...], holidays: set[int], date1904: bool) -> float:
    """The day a number of working days on."""
    if abs(steps) > 3_000_000:
        return fail(NUM)
    at, step = start, 1 if steps > 0 else -1
    for _ in range(abs(steps)):
        at += step
        while weekday_of(at, date1904) in free or at in holidays:
            at += step
    return float(at)


@builtin("WORKDAY", "context number number range?")
def workday(context: Context, start: float, steps: float, holidays: Any = None) -> float:
    return work_day(math.floor(start), int(steps), (5, 6), holidays_of(holidays), context.date1904)


@builtin("WORKDAY.INTL", "context number number value? range?")
def workday_intl(context: Context, start: float, steps: float, weekend: Any = None, holidays: Any = None) -> float:
    return work_day(math.floor(start), int(steps), free_days(weekend), holidays_of(holidays), context.date1904)
