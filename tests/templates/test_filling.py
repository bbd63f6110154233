"""What a person may do with the table: gaps, other shapes, all rows, cut-outs, other units; and the hand ledger."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

from cellsection.check import Verdict, check_book
from cellsection.templates.acceptance import CHECKS
from cellsection.templates.content import COLUMNS
from cellsection.templates.entry import DATUMS, SHAPES
from cellsection.templates.layout import HAND_TOP, PARTS
from tests.templates.filled import filled, values, wrong

if TYPE_CHECKING:
    from pathlib import Path

    from cellsection.templates.content import Entry

CHECK_ROWS = range(CHECKS + 3, CHECKS + 11)  # on the sheet Ledger
PLATE: Entry = {"part": "plate", "shape": "rectangle", "b": 200, "h": 20}


def plate(**changes: float | str) -> Entry:
    return {**PLATE, **changes}


def by_hand(path: Path) -> list[object]:
    """How the hand ledger works out each row of the table: hand, ledger or blank."""
    met = values(path)
    return [met["Ledger", f"N{HAND_TOP + row}"] for row in range(PARTS)]


def test_blank_rows_between_parts_are_skipped(tmp_path: Path) -> None:
    parts = [plate(y=10), None, None, plate(y=30, part="upper"), None, plate(y=50, part="third")]
    out = filled(tmp_path / "gaps.xlsx", parts)
    report = check_book(out)
    assert report.verdict is Verdict.HOLDS, report.findings
    met = values(out)
    assert met["Ledger", "B8"] == "plate"
    assert met["Ledger", "B10"] == "third"
    assert met["Ledger", "B11"] == ""
    assert met["Workings", "B5"] == 3


def test_a_full_table_holds(tmp_path: Path) -> None:
    parts = [plate(y=20 * row, part=f"plate {row}") for row in range(PARTS)]
    report = check_book(filled(tmp_path / "full.xlsx", parts))
    assert report.verdict is Verdict.HOLDS, report.findings


SIZES = {"b": 100, "h": 120, "tw": 6, "tf": 8, "t": 7, "r": 9, "d": 90}


def test_every_shape_on_offer_can_be_typed_in(tmp_path: Path) -> None:
    parts: list[Entry] = []
    for place, (word, dimensions) in enumerate(SHAPES.items()):
        sizes: Entry = {each: SIZES[each] for each in dimensions.replace(",", "").split()}
        parts.append({"part": word, "shape": word, "x": 200 * place, **sizes})
    out = filled(tmp_path / "shapes.xlsx", parts, gap=200)
    assert not wrong(out)
    report = check_book(out)
    assert report.verdict is Verdict.HOLDS, report.findings


@pytest.mark.parametrize("turn", [0, 180])
def test_the_hand_ledger_agrees_for_every_datum_and_half_turn(turn: int, tmp_path: Path) -> None:
    sized: Entry = {"part": "I", "shape": "I", "b": 100, "h": 120, "tw": 6, "tf": 8, "r": 9, "turn": turn}
    parts: list[Entry] = [
        {**sized, "datum": datum, "x": 300 * place, "y": 13 * place} for place, datum in enumerate(DATUMS)
    ]
    parts += [{"part": "round", "shape": "circle", "d": 50, "x": -200, "y": 7, "datum": "top left", "turn": -turn}]
    out = filled(tmp_path / "datums.xlsx", parts)
    assert by_hand(out)[: len(parts)] == ["hand"] * len(parts)
    met = values(out)
    assert all(met["Ledger", f"Q{row}"] is True for row in CHECK_ROWS)


def test_a_part_on_its_side_is_taken_from_the_ledger_by_hand_and_still_checked(tmp_path: Path) -> None:
    out = filled(tmp_path / "turned.xlsx", [plate(), plate(turn=90, x=110)])
    assert by_hand(out)[:3] == ["hand", "ledger", ""]
    assert check_book(out).verdict is Verdict.HOLDS


def test_weights_of_cut_outs_and_modular_ratios_reach_the_hand_ledger(tmp_path: Path) -> None:
    hole: Entry = {"part": "hole", "shape": "circle", "d": 10, "sign": -1, "x": 40}
    timber = plate(part="timber", y=20, n=0.05)
    out = filled(tmp_path / "weights.xlsx", [plate(), hole, timber])
    report = check_book(out)
    assert report.verdict is Verdict.HOLDS, report.findings
    assert by_hand(out)[:4] == ["hand", "hand", "hand", ""]


def test_an_overlap_is_shown_in_words_and_counted(tmp_path: Path) -> None:
    out = filled(tmp_path / "overlap.xlsx", [plate(), plate(part="doubled", y=10)])
    met = values(out)
    assert met["Workings", "B28"] == 1
    assert str(met["Girder", "K1"]).startswith("1 fault ")
    assert check_book(out).verdict is Verdict.DOES_NOT_HOLD
    assert not wrong(out)


def test_an_entry_that_cannot_be_read_is_said_in_words_on_top(tmp_path: Path) -> None:
    out = filled(tmp_path / "slip.xlsx", [plate(r=5)])
    assert values(out)["Girder", "K1"] == "an entry cannot be read"
    assert any("row 2, column r [mm]" in reason for _, _, reason in wrong(out))


def test_inches_in_the_headers_reach_the_results(tmp_path: Path) -> None:
    inches = {column: text.replace("mm", "in") for column, text in COLUMNS.items()}
    out = filled(tmp_path / "inches.xlsx", [plate(b=8, h=0.5)], inches)
    assert check_book(out).verdict is Verdict.HOLDS
    assert values(out)["Girder", "E29"] == "in²"
