"""Reading an .xlsx or .xlsm package (ISO/IEC 29500) into a Book: one function per XML element, named after it.

_rels/.rels ── xl/workbook.xml ── its .rels ─┬─ worksheets/sheet1.xml … ── tables/table1.xml …
    sheets, definedNames, calcPr,            ├─ sharedStrings.xml
    externalReferences                       ├─ metadata.xml, richData/*    see metadata
                                             └─ externalLinks/externalLink1.xml …

Parts are found through their relationships, whatever their names; namespaces may be transitional, strict or prefixed.
"""

from __future__ import annotations

from cellsection.errors import WorkbookError
from cellsection.workbook.addresses import read_ref
from cellsection.workbook.book import Book, Formula, Sheet, Table
from cellsection.workbook.markup import Element
from cellsection.workbook.metadata import number, read_metadata
from cellsection.workbook.package import Package, Relationship
from cellsection.workbook.sharedstrings import read_sst, unescaped
from cellsection.workbook.worksheet import read_v, read_worksheet

__all__ = ["read_xlsx", "sheet_parts", "workbook_part"]

AGAIN = "Save the workbook again"


def read_xlsx(package: Package) -> Book:
    """The whole book, every sheet's cells included."""
    book = Book(str(package.path), "xlsx")
    main = workbook_part(package)
    root, relations = package.tree(main), package.relationships(main)
    parts = {each.kind: each.target for each in relations.values() if not each.external}
    shared = parts.get("sharedStrings", "")
    strings = read_sst(package, shared) if shared in package else []
    metadata = read_metadata(package, parts)
    read_workbook_pr(root, book)
    read_calc_pr(root, book)
    read_external_references(root, relations, package, book)
    cells = 0
    for entry, relation in sheet_parts(package, root, relations):
        sheet = Sheet(entry.get("name"), part=relation.target, hidden=entry.get("state", "visible") != "visible")
        book.sheets.append(sheet)
        if relation.kind == "xlMacrosheet":
            book.notes.append(f"sheet {sheet.name} is a macro sheet, which is not supported")
        if relation.kind != "worksheet":
            continue  # a chart sheet has a place among the sheets, and no cells
        read_worksheet(package, sheet, strings, metadata, book.date1904, book.notes)
        cells += len(sheet.values) + len(sheet.formulas)
        if cells > package.limits.cells:
            raise package.refused(f"it holds more than {package.limits.cells:,} cells")
        for related in package.relationships(sheet.part).values():
            if related.kind == "table" and related.target in package:
                read_table(package.tree(related.target), sheet.name, book)
    read_defined_names(root, book)
    return book


def workbook_part(package: Package) -> str:
    """Where the workbook part is: found through the relationships, as the standard asks."""
    target = next((each.target for each in package.relationships("").values() if each.kind == "officeDocument"), "")
    if target.endswith(".bin") or (not target and "xl/workbook.bin" in package):
        raise WorkbookError(f"{package.name} is in the binary .xlsb format", remedy="Save it as .xlsx")
    if not target:
        raise WorkbookError(
            f"{package.name} is a zip file but not a workbook",
            remedy="Save it from the spreadsheet application as .xlsx",
        )
    return target


def sheet_parts(
    package: Package, root: Element, relations: dict[str, Relationship]
) -> list[tuple[Element, Relationship]]:
    """Each <sheet> of the workbook part with the part that holds it."""
    if root.name != "workbook":
        raise WorkbookError(f"{package.name} is no workbook but a {root.name}", remedy="Name a saved workbook")
    found: list[tuple[Element, Relationship]] = []
    seen: set[str] = set()
    for entry in root.along("sheets", "sheet"):
        name = entry.get("name")
        relation = relations.get(relation_id(entry))
        if relation is None or relation.external or not relation.target:
            raise WorkbookError(f"{package.name} does not say where its sheet {name} is", remedy=AGAIN)
        if name.casefold() in seen:
            raise WorkbookError(f"{package.name} has two sheets named {name}", remedy="Rename one and save it again")
        seen.add(name.casefold())
        found.append((entry, relation))
    return found


