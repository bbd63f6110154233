"""LibreOffice calculates books anew: one process converts .xlsx files to .ods, which then carry its values."""

from __future__ import annotations

import subprocess
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path

__all__ = ["calculated"]

# Calculate everything anew when a file is opened, whatever program saved it.
ALWAYS = """<?xml version="1.0" encoding="UTF-8"?>
<oor:items xmlns:oor="http://openoffice.org/2001/registry">
<item oor:path="/org.openoffice.Office.Calc/Formula/Load"><prop oor:name="OOXMLRecalcMode" oor:op="fuse">
<value>0</value></prop></item></oor:items>
"""


def calculated(soffice: str, books: Sequence[Path], folder: Path) -> list[Path]:
    """The books as LibreOffice saves them, as .ods, in the same order; one process does them all.

    A profile of its own is made in the folder, so that no running LibreOffice is disturbed.
    """
    profile = folder / "profile"
    (profile / "user").mkdir(parents=True, exist_ok=True)
    settings = profile / "user" / "registrymodifications.xcu"
    if not settings.exists():
        settings.write_text(ALWAYS, encoding="utf-8")
    out = folder / "calculated"
    command = [soffice, f"-env:UserInstallation={profile.as_uri()}", "--headless", "--norestore"]
    command += ["--convert-to", "ods", "--outdir", str(out), *map(str, books)]
    done = subprocess.run(command, check=True, capture_output=True, timeout=60 + 30 * len(books), text=True)
    made = [out / f"{book.stem}.ods" for book in books]
    if missing := [path.name for path in made if not path.exists()]:
        raise RuntimeError(f"LibreOffice wrote no {', '.join(missing)}: {done.stderr.strip()[-300:]}")
    return made
