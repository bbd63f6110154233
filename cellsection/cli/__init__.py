"""The command line: `cellsection check`, `recalculate`, `functions`, `start`, one file a command.

Start-up is part of the speed of a check, so each command imports what it needs when it runs.
"""

from __future__ import annotations

import io
import os
import sys
from typing import NoReturn

import click

import cellsection
from cellsection.cli.check import check
from cellsection.cli.functions import functions
from cellsection.cli.recalculate import recalculate
from cellsection.cli.refusal import CANNOT
from cellsection.cli.start import start

__all__ = ["commands", "main"]


def main() -> None:
    """Run the command line; the program's entry point."""
    for stream in (sys.stdout, sys.stderr):  # a console that cannot show a ² must not end the run
        if isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(errors="replace")
    try:
        leave(commands.main(prog_name="cellsection", standalone_mode=False) or 0)
    except click.Abort:
        sys.exit(130)
    except click.ClickException as refusal:
        refusal.show()
        sys.exit(CANNOT)
    except BrokenPipeError:  # the reader of our output has seen enough
        sys.stderr.close()
        sys.exit(1)


def leave(code: int) -> NoReturn:
    """End with an exit code, at once where nothing else is to be tidied up.

    Python takes all cells of a book apart one by one as it ends, which is a tenth of the time of checking a large one.
    """
    watched = sys.gettrace() is not None or sys.getprofile() is not None
    if watched or "multiprocessing" in sys.modules or "concurrent.futures" in sys.modules:
        sys.exit(code)
    sys.stdout.flush()
    sys.stderr.flush()
    os._exit(code)


@click.group(context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(cellsection.__version__, prog_name="cellsection", message="%(prog)s %(version)s")
def commands() -> None:
    """Section functions for calc workbooks, and a check that recalculates saved workbooks without their application.

    \b
    Examples:
      cellsection check girder.xlsx         does the saved workbook hold?
      cellsection recalculate girder.xlsx -o new.xlsx
                                            a copy with recalculated values
      cellsection functions CS_TOTALS       what a cell function takes and returns
      cellsection start girder new.xlsx     a template workbook to fill in
    """  # noqa: D301 - a \b keeps the lines below it as they are


for each in (check, recalculate, functions, start):
    commands.add_command(each)
