"""The command line of the benchmarks.

    python -m benchmarks check-against-libreoffice [BOOK ...] [--rounds N]
    python -m benchmarks recalculation [--rounds N] [--most CELLS]
    python -m benchmarks books FOLDER
    python -m benchmarks written-books FOLDER [--parts]
    python -m benchmarks differential [--cells N] [--seed N]
    python -m benchmarks fuzz [--minutes N] [--seed S] [--kept FOLDER]

The first times `cellsection check` against a headless LibreOffice conversion of the same book, whole processes, in turn
in one run, and prints the medians, their ratio and the peak memory. The second does so on generated books of 3,000 to
200,000 formula cells, and times a written recalculation too. `books` checks every book in a folder and prints
the share of its formula cells that equal the saved value, the time taken and what is not supported. `written-books`
spoils all values of every book in a folder in a copy, recalculates that into a second copy, and compares it with
the book part by part, and as openpyxl and LibreOffice read it. `fuzz` puts random formulas and damaged books through
the program for so many minutes and keeps what fails.
"""

from __future__ import annotations

import argparse
from pathlib import Path

from benchmarks import against_libreoffice, real_books, recalculation, written_books

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
    generated = commands.add_parser("recalculation", help="time generated books against a headless conversion")
    generated.add_argument("--rounds", type=int, default=5, help="repetitions of each, in turn (default 5)")
    generated.add_argument("--most", type=int, default=200_000, help="leave out books of more formula cells")
    books = commands.add_parser("books", help="how much of each book in a folder holds")
    books.add_argument("folder", metavar="FOLDER", type=Path)
    written = commands.add_parser(
        "written-books", help="values written in place, part by part, for each book in a folder"
    )
    written.add_argument("folder", metavar="FOLDER", type=Path)
    written.add_argument("--parts", action="store_true", help="a line for each part of each book")
    fuzz = commands.add_parser("fuzz", help="random formulas and damaged books, for so many minutes")
    fuzz.add_argument("--minutes", type=float, default=1.0, help="how long (default 1)")
    fuzz.add_argument("--seed", type=int, default=1, help="what the trials are drawn from (default 1)")
    fuzz.add_argument("--kept", metavar="FOLDER", type=Path, default=Path("fuzz-cases"), help="where failing cases go")
    against_each_other = commands.add_parser("differential", help="random workbooks here and in LibreOffice")
    against_each_other.add_argument("--cells", type=int, default=20_000, help="formula cells compared (default 20,000)")
    against_each_other.add_argument("--seed", type=int, default=1, help="of the first book (default 1)")
    chosen = parser.parse_args()
    if chosen.command == "differential":
        from benchmarks import differential

        return differential.run(chosen.cells, chosen.seed)
    if chosen.command == "fuzz":
        from benchmarks import fuzz as trials

        return trials.run(chosen.minutes, chosen.seed, chosen.kept)
    if chosen.command == "recalculation":
        return recalculation.run(chosen.rounds, chosen.most)
    if chosen.command == "books":
        return real_books.run(chosen.folder)
    if chosen.command == "written-books":
        return written_books.run(chosen.folder, chosen.parts)
    return against_libreoffice.run(chosen.books or sorted(TEMPLATES.glob("*.xlsx")), chosen.rounds)


if __name__ == "__main__":
    raise SystemExit(main())
