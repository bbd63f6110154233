"""The shape of the code, held as data: which room may import which, and what every file owes its reader."""

from __future__ import annotations

import ast
import re
from pathlib import Path
from typing import TYPE_CHECKING
from zipfile import ZipFile

import pytest

if TYPE_CHECKING:
    from collections.abc import Iterator

ROOT = Path(__file__).resolve().parents[1]
PACKAGE = ROOT / "cellsection"
MAY_IMPORT = {
    "errors": "",
    "geometry": "errors",
    "section": "errors geometry",
    "catalogue": "errors geometry section",
    "workbook": "errors",
    "hosts": "errors catalogue workbook",
    "check": "errors hosts workbook",
    "templates": "errors catalogue hosts workbook",
    "cli": "errors geometry section catalogue workbook hosts check templates",
    # The Python face stands on the catalogue; the package hands it out. `python -m cellsection` is the command line.
    "face": "errors catalogue",
    "__init__": "face",
    "__main__": "cli",
}
OUTSIDE = {  # packages that only some rooms may load; all others are free
    "rich": "check",
    "click": "cli",
    "openpyxl": "templates",
    "shapely": "geometry section",
    "xlwings": "hosts",
    "pandas": "face",
    "numpy": "geometry section face",
    "scipy": "geometry section workbook",  # workbook: the distributions, loaded by the first formula that needs one
}
LONGEST = 500
# Written in pieces, so that this file does not find itself.
MACHINE_PATH = re.compile(
    "|".join(["/" + place + "/" for place in ("work", "tmp", "root", "home", "Users")]) + r"|[A-Z]:\\Users"
)
STUB = re.compile(r"\b(" + "|".join(["TO" + "DO", "FIX" + "ME", "X" + "XX"]) + r")\b|raise NotImplemented" + "Error")

MODULES = sorted(PACKAGE.rglob("*.py"))
SOURCES = sorted(
    [*MODULES, *(ROOT / "tests").rglob("*.py"), *(ROOT / "benchmarks").rglob("*.py"), *ROOT.glob("*.py")],
)
TEXTS = sorted(
    [*SOURCES, *ROOT.glob("*.md"), *(ROOT / "docs").rglob("*.md"), ROOT / "pyproject.toml", *(ROOT / ".ci").glob("*")],
)


def name(path: Path) -> str:
    return path.relative_to(ROOT).as_posix()


def room(path: Path) -> str:
    """The room of a module: its folder in the package, or its own name at the top."""
    parts = path.relative_to(PACKAGE).with_suffix("").parts
    return parts[0]


def imports(path: Path) -> Iterator[tuple[int, str]]:
    """Line and dotted name of everything a module imports, inside functions and for type checking too."""
    package = ("cellsection", *path.relative_to(PACKAGE).parent.parts)
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            for each in node.names:
                yield node.lineno, each.name
        elif isinstance(node, ast.ImportFrom):
            start = ".".join(package[: len(package) - node.level + 1]) if node.level else ""
            source = ".".join(filter(None, (start, node.module)))
            for each in node.names:
                yield node.lineno, f"{source}.{each.name}"


def rooms_imported(path: Path) -> Iterator[tuple[int, str]]:
    for line, dotted in imports(path):
        parts = dotted.split(".")
        # `import cellsection` and its __version__ are everybody's: the face loads nothing until it is asked.
        if parts[0] == "cellsection" and len(parts) > 1 and parts[1] != "__version__":
            yield line, parts[1]


@pytest.mark.parametrize("path", MODULES, ids=name)
def test_imports_between_rooms_point_down(path: Path) -> None:
    own = room(path)
    assert own in MAY_IMPORT, f"{own} is no room of DESIGN.md"
    allowed = {own, *MAY_IMPORT[own].split()}
    wrong = [f"line {line}: {met}" for line, met in rooms_imported(path) if met not in allowed]
    assert not wrong, f"{own} may import {MAY_IMPORT[own] or 'no other room'}"


@pytest.mark.parametrize("path", MODULES, ids=name)
def test_outside_packages_stay_in_their_rooms(path: Path) -> None:
    own = room(path)
    met = {(line, dotted.split(".")[0]) for line, dotted in imports(path)}
    wrong = [f"line {line}: {package}" for line, package in sorted(met) if own not in OUTSIDE.get(package, own).split()]
    assert not wrong


def test_the_rooms_form_no_circle() -> None:
    order: list[str] = []
    left = {own: set(may.split()) for own, may in MAY_IMPORT.items()}
    while left:
        free = [own for own, may in left.items() if may <= set(order)]
        assert free, f"a circle among {sorted(left)}"
        order += free
        left = {own: may for own, may in left.items() if own not in free}


@pytest.mark.parametrize("path", MODULES, ids=name)
def test_every_module_opens_with_a_docstring(path: Path) -> None:
    assert ast.get_docstring(ast.parse(path.read_text(encoding="utf-8")))


@pytest.mark.parametrize("path", SOURCES, ids=name)
def test_no_file_is_longer_than_a_chapter(path: Path) -> None:
    assert len(path.read_text(encoding="utf-8").splitlines()) <= LONGEST


@pytest.mark.parametrize("path", TEXTS, ids=name)
def test_no_text_names_a_place_on_one_machine(path: Path) -> None:
    lines = enumerate(path.read_text(encoding="utf-8").splitlines(), start=1)
    assert not [f"line {number}: {line}" for number, line in lines if MACHINE_PATH.search(line)]


@pytest.mark.parametrize("path", sorted((ROOT / "workbooks").glob("*.xlsx")), ids=name)
def test_no_shipped_workbook_names_a_place_on_one_machine(path: Path) -> None:
    with ZipFile(path) as parts:
        texts = {part: parts.read(part).decode("utf-8", "ignore") for part in parts.namelist() if part.endswith(".xml")}
    assert not [part for part, text in texts.items() if MACHINE_PATH.search(text)]


@pytest.mark.parametrize("path", SOURCES, ids=name)
def test_nothing_is_left_as_a_stub(path: Path) -> None:
    lines = enumerate(path.read_text(encoding="utf-8").splitlines(), start=1)
    assert not [f"line {number}: {line}" for number, line in lines if STUB.search(line)]
