"""A drawing of every shape with the letters of its dimensions, for docs/notation.md."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field
from typing import TypeAlias

from cellsection.geometry import SHAPES, Region

__all__ = ["FIGURES", "shapes_drawing"]

WIDTH, HEIGHT, COLUMNS = 200.0, 204.0, 4  # of a field of the drawing, in its pixels
ROOM = 104.0  # of the shape in its field
STEP = 15.0  # from the shape to its dimension lines
FLAT = 0.001  # of the shape's size: how far its drawn arcs may stray


@dataclass(frozen=True, slots=True)
class Across:
    """A dimension from left to right, below the shape, or above it."""

    letter: str
    start: float
    end: float
    above: bool = False


@dataclass(frozen=True, slots=True)
class Upright:
    """A dimension from bottom to top, left of the shape, or right of it."""

    letter: str
    start: float
    end: float
    right: bool = False


@dataclass(frozen=True, slots=True)
class Pointer:
    """A letter beside the shape with a line to a point of it; dx and dy in pixels, to the right and up."""

    letter: str
    x: float
    y: float
    dx: float = 0.0
    dy: float = 0.0


@dataclass(frozen=True, slots=True)
class Ray:
    """A thin line, as from the centre of an arc."""

    x: float
    y: float
    x2: float
    y2: float


Mark: TypeAlias = Across | Upright | Pointer | Ray


@dataclass(frozen=True, slots=True)
class Figure:
    """A shape of some size, and where its letters go, in its own axes."""

    dims: dict[str, float] = field(default_factory=dict)
    marks: tuple[Mark, ...] = ()
    nodes: tuple[tuple[float, float], ...] = ()

    def region(self, word: str) -> Region:
        """The area that is drawn."""
        return Region.from_points(self.nodes) if self.nodes else SHAPES[word].build(**self.dims)


FIGURES: dict[str, Figure] = {
    "rectangle": Figure({"b": 60, "h": 90}, (Across("b", 0, 60), Upright("h", 0, 90))),
    "triangle": Figure(
        {"b": 90, "h": 70, "a": 30}, (Across("b", 0, 90), Upright("h", 0, 70), Across("a", 0, 30, above=True))
    ),
    "trapezoid": Figure(
        {"b": 100, "b2": 56, "h": 60, "a": 22},
        (Across("b", 0, 100), Upright("h", 0, 60), Across("a", 0, 22, above=True), Across("b2", 22, 78, above=True)),
    ),
    "circle": Figure({"d": 90}, (Across("d", 0, 90),)),
    "half circle": Figure({"d": 100}, (Across("d", 0, 100),)),
    "sector": Figure(
        {"r": 90, "angle": 60}, (Across("r", 0, 90), Pointer("angle", 30, 13), Ray(0, 0, 110, 0))
    ),
    "segment": Figure(
        {"r": 60, "angle": 120},
        (
            Ray(0, 0, -51.9615, 30), Ray(0, 0, 51.9615, 30), Pointer("angle", 0, 16), Pointer("r", 36, 8),
        ),
    ),
    "ellipse": Figure({"b": 100, "h": 60}, (Across("b", 0, 100), Upright("h", 0, 60))),
    "tube": Figure({"d": 90, "t": 9}, (Across("d", 0, 90), Pointer("t", 86, 45, 24, 0))),
    "box": Figure(
        {"b": 70, "h": 90, "tw": 8, "tf": 12, "ro": 14, "ri": 6},
        (
            Across("b", 0, 70), Upright("h", 0, 90), Across("tw", 0, 8, above=True), Upright("tf", 78, 90, right=True),
            Pointer("ro", 66, 4, 26, -4), Pointer("ri", 60, 13.5, -14, 18),
        ),
    ),
    "I": Figure(
        {"h": 100, "b": 60, "tw": 8, "tf": 10, "r": 8, "b2": 84, "tf2": 14},
        (
            Upright("h", 0, 100), Across("b", 12, 72, above=True), Across("b2", 0, 84),
            Upright("tf", 90, 100, right=True), Upright("tf2", 0, 14, right=True), Pointer("tw", 42, 52, 26, 0),
            Pointer("r", 36, 88, -18, -16),
        ),
    ),
    "tee": Figure(
        {"h": 90, "b": 80, "tw": 10, "tf": 12, "r": 8},
        (
            Upright("h", 0, 90), Across("b", 0, 80, above=True), Upright("tf", 78, 90, right=True),
            Across("tw", 35, 45), Pointer("r", 47, 76, 18, -16),
        ),
    ),
    "channel": Figure(
        {"h": 100, "b": 56, "tw": 9, "tf": 12, "r": 9, "r2": 5, "slope": 0.1},
        (
            Upright("h", 0, 100), Across("b", 0, 56), Pointer("tw", 4.5, 50, 26, 0), Pointer("tf", 28, 94, 8, 22),
            Pointer("r", 12, 83, 16, -14), Pointer("r2", 55, 90, 20, -4), Pointer("slope", 38, 13, 10, 22),
        ),
    ),
    "angle": Figure(
        {"h": 96, "b": 66, "t": 10, "r": 9, "r2": 5},
        (
            Upright("h", 0, 96), Across("b", 0, 66), Upright("t", 0, 10, right=True), Pointer("r", 12, 12.5, 16, 18),
            Pointer("r2", 9, 95, 22, 0),
        ),
    ),
    "zed": Figure(
        {"h": 90, "b": 50, "t": 7, "c": 22, "r": 6},
        (
            Upright("h", 0, 90), Across("b", 0, 50, above=True), Across("b", 43, 93), Upright("c", 0, 22, right=True),
            Pointer("t", 46.5, 46, -24, 0), Pointer("r", 52, 9, 10, 22),
        ),
    ),
    "lipped channel": Figure(
        {"h": 96, "b": 60, "c": 22, "t": 7, "r": 6},
        (
            Upright("h", 0, 96), Across("b", 0, 60), Upright("c", 0, 22, right=True), Pointer("t", 3.5, 50, 26, 0),
            Pointer("r", 8.5, 87.5, 16, -16),
        ),
    ),
    "fillet": Figure({"r": 80}, (Across("r", 0, 80), Upright("r", 0, 80))),
    "plate": Figure(
        {"x": 0, "y": 0, "x2": 90, "y2": 54, "t": 12},
        (Pointer("x, y", 0, 0, -10, -18), Pointer("x2, y2", 90, 54, 6, 18), Pointer("t", 45, 27, 16, -24)),
    ),
    "polygon": Figure(
        nodes=((0, 0), (90, 10), (70, 70), (40, 46), (10, 80)),
        marks=(
            Pointer("1", 0, 0, -8, -9), Pointer("2", 90, 10, 10, -4), Pointer("3", 70, 70, 8, 8),
            Pointer("4", 40, 46, 0, 12), Pointer("5", 10, 80, -8, 8),
        ),
    ),
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class Field:
    """Where a figure goes in the drawing: pixels of a point in its axes, the frame around its shape in pixels."""

    scale: float
    left: float
    bottom: float
    frame: tuple[float, float, float, float]

    def x(self, x: float) -> float:
        """Pixels from the left."""
        return self.left + self.scale * x

    def y(self, y: float) -> float:
        """Pixels from the top."""
        return self.bottom - self.scale * y


def shapes_drawing() -> str:
    """docs/shapes.svg."""
    rows = -(-len(FIGURES) // COLUMNS)
    lines = [
        f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {COLUMNS * WIDTH:.0f} {rows * HEIGHT:.0f}"'
        ' font-family="sans-serif" font-size="12">',
        "<!-- Written by python -m cellsection.catalogue.manual -->",
        "<title>The shapes of a parts block and the letters of their dimensions</title>",
        '<rect width="100%" height="100%" fill="#fff"/>',
    ]
    for place, (word, figure) in enumerate(FIGURES.items()):
        lines += drawn(word, figure, WIDTH * (place % COLUMNS), HEIGHT * (place // COLUMNS))
    return "\n".join([*lines, "</svg>"]) + "\n"


def drawn(word: str, figure: Figure, left: float, top: float) -> Iterator[str]:
    """One figure in the field whose corner is there."""
    region = figure.region(word)
    xmin, ymin, xmax, ymax = region.bounds()
    scale = ROOM / max(xmax - xmin, ymax - ymin)
    width, height = scale * (xmax - xmin), scale * (ymax - ymin)
    x0, y1 = left + (WIDTH - width) / 2.0, top + 44.0 + (ROOM + height) / 2.0
    place = Field(scale, x0 - scale * xmin, y1 + scale * ymin, (x0, y1 - height, x0 + width, y1))
    chord = FLAT * max(xmax - xmin, ymax - ymin)
    loops = " ".join(path_of(points, place) for points in drawn_loops(region, chord))
    yield f'<text x="{left + 12:.1f}" y="{top + 20:.1f}" font-weight="bold" fill="#1d2b36">{word}</text>'
    yield f'<path d="{loops}" fill="#cfd8dc" stroke="#1d2b36" fill-rule="evenodd"/>'
    for mark in figure.marks:
        yield from mark_lines(mark, place)


def drawn_loops(region: Region, chord: float) -> Iterator[list[tuple[float, float]]]:
    """The outlines of a region as points."""
    for loop in region.loops:
        yield [point for segment in loop for point in segment.drawn(segment.divisions(chord))]


def path_of(points: Iterable[tuple[float, float]], place: Field) -> str:
    """A closed outline of the drawing."""
    return "M" + " L".join(f"{place.x(x):.1f},{place.y(y):.1f}" for x, y in points) + " Z"


def mark_lines(mark: Mark, place: Field) -> Iterator[str]:
    """The lines and the letter of a dimension."""
    left, top, right, bottom = place.frame
    if isinstance(mark, Ray):
        yield thin(place.x(mark.x), place.y(mark.y), place.x(mark.x2), place.y(mark.y2))
    elif isinstance(mark, Pointer):
        x, y = place.x(mark.x), place.y(mark.y)
        if mark.dx or mark.dy:
            yield thin(x, y, x + 0.72 * mark.dx, y - 0.72 * mark.dy)
        yield letter(mark.letter, x + mark.dx, y - mark.dy + 4.0)
    elif isinstance(mark, Across):
        level = top - STEP if mark.above else bottom + STEP
        ends = place.x(mark.start), place.x(mark.end)
        yield thin(ends[0], level, ends[1], level)
        for x in ends:
            yield thin(x, level - 4.0, x, level + 4.0)
        yield letter(mark.letter, sum(ends) / 2.0, level - 6.0 if mark.above else level + 14.0)
    else:
        level = right + STEP if mark.right else left - STEP
        ends = place.y(mark.start), place.y(mark.end)
        yield thin(level, ends[0], level, ends[1])
        for y in ends:
            yield thin(level - 4.0, y, level + 4.0, y)
        yield letter(mark.letter, level + (12.0 if mark.right else -10.0), sum(ends) / 2.0 + 4.0)


def thin(x: float, y: float, x2: float, y2: float) -> str:
    """A line of a dimension."""
    return f'<line x1="{x:.1f}" y1="{y:.1f}" x2="{x2:.1f}" y2="{y2:.1f}" stroke="#a0522d"/>'


def letter(text: str, x: float, y: float) -> str:
    """A letter of a dimension, in the middle of that point."""
    return f'<text x="{x:.1f}" y="{y:.1f}" text-anchor="middle" font-style="italic" fill="#8a3f1d">{text}</text>'
