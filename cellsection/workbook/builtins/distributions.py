"""Probability distributions; scipy is loaded by the first call of one that needs it."""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import Any

from cellsection.workbook.builtins.mathematics import fail, paired
from cellsection.workbook.builtins.registry import ErrorResult, builtin
from cellsection.workbook.builtins.statistics import mean, variance
from cellsection.workbook.builtins.traits import cells_of, numbers
from cellsection.workbook.coercion import DIV0, NA, NUM
from cellsection.workbook.values import Array


def standard_quantile(p: float) -> float:
    """Quantile of the standard normal distribution."""
    from statistics import NormalDist

    return NormalDist().inv_cdf(p)


def stats() -> Any:
    """Scipy's distributions."""
    import scipy.stats

    return scipy.stats


def probability(p: float, *, ends: bool = False) -> float:
    """A probability strictly between 0 and 1 (or with its ends)."""
    return p if (0 <= p <= 1 if ends else 0 < p < 1) else fail(NUM)


def whole(x: float) -> float:
    """A count or degrees of freedom: the whole part, #NUM! beyond what the tables reach."""
    return float(int(x)) if abs(x) <= 1e10 else fail(NUM)


def finite(x: Any) -> float:
    """A result, #NUM! where it is none."""
    value = float(x)
    return value if math.isfinite(value) else fail(NUM)


DEEP = 1e-3  # below this probability a library's quantile is judged by the share that it leaves


def quantile(guess: float, share: Callable[[float], float], p: float) -> float:
    """The positive x at which a share, rising or falling with x, is p: the library's, where it holds, else a search.

    Deep in a tail the library inverts 1 - p or stops early: its F at 1E-12 is off in the seventh digit, at 1E-16 in the
    first, and at 1E-20 there is none. The shares themselves keep their digits there, so they judge and are solved.
    """
    if not 0 < p < DEEP or (0 < guess < math.inf and abs(share(guess) - p) <= 1e-12 * p):
        return guess
    from scipy.optimize import brentq

    def gap(exponent: float) -> float:
        found = share(math.exp(exponent))
        return (math.log(found) if found > 0 else -800.0) - math.log(p)

    low, high = -700.0, 700.0  # exponents of the smallest and the largest x
    if gap(low) * gap(high) > 0:
        return guess
    found = math.exp(brentq(gap, low, high, xtol=1e-13, rtol=1e-15))
    return found if abs(share(found) - p) <= 1e-9 * p else guess  # not the brink where the share itself underflows


@builtin("NORM.DIST NORMDIST", "number number number logical")
def norm_dist(x: float, m: float, s: float, cumulative: bool) -> float:
    if s <= 0:
        return fail(NUM)
    z = (x - m) / s
    return 0.5 * math.erfc(-z / math.sqrt(2)) if cumulative else math.exp(-z * z / 2) / (s * math.sqrt(2 * math.pi))


@builtin("NORM.INV NORMINV", "number number number")
def norm_inv(p: float, m: float, s: float) -> float:
    return m + s * standard_quantile(probability(p)) if s > 0 else fail(NUM)


@builtin("NORM.S.DIST", "number logical")
def norm_s_dist(z: float, cumulative: bool) -> float:
    return norm_dist(z, 0.0, 1.0, cumulative)


@builtin("NORMSDIST", "number")
def normsdist(z: float) -> float:
    return norm_dist(z, 0.0, 1.0, True)


@builtin("NORM.S.INV NORMSINV", "number")
def norm_s_inv(p: float) -> float:
    return standard_quantile(probability(p))


@builtin("PHI", "number")
def phi(x: float) -> float:
    return math.exp(-x * x / 2) / math.sqrt(2 * math.pi)


@builtin("GAUSS", "number")
def gauss(z: float) -> float:
    return 0.5 * math.erf(z / math.sqrt(2))


@builtin("LOGNORM.DIST", "number number number logical")
def lognorm_dist(x: float, m: float, s: float, cumulative: bool) -> float:
    if x <= 0 or s <= 0:
        return fail(NUM)
    return norm_dist(math.log(x), m, s, cumulative) / (1 if cumulative else x)


@builtin("LOGNORM.INV LOGINV", "number number number")
def lognorm_inv(p: float, m: float, s: float) -> float:
    return math.exp(norm_inv(p, m, s))


@builtin("EXPON.DIST EXPONDIST", "number number logical")
def expon_dist(x: float, rate: float, cumulative: bool) -> float:
    if x < 0 or rate <= 0:
        return fail(NUM)
    return -math.expm1(-rate * x) if cumulative else rate * math.exp(-rate * x)


