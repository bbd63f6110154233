"""Books made to be expensive: each asks for more of something than a book has any need of."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from pathlib import Path

from tests.workbook.small import MAIN, PACKAGE, RELATIONS, parts_of, zipped
from tests.workbook.test_ods import NAMESPACES

__all__ = ["BOOKS", "hostile_book"]

SHEET = "xl/worksheets/sheet1.xml"
Parts = Mapping[str, str | bytes]


def plain(
    cells: Mapping[str, float | str] | None = None, names: Mapping[str, str] | None = None
) -> dict[str, str | bytes]:
    """A small book, to be made worse."""
    return dict(parts_of({"S": cells or {"A1": 1.0, "B1": "=A1*2"}}, names or {}))


def formula(text: str) -> Parts:
    """A book of a number, a text and one formula, far from the first cell."""
    return plain({"A1": 1.0, "A2": "x", "A1048576": 1.0, "Z9": f"={text}"})


def sheet(rows: str, head: str = "") -> Parts:
    """A book whose sheet holds these rows."""
    return {**plain(), SHEET: f'{head}<worksheet xmlns="{MAIN}"><sheetData>{rows}</sheetData></worksheet>'}


def strings(items: str, head: str = "") -> Parts:
    """A book with these shared strings, of which its cell takes the first."""
    relation = f'<Relationship Id="s" Type="{RELATIONS}/sharedStrings" Target="sharedStrings.xml"/></Relationships>'
    parts = dict(sheet('<row r="1"><c r="A1" t="s"><v>0</v></c><c r="B1"><f>LEN(A1)</f></c></row>'))
    rels = "xl/_rels/workbook.xml.rels"
    parts[rels] = str(parts[rels]).replace("</Relationships>", relation)
    return {**parts, "xl/sharedStrings.xml": f'{head}<sst xmlns="{MAIN}">{items}</sst>'}


def content(body: str, head: str = "") -> Parts:
    """An OpenDocument book of one sheet with these rows."""
    return {
        "mimetype": "application/vnd.oasis.opendocument.spreadsheet",
        "content.xml": f"{head}<office:document-content {NAMESPACES}><office:body><office:spreadsheet>"
        f'<table:table table:name="S">{body}</table:table>'
        "</office:spreadsheet></office:body></office:document-content>",
    }


def chain(length: int) -> dict[str, str]:
    """Names that each mean the one before."""
    return {"n_0": "S!$A$1", **{f"n_{k}": f"n_{k - 1}+1" for k in range(1, length)}}


LAUGHS = "<!DOCTYPE x [" + '<!ENTITY a "ha">' + "".join(
    f'<!ENTITY {chr(98 + k)} "{f"&{chr(97 + k)};" * 10}">' for k in range(12)
) + "]>"  # fmt: skip
EXTERNAL = '<!DOCTYPE x [<!ENTITY a SYSTEM "file:///etc/hostname">]>'
NUMBER_CELL = '<table:table-cell office:value-type="float" office:value="1" table:number-columns-repeated="{}"/>'

# name -> the book, and what is said of it: in the refusal, or of its formula cell ("" where that is computed)
BOOKS: dict[str, tuple[Callable[[], Parts], str]] = {
    "entities that grow": (lambda: sheet('<row r="1"><c r="A1"><v>&m;</v></c></row>', LAUGHS), "document type"),
    "entities that grow in strings": (lambda: strings("<si><t>&m;</t></si>", LAUGHS), "document type"),
    "entities that grow, ods": (lambda: content("<table:table-row/>", LAUGHS), "document type"),
    "an external entity": (lambda: sheet('<row r="1"><c r="A1"><v>&a;</v></c></row>', EXTERNAL), "document type"),
    "300 MB of blanks": (lambda: {**plain(), SHEET: b" " * 300_000_000}, "times its size"),
    "1.1 GB in parts": (lambda: {**plain(), **{f"m{k}": b"x" * 110_000_000 for k in range(10)}}, "unpacks to"),
    "30,000 parts": (lambda: {**plain(), **{f"media/{k}": b"" for k in range(30_000)}}, "parts"),
    "elements 100,000 deep": (lambda: sheet("<a>" * 100_000 + "</a>" * 100_000), "nests deeper"),
    "elements 100,000 deep in strings": (lambda: strings("<si>" + "<r>" * 100_000), "nests deeper"),
    "an attribute of 20 MB": (lambda: sheet(f'<row r="1" x="{"x" * 20_000_000}"/>'), "tag of more"),
    "a text of 5 MB": (lambda: strings(f"<si><t>{'a' * 5_000_000}</t></si>"), "characters"),
    "4.2 million shared strings": (lambda: strings("<si/>" * 4_200_000), "texts"),
    "a million names": (lambda: plain(names={f"name{k}": "1" for k in range(1_000_000)}), "elements"),
    "names 50,000 deep": (lambda: plain({"A1": 1.0, "B1": "=n_49999"}, chain(50_000)), "nest"),
    "names in a ring": (lambda: plain({"B1": "=a"}, {"a": "b+1", "b": "c+1", "c": "a+1"}), "circular name"),
    "brackets 3,000 deep": (lambda: formula("(" * 3000 + "1" + ")" * 3000), "deep nesting"),
    "functions 3,000 deep": (lambda: formula("SUM(" * 3000 + "1" + ")" * 3000), "deep nesting"),
    "3,000 brackets not closed": (lambda: formula("(" * 300 + "1"), "not closed"),
    "a formula of a million signs": (lambda: formula("+".join(["1"] * 500_000)), "overlong formula"),
    "a sum of 40,000 numbers": (lambda: formula("+".join(["1"] * 40_000)), ""),
    "the sum of a whole sheet": (lambda: formula("SUM(A:XFD)"), "array of"),
    "a whole sheet times 2, in an array formula": (
        lambda: plain({"A1": "{=A:XFD*2}A1:XFD1048576"}), "array"
    ),
    "an array formula over a whole sheet": (lambda: plain({"A1": "{=1}A1:XFD1048576"}), "array"),
    "recursion without end": (lambda: plain({"B1": "=f(1)"}, {"f": "LAMBDA(n,f(n+1))"}), "nested too deeply"),
    "a value repeated a billion times": (
        lambda: content(f"<table:table-row>{NUMBER_CELL.format(10**9)}</table:table-row>"), "repeated"
    ),
    "a row repeated a billion times": (
        lambda: content(
            f'<table:table-row table:number-rows-repeated="{10**9}">{NUMBER_CELL.format(1)}</table:table-row>'
        ),
        "repeated",
    ),
    "16 billion values by repetition": (
        lambda: content(
            f'<table:table-row table:number-rows-repeated="1048576">{NUMBER_CELL.format(16384)}</table:table-row>'
        ),
        "cells",
    ),
    "5 million cells": (
        lambda: sheet("".join(f'<row r="{r}">{"<c><v>1</v></c>" * 5000}</row>' for r in range(1, 1001))), "cells"
    ),
    "a part that includes itself": (
        lambda: {
            **plain(),
            "xl/_rels/workbook.xml.rels": f'<Relationships xmlns="{PACKAGE}"><Relationship Id="r1"'
            f' Type="{RELATIONS}/worksheet" Target="workbook.xml"/></Relationships>',
        },
        "",
    ),
}  # fmt: skip


def hostile_book(folder: Path, name: str) -> Path:
    """One of the books, on disk."""
    parts = BOOKS[name][0]()
    return zipped(folder / ("book.ods" if "content.xml" in parts else "book.xlsx"), parts)


def each_on_disk(folder: Path) -> Iterator[Path]:
    """All of them, each in a folder of its own, to be measured by hand."""
    for name in BOOKS:
        place = folder / name.replace(",", "").replace(" ", "-")
        place.mkdir(parents=True)
        yield hostile_book(place, name)
