"""One root, three kinds: bad input, a formula that cannot be read, a workbook that cannot be read.

A message has three parts: the fault, the place, the remedy. The layer that finds the fault knows the row; the
catalogue adds the function and the argument; the host adds the cell.
"""

from __future__ import annotations

__all__ = ["CellsectionError", "FormulaError", "InputError", "WorkbookError"]


class CellsectionError(Exception):
    """Root of everything this package raises on purpose."""


class InputError(CellsectionError, ValueError):
    """Input that cannot be used, in one line: fault, place and remedy.

    fault : what is wrong, with the value met
    remedy : what the engineer does about it, an imperative sentence without its full stop
    argument : name of the function's argument, added by the catalogue where the finder does not know it
    row : row within the argument's range as the engineer counts it, 1 is the first row (of a parts block: its header)
    column : the header of the column, or what else names it

    >>> str(InputError("thickness 0 is not positive", remedy="Enter the plate thickness", row=3, column="tw"))
    'row 3, column tw: thickness 0 is not positive. Enter the plate thickness.'
    """

    def __init__(
        self, fault: str, *, remedy: str, argument: str = "", row: int | None = None, column: str = ""
    ) -> None:
        super().__init__(fault)
        self.fault, self.remedy, self.argument, self.row, self.column = fault, remedy, argument, row, column

    def __str__(self) -> str:
        place = [self.argument] if self.argument else []
        if self.row is not None:
            place.append(f"row {self.row}")
        if self.column:
            place.append(f"column {self.column}")
        where = ", ".join(place)
        return f"{where + ': ' if where else ''}{self.fault}. {self.remedy}."


class FormulaError(CellsectionError):
    """A formula text that is not in the language, or uses a construct that is not supported.

    construct : short name of what was met, as a report lists it ("function FOO", "external link", ...)
    """

    def __init__(self, fault: str, *, construct: str = "") -> None:
        super().__init__(fault)
        self.fault, self.construct = fault, construct or fault


class WorkbookError(CellsectionError):
    """A file that cannot be read or written: fault and remedy.

    >>> str(WorkbookError("book.xls is in the old binary format", remedy="Save it as .xlsx"))
    'book.xls is in the old binary format. Save it as .xlsx.'
    """

    def __init__(self, fault: str, *, remedy: str) -> None:
        super().__init__(fault)
        self.fault, self.remedy = fault, remedy

    def __str__(self) -> str:
        return f"{self.fault}. {self.remedy}."
