"""The page on the spreadsheet functions says what is declared."""

from __future__ import annotations

from cellsection.workbook.builtins import BUILTINS
from cellsection.workbook.builtins.listing import CHAPTERS, PAGE, page


def test_the_page_is_up_to_date() -> None:
    text = PAGE.read_text(encoding="utf-8")
    assert text == page(), "python -m cellsection.workbook.builtins.listing writes it anew"


def test_every_family_has_a_chapter() -> None:
    families = {declared.call.__module__.rpartition(".")[2] for declared in BUILTINS.values()}
    assert families <= set(CHAPTERS)


def test_what_the_page_calls_not_supported_is_not_there() -> None:
    closing = page().partition("## Not supported")[2]
    listed = {word.strip(",|") for word in closing.split() if word.strip(",|").isupper() and len(word) > 4}
    assert not (listed & set(BUILTINS)) - {"CELL"}
