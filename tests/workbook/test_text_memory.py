"""An array may hold few long texts or many short ones, and never so much of both that memory runs out."""

from __future__ import annotations

from pathlib import Path

import pytest

from cellsection.workbook.book import Limits
from cellsection.workbook.results import Status
from tests.workbook.small import results


@pytest.mark.parametrize(
    "formula",
    [
        'SEQUENCE(300)&REPT("x",30000)',
        'REPT("x",30000+SEQUENCE(300))',
        'MAKEARRAY(300,1,LAMBDA(r,c,REPT("x",30000)&r))',
        'MAKEARRAY(1,300,LAMBDA(r,c,REPT("x",30000)&c))',
        'BYROW(SEQUENCE(300),LAMBDA(r,REPT("x",30000)&r))',
        'BYCOL(SEQUENCE(1,300),LAMBDA(c,REPT("x",30000)&c))',
        'SCAN(REPT("x",30000),SEQUENCE(300),LAMBDA(a,n,a&"x"))',
        'MAP(SEQUENCE(300),LAMBDA(n,REPT("x",30000)&n))',
    ],
)
def test_long_texts_in_an_array_are_counted_by_their_characters(tmp_path: Path, formula: str) -> None:
    cells = {"A1": f"{{=SUM(LEN({formula}))}}A1:A1"}
    found = results(tmp_path, cells, limits=Limits(array_cells=100_000)).cells["A1"]
    assert found.status is Status.UNSUPPORTED
    assert "an array of texts of more than 5,000,000 characters" in found.reason
    assert results(tmp_path, cells)["A1"] > 9_000_000  # type: ignore[operator]  # 300 texts of 30,000 and more
