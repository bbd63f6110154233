"""Time value of money, cash flows and depreciation (the usual annuity equations)."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from typing import Any

from cellsection.workbook.builtins.dates import yearfrac
from cellsection.workbook.builtins.mathematics import fail
from cellsection.workbook.builtins.registry import Context, builtin
from cellsection.workbook.builtins.traits import cells_of, numbers
from cellsection.workbook.coercion import DIV0, NUM, VALUE
from cellsection.workbook.values import Array


def power(base: float, exponent: float) -> float:
    """A power; #NUM! where it is not real, #DIV/0! of zero to a negative one."""
    if base < 0 and exponent != int(exponent):
        return fail(NUM)
    if base == 0 and exponent < 0:
        return fail(DIV0)
    return float(base**exponent)


def growth_and_sum(rate: float, periods: float) -> tuple[float, float]:
    """(1 + r)^n, and the sum of the geometric series up to it."""
    if rate == 0:
        return 1.0, periods
    growth = power(1 + rate, periods)
    return growth, (growth - 1) / rate


@builtin("FV", "number number number number? number?")
def fv(rate: float, periods: float, payment: float, present: float = 0.0, early: float = 0.0) -> float:
    growth, series = growth_and_sum(rate, periods)
    return -(present * growth + payment * (1 + (rate if early else 0)) * series)


@builtin("PV", "number number number number? number?")
def pv(rate: float, periods: float, payment: float, future: float = 0.0, early: float = 0.0) -> float:
    growth, series = growth_and_sum(rate, periods)
    return -(future + payment * (1 + (rate if early else 0)) * series) / growth if growth else fail(DIV0)


@builtin("PMT", "number number number number? number?")
def pmt(rate: float, periods: float, present: float, future: float = 0.0, early: float = 0.0) -> float:
    if not periods:
        return fail(NUM)
    growth, series = growth_and_sum(rate, periods)
    return -(present * growth + future) / ((1 + (rate if early else 0)) * series)


@builtin("NPER", "number number number number? number?")
def nper(rate: float, payment: float, present: float, future: float = 0.0, early: float = 0.0) -> float:
    if rate == 0:
        return -(present + future) / payment if payment else fail(NUM)
    due = payment * (1 + (rate if early else 0)) / rate
    ratio = (due - future) / (due + present) if due + present else 0.0
    return math.log(ratio) / math.log1p(rate) if ratio > 0 and rate > -1 else fail(NUM)


def solved(f: Callable[[float], float], guess: float) -> float:
    """A root near a guess by Newton's method with a numeric slope, #NUM! where it does not settle."""
    x = guess
    for _ in range(100):
        step = 1e-7 * max(abs(x), 1e-3)
        y = f(x)
        slope = (f(x + step) - f(x - step)) / (2 * step)
        if slope == 0 or not math.isfinite(slope) or not math.isfinite(y):
            break
        new = x - y / slope
        if new <= -1:
            new = (x - 1) / 2
        if abs(new - x) <= 1e-15 * max(abs(new), 1e-2):
            # Creeping up to the pole at -1, or away to where the flows are worth nothing, is no root.
            return new if -1 + 1e-9 < new < 1e9 else fail(NUM)
        x = new
    y = f(x)
    return x if abs(x) < 1e9 and math.isfinite(y) and abs(y) < 1e-7 else fail(NUM)


@builtin("RATE", "number number number number? number? number?")
def rate_(
    periods: float, payment: float, present: float, future: float = 0.0, early: float = 0.0, guess: float = 0.1
) -> float:
    if periods <= 0:
        return fail(NUM)

    def owed(r: float) -> float:
        growth, series = growth_and_sum(r, periods)
        return present * growth + payment * (1 + (r if early else 0)) * series + future

    return solved(owed, guess)


@builtin("IPMT", "number number number number number? number?")
def ipmt(rate: float, period: float, periods: float, present: float, future: float = 0.0, early: float = 0.0) -> float:
    if not 1 <= period < periods + 1:
        return fail(NUM)
    if early and period == 1:
        return 0.0
    payment = pmt(rate, periods, present, future, early)
    if early:
        return (fv(rate, period - 2, payment, present, 1.0) - payment) * rate
    return fv(rate, period - 1, payment, present, 0.0) * rate


@builtin("PPMT", "number number number number number? number?")
def ppmt(rate: float, period: float, periods: float, present: float, future: float = 0.0, early: float = 0.0) -> float:
    if not 1 <= period < periods + 1:
        return fail(NUM)
    if early and period == 1:
        return pmt(rate, periods, present, future, early)
    _, series = growth_and_sum(rate, periods)
    if not series:
        return fail(DIV0)
    # the debt paid off grows with the interest: no difference of nearly equal amounts
    return -(present + future) / series * power(1 + rate, period - (2 if early else 1))


