"""Random formulas in both spellings: shaped by the grammar, stretched beyond all measure, or damaged.

Everything is drawn from a random.Random, so that a long run replays from its seed and hypothesis can shrink what it
finds.
"""

from __future__ import annotations

from random import Random
from typing import Literal, TypeAlias

from cellsection.workbook.builtins import BUILTINS
from cellsection.workbook.compile import ALL_FORMS

__all__ = ["NAMES", "Spelling", "formula"]

Spelling: TypeAlias = Literal["excel", "openformula"]

NUMBERS = (
    "0", "1", "2", "3", "-1", "0.5", "7", "12", "100", "255", "32767", "32768", "65536", "1048576", "1048577",
    "2958465", "2958466", "1E9", "1E15", "9007199254740993", "1E100", "1E307", "1.7E308", "1E309", "1E-307",
    "5E-324", ".5", "1.", "00", "0.1", "1E+5", "99999999999999999999999999999999", "-2147483649", "1E18", "170",
    "171", "1030",
)  # fmt: skip
TEXTS = (
    "", "a", "1", " 2 ", "TRUE", "A1", "S!A1:B2", "1/2/2026", "12:30", "25:61:61", "1e5", "=1+1", ">3", "<>", "a*",
    "~*?", "ß", "é", "é", "𝟙", "٣", "٣.٥", "\u200b", "\u202e", "İ", "ǅ", "😀", "­", "﷽", "½", "²", "　", "x" * 300,
    "%", "€1,000.00", "0.00E+00", "#,##0.00;[Red]-0", "yyyy-mm-dd hh:mm:ss.000", "[h]:mm", "0;;;@", "# ?/?",
    "# ?/?????????", "[>1]0;0", "General", "0" * 200, "0."+"0" * 150, "@@@@", "[$-409]d mmm", "[DBNum1]0", "m²",
    "km", "kg", "3+4i", "i", "1E400i", "FFFFFFFFFF", "7777777777", "ZZZZ", "(a+)+$", "(a|a)*b", "[", "(", "\\",
    "^.*$", "(?i)x", "R1C1", "R[-1]C", "INFO", "filename", "_x0041_", "\t", "\n", "'", '""', "{1,2}", "1,2,3", "-",
    "+", "e", "E5", "1E", "0x10", "1_000", "nan", "inf", "-inf", "Infinity", "1" * 400, "٠" * 20, "9" * 30+"/1/1",
    "31/12/9999", "29/02/1900", "1-Jan-0000", "99:99", "1:2:3:4", "1e-400",
)  # fmt: skip
NAMES = ("alpha", "beta", "deep", "ring", "area", "twice", "endless", "T", "nobody")
SHEETS = ("S", "Two", "'Odd ''name'", "Missing")
AREAS = (
    "A1:C9", "A:A", "A:C", "1:3", "A:XFD", "1:1048576", "$B:$B", "S:Two!A1:B2", "(A1:B2,C3)", "A1:C9 B2:B4",
    "[1]S!A1:B2", "[1]S!A1", "'[book.xlsx]S'!A1", "A1#", "G1:G30", "S!G:G", "Two!A:XFD", "A1:C9:D12", "[9]!x",
)  # fmt: skip
BINARY = ("+", "-", "*", "/", "^", "&", "=", "<>", "<", ">", "<=", ">=")
ERRORS = ("#N/A", "#DIV/0!", "#VALUE!", "#REF!", "#NAME?", "#NUM!", "#NULL!", "#SPILL!", "#CALC!")
CALLS = tuple(sorted(BUILTINS))
SHAPES = tuple(sorted(ALL_FORMS))
WRAPS = (
    "(",
    "-",
    "+",
    "SUM(",
    "IF(1,",
    "NOT(",
    "LET(x,1,",
    "@",
    "{",
    "IFERROR(",
    "MAP(A1:A3,LAMBDA(x,",
    "INDEX(",
    "TEXT(",
)
ODD = "\x0b\x85\xa0\u2028\u202e\ufeff\U0001f600\U000e0001é́ﬁ∞−×“”´`§|;{}[]()!#@'\"$:,~\\.%&^<>=+-*/ \t\n09azAZ_"


