"""Regular expressions: REGEXTEST, REGEXEXTRACT, REGEXREPLACE and the searches that take one.

The application uses PCRE2, this the standard library's engine. Where the two read a pattern differently, or a pattern
could take time without bounds, it is reported as not supported instead of guessed.
"""

from __future__ import annotations

import re

from cellsection.workbook.builtins.registry import Context, ErrorResult, builtin
from cellsection.workbook.coercion import NA, VALUE
from cellsection.workbook.values import Array

__all__ = ["compiled"]

# what only PCRE2 knows, or knows otherwise: classes by name, \h \K \R ..., recursion, branch reset, verbs
FOREIGN = re.compile(r"\[\[?[:.=]|\\[hHKRXQEGpPCNV]|\\g|\\k|\(\?(?:R|[0-9+&|]|-\d|P[=>]|C)|\(\*|[-&~|]{2}")
CLASSES = re.compile(r"\\[dDwWsSbB]")  # of letters beyond ASCII the two may think differently
NAMED = re.compile(r"\(\?<([A-Za-z_]\w*)>")
PIECE = re.compile(r"\\.|\[\^?\]?(?:\\.|[^\]\\])*\]|\{\d*,?\d*\}|.", re.DOTALL)
PATIENCE = 300_000_000  # steps of the worst case that are let run


def repetition(piece: str) -> bool:
    """Whether a piece of a pattern repeats the one before it, or makes it optional."""
    return piece in ("*", "+", "?") or (piece[:1] == "{" and len(piece) > 2)


def repeats(pattern: str) -> tuple[int, bool]:
    """How many repetitions and options a pattern has, and whether a group that has some is itself repeated."""
    count, nested = 0, False
    groups = [False]  # for each open group, whether it has repetitions, options or alternatives
    closed, before = False, ""
    for match in PIECE.finditer(pattern):
        piece, loose = match[0], closed
        closed = False
        if piece == "(":
            groups.append(False)
        elif piece == ")" and len(groups) > 1:
            closed = groups.pop()
            groups[-1] = groups[-1] or closed
        elif piece == "|":
            groups[-1] = True
        elif repetition(piece) and before != "(" and not repetition(before):  # else (?: or lazy or possessive
            count, nested = count + 1, nested or (loose and piece != "?")
            groups[-1] = True
        before = piece
    return count, nested


def compiled(context: Context, pattern: str, text: str, fold: bool) -> re.Pattern[str]:
    """A pattern ready to be used on a text; #VALUE! where it is none."""
    count, nested = repeats(pattern)
    if FOREIGN.search(pattern) or (CLASSES.search(pattern) and not text.isascii()):
        context.unsupported(f'the regular expression "{pattern[:60]}"')
    if nested or (count and (len(text) + 1) ** min(count + 1, 20) > PATIENCE):
        context.unsupported(f'the regular expression "{pattern[:60]}", which may take too long')
    try:
        return re.compile(NAMED.sub(r"(?P<\1>", pattern), re.IGNORECASE if fold else 0)
    except (re.error, RecursionError, OverflowError):
        raise ErrorResult(VALUE) from None


def folding(mode: float) -> bool:
    """0 keeps capitals apart, 1 does not."""
    if int(mode) not in (0, 1):
        raise ErrorResult(VALUE)
    return int(mode) == 1


@builtin("REGEXTEST", "context text text number?")
def regextest(context: Context, text: str, pattern: str, case: float = 0.0) -> bool:
    return compiled(context, pattern, text, folding(case)).search(text) is not None


@builtin("REGEXEXTRACT", "context text text number? number?")
def regexextract(context: Context, text: str, pattern: str, mode: float = 0.0, case: float = 0.0) -> Array | str:
    found = list(compiled(context, pattern, text, folding(case)).finditer(text))
    if int(mode) not in (0, 1, 2):
        raise ErrorResult(VALUE)
    if not found:
        raise ErrorResult(NA)
    if int(mode) == 0:
        return found[0][0]
    pieces = [match[0] for match in found] if int(mode) == 1 else [group or "" for group in found[0].groups()]
    if not pieces:
        raise ErrorResult(NA)
    return (tuple(pieces),)


@builtin("REGEXREPLACE", "context text text text number? number?")
def regexreplace(context: Context, text: str, pattern: str, new: str, which: float = 0.0, case: float = 0.0) -> str:
    expression = compiled(context, pattern, text, folding(case))
    found = list(expression.finditer(text))
    if which:  # one of them, counted from the end where it is negative
        place = int(which) - 1 if which > 0 else len(found) + int(which)
        found = found[place : place + 1] if 0 <= place < len(found) else []
    result, at = "", 0
    for match in found:
        result += text[at : match.start()] + filled(context, new, match)
        at = match.end()
    result += text[at:]
    if len(result) > 32_767:
        raise ErrorResult(VALUE)
    return result


def filled(context: Context, new: str, match: re.Match[str]) -> str:
    """The new text with $0, $1, ${name} filled in and $$ as one $."""

    def group(mark: re.Match[str]) -> str:
        name = mark[1] or mark[2]
        if mark[0] == "$$":
            return "$"
        if name is None:
            context.unsupported(f'the replacement "{new[:60]}"')
            raise ErrorResult(VALUE)
        try:
            return match[int(name) if name.isdecimal() else name] or ""
        except IndexError:
            raise ErrorResult(VALUE) from None

    if "\\" in new:
        context.unsupported(f'the replacement "{new[:60]}"')
    return re.sub(r"\$(?:\$|(\d+)|\{(\w+)\}|)", group, new)
