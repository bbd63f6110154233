"""What is wrong with a built-up section although its parts can be summed."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

from cellsection.errors import InputError
from cellsection.section.composite import totals

if TYPE_CHECKING:
    from collections.abc import Sequence

    from cellsection.section.part import Part

__all__ = ["Fault", "faults"]


class Fault(NamedTuple):
    """One fault in one line: the part, what is wrong, what it does to the results, and what to do."""

    part: str
    fault: str
    effect: str
    remedy: str


def faults(parts: Sequence[Part], gap: float | None = None) -> tuple[Fault, ...]:
    """Every fault found, none where the section is sound."""
    found = []
    try:
        totals(parts)
    except InputError as error:
        found.append(Fault("all parts", error.fault, "there are no totals", error.remedy))
    return tuple(found)
