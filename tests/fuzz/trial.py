"""One trial: a random or damaged book goes through the program, and what comes of it is held to the promises.

A book is read and recalculated, checked by the command, and its values are written to a copy. The command may end with
one of its own exit codes only; a value is what a cell can hold; nothing outside the folder of the trial is touched.
"""

from __future__ import annotations

import io
import json
import sys
from collections import Counter
from collections.abc import Callable
from contextlib import redirect_stderr, redirect_stdout
from math import isfinite
from pathlib import Path
from random import Random

from cellsection.check.examine import examine
from cellsection.check.report import calm_lines
from cellsection.cli import main
from cellsection.errors import WorkbookError
from cellsection.workbook.book import Limits
from cellsection.workbook.reader import read_book
from cellsection.workbook.recalculate import recalculated
from cellsection.workbook.results import Recalculation, Status
from cellsection.workbook.values import ErrorValue
from tests.fuzz.damage import damaged_markup, damaged_zip, packed
from tests.fuzz.formulas import Spelling, formula
from tests.fuzz.originals import book_of, ods_parts, xlsx_parts
from tests.fuzz.watch import watched

__all__ = ["KINDS", "LIMITS", "OWN_FAULTS", "file_trial", "formula_trial", "trial", "undamaged"]

LIMITS = Limits(unzipped_bytes=50_000_000, cells=300_000, array_cells=200_000, seconds=3.0)
OWN_FAULTS = ("at which the program fails", "with these arguments (")  # how a report tells of a fault in a builtin
EXITS = (0, 1, 2, 3, 4)
A_BOOK = 12  # formulas in one book of random formulas


def trial(rng: Random, folder: Path, kind: str) -> Counter[str]:
    """Make a trial of a kind; what it met, counted. The case itself stands in the folder beforehand."""
    return KINDS[kind](rng, folder)


def formula_cases(rng: Random, folder: Path) -> Counter[str]:
    """A book in memory with random formulas."""
    spelling: Spelling = rng.choice(("excel", "excel", "openformula"))
    formulas = [(rng.choice(("cell", "cell", "array", "dynamic")), formula(rng, spelling)) for _ in range(A_BOOK)]
    (folder / "case.json").write_text(json.dumps([spelling, formulas]), encoding="ascii")
    return formula_trial(formulas, spelling, folder)


def formula_trial(formulas: list[tuple[str, str]], spelling: Spelling, folder: Path) -> Counter[str]:
    """Recalculate and examine a book of these formulas."""
    with watched(folder):
        result = recalculated(book_of(formulas, spelling), None, LIMITS)
        return told(result)


def told(result: Recalculation) -> Counter[str]:
    """Hold a recalculation to what is promised of it; count what became of its cells."""
    met: Counter[str] = Counter()
    for cell in result.cells:
        assert isinstance(cell.status, Status)
        value = cell.value
        assert value is None or value.__class__ in (float, str, bool, ErrorValue), repr(value)
        assert value.__class__ is not float or isfinite(value), "a number without bounds"
        assert cell.formula is not None
        if any(fault in cell.reason for fault in OWN_FAULTS):
            met[f"fault: {cell.reason[:150]}"] += 1
        met[cell.status.name.lower()] += 1
    for line in calm_lines(examine(result), every=True):
        line.encode("utf-8")
    return met


def xml_cases(rng: Random, folder: Path) -> Counter[str]:
    """A book with one or two parts damaged."""
    ods = rng.random() < 0.35
    parts = ods_parts() if ods else xlsx_parts()
    spelling: Spelling = "openformula" if ods else "excel"
    likely = "content.xml" if ods else "xl/worksheets/sheet1.xml"
    for _ in range(rng.choice((1, 1, 2))):
        name = likely if rng.random() < 0.5 else rng.choice(list(parts))
        parts[name] = damaged_markup(rng, parts[name], spelling)
    data = packed(rng, parts) if rng.random() < 0.3 else undamaged(parts)
    return file_trial(data, ".ods" if ods else ".xlsx", folder)


def undamaged(parts: dict[str, bytes]) -> bytes:
    """The parts in a sound zip file."""
    return packed(Calm(), parts)


class Calm(Random):
    """Chooses the first of everything, so that nothing unusual comes of it."""

    def random(self) -> float:
        return 0.99

    def getrandbits(self, k: int, /) -> int:  # noqa: ARG002
        return 0


def zip_cases(rng: Random, folder: Path) -> Counter[str]:
    """A book whose zip file is damaged."""
    ods = rng.random() < 0.35
    data = damaged_zip(rng, packed(rng, ods_parts() if ods else xlsx_parts()))
    return file_trial(data, rng.choice((".xlsx", ".xlsm", ".ods")), folder)


def file_trial(data: bytes, suffix: str, folder: Path) -> Counter[str]:
    """Put a file through the reader, the command `check` and the command `recalculate`."""
    path, out = folder / f"case{suffix}", folder / f"out{suffix}"
    path.write_bytes(data)
    out.unlink(missing_ok=True)
    limits = [
        f"--limit={name}={getattr(LIMITS, name)}" for name in ("unzipped_bytes", "cells", "array_cells", "seconds")
    ]
    with watched(folder):
        met: Counter[str] = Counter()
        try:
            book = read_book(path, LIMITS)
        except WorkbookError as refusal:
            str(refusal).encode("utf-8", "surrogatepass")
            met["refused"] += 1
        else:
            met["read"] += 1
            met += told(recalculated(book, None, LIMITS))
        commands = [
            ["check", "--trace", "--all", str(path), *limits],
            ["check", "--trace", "--json", str(path), *limits],
        ]
        commands.append(["recalculate", str(path), "-o", str(out), *limits])
        for command in commands:
            code, output = typed(command)
            assert code in EXITS, output
            assert "Traceback" not in output
    assert path.read_bytes() == data, "the file itself was changed"
    if out.exists():
        met["written"] += 1
        read_book(out, LIMITS)
    left = {each.name for each in folder.iterdir()} - {path.name, out.name, "case.json"}
    assert not left, f"left behind: {left}"
    return met


def typed(arguments: list[str]) -> tuple[int, str]:
    """The exit code and the output of a command as it is typed, to a terminal of the plainest kind."""
    output = io.TextIOWrapper(io.BytesIO(), encoding="utf-8")
    before, sys.argv = sys.argv, ["cellsection", *arguments]
    try:
        with redirect_stdout(output), redirect_stderr(output):
            main()
    except SystemExit as ended:
        code = ended.code if isinstance(ended.code, int) else 1
    finally:
        sys.argv = before
    output.flush()
    assert isinstance(output.buffer, io.BytesIO)
    return code, output.buffer.getvalue().decode()


KINDS: dict[str, Callable[[Random, Path], Counter[str]]] = {
    "formulas": formula_cases,
    "markup": xml_cases,
    "zip": zip_cases,
}
