"""The texts that cells of an .xlsx package share, and how its texts are escaped.

sst ─ si ─┬─ t, r ─ t   text, whole or in runs
          └─ rPh        how it is read aloud; left out
"""

from __future__ import annotations

import re

from cellsection.workbook.markup import DEEPEST, LONGEST_TEXT, feed, new_parser, refused
from cellsection.workbook.package import Package

__all__ = ["read_sst", "unescaped"]

ESCAPED = re.compile(r"_x([0-9A-Fa-f]{4})_")


def unescaped(text: str) -> str:
    r"""_x000D_ and its kind turned into the character they stand for.

    >>> unescaped("plate_x000D_web _x005F_x000D_")
    'plate\rweb _x000D_'
    """
    if "_x" not in text:
        return text
    plain = ESCAPED.sub(lambda m: chr(int(m[1], 16)), text)
    return plain.encode("utf-16", "surrogatepass").decode("utf-16", "replace")  # two halves of a character joined


def read_sst(package: Package, part: str) -> list[str]:
    """The shared strings in their order; what the part says of their number is ignored."""
    strings: list[str] = []
    text, whole, aloud, depth = "", "", 0, 0

    def start(name: str, _: dict[str, str]) -> None:
        nonlocal text, whole, aloud, depth
        depth += 1
        text = ""
        if name.endswith(" si"):
            whole = ""
        elif name.endswith(" rPh"):
            aloud = depth
        elif depth > DEEPEST:
            raise refused(f"nests deeper than {DEEPEST} elements")

    def end(name: str) -> None:
        nonlocal whole, aloud, depth
        if name.endswith(" t"):
            if not aloud:
                whole += text
        elif name.endswith(" si"):
            strings.append(unescaped(whole))
            if len(strings) > package.limits.cells:
                raise package.refused(f"it holds more than {package.limits.cells:,} texts")
        elif depth == aloud:
            aloud = 0
        depth -= 1

    def data(piece: str) -> None:
        nonlocal text
        text += piece
        if len(text) > LONGEST_TEXT:
            raise refused(f"holds a text of more than {LONGEST_TEXT:,} characters")

    feed(new_parser(start, end, data), package.pieces(part), package.where(part))
    return strings
