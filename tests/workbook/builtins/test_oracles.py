"""Builtins against reference libraries (numpy, scipy, the standard library) and against identities they must keep."""

from __future__ import annotations

import math
import random
import statistics
from datetime import date, timedelta
from pathlib import Path

import numpy as np
import pytest
import scipy.stats

from cellsection.workbook.values import Scalar
from tests.workbook.small import results

ROW = [3.5, -1.25, 8.0, 2.75, 10.5, 4.0, 6.25, 0.5]
TIMES = [1.0, 2.0, 4.0, 5.0, 7.0, 8.0, 11.0, 13.0]


@pytest.fixture
def value(tmp_path: Path):
    """The value of a formula; A1:A8 and B1:B8 hold the two columns above."""

    def calculated(formula: str) -> Scalar:
        cells = {f"A{k}": v for k, v in enumerate(ROW, start=1)} | {f"B{k}": v for k, v in enumerate(TIMES, start=1)}
        return results(tmp_path, {**cells, "D1": "=" + formula})["D1"]

    return calculated


@pytest.mark.parametrize(
    ("formula", "expected"),
    [
        ("STDEV.S(A1:A8)", statistics.stdev(ROW)),
        ("VAR.P(A1:A8)", statistics.pvariance(ROW)),
        ("MEDIAN(A1:A8)", statistics.median(ROW)),
        ("PERCENTILE.INC(A1:A8,0.3)", np.percentile(ROW, 30)),
        ("PERCENTILE.EXC(A1:A8,0.3)", np.percentile(ROW, 30, method="weibull")),
        ("SKEW(A1:A8)", scipy.stats.skew(ROW, bias=False)),
        ("KURT(A1:A8)", scipy.stats.kurtosis(ROW, bias=False)),
        ("GEOMEAN(B1:B8)", statistics.geometric_mean(TIMES)),
        ("HARMEAN(B1:B8)", statistics.harmonic_mean(TIMES)),
        ("CORREL(A1:A8,B1:B8)", statistics.correlation(ROW, TIMES)),
        ("SLOPE(A1:A8,B1:B8)", statistics.linear_regression(TIMES, ROW).slope),
        ("INTERCEPT(A1:A8,B1:B8)", statistics.linear_regression(TIMES, ROW).intercept),
        ("INDEX(LINEST(A1:A8,B1:B8,TRUE,TRUE),2,1)", scipy.stats.linregress(TIMES, ROW).stderr),
        ("INDEX(LINEST(A1:A8,B1:B8,TRUE,TRUE),2,2)", scipy.stats.linregress(TIMES, ROW).intercept_stderr),
        ("NORM.DIST(1.3,1,2,TRUE)", statistics.NormalDist(1, 2).cdf(1.3)),
        ("NORM.INV(0.2,1,2)", statistics.NormalDist(1, 2).inv_cdf(0.2)),
        ("T.DIST(1.3,7,TRUE)", scipy.stats.t.cdf(1.3, 7)),
        ("CHISQ.INV.RT(0.05,4)", scipy.stats.chi2.isf(0.05, 4)),
        ("F.DIST.RT(2.5,3,9)", scipy.stats.f.sf(2.5, 3, 9)),
        ("BINOM.DIST(3,10,0.4,TRUE)", scipy.stats.binom.cdf(3, 10, 0.4)),
        ("POISSON.DIST(3,2.2,FALSE)", scipy.stats.poisson.pmf(3, 2.2)),
        ("GAMMA.DIST(3,2,1.5,TRUE)", scipy.stats.gamma.cdf(3, 2, scale=1.5)),
        ("BETA.INV(0.3,2,5)", scipy.stats.beta.ppf(0.3, 2, 5)),
        ("WEIBULL.DIST(1.2,2,3,TRUE)", scipy.stats.weibull_min.cdf(1.2, 2, scale=3)),
        ("MDETERM({2,1,0;1,3,1;0,1,4})", np.linalg.det([[2, 1, 0], [1, 3, 1], [0, 1, 4]])),
        ("INDEX(MINVERSE({2,1,0;1,3,1;0,1,4}),2,3)", np.linalg.inv([[2, 1, 0], [1, 3, 1], [0, 1, 4]])[1, 2]),
        ("COMBIN(30,12)", math.comb(30, 12)),
        ("ERF(0.7)", math.erf(0.7)),
    ],
)  # fmt: skip
def test_a_builtin_agrees_with_a_reference_library(value, formula: str, expected: float) -> None:
    assert value(formula) == pytest.approx(float(expected), rel=1e-11)