@builtin("WEIBULL.DIST WEIBULL", "number number number logical")
def weibull_dist(x: float, shape: float, scale: float, cumulative: bool) -> float:
    if x < 0 or shape <= 0 or scale <= 0:
        return fail(NUM)
    z = (x / scale) ** shape
    return -math.expm1(-z) if cumulative else shape / scale * (x / scale) ** (shape - 1) * math.exp(-z)


@builtin("POISSON.DIST POISSON", "number number logical")
def poisson_dist(x: float, m: float, cumulative: bool) -> float:
    if x < 0 or m < 0:
        return fail(NUM)
    law = stats().poisson(m)
    return finite(law.cdf(whole(x)) if cumulative else law.pmf(whole(x)))


@builtin("BINOM.DIST BINOMDIST", "number number number logical")
def binom_dist(k: float, n: float, p: float, cumulative: bool) -> float:
    if not 0 <= int(k) <= int(n) or not 0 <= p <= 1:
        return fail(NUM)
    law = stats().binom(whole(n), p)
    return finite(law.cdf(whole(k)) if cumulative else law.pmf(whole(k)))


@builtin("BINOM.INV CRITBINOM", "number number number")
def binom_inv(n: float, p: float, alpha: float) -> float:
    return finite(stats().binom.ppf(probability(alpha), whole(n), probability(p)))


@builtin("BINOM.DIST.RANGE", "number number number number?")
def binom_dist_range(n: float, p: float, first: float, last: float | None = None) -> float:
    low, high = int(first), int(first if last is None else last)
    if not 0 <= low <= high <= int(n):
        return fail(NUM)
    law = stats().binom(whole(n), probability(p, ends=True))
    if high - low < 1000:  # the sum of the terms keeps the digits that a difference of two sums loses
        return finite(math.fsum(law.pmf(k) for k in range(low, high + 1)))
    return finite(law.cdf(high) - law.cdf(low - 1))


@builtin("T.DIST", "number number logical")
def t_dist(x: float, freedom: float, cumulative: bool) -> float:
    if whole(freedom) < 1:
        return fail(NUM)
    law = stats().t(whole(freedom))
    return finite(law.cdf(x) if cumulative else law.pdf(x))


@builtin("T.DIST.RT", "number number")
def t_dist_rt(x: float, freedom: float) -> float:
    return finite(stats().t.sf(x, whole(freedom))) if whole(freedom) >= 1 else fail(NUM)


@builtin("T.DIST.2T", "number number")
def t_dist_2t(x: float, freedom: float) -> float:
    return finite(2 * stats().t.sf(x, whole(freedom))) if whole(freedom) >= 1 and x >= 0 else fail(NUM)


@builtin("TDIST", "number number number")
def tdist(x: float, freedom: float, tails: float) -> float:
    if x < 0 or whole(freedom) < 1 or int(tails) not in (1, 2):
        return fail(NUM)
    return finite(int(tails) * stats().t.sf(x, whole(freedom)))


@builtin("T.INV", "number number")
def t_inv(p: float, freedom: float) -> float:
    if whole(freedom) < 1:
        return fail(NUM)
    law = stats().t(whole(freedom))
    if probability(p) == 0.5:
        return 0.0
    tail = min(p, 1 - p)
    return math.copysign(finite(quantile(-float(law.ppf(tail)), lambda x: float(law.sf(x)), tail)), p - 0.5)


@builtin("T.INV.2T TINV", "number number")
def t_inv_2t(p: float, freedom: float) -> float:
    if whole(freedom) < 1 or not 0 < p <= 1:
        return fail(NUM)
    law = stats().t(whole(freedom))
    return finite(quantile(float(law.isf(p / 2)), lambda x: 2 * float(law.sf(x)), p)) if p < 1 else 0.0


@builtin("CHISQ.DIST", "number number logical")
def chisq_dist(x: float, freedom: float, cumulative: bool) -> float:
    if x < 0 or whole(freedom) < 1:
        return fail(NUM)
    law = stats().chi2(whole(freedom))
    return finite(law.cdf(x) if cumulative else law.pdf(x))


@builtin("CHISQ.DIST.RT CHIDIST", "number number")
def chisq_dist_rt(x: float, freedom: float) -> float:
    return finite(stats().chi2.sf(x, whole(freedom))) if x >= 0 and whole(freedom) >= 1 else fail(NUM)


@builtin("CHISQ.INV", "number number")
def chisq_inv(p: float, freedom: float) -> float:
    return finite(stats().chi2.ppf(p, whole(freedom))) if 0 <= p < 1 and whole(freedom) >= 1 else fail(NUM)


