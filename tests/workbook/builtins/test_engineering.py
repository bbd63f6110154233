"""Engineering functions, securities, lists and tails of distributions against libraries and definitions."""

from __future__ import annotations

import cmath
import math
from datetime import date

import mpmath
import numpy as np
import pytest
import scipy.special

from cellsection.workbook.book import Book, Formula, Sheet
from cellsection.workbook.recalculate import recalculated
from cellsection.workbook.values import ErrorValue, Scalar


def values(formulas: list[str], cells: dict[tuple[int, int], Scalar] | None = None) -> list[Scalar]:
    """The values of formulas in column Z of a sheet."""
    sheet = Sheet("S", dict(cells or {}))
    for row, text in enumerate(formulas, start=1):
        sheet.formulas[row, 26] = Formula(text, row, 26)
    found = recalculated(Book("book", "xlsx", [sheet])).cells
    return [cell.value.code if isinstance(cell.value, ErrorValue) else cell.value for cell in found]


def serial(day: date) -> int:
    return (day - date(1899, 12, 30)).days


BESSEL = {
    "BESSELJ": scipy.special.jv,
    "BESSELY": scipy.special.yv,
    "BESSELI": scipy.special.iv,
    "BESSELK": scipy.special.kv,
}


@pytest.mark.parametrize("name", BESSEL)
def test_bessel_functions_have_the_accuracy_that_is_stated(name: str) -> None:
    places = [(x, n) for x in (0.3, 1.0, 2.5, 4.0, 7.9, 8.1, 20.0) for n in (0, 1, 2, 5)]
    found = values([f"{name}({x},{n})" for x, n in places])
    for (x, n), value in zip(places, found, strict=True):
        exact = float(BESSEL[name](n, x))
        # 2e-7 of the value; of J and Y of the amplitude of the wave, which recurrence to higher orders can enlarge
        scale = abs(exact) if name in ("BESSELI", "BESSELK") else max(abs(exact), math.sqrt(2 / (math.pi * x)))
        assert abs(value - exact) < 4e-7 * scale, (x, n)


COMPLEX = {
    "IMEXP": cmath.exp,
    "IMLN": cmath.log,
    "IMSQRT": cmath.sqrt,
    "IMSIN": cmath.sin,
    "IMCOS": cmath.cos,
    "IMTAN": cmath.tan,
    "IMSINH": cmath.sinh,
    "IMCOSH": cmath.cosh,
    "IMLOG10": cmath.log10,
    "IMSEC": lambda z: 1 / cmath.cos(z),
    "IMCSC": lambda z: 1 / cmath.sin(z),
    "IMCOT": lambda z: 1 / cmath.tan(z),
    "IMCONJUGATE": lambda z: z.conjugate(),
    "IMLOG2": lambda z: cmath.log(z) / math.log(2),
}


@pytest.mark.parametrize("name", COMPLEX)
def test_functions_of_complex_numbers_agree_with_the_standard_library(name: str) -> None:
    for z in (3 + 4j, -0.5 + 0.25j, 1.5 - 2j):
        text = f"{z.real:g}{z.imag:+g}i"
        real, imaginary = values([f'IMREAL({name}("{text}"))', f'IMAGINARY({name}("{text}"))'])
        exact = COMPLEX[name](z)
        assert (real, imaginary) == (pytest.approx(exact.real, rel=1e-12), pytest.approx(exact.imag, rel=1e-12)), z


def test_sums_products_and_powers_of_complex_numbers() -> None:
    found = values(
        [
            'IMSUM("1+2i","3-4i")',
            'IMSUB("1+2i","3-4i")',
            'IMPRODUCT("1+2i","3-4i")',
            'IMABS("3+4i")',
            'IMREAL(IMPOWER("2+i",3))',
            'IMAGINARY(IMDIV("1+2i","3-4i"))',
            'IMARGUMENT("-1+i")',
            "COMPLEX(3,-4)",
            'COMPLEX(0,1,"j")',
        ]
    )
    power, quotient = (2 + 1j) ** 3, (1 + 2j) / (3 - 4j)
    assert found[:4] == ["4-2i", "-2+6i", "11+2i", 5.0]
    assert found[4:7] == [
        pytest.approx(power.real, rel=1e-12),
        pytest.approx(quotient.imag, rel=1e-12),
        pytest.approx(0.75 * math.pi),
    ]
    assert found[7:] == ["3-4i", "j"]


