"""Reading an .xlsx or .xlsm package (ISO/IEC 29500) into a Book: one function per XML element, named after it."""

from __future__ import annotations

import io
import re
from collections.abc import Iterator
from datetime import datetime
from math import isfinite

from lxml import etree

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Book, Bounds, Formula, Limits, Sheet, Table, column_number
from cellsection.workbook.package import Package, parsed
from cellsection.workbook.values import ErrorValue, Scalar

__all__ = ["read_xlsx"]

REFERENCE = re.compile(r"\$?([A-Za-z]{1,3})\$?([0-9]{1,7})")
ESCAPED = re.compile(r"_x([0-9A-Fa-f]{4})_")
AGAIN = "Save the workbook again"
LAST_ROW, LAST_COLUMN = 1_048_576, 16_384


def local(tag: object) -> str:
    """An element's name without its namespace: transitional, strict and prefixed files read alike."""
    return tag.rpartition("}")[2] if isinstance(tag, str) else ""


def children(element: etree._Element, *path: str) -> Iterator[etree._Element]:
    """Descendants along a path of local names."""
    for child in element:
        if local(child.tag) == path[0]:
            if len(path) == 1:
                yield child
            else:
                yield from children(child, *path[1:])


def relation_id(element: etree._Element) -> str:
    """The relationship that an element names in its r:id, whatever the prefix."""
    return next((str(value) for key, value in element.attrib.items() if str(key).endswith("}id")), "")


def read_xlsx(package: Package, limits: Limits) -> Book:
    """The whole book, every sheet's cells included."""
    book = Book(str(package.path), "xlsx")
    main = workbook_part(package)
    relations = package.relationships(main)
    root = parsed(package.part(main), package.name, main)
    kinds = {kind: target for kind, target, external in relations.values() if not external}
    shared = kinds.get("sharedStrings", "")
    strings = read_sst(package, shared) if shared in package else []
    dynamic = read_metadata(package, kinds.get("sheetMetadata", ""))
    read_workbook_pr(root, book)
    read_external_references(root, relations, package, book)
    cells = 0
    for entry in children(root, "sheets", "sheet"):
        kind, target, _ = relations.get(relation_id(entry), ("", "", False))
        if not target:
            raise WorkbookError(f"{package.name} does not say where its sheet {entry.get('name')} is", remedy=AGAIN)
        sheet = Sheet(entry.get("name", ""), part=target)
        book.sheets.append(sheet)
        if kind != "worksheet":
            continue
        read_worksheet(package, sheet, strings, dynamic, limits)
        cells += len(sheet.values)
        if cells > limits.cells:
            raise package.refused(f"it holds more than {limits.cells:,} cells")
        for _, table_part, _ in (r for r in package.relationships(target).values() if r[0] == "table"):
            if table_part in package:
                read_table(parsed(package.part(table_part), package.name, table_part), sheet.name, book)
    read_defined_names(root, book)
    return book


def workbook_part(package: Package) -> str:
    """Where the workbook part is: found through the relationships, as the standard asks."""
    for kind, target, _ in package.relationships("").values():
        if kind == "officeDocument":
            if target.endswith(".bin"):
                raise WorkbookError(f"{package.name} is in the binary .xlsb format", remedy="Save it as .xlsx")
            return target
    raise WorkbookError(
        f"{package.name} is a zip file but not a workbook", remedy="Save it from the spreadsheet application as .xlsx"
    )


def read_workbook_pr(root: etree._Element, book: Book) -> None:
    """Date system and iterative calculation."""
    for element in children(root, "workbookPr"):
        book.date1904 = element.get("date1904") in ("1", "true")
    for element in children(root, "calcPr"):
        book.iterate = element.get("iterate") in ("1", "true")
        if book.iterate:
            book.notes.append("the book asks for iterative calculation")
        if element.get("fullPrecision") in ("0", "false"):
            book.notes.append("the book asks for calculation with the precision as displayed, which is not supported")


def read_sst(package: Package, part: str) -> list[str]:
    """The shared strings; rich text runs joined, phonetic readings left out."""
    strings = []
    for _, element in events(package, part, "si"):
        strings.append(rich_text(element))
        element.clear()
    return strings


def rich_text(element: etree._Element) -> str:
    """The text of an <si> or <is>."""
    texts = []
    for child in element:
        name = local(child.tag)
        if name == "t":
            texts.append(child.text or "")
        elif name == "r":
            texts.extend(t.text or "" for t in children(child, "t"))
    return unescaped("".join(texts))


