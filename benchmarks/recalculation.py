"""Whole processes on generated books: a check and a written recalculation against a headless LibreOffice conversion.

LibreOffice is made to calculate all formulas anew on load (it trusts saved values otherwise) and writes an .xlsx, which
is compared with our own values in the end, so that both have done the same work. All run in turn, in one run.
"""

from __future__ import annotations

import os
import shutil
import statistics
import sys
import tempfile
from pathlib import Path

from benchmarks.against_libreoffice import Measurement, measured
from benchmarks.generated import BOOKS, Kind, write_book

__all__ = ["run"]

RECALCULATE = """<?xml version="1.0" encoding="UTF-8"?>
<oor:items xmlns:oor="http://openoffice.org/2001/registry">
<item oor:path="/org.openoffice.Office.Calc/Formula/Load"><prop oor:name="OOXMLRecalcMode" oor:op="fuse"><value>0</value></prop></item>
<item oor:path="/org.openoffice.Office.Calc/Formula/Load"><prop oor:name="ODFRecalcMode" oor:op="fuse"><value>0</value></prop></item>
</oor:items>
"""  # noqa: E501 - as the application writes it
OURS = ("check", "recalculate")


def run(rounds: int, most: int) -> int:
    """Measure and print; 1 where a process failed, values differ or an aim is missed."""
    soffice = shutil.which("soffice")
    if not soffice:
        print("LibreOffice (soffice) is not on the search path.")
        return 1
    failed = False
    load = f"{os.getloadavg()[0]:.1f}" if hasattr(os, "getloadavg") else "not known"
    print(f"{rounds} rounds each, in turn; load of the machine at the start {load}")
    print(f"{'formula cells':24}{'check':>9}{'recalc.':>9}{'LibreOffice':>12}   ratios           aim    peak MB")
    with tempfile.TemporaryDirectory() as scratch:
        folder = Path(scratch)
        profile = folder / "profile"
        (profile / "user").mkdir(parents=True)
        (profile / "user" / "registrymodifications.xcu").write_text(RECALCULATE, encoding="utf-8")
        for kind in BOOKS:
            if kind.formulas <= most:
                failed |= not compared(kind, folder, [soffice, f"-env:UserInstallation={profile.as_uri()}"], rounds)
    return int(failed)


def compared(kind: Kind, folder: Path, office: list[str], rounds: int) -> bool:
    """One line of the table; False where something is not as it should be."""
    wrong, book = write_book(kind, folder / "wrong.xlsx"), folder / "book.xlsx"
    converted = folder / "converted"
    cellsection = [sys.executable, "-m", "cellsection"]
    commands = {
        "recalculate": [*cellsection, "recalculate", str(wrong), "-o", str(book), "--replace"],
        "LibreOffice": [
            *office, "--headless", "--norestore", "--convert-to", "xlsx", "--outdir", str(converted), str(wrong),
        ],
        "check": [*cellsection, "check", str(book)],
    }  # fmt: skip
    met: dict[str, list[Measurement]] = {name: [] for name in commands}
    for turn in range(rounds + 1):
        for name, command in commands.items():
            found = measured(command)
            if turn:  # the first of each, which warms up files and profiles, does not count
                met[name].append(found)
    codes = {name: {each.code for each in found} for name, found in met.items()}
    seconds = {name: statistics.median(each.seconds for each in found) for name, found in met.items()}
    peaks = {name: max(each.megabytes for each in found) for name, found in met.items()}
    ratios = [seconds[name] / seconds["LibreOffice"] for name in OURS]
    aim = "" if kind.aim is None else f"{kind.aim:.2f}"
    print(
        f"{kind.title:24}{seconds['check']:9.3f}{seconds['recalculate']:9.3f}{seconds['LibreOffice']:12.3f}"
        f"   {ratios[0]:.2f} and {ratios[1]:.2f}   {aim:>6}    "
        + " ".join(f"{peaks[name]:.0f}" for name in (*OURS, "LibreOffice")),
        flush=True,
    )
    good = all(code == {0} for code in codes.values())
    if not good:
        print(f"{'':24}exit codes {codes}")
    elif apart := differences(book, converted / "wrong.xlsx"):
        print(f"{'':24}{apart:,} values differ from LibreOffice's")
        good = False
    return good and (kind.aim is None or max(ratios) <= kind.aim)


def differences(ours: Path, theirs: Path) -> int:
    """How many cells differ between two books."""
    from cellsection.check.compare import Tolerance, agree
    from cellsection.workbook.book import Limits
    from cellsection.workbook.reader import read_book

    mine, other = (read_book(path, Limits()) for path in (ours, theirs))
    tolerance = Tolerance(1e-9, 1e-9)
    return sum(
        not agree(sheet.values.get(place), value, tolerance)
        for sheet, against in zip(mine.sheets, other.sheets, strict=True)
        for place, value in against.values.items()
        if place in sheet.formulas
    )
