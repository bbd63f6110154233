"""The conditions that records of known differences are made of: kinds of argument, and kinds of outcome."""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING

from cellsection.workbook.values import Array, ErrorValue, Scalar
from tests.differential.expressions import Piece, kind_of, kinds_in
from tests.differential.known import Condition

if TYPE_CHECKING:
    from collections.abc import Iterator

    from tests.differential.comparison import Difference

__all__ = [
    "DIGITS",
    "EARLY",
    "EARLY_TERM",
    "ERROR_CONSTANT",
    "EXPONENT",
    "FRACTION",
    "LEFT_OUT",
    "LOGICAL_RESULT",
    "MANY",
    "NEGATIVE",
    "NUMBERS",
    "ODD_LIFE",
    "OURS_ONLY",
    "PASSED_ON",
    "SEVERAL",
    "SINGLE_RESULT",
    "TEXTS",
    "THEIRS_ONLY",
    "TINY",
    "UNSORTED",
    "WORD",
    "ZERO_POWER",
    "has",
]  # fmt: skip


QUESTIONS = ("ISNUMBER", "ISTEXT", "ISERROR", "ISBLANK", "<", ">", "<=", ">=", "=", "<>")


def has(*kinds: str) -> Condition:
    """Some argument is of a kind, or an area or array among them holds one."""
    wanted = frozenset(kinds)
    return Condition(
        f"an argument is or holds {' or '.join(kinds)}",
        lambda d: any(kinds_in(each.value) & wanted for each in d.piece.arguments if each.form != "missing"),
    )


def scalars(difference: Difference) -> Iterator[Scalar]:
    """The single values among the arguments, those of areas and arrays too."""
    for each in difference.piece.arguments:
        if isinstance(each.value, tuple):
            yield from (cell for row in each.value for cell in row)
        else:
            yield each.value


def numeric(value: Scalar) -> bool:
    """Whether a value counts as a number (LibreOffice's logicals are numbers)."""
    return not isinstance(value, str | ErrorValue)


def ascending(piece: Piece) -> bool:
    """Whether an area or array is sorted upwards and of nothing but numbers."""
    values = [cell for row in piece.value for cell in row] if isinstance(piece.value, tuple) else []
    return all(isinstance(a, float) and isinstance(b, float) and a <= b for a, b in pairwise(values))


LEFT_OUT = Condition(
    "an argument is written but empty, or a blank cell",
    lambda d: any(each.form == "missing" or each.value is None for each in d.piece.arguments),
)
ERROR_CONSTANT = Condition(
    "an array constant holds an error value, which LibreOffice refuses as Err:539",
    lambda d: d.shown == "Err:539",
)
WORD = Condition(
    'ours is #VALUE! and an argument is the text "TRUE" or another that spells no number',
    lambda d: (
        isinstance(d.ours, ErrorValue)
        and d.ours.code == "#VALUE!"
        and any(kind_of(each) == "text" for each in scalars(d))
    ),
)
NUMBERS = Condition("both sides give a number", lambda d: numeric(d.ours) and numeric(d.theirs))
DIGITS = Condition(
    "the two numbers agree to 1 part in 10,000",
    lambda d: (
        numeric(d.ours)
        and numeric(d.theirs)
        and abs(float(d.ours or 0) - float(d.theirs or 0)) < 1e-4 * abs(float(d.theirs or 0))  # type: ignore[arg-type]
    ),
)
TEXTS = Condition("both sides give text", lambda d: isinstance(d.ours, str) and isinstance(d.theirs, str))
OURS_ONLY = Condition(
    "LibreOffice gives an error, ours a value",
    lambda d: isinstance(d.theirs, ErrorValue) and not isinstance(d.ours, ErrorValue),
)
THEIRS_ONLY = Condition(
    "ours is an error, LibreOffice gives a value",
    lambda d: isinstance(d.ours, ErrorValue) and not isinstance(d.theirs, ErrorValue),
)
EARLY = Condition(
    "a day before 1 March 1900 (a serial number below 61, none or a negative one among them)",
    lambda d: any(value is None or (isinstance(value, float) and value < 61) for value in scalars(d)),
)
LARGE = Condition(
    "a number of 1E+9 or more", lambda d: any(isinstance(value, float) and abs(value) >= 1e9 for value in scalars(d))
)
LATE = Condition(
    "a day after 31 December 9999",
    lambda d: any(isinstance(value, float) and value >= 2958466 for value in scalars(d)),
)
EARLY_TERM = Condition(
    "one of the first two arguments, which are days, lies before 1 March 1900",
    lambda d: any(
        each.value is None or (isinstance(each.value, float) and each.value < 61) for each in d.piece.arguments[:2]
    ),
)
NEGATIVE = Condition(
    "an argument is negative", lambda d: any(isinstance(value, float) and value < 0 for value in scalars(d))
)
FRACTION = Condition(
    "an argument that is taken as whole has a fraction",
    lambda d: any(isinstance(value, float) and value != int(value) for value in scalars(d)),
)
MANY = Condition("an array formula of more than one row", lambda d: d.array)
UNSORTED = Condition(
    "the area searched is not sorted upwards, or holds blanks",
    lambda d: any(isinstance(each.value, tuple) and not ascending(each) for each in d.piece.arguments),
)


