"""Short ways to write a built-up section in the tests."""

from __future__ import annotations

from typing import TYPE_CHECKING

from hypothesis import strategies as st

from cellsection.geometry import SHAPES, placed
from cellsection.section import Part
from tests.geometry.random_shapes import regions

if TYPE_CHECKING:
    from collections.abc import Sequence

__all__ = ["girder", "part", "sections", "turned"]


def part(
    word: str,
    x: float = 0.0,
    y: float = 0.0,
    turn: float = 0.0,
    datum: str = "centroid",
    sign: int = 1,
    n: float = 1.0,
    label: str = "",
    row: int | None = None,
    **dims: float,
) -> Part:
    """A part of one of the shapes, placed."""
    region = placed(SHAPES[word].build(**dims), x, y, turn, datum)
    return Part(label or word, word, region, sign=sign, n=n, row=row)


def girder() -> list[Part]:
    """Two flanges 200 x 20 and a web 10 x 460, the bottom at y = 0."""
    return [
        part("rectangle", 0, 0, datum="bottom", b=200, h=20, label="bottom flange"),
        part("rectangle", 0, 20, datum="bottom", b=10, h=460, label="web"),
        part("rectangle", 0, 500, datum="top", b=200, h=20, label="top flange"),
    ]


def turned(parts: Sequence[Part], degrees: float, x: float = 0.0, y: float = 0.0) -> list[Part]:
    """The whole section turned about a point."""
    return [
        Part(each.label, each.shape, each.region.turned(degrees, (x, y)), each.sign, each.n, each.row) for each in parts
    ]


# One to five parts of any shape anywhere near the origin, with any modular ratio.
sections = st.lists(
    st.builds(Part, st.just(""), st.just(""), regions(), n=st.sampled_from([1.0, 7.0, 0.125])), min_size=1, max_size=5
)
