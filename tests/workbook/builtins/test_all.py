"""What every builtin keeps, whatever it is given."""

from __future__ import annotations

import itertools
import math
from datetime import datetime
from typing import Any

import pytest

from cellsection.workbook.book import Book, Formula, Limits, Sheet
from cellsection.workbook.builtins import BUILTINS
from cellsection.workbook.recalculate import recalculated
from cellsection.workbook.results import Status
from cellsection.workbook.values import ErrorValue

ODD = ("1", "-1.5", "0", '"x"', '""', "TRUE", "A1", "A1:B3", "C9", "{1,2;3,4}", "#N/A", "1E300")
PATIENT = {"REPT", "SEQUENCE", "MUNIT", "EXPAND", "WORKDAY", "WORKDAY.INTL", "FACTDOUBLE", "RANDARRAY"}


def calculated(formulas: list[str]) -> list[tuple[str, Any, Status, str]]:
    sheet = Sheet("S", {(1, 1): 2.0, (2, 1): "text", (3, 1): True, (1, 2): -1.0, (2, 2): ErrorValue("#DIV/0!")})
    for k, text in enumerate(formulas):
        sheet.formulas[10 + k, 5] = Formula(text, 10 + k, 5)
    found = recalculated(Book("book", "xlsx", [sheet]), None, Limits(seconds=60)).cells
    return [(text, c.value, c.status, c.reason) for text, c in zip(formulas, found, strict=True)]


@pytest.mark.parametrize("name", sorted(BUILTINS))
def test_a_builtin_gives_a_proper_value_or_an_error_value_for_anything(name: str) -> None:
    declared = BUILTINS[name]
    most = min(declared.most if declared.most is not None else declared.least + 1, 4)
    formulas = []
    for count in range(declared.least, max(most, declared.least) + 1):
        if count <= 2:
            choices = list(itertools.product(ODD, repeat=count))
        else:  # all alike, and each oddity in each place among ones
            choices = [(each,) * count for each in ODD]
            choices += [
                tuple(each if k == place else "1" for k in range(count)) for each in ODD for place in range(count)
            ]
        formulas += [f"{name}({','.join(choice)})" for choice in choices]
    for text, value, status, reason in calculated(formulas):
        assert status is not Status.UNSUPPORTED or "with these arguments" not in reason, f"{text}: {reason}"
        assert value is None or isinstance(value, (float, str, bool, ErrorValue)), text
        assert not isinstance(value, float) or math.isfinite(value), text


def test_names_are_declared_once_and_in_capitals() -> None:
    assert all(name == name.upper() for name in BUILTINS)
    assert len(BUILTINS) > 350


def test_the_clock_is_the_moment_the_recalculation_began() -> None:
    (_, value, status, _), *_ = calculated(["YEAR(TODAY())"])
    assert value == float(datetime.now().year)
    assert status is Status.VOLATILE