@builtin("CHISQ.INV.RT CHIINV", "number number")
def chisq_inv_rt(p: float, freedom: float) -> float:
    return finite(stats().chi2.isf(p, whole(freedom))) if 0 < p <= 1 and whole(freedom) >= 1 else fail(NUM)


@builtin("F.DIST", "number number number logical")
def f_dist(x: float, a: float, b: float, cumulative: bool) -> float:
    if x < 0 or int(a) < 1 or int(b) < 1:
        return fail(NUM)
    law = stats().f(whole(a), whole(b))
    return finite(law.cdf(x) if cumulative else law.pdf(x))


@builtin("F.DIST.RT FDIST", "number number number")
def f_dist_rt(x: float, a: float, b: float) -> float:
    return finite(stats().f.sf(x, whole(a), whole(b))) if x >= 0 and int(a) >= 1 and int(b) >= 1 else fail(NUM)


@builtin("F.INV", "number number number")
def f_inv(p: float, a: float, b: float) -> float:
    if not 0 <= p < 1 or int(a) < 1 or int(b) < 1:
        return fail(NUM)
    law = stats().f(whole(a), whole(b))
    return finite(quantile(float(law.ppf(p)), lambda x: float(law.cdf(x)), p))


@builtin("F.INV.RT FINV", "number number number")
def f_inv_rt(p: float, a: float, b: float) -> float:
    if not 0 < p <= 1 or int(a) < 1 or int(b) < 1:
        return fail(NUM)
    law = stats().f(whole(a), whole(b))
    return finite(quantile(float(law.isf(p)), lambda x: float(law.sf(x)), p)) if p < 1 else 0.0


@builtin("GAMMA", "number")
def gamma(x: float) -> float:
    if x == 0 or (x < 0 and x == int(x)):
        return fail(NUM)
    return math.gamma(x)


@builtin("GAMMALN GAMMALN.PRECISE", "number")
def gammaln(x: float) -> float:
    return math.lgamma(x) if x > 0 else fail(NUM)


@builtin("GAMMA.DIST GAMMADIST", "number number number logical")
def gamma_dist(x: float, a: float, b: float, cumulative: bool) -> float:
    if x < 0 or a <= 0 or b <= 0:
        return fail(NUM)
    law = stats().gamma(a, scale=b)
    return finite(law.cdf(x) if cumulative else law.pdf(x))


@builtin("GAMMA.INV GAMMAINV", "number number number")
def gamma_inv(p: float, a: float, b: float) -> float:
    return finite(stats().gamma.ppf(p, a, scale=b)) if 0 <= p < 1 and a > 0 and b > 0 else fail(NUM)


def beta_place(x: float, low: float, high: float) -> float:
    """X as a share of the interval from low to high."""
    return (x - low) / (high - low) if low <= x <= high and low < high else fail(NUM)


@builtin("BETA.DIST", "number number number logical number? number?")
def beta_dist(x: float, a: float, b: float, cumulative: bool, low: float = 0.0, high: float = 1.0) -> float:
    if a <= 0 or b <= 0:
        return fail(NUM)
    law, share = stats().beta(a, b), beta_place(x, low, high)
    return finite(law.cdf(share) if cumulative else law.pdf(share) / (high - low))


@builtin("BETADIST", "number number number number? number?")
def betadist(x: float, a: float, b: float, low: float = 0.0, high: float = 1.0) -> float:
    return beta_dist(x, a, b, True, low, high)


@builtin("BETA.INV BETAINV", "number number number number? number?")
def beta_inv(p: float, a: float, b: float, low: float = 0.0, high: float = 1.0) -> float:
    if a <= 0 or b <= 0 or not 0 < p < 1 or low >= high:
        return fail(NUM)
    law = stats().beta(a, b)
    guess = float(law.ppf(p)) if p > 1e-100 else 0.0  # the library warns of giving up there
    return low + (high - low) * finite(quantile(guess, lambda x: float(law.cdf(min(x, 1.0))), p))


@builtin("CONFIDENCE CONFIDENCE.NORM", "number number number")
def confidence_norm(alpha: float, s: float, n: float) -> float:
    if s <= 0 or n < 1:
        return fail(NUM)
    return -standard_quantile(probability(alpha) / 2) * s / math.sqrt(int(n))


@builtin("CONFIDENCE.T", "number number number")
def confidence_t(alpha: float, s: float, n: float) -> float:
    if s <= 0 or int(n) < 1:
        return fail(NUM)
    return fail(DIV0) if int(n) == 1 else t_inv_2t(probability(alpha), int(n) - 1) * s / math.sqrt(int(n))


@builtin("FISHER", "number")
def fisher(x: float) -> float:
    return math.atanh(x) if abs(x) < 1 else fail(NUM)


