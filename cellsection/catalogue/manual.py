"""The reference pages, written from the catalogue: `python -m cellsection.catalogue.manual` in the checkout.

docs/functions.md and docs/shapes.svg are written whole. In docs/notation.md only what stands between the marks is, from
the shapes, units and datum words that the parts block knows; the rest of that page is written by hand.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from pathlib import Path
from typing import TypeAlias

from cellsection.catalogue.arguments import Argument
from cellsection.catalogue.assemble import ASSEMBLE
from cellsection.catalogue.drawings import shapes_drawing
from cellsection.catalogue.record import Cell, CellFunction, Table
from cellsection.catalogue.results import RESULTS
from cellsection.catalogue.view import VIEW
from cellsection.geometry import DATUMS, SHAPES
from cellsection.section.headers import UNITS

__all__ = ["CHAPTERS", "functions_page", "notation_page", "write_pages"]

Chapter: TypeAlias = tuple[str, str, tuple[CellFunction, ...]]

CHAPTERS: tuple[Chapter, ...] = (
    ("Assemble", "They make and change parts blocks, and return one: so calls nest.", ASSEMBLE),
    ("Results", "They give the properties of the section that a parts block describes.", RESULTS),
    ("Check and see", "They look for what is wrong, draw the section, and hold a workbook to its references.", VIEW),
)
NUMBER = re.compile(r"-?[0-9]+(\.[0-9]+)?(e[+-]?[0-9]+)?")
DOCS = Path(__file__).resolve().parents[2] / "docs"
OPENING = """\
# The cell functions

<!-- Written by `python -m cellsection.catalogue.manual`; change the catalogue, not this page. -->

Each function takes ranges, numbers and texts as any other function of a spreadsheet does. Most take a *parts block*
first: a range whose first row holds headers, then a row a part. [The notation](notation.md) explains the block, its
shapes and the axes, and sets the symbols beside those of EN and US codes. Results are for review by a licensed engineer
before use; local codes govern.

- **L** stands for the unit of length: the first that the headers name (`b [mm]`), else any one unit used throughout.
- An argument in square brackets may be left out, or its cell left blank. A single cell does where a range of one row is
  meant.
- An array result fills as many cells as are said below. What cannot be read or computed is an error, which names row,
  column and remedy; it is never a wrong number, nor a blank.
- In Python, `import cellsection` gives the same functions without `CS_`, in small letters: `cellsection.totals(rows)`.
"""


def functions_page() -> str:
    """docs/functions.md: every function with its arguments, what it gives, an example and its source."""
    contents: list[str] = []
    bodies: list[str] = []
    for title, text, functions in CHAPTERS:
        rows = [[f"[{each.name}](#{each.name.lower()})", each.help] for each in functions]
        contents += [f"**{title}.** {text}", "", *piped(["function", "what it does"], rows), ""]
        bodies += [f"## {title}", "", *(line for each in functions for line in described(each))]
    return "\n".join([OPENING, *contents, *bodies]).rstrip() + "\n"


def described(function: CellFunction) -> list[str]:
    """One function of the page."""
    lines = [f"### {function.name}", "", f"`={function.signature}`", "", function.help, ""]
    if function.arguments:
        rows = [
            [f"`{each.name}`", each.help, each.kind, each.dimension or "–", left_out(each)]
            for each in function.arguments
        ]
        lines += [*piped(["argument", "what it is", "given as", "dimension", "left out"], rows), ""]
    lines += [f"**Gives** {function.returns.layout}: {function.returns.help}.", ""]
    example = function.example
    lines += ["**Example.**", ""]
    for first, table in example.cells.items():
        lines += [*sheet(first, table), ""]
    shown = example.result if not isinstance(example.result, tuple) else None
    outcome = f"gives **{in_words(shown)}**" if shown is not None else "fills"
    lines += [f"`{example.formula}` {outcome}: {example.why}.", ""]
    if isinstance(example.result, tuple):
        lines += [*sheet("", example.result), ""]
    lines += whole_result(function)
    return [*lines, f"**Source.** {function.source[0].upper()}{function.source[1:]}.", ""]


def whole_result(function: CellFunction) -> list[str]:
    """All that the function fills in for the block of its example, where a block is all that it needs."""
    required = [each for each in function.arguments if not each.optional]
    if function in ASSEMBLE or [each.kind for each in required] != ["parts block"]:
        return []
    first, table = next(iter(function.example.cells.items()))
    result = function.call(table)
    if not isinstance(result, tuple):
        return []
    return [f"`={function.name}({area(first, table)})` fills:", "", *sheet("", result), ""]


def left_out(argument: Argument) -> str:
    """What stands for an argument where it is left out, as the page says it."""
    if argument.repeats:
        return "at least one"
    return argument.default or "–" if argument.optional else "needed"


def piped(header: Sequence[str], rows: Iterable[Sequence[str]]) -> list[str]:
    """A table as the page's format has it; columns of numbers stand to the right."""
    body = [[cell.replace("|", "\\|") for cell in row] for row in rows]
    rules = ["---:" if any(NUMBER.fullmatch(row[k]) for row in body) else "---" for k in range(len(header))]
    return ["| " + " | ".join(line) + " |" for line in (list(header), rules, *body)]