def test_the_annuity_functions_keep_the_annuity_equation(value) -> None:
    payment = value("PMT(0.05/12,120,-25000,3000,1)")
    assert value(f"PV(0.05/12,120,{payment!r},3000,1)") == pytest.approx(-25000, rel=1e-10)
    assert value(f"NPER(0.05/12,{payment!r},-25000,3000,1)") == pytest.approx(120, rel=1e-9)
    assert value(f"RATE(120,{payment!r},-25000,3000,1)") == pytest.approx(0.05 / 12, rel=1e-8)
    assert value("IPMT(0.01,5,24,9000)+PPMT(0.01,5,24,9000)-PMT(0.01,24,9000)") == pytest.approx(0, abs=1e-9)
    assert value("NPV(IRR({-900,400,350,300}),400,350,300)") == pytest.approx(900, rel=1e-9)


def test_days_run_as_the_calendar_does(value) -> None:
    day = date(1900, 3, 1)  # serial 61; the days before carry the application's 29 February 1900
    rng = random.Random(7)
    for _ in range(40):
        step = rng.randrange(60_000)
        at = day + timedelta(days=step)
        serial = 61 + step
        assert value(f"DATE({at.year},{at.month},{at.day})") == serial
        assert (
            value(f"YEAR({serial})*10000+MONTH({serial})*100+DAY({serial})")
            == at.year * 10000 + at.month * 100 + at.day
        )
        assert value(f"WEEKDAY({serial},2)") == at.isoweekday()
        assert value(f"ISOWEEKNUM({serial})") == at.isocalendar()[1]


@pytest.mark.parametrize(
    ("number", "pattern", "shown"),
    [  # the meaning of the placeholders is in ISO/IEC 29500-1, 18.8.31; the values are worked out by hand from it
        (1234.567, "#,##0.00", "1,234.57"), (0.5, "0%", "50%"), (-3.2, "0.0;(0.0)", "(3.2)"), (0, "0;-0;none", "none"),
        (12345.678, "0.00E+00", "1.23E+04"), (7, "000", "007"), (1500000, '0.0,,"M"', "1.5M"), (0.25, "# ?/?", "1/4"),
        (45352.5, "yyyy-mm-dd hh:mm", "2024-03-01 12:00"), (45352, "d mmm yy", "1 Mar 24"), (1.5, "[h]:mm", "36:00"),
        (2.5, "0.0 \"mm\"", "2.5 mm"), (1234, "#", "1234"), (0.1, "General", "0.1"), (45352, "dddd", "Friday"),
        (0.75, "h:mm AM/PM", "6:00 PM"),
    ],
)  # fmt: skip
def test_text_shows_a_number_in_its_format(value, number: float, pattern: str, shown: str) -> None:
    quoted = pattern.replace('"', '""')
    assert value(f'TEXT({number!r},"{quoted}")') == shown


@pytest.mark.parametrize(
    ("criterion", "count"), [('">4"', 3), ('"<=4"', 5), ("4", 1), ('"<>4"', 7), ('"=4"', 1), ('"4"', 1), ('""', 0)]
)
def test_criteria_count_what_they_say(value, criterion: str, count: int) -> None:
    assert value(f"COUNTIF(A1:A8,{criterion})") == count
