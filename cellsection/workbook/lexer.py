"""Tokens of a formula in the application's spelling (ISO/IEC 29500-1, 18.17) and in OpenFormula's (ODF 1.3 part 4).

Both spellings come out as the same tokens, so that there is one parser: operands are finished nodes, and separators,
brackets and operators carry their sign alone.
"""

from __future__ import annotations

import re
from typing import Literal, NamedTuple

from cellsection.errors import FormulaError
from cellsection.workbook.book import column_number
from cellsection.workbook.nodes import ArrayConstant, Constant, Coordinate, Name, Node, Reference, Structured
from cellsection.workbook.values import ErrorValue, Scalar

__all__ = ["Token", "tokens"]

LAST_ROW, LAST_COLUMN = 1_048_576, 16_384
PREFIXES = re.compile(
    r"^(?:_xlfn\.|_xlws\.|_xludf\.|_xldudf_|_xlpm\.|_xlop\.|_xll\.|COM\.MICROSOFT\.|ORG\.OPENOFFICE\.|ORG\.LIBREOFFICE\.|LEGACY\.)+",
    re.IGNORECASE,
)

# Functions that OpenFormula spells otherwise, or means otherwise, than the application does under the same letters
# (ODF 1.3 part 4: 6.18.16 CHISQDIST, 6.18.17 CHISQINV, 6.18.23 FDIST, 6.18.25 FINV take the left tail; FORMULA 6.13.9,
# SKEWP 6.18.69). The right tails are its LEGACY.FDIST and so on. Section numbers from memory.
OPENFORMULA_NAMES = {
    "CHISQDIST": "CHISQ.DIST", "CHISQINV": "CHISQ.INV", "FDIST": "F.DIST", "FINV": "F.INV", "FORMULA": "FORMULATEXT",
    "SKEWP": "SKEW.P",
}  # fmt: skip


class Token(NamedTuple):
    """kind: operand, call, "(" ")" "," or op; text: the sign or function name; node: the finished operand."""

    kind: Literal["operand", "call", "(", ")", ",", "op"]
    text: str = ""
    node: Node | None = None
    spaced: bool = False  # white space stands before it
    reference: bool = False  # it may stand beside a blank that means "the area common to both"


ERROR = (
    r"\#(?:N/A|NULL!|DIV/0!|VALUE!|REF!|NAME\?|NUM!|GETTING_DATA|SPILL!|CALC!|FIELD!|BLOCKED!|CONNECT!|UNKNOWN!|BUSY!)"
)
NAME = r"(?:[^\W\d]|\\)[\w.?\\]*"
LEXEMES = r"""
    (?P<space>\s+)
  | (?P<text>"(?:[^"]|"")*")
  | (?P<error>{error})
  | (?P<operator><=|>=|<>|[-+*/^&=<>%@\#:~!])
  | (?P<mark>[()\{{\}},;|])
  {references}
  | (?P<name>{name})
  | (?P<number>(?:\d+(?:\.\d*)?|\.\d+)(?:[Ee][+-]?\d+)?)
"""
EXCEL = re.compile(
    LEXEMES.format(
        error=ERROR,
        name=NAME,
        references=rf"""
  | (?P<sheet>'(?:[^']|'')+'!|(?:\[[^\[\]]+\])?[^\W\d][\w.]*+(?::[^\W\d][\w.]*+)?+!|\[[^\[\]]+\]!)
  | (?P<call>{NAME}\()
  | (?P<rows>\$?\d{{1,7}}:\$?\d{{1,7}}(?![\w.(]))
  | (?P<columns>\$?[A-Za-z]{{1,3}}:\$?[A-Za-z]{{1,3}}(?![\w.(!]))
  | (?P<cell>\$?[A-Za-z]{{1,3}}\$?\d{{1,7}}(?![\w.(!]))
  | (?P<structured>(?:{NAME})?\[)""",
    ),
    re.VERBOSE,
)
OPENFORMULA = re.compile(
    LEXEMES.format(
        error=ERROR, name=NAME, references=rf"  | (?P<call>{NAME}\()  | (?P<bracket>\[(?:'(?:[^']|'')*'|[^\]'])*\])"
    ),
    re.VERBOSE,
)
OPEN_REFERENCE = re.compile(
    r"""(?:'(?P<file>(?:[^']|'')*)'\#)?\$?(?P<sheet>'(?:[^']|'')*'|[^.'\[\]]*)\.(?P<from>[^:]+)"""
    r"""(?::\$?(?P<last>'(?:[^']|'')*'|[^.'\[\]]*)\.(?P<to>.+))?"""
)
CELL = re.compile(r"(\$?)([A-Za-z]{1,3})?(\$?)(\d{1,7})?")


