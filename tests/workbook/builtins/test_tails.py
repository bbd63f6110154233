"""Quantiles deep in a tail lead back to the probability that they were asked for."""

from __future__ import annotations

from collections.abc import Callable

import mpmath
import pytest

from cellsection.workbook.book import Book, Formula, Sheet
from cellsection.workbook.recalculate import recalculated
from cellsection.workbook.results import Status
from cellsection.workbook.values import Scalar


def value(text: str) -> Scalar:
    """The value of a formula."""
    sheet = Sheet("S")
    sheet.formulas[1, 1] = Formula(text, 1, 1)
    (cell,) = recalculated(Book("book", "xlsx", [sheet])).cells
    assert cell.status is Status.RECALCULATED, cell.reason
    return cell.value


def beta_share(a: float, b: float, x: mpmath.mpf) -> mpmath.mpf:
    """The regularised incomplete beta function (NIST DLMF 8.17.2)."""
    return mpmath.betainc(mpmath.mpf(a), mpmath.mpf(b), 0, x, regularized=True)


# The upper tails of F and t and the lower one of the beta law, as incomplete beta functions: NIST DLMF 8.17,
# Abramowitz and Stegun 26.5.2, 26.6.2, 26.7.1
SHARES: dict[str, Callable[..., mpmath.mpf]] = {
    "F.INV.RT": lambda x, a, b: beta_share(b / 2, a / 2, b / (b + a * x)),
    "F.INV": lambda x, a, b: beta_share(a / 2, b / 2, a * x / (b + a * x)),
    "BETA.INV": lambda x, a, b: beta_share(a, b, x),
    "T.INV.2T": lambda x, n: beta_share(n / 2, 0.5, n / (n + x * x)),
    "T.INV": lambda x, n: beta_share(n / 2, 0.5, n / (n + x * x)) / 2,
}
LAWS: dict[str, list[tuple[int, ...]]] = {
    "F.INV.RT": [(4, 900), (5, 20), (100, 3)],
    "BETA.INV": [(3, 5), (200, 2)],
    "T.INV.2T": [(3,), (30,)],
}
LAWS |= {"F.INV": LAWS["F.INV.RT"], "T.INV": LAWS["T.INV.2T"]}


@pytest.mark.parametrize("name", SHARES)
@pytest.mark.parametrize("p", [1e-3, 1e-9, 1e-12, 1e-16, 1e-20, 1e-50, 1e-200])
def test_a_quantile_in_the_tail_has_ten_digits(name: str, p: float) -> None:
    with mpmath.workdps(60):
        for law in LAWS[name]:
            found = value(f"{name}({p!r},{','.join(map(str, law))})")
            assert isinstance(found, float)
            x, step = mpmath.mpf(found), mpmath.mpf("1e-10")
            low, high = sorted(SHARES[name](x * factor, *law) for factor in (1 - step, 1 + step))
            assert low <= p <= high, (law, found)


@pytest.mark.parametrize("name", ["COUNTIFS", "SUMIFS", "AVERAGEIFS", "MAXIFS", "MINIFS"])
def test_a_criterion_without_its_area_is_a_finding_and_never_a_value(name: str) -> None:
    count = 5 if name == "COUNTIFS" else 6
    sheet = Sheet("S")
    sheet.formulas[1, 1] = Formula(f"{name}({','.join(['B1'] * count)})", 1, 1)
    (cell,) = recalculated(Book("book", "xlsx", [sheet])).cells
    assert cell.status is Status.UNSUPPORTED
    assert f"{name} with {count} arguments" in cell.reason
