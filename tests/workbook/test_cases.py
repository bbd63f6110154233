"""Formulas and the values the application gives for them, read from cases.csv (typed from memory, as its note says)."""

from __future__ import annotations

import csv
import json
from pathlib import Path

import pytest

from tests.workbook.small import Cell, Results, results

CASES = Path(__file__).parent / "cases.csv"
DATA: dict[str, Cell] = {
    **{f"A{k}": float(k) for k in range(1, 11)},
    "B1": 1.0, "B2": "2", "B3": True, "B5": "abc",
    **{f"C{k}": 10.0 * k for k in range(1, 6)}, **{f"D{k}": "abcde"[k - 1] for k in range(1, 6)},
    "E1": '=""', "F1": "=NA()", "F2": "=1/0", "G1": "1.5", "G2": "x", "H1": 0.1, "H2": 0.2, "H3": 0.3,
    "J1": "bolt", "J2": "Bolt", "J3": "nut", "J4": "bolt M12",
    "K1": 5.0, "K2": 7.0, "K3": 3.0, "K4": 2.0, "K5": 9.0,
}  # fmt: skip


def cases() -> list[tuple[str, object]]:
    lines = [line for line in CASES.read_text(encoding="utf-8").splitlines() if not line.startswith("#")]
    return [(row["formula"], json.loads(row["expected_json"])) for row in csv.DictReader(lines)]


@pytest.fixture(scope="module")
def calculated(tmp_path_factory: pytest.TempPathFactory) -> Results:
    formulas = {f"A{k}": "=" + formula for k, (formula, _) in enumerate(cases(), start=1)}
    return results(tmp_path_factory.mktemp("cases"), formulas, None, {"Data": DATA})


@pytest.mark.parametrize(("number", "formula", "expected"), [(k, f, e) for k, (f, e) in enumerate(cases(), start=1)])
def test_a_formula_gives_what_the_application_gives(
    calculated: Results, number: int, formula: str, expected: object
) -> None:
    value = calculated[f"A{number}"]
    if expected is None:  # the row's first cell is an error in F, so the sum is one
        assert value == "#N/A"
    elif isinstance(expected, (bool, str)):
        assert value == expected
        assert type(value) is type(expected)
    else:
        assert value == pytest.approx(expected, rel=1e-13, abs=0)