def unescaped(text: str) -> str:
    """_x000D_ and its kind turned into the character they stand for."""
    return ESCAPED.sub(lambda m: chr(int(m[1], 16)), text) if "_x" in text else text


def read_metadata(package: Package, part: str) -> frozenset[int]:
    """The cm numbers that mark a dynamic array formula."""
    if part not in package:
        return frozenset()
    root = parsed(package.part(part), package.name, part)
    types = [element.get("name", "") for element in children(root, "metadataTypes", "metadataType")]
    marked = set()
    for number, block in enumerate(children(root, "cellMetadata", "bk"), start=1):
        for record in children(block, "rc"):
            kind = int(record.get("t", "0"))
            if 0 < kind <= len(types) and types[kind - 1] == "XLDAPR":
                marked.add(number)
    return frozenset(marked)


def events(package: Package, part: str, *names: str) -> Iterator[tuple[str, etree._Element]]:
    """The elements of a large part as they end; entities are left alone, nothing is fetched."""
    tags = [f"{{*}}{name}" for name in names] + list(names)
    source = io.BytesIO(package.part(part))
    try:
        yield from etree.iterparse(
            source, tag=tags, resolve_entities=False, no_network=True, load_dtd=False, huge_tree=False
        )
    except (etree.XMLSyntaxError, ValueError) as problem:
        raise WorkbookError(
            f"{package.name}: its part {part} is not well-formed XML ({problem})", remedy="Save the workbook again"
        ) from problem


def read_worksheet(package: Package, sheet: Sheet, strings: list[str], dynamic: frozenset[int], limits: Limits) -> None:
    """Rows and cells of a sheet."""
    shared: dict[str, Formula] = {}
    orphans: list[tuple[tuple[int, int], str]] = []
    row_number = 0
    for _, row in events(package, sheet.part, "row"):
        stated = row.get("r")
        row_number = int(stated) if stated and stated.isdigit() else row_number + 1
        column = 0
        for c in row:
            if local(c.tag) != "c":
                continue
            row_number, column = read_position(c, row_number, column, sheet.name, package.name)
            read_c(c, sheet, row_number, column, strings, dynamic, shared, orphans)
            if column > sheet.right:
                sheet.right = column
        if row_number > sheet.bottom:
            sheet.bottom = row_number
        row.clear()
        if len(sheet.values) > limits.cells:
            raise package.refused(f"sheet {sheet.name} holds more than {limits.cells:,} cells")
    for position, index in orphans:
        master = shared.get(index)
        sheet.formulas[position] = master or Formula("", *position, kind="missing")


def read_position(c: etree._Element, row: int, column: int, sheet: str, book: str) -> tuple[int, int]:
    """Row and column of a cell: as stated, or the next one where the cell does not say."""
    stated = c.get("r")
    if stated is None:
        return row, column + 1
    match = REFERENCE.fullmatch(stated)
    place = (int(match[2]), column_number(match[1])) if match else (0, 0)
    if not (0 < place[0] <= LAST_ROW and 0 < place[1] <= LAST_COLUMN):
        raise WorkbookError(
            f'{book}: sheet {sheet} has a cell at "{stated}", which is no cell address',
            remedy="Save the workbook again",
        )
    return place


def read_c(
    c: etree._Element,
    sheet: Sheet,
    row: int,
    column: int,
    strings: list[str],
    dynamic: frozenset[int],
    shared: dict[str, Formula],
    orphans: list[tuple[tuple[int, int], str]],
) -> None:
    """One cell: its saved value and its formula."""
    position = (row, column)
    text: str | None = None
    for child in c:
        name = local(child.tag)
        if name == "v":  # an empty one is how empty text is saved
            text = child.text or ("" if c.get("t") == "str" else None)
        elif name == "f":
            read_f(
                child, sheet, position, c.get("cm") is not None and int(c.get("cm", "0")) in dynamic, shared, orphans
            )
        elif name == "is":
            sheet.values[position] = rich_text(child)
    if text is not None:
        value = read_v(text, c.get("t", "n"), strings)
        if value is not None:
            sheet.values[position] = value


def read_v(text: str, kind: str, strings: list[str]) -> Scalar:
    """A value by the kind its cell states."""
    if kind == "n":
        return read_number(text)
    if kind == "s":
        known = text.strip().isdigit() and int(text) < len(strings)
        return strings[int(text)] if known else ErrorValue("#REF!", "its text is missing from the file")
    if kind in ("str", "inlineStr"):
        return unescaped(text)
    if kind == "b":
        return text.strip() in ("1", "true")
    if kind == "e":
        return ErrorValue(text.strip())
    if kind == "d":
        moment = datetime.fromisoformat(text.replace("Z", ""))
        return (moment - datetime(1899, 12, 30)).total_seconds() / 86400
    return unescaped(text)