def tokens(text: str, row: int, column: int, language: str = "excel") -> list[Token]:
    """The tokens of a formula typed in the cell at row, column. Raises FormulaError at what is not in the language."""
    pattern = EXCEL if language == "excel" else OPENFORMULA
    found: list[Token] = []
    place, end = 0, len(text)
    spaced = False
    prefix: tuple[str | None, str | None, str | None] = (None, None, None)  # sheet, last sheet, book
    while place < end:
        match = pattern.match(text, place)
        if match is None:
            raise FormulaError(f'"{text[place : place + 12]}" at position {place + 1} is not in the formula language')
        kind, lexeme, place = str(match.lastgroup), match[0], match.end()
        if kind == "space":
            spaced = True
            continue
        if kind == "sheet":
            prefix = sheet_prefix(lexeme)
            continue
        if kind == "mark" and lexeme == "{":
            node, place = array_constant(text, place, language)
            token = Token("operand", node=node, spaced=spaced)
        elif kind == "structured":
            structured, place = structured_reference(text, match.start(), lexeme[:-1])
            token = Token("operand", node=structured, spaced=spaced, reference=True)
        elif kind == "call":
            name = PREFIXES.sub("", lexeme[:-1]).upper()
            if language == "openformula" and len(name) == len(lexeme) - 1:
                name = OPENFORMULA_NAMES.get(name, name)
            token = Token("call", name, spaced=spaced, reference=True)
        elif kind in ("cell", "rows", "columns", "bracket"):
            reference = bracket(lexeme, row, column) if kind == "bracket" else area(lexeme, row, column, prefix)
            if reference is None:  # ZZZ1 lies outside any sheet: it is a name
                token = Token("operand", node=Name(lexeme, prefix[0], prefix[2]), spaced=spaced, reference=True)
            else:
                token = Token("operand", node=reference, spaced=spaced, reference=True)
        elif kind == "name":
            upper = lexeme.upper()
            if upper in ("TRUE", "FALSE") and prefix[0] is None:
                token = Token("operand", node=Constant(upper == "TRUE"), spaced=spaced)
            else:
                token = Token(
                    "operand", node=Name(PREFIXES.sub("", lexeme), prefix[0], prefix[2]), spaced=spaced, reference=True
                )
        elif kind == "error":
            token = Token("operand", node=Constant(ErrorValue(lexeme)), spaced=spaced, reference=lexeme == "#REF!")
        elif kind in ("text", "number"):
            token = Token("operand", node=Constant(literal(lexeme)), spaced=spaced)
        elif lexeme in "()":
            token = Token("(" if lexeme == "(" else ")", spaced=spaced, reference=True)
        elif lexeme in ",;":
            token = Token(",", spaced=spaced)
        elif kind == "mark":
            raise FormulaError(f'"{lexeme}" at position {match.start() + 1} belongs to no array constant')
        else:
            token = Token("op", {"!": " "}.get(lexeme, lexeme), spaced=spaced)
        found.append(token)
        spaced, prefix = False, (None, None, None)
    return found


def literal(lexeme: str) -> Scalar:
    """A number or text as written. A number too large for the application raises FormulaError."""
    if lexeme.startswith('"'):
        return lexeme[1:-1].replace('""', '"')
    number = float(lexeme)
    if number == float("inf"):
        raise FormulaError(f"the number {lexeme[:24]} is too large")
    return number


def sheet_prefix(lexeme: str) -> tuple[str | None, str | None, str | None]:
    """Sheet, last sheet of a 3-D reference, and other book, from what stands before the "!"."""
    inner = lexeme[:-1]
    if inner.startswith("'"):
        inner = inner[1:-1].replace("''", "'")
    book: str | None = None
    if "[" in inner:
        before, _, rest = inner.partition("[")
        number, _, inner = rest.partition("]")
        book = before + number
    first, colon, last = inner.partition(":")
    return first or None, last if colon else None, book


def coordinate(dollar: str, number: int, own: int) -> Coordinate:
    """A row or column, relative to the formula's own unless a "$" pins it."""
    return Coordinate(number, False) if dollar else Coordinate(number - own, True)


def corner(text: str, row: int, column: int) -> tuple[Coordinate | None, Coordinate | None] | None:
    """Row and column of one end of a reference; None where it lies outside any sheet."""
    match = CELL.fullmatch(text)
    if match is None or (match[2] is None and match[4] is None):
        raise FormulaError(f'"{text}" is no cell address')
    letters, digits = match[2], match[4]
    row_dollar = match[3] if letters else match[1] or match[3]
    if (letters and column_number(letters) > LAST_COLUMN) or (digits and not 0 < int(digits) <= LAST_ROW):
        return None
    return (
        coordinate(row_dollar, int(digits), row) if digits else None,
        coordinate(match[1], column_number(letters), column) if letters else None,
    )


