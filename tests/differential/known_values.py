"""Known differences in values: one side gives a value where the other gives another one, or an error."""

from __future__ import annotations

from cellsection.workbook.builtins import BUILTINS

__all__ = ["VALUES"]
from tests.differential.known import Known

VALUES: tuple[Known, ...] = ()
