"""Values for arguments: what is typical under each word, and what is odd under all of them."""

from __future__ import annotations

from typing import TYPE_CHECKING

from cellsection.workbook.values import ErrorValue, Scalar

if TYPE_CHECKING:
    from random import Random

__all__ = ["AREAS", "MILD", "ODD", "number", "typical"]

WORDS = ("bolt", "Plate", "weld", "HEB 200", "girder", "flange", "web", "a", "  two  blanks ", "Ärmel", "5", "it's")
ERRORS = tuple(ErrorValue(code) for code in ("#DIV/0!", "#N/A", "#VALUE!", "#NUM!", "#REF!", "#NAME?", "#NULL!"))
CHOICES: dict[str, tuple[Scalar, ...]] = {
    "small": (0.0, 1.0, 1.0, 2.0, 2.0, 3.0, 3.0, 4.0, 5.0, 7.0, 10.0, -1.0, -2.0, 1.5, 2.9),
    "count": (1.0, 2.0, 3.0, 4.0, 5.0, 6.0, 8.0, 10.0, 12.0, 13.0, 24.0, 30.0, 48.0, 60.0, 100.0, 255.0, 0.0, -3.0,
        7.5),
    "four": (1.0, 2.0, 3.0, 4.0, 1.0, 2.0, 0.0, 5.0),
    "zeroone": (0.0, 1.0, 0.0, 1.0, 0.0, 1.0, 2.0),
    "frequency": (1.0, 2.0, 4.0, 1.0, 2.0, 4.0, 2.0, 3.0),
    "basis": (0.0, 1.0, 2.0, 3.0, 4.0, 0.0, 1.0, 2.0, 3.0, 4.0, 5.0),
    "yes": (True, False, True, False, 1.0, 0.0, 2.0, "TRUE", "no"),
    "letter": ("i", "j", "i", "j", "k", "I"),
    "code": (65.0, 97.0, 33.0, 90.0, 126.0, 128.0, 200.0, 255.0, 0.0, 256.0, 9.0, 65.9),
    "base": (2.0, 8.0, 10.0, 16.0, 36.0, 3.0, 1.0, 37.0),
    "functioncode": tuple(float(k) for k in (*range(1, 12), *range(101, 112), 0, 12, 14)),
    "optioncode": tuple(float(k) for k in (0, 1, 2, 3, 4, 5, 6, 7, 8)),
    "matchkind": (0.0, 1.0, -1.0, 0.0, 1.0),
    "weekkind": (1.0, 2.0, 3.0, 11.0, 12.0, 16.0, 17.0, 21.0, 0.0, 18.0),
    "weekend": (1.0, 2.0, 7.0, 11.0, 17.0, "0000011", "1000001", "0101010", "1111111", 0.0, 8.0),
    "interval": ("d", "m", "y", "ym", "yd", "md", "D", "x"),
    "year": (1900.0, 1999.0, 2000.0, 2023.0, 2024.0, 99.0, 0.0, 9999.0, 10000.0, 1904.0),
    "binary": ("0", "1", "10", "101", "1111111111", "1000000000", 110.0, 11.0, "", "102", "77", "7000000000"),
    "digits": ("0", "FF", "ff", "1A", "FFFFFFFFFF", "8000000000", "10", "", "G", "1e1", 12.0),
    "numbertext": ("5", "1.5", " 7 ", "1,234.5", "50%", "1e3", "-3", "abc", "", "12/25/2023", "2023-05-04",
        "10:30", "$5"),
    "datetext": ("2023-05-04", "2024-02-29", "2023-02-29", "12/25/2023", "1 May 2024", "abc", "", "10:30",
        "1900-01-01"),
    "timetext": ("10:30", "10:30:15", "1:30 PM", "25:00", "abc", "", "2023-05-04 12:00", "0:00"),
    "separator": (".", ",", " ", ";", ""),
    "pattern": ("0", "0.00", "#,##0.00", "0%", "0.0%", "0.00E+00", "yyyy-mm-dd", "d mmm yyyy", "hh:mm:ss", "@",
        "# ?/?",
                "000.0", "#.##", "0.0;(0.0)", "dddd", "[h]:mm", "General", "\"n=\"0", "0.0,", "mmmm yy",
                    "h:mm AM/PM"),
    "unit": ("m", "cm", "mm", "in", "ft", "yd", "kg", "g", "lbm", "N", "lbf", "Pa", "C", "F", "K", "hr", "mn",
        "sec", "l",
             "J", "kJ", "W", "HP", "mi", "m2", "km", "bad"),
    "criterion": (">5", "<0", ">=2", "<>3", "=4", "5", 5.0, 1.0, 0.0, "bolt", "b*", "?olt", "<>bolt", "", "=",
        "<>", ">a",
                  "<=web", True, "TRUE", "*", "~*", "#N/A", "5*"),
    "complex": ("3+4i", "1-2j", "-i", "2.5", "i", "0", "3", 4.0, -2.0, "1E+2-3i", "abc", "", "-1.5+0.5i",
        "0.1+0.2i", 0.0),
    "field": ("length", "mass", "grade", 3.0, 4.0, 1.0, "none", 0.0, 9.0),
    "address": ("Data!A1", "Data!B2:B4", "A1", "Data!$C$3", "R1C1", "none", "", "Data!A:A", "data!c5"),
}  # fmt: skip
# Words for areas: the columns of the sheet Data that are typical, by letter.
AREAS = {
    "numbers": "ABCGHL", "positives": "BBBC", "counts": "C", "fractions": "G", "mixed": "ABCDEHIJ", "sorted": "LLLLA",
    "flows": "AAH", "days": "FF", "dayrow": "F", "words": "DDEJB",
}  # fmt: skip
ODD: tuple[Scalar, ...] = (
    0.0, -1.0, 0.5, -0.25, 1e-9, 1e10, 1e15, -1e8, 1e100, 1e300, 255.0, True, False, "", "abc", "5", " 3 ", "1e2",
        "2024-01-01",
    "TRUE", 2958465.0, 60.0, 1e-300,
)  # fmt: skip
# Without the very large ones: LibreOffice steps through periods, days and terms one by one, 1E+10 of them for hours.
MILD = tuple(each for each in ODD if not isinstance(each, float) or abs(each) < 1e4)


