"""One row of a parts block: its cells read, and the part they make.

Everything that cannot be read is an InputError that names the row (the header is row 1), the column and the remedy.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from difflib import get_close_matches
from math import isfinite

from cellsection.errors import InputError
from cellsection.geometry import DATUMS, SHAPES, Region, placed
from cellsection.section.headers import Column, quoted
from cellsection.section.part import Part

__all__ = ["PartRow", "RowReader", "is_blank", "is_number", "number_fault", "shape_word"]

SHAPE_WORDS = {word.casefold(): word for word in (*SHAPES, "polygon", "node")}
YES, NO = ("yes", "true"), ("no", "false")
LARGEST = 1e50  # beyond it, products of lengths leave the range of floating point numbers


@dataclass(frozen=True, slots=True)
class PartRow:
    """One part as it is written in a block, lengths in the block's unit.

    dims : its dimensions by trade letter; a plate's end points are among them
    nodes : corners of a polygon, relative to its x, y
    columns : the headers as typed, by column name, for messages
    """

    row: int | None
    shape: str
    label: str = ""
    dims: dict[str, float] = field(default_factory=dict)
    x: float = 0.0
    y: float = 0.0
    turn: float = 0.0
    sign: int = 1
    n: float = 1.0
    datum: str = ""
    mirrored: bool = False
    strength: float | None = None
    stage: float | None = None
    no_tension: bool = False
    nodes: tuple[tuple[float, float], ...] = ()
    columns: dict[str, str] = field(default_factory=dict)

    def part(self) -> Part:
        """The part, placed in the section's axes. Raises InputError with row and column for impossible dimensions."""
        try:
            region = self.region()
        except InputError as problem:
            column = self.columns.get(problem.column, problem.column)
            raise InputError(problem.fault, remedy=problem.remedy, row=self.row, column=column) from None
        return Part(
            self.label, self.shape, region, self.sign, self.n, self.row, self.strength, self.stage, self.no_tension
        )

    def region(self) -> Region:
        """The area, placed in the section's axes."""
        if self.shape == "polygon":
            own = Region.from_points(self.nodes)
            return (own.mirrored() if self.mirrored else own).turned(self.turn).moved(self.x, self.y)
        own = SHAPES[self.shape].build(**self.dims)
        if self.shape == "plate":
            return own
        return placed(own, self.x, self.y, self.turn, self.datum or "centroid", self.mirrored)


def is_blank(cell: object) -> bool:
    """A blank cell, or one that holds an empty text (as LibreOffice hands blanks over)."""
    return cell is None or (isinstance(cell, str) and not cell.strip())


def is_number(cell: object) -> bool:
    """A number, not a logical."""
    return isinstance(cell, (int, float)) and not isinstance(cell, bool)


def number_fault(cell: object) -> str:
    """Why a cell is no number to compute with, "" where it is one.

    >>> number_fault("12,5"), number_fault(12.5)
    ('"12,5" is text', '')
    """
    if isinstance(cell, str):
        return f"{quoted(cell)} is text" if cell.strip() else "a blank cell stands where a number should"
    if isinstance(cell, bool):
        return f"{quoted(cell)} is a logical, not a number"
    if cell is None or not isinstance(cell, (int, float)):
        return f"{quoted(cell)} is not a number" if cell is not None else "a blank cell stands where a number should"
    if isinstance(cell, float) and not isfinite(cell):
        return f"{cell} is not a finite number"
    return "the number is too large to compute with" if abs(cell) > LARGEST else ""


def shape_word(text: str) -> str:
    """A shape by its trade word in any case. Raises InputError that lists the nearest words."""
    word = SHAPE_WORDS.get(" ".join(text.casefold().split()))
    if word is None:
        near = get_close_matches(text.casefold(), SHAPE_WORDS, 3, 0.6)
        choice = [SHAPE_WORDS[each] for each in near] or [each for each in SHAPE_WORDS.values() if each != "node"]
        remedy = f"{'Use the word that is meant:' if near else 'Choose from'} {', '.join(choice)}"
        raise InputError(f"{quoted(text, 20)} is not a shape", remedy=remedy, column="shape")
    return word