def summed(
    part: Callable[..., float], rate: float, periods: float, present: float, a: float, b: float, early: float
) -> float:
    """Interest or principal over several periods."""
    first, last = math.ceil(a), int(b)
    if rate <= 0 or periods <= 0 or present <= 0 or first < 1 or first > last or last > periods or early not in (0, 1):
        return fail(NUM)
    return sum(part(rate, float(k), periods, present, 0.0, early) for k in range(first, last + 1))


@builtin("CUMIPMT", "measure measure measure measure measure measure")
def cumipmt(rate: float, periods: float, present: float, first: float, last: float, early: float) -> float:
    return summed(ipmt, rate, periods, present, first, last, early)


@builtin("CUMPRINC", "measure measure measure measure measure measure")
def cumprinc(rate: float, periods: float, present: float, first: float, last: float, early: float) -> float:
    return summed(ppmt, rate, periods, present, first, last, early)


@builtin("ISPMT", "number number number number")
def ispmt(rate: float, period: float, periods: float, present: float) -> float:
    return present * rate * (period / periods - 1) if periods else fail(DIV0)


@builtin("NPV", "number range+")
def npv(rate: float, *flows: Any) -> float:
    if rate == -1:
        return fail(DIV0)
    result = 0.0
    for k, flow in enumerate(numbers(flows), start=1):
        result += flow / power(1 + rate, k)
    return result


def present_value(rate: float, flows: Sequence[float]) -> float:
    """Value now of flows at the ends of periods from now on."""
    return sum(flow / power(1 + rate, k) for k, flow in enumerate(flows))


@builtin("IRR", "range number?")
def irr(area: Any, guess: float = 0.1) -> float:
    flows = list(numbers((area,)))
    if not flows or min(flows) >= 0 or max(flows) <= 0:
        return fail(NUM)
    return solved(lambda r: present_value(r, flows), guess)


@builtin("MIRR", "range number number")
def mirr(area: Any, finance: float, reinvest: float) -> float:
    flows = list(numbers((area,)))
    n = len(flows)
    if reinvest == -1:
        return fail(DIV0)
    gains = sum(max(f, 0.0) / power(1 + reinvest, k) for k, f in enumerate(flows))
    losses = sum(f / power(1 + finance, k) for k, f in enumerate(flows) if f < 0)
    if not losses or n < 2:
        return fail(DIV0)
    if not gains:  # all is lost: the application gives -100 %, though its reference asks for a positive value
        return -1.0
    return power(-gains * power(1 + reinvest, n - 1) / losses, 1 / (n - 1)) - 1


def dated(rate: float, flows: list[float], days: list[float]) -> float:
    """Value on the first day of flows on given days, by years of 365 days."""
    return sum(flow / power(1 + rate, (day - days[0]) / 365) for flow, day in zip(flows, days, strict=True))


def flows_and_days(area: Any, days: Any) -> tuple[list[float], list[float]]:
    """Cash flows and their days."""
    flows, when = list(numbers((area,))), [float(math.floor(d)) for d in numbers((days,))]
    if len(flows) != len(when) or not flows or min(when) < when[0] or when[0] < 0:
        fail(NUM)
    return flows, when


@builtin("XNPV", "number range range")
def xnpv(rate: float, area: Any, days: Any) -> float:
    flows, when = flows_and_days(area, days)
    return dated(rate, flows, when) if rate > -1 else fail(NUM)


@builtin("XIRR", "range range number?")
def xirr(area: Any, days: Any, guess: float = 0.1) -> float:
    if any(isinstance(cell, (str, bool)) for cell in cells_of(area)):
        return fail(VALUE)
    flows, when = flows_and_days(area, days)
    if min(flows) >= 0 or max(flows) <= 0:
        return fail(NUM)
    return solved(lambda r: dated(r, flows, when), guess)


@builtin("EFFECT", "number number")
def effect(nominal: float, periods: float) -> float:
    n = int(periods)
    return (1 + nominal / n) ** n - 1 if nominal > 0 and n >= 1 else fail(NUM)


@builtin("NOMINAL", "number number")
def nominal_(effective: float, periods: float) -> float:
    n = int(periods)
    return ((1 + effective) ** (1 / n) - 1) * n if effective > 0 and n >= 1 else fail(NUM)


@builtin("RRI", "number number number")
def rri(periods: float, present: float, future: float) -> float:
    if periods <= 0 or present == 0 or future / present < 0:
        return fail(NUM)
    return float((future / present) ** (1 / periods)) - 1


@builtin("PDURATION", "number number number")
def pduration(rate: float, present: float, future: float) -> float:
    if rate <= 0 or present <= 0 or future <= 0:
        return fail(NUM)
    return (math.log(future) - math.log(present)) / math.log1p(rate)