def unusable(piece: Piece) -> bool:
    """Whether an argument holds an error, or text (which may stand where a number is wanted)."""
    return bool(kinds_in(piece.value) & {"error", "text", "empty text"})


SEVERAL = Condition(
    "both sides give an error, and several arguments, or cells of one, are errors or text: another one is met first",
    lambda d: (
        isinstance(d.ours, ErrorValue)
        and isinstance(d.theirs, ErrorValue)
        and (
            sum(unusable(each) for each in d.piece.arguments) > 1
            or any(isinstance(each.value, tuple) and unusable(each) for each in d.piece.arguments)
            or any(each.head for each in d.piece.arguments)
        )
    ),
)
PASSED_ON = Condition(
    "an argument is or holds an error that one side passes on and the other counts, matches or skips",
    lambda d: any("error" in kinds_in(each.value) for each in d.piece.arguments),
)
EXPONENT = Condition(
    "a number of 1E+21 or more, or below 1E-9, becomes text",
    lambda d: any(isinstance(value, float) and value and not 1e-9 <= abs(value) < 1e21 for value in scalars(d)),
)
TINY = Condition(
    "a number below 1E-50", lambda d: any(isinstance(value, float) and 0 < abs(value) < 1e-50 for value in scalars(d))
)
SINGLE_RESULT = Condition(
    "the third argument is a single value",
    lambda d: len(d.piece.arguments) > 2 and not isinstance(d.piece.arguments[2].value, tuple),
)
LOGICAL_RESULT = Condition(
    "the value searched for is the result of a function that gives a logical",
    lambda d: d.path == "ods" and d.piece.arguments[0].head in ("AND", "OR", "NOT", "EXACT", *QUESTIONS),
)
ZERO_POWER = Condition(
    "0 to the power 0, or a result too small for a double, which is 0 here",
    lambda d: d.ours == 0.0 or all(not each for each in scalars(d)),
)
ODD_LIFE = Condition(
    "the salvage is not from 0 to the cost, the cost or the life is not positive, life or period has a fraction, or "
    "the period lies outside the life",
    lambda d: odd_life([each.value for each in d.piece.arguments]),
)


def odd_life(values: list[Scalar | Array]) -> bool:
    """Whether cost, salvage, life and period are other than a depreciation table has them."""
    cost, salvage, life, period = (
        float(v) if isinstance(v, float) else 0.0 if v is None else float("nan") for v in values[:4]
    )
    usual = 0 <= salvage <= cost and cost > 0 and life > 0 and 1 <= period <= life
    return not (usual and period == int(period) and life == int(life))