# Exact by definition: the inch, the pound, standard gravity, the horsepower of 550 ft lbf/s (NIST SP 811, App. B)
INCH, POUND, GRAVITY = 0.0254, 0.45359237, 9.80665


@pytest.mark.parametrize(
    ("formula", "expected"),
    [
        ('CONVERT(1,"in","mm")', INCH * 1000),
        ('CONVERT(1,"ft","m")', 12 * INCH),
        ('CONVERT(1,"yd","m")', 36 * INCH),
        ('CONVERT(1,"mi","km")', 63360 * INCH / 1000),
        ('CONVERT(1,"lbm","kg")', POUND),
        ('CONVERT(1,"lbf","N")', POUND * GRAVITY),
        ('CONVERT(1,"kN","lbf")', 1000 / (POUND * GRAVITY)),
        ('CONVERT(1,"psi","Pa")', POUND * GRAVITY / INCH**2),
        ('CONVERT(1,"atm","Pa")', 101325.0),
        ('CONVERT(1,"HP","W")', 550 * 12 * INCH * POUND * GRAVITY),
        ('CONVERT(68,"F","C")', 20.0),
        ('CONVERT(0,"C","K")', 273.15),
        ('CONVERT(1,"day","sec")', 86400.0),
        ('CONVERT(1,"l","m^3")', 0.001),
        ('CONVERT(1,"in^2","mm^2")', (INCH * 1000) ** 2),
        ('CONVERT(1,"kg","kN")', "#N/A"),
        ('CONVERT(1,"furlong","m")', "#N/A"),
    ],
)
def test_units_convert_by_their_definitions(formula: str, expected: Scalar) -> None:
    (found,) = values([formula])
    assert found == (expected if isinstance(expected, str) else pytest.approx(expected, rel=1e-12))


def test_the_price_of_a_security_is_the_worth_of_its_payments_and_its_yield_leads_back() -> None:
    # Bought on a coupon day: ten years of half-yearly coupons of 5 % at a yield of 6 %, worked out payment by payment.
    bought, due = serial(date(2024, 3, 15)), serial(date(2034, 3, 15))
    exact = sum(2.5 / 1.03**k for k in range(1, 21)) + 100 / 1.03**20
    price, rate, number = values(
        [
            f"PRICE({bought},{due},0.05,0.06,100,2,0)",
            f"YIELD({bought},{due},0.05,{exact!r},100,2,0)",
            f"COUPNUM({bought},{due},2,0)",
        ]
    )
    assert price == pytest.approx(exact, rel=1e-12)
    assert rate == pytest.approx(0.06, rel=1e-9)
    assert number == 20.0


def test_durations_weigh_the_payments_by_their_worth() -> None:
    bought, due = serial(date(2024, 1, 1)), serial(date(2029, 1, 1))
    worth = [(k / 2, (4 + 100 * (k == 10)) / 1.045**k) for k in range(1, 11)]
    exact = sum(t * w for t, w in worth) / sum(w for _, w in worth)
    long, modified = values([f"{name}({bought},{due},0.08,0.09,2,1)" for name in ("DURATION", "MDURATION")])
    assert long == pytest.approx(exact, rel=1e-12)
    assert modified == pytest.approx(exact / 1.045, rel=1e-12)


def test_functions_of_lists_take_the_rows_that_meet_their_criteria() -> None:
    rows: list[list[Scalar]] = [
        ["mark", "grade", "mass"],
        ["g1", "S355", 120.0],
        ["g2", "S275", 80.0],
        ["g3", "S355", 200.0],
        ["g4", "S355", None],
    ]
    cells = {(r, c): v for r, row in enumerate(rows, start=1) for c, v in enumerate(row, start=1) if v is not None}
    cells |= {(1, 5): "grade", (1, 6): "mass", (2, 5): "S355", (2, 6): ">150", (3, 5): "S275"}
    found = values(
        [
            'DSUM(A1:C5,"mass",E1:E2)',
            'DCOUNT(A1:C5,"mass",E1:E2)',
            'DCOUNTA(A1:C5,"mark",E1:E2)',
            "DMAX(A1:C5,3,E1:F2)",
            'DGET(A1:C5,"mark",E1:F2)',
            'DSUM(A1:C5,"mass",E1:F3)',
            'DAVERAGE(A1:C5,"mass",E1:E2)',
            'DGET(A1:C5,"mark",E1:E2)',
        ],
        cells,
    )
    assert found == [320.0, 2.0, 3.0, 200.0, "g3", 280.0, 160.0, "#NUM!"]


