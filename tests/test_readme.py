"""What the README shows is what happens: its tour is run and what it prints is compared.

`python -m tests.test_readme` writes the tour anew where what it prints has changed.
"""

from __future__ import annotations

import contextlib
import doctest
import re
import shlex
import tempfile
from pathlib import Path
from zipfile import ZIP_DEFLATED, ZipFile

import pytest
from click.testing import CliRunner

from cellsection.cli import commands

ROOT = Path(__file__).resolve().parents[1]
README = (ROOT / "README.md").read_text(encoding="utf-8")
GUIDES = [ROOT / "README.md", ROOT / "DEVELOPERS.md", *sorted((ROOT / "docs").glob("*.md"))]


def widen_the_bottom_plate(book: Path) -> None:
    """Change one typed-in number and nothing else, as a program does that does not recalculate."""
    with ZipFile(book) as source:
        parts = {name: source.read(name) for name in source.namelist()}
    sheet = "xl/worksheets/sheet1.xml"
    changed = re.sub(rb'(<c r="D14"[^>]*>)<v>240</v>', rb"\g<1><v>260</v>", parts[sheet])
    assert changed != parts[sheet]
    with ZipFile(book, "w", ZIP_DEFLATED) as out:
        for name, content in {**parts, sheet: changed}.items():
            out.writestr(name, content)


def told_anew(block: str) -> str:
    """A console block with what its cellsection commands print now; a last line of dots cuts them off where it did."""
    lines: list[str] = []
    for part in re.split(r"^(?=\$ )", block, flags=re.MULTILINE)[1:]:
        command, *shown = part.splitlines()
        lines.append(command)
        words = shlex.split(command.removeprefix("$ "), comments=True)
        if words[0] == "cellsection":
            printed = CliRunner(env={"COLUMNS": "80"}).invoke(commands, words[1:]).output.rstrip().splitlines()
            lines += [*printed[: len(shown) - 1], "..."] if shown[-1:] == ["..."] else printed
    return "\n".join(lines) + "\n"


def readme_told_anew() -> str:
    """The README with its two console blocks run in the folder we stand in: the tour, and the book that was spoiled."""
    before, tour, between, spoiled, after = re.split(r"(?<=```console\n)(.*?)(?=```)", README, flags=re.DOTALL)
    tour = told_anew(tour)
    widen_the_bottom_plate(Path("g4.xlsx"))
    return before + tour + between + told_anew(spoiled) + after


def test_the_tour_prints_what_the_readme_shows(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    assert readme_told_anew() == README, "write it anew with: python -m tests.test_readme"


def test_the_python_of_the_readme_gives_what_it_shows() -> None:
    results = doctest.testfile(str(ROOT / "README.md"), module_relative=False, encoding="utf-8")
    assert results.attempted > 0
    assert results.failed == 0


def test_the_job_comes_first_and_then_the_two_commands() -> None:
    title, job, rest = README.split("\n\n", 2)
    assert title == "# cellsection"
    assert len(job.splitlines()) > 4
    assert rest.index("python3 run.py check") < rest.index("python3 run.py test") < rest.index("](docs/girder.png)")


@pytest.mark.parametrize("path", GUIDES, ids=lambda path: path.name)
def test_every_link_of_a_guide_leads_somewhere(path: Path) -> None:
    links = re.findall(r"\]\(([^)#]+)(?:#[^)]*)?\)", path.read_text(encoding="utf-8"))
    assert [link for link in links if "://" not in link and not (path.parent / link).exists()] == []


def test_every_file_the_developers_guide_names_is_there() -> None:
    guide = (ROOT / "DEVELOPERS.md").read_text(encoding="utf-8")
    table = guide.partition("## Commands")[0]
    for row in re.findall(r"^\| .* \| (`.*) \|", table, flags=re.MULTILINE):
        names = re.findall(r"`([^`]+)`", row)
        folder = (ROOT / names[0]).parent
        assert [name for name in names if not ((ROOT / name).exists() or (folder / name).exists())] == []


if __name__ == "__main__":
    with tempfile.TemporaryDirectory() as folder, contextlib.chdir(folder):
        told = readme_told_anew()
    (ROOT / "README.md").write_text(told, encoding="utf-8")
