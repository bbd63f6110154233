"""Functions that check a section and let it be seen."""

from __future__ import annotations

import hashlib
from collections.abc import Sequence
from functools import lru_cache

from cellsection import __version__
from cellsection.catalogue.arguments import Cell, ReadBlock, anything, block, number, position
from cellsection.catalogue.record import CellFunction, Example, Returns
from cellsection.errors import InputError
from cellsection.section import faults as faults_of
from cellsection.section.headers import one_line, quoted
from cellsection.section.part import Part
from cellsection.section.rows import number_fault

__all__ = ["NO_FAULTS", "VIEW", "edition"]

NO_FAULTS = "no faults"
POINTS = 48  # of an outline, where the call does not say


def faults(parts: ReadBlock, gap: float | None) -> object:
    """What is wrong with a section although it can be summed."""
    if gap is not None and gap < 0:
        raise InputError(f"gap {gap:g} is negative", remedy="Give 0 or a small length", argument="gap")
    found = faults_of(parts.parts, gap, parts.unit)
    return tuple(tuple(fault) for fault in found) or NO_FAULTS


def outline(parts: ReadBlock, part: float | str, points: float | None) -> object:
    """Points along the outline of a part."""
    count = POINTS if points is None else points
    if count != int(count) or not 4 <= count <= 100_000:
        raise InputError(
            f"{count:g} points cannot be drawn", remedy="Ask for a whole number from 4 to 100000", argument="points"
        )
    return tuple(one_part(parts.parts, part).region.outline(int(count)))


def one_part(parts: Sequence[Part], wanted: float | str) -> Part:
    """The part with that label, or at that place in the block; refused where it could be either of two."""
    label = wanted if isinstance(wanted, str) else f"{wanted:g}"
    places = [k for k, part in enumerate(parts, start=1) if part.label.casefold() == label.casefold()]
    if isinstance(wanted, str):
        if not places:
            labels = one_line(", ".join(part.label for part in parts if part.label), longest=150)
            raise InputError(
                f"no part is labelled {quoted(wanted)}",
                remedy=f"Choose from {labels}" if labels else "Give its number in the block",
                argument="part",
            )
        if len(places) > 1:
            raise InputError(
                f"{len(places)} parts are labelled {quoted(wanted)}",
                remedy=f"Give the number of the one that is meant: {one_line(', '.join(map(str, places)))}",
                argument="part",
            )
        return parts[places[0] - 1]
    if wanted != int(wanted) or not 1 <= wanted <= len(parts):
        raise InputError(
            f"there is no part {wanted:g}",
            remedy=f"Give a label as text, or a number from 1 to {len(parts)}",
            argument="part",
        )
    if places and places != [wanted]:
        raise InputError(
            f"{wanted:g} is the place of one part and the label of another",
            remedy="Give the label as text, or label the parts in words",
            argument="part",
        )
    return parts[int(wanted) - 1]


def agrees(value: Cell, reference: Cell, tolerance: float | None) -> bool:
    """Whether a value agrees with its reference."""
    if tolerance is not None and not 0 <= tolerance < 1:
        raise InputError(
            f"relative tolerance {tolerance:g} is not from 0 to 1", remedy="Give 0.001 for 0.1 %", argument="tolerance"
        )
    if isinstance(value, str) and isinstance(reference, str):
        return value.strip().casefold() == reference.strip().casefold()
    for name, each in (("value", value), ("reference", reference)):
        fault = number_fault(each)
        if fault:
            raise InputError(fault, remedy="Compare two numbers, or two texts", argument=name)
    assert isinstance(value, (int, float))
    assert isinstance(reference, (int, float))
    allowed = 1e-9 if tolerance is None else tolerance
    return abs(value - reference) <= allowed * abs(reference)


def edition() -> str:
    """Version and digest of the verified catalogue."""
    return f"cellsection {__version__} {digest()}"


@lru_cache(maxsize=1)
def digest() -> str:
    """Twelve hex digits over what every function is declared and shown to give: they change when any of it does."""
    from cellsection.catalogue import CATALOGUE

    content = [
        (name, record.signature, record.returns.layout, record.example.formula, repr(record.example.result))
        for name, record in sorted(CATALOGUE.items())
        if name != "CS_EDITION"
    ]
    return hashlib.sha256(repr(content).encode()).hexdigest()[:12]


CROSS = (
    ("part", "shape", "b [mm]", "h [mm]", "y [mm]"),
    ("web", "rectangle", 10.0, 400.0, 200.0),
    ("flange", "rectangle", 200.0, 20.0, 410.0),
)

VIEW = (
    CellFunction(
        "CS_FAULTS",
        faults,
        (
            block("parts"),
            number("gap", "pieces this far apart still count as connected", "L", "touching"),
        ),
        Returns(
            f'"{NO_FAULTS}", or rows x 4', f'the text "{NO_FAULTS}", or a row a fault: part, fault, effect, remedy'
        ),
        "Looks for area counted twice, cut-outs outside solid parts, loose pieces, and totals no section can have.",
        "plane geometry of overlapping areas",
        Example("=CS_FAULTS(A1:E3)", {"A1": CROSS}, NO_FAULTS, "the flange sits on the web, 400 = 410 - 20/2"),
    ),
    CellFunction(
        "CS_OUTLINE",
        outline,
        (
            block("parts"),
            position("part", "the part, by its label, or by a number: 1 is the first in the block"),
            number("points", "number of rows to return", "", str(POINTS)),
        ),
        Returns("points x 2", "x, y along the outer outline, closed; the last point repeats to fill the rows"),
        "Points along the outline of a part, for an XY chart: a series a part.",
        "plane geometry",
        Example(
            '=CS_OUTLINE(A1:E3,"flange",5)',
            {"A1": CROSS},
            ((-100.0, 400.0), (100.0, 400.0), (100.0, 420.0), (-100.0, 420.0), (-100.0, 400.0)),
            "the four corners of the flange 200 x 20 about (0, 410), and the first again",
        ),
    ),
    CellFunction(
        "CS_AGREES",
        agrees,
        (
            anything("value", "the value to check: a number or a text"),
            anything("reference", "what it should be"),
            number("tolerance", "allowed difference relative to the reference", "", "1e-9"),
        ),
        Returns(
            "TRUE or FALSE", "TRUE where |value - reference| <= tolerance · |reference|; texts are compared as words"
        ),
        "Whether a value agrees with its reference; the check reads such cells as acceptance checks.",
        "definition of a relative tolerance",
        Example("=CS_AGREES(A1,B1,0.001)", {"A1": ((868000.0, 868300.0),)}, True, "300 is less than 0.1 % of 868 300"),
    ),
    CellFunction(
        "CS_EDITION",
        edition,
        (),
        Returns("text", "version of the package and a digest of its verified catalogue"),
        "Version and digest of the verified functions, to print on a calculation.",
        "bookkeeping; no formula",
        Example("=LEFT(CS_EDITION(),11)", {}, "cellsection", "the edition begins with the name of the package"),
    ),
)
