"""A small differential run with fixed seeds, and the records and page that explain differences."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

from tests.differential.comparison import agree, alike, compare_books
from tests.differential.functions import ABSENT, SPELLED, arguments_of, names
from tests.differential.generator import generate
from tests.differential.known import records
from tests.differential.report import PAGE, added, page, summary

if TYPE_CHECKING:
    from pathlib import Path


@pytest.mark.libreoffice
def test_random_workbooks_come_out_as_in_libreoffice_but_for_known_differences(soffice: str, tmp_path: Path) -> None:
    outcome = added(compare_books(soffice, [1], 800, tmp_path))
    text, unexplained = summary(outcome)
    assert outcome.cells >= 1500
    assert not unexplained, text


def test_the_same_seed_gives_the_same_book_and_another_one_another() -> None:
    assert generate(5, 300).sheets == generate(5, 300).sheets
    assert generate(5, 300).sheets != generate(6, 300).sheets


def test_every_function_that_both_programs_have_is_tried() -> None:
    tried = {piece.head for case in generate(7, 6000).cases for piece in (case.piece, *case.piece.calls())}
    assert set(names()) <= tried
    assert not set(names()) & ABSENT


def test_typical_arguments_are_as_many_as_the_function_takes() -> None:
    from cellsection.workbook.builtins import BUILTINS

    for name in SPELLED.keys() & set(names()):
        least = sum(not word.endswith("?") for word in arguments_of(name))
        declared = BUILTINS[name]
        assert least >= declared.least, name
        assert declared.most is None or len(arguments_of(name)) <= declared.most, name


def test_records_have_keys_of_their_own_and_give_their_reason() -> None:
    keys = [record.key for record in records()]
    assert len(keys) == len(set(keys))
    assert all(len(record.reason) > 30 and record.when.words for record in records())


def test_the_page_on_differences_is_written_from_the_records() -> None:
    assert PAGE.read_text(encoding="utf-8") == page(), "stale: python -m tests.differential.report writes it anew"


def test_values_agree_to_nine_digits_and_errors_by_code() -> None:
    assert agree(1.0, 1.0 + 5e-10)
    assert not agree(1.0, 1.0 + 5e-9)
    assert agree(True, 1.0)
    assert not agree("1", 1.0)
    assert alike("1+2i", "1.0000000000001+2i")
    assert not alike("1+2i", "1+2.1i")