@pytest.mark.parametrize(
    ("formula", "exact"),
    [
        ("NORM.S.DIST(-37,TRUE)", lambda: mpmath.ncdf(-37)),
        ("NORM.S.DIST(-10,TRUE)", lambda: mpmath.ncdf(-10)),
        ("ERFC(10)", lambda: mpmath.erfc(10)),
        ("CHISQ.DIST.RT(900,4)", lambda: mpmath.gammainc(2, 450, regularized=True)),
        ("GAMMA.DIST(1E-60,2,1,TRUE)", lambda: mpmath.gammainc(2, 0, mpmath.mpf("1e-60"), regularized=True)),
        ("T.DIST.2T(40,1000)", lambda: mpmath.betainc(500, 0.5, 0, mpmath.mpf(1000) / 2600, regularized=True)),
        ("F.DIST.RT(60,4,900)", lambda: mpmath.betainc(450, 2, 0, mpmath.mpf(900) / 1140, regularized=True)),
        ("BETA.DIST(1E-30,3,5,TRUE)", lambda: mpmath.betainc(3, 5, 0, mpmath.mpf("1e-30"), regularized=True)),
        ("POISSON.DIST(0,700,TRUE)", lambda: mpmath.exp(-700)),
        ("BINOM.DIST(0,1000,0.5,FALSE)", lambda: mpmath.mpf(2) ** -1000),
        ("GAMMALN(1E10)", lambda: mpmath.loggamma(mpmath.mpf(10) ** 10)),
        ("GAMMA(-0.5)", lambda: -2 * mpmath.sqrt(mpmath.pi)),
        ("EXPON.DIST(1E-12,1,TRUE)", lambda: -mpmath.expm1(mpmath.mpf("-1e-12"))),
    ],
)
def test_tails_of_distributions_keep_nine_digits(formula: str, exact) -> None:
    with mpmath.workdps(40):
        (found,) = values([formula])
        assert found == pytest.approx(float(exact()), rel=1e-9)


def test_regressions_agree_with_least_squares() -> None:
    x = np.array([[1.0, 2.0], [2.0, 1.5], [3.0, 4.0], [4.0, 3.0], [5.5, 6.0], [7.0, 4.5]])
    y = np.array([2.1, 2.0, 5.2, 4.4, 8.3, 7.7])
    cells: dict[tuple[int, int], Scalar] = {(r + 1, c + 1): float(x[r, c]) for r in range(6) for c in range(2)}
    cells |= {(r + 1, 3): float(y[r]) for r in range(6)}
    (b1, b2, b0), *_ = np.linalg.lstsq(np.column_stack([x, np.ones(6)]), y, rcond=None)
    found = values(
        [
            "INDEX(LINEST(C1:C6,A1:B6),1,1)",
            "INDEX(LINEST(C1:C6,A1:B6),1,2)",
            "INDEX(LINEST(C1:C6,A1:B6),1,3)",
            "INDEX(TREND(C1:C6,A1:B6,{3,3}),1)",
            "INDEX(LOGEST(C1:C6,A1:A6),1,1)",
        ],
        cells,
    )
    slope = np.polyfit(x[:, 0], np.log(y), 1)[0]
    assert found == [pytest.approx(float(e), rel=1e-9) for e in (b2, b1, b0, b0 + 3 * b1 + 3 * b2, np.exp(slope))]


def test_regular_expressions_find_replace_and_test() -> None:
    assert values(
        [
            'REGEXEXTRACT("HEB 320 S355","[0-9]+")',
            'REGEXREPLACE("M12 x 40","([0-9]+) x ([0-9]+)","$2 by $1")',
            'REGEXTEST("IPE 300","^IPE [0-9]{3}$")',
            'REGEXTEST("ipe 300","^IPE",1)',
        ]
    ) == ["320", "M40 by 12", True, True]
