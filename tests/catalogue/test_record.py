"""A cell function that no host could take is refused when it is declared, with what is wrong with it."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest

from cellsection.catalogue import CATALOGUE, CellFunction, Example, Returns
from cellsection.catalogue.arguments import Argument, blocks, number
from cellsection.catalogue.record import as_cells
from cellsection.errors import InputError


def modulus(b: float, h: float) -> float:
    return b * h**2 / 6


GOOD: dict[str, Any] = {
    "name": "CS_MODULUS",
    "formula": modulus,
    "arguments": (number("b", "width", "L"), number("h", "depth", "L")),
    "returns": Returns("number", "elastic modulus [L³]"),
    "help": "Elastic modulus of a rectangle.",
    "source": "W = b·h²/6 (any text on mechanics of materials, from memory)",
    "example": Example("=CS_MODULUS(6,10)", {}, 100.0, "6·10²/6 = 100"),
}


def renamed(name: str) -> tuple[Argument, ...]:
    return (number("b", "width"), number(name, "depth"))


def formula(*names: str) -> Any:
    made: dict[str, Any] = {}
    exec(f"def made({', '.join(names)}): return 0.0", made)  # a function with just these arguments
    return made["made"]


BAD: dict[str, tuple[dict[str, Any], str]] = {
    "its name is in small letters": ({"name": "cs_modulus"}, "a name is CS_ and capitals"),
    "its name is without the prefix": ({"name": "MODULUS"}, "a name is CS_ and capitals"),
    "its name has a dot": ({"name": "CS.MODULUS"}, "a name is CS_ and capitals"),
    "its arguments are not those of the formula": ({"arguments": renamed("d")}, "differ from the formula's"),
    "its arguments are in another order": ({"arguments": GOOD["arguments"][::-1]}, "differ from the formula's"),
    "an argument is missing": ({"arguments": GOOD["arguments"][:1]}, "differ from the formula's"),
    "an argument is a word of the macro language": (
        {"formula": formula("b", "stop"), "arguments": renamed("stop")},
        "stop is no argument name",
    ),
    "an argument has capitals": ({"formula": formula("b", "H"), "arguments": renamed("H")}, "H is no argument name"),
    "an argument has no help": ({"arguments": (number("b", "width"), number("h", ""))}, "help of h is missing"),
    "the help of an argument is too long": (
        {"arguments": (number("b", "width"), number("h", "d" * 256))},
        "help of h is missing or longer than 255",
    ),
    "an optional argument stands before a required one": (
        {"arguments": (number("b", "width", optional=True), number("h", "depth"))},
        "may be left out stands before one that may not",
    ),
    "a repeated argument is not the last": (
        {"formula": formula("b", "h"), "arguments": (blocks("b", "parts"), blocks("h", "parts"))},
        "only the last argument may repeat",
    ),
    "an optional argument is joined by a repeated one": (
        {"formula": formula("b", "h"), "arguments": (number("b", "width", optional=True), blocks("h", "parts"))},
        "do not go together",
    ),
    "its arguments are too long for the wizard": (
        {"formula": formula("b" * 130, "h" * 130), "arguments": (number("b" * 130, "w"), number("h" * 130, "d"))},
        "function wizard",
    ),
    "its help is missing": ({"help": ""}, "the help is missing"),
    "its help is too long": ({"help": "x" * 256}, "longer than 255"),
    "its help has two lines": ({"help": "Elastic\nmodulus."}, "more than a line"),
    "its source is missing": ({"source": ""}, "no source is given"),
    "its example is no formula": (
        {"example": Example("CS_MODULUS(6,10)", {}, 100.0, "6·10²/6")},
        "the example does not call the function",
    ),
    "its example calls another function": (
        {"example": Example("=CS_TOTALS(A1:B2)", {}, 100.0, "6·10²/6")},
        "the example does not call the function",
    ),
    "its example is not worked by hand": (
        {"example": Example("=CS_MODULUS(6,10)", {}, 100.0, "")},
        "the example has no hand calculation",
    ),
    "what it returns is not said": ({"returns": Returns("number", "")}, "what it returns is not said"),
}


def test_a_good_declaration_is_taken() -> None:
    made = CellFunction(**GOOD)
    assert made.call(6.0, 10.0) == 100.0
    assert made.signature == "CS_MODULUS(b, h)"


@pytest.mark.parametrize(("change", "fault"), BAD.values(), ids=BAD)
def test_a_declaration_is_refused_when(change: dict[str, Any], fault: str) -> None:
    with pytest.raises(ValueError, match=r"^\S+: ") as caught:
        CellFunction(**{**GOOD, **change})
    assert fault in str(caught.value)


def test_the_signature_shows_what_may_be_left_out_and_what_repeats() -> None:
    assert CATALOGUE["CS_TOTALS"].signature == "CS_TOTALS(parts, [which])"
    assert CATALOGUE["CS_JOINED"].signature == "CS_JOINED(parts, ...)"
    assert CATALOGUE["CS_EDITION"].signature == "CS_EDITION()"


@pytest.mark.parametrize("value", [float("nan"), float("inf")])
def test_a_result_that_is_no_finite_number_is_never_handed_out(value: float) -> None:
    for result in (value, ((1.0, value),)):
        with pytest.raises(InputError, match="not a finite number"):
            as_cells(result)


def test_a_record_cannot_be_changed() -> None:
    with pytest.raises(AttributeError):
        CATALOGUE["CS_TOTALS"].help = "other"  # type: ignore[misc]
    with pytest.raises(TypeError):
        CATALOGUE["CS_TOTALS"] = replace(CATALOGUE["CS_TOTALS"], help="Other.")  # type: ignore[index]
