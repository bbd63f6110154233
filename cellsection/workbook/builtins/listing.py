"""The page on the spreadsheet functions, made of their declarations: `python -m cellsection.workbook.builtins.listing`.

It writes docs/spreadsheet-functions.md of the checkout anew; a test fails when the page is stale.
"""

from __future__ import annotations

import sys
from collections import defaultdict
from pathlib import Path

from cellsection.workbook.builtins import BUILTINS
from cellsection.workbook.builtins.registry import Builtin
from cellsection.workbook.compile import ALL_FORMS

__all__ = ["PAGE", "page", "signature"]

PAGE = Path(__file__).resolve().parents[3] / "docs" / "spreadsheet-functions.md"

OPENING = """# Spreadsheet functions

The functions that the recalculation computes: {count} names. This page is made of their declarations
(`python -m cellsection.workbook.builtins.listing`).

A function is called with the arguments it declares; a call with too few or too many is reported with its cell and not
guessed. In a file the newer ones carry a prefix (`_xlfn.`, `COM.MICROSOFT.`), which is read over.

- `number`, `text`, `logical`: one value, converted as the application does; `measure`: a number, a logical is refused
- `value`: one value of any kind; `any`: an error too
- `array`: any values; `range`: cells or values; `table`: as `range`, and an
  expression is calculated as an array; `reference`: cells
- `?` may be left out; `...` may be repeated
- ° changes with the clock, by chance or with the machine: compared by kind only, unless `--clock` says the day

What a function is to give is laid down in ISO/IEC 29500-1 (18.17.7) and, for .ods, in OpenDocument 1.3 part 4. Where
the applications differ from them or from one another, see [differences](differences.md).
"""
CHAPTERS = {
    "mathematics": "Mathematics",
    "integers": "Whole numbers, number bases, chance",
    "engineering": "Engineering",
    "complexnumbers": "Complex numbers",
    "bessel": "Bessel functions",
    "units": "Units of measurement",
    "statistics": "Statistics",
    "distributions": "Distributions",
    "regression": "Regression",
    "conditional": "Sums and counts under criteria",
    "lookup": "Lookup and reference",
    "arrays": "Arrays and matrices",
    "logical": "Logic and information",
    "text": "Text",
    "patterns": "Regular expressions",
    "dates": "Dates and times",
    "financial": "Interest and payments",
    "bonds": "Securities",
    "database": "Lists with criteria",
}
CLOSING = """
## Not supported

A cell that uses one of these is reported as "not supported", with all cells that depend on it; so is any name that is
not on this page.

- CUBEMEMBER, CUBEVALUE and their kin, GETPIVOTDATA, RTD, STOCKHISTORY, WEBSERVICE, FILTERXML: they ask a server, a
  pivot table or the web, and nothing is fetched
- CALL, REGISTER.ID, SQL.REQUEST, functions of other add-ins and of macros: they run other programs, and nothing is
  executed
- FORECAST.ETS and its kin: the application's own smoothing is not published in full
- GROUPBY, PIVOTBY, TRIMRANGE, IMAGE: not made
- AMORDEGRC, ODDFPRICE, ODDFYIELD, ODDLPRICE, ODDLYIELD, EUROCONVERT: not made
- PHONETIC, DBCS, JIS, YEN, BAHTTEXT and others for one language, TRANSLATE, DETECTLANGUAGE: not made
- EASTERSUNDAY, ROUNDSIG, B and the other names of one application (`ORG.LIBREOFFICE.`, `ORG.OPENOFFICE.`) that are not
  on this page: not made
- CELL and INFO where they ask for formats, colours or the machine: not made
"""


def signature(declared: Builtin) -> str:
    """A function with its arguments by kind.

    >>> signature(BUILTINS["ROUND"]), signature(BUILTINS["SUM"])
    ('ROUND(number, number?)', 'SUM(range, ...)')
    """
    words = [kind if place < declared.least else f"{kind}?" for place, kind in enumerate(declared.kinds)]
    if declared.most is None:
        words = [*(word.rstrip("?") for word in words), "..."]
    return f"{declared.name}({', '.join(words)})" + ("°" if declared.volatile else "")


def page() -> str:
    """The whole page."""
    families: dict[str, list[Builtin]] = defaultdict(list)
    for name in sorted(BUILTINS):
        families[BUILTINS[name].call.__module__.rpartition(".")[2]].append(BUILTINS[name])
    names = {*BUILTINS, *ALL_FORMS}
    lines = [OPENING.format(count=len(names)), "## Forms", ""]
    lines += ["These evaluate only the arguments they need, or take a function as one:", ""]
    lines += [" ".join(sorted({*ALL_FORMS, "ANCHORARRAY", "SINGLE"})), ""]
    rest = sorted(set(families) - set(CHAPTERS))
    for family in (*CHAPTERS, *rest):
        if family in families:
            lines += [f"## {CHAPTERS.get(family, family.capitalize())}", ""]
            lines += [f"- `{signature(declared)}`" for declared in families[family]]
            lines += [""]
    return "\n".join(lines).rstrip() + "\n" + CLOSING


if __name__ == "__main__":
    PAGE.write_text(page(), encoding="utf-8", newline="\n")
    sys.stdout.write(f"{PAGE.name} is written.\n")