def read_number(text: str) -> Scalar:
    """A number as saved; what is none, or not finite, is an error value that says so."""
    if not text.strip():
        return None
    try:
        number = float(text) if "_" not in text else float("nan")
    except ValueError:
        number = float("nan")
    return number if isfinite(number) else ErrorValue("#NUM!", f'its saved value "{text[:24]}" is no number')


def read_f(
    f: etree._Element,
    sheet: Sheet,
    position: tuple[int, int],
    dynamic: bool,
    shared: dict[str, Formula],
    orphans: list[tuple[tuple[int, int], str]],
) -> None:
    """A formula: ordinary, shared (children map to their master's object), array, data table."""
    text, kind = unescaped(f.text or ""), f.get("t", "normal")
    if kind == "shared":
        index = f.get("si", "")
        if text:
            formula = shared[index] = Formula(text, *position)
        elif index in shared:
            formula = shared[index]
        else:
            orphans.append((position, index))
            return
    elif kind == "array":
        formula = Formula(text, *position, kind="array", area=read_ref(f.get("ref", ""), position), dynamic=dynamic)
    elif kind == "dataTable":
        formula = Formula(text, *position, kind="data table", area=read_ref(f.get("ref", ""), position))
    elif text:
        formula = Formula(text, *position, dynamic=dynamic)
    else:
        return
    sheet.formulas[position] = formula


def read_ref(ref: str, position: tuple[int, int]) -> Bounds:
    """A1:B3 as bounds; a single cell where it says nothing else."""
    cells = [REFERENCE.fullmatch(each) for each in ref.split(":")]
    places = [(int(m[2]), column_number(m[1])) for m in cells if m] or [position]
    return (*places[0], *places[-1])


def read_defined_names(root: etree._Element, book: Book) -> None:
    """Defined names, global ("") and of one sheet; print areas and other settings kept inside are no names."""
    for element in children(root, "definedNames", "definedName"):
        name, scope = element.get("name", ""), element.get("localSheetId")
        if name.startswith("_xlnm.") and name != "_xlnm.Print_Area":
            continue
        sheet = ""
        if scope is not None and scope.isdigit() and int(scope) < len(book.sheets):
            sheet = book.sheets[int(scope)].name
        book.names[sheet.upper(), name.upper()] = Formula(element.text or "", 1, 1)


def read_table(root: etree._Element, sheet: str, book: Book) -> None:
    """A table for structured references."""
    columns = tuple(unescaped(c.get("name", "")) for c in children(root, "tableColumns", "tableColumn"))
    name = root.get("displayName") or root.get("name") or ""
    book.tables[name.upper()] = Table(
        name,
        sheet,
        read_ref(root.get("ref", ""), (1, 1)),
        columns,
        header=root.get("headerRowCount", "1") != "0",
        totals=root.get("totalsRowCount", "0") not in ("0", ""),
    )


def read_external_references(
    root: etree._Element, relations: dict[str, tuple[str, str, bool]], package: Package, book: Book
) -> None:
    """Other books that formulas refer to as [1], [2] ...: their file names and saved values."""
    for number, entry in enumerate(children(root, "externalReferences", "externalReference"), start=1):
        _, part, _ = relations.get(relation_id(entry), ("", "", False))
        if part not in package:
            continue
        link = parsed(package.part(part), package.name, part)
        file = next(
            (target for kind, target, _ in package.relationships(part).values() if "externalLinkPath" in kind), ""
        )
        names = [s.get("val", "") for s in children(link, "externalBook", "sheetNames", "sheetName")]
        sheets = [Sheet(name) for name in names]
        for data in children(link, "externalBook", "sheetDataSet", "sheetData"):
            index = int(data.get("sheetId", "0"))
            if index < len(sheets):
                for cell in children(data, "row", "cell"):
                    match = REFERENCE.fullmatch(cell.get("r", ""))
                    v = next(children(cell, "v"), None)
                    if match and v is not None:
                        position = (int(match[2]), column_number(match[1]))
                        sheets[index].values[position] = read_v(v.text or "", cell.get("t", "n"), [])
                        sheets[index].bottom = max(sheets[index].bottom, position[0])
                        sheets[index].right = max(sheets[index].right, position[1])
        book.externals[str(number)] = (file, sheets)
