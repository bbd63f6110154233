"""What the parts table lets a person type: lists, limits, and what it says to a wrong entry."""

from __future__ import annotations

from typing import TYPE_CHECKING, Literal, TypeAlias

from openpyxl.worksheet.datavalidation import DataValidation

from cellsection.templates.content import COLUMNS

if TYPE_CHECKING:
    from openpyxl.worksheet.worksheet import Worksheet

__all__ = ["DATUMS", "SHAPES", "guard_inputs"]

# The shapes whose dimensions have a column in the table, and those dimensions.
SHAPES = {
    "rectangle": "b h",
    "I": "h b tw tf, r",
    "tee": "h b tw tf, r",
    "channel": "h b tw tf, r",
    "angle": "h b t, r",
    "box": "b h tw tf",
    "tube": "d t",
    "circle": "d",
    "half circle": "d",
    "triangle": "b h",
    "fillet": "r",
}
Limits: TypeAlias = tuple[Literal["between", "greaterThan"], str, str | None]
DATUMS = (
    "centroid",
    "centre",
    "bottom",
    "top",
    "left",
    "right",
    "bottom left",
    "bottom right",
    "top left",
    "top right",
)
MEANING = {
    "b": "width across",
    "h": "height over all",
    "tw": "thickness of the web",
    "tf": "thickness of the flange",
    "t": "thickness of the wall",
    "r": "radius of the root fillet",
    "d": "diameter outside",
    "x": "x of the part's datum",
    "y": "y of the part's datum",
}


def guard_inputs(sheet: Worksheet, first: int, last: int, gap: str) -> None:
    """Set the limits of every input column, from the first to the last row of the table, and of the gap."""
    _list(sheet, f"C{first}:C{last}", tuple(SHAPES), "shape", _shapes())
    _list(sheet, f"N{first}:N{last}", ("1", "-1"), "sign", "1 for solid, -1 for a cut-out. Blank is 1.")
    datum = "The point of the part that x and y locate; the part is turned about it. Blank is centroid."
    _list(sheet, f"P{first}:P{last}", DATUMS, "datum", datum)
    for column, header in COLUMNS.items():
        word, _, unit = header.partition(" ")
        area = f"{column}{first}:{column}{last}"
        if word in ("x", "y"):
            _number(
                sheet,
                area,
                ("between", "-1E+6", "1E+6"),
                header,
                f"{MEANING[word]}, {unit[1:-1]}. Blank is 0.",
                "a number",
            )
        elif unit:
            help_text = f"{MEANING[word]}, {unit[1:-1]}. Leave blank where the shape has none."
            _number(sheet, area, ("greaterThan", "0", None), header, help_text, "a number above 0")
    turn = "degrees anticlockwise about the datum. Blank is 0."
    _number(sheet, f"M{first}:M{last}", ("between", "-360", "360"), "turn", turn, "a number from -360 to 360")
    ratio = "modular ratio, E of the part over E of the reference material. Blank is 1."
    _number(sheet, f"O{first}:O{last}", ("greaterThan", "0", None), "n", ratio, "a number above 0")
    bridged = "distance that lacing, welds or the material beside a hole bridge. Blank: pieces must touch."
    _number(sheet, gap, ("between", "0", "1E+6"), "gap", bridged, "0 or a number above")


def _shapes() -> str:
    return "\n".join(f"{word}: {dimensions}" for word, dimensions in SHAPES.items())


def _list(sheet: Worksheet, area: str, words: tuple[str, ...], title: str, prompt: str) -> None:
    rule = DataValidation("list", formula1=f'"{",".join(words)}"', allow_blank=True)
    _say(sheet, rule, area, title, prompt, f"Choose one of: {', '.join(words)}.")


def _number(sheet: Worksheet, area: str, limits: Limits, title: str, prompt: str, wanted: str) -> None:
    operator, low, high = limits
    rule = DataValidation("decimal", operator=operator, formula1=low, formula2=high, allow_blank=True)
    _say(sheet, rule, area, title, prompt, f"Type {wanted}, without its unit.")


def _say(sheet: Worksheet, rule: DataValidation, area: str, title: str, prompt: str, error: str) -> None:
    rule.promptTitle, rule.prompt, rule.showInputMessage = title, prompt, True
    rule.errorTitle, rule.error, rule.showErrorMessage = f"{title}: not possible", error, True
    rule.add(area)
    sheet.add_data_validation(rule)
