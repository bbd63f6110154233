"""`cellsection check` against `soffice --headless --convert-to xlsx` on the same book: whole processes, in turn."""

from __future__ import annotations

import os
import shutil
import statistics
import subprocess
import sys
import tempfile
import time
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

__all__ = ["Measurement", "measured", "run"]


@dataclass(frozen=True, slots=True)
class Measurement:
    """One process from start to end."""

    seconds: float
    megabytes: float  # peak resident memory of the process and of what it started
    code: int


def run(books: Sequence[Path], rounds: int) -> int:
    """Measure and print; 1 where there is nothing to measure or a process failed."""
    soffice = shutil.which("soffice")
    if not soffice or not books:
        print("LibreOffice (soffice) is not on the search path." if books else "There is no book to check.")
        return 1
    failed = False
    with tempfile.TemporaryDirectory() as scratch:
        # A profile of its own, made by a conversion that is not measured: the start that a user of a CI machine sees.
        converting = [soffice, f"-env:UserInstallation={(Path(scratch) / 'profile').as_uri()}", "--headless"]
        converting += ["--norestore", "--convert-to", "xlsx", "--outdir", scratch]
        checking = [sys.executable, "-m", "cellsection", "check"]
        print(f"{'book':32} {'':10} {'median s':>9} {'fastest s':>10} {'peak MB':>8}   ({rounds} rounds each, in turn)")
        for book in books:
            found: dict[str, list[Measurement]] = {"check": [], "LibreOffice": []}
            measured([*checking, str(book)])
            measured([*converting, str(book)])
            for _ in range(rounds):
                found["check"].append(measured([*checking, str(book)]))
                found["LibreOffice"].append(measured([*converting, str(book)]))
            for name, met in found.items():
                times = [each.seconds for each in met]
                peak = max(each.megabytes for each in met)
                print(f"{book.name:32} {name:10} {statistics.median(times):9.3f} {min(times):10.3f} {peak:8.0f}")
            codes = {name: sorted({each.code for each in met}) for name, met in found.items()}
            failed |= codes["LibreOffice"] != [0] or 3 in codes["check"]
            check, office = (statistics.median(each.seconds for each in met) for met in found.values())
            print(f"{'':32} check takes {check / office:.2f} of LibreOffice's time; exit codes {codes}")
    return int(failed)


def measured(command: Sequence[str]) -> Measurement:
    """Run a command to its end. wait4 tells the memory of this process alone, not the peak of all before it.

    Python keeps its compiled modules, as it does where it is not told otherwise: the first, unmeasured run makes them.
    """
    surroundings = {name: value for name, value in os.environ.items() if name != "PYTHONDONTWRITEBYTECODE"}
    start = time.perf_counter()
    process = subprocess.Popen(command, env=surroundings, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    _, status, usage = os.wait4(process.pid, 0)
    seconds = time.perf_counter() - start
    process.returncode = os.waitstatus_to_exitcode(status)
    kilobytes = usage.ru_maxrss / (1024 if sys.platform == "darwin" else 1)
    return Measurement(seconds, kilobytes / 1024, process.returncode)
