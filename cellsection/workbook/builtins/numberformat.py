"""TEXT's number formats (ISO/IEC 29500-1, 18.8.31): digits, groups, per cent, exponents, dates and times, sections."""

from __future__ import annotations

import re

from cellsection.workbook.builtins.calendar import LAST, clock_of, day_of
from cellsection.workbook.builtins.mathematics import rounded
from cellsection.workbook.builtins.registry import ErrorResult
from cellsection.workbook.coercion import VALUE, text_of
from cellsection.workbook.values import Scalar

__all__ = ["formatted"]

PIECE = re.compile(
    r'"(?P<quoted>[^"]*)"|\\(?P<escaped>.)|_(?P<space>.)|\*(?P<fill>.)|(?P<bracket>\[[^\]]*\])'
    r"|(?P<ampm>AM/PM|am/pm|A/P|a/p)|(?P<general>General)"
    r"|(?P<date>y+|Y+|m+|M+|d+|D+|h+|H+|s+|S+)(?P<fraction>\.0+)?|(?P<exponent>[Ee][+-])(?P<power>[0#?]+)|(?P<other>.)",
    re.DOTALL | re.IGNORECASE,
)
MONTHS = (
    "January", "February", "March", "April", "May", "June", "July", "August", "September", "October", "November",
    "December",
)  # fmt: skip
DAYS = ("Monday", "Tuesday", "Wednesday", "Thursday", "Friday", "Saturday", "Sunday")
COLOURS = ("BLACK", "BLUE", "CYAN", "GREEN", "MAGENTA", "RED", "WHITE", "YELLOW")
CONDITION = re.compile(r"\[(<=|>=|<>|<|>|=)(-?[\d.]+)\]")


def formatted(value: Scalar, pattern: str, date1904: bool) -> str | None:
    """A value in a number format; None where the format is not supported."""
    if isinstance(value, bool):
        return "TRUE" if value else "FALSE"
    sections = split_sections(pattern)
    if isinstance(value, str):
        text_section = sections[3] if len(sections) > 3 else sections[0] if "@" in sections[0] else None
        return value if text_section is None else plain_section(text_section, value)
    number = 0.0 if value is None else float(value)  # type: ignore[arg-type]
    if not pattern:
        return ""
    section, number = chosen(sections, number)
    if section is None:
        return "#"
    if section.strip() == "@":  # the text format shows a number as it is joined to text
        return str(text_of(value))
    return number_section(section, number, date1904)


def split_sections(pattern: str) -> list[str]:
    """Sections between semicolons that are not quoted."""
    sections, current, quoted, k = [], "", False, 0
    while k < len(pattern):
        c = pattern[k]
        if c == "\\" and not quoted:
            current += pattern[k : k + 2]
            k += 2
            continue
        if c == '"':
            quoted = not quoted
        if c == ";" and not quoted:
            sections.append(current)
            current = ""
        else:
            current += c
        k += 1
    return [*sections, current]


def chosen(sections: list[str], number: float) -> tuple[str | None, float]:
    """The section for a number, and the number as that section shows it (without its sign where the section has it)."""
    conditions = [CONDITION.search(section) for section in sections[:3]]
    if any(conditions):
        for section, condition in zip(sections, conditions, strict=False):
            if condition is None:
                return section, abs(number) if number < 0 and len(sections) > 1 else number
            limit = float(condition[2])
            holds = {
                "<": number < limit, ">": number > limit, "<=": number <= limit, ">=": number >= limit,
                "=": number == limit, "<>": number != limit,
            }[condition[1]]  # fmt: skip
            if holds:
                return section, number
        return (sections[len(conditions) - 1], number) if len(sections) > len(conditions) else (None, number)
    if len(sections) == 1 or number > 0:
        return sections[0], number
    if number < 0:
        return sections[1], abs(number)
    return (sections[2] if len(sections) > 2 else sections[0]), number


def plain_section(section: str, text: str) -> str:
    """A text section: literals, and @ for the text."""
    result = ""
    for m in PIECE.finditer(section):
        if m["other"] == "@":
            result += text
        else:
            result += literal(m) if m["date"] is None else m[0]
    return result


def literal(m: re.Match[str]) -> str:
    """What a piece that is neither digit nor date adds to the text."""
    if m["quoted"] is not None:
        return m["quoted"]
    if m["escaped"] is not None:
        return m["escaped"]
    if m["space"] is not None:
        return " "
    if m["fill"] is not None or m["bracket"] is not None:
        currency = re.fullmatch(r"\[\$([^-\]]*)(?:-[^\]]*)?\]", m["bracket"] or "")
        return currency[1] if currency else ""
    return m["other"] or ""


