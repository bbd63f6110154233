"""How far a long run is, for a person at a terminal; a pipe or a log gets none of it."""

from __future__ import annotations

import sys
from typing import TYPE_CHECKING, Any

import click

if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path

__all__ = ["Progress"]

BUSY = 500_000  # bytes of a book from which a check takes long enough to be told of
FEW = 3  # books for which a bar would have nothing to show
CLEAR = "\r\033[K"


class Progress:
    """A bar on the last line of the terminal: `withdraw` it before anything is printed, `advance` it after.

    For few books of some size there is one line instead, which names the book in work.
    """

    def __init__(self, paths: Sequence[Path]) -> None:
        self.paths, self.done = paths, 0
        terminal = sys.stderr.isatty()
        self.bar: Any = None  # a click.progressbar
        if terminal and len(paths) > FEW:
            self.bar = click.progressbar(length=len(paths), label="  checking", show_pos=True, file=sys.stderr)
        self.told = terminal and not self.bar and any(path.is_file() and path.stat().st_size > BUSY for path in paths)

    def __enter__(self) -> Progress:
        """Show that work has begun."""
        if self.bar:
            self.bar.render_progress()
        self._tell()
        return self

    def __exit__(self, *_: object) -> None:
        """Leave the terminal as it was, with its cursor."""
        self.withdraw()
        if self.bar:
            click.echo("\033[?25h", nl=False, err=True)

    def withdraw(self) -> None:
        """Clear the line for what is to be printed."""
        if self.bar or self.told:
            click.echo(CLEAR, nl=False, err=True)

    def advance(self) -> None:
        """One book more is done."""
        self.done += 1
        if self.bar and self.done < len(self.paths):
            self.bar.update(1)
        self._tell()

    def _tell(self) -> None:
        if self.told and self.done < len(self.paths):
            name = self.paths[self.done].name[:50]
            click.echo(f"  checking {self.done + 1} of {len(self.paths)}: {name} ...", nl=False, err=True)
