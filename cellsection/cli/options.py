"""The options that every command takes which recalculates a book: its limits, its clock, its random numbers.

    @click.command()
    @click.argument("book")
    @host_options
    def weigh(book, limits, clock, seed): ...

The command receives `limits`, `clock` and `seed` as the headless host takes them; what was not given is None.
"""

from __future__ import annotations

from dataclasses import MISSING, fields
from datetime import datetime
from math import isfinite
from typing import TYPE_CHECKING, Any, Literal, TypeVar

import click

from cellsection.cli.refusal import Refusal

if TYPE_CHECKING:
    from collections.abc import Callable

    from cellsection.workbook.book import Limits

__all__ = ["host_options"]

LONGEST_SEED = 18  # digits
SAVED: Literal["saved"] = "saved"
EARLIEST = 1904  # in both date systems every moment from this year on has a number
F = TypeVar("F", bound="Callable[..., Any]")


class LimitOption(click.Option):
    """An option whose help names each limit with its default, read from Limits when somebody asks for the help."""

    def get_help_record(self, ctx: click.Context) -> tuple[str, str] | None:
        """The lines of the help, completed."""
        record = super().get_help_record(ctx)
        if record is None:
            return None
        listed = ", ".join(f"{name}={_plain(value)}" for name, value in _defaults().items())
        return record[0], f"{record[1]}  [defaults: {listed}]"


def host_options(command: F) -> F:
    """Give a command the options --limit, --clock and --seed."""
    seed = click.option(
        "--seed",
        metavar="NUMBER",
        callback=_seed,
        help="Begin random numbers from NUMBER, so that they come out the same in every run.",
    )
    clock = click.option(
        "--clock",
        metavar="MOMENT",
        callback=_clock,
        help="What TODAY and NOW give: a date or date-time such as 2026-12-01 or 2026-12-01T14:30, or 'saved' for the"
        " day the book says it was last saved. Cells that depend on it are then compared by value.",
    )
    limit = click.option(
        "--limit",
        "limits",
        metavar="NAME=NUMBER",
        multiple=True,
        callback=_limits,
        cls=LimitOption,
        help="The most that a book may ask for; may be given several times.",
    )
    return limit(clock(seed(command)))


def _defaults() -> dict[str, float]:
    """The limits by name, with their defaults."""
    from cellsection.workbook.book import Limits

    return {each.name: each.default for each in fields(Limits) if each.default is not MISSING}


def _limits(_: click.Context, __: click.Parameter, given: tuple[str, ...]) -> Limits | None:
    """The limits with those given in place of the defaults; None where none is given."""
    if not given:
        return None
    from cellsection.workbook.book import Limits

    known = _defaults()
    chosen: dict[str, Any] = {}
    for each in given:
        name, equals, text = (piece.strip() for piece in each.partition("="))
        if name not in known:
            raise Refusal(f"--limit {each}: there is no limit {name!r}. The limits are {', '.join(known)}.")
        whole = isinstance(known[name], int)
        number = _number(text)
        if not equals or number is None or number <= 0 or (whole and number != int(number)):
            what = "a whole number" if whole else "a number"
            raise Refusal(
                f"--limit {each}: {name} takes {what} above 0. Write for example {name}={_plain(known[name])}."
            )
        chosen[name] = int(number) if whole else number
    return Limits(**chosen)


def _plain(number: float) -> str:
    """A limit as it is typed: 4000000, not 4e+06 nor 300.0."""
    return str(number) if isinstance(number, int) else f"{number:g}"


def _number(text: str) -> float | None:
    """The number a person wrote, 1_000 and 2e9 among them; None where it is none."""
    try:
        number = float(text)
    except ValueError:
        return None
    return number if isfinite(number) else None


def _clock(_: click.Context, __: click.Parameter, given: str | None) -> datetime | Literal["saved"] | None:
    """The moment to calculate for."""
    if given is None:
        return None
    if given.strip().lower() == SAVED:
        return SAVED
    try:
        moment = datetime.fromisoformat(given.strip())
    except ValueError:
        raise Refusal(
            f"--clock {given}: that is no date. Write it as 2026-12-01 or 2026-12-01T14:30, or write 'saved'."
        ) from None
    if moment.tzinfo is not None:
        raise Refusal(f"--clock {given}: a cell knows no time zone. Leave it out and write the local time.")
    if moment.year < EARLIEST:
        raise Refusal(f"--clock {given}: a book counts its days from {EARLIEST} at the latest. Write a later date.")
    return moment


def _seed(_: click.Context, __: click.Parameter, given: str | None) -> int | None:
    """What random numbers begin from."""
    if given is None:
        return None
    if not given.strip().isdecimal() or len(given) > LONGEST_SEED:
        raise Refusal(f"--seed {given}: a seed is a whole number of up to {LONGEST_SEED} digits. Write for example 1.")
    return int(given)
