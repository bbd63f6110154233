"""The picture of the README: the first page of a workbook as LibreOffice prints it."""

from __future__ import annotations

import shutil
import subprocess
import tempfile
from pathlib import Path

from cellsection.errors import WorkbookError

__all__ = ["picture"]

WIDTH = 1200  # pixels
LEFT, TOP, ACROSS, DOWN = 0.45, 0.4, 7.37, 7.65  # inches of the A4 page: no margins, down to the drawing
PATIENCE = 120  # seconds


def picture(book: Path, out: Path) -> None:
    """Write the upper part of the first page of a workbook as a PNG file, the saved values as they are.

    Raises WorkbookError where soffice or pdftoppm is missing or makes nothing.
    """
    soffice, pdftoppm = _program("soffice"), _program("pdftoppm")
    with tempfile.TemporaryDirectory() as folder:
        profile = Path(folder, "profile").as_uri()
        _run(soffice, f"-env:UserInstallation={profile}", "--headless", "--convert-to", "pdf", "--outdir", folder, book)
        page = Path(folder, book.with_suffix(".pdf").name)
        if not page.exists():
            raise WorkbookError(f"{book} was not printed by LibreOffice", remedy="Open it by hand and see what it says")
        scale = WIDTH / ACROSS
        frame = {"-x": LEFT, "-y": TOP, "-W": ACROSS, "-H": DOWN}
        crop = [text for option, inches in frame.items() for text in (option, str(round(inches * scale)))]
        _run(pdftoppm, "-png", "-f", "1", "-singlefile", "-r", str(scale), *crop, page, out.with_suffix(""))


def _program(name: str) -> str:
    found = shutil.which(name)
    if not found:
        remedy = "Install LibreOffice" if name == "soffice" else "Install the Poppler tools"
        raise WorkbookError(f"the program {name} is not here", remedy=remedy)
    return found


def _run(*command: str | Path) -> None:
    subprocess.run([str(each) for each in command], check=True, capture_output=True, timeout=PATIENCE)