def formula(rng: Random, spelling: Spelling) -> str:
    """A formula without its leading sign."""
    kind = rng.random()
    if kind < 0.6:
        return expression(rng, spelling, rng.randint(1, 4))
    if kind < 0.85:
        return mangled(rng, expression(rng, spelling, rng.randint(1, 4)))
    if kind < 0.93:
        return stretched(rng, spelling)
    return "".join(rng.choice(ODD) for _ in range(rng.randint(0, 40)))


def expression(rng: Random, spelling: Spelling, depth: int) -> str:
    """An expression of the language, of at most this depth."""
    if depth <= 0 or rng.random() < 0.15:
        return atom(rng, spelling)
    kind = rng.random()
    if kind < 0.25:
        left, right = (expression(rng, spelling, depth - 1) for _ in range(2))
        return f"{left}{rng.choice(BINARY)}{right}"
    if kind < 0.33:
        return f"{rng.choice(('-', '+', '@', '--'))}{expression(rng, spelling, depth - 1)}"
    if kind < 0.38:
        return f"({expression(rng, spelling, depth - 1)}){rng.choice(('', '%', '#'))}"
    if kind < 0.85:
        return call(rng, spelling, depth)
    return shaped(rng, spelling, depth)


def call(rng: Random, spelling: Spelling, depth: int) -> str:
    """A call of a builtin, mostly with as many arguments of such kinds as it takes."""
    name = rng.choice(CALLS)
    declared = BUILTINS[name]
    most = declared.most if declared.most is not None else declared.least + 3
    count = rng.randint(declared.least, max(most, declared.least))
    if rng.random() < 0.05:
        count = rng.randint(0, 12)
    arguments = [
        argument(rng, spelling, declared.kind(k) if declared.kinds else "any", depth - 1) for k in range(count)
    ]
    return f"{name}({separator(spelling).join(arguments)})"


def argument(rng: Random, spelling: Spelling, kind: str, depth: int) -> str:
    """An argument, mostly of the kind that is wanted."""
    if rng.random() < 0.05:
        return ""
    if rng.random() < 0.35:
        return expression(rng, spelling, depth)
    if kind in ("number", "measure", "logical"):
        return rng.choice((rng.choice(NUMBERS), str(rng.randint(0, 40)), cell(rng, spelling)))
    if kind == "text":
        return quoted(rng.choice(TEXTS))
    if kind in ("array", "range", "table", "reference"):
        return rng.choice((area(rng, spelling), area(rng, spelling), constants(rng, spelling), cell(rng, spelling)))
    return atom(rng, spelling)


def shaped(rng: Random, spelling: Spelling, depth: int) -> str:
    """A call of a form with its own rules: IF, LET, LAMBDA and those that take one."""
    name, sep = rng.choice(SHAPES), separator(spelling)
    inner = [expression(rng, spelling, depth - 1) for _ in range(rng.randint(1, 4))]
    if name == "LET":
        return f"LET(x{sep}{inner[0]}{sep}x{rng.choice(BINARY)}{inner[-1]})"
    if name == "LAMBDA":
        return f"LAMBDA(x{sep}x{rng.choice(BINARY)}{inner[0]})({inner[-1]})"
    if name in ("MAP", "BYROW", "BYCOL", "REDUCE", "SCAN", "MAKEARRAY"):
        first = {"REDUCE": "0" + sep, "SCAN": "0" + sep, "MAKEARRAY": rng.choice(NUMBERS) + sep}.get(name, "")
        over = rng.choice(NUMBERS) if name == "MAKEARRAY" else area(rng, spelling)
        names = "x" if name in ("MAP", "BYROW", "BYCOL") else f"x{sep}y"
        return f"{name}({first}{over}{sep}LAMBDA({names}{sep}x&{inner[0]}))"
    return f"{name}({sep.join(inner)})"


