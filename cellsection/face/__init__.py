"""The Python face: every cell function on lists of lists, numpy arrays and pandas DataFrames.

A parts block is rows with the headers first, or a DataFrame whose columns are the headers (a named index is a column
too); rows in messages are counted as in a sheet, the headers being row 1. What comes in decides what goes out: with a
DataFrame among the arguments tables are returned as DataFrames, else with an array as arrays, else as lists of lists;
one number is always a float. None is a blank, and NaN is one in a DataFrame; elsewhere NaN is refused.

All functions raise InputError, a ValueError, whose one line names argument, row, column and remedy. Lengths are in any
one unit L, or in that of the headers.
"""

from cellsection.face.functions import (
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
    "about", "agrees", "edition", "faults", "fibres", "joined", "ledger", "mirrored", "moved", "outline", "parts",
    "polygon", "principal", "totals",
]  # fmt: skip
