"""What the differential test found wrong here, each with the source that says what is right."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

from tests.workbook.small import Cell, results

if TYPE_CHECKING:
    from pathlib import Path

CELLS: dict[str, Cell] = {"A1": 1.0, "A2": -2.0, "A3": "x", "B1": 3.0, "B2": 5.0, "C1": -4.0, "C2": -5.0}
REFERENCE = "the application's function reference"
FOUND = (
    ("SERIESSUM(-2,0.5,1,A1:A2)", "#NUM!", "a fractional power of a negative number has no real value"),
    ("SERIESSUM(2,1,1,A1:A3)", "#VALUE!", f'{REFERENCE}, SERIESSUM: "any argument is nonnumeric"'),
    ("GROWTH(B1:B2,D1:D2)", "#VALUE!", f"{REFERENCE}, LINEST and its kin take no blank cells (from memory)"),
    ("COUNTIF(#REF!,1)", "#REF!", "an error in place of a range is passed on (from memory)"),
    ("SUMIF(#REF!,1)", "#REF!", "an error in place of a range is passed on (from memory)"),
    ("BETA.INV(0.5,2,3,9,1)", "#NUM!", f"{REFERENCE}, BETA.DIST: the bounds must differ, A below B"),
    ("RATE(60,92.58,0)", "#NUM!", "payments of one sign are worth nothing at no rate"),
    ("MIRR(C1:C2,0.1,0)", -1.0, "saved by the application for flows without a positive value"),
    ('TEXT(23,"@")', "23", "ISO/IEC 29500-1 18.8.30: @ stands for the text of the cell"),
    ("SECH(-1000)", 0.0, "2 / (e^1000 + e^-1000), below the least double"),
    ("COT(2^27)", "#NUM!", f"{REFERENCE}, COT: the absolute value must be less than 2^27"),
    ("DEC2OCT(-13.6)", "7777777763", f'{REFERENCE}, DEC2OCT: "if number is not an integer, it is truncated"'),
    ("GCD(12,A3)", "#VALUE!", f'{REFERENCE}, GCD: "any value is nonnumeric"'),
    ('NETWORKDAYS.INTL(36815,39190,"1111111")', 0.0, f'{REFERENCE}: "using 1111111 will always return 0"'),
    ("FIXED(10.6,20)", "10.60000000000000000000", "numbers carry 15 digits; those behind are shown as zeros"),
    ('SUBSTITUTE("a","","b",0)', "#VALUE!", f"{REFERENCE}, SUBSTITUTE: the instance counts from 1 (from memory)"),
    ('SUM(COUNTIFS(B1:B2,">0",B1:B2,{3,5}))', 2.0, "a criterion may be an array; each of its elements is counted"),
    ("F.TEST(B1:B2,{7,7})", "#DIV/0!", f'{REFERENCE}, F.TEST: "if the variance of array1 or array2 is zero"'),
    ('"weld"<"Ärmel"', False, "OpenFormula 6.4.9: text is compared by the collation of the locale"),
    ('"arm"<"Ärmel"', True, "OpenFormula 6.4.9: text is compared by the collation of the locale"),
)


@pytest.mark.parametrize(("formula", "value", "source"), FOUND, ids=[each[0] for each in FOUND])
def test_what_differed_from_the_second_opinion_is_put_right(
    formula: str, value: object, source: str, tmp_path: Path
) -> None:
    assert results(tmp_path, {**CELLS, "F9": f"={formula}"})["F9"] == value, source


def test_openformula_means_the_left_tail_by_finv_and_the_right_one_by_legacy_finv() -> None:
    """OpenFormula: FINV is the inverse of FDIST, the left tail; LEGACY.FINV of LEGACY.FDIST, the right one."""
    from cellsection.workbook.lexer import tokens

    texts = ("FINV(0.5;1;2)", "LEGACY.FINV(0.5;1;2)", "SKEWP([.A1:.A3])", "FORMULA([.A1])")
    assert [tokens(text, 1, 1, "openformula")[0].text for text in texts] == ["F.INV", "FINV", "SKEW.P", "FORMULATEXT"]
    assert tokens("FINV(0.5,1,2)", 1, 1)[0].text == "FINV"