def atom(rng: Random, spelling: Spelling) -> str:
    """What no operator is needed for."""
    return rng.choice(
        (
            lambda: rng.choice(NUMBERS),
            lambda: quoted(rng.choice(TEXTS)),
            lambda: cell(rng, spelling),
            lambda: area(rng, spelling),
            lambda: rng.choice(NAMES),
            lambda: rng.choice(("TRUE", "FALSE", "TRUE()")),
            lambda: rng.choice(ERRORS),
            lambda: constants(rng, spelling),
            lambda: rng.choice(
                ("T[a]", "T[[#All],[b]]", "T[@a]", "T[#Headers]", "T[[a]:[b]]", "T[]", "T[[#This Row],[a]]")
            ),
            lambda: f"endless({rng.choice(NUMBERS)})",
        )
    )()


def cell(rng: Random, spelling: Spelling) -> str:
    """A reference to one cell, most often one that holds something."""
    place = rng.choice(("", "$")) + rng.choice("ABCDEFG") + rng.choice(("", "$")) + str(rng.randint(1, 12))
    if rng.random() < 0.05:
        place = rng.choice(("XFD1048576", "XFE1", "A1048577", "A0", "ZZZ9999999", "$A$01"))
    sheet = rng.choice(SHEETS) if rng.random() < 0.15 else ""
    if spelling == "openformula":
        return f"[{sheet}.{place}]"
    return f"{sheet}!{place}" if sheet else place


def area(rng: Random, spelling: Spelling) -> str:
    """A reference to several cells."""
    one, two = cell(rng, "excel"), cell(rng, "excel").rpartition("!")[2]
    if spelling == "openformula":
        wide = ("A1:.C9", "A1:.XFD1048576", "A1:.A1048576", "B2:.A1", "A1:.G12", "$A$1:.$B$3")
        sheet = rng.choice(SHEETS) if rng.random() < 0.15 else ""
        return f"[{sheet}.{rng.choice(wide)}]"
    return rng.choice((f"{one}:{two}", *AREAS))


def constants(rng: Random, spelling: Spelling) -> str:
    """An array constant."""
    beside, below = (",", ";") if spelling == "excel" else (";", "|")
    width = rng.randint(1, 4)
    made = (
        lambda: rng.choice(NUMBERS),
        lambda: quoted(rng.choice(TEXTS[:20])),
        lambda: "TRUE",
        lambda: rng.choice(ERRORS),
    )
    rows = [beside.join(rng.choice(made)() for _ in range(width)) for _ in range(rng.randint(1, 3))]
    return "{" + below.join(rows) + "}"


def stretched(rng: Random, spelling: Spelling) -> str:
    """A formula with one of its parts far too often."""
    often, sep = rng.choice((20, 70, 300, 450, 900, 3000)), separator(spelling)
    wrap = rng.choice(WRAPS).replace(",", sep)
    inner = atom(rng, spelling)
    return rng.choice(
        (
            lambda: wrap * often + inner + ")" * (wrap.count("(") * often),
            lambda: wrap * often + inner,
            lambda: inner + ")" * often,
            lambda: rng.choice(BINARY).join([inner] * often),
            lambda: inner + "%" * often,
            lambda: f"SUM({sep.join([inner] * often)})",
            lambda: "{" + sep.join(["1"] * often) + "}",
            lambda: "1" * often,
            lambda: quoted("x" * often),
            lambda: "LET(" + sep.join(f"x{k}{sep}{k}" for k in range(often)) + f"{sep}x1)",
            lambda: "^".join(["9"] * often),
            lambda: f"{rng.choice(CALLS)}({sep.join([rng.choice(NUMBERS)] * rng.randint(1, 5))})",
        )
    )()


def mangled(rng: Random, text: str) -> str:
    """A text with pieces taken out, doubled, moved, or strange signs put in."""
    for _ in range(rng.randint(1, 4)):
        at, end = sorted(rng.randint(0, len(text)) for _ in range(2))
        end = min(end, at + 12)
        piece = text[at:end]
        text = text[:at] + rng.choice(
            (
                text[end:],
                piece * 2 + text[end:],
                rng.choice(ODD) + text[at:],
                piece[::-1] + text[end:],
                piece.swapcase() + text[end:],
            )
        )
    return text


def quoted(text: str) -> str:
    """A text as a formula holds it."""
    return '"' + text.replace('"', '""') + '"'


def separator(spelling: Spelling) -> str:
    """What stands between arguments."""
    return "," if spelling == "excel" else ";"
