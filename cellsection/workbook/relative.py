"""A formula's text made relative, to compile alike formulas once; and moved to another cell, to show it."""

from __future__ import annotations

import re
from typing import TypeAlias

from cellsection.workbook.addresses import LAST_COLUMN, LAST_ROW
from cellsection.workbook.book import Formula, Position, column_letters, column_number
from cellsection.workbook.keys import SHIFT

__all__ = ["Key", "Pattern", "moved_text", "relative_key", "shown_text"]

Key: TypeAlias = tuple[str | int, ...]

# One group around every word and around all that is left as it is: texts, quoted sheet names, bracketed parts of tables
# and other books. A word takes the sign behind it along that tells a function or a sheet from a reference.
EXCEL = re.compile(r"""([\w.$\\]+[(!]?|"(?:[^"]|"")*"|'(?:[^']|'')*'|\[(?:[^\[\]']|'.)*\])""")
OPENFORMULA = re.compile(r"""("(?:[^"]|"")*"|'(?:[^']|'')*'|(?<=\.)\$?(?:[A-Za-z]{1,3})?\$?(?:[0-9]{1,7})?(?=[\]:]))""")
PATTERN = {"excel": EXCEL, "openformula": OPENFORMULA}
LETTERS = re.compile(r"(\$?)([A-Za-z]{1,3})(\$?)")
DIGITS = "0123456789"


class Columns(dict[str, tuple[int, int] | None]):
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


COLUMNS = Columns()


def beside(before: str | int, behind: str | int) -> bool:
    """Whether what stands between is one end of a range, as of whole columns or rows."""
    return str(before).startswith(":") or str(behind).startswith(":")


def relative_key(text: str, row: int, column: int, language: str) -> Key:
    """What is the same of two formulas exactly when they mean the same relative to their cells.

    >>> relative_key("B3*2", 2, 1, "excel") == relative_key("B4*2", 3, 1, "excel")
    True
    """
    if "[@" in text:  # of the table that the formula stands in, which it does not name
        return (text, row, column)
    parts: list[str | int] = PATTERN[language].split(text)
    own = (0, row << SHIFT, column, (row << SHIFT) + column)
    for k in range(1, len(parts), 2):
        part: str = parts[k]  # type: ignore[assignment]
        letters = part.rstrip(DIGITS)
        known = COLUMNS[letters]
        if known is None:
            if part[-1:] == "!" and parts[k - 1] == ":":  # the first sheet of several is a name, whatever it looks like
                parts[k - 2] = PATTERN[language].split(text)[k - 2]
            elif part and letters == "" and beside(parts[k - 1], parts[k + 1]):
                parts[k] = f"row {int(part) - row}"
            continue
        kind, number = known
        digits = part[len(letters) :]
        if digits:
            at = int(digits)
            if at <= LAST_ROW:
                parts[k] = ((at << SHIFT) + number - own[kind]) * 4 + kind
        elif beside(parts[k - 1], parts[k + 1]):
            parts[k] = f"column {number - column if kind & 2 else letters}"
    return tuple(parts)


class Pattern:
    """A formula as it would read elsewhere in its column: a text to compare with is had sooner than a relative key."""

    __slots__ = ("offsets", "template")

    def __init__(self, key: Key, text: str, row: int, language: str) -> None:
        parts = PATTERN[language].split(text.replace("%", "%%"))
        self.offsets: list[int] = []
        for k in range(1, len(parts), 2):
            if key[k].__class__ is int and key[k] & 1:  # type: ignore[operator]
                letters = parts[k].rstrip(DIGITS)
                self.offsets.append(int(parts[k][len(letters) :]) - row)
                parts[k] = letters + "%d"
        self.template = "".join(parts)

    def text_in(self, row: int) -> str:
        """The formula as it would read in a row."""
        return self.template % tuple([offset + row for offset in self.offsets])


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