def area(lexeme: str, row: int, column: int, prefix: tuple[str | None, str | None, str | None]) -> Reference | None:
    """A1, 3:5 or A:C in the application's spelling."""
    first, _, second = lexeme.partition(":")
    start = corner(first, row, column)
    end = corner(second, row, column) if second else start
    if start is None or end is None:
        return None
    return Reference(start[0], start[1], end[0], end[1], *prefix)


def unquoted(sheet: str | None) -> str | None:
    """A sheet name without its quotes; None where none is written."""
    return sheet.strip("'").replace("''", "'") if sheet else None


def bracket(lexeme: str, row: int, column: int) -> Reference | None:
    """[.A1], [$Sheet.A1:.B2], ['file'#$Sheet.A1] of OpenFormula; #REF! inside is an error value of its own."""
    match = OPEN_REFERENCE.fullmatch(lexeme[1:-1])
    if match is None:
        raise FormulaError(f"{lexeme} is no reference", construct=f"reference {lexeme}")
    first, last = unquoted(match["sheet"]), unquoted(match["last"])
    if "#REF!" in lexeme:
        return Reference(None, None, None, None, "#REF!")
    start = corner(match["from"], row, column)
    end = corner(match["to"], row, column) if match["to"] else start
    if start is None or end is None:
        raise FormulaError(f"{lexeme} lies outside any sheet")
    return Reference(start[0], start[1], end[0], end[1], first, last if last != first else None, match["file"])


def array_constant(text: str, place: int, language: str) -> tuple[ArrayConstant, int]:
    """An array constant, from behind its "{"."""
    pattern = EXCEL if language == "excel" else OPENFORMULA
    rows: list[list[Scalar]] = [[]]
    signs, expects_value = "", True
    while True:
        match = pattern.match(text, place)
        if match is None:
            raise FormulaError("an array constant is not closed")
        lexeme, kind, place = match[0], match.lastgroup, match.end()
        if kind == "space":
            continue
        if lexeme in ("-", "+") and expects_value:
            signs += lexeme
            continue
        if (kind == "mark") is expects_value or (signs and kind != "number"):
            raise FormulaError(f'"{lexeme}" is out of place in an array constant')
        expects_value = kind == "mark"
        if lexeme == "}":
            break
        if lexeme == "|" or (lexeme == ";" and language == "excel"):
            rows.append([])
        elif lexeme in (",", ";"):
            continue
        elif kind == "number":
            number = literal(lexeme)
            rows[-1].append(-number if signs.count("-") % 2 else number)  # type: ignore[operator]
            signs = ""
        elif kind == "text":
            rows[-1].append(literal(lexeme))
        elif kind == "error":
            rows[-1].append(ErrorValue(lexeme))
        elif lexeme.upper().rstrip("(") in ("TRUE", "FALSE"):
            rows[-1].append(lexeme.upper().startswith("TRUE"))
            if lexeme.endswith("("):
                if text[place : place + 1] != ")":
                    raise FormulaError(f'"{lexeme}" is out of place in an array constant')
                place += 1
        else:
            raise FormulaError(f'"{lexeme}" cannot stand in an array constant')
    if len({len(each) for each in rows}) != 1 or not rows[0]:
        raise FormulaError("the rows of an array constant differ in length")
    return ArrayConstant(tuple(tuple(each) for each in rows)), place


def structured_reference(text: str, start: int, table: str) -> tuple[Structured, int]:
    """Table[...] with its items and columns; ' escapes the character behind it."""
    depth, place = 0, text.index("[", start)
    parts: list[str] = []
    current = ""
    separators: list[str] = []
    while place < len(text):
        c = text[place]
        if c == "'":
            current += text[place + 1 : place + 2]
            place += 2
            continue
        if c == "[":
            depth += 1
            if depth == 2:
                current = ""
        elif c == "]":
            depth -= 1
            if depth == 1 or (depth == 0 and current.strip()):
                parts.append(current.strip())
                current = ""
            if depth == 0:
                break
        elif depth == 1 and c in ",:":
            separators.append(c)
        elif depth == 1 and c == "@" and not current.strip():
            parts.append("#This Row")
            separators.append(",")
        elif depth != 1 or not c.isspace() or current:
            current += c
        place += 1
    else:
        raise FormulaError("a structured reference is not closed")
    items = tuple(part for part in parts if part.startswith("#"))
    columns = [part for part in parts if not part.startswith("#")]
    if len(columns) > 2:
        raise FormulaError("a structured reference names more than two columns", construct="structured reference")
    return Structured(table, items, columns[0] if columns else None, columns[-1] if columns else None), place + 1
