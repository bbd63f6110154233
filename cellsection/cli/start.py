"""`cellsection start`: a template workbook to fill in."""

from __future__ import annotations

from pathlib import Path

import click

from cellsection.cli.refusal import Refusal

__all__ = ["start"]


@click.command()
@click.argument("template")
@click.argument("out", metavar="OUT.xlsx", type=click.Path(path_type=Path))
def start(template: str, out: Path) -> None:
    """Write a template workbook to fill in, under a new name.

    A file that is there already is never overwritten.

    \b
    Templates:
      girder              a built-up girder: parts, section, drawing, faults, checks
      crane-hall-girder   the same filled in: a crane girder that is strengthened

    \b
    Example:
      cellsection start girder "crane girder axis B.xlsx"
    """  # noqa: D301 - a \b keeps the lines below it as they are
    from cellsection.errors import CellsectionError
    from cellsection.templates import build

    if out.suffix.lower() != ".xlsx":
        raise Refusal(f"a template is written as an .xlsx file, and {out} does not end so. Name it {out.stem}.xlsx.")
    if out.exists():
        raise Refusal(f"{out} is there already and is not overwritten. Choose another name, or move it away.")
    if not out.parent.is_dir():
        raise Refusal(f"there is no folder {out.parent}. Make it first, or choose another place.")
    try:
        build(template, out)
    except (CellsectionError, OSError) as failure:
        raise Refusal(str(failure)) from failure
    click.echo(f"{out} is written. Fill in the parts, save it, then: cellsection check {_quoted(out)}")


def _quoted(path: Path) -> str:
    return f'"{path}"' if " " in str(path) else str(path)