@builtin("FVSCHEDULE", "number array")
def fvschedule(principal: float, rates: Array) -> float:
    result = principal
    for row in rates:
        for cell in row:
            if isinstance(cell, float):
                result *= 1 + cell
            elif cell is not None:
                return fail(VALUE)
    return result


@builtin("SLN", "number number number")
def sln(cost: float, salvage: float, life: float) -> float:
    return (cost - salvage) / life if life else fail(DIV0)


@builtin("SYD", "number number number number")
def syd(cost: float, salvage: float, life: float, period: float) -> float:
    if salvage < 0 or life <= 0 or not 0 < period <= life:
        return fail(NUM)
    return (cost - salvage) * (life - period + 1) * 2 / (life * (life + 1))


@builtin("DB", "number number number number number?")
def db(cost: float, salvage: float, life: float, period: float, months: float = 12.0) -> float:
    n, p, m = int(life), int(period), int(months)
    if cost < 0 or salvage < 0 or n <= 0 or p < 1 or not 1 <= m <= 12 or p > n + (m < 12) or p > 100_000:
        return fail(NUM)
    if cost == 0:
        return 0.0
    rate = round(1 - power(salvage / cost, 1 / n), 3)
    written = cost * rate * m / 12
    if p == 1:
        return written
    amount = written
    for k in range(2, p + 1):
        amount = (cost - written) * rate
        if k == n + 1:
            amount *= (12 - m) / 12
        written += amount
    return amount


@builtin("DDB", "number number number number number?")
def ddb(cost: float, salvage: float, life: float, period: float, factor: float = 2.0) -> float:
    if cost < 0 or salvage < 0 or life <= 0 or not 0 < period <= life or factor <= 0:
        return fail(NUM)
    return declining(cost, salvage, life, period, factor)


def declining(cost: float, salvage: float, life: float, period: float, factor: float) -> float:
    """Declining balance in one period."""
    rate = min(factor / life, 1.0)
    before = cost * power(1 - rate, period - 1) if rate < 1 else (cost if period == 1 else 0.0)
    after = cost * power(1 - rate, period)
    return max(before - max(after, salvage), 0.0)


@builtin("VDB", "number number number number number number? logical?")
def vdb(
    cost: float, salvage: float, life: float, start: float, end: float, factor: float = 2.0, no_switch: bool = False
) -> float:
    """Declining balance over a span, whole periods and shares of them, with the change to straight line where that
    writes off more (OpenFormula 1.2, VDB).
    """
    if cost < 0 or salvage < 0 or life <= 0 or factor < 0 or not 0 <= start <= end <= life or life > 1e6:
        return fail(NUM)
    book, result = cost, 0.0
    straight: float | None = None  # once it is taken, it stays
    for period in range(math.ceil(end)):
        amount = min(book * min(factor / life, 1.0), max(book - salvage, 0.0))
        if not no_switch:
            even = max(book - salvage, 0.0) / (life - period)
            straight = even if straight is None and even > amount else straight
            amount = amount if straight is None else min(straight, max(book - salvage, 0.0))
        result += amount * max(min(end, period + 1.0) - max(start, float(period)), 0.0)
        book -= amount
    return result


@builtin("AMORLINC", "context measure measure measure measure measure measure measure?")
def amorlinc(
    context: Context, cost: float, bought: float, first_end: float, salvage: float, period: float, rate: float,
    basis: float = 0.0,
) -> float:  # fmt: skip
    """Straight line with a first period of its own length (OpenFormula 1.2, AMORLINC)."""
    if cost <= 0 or salvage < 0 or salvage > cost or period < 0 or rate <= 0 or bought > first_end:
        return fail(NUM)
    first = cost * rate * yearfrac(context, bought, first_end, basis)
    n, left = int(period), cost - salvage - first
    if n == 0:
        return min(first, cost - salvage)
    return min(max(left - cost * rate * (n - 1), 0.0), cost * rate)


@builtin("DOLLARDE", "number number")
def dollarde(x: float, fraction: float) -> float:
    f = int(fraction)
    if f < 0:
        return fail(NUM)
    if f == 0:
        return fail(DIV0)
    whole = math.trunc(x)
    return whole + (x - whole) * 10 ** math.ceil(math.log10(f)) / f if f > 1 else x


@builtin("DOLLARFR", "number number")
def dollarfr(x: float, fraction: float) -> float:
    f = int(fraction)
    if f < 0:
        return fail(NUM)
    if f == 0:
        return fail(DIV0)
    whole = math.trunc(x)
    return whole + (x - whole) * f / 10 ** math.ceil(math.log10(f)) if f > 1 else x
