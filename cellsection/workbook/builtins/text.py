"""Text functions; TEXT's number formats are in numberformat."""

from __future__ import annotations

import math
import re
import unicodedata
from decimal import Decimal
from typing import Any

from cellsection.workbook.builtins.mathematics import rounded
from cellsection.workbook.builtins.numberformat import formatted
from cellsection.workbook.builtins.registry import Context, ErrorResult, builtin
from cellsection.workbook.builtins.traits import Wildcard, cells_of
from cellsection.workbook.coercion import CALC, NA, NUM, VALUE, number_of, text_number, text_of
from cellsection.workbook.operators import check_array
from cellsection.workbook.values import Array, ErrorValue, Scalar

LONGEST = 32_767
UNASSIGNED = frozenset((0x81, 0x8D, 0x8F, 0x90, 0x9D))  # of code page 1252; they stand for themselves


def fail_text(error: ErrorValue) -> str:
    """Return an error value."""
    raise ErrorResult(error)


def count(x: float) -> int:
    """A number of characters."""
    if x < 0:
        raise ErrorResult(VALUE)
    return int(x)


def plain(cell: Scalar) -> str:
    """A cell as text, errors passed on."""
    text = text_of(cell)
    if isinstance(text, ErrorValue):
        raise ErrorResult(text)
    return text


