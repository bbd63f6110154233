"""What an .xlsx package says about cells outside them: which formulas spill, and which errors are newer than the file.

metadata.xml    <cellMetadata>, <valueMetadata>: lists that the cm and vm of a cell point into, counted from 1
richData/       values that no <v> can hold, such as #SPILL! and #CALC!, for which the cell itself says #VALUE!
"""

from __future__ import annotations

from dataclasses import dataclass, field

from cellsection.workbook.markup import Element
from cellsection.workbook.package import Package

__all__ = ["Metadata", "read_metadata"]

# Numbers of the errors that are newer than the file format. #CALC! is confirmed by saved files; the others (from
# memory) follow the numbers of the function ERROR.TYPE, which are one higher.
RICH_ERRORS = {8: "#SPILL!", 9: "#CONNECT!", 10: "#BLOCKED!", 11: "#UNKNOWN!", 12: "#FIELD!", 13: "#CALC!"}


@dataclass(frozen=True, slots=True)
class Metadata:
    """cm numbers that mark a dynamic array formula, and the errors that vm numbers stand for."""

    dynamic: frozenset[str] = frozenset()
    errors: dict[str, str] = field(default_factory=dict)


def number(text: str) -> int:
    """A count or place; -1 where there is none."""
    return int(text) if text.isdecimal() and text.isascii() and len(text) < 10 else -1


def read_metadata(package: Package, parts: dict[str, str]) -> Metadata:
    """The metadata of a book; `parts` are the related parts of the workbook part by kind."""
    part = parts.get("sheetMetadata", "")
    if part not in package:
        return Metadata()
    root = package.tree(part)
    kinds = [kind.get("name") for kind in root.along("metadataTypes", "metadataType")]
    future = {each.get("name"): list(each.along("bk")) for each in root.along("futureMetadata")}

    def entries(group: str, wanted: str) -> dict[str, Element]:
        """Those of the blocks that carry metadata of one kind, by the number that cells use."""
        found = {}
        for place, block in enumerate(root.along(group, "bk"), start=1):
            for record in block.along("rc"):
                kind, index = number(record.get("t")), number(record.get("v"))
                blocks = future.get(wanted, [])
                if 0 < kind <= len(kinds) and kinds[kind - 1] == wanted and 0 <= index < len(blocks):
                    found[str(place)] = blocks[index]
        return found

    dynamic = frozenset(
        place
        for place, block in entries("cellMetadata", "XLDAPR").items()
        if any(each.flag("fDynamic") for each in block.along("extLst", "ext", "dynamicArrayProperties"))
    )
    codes = read_rich_values(package, parts)
    errors = {
        place: codes[index]
        for place, block in entries("valueMetadata", "XLRICHVALUE").items()
        for each in block.along("extLst", "ext", "rvb")
        if (index := number(each.get("i"))) in codes
    }
    return Metadata(dynamic, errors)


def read_rich_values(package: Package, parts: dict[str, str]) -> dict[int, str]:
    """The rich values that are errors: their place in the list, and their code."""
    values, structures = parts.get("rdRichValue", ""), parts.get("rdRichValueStructure", "")
    if values not in package or structures not in package:
        return {}
    shapes = [(s.get("t"), [k.get("n") for k in s.along("k")]) for s in package.tree(structures).along("s")]
    codes = {}
    for place, value in enumerate(package.tree(values).along("rv")):
        shape = number(value.get("s"))
        if 0 <= shape < len(shapes) and shapes[shape][0] == "_error" and "errorType" in shapes[shape][1]:
            column = shapes[shape][1].index("errorType")
            kinds = [v.text for v in value.along("v")]
            code = RICH_ERRORS.get(number(kinds[column])) if column < len(kinds) else None
            if code:
                codes[place] = code
    return codes
