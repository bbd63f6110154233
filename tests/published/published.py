"""Published values as they are printed, and how closely a computed value must meet them.

`published("0.1406")` is the number as printed; anything within half a unit of its last digit equals it, so the
tolerance is read off the page and not chosen. A source is one CSV file under sources/, named by source and edition.
"""

from __future__ import annotations

import csv
import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal
from functools import cache
from pathlib import Path

__all__ = ["SOURCES", "Published", "Row", "Source", "published", "rows", "sources"]

SOURCES = Path(__file__).parent / "sources"
EXACT_FORMULA = 2e-6  # relative tolerance of a row whose value is an exact formula's, unless its note says otherwise
ROUNDING_SLACK = 1e-9  # of half a unit: binary fractions of the very half (12.25 against 12.3) must not decide


@dataclass(frozen=True, eq=False)
class Published:
    """A published number; equal to every value within `half` of it."""

    printed: str
    half: float

    @property
    def value(self) -> float:
        return float(self.printed)

    def halves(self, computed: float) -> float:
        """Distance of a computed value in half units of the last digit, at most 1 where it reproduces."""
        return abs(computed - self.value) / self.half

    def __eq__(self, computed: object) -> bool:
        return isinstance(computed, int | float) and self.halves(computed) <= 1 + ROUNDING_SLACK

    __hash__ = None  # type: ignore[assignment]

    def __repr__(self) -> str:
        return f"published({self.printed} ± {self.half:g})"


def published(printed: str, last_digit: str = "", note: str = "") -> Published:
    """The number as printed, with half a unit of its last digit as tolerance.

    last_digit : one unit of the last digit, where the print does not show it (29400 known to the hundred is "100");
        "exact formula: ..." for a value that was evaluated from an exact formula and not printed with fewer digits
    note : of an exact formula's row; may state another relative tolerance

    >>> 0.14058 == published("0.1406")
    True
    >>> 0.14066 == published("0.1406")
    False
    >>> 29449.0 == published("29400", last_digit="100")
    True
    """
    if last_digit.startswith("exact"):
        stated = re.search(r"tolerance of the numerical recomputation (\S+?)\)", note)
        return Published(printed, abs(float(printed)) * (float(stated[1]) if stated else EXACT_FORMULA))
    unit = Decimal(last_digit) if last_digit else Decimal((0, (1,), Decimal(printed).as_tuple().exponent))  # type: ignore[arg-type]
    return Published(printed, float(unit) / 2)


@dataclass(frozen=True)
class Source:
    """One file of published values: where they come from and who typed them from what."""

    name: str
    source: str
    group: str
    units: str
    typed: str
    shape: str = ""

    @property
    def from_memory(self) -> bool:
        return "from memory" in self.typed


@dataclass(frozen=True)
class Row:
    """One published value of one section."""

    source: Source
    id: str
    section: str
    quantity: str
    unit: str
    given: Mapping[str, str]
    printed: str
    last_digit: str
    note: str
    place: str = ""

    @property
    def value(self) -> Published:
        return published(self.printed, self.last_digit, self.note)

    @property
    def title(self) -> str:
        """What the row says, as the id of its test: section, quantity and source."""
        where = f"{self.source.name}, {self.place}" if self.place else self.source.name
        return f"{self.section}: {self.quantity} ({where}, {self.id})"

    def number(self, dimension: str) -> float:
        return float(self.given[dimension])

    def numbers(self, dimension: str) -> list[float]:
        return [float(number) for number in self.given[dimension].split()]


NOT_GIVEN = {"id", "place", "section", "quantity", "unit", "given", "printed", "last digit", "note"}


def given(record: Mapping[str, str]) -> dict[str, str]:
    """The dimensions of a row: its own columns, or the text `b = 6; h = 4` of the column given."""
    if "given" in record:
        return dict(pair.split(" = ", 1) for pair in record["given"].split("; ") if pair)
    return {name: text for name, text in record.items() if name not in NOT_GIVEN}


def read_source(path: Path) -> Iterator[Row]:
    lines = path.read_text(encoding="utf-8").splitlines()
    head = [line.removeprefix("# ") for line in lines if line.startswith("# ")]
    name, *facts = head
    if name != path.stem:
        raise ValueError(f"{path.name} is headed {name!r}")
    source = Source(name, **dict(fact.split(": ", 1) for fact in facts))
    for record in csv.DictReader(line for line in lines if not line.startswith("# ")):
        yield Row(
            source,
            given=given(record),
            last_digit=record["last digit"],
            place=record.get("place", ""),
            **{name: record[name] for name in ("id", "section", "quantity", "unit", "printed", "note")},
        )


@cache
def rows() -> tuple[Row, ...]:
    """Every published value, source by source."""
    return tuple(row for path in sorted(SOURCES.glob("*.csv")) for row in read_source(path))


def sources() -> tuple[Source, ...]:
    return tuple(dict.fromkeys(row.source for row in rows()))