def number_section(section: str, number: float, date1904: bool) -> str | None:
    """One section applied to a number."""
    pieces = list(PIECE.finditer(section))
    if any(
        m["date"] or m["ampm"] or (m["bracket"] and re.fullmatch(r"\[[hms]+\]", m["bracket"], re.I)) for m in pieces
    ):
        last = LAST - (1462 if date1904 else 0)
        if not 0 <= number < last + 1 or any(m["other"] and m["other"] in "0#?" for m in pieces):
            raise ErrorResult(VALUE)  # beyond the calendar, or a date with digits to fill in
        return date_section(pieces, number, date1904)
    if any(m["general"] for m in pieces):
        body = general(abs(number))
        sign = "-" if number < 0 else ""
        return sign + "".join(body if m["general"] else literal(m) for m in pieces)
    if any(m["other"] == "/" for m in pieces):
        return fraction_section(section, number)
    return digit_section(pieces, number)


def general(x: float) -> str:
    """A number that is not negative in the General format, which has room for eleven characters."""
    exponent = int(f"{x:.10e}".partition("e")[2]) if x else 0
    places = 10 - max(exponent + 1, 1)
    if exponent >= 11 or (exponent < -4 and float(f"{x:.{places}f}") != x):
        mantissa, _, power = f"{x:.5e}".partition("e")
        return f"{mantissa.rstrip('0').rstrip('.')}E{power[0]}{power[1:].zfill(2)}"
    shown = f"{rounded(x, places, 'half'):.{max(places, 0)}f}"
    return shown.rstrip("0").rstrip(".") if "." in shown else shown


def digit_section(pieces: list[re.Match[str]], number: float) -> str:
    """Digits, decimal point, groups, per cent and exponent."""
    marks = [m["other"] for m in pieces if m["other"] and m["other"] in "0#?.,%"]
    skeleton = "".join(marks)
    if not any(c in "0#?" for c in skeleton):
        return ("-" if number < 0 else "") + "".join(literal(m) for m in pieces)
    percent = skeleton.count("%")
    body = skeleton.replace("%", "")
    last = max(body.rfind(c) for c in "0#?")
    scaling = body[last:].count(",")  # commas behind the last digit divide by a thousand each
    body = body[: last + 1] + body[last + 1 :].replace(",", "")
    whole, _, decimals = body.partition(".")
    grouped = "," in whole.rstrip(",")
    whole, decimals = whole.replace(",", ""), decimals.replace(",", "")
    scaled = number * 100.0**percent / 1000.0**scaling
    exponent = next((m for m in pieces if m["exponent"]), None)
    power = 0
    if exponent is not None and scaled:
        import math

        width = max(len(whole), 1)
        power = math.floor(math.log10(abs(scaled)))
        power = power // width * width if width > 1 else power
        shown = rounded(scaled / 10.0**power, len(decimals), "half")
        if abs(shown) >= 10.0**width:
            power += width
            shown = rounded(scaled / 10.0**power, len(decimals), "half")
        scaled = shown
    scaled = rounded(scaled, len(decimals), "half")
    integer, _, part = fixed(abs(scaled), len(decimals)).partition(".")
    integer = integer.lstrip("0").rjust(whole.count("0"), "0")
    if grouped:
        integer = group(integer)
    kept = len(part)
    while kept and decimals[kept - 1] == "#" and part[kept - 1] == "0":
        kept -= 1
    part = part[:kept]
    sign = "-" if scaled < 0 else ""
    return sign + laid_out(pieces, integer, part, "." in body, power)


def fixed(number: float, places: int) -> str:
    """A number with so many decimals; digits beyond the 15th are shown as zeros, as the application does.

    >>> fixed(1 / 3, 18), fixed(123456789012345678.0, 0)
    ('0.333333333333333000', '123456789012346000')
    """
    from decimal import Decimal

    return f"{Decimal(f'{number:.15g}'):.{places}f}"


def group(digits: str) -> str:
    """Commas between thousands."""
    head = len(digits) % 3
    groups = ([digits[:head]] if head else []) + [digits[k : k + 3] for k in range(head, len(digits), 3)]
    return ",".join(groups)


