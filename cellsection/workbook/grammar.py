"""From tokens to a syntax tree: operator precedence on an explicit stack, so that nesting costs no recursion.

Precedence, strongest first (the application's own, which binds a sign tighter than a power: -2^2 is 4): reference
operators ":" " " "~", then @, sign, %, ^, * /, + -, &, comparison. All binary operators associate to the left.
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace

from cellsection.errors import FormulaError
from cellsection.workbook.lexer import Token, tokens
from cellsection.workbook.nodes import (
    Binary,
    Call,
    Invoke,
    Join,
    Missing,
    Node,
    Reference,
    Spill,
    Unary,
)

__all__ = ["parsed"]

STRENGTH = {
    ":": 10,
    " ": 9,
    "~": 8,
    "@": 7,
    "sign": 6,
    "%": 5,
    "^": 4,
    "*": 3,
    "/": 3,
    "+": 2,
    "-": 2,
    "&": 1,
    "=": 0,
    "<>": 0,
    "<": 0,
    ">": 0,
    "<=": 0,
    ">=": 0,
}
DEEPEST = 400  # nesting beyond this is refused; the application itself allows 64 levels of functions


@dataclass(slots=True)
class Level:
    """What is open between two brackets: operands and operators met so far, and the arguments before them."""

    call: str | None = None  # the function the bracket belongs to, "" for a call of a value, None for plain brackets
    operands: list[Node] = field(default_factory=list)
    operators: list[str] = field(default_factory=list)
    arguments: list[Node] = field(default_factory=list)
    expects_operand: bool = True


def parsed(text: str, row: int = 1, column: int = 1, language: str = "excel", deepest: int = DEEPEST) -> Node:
    """The syntax tree of a formula typed at row, column. Raises FormulaError.

    >>> parsed("-2^2").sign
    '^'
    """
    levels = [Level()]
    stream = tokens(text, row, column, language)
    for k, token in enumerate(stream):
        level = levels[-1]
        if (
            token.spaced
            and not level.expects_operand
            and token.reference
            and token.kind in ("operand", "call", "(")
            and stream[k - 1].reference
        ):
            push(level, " ")
        if token.kind == "operand" and token.node is not None:
            operand(level, token.node, text)
        elif token.kind == "call":
            if not level.expects_operand:
                raise FormulaError(f"{token.text}( follows a value without an operator")
            levels.append(Level(token.text))
        elif token.kind == "(":
            levels.append(Level(None if level.expects_operand else ""))
        elif token.kind == ")":
            levels.pop()
            if not levels:
                raise FormulaError('a ")" closes nothing')
            closed(levels[-1], level)
        elif token.kind == ",":
            separator(level)
        else:
            operator(level, token)
        if len(levels) > deepest:
            raise FormulaError(f"brackets nest deeper than {deepest}", construct="deep nesting")
    if len(levels) > 1:
        raise FormulaError(f'{len(levels) - 1} "(" not closed')
    result = finished(levels[0])
    if result is None:
        raise FormulaError("the formula is empty")
    return result


def operand(level: Level, node: Node, text: str) -> None:
    """Take an operand."""
    if not level.expects_operand:
        raise FormulaError(f'two values follow each other without an operator in "{text[:40]}"')
    level.operands.append(node)
    level.expects_operand = False


def operator(level: Level, token: Token) -> None:
    """Take an operator: a sign in front, a mark behind, or one between two operands."""
    sign = token.text
    if level.expects_operand:
        if sign in "+-" or sign == "@":
            pending = level.operators[-1] if level.operators else ""
            if sign == "-" and pending == "neg":  # -- is the usual way to make numbers of logicals: keep one pair
                level.operators[-1] = "negneg"
            elif sign == "-" and pending == "negneg":
                level.operators[-1] = "neg"
            elif sign == "+" and pending in ("neg", "negneg", "pos"):
                pass
            else:
                level.operators.append({"-": "neg", "+": "pos", "@": "@"}[sign])
            return
        raise FormulaError(f'a value is missing before "{sign}"')
    if sign == "%":
        reduce(level, STRENGTH["%"] + 1)
        level.operands.append(Unary("%", level.operands.pop()))
    elif sign == "#":
        level.operands.append(Spill(level.operands.pop()))
    elif sign == "@":
        raise FormulaError('"@" stands behind a value')
    else:
        push(level, sign)


def push(level: Level, sign: str) -> None:
    """An operator between two operands: first finish what binds as tightly."""
    reduce(level, STRENGTH[sign])
    level.operators.append(sign)
    level.expects_operand = True


def strength(operator: str) -> int:
    """How tightly a pending operator binds."""
    return STRENGTH["sign"] if operator in ("neg", "negneg", "pos") else STRENGTH[operator]


def reduce(level: Level, least: int) -> None:
    """Build the nodes of all pending operators that bind at least this tightly."""
    while level.operators and strength(level.operators[-1]) >= least:
        sign = level.operators.pop()
        right = level.operands.pop()
        if sign in ("neg", "negneg", "pos", "@"):
            node: Node = right
            if sign == "@":
                node = Unary("@", right)
            for _ in range({"neg": 1, "negneg": 2}.get(sign, 0)):
                node = Unary("-", node)
            if sign == "pos":
                node = Unary("+", node)
            level.operands.append(node)
            continue
        left = level.operands.pop()
        level.operands.append(joined(sign, left, right) if sign in (":", " ", "~") else Binary(sign, left, right))


def joined(sign: str, left: Node, right: Node) -> Node:
    """A reference operator; two plain cells with ":" between are the ordinary way to write an area."""
    if (
        sign == ":"
        and isinstance(left, Reference)
        and isinstance(right, Reference)
        and left.single
        and right.single
        and right.sheet in (None, left.sheet)
        and right.book is None
    ):
        return replace(left, bottom=right.bottom, right=right.right)
    return Join(sign, left, right)


def finished(level: Level) -> Node | None:
    """The one operand that a bracket holds, or None where it is empty."""
    if level.expects_operand:
        if level.operators or level.operands:
            raise FormulaError(f'a value is missing behind "{level.operators[-1] if level.operators else ","}"')
        return None
    reduce(level, -1)
    return level.operands.pop()


def separator(level: Level) -> None:
    """A comma: the end of an argument, or a union in plain brackets."""
    if level.call is None:
        if level.expects_operand:
            raise FormulaError("a comma stands where a value should")
        push(level, "~")
        return
    level.arguments.append(finished(level) or Missing())
    level.expects_operand = True


def closed(outer: Level, inner: Level) -> None:
    """What a closing bracket finishes becomes an operand of the level around it."""
    last = finished(inner)
    if inner.call is None:
        if last is None:
            raise FormulaError("a pair of brackets holds nothing")
        if isinstance(last, Binary):
            last = replace(last, bracketed=True)
        outer.operands.append(last)
        outer.expects_operand = False
        return
    arguments = (*inner.arguments, last if last is not None else Missing())
    if last is None and not inner.arguments:
        arguments = ()
    if inner.call:
        outer.operands.append(Call(inner.call, arguments))
        outer.expects_operand = False
    else:
        outer.operands.append(Invoke(outer.operands.pop(), arguments))
