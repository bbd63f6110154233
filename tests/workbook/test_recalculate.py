"""The order of calculation, and what is said of cells that cannot be calculated."""

from __future__ import annotations

from pathlib import Path

import pytest

from cellsection.errors import InputError
from cellsection.workbook.book import Limits
from cellsection.workbook.builtins import BUILTINS
from cellsection.workbook.results import Status
from cellsection.workbook.values import ErrorValue
from tests.workbook.small import results, saved


def test_a_chain_of_a_hundred_thousand_cells_needs_no_recursion(tmp_path: Path) -> None:
    n = 100_000
    cells: dict[str, float | str] = {f"A{k}": f"=A{k + 1}+1" for k in range(1, n)}  # each waits for the one below
    cells[f"A{n}"] = 1.0
    assert results(tmp_path, cells)["A1"] == float(n)


def test_a_circle_is_named_cell_by_cell_and_its_dependants_are_not_verified(tmp_path: Path) -> None:
    found = results(tmp_path, {"A1": "=B1+1", "B1": "=C1", "C1": "=A1", "D1": "=A1*2", "E1": "=1+1"})
    for address in ("A1", "B1", "C1"):
        assert found.cells[address].status is Status.CYCLE
        assert "S!A1 -> S!B1 -> S!C1 -> S!A1" in found.cells[address].reason
    assert found.cells["D1"].status is Status.NOT_VERIFIED
    assert found["E1"] == 2.0


def test_a_range_that_holds_its_own_cell_is_a_circle(tmp_path: Path) -> None:
    assert results(tmp_path, {"A1": 1.0, "A2": "=SUM(A1:A3)"}).cells["A2"].status is Status.CYCLE


def test_only_cells_that_are_really_asked_for_can_form_a_circle(tmp_path: Path) -> None:
    found = results(
        tmp_path, {"A1": "=IF(TRUE,5,B1)", "B1": "=A1+1", "C1": "=IFERROR(A1,C1)", "D1": "=CHOOSE(1,A1,D1)"}
    )
    assert [found["A1"], found["B1"], found["C1"], found["D1"]] == [5.0, 6.0, 5.0, 5.0]


def test_cells_met_while_calculating_are_calculated_first(tmp_path: Path) -> None:
    found = results(
        tmp_path, {"A1": "=OFFSET(A1,C1,0)", "A3": "=A4*2", "A4": "=3+1", "B1": '=INDIRECT("A"&C1+1)', "C1": "=1+1"}
    )
    assert found["A1"] == 8.0
    assert found["B1"] == 8.0


def test_an_unsupported_function_is_named_and_what_depends_on_it_keeps_its_saved_value(tmp_path: Path) -> None:
    found = results(
        tmp_path, {"A1": "<f>STOCKHISTORY(B1)</f><v>5</v>", "A2": "<f>A1*2</f><v>10</v>", "A3": "=A2+1", "A4": "=1+1"}
    )
    assert found.cells["A1"].status is Status.UNSUPPORTED
    assert "STOCKHISTORY" in found.cells["A1"].reason
    assert found.cells["A2"].status is Status.NOT_VERIFIED
    assert "S!A1" in found.cells["A2"].reason
    assert (found["A1"], found["A2"]) == (5.0, 10.0)
    assert found.cells["A3"].status is Status.NOT_VERIFIED
    assert found["A4"] == 2.0


def test_iferror_does_not_hide_an_unsupported_function(tmp_path: Path) -> None:
    assert results(tmp_path, {"A1": "=IFERROR(STOCKHISTORY(1),0)"}).cells["A1"].status is Status.UNSUPPORTED


@pytest.mark.parametrize("name", sorted(BUILTINS))
def test_a_builtin_taken_away_is_reported_and_never_guessed(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, name: str
) -> None:
    monkeypatch.delitem(BUILTINS, name)
    found = results(tmp_path, {"A1": f"<f>{name}(B1)</f><v>42</v>", "A2": "<f>A1+1</f><v>43</v>"})
    assert found.cells["A1"].status is Status.UNSUPPORTED
    assert name in found.cells["A1"].reason
    assert found.cells["A2"].status is Status.NOT_VERIFIED
    assert (found["A1"], found["A2"]) == (42.0, 43.0)


def test_a_wrong_number_of_arguments_is_a_finding(tmp_path: Path) -> None:
    cell = results(tmp_path, {"A1": "=MOD(1)"}).cells["A1"]
    assert cell.status is Status.UNSUPPORTED
    assert "MOD" in cell.reason


