"""A formula's text made relative, to compile alike formulas once; and moved to another cell, to show it."""

from __future__ import annotations

import re
from typing import Literal, TypeAlias

from cellsection.workbook.addresses import LAST_COLUMN, LAST_ROW
from cellsection.workbook.book import Formula, Position, column_letters, column_number
from cellsection.workbook.keys import SHIFT

__all__ = ["Columns", "Key", "Pattern", "moved_text", "relative_key", "shown_text"]

Key: TypeAlias = tuple[str | int, ...]

# One group around every word and around all that is left as it is: texts, quoted sheet names, bracketed parts of tables
# and other books. A word takes the sign behind it along that tells a function or a sheet from a reference.
EXCEL = re.compile(r"""([\w.$\\]+[(!]?|"(?:[^"]|"")*"|'(?:[^']|'')*'|\[(?:[^\[\]']|'.)*\])""")
OPENFORMULA = re.compile(r"""("(?:[^"]|"")*"|'(?:[^']|'')*'|(?<=\.)\$?(?:[A-Za-z]{1,3})?\$?(?:[0-9]{1,7})?(?=[\]:]))""")
PATTERN = {"excel": EXCEL, "openformula": OPENFORMULA}
LETTERS = re.compile(r"(\$?)([A-Za-z]{1,3})(\$?)")
DIGITS = "0123456789"
OWN_TABLE = "[@"  # how a column of the table is named in which the formula itself stands
LONGEST = 10_000  # characters of a formula that others are compared with


class Letters(dict[str, tuple[int, int] | None]):
    """What stands before the digits of a reference: which of row and column are relative, and the column's number.

    1: the row is, 2: the column is, 3: both are, 0: neither. None where it is no column.
    """

    def __missing__(self, letters: str) -> tuple[int, int] | None:
        found = None
        match = LETTERS.fullmatch(letters)
        if match is not None and (column := column_number(match[2])) <= LAST_COLUMN:
            found = ((0 if match[3] else 1) + (0 if match[1] else 2), column)
        if len(letters) < 6:
            self[letters] = found
        return found


COLUMNS = Letters()


def beside(before: str | int, behind: str | int) -> bool:
    """Whether what stands between is one end of a range, as of whole columns or rows."""
    return str(before).startswith(":") or str(behind).startswith(":")


def relative_key(text: str, row: int, column: int, language: str) -> Key:
    """What is the same of two formulas exactly when they mean the same relative to their cells.

    >>> relative_key("B3*2", 2, 1, "excel") == relative_key("B4*2", 3, 1, "excel")
    True
    """
    if OWN_TABLE in text:  # of the table that the formula stands in, which it does not name
        return (text, row, column)
    return keyed(PATTERN[language].split(text), row, column)


def keyed(given: list[str], row: int, column: int) -> Key:
    """The relative key from the parts of a text."""
    parts: list[str | int] = [*given]
    own = (0, row << SHIFT, column, (row << SHIFT) + column)
    for k in range(1, len(given), 2):
        part = given[k]
        letters = part.rstrip(DIGITS)
        known = COLUMNS[letters]
        if known is None:
            if part[-1:] == "!" and given[k - 1] == ":":  # the first sheet of several is a name, whatever it looks like
                parts[k - 2] = given[k - 2]
            elif part and letters == "" and len(part) < 8 and beside(given[k - 1], given[k + 1]):
                parts[k] = f"row {int(part) - row}"
            continue
        kind, number = known
        digits = part[len(letters) :]
        if digits:
            if len(digits) < 8 and (at := int(digits)) <= LAST_ROW:
                parts[k] = ((at << SHIFT) + number - own[kind]) * 4 + kind
        elif beside(given[k - 1], given[k + 1]):
            parts[k] = f"column {number - column if kind & 2 else letters}"
    return tuple(parts)


class Pattern:
    """A formula as it would read elsewhere in its column: a text to compare with is had sooner than a relative key."""

    __slots__ = ("key", "offsets", "template")

    def __init__(self, text: str, row: int, column: int, language: str) -> None:
        parts = PATTERN[language].split(text)
        self.key = keyed(parts, row, column)
        self.offsets: list[int] = []
        for k in range(1, len(parts), 2):
            if self.key[k].__class__ is int and self.key[k] & 1:  # type: ignore[operator]
                letters = parts[k].rstrip(DIGITS)
                self.offsets.append(int(parts[k][len(letters) :]) - row)
                parts[k] = letters.replace("%", "%%") + "%d"
            else:
                parts[k] = parts[k].replace("%", "%%")
        self.template = "".join(part.replace("%", "%%") if k % 2 == 0 else part for k, part in enumerate(parts))

    def text_in(self, row: int) -> str:
        """The formula as it would read in a row."""
        return self.template % tuple([offset + row for offset in self.offsets])


class Columns:
    """The formulas of one sheet as they are read: one that reads like the last of its column, filled on, is that one.

    So a column that an application saved text by text is computed and kept like one saved as a shared formula.
    """

    def __init__(self, language: Literal["excel", "openformula"]) -> None:
        self.language = language
        self.last: dict[int, tuple[Pattern, Formula]] = {}

    def formula(self, text: str, row: int, column: int) -> Formula:
        """The formula of a cell."""
        met = self.last.get(column)
        if met is not None and met[0].text_in(row) == text:
            return met[1]
        if OWN_TABLE in text or len(text) > LONGEST:
            return Formula(text, row, column, language=self.language)
        pattern = Pattern(text, row, column, self.language)
        formula = Formula(text, row, column, language=self.language, key=pattern.key)
        self.last[column] = (pattern, formula)
        return formula


def moved_text(text: str, down: int, across: int, language: str) -> str:
    """The formula as it reads when filled to another cell, as the children of a shared formula are.

    >>> moved_text("A1*$B$2+SUM(C:C)", 2, 1, "excel")
    'B3*$B$2+SUM(D:D)'
    """
    if not down and not across:
        return text
    parts = PATTERN[language].split(text)
    given = tuple(parts)
    for k in range(1, len(parts), 2):
        part = parts[k]
        letters = part.rstrip(DIGITS)
        known, digits = COLUMNS[letters], part[len(letters) :]
        line = beside(given[k - 1], given[k + 1])
        if known is None:
            if part[-1:] == "!" and given[k - 1] == ":":
                parts[k - 2] = given[k - 2]
            elif digits and letters == "" and line:
                parts[k] = str(int(digits) + down)
        elif (digits and int(digits) <= LAST_ROW) or (not digits and line):
            kind, number = known
            if kind & 2:
                letters = column_letters(max(number + across, 1)) + ("$" if letters.endswith("$") else "")
            parts[k] = letters + (str(int(digits) + down) if digits and kind & 1 else digits)
    return "".join(parts)


FILE_PREFIX = re.compile(r"_xl(?:fn|ws|udf|pm|op)\.")


def shown_text(formula: Formula, position: Position) -> str:
    """A formula as the engineer reads it in its own cell: without the prefixes that only the file carries."""
    text = moved_text(formula.text, position[0] - formula.row, position[1] - formula.column, formula.language)
    if "_xl" in text:
        text = FILE_PREFIX.sub("", text)
    sign = "=" if formula.language == "excel" else "of:="
    return f"{{{sign}{text}}}" if formula.kind in ("array", "data table") and not formula.dynamic else f"{sign}{text}"