def laid_out(pieces: list[re.Match[str]], integer: str, part: str, point: bool, power: int) -> str:
    """The digits put where the pattern has its placeholders; literals inside the digits split them from the right."""
    before: list[str] = []
    slots: list[int] = []  # how many digits belong to each placeholder before the point
    for m in pieces:
        if m["other"] == "." or m["exponent"]:
            break
        if m["other"] and m["other"] in "0#?":
            slots.append(len(before))
            before.append("")
        elif m["other"] != "," and m["other"] != "%":
            before.append(literal(m))
        elif m["other"] == "%":
            before.append("%")
    digits = list(integer)
    for slot in reversed(slots[1:]):
        taken = ""
        while digits and digits[-1] == ",":
            taken = digits.pop() + taken
        if digits:
            taken = digits.pop() + taken
        before[slot] = taken
    if slots:
        before[slots[0]] = "".join(digits)
    result, after_point, queue = "".join(before), False, list(part)
    passed = False
    for m in pieces:
        if m["other"] == ".":
            after_point = passed = True
            result += "." if point else ""
        elif m["exponent"]:
            sign = "-" if power < 0 else "+" if m["exponent"][1] == "+" else ""
            result += m["exponent"][0] + sign + str(abs(power)).rjust(m["power"].count("0"), "0")
            passed = True
        elif passed:
            if m["other"] and m["other"] in "0#?":
                result += queue.pop(0) if queue and after_point else ""
            elif m["other"] != ",":
                result += literal(m)
    return result


def fraction_section(section: str, number: float) -> str | None:
    """# ?/? and fixed denominators."""
    from fractions import Fraction

    match = re.fullmatch(r"(#|0)?\s*([#?0]+)/([#?0]+|\d+)", section.strip())
    if match is None:
        return None
    fixed = match[3].isdigit() and int(match[3]) > 0
    whole = int(abs(number)) if match[1] else 0
    rest = abs(number) - whole
    if fixed:
        top, bottom = round(rest * int(match[3])), int(match[3])
    else:
        near = Fraction(rest).limit_denominator(10 ** len(match[3]) - 1)
        top, bottom = near.numerator, near.denominator
    if match[1] and top == bottom:
        whole, top = whole + 1, 0
    sign = "-" if number < 0 else ""
    if match[1]:
        shown = f"{whole} {top}/{bottom}" if whole or not top else f"{top}/{bottom}"
        return sign + (shown if top else f"{whole}" + " " * (len(match[2]) + len(match[3]) + 2))
    return f"{sign}{top}/{bottom}"


def date_section(pieces: list[re.Match[str]], number: float, date1904: bool) -> str:
    """Dates and times."""
    twelve = any(m["ampm"] for m in pieces)
    decimals = max((len(m["fraction"]) - 1 for m in pieces if m["fraction"] and m["date"][0] in "sS"), default=0)
    year, month, day, weekday = day_of(number, date1904, decimals)
    hour, minute, second = clock_of(number, decimals)
    result, last = "", ""
    for k, m in enumerate(pieces):
        kind = (m["date"] or "").lower()
        elapsed = re.fullmatch(r"\[([hms]+)\]", m["bracket"] or "", re.I)
        if elapsed:
            unit = elapsed[1].lower()
            amount = {"h": number * 24, "m": number * 1440, "s": number * 86400}[unit[0]]
            result += str(int(amount + 1e-9)).rjust(len(unit), "0")
            last = unit[0]
        elif m["ampm"]:
            half = m["ampm"].split("/")[hour >= 12]
            result += half
        elif not kind:
            result += literal(m)
        elif kind[0] == "y":
            result += f"{year % 100:02d}" if len(kind) <= 2 else f"{year:04d}"
        elif kind[0] == "d":
            name = DAYS[weekday]
            result += (str(day), f"{day:02d}", name[:3], name)[min(len(kind), 4) - 1]
        elif kind[0] == "h":
            shown = (hour % 12 or 12) if twelve else hour
            result += f"{shown:02d}" if len(kind) > 1 else str(shown)
            last = "h"
        elif kind[0] == "s":
            whole = int(second)
            result += f"{whole:02d}" if len(kind) > 1 else str(whole)
            if m["fraction"]:
                result += f"{second - whole:.{len(m['fraction']) - 1}f}"[1:]
            last = "s"
        else:  # m: minutes beside hours or seconds, else months
            follows = next((p["date"][0].lower() for p in pieces[k + 1 :] if p["date"]), "")
            if len(kind) <= 2 and (last == "h" or follows == "s"):
                result += f"{minute:02d}" if len(kind) > 1 else str(minute)
                last = ""
            else:
                name = MONTHS[month - 1]
                result += (str(month), f"{month:02d}", name[:3], name, name[0])[min(len(kind), 5) - 1]
    return result
