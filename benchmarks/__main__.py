"""The command line of the benchmarks.

    python -m benchmarks check-against-libreoffice [BOOK ...] [--rounds N]
    python -m benchmarks books FOLDER

The first times `cellsection check` against a headless LibreOffice conversion of the same book, whole processes, in turn
in one run, and prints the medians, their ratio and the peak memory. The second checks every book in a folder and prints
the share of its formula cells that equal the saved value, the time taken and what is not supported.
"""

from __future__ import annotations

import argparse
from pathlib import Path

from benchmarks import against_libreoffice, real_books

TEMPLATES = Path(__file__).resolve().parents[1] / "workbooks"


def main() -> int:
    """Run the benchmark named on the command line."""
    parser = argparse.ArgumentParser(
        prog="python -m benchmarks", description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter
    )
    commands = parser.add_subparsers(dest="command", required=True)
    against = commands.add_parser("check-against-libreoffice", help="time a check against a headless conversion")
    against.add_argument("books", metavar="BOOK", nargs="*", type=Path, help="default: the shipped workbooks")
    against.add_argument("--rounds", type=int, default=7, help="repetitions of each, in turn (default 7)")
    books = commands.add_parser("books", help="how much of each book in a folder holds")
    books.add_argument("folder", metavar="FOLDER", type=Path)
    chosen = parser.parse_args()
    if chosen.command == "books":
        return real_books.run(chosen.folder)
    return against_libreoffice.run(chosen.books or sorted(TEMPLATES.glob("*.xlsx")), chosen.rounds)


if __name__ == "__main__":
    raise SystemExit(main())
