"""Rebuild the workbooks this project ships, and the picture of the README.

    python -m cellsection.templates              writes workbooks/*.xlsx
    python -m cellsection.templates --picture    writes docs/girder.png too; needs LibreOffice and pdftoppm

To be run whenever the templates or the verified catalogue change; a test says when the shipped files are stale.
"""

from __future__ import annotations

import sys
from pathlib import Path

from cellsection.errors import CellsectionError
from cellsection.templates import TEMPLATES, build
from cellsection.templates.picture import picture

ROOT = Path(__file__).resolve().parents[2]


def main(arguments: list[str]) -> int:
    """Write the files; exit code."""
    if arguments not in ([], ["--picture"]):
        sys.stderr.write(f"{__doc__}\n")
        return 2
    try:
        for name in TEMPLATES:
            out = ROOT / "workbooks" / f"{name}.xlsx"
            build(name, out)
            sys.stdout.write(f"{out.relative_to(ROOT)}\n")
        if arguments:
            picture(ROOT / "workbooks" / "crane-hall-girder.xlsx", ROOT / "docs" / "girder.png")
            sys.stdout.write("docs/girder.png\n")
    except CellsectionError as failure:
        sys.stderr.write(f"{failure}\n")
        return 1
    return 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
