"""Bessel functions of whole order, to the eight or so digits that the application gives.

The application does not evaluate them to full precision: orders 0 and 1 are the rational and polynomial approximations
of the handbooks, higher orders follow by recurrence. They are taken over as they are, so that a saved value is met.
Sources: Abramowitz and Stegun, Handbook of Mathematical Functions (1964), 9.8.1-9.8.8 for I and K; J. F. Hart et al.,
Computer Approximations (1968) for J and Y; recurrences ibid. 9.1.27 and 9.6.26, downwards after J. C. P. Miller.
The error is below 2e-7 of the value, for J and Y of the amplitude sqrt(2/(pi x)). One thing is not taken over: beyond
x = 8 the application's J1 is off by up to 1e-5, as if one coefficient of the fit stood in it twice; here it is right.
"""

from __future__ import annotations

import math
from collections.abc import Callable

from cellsection.workbook.builtins.registry import ErrorResult, builtin
from cellsection.workbook.coercion import NUM

TWO_BY_PI = 0.636619772  # with the digits of the published fits
FAR = 8.0  # from here on J and Y are waves with slowly varying amplitude and phase

# numerator and denominator in powers of x², for x below FAR
NEAR = {
    "J0": (
        (57568490574.0, -13362590354.0, 651619640.7, -11214424.18, 77392.33017, -184.9052456),
        (57568490411.0, 1029532985.0, 9494680.718, 59272.64853, 267.8532712, 1.0),
    ),
    "J1": (
        (72362614232.0, -7895059235.0, 242396853.1, -2972611.439, 15704.48260, -30.16036606),
        (144725228442.0, 2300535178.0, 18583304.74, 99447.43394, 376.9991397, 1.0),
    ),
    "Y0": (
        (-2957821389.0, 7062834065.0, -512359803.6, 10879881.29, -86327.92757, 228.4622733),
        (40076544269.0, 745249964.8, 7189466.438, 47447.26470, 226.1030244, 1.0),
    ),
    "Y1": (
        (-0.4900604943e13, 0.1275274390e13, -0.5153438139e11, 0.7349264551e9, -0.4237922726e7, 0.8511937935e4),
        (0.2499580570e14, 0.4244419664e12, 0.3733650367e10, 0.2245904002e8, 0.1020426050e6, 0.3549632885e3, 1.0),
    ),
}
# phase, and amplitudes of the two waves in powers of (8/x)², from FAR on
WAVES = {
    0: (
        0.785398164,
        (1.0, -0.1098628627e-2, 0.2734510407e-4, -0.2073370639e-5, 0.2093887211e-6),
        (-0.1562499995e-1, 0.1430488765e-3, -0.6911147651e-5, 0.7621095161e-6, -0.934945152e-7),
    ),
    1: (
        2.356194491,
        (1.0, 0.183105e-2, -0.3516396496e-4, 0.2457520174e-5, -0.240337019e-6),
        (0.04687499995, -0.2002690873e-3, 0.8449199096e-5, -0.88228987e-6, 0.105787412e-6),
    ),
}
# A&S 9.8.1-9.8.8: I in powers of (x/3.75)², far from zero of 3.75/x; K in powers of (x/2)², far from zero of 2/x
SERIES = {
    "I0": (1.0, 3.5156229, 3.0899424, 1.2067492, 0.2659732, 0.0360768, 0.0045813),
    "I0 far": (
        0.39894228, 0.01328592, 0.00225319, -0.00157565, 0.00916281, -0.02057706, 0.02635537, -0.01647633, 0.00392377,
    ),
    "I1": (0.5, 0.87890594, 0.51498869, 0.15084934, 0.02658733, 0.00301532, 0.00032411),
    "I1 far": (
        0.39894228, -0.03988024, -0.00362018, 0.00163801, -0.01031555, 0.02282967, -0.02895312, 0.01787654, -0.00420059,
    ),
    "K0": (-0.57721566, 0.42278420, 0.23069756, 0.03488590, 0.00262698, 0.00010750, 0.00000740),
    "K0 far": (1.25331414, -0.07832358, 0.02189568, -0.01062446, 0.00587872, -0.00251540, 0.00053208),
    "K1": (1.0, 0.15443144, -0.67278579, -0.18156897, -0.01919402, -0.00110404, -0.00004686),
    "K1 far": (1.25331414, 0.23498619, -0.03655620, 0.01504268, -0.00780353, 0.00325614, -0.00068245),
}  # fmt: skip


def polynomial(coefficients: tuple[float, ...], y: float) -> float:
    """A polynomial, its coefficients from the constant upwards."""
    result = 0.0
    for coefficient in reversed(coefficients):
        result = result * y + coefficient
    return result