@dataclass(frozen=True, slots=True)
class RowReader:
    """Reads the cells of one row that are not blank."""

    row: int
    cells: dict[str, tuple[Column, object]]
    headers: dict[str, str]

    def fault(self, column: str, fault: str, remedy: str) -> InputError:
        """An error at a column of this row."""
        return InputError(fault, remedy=remedy, row=self.row, column=self.headers.get(column, column))

    def shape(self) -> str:
        """The shape word of the row."""
        if "shape" not in self.cells:
            raise self.fault("shape", "the row has entries but no shape", "Name its shape, or clear the row")
        cell = self.cells["shape"][1]
        if not isinstance(cell, str):
            raise self.fault("shape", f"{quoted(cell)} is not a shape", "Enter a shape by its word, such as rectangle")
        try:
            return shape_word(cell)
        except InputError as problem:
            raise self.fault("shape", problem.fault, problem.remedy) from None

    def number(self, name: str, default: float | None = None) -> float:
        """A number in its column, converted to the block's unit; `default` where the cell is blank."""
        if name not in self.cells:
            if default is None:
                raise self.fault(name, f"{name} is missing", self.entry(name))
            return default
        column, cell = self.cells[name]
        fault = number_fault(cell)
        if fault:
            raise self.fault(name, fault, "Retype as a number" if isinstance(cell, str) else "Enter a number")
        assert isinstance(cell, (int, float))
        return float(cell) * column.factor

    def entry(self, name: str) -> str:
        """What is to be done about a missing value: where its column is missing too, that comes first."""
        return f"Enter {name}" if name in self.headers else f"Add a column {name}"

    def word(self, name: str) -> str:
        """A text in its column, "" where it is blank."""
        cell = self.cells[name][1] if name in self.cells else ""
        if not isinstance(cell, str):
            raise self.fault(name, f"{quoted(cell)} is not text", f"Enter {name} in words")
        return " ".join(cell.lower().split())

    def yes(self, name: str) -> bool:
        """A yes or no: 1, TRUE or yes; 0, FALSE, no or blank."""
        cell = self.cells[name][1] if name in self.cells else 0
        text = cell.strip().lower() if isinstance(cell, str) else cell
        if text in YES or text == 1:
            return True
        if text in NO or text == 0:
            return False
        raise self.fault(name, f"{quoted(cell)} is neither yes nor no", "Enter yes, or leave the cell blank")

    def node(self) -> tuple[float, float]:
        """A corner of a polygon."""
        for name in self.cells:
            if name not in ("shape", "part", "x", "y"):
                raise self.fault(name, f"a node has no {name}", "Clear the cell; a node has x and y")
        return (self.number("x"), self.number("y"))

    def part_row(self, word: str) -> PartRow:
        """The row of a part."""
        label = self.cells["part"][1] if "part" in self.cells else ""
        name = label.strip() if isinstance(label, str) else quoted(label)
        sign, n = self.number("sign", 1.0), self.number("n", 1.0)
        if sign not in (1.0, -1.0):
            raise self.fault("sign", f"sign {sign:g} is neither 1 nor -1", "Enter 1 for solid, -1 for a cut-out")
        if n <= 0:
            raise self.fault("n", f"modular ratio {n:g} is not positive", "Enter E of the part over E of reference")
        stage = self.number("stage") if "stage" in self.cells else None
        if stage is not None and (stage < 1 or stage != int(stage)):
            raise self.fault("stage", f"stage {stage:g} is not a whole number from 1", "Enter 1, 2, 3")
        strength = self.number("strength") if "strength" in self.cells else None
        if strength is not None and strength <= 0:
            raise self.fault("strength", f"strength {strength:g} is not positive", "Enter the yield strength")
        return PartRow(
            self.row, word, name, self.dims(word), *self.place(word), turn=self.number("turn", 0.0),
            sign=int(sign), n=n, datum=self.datum(word), mirrored=self.mirror(word), strength=strength, stage=stage,
            no_tension=self.yes("no tension"), columns=self.headers,
        )  # fmt: skip

    def dims(self, word: str) -> dict[str, float]:
        """The dimensions of the shape; one that it does not use is refused, since it may be a slip."""
        required: tuple[str, ...] = ()
        optional: tuple[str, ...] = ()
        if word != "polygon":
            required, optional = SHAPES[word].required, SHAPES[word].optional
        for name in required:
            if name not in self.cells:
                raise self.fault(name, f"the {word} needs {name}", f"{self.entry(name)}; it takes {' '.join(required)}")
        others = [name for shape in SHAPES.values() for name in (*shape.required, *shape.optional)]
        for name in self.cells:
            if name in others and name not in (*required, *optional, "x", "y"):
                has = " ".join((*required, *optional)) or "node rows below it"
                raise self.fault(name, f"the {word} does not use {name}", f"Clear the cell; it takes {has}")
        return {name: self.number(name) for name in (*required, *optional) if name in self.cells}

    def place(self, word: str) -> tuple[float, float]:
        """Where the datum goes; a plate's place is among its dimensions."""
        return (0.0, 0.0) if word == "plate" else (self.number("x", 0.0), self.number("y", 0.0))

    def datum(self, word: str) -> str:
        """The datum word, "" for the centroid by default."""
        datum = self.word("datum")
        if datum and datum not in DATUMS:
            raise self.fault("datum", f"{quoted(datum)} is not a datum", f"Choose from {', '.join(DATUMS)}")
        if datum and word in ("polygon", "plate"):
            raise self.fault("datum", f"a {word} is placed by its points", "Clear datum in this row")
        if word == "plate" and self.number("turn", 0.0):
            raise self.fault("turn", "a plate takes its direction from its two points", "Clear turn in this row")
        return datum

    def mirror(self, word: str) -> bool:
        """Whether the shape is mirrored left-right in its own axes."""
        mirrored = self.yes("mirrored")
        if mirrored and word == "plate":
            raise self.fault("mirrored", "a plate takes its place from its two points", "Clear mirrored in this row")
        return mirrored