@builtin("LEN LENB", "text")
def len_(text: str) -> float:
    return float(len(text.encode("utf-16-le")) // 2)


@builtin("LEFT LEFTB", "text number?")
def left(text: str, n: float = 1.0) -> str:
    return text[: count(n)]


@builtin("RIGHT RIGHTB", "text number?")
def right(text: str, n: float = 1.0) -> str:
    k = count(n)
    return text[-k:] if k else ""


@builtin("MID MIDB", "text number number")
def mid(text: str, start: float, n: float) -> str:
    if start < 1:
        return fail_text(VALUE)
    return text[int(start) - 1 : int(start) - 1 + count(n)]


@builtin("UPPER", "text")
def upper(text: str) -> str:
    return text.upper()


@builtin("LOWER", "text")
def lower(text: str) -> str:
    return text.lower()


@builtin("PROPER", "text")
def proper(text: str) -> str:
    result, inside = [], False
    for c in text:
        result.append(c.lower() if inside else c.upper())
        inside = c.isalpha()
    return "".join(result)


@builtin("TRIM", "text")
def trim(text: str) -> str:
    return " ".join(part for part in text.split(" ") if part)


@builtin("CLEAN", "text")
def clean(text: str) -> str:
    return "".join(c for c in text if ord(c) >= 32)


@builtin("REPT", "text number")
def rept(text: str, n: float) -> str:
    if len(text) * count(n) > LONGEST:
        return fail_text(VALUE)
    return text * count(n)


@builtin("EXACT", "text text")
def exact(a: str, b: str) -> bool:
    return a == b


@builtin("CHAR", "number")
def char(x: float) -> str:
    n = int(x)
    if not 1 <= n <= 255:
        return fail_text(VALUE)
    byte = bytes([n])
    return byte.decode("latin-1" if n in UNASSIGNED else "cp1252")


@builtin("CODE", "text")
def code(text: str) -> Any:
    if not text:
        return VALUE
    return float(ord(text[0]) if ord(text[0]) in UNASSIGNED else text[0].encode("cp1252", errors="replace")[0])


@builtin("UNICHAR", "number")
def unichar(x: float) -> str:
    n = int(x)
    return chr(n) if 0 < n < 0x110000 and not 0xD800 <= n < 0xE000 else fail_text(VALUE)


@builtin("UNICODE", "text")
def unicode_(text: str) -> Any:
    return float(ord(text[0])) if text else VALUE


@builtin("CONCATENATE", "text+")
def concatenate(*texts: str) -> str:
    return checked("".join(texts))


@builtin("CONCAT", "range+")
def concat(*arguments: Any) -> str:
    return checked("".join(plain(cell) for argument in arguments for cell in cells_of(argument)))


def checked(text: str) -> str:
    """A text a cell can hold."""
    return text if len(text) <= LONGEST else fail_text(VALUE)


@builtin("TEXTJOIN", "range logical range+")
def textjoin(delimiter: Any, skip: bool, *arguments: Any) -> str:
    marks = [plain(cell) for cell in cells_of(delimiter)] or [""]
    pieces = [plain(cell) for argument in arguments for cell in cells_of(argument)]
    if skip:
        pieces = [piece for piece in pieces if piece]
    joined = "".join(piece + (marks[k % len(marks)] if k < len(pieces) - 1 else "") for k, piece in enumerate(pieces))
    return checked(joined)


@builtin("FIND FINDB", "text text number?")
def find(wanted: str, text: str, start: float = 1.0) -> Any:
    if not 1 <= int(start) <= len(text) + 1:
        return VALUE
    place = text.find(wanted, int(start) - 1)
    return float(place + 1) if place >= 0 else VALUE


@builtin("SEARCH SEARCHB", "text text number?")
def search(wanted: str, text: str, start: float = 1.0) -> Any:
    if not 1 <= int(start) <= len(text) + 1:
        return VALUE
    place = Wildcard(wanted).place(text, int(start) - 1)
    return VALUE if place is None else float(place + 1)


@builtin("SUBSTITUTE", "text text text number?")
def substitute(text: str, old: str, new: str, number: float | None = None) -> str:
    if number is not None and number < 1:
        return fail_text(VALUE)
    if not old:
        return text
    if number is None:
        if len(text) + text.count(old) * (len(new) - len(old)) > LONGEST:
            return fail_text(VALUE)
        return text.replace(old, new)
    place = -1
    for _ in range(int(number)):
        place = text.find(old, place + 1 if place < 0 else place + len(old))
        if place < 0:
            return text
    return text[:place] + new + text[place + len(old) :]


@builtin("REPLACE REPLACEB", "text number number text")
def replace(text: str, start: float, n: float, new: str) -> str:
    if start < 1:
        return fail_text(VALUE)
    k = int(start) - 1
    return text[:k] + new + text[k + count(n) :]


@builtin("VALUE", "value")
def value(cell: Scalar) -> Any:
    if isinstance(cell, bool):
        return VALUE
    return number_of(cell)


@builtin("NUMBERVALUE", "text text? text?")
def numbervalue(text: str, decimal: str = ".", group: str = ",") -> Any:
    if not decimal or (group and decimal[0] == group[0]):
        return VALUE
    bare = "".join(text.split())
    head, _, tail = bare.partition(decimal[0])
    if group and group[0] in tail:
        return VALUE
    percents = len(tail) - len(tail.rstrip("%")) + (len(head) - len(head.rstrip("%")) if not tail else 0)
    spelled = (head.replace(group[0], "") if group else head).rstrip("%") + ("." + tail.rstrip("%") if tail else "")
    number = text_number(spelled) if spelled else 0.0
    return VALUE if number is None else number / 100**percents


@builtin("TEXT", "context value text")
def text_(context: Context, cell: Scalar, pattern: str) -> Any:
    number: Scalar = cell
    if isinstance(cell, str):
        spelled = text_number(cell)
        number = cell if spelled is None else spelled
    result = formatted(number, pattern, context.date1904)
    if result is None:
        context.unsupported(f'TEXT with the format "{pattern}"')
    return result


def digits_of(x: float) -> Decimal:
    """A number by its 15 significant digits: those behind are zeros wherever it is shown."""
    return Decimal(f"{x:.14e}")


@builtin("FIXED", "number number? logical?")
def fixed(x: float, decimals: float = 2.0, no_commas: bool = False) -> str:
    y = rounded(x, decimals, "half") if decimals <= 127 else float(fail_text(VALUE))
    return f"{digits_of(y):{'' if no_commas else ','}.{max(int(decimals), 0)}f}"


@builtin("DOLLAR", "number number?")
def dollar(x: float, decimals: float = 2.0) -> str:
    y = rounded(x, decimals, "half") if decimals <= 127 else float(fail_text(VALUE))
    body = f"${digits_of(abs(y)):,.{max(int(decimals), 0)}f}"
    return f"({body})" if y < 0 else body


@builtin("TEXTBEFORE", "text array number? number? number? any?")
def textbefore(
    text: str, marks: Array, n: float | None = None, fold: float = 0.0, end: float = 0.0, missing: Scalar = NA
) -> Any:
    found = nth(text, marks, n, fold, end)
    return ("" if missing is None else missing) if found is None else text[: found[0]]


@builtin("TEXTAFTER", "text array number? number? number? any?")
def textafter(
    text: str, marks: Array, n: float | None = None, fold: float = 0.0, end: float = 0.0, missing: Scalar = NA
) -> Any:
    found = nth(text, marks, n, fold, end)
    return ("" if missing is None else missing) if found is None else text[found[1] :]


def separators(marks: Array, fold: bool) -> re.Pattern[str]:
    """A pattern for any of the marks, the longest first."""
    words = sorted((plain(cell) for row in marks for cell in row), key=len, reverse=True)
    if not all(words):
        raise ErrorResult(VALUE)
    return re.compile("|".join(map(re.escape, words)), re.IGNORECASE if fold else 0)


def nth(text: str, marks: Array, number: float | None, fold: float, end: float) -> tuple[int, int] | None:
    """Place of the n-th mark, from the end where n is negative; where asked, the far end of the text is one more.

    A mark longer than the text is not found where n is left out, and #VALUE! where it is given.
    """
    n, pattern = 1 if number is None else math.floor(number), separators(marks, bool(fold))
    too_long = number is not None and all(len(plain(cell)) > len(text) > 0 for row in marks for cell in row)
    if n == 0 or end not in (0.0, 1.0) or too_long:
        raise ErrorResult(VALUE)
    places = [match.span() for match in pattern.finditer(text)]
    if end and n > 0:
        places.append((len(text), len(text)))
    elif end:
        places.insert(0, (0, 0))
    return places[n - 1 if n > 0 else n] if abs(n) <= len(places) else None


@builtin("TEXTSPLIT", "text array array? logical? number? any?")
def textsplit(
    text: str, columns: Array, rows: Array | None = None, skip: bool = False, fold: float = 0.0, pad: Scalar = NA
) -> Array:
    across = None if columns == ((None,),) else separators(columns, bool(fold))
    down = None if rows is None or rows == ((None,),) else separators(rows, bool(fold))
    if across is None and down is None:
        raise ErrorResult(VALUE)
    lines = down.split(text) if down else [text]
    table = [across.split(line) if across else [line] for line in lines]
    if skip:
        table = [[piece for piece in line if piece] for line in table]
    width = max(map(len, table))
    if not width:
        raise ErrorResult(CALC)
    check_array(len(table) * width)
    return tuple((*line, *((pad,) * (width - len(line)))) for line in table)


@builtin("VALUETOTEXT", "any number?")
def valuetotext(cell: Scalar, strict: float = 0.0) -> str:
    if isinstance(cell, str) and strict:
        return '"' + cell.replace('"', '""') + '"'
    return cell.code if isinstance(cell, ErrorValue) else plain(cell)


@builtin("ASC", "text")
def asc(text: str) -> str:
    return unicodedata.normalize("NFKC", text)


@builtin("ENCODEURL", "text")
def encodeurl(text: str) -> str:
    from urllib.parse import quote

    return quote(text, safe="")


@builtin("ARRAYTOTEXT", "array number?")
def arraytotext(array: Array, strict: float = 0.0) -> str:
    if strict not in (0.0, 1.0):
        return fail_text(NUM)
    if not strict:
        return ", ".join(valuetotext(cell) for row in array for cell in row)
    return "{" + ";".join(",".join(valuetotext(cell, 1.0) for cell in row) for row in array) + "}"
