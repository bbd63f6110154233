"""docs/limits.md says what is so: every limit that can be set with its default, and the fixed ones."""

from __future__ import annotations

import re
from dataclasses import fields
from pathlib import Path

from cellsection.workbook.book import Limits
from cellsection.workbook.builtins.text import LONGEST
from cellsection.workbook.markup import DEEPEST, LONGEST_TAG, LONGEST_TEXT, MOST_ELEMENTS

PAGE = (Path(__file__).parents[2] / "docs" / "limits.md").read_text(encoding="utf-8")


def test_every_limit_that_can_be_set_is_on_the_page_with_its_default() -> None:
    told = {
        name: float(default.replace(",", ""))
        for name, default in re.findall(r"^\| `(\w+)` \| ([\d,.]+) \|", PAGE, re.M)
    }
    assert told == {each.name: each.default for each in fields(Limits)}


def test_the_fixed_limits_are_on_the_page() -> None:
    told = re.findall(r"[\d,]*\d", PAGE.partition("\nFixed, ")[2].partition("\n\n")[0])
    assert told == [f"{limit:,}" for limit in (DEEPEST, LONGEST_TAG, LONGEST_TEXT, MOST_ELEMENTS, LONGEST)]