def test_volatile_results_and_their_dependants_are_marked(tmp_path: Path) -> None:
    found = results(tmp_path, {"A1": "=TODAY()", "A2": "=A1+1", "A3": "=YEAR(A2)>2000", "A4": "=1"})
    assert [found.cells[f"A{k}"].status for k in (1, 2, 3)] == [Status.VOLATILE] * 3
    assert found.cells["A4"].status is Status.RECALCULATED


def test_shared_formulas_move_with_their_cells_and_a_lost_master_is_reported(tmp_path: Path) -> None:
    found = results(
        tmp_path,
        {
            "A1": 1.0, "A2": 2.0, "A3": 3.0,
            "B1": '<f t="shared" ref="B1:B3" si="0">A1*$A$3</f>', "B2": '<f t="shared" si="0"/>',
            "C1": '<f t="shared" si="9"/><v>7</v>',
        },
    )  # fmt: skip
    assert (found["B1"], found["B2"]) == (3.0, 6.0)
    assert found.cells["B2"].formula == "=A2*$A$3"
    assert found.cells["C1"].status is Status.UNSUPPORTED


def test_a_host_function_gets_plain_values_and_its_refusal_travels_with_its_cause(tmp_path: Path) -> None:
    met: list[tuple[object, ...]] = []

    def weighed(*arguments: object) -> object:
        met.append(arguments)
        if arguments[1] == 0.0:
            raise InputError("thickness 0 is not positive", remedy="Enter the plate thickness", row=2, column="t")
        return ((1.0, "kg"), (2.0, None))

    cells = {
        "A1": 4.0, "A2": "web", "B2": True,
        "C1": "{=CS_WEIGHT(A1:B2,1)}C1:D2", "E1": "=CS_WEIGHT(A1:B2,0)", "E2": "=E1*2", "E3": "=CS_WEIGHT(1/0,1)",
    }  # fmt: skip
    found = results(tmp_path, cells, resolve=lambda name: weighed if name == "CS_WEIGHT" else None)
    assert met[0] == (((4.0, None), ("web", True)), 1.0)
    assert [found[a] for a in ("C1", "D1", "C2", "D2")] == [1.0, "kg", 2.0, 0.0]
    error = found.cells["E2"].value
    assert isinstance(error, ErrorValue)
    assert (error.code, error.origin) == ("#VALUE!", "S!E1")
    assert "row 2, column t: thickness 0 is not positive. Enter the plate thickness." in error.message
    assert found["E3"] == "#DIV/0!"
    assert len(met) == 2  # an error among the arguments is passed on without a call


def test_a_host_function_that_fails_is_a_finding_and_the_rest_of_the_book_is_calculated(tmp_path: Path) -> None:
    def broken(*arguments: object) -> object:
        raise ZeroDivisionError("division by zero")

    found = results(tmp_path, {"A1": "=CS_X(1)", "A2": "=1+1"}, resolve=lambda _name: broken)
    assert found.cells["A1"].status is Status.UNSUPPORTED
    assert "CS_X fails at this input (ZeroDivisionError: division by zero)" in found.cells["A1"].reason
    assert found["A2"] == 2.0


def test_all_that_a_formula_gave_is_kept_where_its_cell_shows_one_value(tmp_path: Path) -> None:
    found = results(tmp_path, {"A1": "={1,2;3,4}", "B1": "=7"})
    assert found["A1"] == 1.0
    assert found.cells["A1"].whole == ((1.0, 2.0), (3.0, 4.0))
    assert found.cells["B1"].whole is None


def test_a_blank_result_reads_as_zero(tmp_path: Path) -> None:
    assert results(tmp_path, {"A1": "=B9"})["A1"] == 0.0


def test_whole_columns_are_clipped_to_what_is_used(tmp_path: Path) -> None:
    found = results(tmp_path, {"A1": 1.0, "A3": 2.0, "C1": "=SUM(A:A)", "C2": "=COUNTBLANK(A:A)", "C3": "=ROWS(A:A)"})
    assert [found["C1"], found["C2"], found["C3"]] == [3.0, 1_048_574.0, 1_048_576.0]


def test_caps_are_findings(tmp_path: Path) -> None:
    limits = Limits(array_cells=1000, formula_length=50)
    found = results(
        tmp_path,
        {"A1": "=SUM(" + "1+" * 60 + "1)", "A2": "=MUNIT(4)", "Z9999": 1.0, "A3": "=SUM(B1:Z9999)"},
        limits=limits,
    )
    assert found.cells["A1"].status is Status.UNSUPPORTED
    assert found.cells["A3"].status is Status.UNSUPPORTED


def test_the_book_itself_is_never_changed(tmp_path: Path) -> None:
    path = saved(tmp_path, {"S": {"A1": 1.0, "A2": "=A1"}})
    before = path.read_bytes()
    results(tmp_path, {"A1": 1.0, "A2": "=A1"})
    assert path.read_bytes() == before
