"""Known differences in the code of an error: both programs refuse, for the same arguments, with different words."""

from __future__ import annotations

from cellsection.workbook.values import ErrorValue
from tests.differential.known import Condition, Known, Side

__all__ = ["CODES"]


def refused(ours: str, *shown: str) -> Condition:
    """Both sides give an error, of these codes."""
    return Condition(
        f"ours is {ours}, LibreOffice's is {' or '.join(shown)}",
        lambda d: isinstance(d.ours, ErrorValue) and d.ours.code == ours and d.shown in shown,
    )


def record(key: str, ours: str, shown: str, heads: str, reason: str, standard: Side = "silent") -> Known:
    """Both refuse; ours is the code that Excel's reference documents for the function."""
    return Known(f"codes/{key}", frozenset(heads.split()), refused(ours, *shown.split()), reason, standard, "ours")


CODES: tuple[Known, ...] = ()
