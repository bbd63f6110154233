"""A formula's text made relative, to compile alike formulas once; and moved to another cell, to show it."""

from __future__ import annotations

import re

from cellsection.workbook.book import Formula, Position, column_letters, column_number

__all__ = ["moved_text", "relative_key", "shown_text"]

BEFORE = r"(?<![\w.$\\])"  # a reference does not begin inside a word
EXCEL = re.compile(
    # Texts, quoted sheet names and columns of tables stay as they are: [Q1] may be a column so called.
    r"""("(?:[^"]|"")*"|'(?:[^']|'')*'|\[(?:[^\[\]']|'.)*\])"""
    + rf"|{BEFORE}(\$?)([A-Za-z]{{1,3}})(\$?)([0-9]{{1,7}})(?![\w.(!\[])"
    + rf"|{BEFORE}(\$?)([A-Za-z]{{1,3}}):(\$?)([A-Za-z]{{1,3}})(?![\w.(!])"
    + rf"|{BEFORE}(\$?)([0-9]{{1,7}}):(\$?)([0-9]{{1,7}})(?![\w.])"
)
LAST_ROW, LAST_COLUMN = 1_048_576, 16_384  # what lies beyond is no cell: XYZ1 is a name
# What reads differently in another place though its text is the same: whole rows and columns of OpenFormula, and the
# columns of a table that is not named because the formula stands in it.
PLACED = {
    "excel": re.compile(r"(?<![\w.\]])\[(?!\d+\])"),
    "openformula": re.compile(r"\.\$?(?:[A-Za-z]{1,3}|\d+)[\]:]"),
}
OPEN_ROWS = re.compile(r"""("(?:[^"]|"")*"|'(?:[^']|'')*')|(?<=\.)(\$?)([A-Za-z]{1,3})(\$?)([0-9]{1,7})(?=[\]:])""")


def relative_key(text: str, row: int, column: int, language: str) -> str:
    """The text with relative references written as offsets: equal keys mean equal compiled forms."""

    def offset(match: re.Match[str]) -> str:
        if match[1] is not None:
            return match[1]
        if match[3] is not None:
            if column_number(match[3]) > LAST_COLUMN or int(match[5]) > LAST_ROW:
                return match[0]
            c = match[3] if match[2] else f"[{column_number(match[3]) - column}]"
            r = match[5] if match[4] else f"[{int(match[5]) - row}]"
            return f"\x00{c}\x01{r}"
        if match[7] is not None:
            ends = [(match[6], match[7]), (match[8], match[9])]
            return ":".join(f"\x00{name if pinned else column_number(name) - column}" for pinned, name in ends)
        ends = [(match[10], match[11]), (match[12], match[13])]
        return ":".join(f"\x01{name if pinned else int(name) - row}\x02{bool(pinned)}" for pinned, name in ends)

    key = (EXCEL if language == "excel" else OPEN_ROWS).sub(offset, text)
    return f"{key}\x03{row},{column}" if PLACED[language].search(text) else key


def moved_text(text: str, down: int, across: int, language: str) -> str:
    """The formula as it reads when filled to another cell, as the children of a shared formula are."""
    if not down and not across:
        return text

    def moved(match: re.Match[str]) -> str:
        if match[1] is not None:
            return match[1]
        if match[3] is not None:
            if column_number(match[3]) > LAST_COLUMN or int(match[5]) > LAST_ROW:
                return match[0]
            letters = match[3] if match[2] else column_letters(max(column_number(match[3]) + across, 1))
            number = match[5] if match[4] else str(int(match[5]) + down)
            return f"{match[2]}{letters}{match[4]}{number}"
        if match[7] is not None:
            ends = [(match[6], match[7]), (match[8], match[9])]
            return ":".join(
                pin + (name if pin else column_letters(max(column_number(name) + across, 1))) for pin, name in ends
            )
        ends = [(match[10], match[11]), (match[12], match[13])]
        return ":".join(pin + (name if pin else str(int(name) + down)) for pin, name in ends)

    return (EXCEL if language == "excel" else OPEN_ROWS).sub(moved, text)


FILE_PREFIX = re.compile(r"_xl(?:fn|ws|udf|pm|op)\.")


def shown_text(formula: Formula, position: Position) -> str:
    """A formula as the engineer reads it in its own cell: without the prefixes that only the file carries."""
    text = moved_text(formula.text, position[0] - formula.row, position[1] - formula.column, formula.language)
    if "_xl" in text:
        text = FILE_PREFIX.sub("", text)
    sign = "=" if formula.language == "excel" else "of:="
    return f"{{{sign}{text}}}" if formula.kind == "array" and not formula.dynamic else f"{sign}{text}"
