"""The formulas of one sheet of an .xlsx package as they are met; shared ones are tied to their master."""

from __future__ import annotations

from cellsection.errors import WorkbookError
from cellsection.workbook.addresses import address, read_ref
from cellsection.workbook.book import Bounds, Formula, Position, Sheet
from cellsection.workbook.metadata import Metadata
from cellsection.workbook.package import Package
from cellsection.workbook.relative import Columns
from cellsection.workbook.sharedstrings import unescaped

__all__ = ["SheetFormulas"]


class SheetFormulas:
    """Puts each formula into sheet.formulas."""

    def __init__(self, package: Package, sheet: Sheet, metadata: Metadata) -> None:
        self.package, self.sheet, self.metadata, self.limits = package, sheet, metadata, package.limits
        self.shared: dict[str, Formula] = {}
        self.orphans: list[tuple[Position, str]] = []
        self.columns = Columns("excel")
        self.array_cells = 0

    def read_f(self, text: str, f: dict[str, str], position: Position, cm: str | None) -> None:
        """A formula: ordinary, shared (children map to their master's object), of an array, of a data table.

        text, f : what stands in the element, and its attributes
        cm : the cell's number of metadata, which may say that the formula spills
        """
        kind = f.get("t", "normal")
        if "_x" in text:
            text = unescaped(text)
        if kind == "shared":
            index = f.get("si", "")
            master = self.shared.get(index)
            if text and (master is None or "ref" in f):
                formula = self.shared[index] = Formula(text, *position)
            elif text:  # a child that carries its own text
                formula = Formula(text, *position)
            elif master is not None:
                formula = master
            else:
                self.orphans.append((position, index))
                return
        elif kind == "array":
            dynamic = cm is not None and cm in self.metadata.dynamic
            formula = Formula(text, *position, kind="array", area=self.area(f, position), dynamic=dynamic)
        elif kind == "dataTable":
            two, across = f.get("dt2D") in ("1", "true"), f.get("dtr") in ("1", "true")
            text = table_text(f.get("r1", ""), f.get("r2", ""), two, across)
            formula = Formula(text, *position, kind="data table", area=self.area(f, position))
        elif text:
            if cm is not None and cm in self.metadata.dynamic:
                formula = Formula(text, *position, dynamic=True)
            else:
                formula = self.columns.formula(text, *position)
        else:
            return  # an empty <f> in the area of another formula
        self.sheet.formulas[position] = formula

    def area(self, f: dict[str, str], position: Position) -> Bounds:
        """The area that a formula fills, within the caps; its own cell where it says nothing."""
        ref = f.get("ref") or address(position)
        area = read_ref(ref)
        if area is None or area[:2] != position:
            raise WorkbookError(
                f'{self.package.name}: the formula in {self.sheet.name}!{address(position)} fills "{ref[:24]}", '
                "which is no area that begins there",
                remedy="Save the workbook again",
            )
        self.array_cells += (area[2] - area[0] + 1) * (area[3] - area[1] + 1)
        if self.array_cells > self.limits.array_cells:
            raise self.package.refused(
                f"the array formulas of sheet {self.sheet.name} fill more than {self.limits.array_cells:,} cells"
            )
        return area

    def settle_orphans(self, notes: list[str]) -> None:
        """Children that came before their master find it; those without one are unsupported."""
        missing = 0
        for position, index in self.orphans:
            master = self.shared.get(index)
            missing += master is None
            self.sheet.formulas[position] = master or Formula("", *position, kind="missing")
        if missing:
            cells = "1 cell shares" if missing == 1 else f"{missing:,} cells share"
            notes.append(f"sheet {self.sheet.name}: {cells} a formula that is not in the file")


def table_text(first: str, second: str, two: bool, across: bool) -> str:
    """A data table as its application shows it: TABLE(row input cell, column input cell).

    >>> table_text("B1", "B2", True, True), table_text("B1", "", False, True), table_text("B1", "", False, False)
    ('TABLE(B1,B2)', 'TABLE(B1,)', 'TABLE(,B1)')
    """
    if two:
        return f"TABLE({first},{second})"
    return f"TABLE({first},)" if across else f"TABLE(,{first})"