def ratio(name: str, x: float) -> float:
    """One of the rational fits near zero."""
    above, below = NEAR[name]
    return polynomial(above, x * x) / polynomial(below, x * x)


def wave(order: int, x: float, second: bool) -> float:
    """J of order 0 or 1 far from zero, or Y where the second kind is asked."""
    phase, even, odd = WAVES[order]
    z, at = FAR / x, x - phase
    p, q = polynomial(even, z * z), z * polynomial(odd, z * z)
    shape = math.sin(at) * p + math.cos(at) * q if second else math.cos(at) * p - math.sin(at) * q
    return math.sqrt(TWO_BY_PI / x) * shape


def j_low(order: int, x: float) -> float:
    """J of order 0 or 1; x is not negative."""
    if x >= FAR:
        return wave(order, x, False)
    return ratio(f"J{order}", x) * (x if order else 1.0)


def y_low(order: int, x: float) -> float:
    """Y of order 0 or 1; x is positive."""
    if x >= FAR:
        return wave(order, x, True)
    if order == 0:
        return ratio("Y0", x) + TWO_BY_PI * j_low(0, x) * math.log(x)
    return x * ratio("Y1", x) + TWO_BY_PI * (j_low(1, x) * math.log(x) - 1 / x)


def i_low(order: int, x: float) -> float:
    """I of order 0 or 1; x is not negative."""
    if x < 3.75:
        return polynomial(SERIES[f"I{order}"], (x / 3.75) ** 2) * (x if order else 1.0)
    return math.exp(x) / math.sqrt(x) * polynomial(SERIES[f"I{order} far"], 3.75 / x)


def k_low(order: int, x: float) -> float:
    """K of order 0 or 1; x is positive."""
    if x > 2:
        return math.exp(-x) / math.sqrt(x) * polynomial(SERIES[f"K{order} far"], 2 / x)
    tail = polynomial(SERIES[f"K{order}"], x * x / 4)
    return tail - math.log(x / 2) * i_low(0, x) if order == 0 else math.log(x / 2) * i_low(1, x) + tail / x


def upwards(low: Callable[[int, float], float], order: int, x: float, sign: float) -> float:
    """A higher order from orders 0 and 1: f(k+1) = (2k/x) f(k) + sign f(k-1)."""
    before, now = low(0, x), low(1, x)
    if order == 0:
        return before
    for k in range(1, order):
        before, now = now, 2 * k / x * now + sign * before
    return now


def downwards(order: int, x: float, sign: float) -> tuple[float, float, float]:
    """Order and order 0 of f(k-1) = (2k/x) f(k) + sign f(k+1) from far above, to a common scale, and the sum that
    J0 + 2 J2 + 2 J4 + ... = 1 gives that scale by.
    """
    above, now, wanted, total = 0.0, 1.0, 0.0, 0.0
    for k in range(2 * ((order + math.isqrt(160 * max(order, int(x) + 1))) // 2 + 8), 0, -1):
        above, now = now, 2 * k / x * now + sign * above
        if abs(now) > 1e150:
            above, now, wanted, total = above * 1e-150, now * 1e-150, wanted * 1e-150, total * 1e-150
        if k % 2:
            total += now
        if k == order:
            wanted = above
    return wanted, now, 2 * total - now


def whole_order(order: float) -> int:
    """The order, cut to a whole number; #NUM! of a negative one, and of one beyond all use."""
    if not 0 <= order < 100_000:
        raise ErrorResult(NUM)
    return int(order)


def positive(x: float) -> float:
    """An argument of the functions that have a pole at zero."""
    if x <= 0:
        raise ErrorResult(NUM)
    return x


@builtin("BESSELJ", "measure measure")
def besselj(x: float, order: float) -> float:
    n, size = whole_order(order), abs(x)
    if n == 0:
        return j_low(0, size)
    if x == 0:
        return 0.0
    if n == 1 or size > n:
        value = upwards(j_low, n, size, -1.0)
    else:
        wanted, _, total = downwards(n, size, -1.0)
        value = wanted / total
    return -value if x < 0 and n % 2 else value


@builtin("BESSELY", "measure measure")
def bessely(x: float, order: float) -> float:
    return upwards(y_low, whole_order(order), positive(x), -1.0)


@builtin("BESSELI", "measure measure")
def besseli(x: float, order: float) -> float:
    n, size = whole_order(order), abs(x)
    if n < 2:
        value = i_low(n, size)
    elif x == 0:
        return 0.0
    else:
        scale = i_low(0, size)  # beyond 709 it overflows, before the recurrence grows long
        wanted, first, _ = downwards(n, size, 1.0)
        value = wanted / first * scale
    return -value if x < 0 and n % 2 else value


@builtin("BESSELK", "measure measure")
def besselk(x: float, order: float) -> float:
    return upwards(k_low, whole_order(order), positive(x), 1.0)
