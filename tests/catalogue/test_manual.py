"""The reference pages are those that the catalogue gives, and leave nothing out."""

from __future__ import annotations

import re
from pathlib import Path
from xml.etree import ElementTree

import pytest

from cellsection.catalogue import CATALOGUE, CellFunction
from cellsection.catalogue.drawings import FIGURES, shapes_drawing
from cellsection.catalogue.manual import CHAPTERS, functions_page, in_words, notation_page, write_pages
from cellsection.geometry import DATUMS, SHAPES
from cellsection.section.headers import ORDER, UNITS
from cellsection.section.parts import read_block

DOCS = Path(__file__).resolve().parents[2] / "docs"
NOTATION = (DOCS / "notation.md").read_text(encoding="utf-8")
every = pytest.mark.parametrize("function", CATALOGUE.values(), ids=list(CATALOGUE))


def table_below(line: str) -> list[list[str]]:
    """The first table of the notation page after a line."""
    after = NOTATION.split(line, 1)[1].lstrip("\n").splitlines()
    start = next(k for k, each in enumerate(after) if each.startswith("|"))
    end = next((k for k in range(start, len(after)) if not after[k].startswith("|")), len(after))
    return [[cell.strip() for cell in each.strip("|").split("|")] for each in after[start:end]]


@pytest.mark.parametrize("name", ["functions.md", "notation.md", "shapes.svg"])
def test_the_page_is_up_to_date(name: str) -> None:
    page = (DOCS / name).read_text(encoding="utf-8")
    written = {"functions.md": functions_page, "notation.md": lambda: notation_page(page), "shapes.svg": shapes_drawing}
    assert page == written[name](), "run: python -m cellsection.catalogue.manual"


def test_every_shape_is_drawn_with_the_letters_of_its_dimensions() -> None:
    assert list(FIGURES) == [*SHAPES, "polygon"]
    for word, shape in SHAPES.items():
        letters = {letter for mark in FIGURES[word].marks for letter in getattr(mark, "letter", "").split(", ")} - {""}
        assert letters == {*shape.required, *shape.optional}, word


def test_the_drawing_is_sound_xml() -> None:
    assert ElementTree.fromstring(shapes_drawing()).tag.endswith("svg")


def test_every_function_has_its_chapter() -> None:
    assert [function.name for _, _, functions in CHAPTERS for function in functions] == list(CATALOGUE)


@every
def test_the_page_says_all_of_a_function(function: CellFunction) -> None:
    page = functions_page()
    assert f"[{function.name}](#{function.name.lower()})" in page
    section = page.split(f"### {function.name}\n", 1)[1].split("\n### ", 1)[0]
    for text in (
        function.signature,
        function.help,
        function.returns.help,
        function.example.formula,
        function.source[1:],
    ):
        assert text in section
    for argument in function.arguments:
        assert f"| `{argument.name}` | {argument.help} |" in section


@pytest.mark.parametrize("page", [functions_page(), NOTATION], ids=["functions.md", "notation.md"])
def test_the_rows_of_every_table_are_as_long_as_its_header(page: str) -> None:
    for table in re.findall(r"(?:^\|.*\n)+", page, re.MULTILINE):
        assert len({line.replace("\\|", "").count("|") for line in table.splitlines()}) == 1, table


def test_every_link_of_the_pages_leads_somewhere() -> None:
    page = functions_page()
    headings = {line[4:].lower() for line in page.splitlines() if line.startswith("### ")}
    for target in re.findall(r"\]\(([^)]+)\)", page + NOTATION):
        assert target.removeprefix("#") in headings or (DOCS / target).is_file(), target


@pytest.mark.parametrize("header", ORDER)
def test_every_header_of_the_parts_block_is_explained(header: str) -> None:
    letters = {letter for row in table_below("<!-- shapes -->\n") for cell in row[1:3] for letter in cell.split()}
    assert f"`{header}`" in NOTATION or header in letters


def test_every_shape_stands_with_its_dimensions() -> None:
    rows = {row[0]: row for row in table_below("<!-- shapes -->\n")[2:]}
    assert set(rows) == {*SHAPES, "polygon"}
    for word, shape in SHAPES.items():
        assert rows[word][1].split() == list(shape.required)
        assert rows[word][2] == (" ".join(shape.optional) or "–")


def test_the_words_for_units_and_datum_are_all_there() -> None:
    for word in (*UNITS, *DATUMS):
        assert f"`{word}`" in NOTATION


@pytest.mark.parametrize("line", ["takes a *parts block* first", "and turned about it:"])
def test_the_blocks_that_the_page_shows_can_be_read(line: str) -> None:
    rows = table_below(line)
    shown = [
        [float(cell) if re.fullmatch(r"-?[0-9.]+", cell) else cell for cell in row] for row in (rows[0], *rows[2:])
    ]
    assert read_block(shown).parts


def test_pages_are_only_written_where_they_change(tmp_path: Path) -> None:
    (tmp_path / "notation.md").write_text("<!-- units -->\n<!-- end -->\n", encoding="utf-8")
    assert {path.name for path in write_pages(tmp_path)} == {"functions.md", "notation.md", "shapes.svg"}
    assert write_pages(tmp_path) == ()


def test_the_pages_show_cells_as_a_sheet_does() -> None:
    shown = [in_words(cell) for cell in (None, "rectangle", True, 749.3333333333334, 868000.0, 224125440.0, -0.5)]
    assert shown == ["", "rectangle", "TRUE", "749.3333", "868000", "224125440", "-0.5"]