def number(chance: Random) -> float:
    """A number as they are met: small whole ones, a few decimals, now and then very large or small."""
    pick = chance.random()
    if pick < 0.4:
        return float(chance.randint(-12, 40))
    if pick < 0.8:
        return round(chance.uniform(-100, 100), chance.randint(0, 4))
    if pick < 0.9:
        return round(chance.uniform(-1, 1), 6)
    if pick < 0.96:
        return float(chance.randint(-200_000, 200_000))
    return chance.choice((1e-7, 1e6, 123456789.0, -1e9, 0.1, 1 / 3, 2.675, 1e12))


def typical(word: str, chance: Random) -> Scalar:
    """A typical value under a word."""
    if word in CHOICES:
        return chance.choice(CHOICES[word])
    if word == "number":
        return number(chance)
    if word == "positive":
        return float(round(chance.choice((chance.uniform(0.01, 5), chance.uniform(0.5, 50), chance.randint(1, 20))), 3))
    if word == "fraction":
        return round(chance.random(), chance.choice((1, 2, 2, 3, 5)))
    if word == "rate":
        return round(chance.choice((0.05, chance.uniform(0.001, 0.2), chance.uniform(0.001, 0.2), 0.0, 0.1)), 4)
    if word == "money":
        return float(round(chance.choice((100.0, chance.uniform(80, 120), chance.uniform(-5000, 20000))), 2))
    if word in ("day", "later", "soon"):
        start = {"day": 36_526, "later": 45_000, "soon": 45_200}[word]
        length = {"day": 8_700, "later": 7_000, "soon": 150}[word]
        return float(start + chance.randint(0, length)) + chance.choice((0.0, 0.0, 0.0, 0.0, 0.5, 0.71875))
    if word == "text":
        return chance.choice(WORDS)
    pick = chance.random()  # any
    if pick < 0.5:
        return number(chance)
    if pick < 0.8:
        return chance.choice(WORDS)
    return chance.choice((True, False, 45_000.0, 0.0, *ERRORS[:2]))
