"""Books made for timing: the ledger of a crane hall's girders, as many rows as are asked for.

Every book has the same kinds of formula and no two books differ between runs. `saved` says what stands in the formula
cells: nothing, or a number that is wrong everywhere.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from pathlib import Path
from xml.sax.saxutils import escape
from zipfile import ZIP_DEFLATED, ZipFile

__all__ = ["BOOKS", "Kind", "write_book"]

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
OFFICE = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
PACKAGE = "http://schemas.openxmlformats.org/package/2006"
TYPES = "application/vnd.openxmlformats-officedocument.spreadsheetml"
GRADES = (("S235", 235.0), ("S275", 275.0), ("S355", 355.0))

Content = float | str  # of a cell: a number, a text, "=" and a formula, or "shared:K=" and the formula of its first row
Row = dict[str, Content]


@dataclass(frozen=True, slots=True)
class Kind:
    """A kind of book: its rows from the number of formula cells wanted, and the share of time that is aimed at."""

    title: str
    formulas: int
    rows: Callable[[int], Iterator[Row]]
    aim: float | None = None


def ledger(row: int) -> Row:
    """One part of a girder: plate b by h at y, its own moment and its share about the centroid; ten formulas."""
    b, h, y = 12.0 + row % 37, 200.0 + row % 53, 15.5 * (row % 97)
    r = str(row)
    return {
        "A": b, "B": h, "C": y, "D": GRADES[row % 3][0],
        "E": f"=A{r}*B{r}", "F": f"=E{r}*C{r}", "G": f"=A{r}*B{r}^3/12", "H": f"=C{r}-Grades!$D$1",
        "I": f"=E{r}*H{r}^2", "J": f"=G{r}+I{r}", "K": f"=IF(J{r}>1000000,SQRT(J{r}/E{r}),ROUND(J{r}/1000,3))",
        "L": f"=SUM(E{r}:G{r})/MAX(A{r}:C{r},1)", "M": f"=VLOOKUP(D{r},Grades!$A$1:$B$3,2,FALSE)",
        "N": f'=IF(M{r}*K{r}>0,"M"&ROUND(M{r}*K{r}/1000,1),"-")',
    }  # fmt: skip


def unshared(formulas: int) -> Iterator[Row]:
    """A ledger in which every cell carries its own formula text."""
    return (ledger(row) for row in range(1, formulas // 10 + 1))


def shared(formulas: int) -> Iterator[Row]:
    """The same ledger as an application saves a column that was filled down."""
    first = ledger(1)
    for row in range(1, formulas // 10 + 1):
        yield {
            column: f"shared:{column}{first[column]}" if str(content).startswith("=") else content
            for column, content in ledger(row).items()
        }


def distinct(formulas: int) -> Iterator[Row]:
    """Formulas of which no two are alike, so that each is compiled by itself."""
    for row in range(1, formulas // 10 + 1):
        yield {
            column: f"{content}*{row}+{k}" if str(content).startswith("=") and column < "M" else content
            for k, (column, content) in enumerate(ledger(row).items())
        }


def chain(formulas: int) -> Iterator[Row]:
    """Each cell waits for the one above; the first sheet begins with the last of them."""
    for row in range(1, formulas + 1):
        yield {"A": "=0.5" if row == formulas else f"=A{row + 1}*0.999+{row % 7}"}


def columns(formulas: int) -> Iterator[Row]:
    """Sums and searches over whole columns of a long list."""
    for row in range(1, 20_001):
        content = {name: value for name, value in ledger(row).items() if not str(value).startswith("=")}
        if row <= formulas:
            content["E"] = (
                f'=SUMIF(D:D,"S355",C:C)+{row}' if row % 3 == 0
                else f"=SUM(C:C)/COUNT(C:C)+{row}" if row % 3 == 1
                else f"=INDEX(B:B,MATCH({12 + row % 37},A:A,0))"
            )  # fmt: skip
        yield content


BOOKS = (
    Kind("3,000 all distinct", 3_000, distinct, 0.25),
    Kind("3,000 unshared", 3_000, unshared, 0.25),
    Kind("50,000 unshared", 50_000, unshared, 0.5),
    Kind("50,000 shared", 50_000, shared, 0.5),
    Kind("200,000 unshared", 200_000, unshared, 0.9),
    Kind("200,000 shared", 200_000, shared, 0.6),
    Kind("chain of 100,000", 100_000, chain),
    Kind("300 over whole columns", 300, columns),
)


def cell(address: str, content: Content, count: int, column: str) -> str:
    """A cell; a formula's saved value is wrong."""
    if isinstance(content, float):
        return f'<c r="{address}"><v>{content!r}</v></c>'
    head, sign, text = content.partition("=")
    if not sign:
        return f'<c r="{address}" t="inlineStr"><is><t>{content}</t></is></c>'
    formula = f"<f>{escape(text)}</f>"
    if head:
        first = address == f"{column}1"
        formula = f'<f t="shared" si="{ord(column) - 65}"'
        formula += f' ref="{column}1:{column}{count}">{escape(text)}</f>' if first else "/>"
    return f'<c r="{address}"{" t=" + chr(34) + "str" + chr(34) if column == "N" else ""}>{formula}<v>-1</v></c>'


def sheet(rows: Iterator[Row], count: int) -> str:
    """A sheet part."""
    lines = [
        f'<row r="{number}">'
        + "".join(cell(f"{column}{number}", content, count, column) for column, content in row.items())
        + "</row>"
        for number, row in enumerate(rows, start=1)
    ]
    return f'<worksheet xmlns="{MAIN}"><sheetData>{"".join(lines)}</sheetData></worksheet>'


def write_book(kind: Kind, path: Path) -> Path:
    """Write a book of a kind; what its formula cells hold is wrong until it is recalculated."""
    grades: list[Row] = [{"A": name, "B": strength} for name, strength in GRADES]
    grades[0] |= {"D": "=F1+100", "F": 2.5}
    sheets = {"Ledger": sheet(kind.rows(kind.formulas), kind.formulas // 10), "Grades": sheet(iter(grades), 3)}
    listed = "".join(f'<sheet name="{name}" sheetId="{k}" r:id="r{k}"/>' for k, name in enumerate(sheets, start=1))
    links = "".join(
        f'<Relationship Id="r{k}" Type="{OFFICE}/worksheet" Target="worksheets/sheet{k}.xml"/>' for k in (1, 2)
    )
    parts = {
        "[Content_Types].xml": f'<Types xmlns="{PACKAGE}/content-types">'
        '<Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
        f'<Default Extension="xml" ContentType="{TYPES}.worksheet+xml"/>'
        f'<Override PartName="/xl/workbook.xml" ContentType="{TYPES}.sheet.main+xml"/></Types>',
        "_rels/.rels": f'<Relationships xmlns="{PACKAGE}/relationships">'
        f'<Relationship Id="a" Type="{OFFICE}/officeDocument" Target="xl/workbook.xml"/></Relationships>',
        "xl/workbook.xml": f'<workbook xmlns="{MAIN}" xmlns:r="{OFFICE}"><sheets>{listed}</sheets></workbook>',
        "xl/_rels/workbook.xml.rels": f'<Relationships xmlns="{PACKAGE}/relationships">{links}</Relationships>',
        **{f"xl/worksheets/sheet{k}.xml": text for k, text in enumerate(sheets.values(), start=1)},
    }
    with ZipFile(path, "w", ZIP_DEFLATED) as package:
        for name, text in parts.items():
            package.writestr(name, text)
    return path
