"""Securities: coupon days, accrued interest, price and yield (OpenFormula 1.2, part 4, financial functions)."""

from __future__ import annotations

import math
from calendar import monthrange
from datetime import date
from typing import Any

from cellsection.workbook.builtins.calendar import date_of, serial_of
from cellsection.workbook.builtins.dates import days_360, year_fraction
from cellsection.workbook.builtins.financial import solved
from cellsection.workbook.builtins.mathematics import fail
from cellsection.workbook.builtins.registry import Context, builtin
from cellsection.workbook.coercion import NUM


def calendar_days(context: Context, *serials: float) -> list[date]:
    """Serial numbers as calendar days."""
    return [date_of(math.floor(serial), context.date1904) for serial in serials]


def basis_of(basis: float) -> int:
    """A day count basis: 0 30/360 US, 1 actual, 2 actual/360, 3 actual/365, 4 30/360 European."""
    return int(basis) if 0 <= int(basis) <= 4 else int(fail(NUM))


def frequency_of(frequency: float) -> int:
    """Coupons a year: 1, 2 or 4."""
    return int(frequency) if int(frequency) in (1, 2, 4) else int(fail(NUM))


def counted(a: date, b: date, basis: int) -> int:
    """Days from a to b as the basis counts them."""
    if basis in (0, 4):
        return days_360((a.year, a.month, a.day), (b.year, b.month, b.day), basis == 4)
    return (b - a).days


def fraction(a: date, b: date, basis: int) -> float:
    """Years from a to b."""
    return year_fraction(a, b, basis, (b - a).days)


def stepped(end: date, months: int) -> date:
    """A coupon day so many months before or after the end; the last of a month stays the last."""
    first = end.year * 12 + end.month - 1 + months
    year, month = divmod(first, 12)
    if not 1899 <= year <= 9998:
        fail(NUM)
    last = monthrange(year, month + 1)[1]
    whole = end.day == monthrange(end.year, end.month)[1]
    return date(year, month + 1, last if whole else min(end.day, last))


