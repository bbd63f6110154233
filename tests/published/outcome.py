"""What becomes of each published value: computed now, reproduced or not, or waiting for a chapter."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache

from tests.published.awaited import awaited_chapter
from tests.published.exceptions import EXCEPTIONS
from tests.published.figures import figure
from tests.published.published import Row, rows
from tests.published.sections import Block, Section
from tests.published.tables import AMERICAN, EUROPEAN, rolled_block
from tests.published.worked import worked_example

__all__ = ["Outcome", "outcome", "outcomes"]

LENGTHS = {"mm": 1.0, "cm": 10.0, "dm": 100.0, "m": 1000.0, "in": 1.0}  # in the unit of the block: mm, or inches


@dataclass(frozen=True)
class Outcome:
    """A row and what the functions give for it, in the row's unit; `computed` is None while a chapter is missing."""

    row: Row
    computed: float | None
    awaits: str | None = None

    @property
    def halves(self) -> float | None:
        """Difference in half units of the last digit, at most 1 where the row reproduces."""
        return None if self.computed is None else self.row.value.halves(self.computed)

    @property
    def reproduced(self) -> bool:
        return self.computed is not None and self.computed == self.row.value

    @property
    def reason(self) -> str | None:
        """Why the row is listed as an exception, None for most."""
        return EXCEPTIONS.get(self.row.id)

    @property
    def state(self) -> str:
        return f"awaits {self.awaits}" if self.awaits else "computed now"


def unit_in_block_units(unit: str) -> float:
    """One unit of a printed value in the units of its parts block.

    >>> unit_in_block_units("cm4"), unit_in_block_units("1e6 mm4"), unit_in_block_units("ft kip")
    (10000.0, 1000000.0, 1.0)
    """
    met = re.fullmatch(r"(?:(1e-?\d+) )?(mm|cm|dm|m|in)(\d?)", unit)
    if not met:
        return 1.0  # a pure number, a stress, or a figure without a unit of length
    factor, length, power = met.groups()
    return float(factor or 1) * LENGTHS[length] ** int(power or 1)


@cache
def section(block: Block) -> Section:
    """One section a block, so that its functions are called once for all the rows of a table."""
    return Section(block)


WORKED_VALUES: dict[tuple[str, str], Mapping[str, float]] = {}


def worked_values(row: Row) -> Mapping[str, float]:
    """The values of a row's example, worked out once for all its rows."""
    key = (row.source.name, row.section)
    if key not in WORKED_VALUES:
        WORKED_VALUES[key] = worked_example(row)
    return WORKED_VALUES[key]


def in_block_units(row: Row) -> float | None:
    """What the functions give for a row, None where no reading of its quantity is written."""
    group = row.source.group
    if group in ("torsion solid", "thin-walled"):
        return None
    if group == "figure":
        block, readings = figure(row)
    elif group == "worked example" or row.source.name.startswith("Access Steel"):
        return worked_values(row).get(row.quantity)
    else:
        block, readings = rolled_block(row), EUROPEAN if group.startswith("EN") else AMERICAN
    reading = readings.get(row.quantity)
    return reading(section(block)) if reading else None


def outcome(row: Row) -> Outcome:
    """What becomes of one row; raises where it is neither computed nor awaited, or both."""
    computed, awaits = in_block_units(row), awaited_chapter(row)
    if (computed is None) == (awaits is None):
        raise LookupError(f"{row.title}: {'read twice' if awaits else 'no reading and no chapter awaited'}")
    return Outcome(row, None if computed is None else computed / unit_in_block_units(row.unit), awaits)


@cache
def outcomes() -> tuple[Outcome, ...]:
    return tuple(outcome(row) for row in rows())