@builtin("FISHERINV", "number")
def fisherinv(y: float) -> float:
    return math.tanh(y)


@builtin("T.TEST TTEST", "array array number number")
def t_test(a: Array, b: Array, tails: float, kind: float) -> float:
    if int(tails) not in (1, 2) or int(kind) not in (1, 2, 3):
        return fail(NUM)
    if min(len(list(numbers((each,)))) for each in (a, b)) < 2:
        return fail(DIV0)
    if int(kind) == 1:
        pairs = paired(a, b)
        x, y = [p[0] for p in pairs], [p[1] for p in pairs]
        p = stats().ttest_rel(x, y).pvalue
    else:
        p = stats().ttest_ind(list(numbers((a,))), list(numbers((b,))), equal_var=int(kind) == 2).pvalue
    return finite(p * int(tails) / 2)


@builtin("F.TEST FTEST", "array array")
def f_test(a: Array, b: Array) -> float:
    x, y = list(numbers((a,))), list(numbers((b,)))
    if not variance(x, True) or not variance(y, True):  # "if the variance of array1 or array2 is zero" (the reference)
        return fail(DIV0)
    upper = stats().f.sf(variance(x, True) / variance(y, True), len(x) - 1, len(y) - 1)
    return finite(2 * min(upper, 1 - upper))


@builtin("Z.TEST ZTEST", "array number number?")
def z_test(data: Array, x: float, sigma: float | None = None) -> float:
    values = list(numbers((data,)))
    s = math.sqrt(variance(values, True)) if sigma is None else sigma
    return 0.5 * math.erfc((mean(values) - x) / (s / math.sqrt(len(values))) / math.sqrt(2)) if s > 0 else fail(DIV0)


@builtin("CHISQ.TEST CHITEST", "array array")
def chisq_test(actual: Array, expected: Array) -> float:
    if (len(actual), len(actual[0])) != (len(expected), len(expected[0])):
        raise ErrorResult(NA)
    rows, columns = len(actual), len(actual[0])
    statistic = 0.0
    for x, e in zip(cells_of(actual), cells_of(expected), strict=True):
        if not isinstance(x, float) or not isinstance(e, float) or not e:
            return fail(DIV0)
        statistic += (x - e) ** 2 / e
    freedom = (rows - 1) * (columns - 1) if rows > 1 and columns > 1 else rows * columns - 1
    return finite(stats().chi2.sf(statistic, freedom)) if freedom else fail(NA)


@builtin("HYPGEOM.DIST", "number number number number logical")
def hypgeom_dist(k: float, n: float, successes: float, population: float, cumulative: bool) -> float:
    law = stats().hypergeom(whole(population), whole(successes), whole(n))
    if not 0 <= int(k) <= min(int(n), int(successes)) or int(n) > int(population):
        return fail(NUM)
    return finite(law.cdf(whole(k)) if cumulative else law.pmf(whole(k)))


@builtin("NEGBINOM.DIST", "number number number logical")
def negbinom_dist(failures: float, successes: float, p: float, cumulative: bool) -> float:
    if failures < 0 or successes < 1 or not 0 < p < 1:
        return fail(NUM)
    law = stats().nbinom(whole(successes), p)
    return finite(law.cdf(whole(failures)) if cumulative else law.pmf(whole(failures)))


@builtin("HYPGEOMDIST", "number number number number")
def hypgeomdist(k: float, n: float, successes: float, population: float) -> float:
    return hypgeom_dist(k, n, successes, population, False)


@builtin("NEGBINOMDIST", "number number number")
def negbinomdist(failures: float, successes: float, p: float) -> float:
    return negbinom_dist(failures, successes, p, False)


@builtin("LOGNORMDIST", "number number number")
def lognormdist(x: float, m: float, s: float) -> float:
    return lognorm_dist(x, m, s, True)


@builtin("PROB", "array array number number?")
def prob(values: Array, chances: Array, low: float, high: float | None = None) -> float:
    pairs = paired(values, chances)
    if not pairs or any(not 0 <= p <= 1 for _, p in pairs) or abs(math.fsum(p for _, p in pairs) - 1) > 1e-9:
        return fail(NUM)
    return math.fsum(p for x, p in pairs if low <= x <= (low if high is None else high))


@builtin("ERF.PRECISE", "measure")
def erf_precise(x: float) -> float:
    return math.erf(x)


@builtin("ERF", "measure measure?")
def erf(low: float, high: float | None = None) -> float:
    return math.erf(low) if high is None else math.erf(high) - math.erf(low)


@builtin("ERFC ERFC.PRECISE", "measure")
def erfc(x: float) -> float:
    return math.erfc(x)