def sheet(first: str, table: Table) -> list[str]:
    """Cells with the letters of their columns and the numbers of their rows; without them where `first` is blank."""
    if not first:
        body = [[in_words(cell) for cell in row] for row in table]
        headed = not any(isinstance(cell, float) for cell in table[0])
        return piped(body[0], body[1:]) if headed else piped([""] * len(body[0]), body)
    column, row = corner(first)
    header = ["", *(chr(ord("A") + column + k) for k in range(len(table[0])))]
    return piped(header, [[str(row + k), *map(in_words, line)] for k, line in enumerate(table)])


def corner(address: str) -> tuple[int, int]:
    """Column from 0 and row from 1 of an address in columns A to Z."""
    match = re.fullmatch(r"([A-Z])([1-9][0-9]*)", address)
    if match is None:
        raise ValueError(f"{address} is no address that the manual can show")
    return ord(match[1]) - ord("A"), int(match[2])


def area(first: str, table: Table) -> str:
    """The address of a table from its first cell."""
    column, row = corner(first)
    return f"{first}:{chr(ord('A') + column + len(table[0]) - 1)}{row + len(table) - 1}"


def in_words(cell: Cell) -> str:
    """A cell as the page shows it: seven digits, and small ones apart that only rounding leaves.

    >>> in_words(749.3333333333334), in_words(True), in_words(None), in_words(868000.0)
    ('749.3333', 'TRUE', '', '868000')
    """
    if cell is None:
        return ""
    if isinstance(cell, bool):
        return str(cell).upper()
    if isinstance(cell, str):
        return cell
    return f"{cell:.7g}" if abs(cell) < 1e7 else f"{cell:.0f}"


def shape_table() -> str:
    """The shapes with their dimensions, as docs/notation.md shows them."""
    rows = [
        [word, " ".join(shape.required), " ".join(shape.optional) or "–", shape.help] for word, shape in SHAPES.items()
    ]
    rows.append(["polygon", "`node` rows below it", "–", "corners in either sense, x and y from those of the polygon"])
    return "\n".join(piped(["shape", "needs", "may have", "which is"], rows))


def words_of(words: Iterable[str]) -> str:
    """Words in a line."""
    return " · ".join(f"`{word}`" for word in words)


GENERATED = {"shapes": shape_table(), "units": words_of(UNITS), "datums": words_of(DATUMS)}


def notation_page(text: str) -> str:
    r"""docs/notation.md with what stands between its marks written anew.

    >>> print(notation_page("<!-- units -->\n<!-- end -->"))
    <!-- units -->
    `mm` · `cm` · `m` · `in` · `ft`
    <!-- end -->
    """
    for name, written in GENERATED.items():
        start, end = f"<!-- {name} -->\n", "<!-- end -->"
        before, mark, rest = text.partition(start)
        if mark:
            text = f"{before}{start}{written}\n{end}{rest.partition(end)[2]}"
    return text


def write_pages(docs: Path = DOCS) -> tuple[Path, ...]:
    """The pages and the drawing, written into the folder that holds notation.md; the paths that changed."""
    notation = docs / "notation.md"
    pages = {
        docs / "functions.md": functions_page(),
        docs / "shapes.svg": shapes_drawing(),
        notation: notation_page(notation.read_text(encoding="utf-8")),
    }
    changed = [path for path, page in pages.items() if not path.exists() or path.read_text(encoding="utf-8") != page]
    for path in changed:
        path.write_text(pages[path], encoding="utf-8", newline="\n")
    return tuple(changed)


if __name__ == "__main__":
    write_pages()
