"""A value as a cell of an OpenDocument spreadsheet holds it: typed attributes, and paragraphs that show it.

A number keeps the kind that its cell has, a date a date. The paragraphs show it unrounded, whatever the format of the
cell: applications show a cell by its value and format, not by them.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from datetime import datetime, timedelta
from decimal import Decimal

from cellsection.errors import WorkbookError
from cellsection.workbook.literals import read_date
from cellsection.workbook.splice import ATTRIBUTE
from cellsection.workbook.tablecells import CALCEXT, OFFICE, SHOWN_ERROR
from cellsection.workbook.values import ErrorValue, Scalar

__all__ = ["CALCEXT", "WORDS", "Names", "form", "number_text"]

HELD = ("value", "value-type", "date-value", "time-value", "boolean-value", "string-value", "currency")
KINDS = frozenset(("float", "percentage", "currency", "date", "time"))  # of numbers
WORDS = (b"TRUE", b"FALSE")  # by which a number is shown that is a truth
NO_SIGN = re.compile("[\x00-\x08\x0b\x0c\x0e-\x1f\ud800-\udfff\ufffe\uffff]")  # that XML cannot hold
SPACES = re.compile(r"^ +|(?<= ) +|\t")
QUOTED = str.maketrans({"&": "&amp;", "<": "&lt;", '"': "&quot;", "\n": "&#10;", "\r": "&#13;", "\t": "&#9;"})
CLOSE = 1e-10  # of a day, to which a date can be written


@dataclass(frozen=True, slots=True)
class Names:
    """The prefixes that a file has for the namespaces; `calcext` may be missing."""

    office: str
    table: str
    text: str
    calcext: str
    held: frozenset[bytes] = field(init=False)  # the attributes that hold a value

    def __post_init__(self) -> None:
        held = [f"{self.office}:{each}" for each in HELD] + [f"{self.calcext}:value-type"]
        object.__setattr__(self, "held", frozenset(each.encode() for each in held))

    @property
    def value_opened(self) -> bytes:
        """The attribute of a number, up to the number."""
        return f' {self.office}:value="'.encode()

    @property
    def rows_repeated(self) -> bytes:
        """The attribute that says for how many rows one stands."""
        return f"{self.table}:number-rows-repeated".encode()

    @property
    def columns_repeated(self) -> bytes:
        """The attribute that says for how many cells one stands."""
        return f"{self.table}:number-columns-repeated".encode()

    def with_value(self, tag: bytes, attributes: dict[str, str]) -> bytes:
        """A start tag with the attributes that hold its value replaced where they stand, all others kept."""
        new = b"".join(b' %b="%b"' % (name.encode(), quoted(text)) for name, text in attributes.items())
        pieces, done, placed = [], 0, False
        for met in ATTRIBUTE.finditer(tag):
            if met[1] in self.held:
                pieces += [tag[done : met.start()], b"" if placed else new]
                done, placed = met.end(), True
        rest = tag[done:]
        if not placed:
            end = b"/>" if rest.endswith(b"/>") else b">"
            rest = rest[: -len(end)].rstrip() + new + end
        return b"".join(pieces) + rest


def quoted(text: str) -> bytes:
    """A text as the value of an attribute."""
    return text.translate(QUOTED).encode()


def form(
    value: Scalar, old: dict[str, str], shown: bytes, names: Names, epoch: datetime
) -> tuple[dict[str, str], bytes]:
    """The attributes and the paragraphs that hold a value.

    old, shown : what the cell held before, its attributes and its text
    """
    o, kind = names.office, old.get(OFFICE + "value-type", "")
    truth = kind == "float" and shown in WORDS  # how the application saves what a comparison gave
    typed = f"{o}:value-type"

    def said(kind: str) -> dict[str, str]:
        """What the application says of the kind in a namespace of its own."""
        return {f"{names.calcext}:value-type": kind} if names.calcext else {}

    if value is None:
        return {}, b""
    if truth and value in (0.0, 1.0):
        value = value == 1.0
    if isinstance(value, ErrorValue):
        code = value.code if SHOWN_ERROR.fullmatch(value.code) else "#VALUE!"
        return {typed: "string", f"{o}:string-value": "", **said("error")}, paragraphs(code, names)
    if isinstance(value, bool):
        word = "TRUE" if value else "FALSE"
        if truth:
            return {typed: "float", f"{o}:value": str(int(value)), **said("float")}, paragraphs(word, names)
        held = {typed: "boolean", f"{o}:boolean-value": word.lower(), **said("boolean")}
        return held, paragraphs(word, names)
    if isinstance(value, str):
        if NO_SIGN.search(value):
            raise WorkbookError(
                "a formula gives a text with a control character, which .ods cannot hold",
                remedy="Leave it out in the formula with CLEAN",
            )
        return {typed: "string", f"{o}:string-value": value, **said("string")}, paragraphs(value, names)
    kind = kind if kind in KINDS and OFFICE + "string-value" not in old else "float"
    if kind == "date" and (day := date_text(value, epoch)):
        return {typed: kind, f"{o}:date-value": day, **said(kind)}, paragraphs(day.replace("T", " "), names)
    if kind == "time":
        time = duration_text(value)
        return {typed: kind, f"{o}:time-value": time, **said(kind)}, paragraphs(clock_text(value), names)
    kind = "float" if kind == "date" else kind
    text = number_text(value)
    held = {typed: kind, f"{o}:value": text}
    if kind == "currency" and OFFICE + "currency" in old:
        held = {typed: kind, f"{o}:currency": old[OFFICE + "currency"], f"{o}:value": text}
    percent = f"{100 * value:.15g}%" if kind == "percentage" else f"{value:.15g}"
    return {**held, **said(kind)}, paragraphs(percent, names)


def number_text(value: float) -> str:
    """A number to its last digit.

    >>> number_text(6.0), number_text(0.1)
    ('6', '0.1')
    """
    return repr(int(value)) if value == int(value) and abs(value) < 1e15 else repr(value)


def date_text(value: float, epoch: datetime) -> str:
    """A serial number as an ISO date, with its time unless that is midnight; "" where the calendar ends before it.

    >>> date_text(45352.5, datetime(1899, 12, 30)), date_text(-1e9, datetime(1899, 12, 30))
    ('2024-03-01T12:00:00', '')
    """
    try:
        moment = epoch + timedelta(days=value)
    except OverflowError:
        return ""
    text = moment.isoformat() if moment.time() != epoch.time() else moment.date().isoformat()
    read = read_date(text, epoch)
    return text if isinstance(read, float) and abs(read - value) <= CLOSE else ""


def duration_text(value: float) -> str:
    """Days as a duration, to the last digit.

    >>> duration_text(0.5), duration_text(-1.25), duration_text(0.1)
    ('PT12H00M00S', '-PT30H00M00S', 'PT02H24M00S')
    """
    total = Decimal(repr(abs(float(value)))) * 86400
    hours, rest = divmod(total, 3600)
    minutes, seconds = divmod(rest, 60)
    whole, _, part = f"{seconds:f}".partition(".")
    part = part.rstrip("0")
    sign = "-" if value < 0 else ""
    return f"{sign}PT{int(hours):02}H{int(minutes):02}M{whole:0>2}{'.' + part if part else ''}S"


def clock_text(value: float) -> str:
    """Days as hours, minutes and seconds, as a clock shows them.

    >>> clock_text(1 / 3), clock_text(-1.25)
    ('08:00:00', '-30:00:00')
    """
    minutes, seconds = divmod(round(abs(value) * 86400, 3), 60)
    hours, minutes = divmod(int(minutes), 60)
    return f"{'-' if value < 0 else ''}{hours:02}:{minutes:02}:{f'{seconds:06.3f}'.removesuffix('.000')}"


def paragraphs(text: str, names: Names) -> bytes:
    """A text as paragraphs, one a line; spaces that XML would run together are elements."""
    t = names.text
    lines = []
    for line in text.split("\n"):
        escaped = line.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;").replace("\r", "&#13;")
        marked = SPACES.sub(lambda m: f"<{t}:tab/>" if m[0] == "\t" else spaces(t, len(m[0])), escaped)
        lines.append(f"<{t}:p>{marked}</{t}:p>" if marked else f"<{t}:p/>")
    return "".join(lines).encode()


def spaces(prefix: str, count: int) -> str:
    """So many spaces."""
    return f'<{prefix}:s {prefix}:c="{count}"/>' if count > 1 else f"<{prefix}:s/>"
