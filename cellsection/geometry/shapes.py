"""The shapes by their trade words: which dimensions each needs, which it may have, and the outline they give."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from cellsection.errors import InputError
from cellsection.geometry import coldformed, figures, profiles
from cellsection.geometry.limits import not_negative, place, positive

if TYPE_CHECKING:
    from collections.abc import Callable

    from cellsection.geometry.region import Region

__all__ = ["SHAPES", "Shape"]

# Dimensions that may have any sign: places, not sizes.
PLACES = frozenset({"a", "x", "y", "x2", "y2"})
# Required sizes, and these where they are given, must be positive; radii, lips and slopes may be 0 for none.
POSITIVE_WHERE_GIVEN = frozenset({"b2", "tf2"})


@dataclass(frozen=True, slots=True)
class Shape:
    """A shape: its word, the letters of its dimensions in their order, and how its outline is made.

    >>> SHAPES["I"].required, SHAPES["I"].optional
    (('h', 'b', 'tw', 'tf'), ('r', 'b2', 'tf2'))
    >>> SHAPES["circle"].build(d=0)
    Traceback (most recent call last):
    cellsection.errors.InputError: column d: d = 0 is not positive. Enter a length greater than 0.
    """

    word: str
    required: tuple[str, ...]
    optional: tuple[str, ...]
    help: str
    outline: Callable[..., Region]

    def build(self, **dims: float) -> Region:
        """The region of the shape in its own axes.

        Raises InputError naming the dimension: missing, not one of this shape, not a size, or impossible beside the
        others.
        """
        for letter in self.required:
            if letter not in dims:
                raise InputError(
                    f"the {self.word} needs {letter}",
                    remedy=f"Enter {letter}; a {self.word} has {' '.join(self.required)}",
                    column=letter,
                )
        for letter, value in dims.items():
            if letter not in self.required and letter not in self.optional:
                raise InputError(
                    f"the {self.word} has no dimension {letter}",
                    remedy=f"Clear it; a {self.word} has {' '.join((*self.required, *self.optional))}",
                    column=letter,
                )
            if letter in PLACES:
                place(letter, value)
            elif letter in self.required or letter in POSITIVE_WHERE_GIVEN:
                positive(letter, value)
            else:
                not_negative(letter, value)
        return self.outline(**{letter: float(value) for letter, value in dims.items()})


def _shape(word: str, required: str, optional: str, outline: Callable[..., Region], text: str) -> Shape:
    return Shape(word, tuple(required.split()), tuple(optional.split()), text, outline)


SHAPES: dict[str, Shape] = {
    shape.word: shape
    for shape in (
        _shape("rectangle", "b h", "", figures.rectangle, "b wide, h high"),
        _shape("triangle", "b h", "a", figures.triangle, "base b, height h; apex over a from the left end of the base"),
        _shape(
            "trapezoid",
            "b b2 h",
            "a",
            figures.trapezoid,
            "bottom b, top b2, height h; top left over a from bottom left",
        ),
        _shape("circle", "d", "", figures.circle, "diameter d"),
        _shape("half circle", "d", "", figures.half_circle, "diameter d, flat side at the bottom"),
        _shape("sector", "r angle", "", figures.sector, "radius r, from the x axis anticlockwise through angle"),
        _shape("segment", "r angle", "", figures.segment, "radius r, whole angle at the centre, chord at the bottom"),
        _shape("ellipse", "b h", "", figures.ellipse, "b wide, h high"),
        _shape("tube", "d t", "", profiles.tube, "outside diameter d, wall t"),
        _shape(
            "box", "b h tw tf", "ro ri", profiles.box, "b by h over all, walls tw and tf; radii ro outside, ri inside"
        ),
        _shape(
            "I",
            "h b tw tf",
            "r b2 tf2",
            profiles.i_section,
            "depth h, flanges b by tf, web tw, root radius r; bottom b2, tf2",
        ),
        _shape("tee", "h b tw tf", "r", profiles.tee, "depth h, flange b by tf on top, stem tw, root radius r"),
        _shape(
            "channel",
            "h b tw tf",
            "r r2 slope",
            profiles.channel,
            "depth h, web tw left, flanges b by tf, root radius r, toe radius r2, slope of the inside faces",
        ),
        _shape(
            "angle",
            "h b t",
            "r r2",
            profiles.angle,
            "upright leg h left, lying leg b, thickness t, radii r root, r2 toe",
        ),
        _shape(
            "zed", "h b t", "c r", coldformed.zed, "depth h, flanges b over all, thickness t, lips c, inside radius r"
        ),
        _shape(
            "lipped channel",
            "h b c t",
            "r",
            coldformed.lipped_channel,
            "depth h, web left, flanges b, lips c over all, thickness t, inside radius r",
        ),
        _shape(
            "fillet", "r", "", figures.fillet, "corner piece between two sides at a right angle and their rounding r"
        ),
        _shape("plate", "x y x2 y2 t", "", figures.plate, "strip t thick about the line from x, y to x2, y2"),
    )
}