def relation_id(element: Element) -> str:
    """The relationship that an element names in its r:id, whatever the prefix."""
    return next((value for key, value in element.attributes.items() if key.endswith(" id")), "")


def read_workbook_pr(root: Element, book: Book) -> None:
    """The date system."""
    for element in root.along("workbookPr"):
        book.date1904 = element.flag("date1904")


def read_calc_pr(root: Element, book: Book) -> None:
    """How the book wants to be calculated."""
    for element in root.along("calcPr"):
        if element.flag("iterate"):
            book.iterated(element.get("iterateCount"), element.get("iterateDelta"))
        if element.get("fullPrecision") in ("0", "false"):
            book.notes.append("the book asks for calculation with the precision as displayed, which is not supported")
        if element.get("calcMode") == "manual":
            book.notes.append("the book is calculated by hand only, so that its saved values may be out of date")


def read_defined_names(root: Element, book: Book) -> None:
    """Defined names, global ("") and of one sheet; print titles and other settings kept among them are no names."""
    for element in root.along("definedNames", "definedName"):
        name, scope = element.get("name"), element.get("localSheetId")
        if name.startswith("_xlnm.") and name != "_xlnm.Print_Area":
            continue
        sheet = ""
        if scope:
            if not 0 <= number(scope) < len(book.sheets):
                book.notes.append(f"the name {name} belongs to a sheet that is not in the book")
                continue
            sheet = book.sheets[number(scope)].name
        book.names[sheet.upper(), name.upper()] = Formula(unescaped(element.text), 1, 1)


def read_table(root: Element, sheet: str, book: Book) -> None:
    """A table for structured references."""
    columns = tuple(unescaped(column.get("name")) for column in root.along("tableColumns", "tableColumn"))
    name = root.get("displayName") or root.get("name")
    area = read_ref(root.get("ref"))
    if area is None or len(columns) != area[3] - area[1] + 1:
        book.notes.append(f"the table {name} on sheet {sheet} is left out: its area does not fit its columns")
        return
    header, totals = root.get("headerRowCount", "1") != "0", root.get("totalsRowCount", "0") != "0"
    book.tables[name.upper()] = Table(name, sheet, area, columns, header, totals)


def read_external_references(root: Element, relations: dict[str, Relationship], package: Package, book: Book) -> None:
    """Other books that formulas refer to as [1], [2] ...: their file names and saved values."""
    for place, entry in enumerate(root.along("externalReferences", "externalReference"), start=1):
        relation = relations.get(relation_id(entry))
        if relation is None or relation.target not in package:
            continue
        links = package.relationships(relation.target).values()
        file = next((link.target for link in links if "externalLinkPath" in link.kind), "")
        link = package.tree(relation.target)
        sheets = [Sheet(each.get("val")) for each in link.along("externalBook", "sheetNames", "sheetName")]
        for data in link.along("externalBook", "sheetDataSet", "sheetData"):
            if 0 <= number(data.get("sheetId")) < len(sheets):
                read_external_cells(data, sheets[number(data.get("sheetId"))])
        book.externals[str(place)] = (file, sheets)
        for named in link.along("externalBook", "definedNames", "definedName"):
            sheet, mark, cells = named.get("refersTo").removeprefix("=").rpartition("!")
            if mark and "[" not in sheet:  # a name for cells of that book; its formulas are not ours to compute
                text = f"'[{place}]{sheet.removeprefix(chr(39)).removesuffix(chr(39))}'!{cells}"
                book.names[f"[{place}]", named.get("name").upper()] = Formula(text, 1, 1)


def read_external_cells(data: Element, sheet: Sheet) -> None:
    """The saved values of one sheet of another book."""
    for cell in data.along("row", "cell"):
        place = read_ref(cell.get("r"))
        for v in cell.along("v"):
            value = read_v(v.text, cell.get("t", "n"), date1904=False)
            if place is not None and value is not None:
                sheet.values[place[:2]] = value
                sheet.bottom, sheet.right = max(sheet.bottom, place[0]), max(sheet.right, place[1])
