"""Verified section functions for calc workbooks, and a headless recalculation that checks them.

The cell functions in Python, under their names without CS_, on lists of lists, arrays and pandas DataFrames:

>>> import cellsection
>>> girder = [["shape", "b [mm]", "h [mm]", "y [mm]"], ["rectangle", 200, 20, 0], ["rectangle", 10, 460, 240]]
>>> cellsection.totals(girder, "A")
8600.0

Nothing but this file is loaded until one of them is asked for.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from cellsection.face import (
        about,
        agrees,
        edition,
        faults,
        fibres,
        joined,
        ledger,
        mirrored,
        moved,
        outline,
        parts,
        polygon,
        principal,
        totals,
    )

__all__ = [
    "about",
    "agrees",
    "edition",
    "faults",
    "fibres",
    "joined",
    "ledger",
    "mirrored",
    "moved",
    "outline",
    "parts",
    "polygon",
    "principal",
    "totals",
]

__version__ = "0.1.0"


def __getattr__(name: str) -> object:
    """A function of the Python face, loaded when it is first asked for."""
    if name not in __all__:
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    from cellsection import face

    return getattr(face, name)


def __dir__() -> list[str]:
    """What there is, loaded or not."""
    return sorted([*globals(), *__all__])
