"""What a worker may meet, by the name of the book: run in worker processes, so it must be importable there."""

from __future__ import annotations

import os
import time
from typing import TYPE_CHECKING

from cellsection.check import Report, Tolerance

if TYPE_CHECKING:
    from pathlib import Path


def check_or_die(path: Path) -> Report:
    if path.name.startswith("deadly"):
        os._exit(9)
    if path.name.startswith("endless"):
        time.sleep(600)
    return Report(str(path), Tolerance())
