"""Steps and differences between numbers, for counting."""

from __future__ import annotations

from cellsection.workbook.builtins.registry import builtin


@builtin("DELTA", "measure measure?")
def delta(x: float, y: float = 0.0) -> float:
    return float(x == y)


@builtin("GESTEP", "measure measure?")
def gestep(x: float, step: float = 0.0) -> float:
    return float(x >= step)
