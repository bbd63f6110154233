"""The order of calculation that an .xlsx package may keep in a part of its own, and when it has to go.

The application rejects a calcChain that names a cell without a formula. Values written in place never add or remove a
formula, so that the part stays; only where a spill has shrunk may it name a cell that is blank now. It is then left out
with what mentions it, and the application makes it anew.
"""

from __future__ import annotations

import posixpath
import re
from collections.abc import Mapping

from cellsection.workbook.addresses import read_ref
from cellsection.workbook.book import Position
from cellsection.workbook.markup import feed, new_parser
from cellsection.workbook.package import Package, Relationship, canonical
from cellsection.workbook.splice import Edit, opened, replaced

__all__ = ["without_chain"]

TYPES = "[Content_Types].xml"


def without_chain(
    package: Package, main: str, relations: Mapping[str, Relationship], blanked: Mapping[str, set[Position]]
) -> tuple[str, dict[str, bytes]]:
    """The chain's part, where it has to go, and the parts that mention it without it; "" where it may stay.

    blanked : the cells that lost their value, by the number that the workbook gives their sheet
    """
    part = next((each.target for each in relations.values() if each.kind == "calcChain"), "")
    if not any(blanked.values()) or part not in package or not names_any(package, part, blanked):
        return "", {}
    folder, base = posixpath.split(main)
    mentions = posixpath.join(folder, "_rels", f"{base}.rels")
    changed = {
        canonical(name): without_elements(package.part(name), element, attribute, part, package.where(name))
        for name, element, attribute in ((mentions, "Relationship", "Target"), (TYPES, "Override", "PartName"))
        if name in package
    }
    return part, changed


def names_any(package: Package, part: str, blanked: Mapping[str, set[Position]]) -> bool:
    """Whether the chain names one of the cells; a cell of the same sheet as the one before does not say its sheet."""
    sheet, met = "", False

    def start(name: str, attributes: dict[str, str]) -> None:
        nonlocal sheet, met
        if name.rpartition(" ")[2] == "c":
            sheet = attributes.get("i", sheet)
            area = read_ref(attributes.get("r", ""))
            met = met or (area is not None and area[:2] in blanked.get(sheet, ()))

    feed(new_parser(start, lambda _: None), package.pieces(part), package.where(part))
    return met


def without_elements(data: bytes, element: str, attribute: str, part: str, where: str) -> bytes:
    """XML without the empty elements whose attribute names a part, by its whole name or from its own folder."""
    edits: list[Edit] = []
    base = posixpath.basename(part)

    def start(name: str, attributes: dict[str, str]) -> None:
        stated = attributes.get(attribute, "")
        if name.rpartition(" ")[2] == element and re.fullmatch(rf"(?:/?{re.escape(part)}|{re.escape(base)})", stated):
            at, end = opened(data, parser.CurrentByteIndex)
            if not data[at:end].endswith(b"/>"):
                end = data.index(b">", data.index(b"</", end)) + 1
            edits.append((at, end, b""))

    parser = new_parser(start, lambda _: None)
    feed(parser, [data], where)
    return replaced(data, edits)