def around(day: date, end: date, frequency: int) -> tuple[date, date, int]:
    """The coupon days before (or on) and after a day, and how many come after it up to the end."""
    step = 12 // frequency
    count = max(((end.year - day.year) * 12 + end.month - day.month) // step, 0)
    while stepped(end, -count * step) > day:
        count += 1
    while count and stepped(end, -(count - 1) * step) <= day:
        count -= 1
    return stepped(end, -count * step), stepped(end, -(count - 1) * step), count


def period(start: date, end: date, frequency: int, basis: int) -> float:
    """Length of a coupon period in days."""
    if basis == 1:
        return float((end - start).days)
    return (365 if basis == 3 else 360) / frequency


class Coupons:
    """Where a settlement lies between the coupons of a security; #NUM! where it does not come before its end."""

    def __init__(self, context: Context, settlement: float, maturity: float, frequency: float, basis: float) -> None:
        self.basis, self.frequency = basis_of(basis), frequency_of(frequency)
        self.settled, self.end = calendar_days(context, settlement, maturity)
        if self.settled >= self.end:
            fail(NUM)
        self.before, self.after, self.number = around(self.settled, self.end, self.frequency)
        self.length = period(self.before, self.after, self.frequency, self.basis)
        self.gone = float(counted(self.before, self.settled, self.basis))
        left = counted(self.settled, self.after, self.basis)
        self.left = self.length - self.gone if self.basis in (0, 4) else float(left)


SECURITY = "context measure measure measure measure?"


@builtin("COUPDAYS", SECURITY)
def coupdays(context: Context, settlement: float, maturity: float, frequency: float, basis: float = 0.0) -> float:
    return Coupons(context, settlement, maturity, frequency, basis).length


@builtin("COUPDAYBS", SECURITY)
def coupdaybs(context: Context, settlement: float, maturity: float, frequency: float, basis: float = 0.0) -> float:
    return Coupons(context, settlement, maturity, frequency, basis).gone


@builtin("COUPDAYSNC", SECURITY)
def coupdaysnc(context: Context, settlement: float, maturity: float, frequency: float, basis: float = 0.0) -> float:
    return Coupons(context, settlement, maturity, frequency, basis).left


@builtin("COUPNUM", SECURITY)
def coupnum(context: Context, settlement: float, maturity: float, frequency: float, basis: float = 0.0) -> float:
    return float(Coupons(context, settlement, maturity, frequency, basis).number)


@builtin("COUPPCD", SECURITY)
def couppcd(context: Context, settlement: float, maturity: float, frequency: float, basis: float = 0.0) -> float:
    day = Coupons(context, settlement, maturity, frequency, basis).before
    return serial_of(day.year, day.month, day.day, context.date1904)


@builtin("COUPNCD", SECURITY)
def coupncd(context: Context, settlement: float, maturity: float, frequency: float, basis: float = 0.0) -> float:
    day = Coupons(context, settlement, maturity, frequency, basis).after
    return serial_of(day.year, day.month, day.day, context.date1904)


# ---- accrued interest


@builtin("ACCRINT", "context measure measure measure measure measure measure measure? logical?")
def accrint(
    context: Context, issue: float, first: float, settlement: float, rate: float, par: float, frequency: float,
    basis: float = 0.0, from_issue: bool = True,
) -> float:  # fmt: skip
    """Interest by coupon periods: the part of the first one, whole ones, and the part of the one before the first
    interest day, which counts downwards where the settlement comes before it. Without `from_issue` the whole ones are
    left out. (Saved values of the application show this; the standard gives the plain case.)
    """
    kind, yearly = basis_of(basis), frequency_of(frequency)
    start, due, settled = calendar_days(context, issue, first, settlement)
    if rate <= 0 or par <= 0 or start >= settled or start >= due:
        return fail(NUM)
    coupon = par * rate / yearly
    if settled > due:
        return settled_late(context, coupon, (start, due, settled), yearly, kind, from_issue)
    before, after, whole = around(start, due, yearly)
    if whole == 1:
        return coupon * counted(start, settled, kind) / period(before, due, yearly, kind)
    last = stepped(due, -12 // yearly)
    # an issue on a coupon day counts its first period whole, whatever the basis makes of its days
    periods = 1.0 if before == start else counted(start, after, kind) / period(before, after, yearly, kind)
    periods += counted(last, settled, kind) / period(last, due, yearly, kind)
    return coupon * (periods + (whole - 2 if from_issue else 0))


def settled_late(
    context: Context, coupon: float, days: tuple[date, date, date], yearly: int, basis: int, from_issue: bool
) -> float:
    """Interest where the settlement comes after the first interest day."""
    start, due, settled = days
    if not from_issue:
        start = due
    elif (start.year, start.month) != (stepped(due, -12 // yearly).year, stepped(due, -12 // yearly).month):
        context.unsupported("ACCRINT settled after an odd first period")
    step, at, result, k = 12 // yearly, start, 0.0, 0
    while at < settled:
        k += 1
        before, after = stepped(due, (k - 1 - from_issue) * step), stepped(due, (k - from_issue) * step)
        until = min(after, settled)
        result += counted(at, until, basis) / period(before, after, yearly, basis)
        at = until
    return coupon * result


@builtin("ACCRINTM", "context measure measure measure measure measure?")
def accrintm(context: Context, issue: float, settlement: float, rate: float, par: float, basis: float = 0.0) -> float:
    start, settled = calendar_days(context, issue, settlement)
    if rate <= 0 or par <= 0 or start >= settled:
        return fail(NUM)
    return par * rate * fraction(start, settled, basis_of(basis))


# ---- price and yield


def price_of(coupons: Coupons, rate: float, yearly_yield: float, redemption: float) -> float:
    """Price of 100 of a security with coupons."""
    coupon, n = 100 * rate / coupons.frequency, coupons.number
    gone, left = coupons.gone / coupons.length, coupons.left / coupons.length
    growth = yearly_yield / coupons.frequency
    if n == 1:
        return (redemption + coupon) / (1 + left * growth) - gone * coupon
    if growth <= -1:
        return fail(NUM)
    paid = sum(coupon / (1 + growth) ** (k + left) for k in range(n))
    return float(redemption / (1 + growth) ** (n - 1 + left) + paid) - coupon * gone


@builtin("PRICE", "context measure measure measure measure measure measure measure?")
def price(
    context: Context, settlement: float, maturity: float, rate: float, yearly_yield: float, redemption: float,
    frequency: float, basis: float = 0.0,
) -> float:  # fmt: skip
    if rate < 0 or yearly_yield < 0 or redemption <= 0:
        return fail(NUM)
    return price_of(Coupons(context, settlement, maturity, frequency, basis), rate, yearly_yield, redemption)


@builtin("YIELD", "context measure measure measure measure measure measure measure?")
def yield_(
    context: Context, settlement: float, maturity: float, rate: float, paid: float, redemption: float,
    frequency: float, basis: float = 0.0,
) -> float:  # fmt: skip
    if rate < 0 or paid <= 0 or redemption <= 0:
        return fail(NUM)
    coupons = Coupons(context, settlement, maturity, frequency, basis)
    if coupons.number > 1:
        times = coupons.frequency  # solved a period: a yield may lie below -1 a year, but not below -1 a period
        return times * solved(lambda y: price_of(coupons, rate, y * times, redemption) - paid, max(rate, 0.05) / times)
    coupon, gone = rate / coupons.frequency, coupons.gone / coupons.length
    base = paid / 100 + gone * coupon
    if not coupons.left or not base:
        return fail(NUM)
    return (redemption / 100 + coupon - base) / base * coupons.frequency * coupons.length / coupons.left


def duration_of(coupons: Coupons, rate: float, yearly_yield: float) -> float:
    """Macaulay's duration in years."""
    growth = 1 + yearly_yield / coupons.frequency
    left, weighted, worth = coupons.left / coupons.length, 0.0, 0.0
    for k in range(coupons.number):
        flow = 100 * rate / coupons.frequency + (100 if k == coupons.number - 1 else 0)
        present = flow / growth ** (k + left)
        weighted, worth = weighted + present * (k + left), worth + present
    return weighted / worth / coupons.frequency


@builtin("DURATION", "context measure measure measure measure measure measure?")
def duration(
    context: Context, settlement: float, maturity: float, rate: float, yearly_yield: float, frequency: float,
    basis: float = 0.0,
) -> float:  # fmt: skip
    if rate < 0 or yearly_yield < 0:
        return fail(NUM)
    return duration_of(Coupons(context, settlement, maturity, frequency, basis), rate, yearly_yield)


@builtin("MDURATION", "context measure measure measure measure measure measure?")
def mduration(
    context: Context, settlement: float, maturity: float, rate: float, yearly_yield: float, frequency: float,
    basis: float = 0.0,
) -> float:  # fmt: skip
    plain = duration(context, settlement, maturity, rate, yearly_yield, frequency, basis)
    return plain / (1 + yearly_yield / int(frequency))


# ---- discounted securities and those that pay at the end


def span(context: Context, settlement: float, maturity: float, basis: float) -> float:
    """Years from settlement to maturity, which must come after it."""
    settled, end = calendar_days(context, settlement, maturity)
    return fraction(settled, end, basis_of(basis)) if settled < end else fail(NUM)


DISCOUNTED = "context measure measure measure measure measure?"


def declare_discounted() -> None:
    """The functions of a price, a redemption or a rate over one span of years."""
    for name, formula in {
        "DISC": lambda paid, redemption, years: (redemption - paid) / redemption / years,
        "INTRATE": lambda invested, redemption, years: (redemption - invested) / invested / years,
        "RECEIVED": lambda invested, discount, years: invested / (1 - discount * years),
        "PRICEDISC": lambda discount, redemption, years: redemption * (1 - discount * years),
        "YIELDDISC": lambda paid, redemption, years: (redemption / paid - 1) / years,
    }.items():

        def call(
            context: Context, settlement: float, maturity: float, a: float, b: float, basis: float = 0.0,
            formula: Any = formula,
        ) -> float:  # fmt: skip
            if a <= 0 or b <= 0:
                return fail(NUM)
            years = span(context, settlement, maturity, basis)
            return float(formula(a, b, years)) if years > 0 else fail(NUM)

        builtin(name, DISCOUNTED)(call)


declare_discounted()


@builtin("PRICEMAT", "context measure measure measure measure measure measure?")
def pricemat(
    context: Context, settlement: float, maturity: float, issue: float, rate: float, yearly_yield: float,
    basis: float = 0.0,
) -> float:  # fmt: skip
    if rate < 0 or yearly_yield < 0:
        return fail(NUM)
    left, whole = span(context, settlement, maturity, basis), span(context, issue, maturity, basis)
    gone = span(context, issue, settlement, basis)
    return 100 * (1 + whole * rate) / (1 + left * yearly_yield) - 100 * gone * rate


@builtin("YIELDMAT", "context measure measure measure measure measure measure?")
def yieldmat(
    context: Context, settlement: float, maturity: float, issue: float, rate: float, paid: float, basis: float = 0.0
) -> float:
    if rate < 0 or paid <= 0:
        return fail(NUM)
    left, whole = span(context, settlement, maturity, basis), span(context, issue, maturity, basis)
    gone = span(context, issue, settlement, basis)
    return ((1 + whole * rate) / (paid / 100 + gone * rate) - 1) / left


def bill_days(context: Context, settlement: float, maturity: float) -> int:
    """Days of a treasury bill, which runs a year at most."""
    settled, end = calendar_days(context, settlement, maturity)
    days = (end - settled).days
    return days if settled < end <= stepped(settled, 12) else int(fail(NUM))


@builtin("TBILLPRICE", "context measure measure measure")
def tbillprice(context: Context, settlement: float, maturity: float, discount: float) -> float:
    result = 100 * (1 - discount * bill_days(context, settlement, maturity) / 360)
    return result if discount > 0 and result > 0 else fail(NUM)


@builtin("TBILLYIELD", "context measure measure measure")
def tbillyield(context: Context, settlement: float, maturity: float, paid: float) -> float:
    days = bill_days(context, settlement, maturity)
    return (100 - paid) / paid * 360 / days if paid > 0 else fail(NUM)


@builtin("TBILLEQ", "context measure measure measure")
def tbilleq(context: Context, settlement: float, maturity: float, discount: float) -> float:
    days = bill_days(context, settlement, maturity)
    if discount <= 0 or discount * days >= 360:
        return fail(NUM)
    if days > 182:
        context.unsupported("TBILLEQ over more than half a year")
    return 365 * discount / (360 - discount * days)
