"""A command that cannot be carried out."""

from __future__ import annotations

from typing import Any

import click

__all__ = ["CANNOT", "Refusal"]

CANNOT = 4  # exit code where the command itself cannot be carried out: wrong option, unknown name, file in the way


class Refusal(click.ClickException):
    """A command that cannot be carried out, in one line."""

    exit_code = CANNOT

    def show(self, file: Any = None) -> None:
        """Print the line on stderr."""
        click.echo(f"cellsection: {self.message}", file=file, err=True)
