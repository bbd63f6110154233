"""Data tables and MULTIPLE.OPERATIONS: what a cell would come to if others held other values.

The deflection of a beam over two inputs is the example; each expected value is the formula worked in Python. Which of
the input cells takes the headings above, and which those at the left, was seen in how LibreOffice 7.4 reads the same
file (it writes MULTIPLE.OPERATIONS into its .ods).
"""

from __future__ import annotations

from pathlib import Path

from cellsection.workbook.results import Status
from tests.workbook.small import results

BEAM = {"A1": 6.0, "A2": 12.0, "A3": "=A1*A1*A2/8", "A4": "=A3*2"}  # span, load, moment
SPANS, LOADS = (4.0, 5.0, 8.0), (10.0, 20.0)


def table(ref: str, attributes: str) -> str:
    return f'<f t="dataTable" ref="{ref}" {attributes}/>'


def test_a_table_over_two_inputs_asks_for_the_corner(tmp_path: Path) -> None:
    cells = {
        **BEAM,
        "C1": "=A3", "D1": 4.0, "E1": 5.0, "F1": 8.0, "C2": 10.0, "C3": 20.0,
        "D2": table("D2:F3", 'dt2D="1" dtr="1" r1="A1" r2="A2"'), "H1": "=SUM(D2:F3)",
    }  # fmt: skip
    found = results(tmp_path, cells)
    expected = [[span * span * load / 8 for span in SPANS] for load in LOADS]
    assert [[found[f"{c}{r}"] for c in "DEF"] for r in (2, 3)] == expected
    assert found["H1"] == sum(map(sum, expected))
    assert found["A3"] == 6 * 6 * 12 / 8  # the book itself is as before
    assert found.cells["E3"].formula == "{=TABLE(A1,A2)}"


def test_a_column_of_inputs_serves_every_formula_above(tmp_path: Path) -> None:
    cells = {**BEAM, "C2": 4.0, "C3": 5.0, "D1": "=A3", "E1": "=A4", "D2": table("D2:E3", 'r1="A1"')}
    found = results(tmp_path, cells)
    assert [[found[f"{c}{r}"] for c in "DE"] for r in (2, 3)] == [[24.0, 48.0], [37.5, 75.0]]


def test_a_row_of_inputs_serves_every_formula_at_its_left(tmp_path: Path) -> None:
    cells = {**BEAM, "D1": 10.0, "E1": 20.0, "C2": "=A3", "C3": "=A4", "D2": table("D2:E3", 'dtr="1" r1="A2"')}
    found = results(tmp_path, cells)
    assert [[found[f"{c}{r}"] for c in "DE"] for r in (2, 3)] == [[45.0, 90.0], [90.0, 180.0]]


def test_multiple_operations_asks_the_same(tmp_path: Path) -> None:
    cells = {
        **BEAM,
        "C1": 4.0,
        "C2": 10.0,
        "C3": "=MULTIPLE.OPERATIONS(A3,A1,C1)",
        "C4": "=MULTIPLE.OPERATIONS(A4,A1,C1,A2,C2)",
    }
    found = results(tmp_path, cells)
    assert (found["C3"], found["C4"]) == (24.0, 40.0)


def test_a_table_of_what_is_not_supported_is_not_verified(tmp_path: Path) -> None:
    cells = {**BEAM, "A3": "=ODDITY(A1)", "C2": 4.0, "D1": "=A3", "D2": table("D2:D2", 'r1="A1"')}
    found = results(tmp_path, cells)
    assert found.cells["D2"].status is Status.NOT_VERIFIED
    assert "ODDITY" in found.cells["D2"].reason


def test_a_table_without_an_input_cell_and_a_table_of_a_table_are_reported(tmp_path: Path) -> None:
    lost = results(tmp_path, {**BEAM, "C2": 4.0, "D1": "=A3", "D2": table("D2:D2", 'del1="1"')})
    assert lost.cells["D2"].reason == "data table without an input cell"
    cells = {
        **BEAM, "C2": 4.0, "D1": "=A3", "D2": table("D2:D2", 'r1="A1"'),
        "F2": 3.0, "G1": "=D2", "G2": table("G2:G2", 'r1="A2"'),
    }  # fmt: skip
    nested = results(tmp_path, cells)
    assert nested["D2"] == 24.0
    assert nested.cells["G2"].status in (Status.NOT_VERIFIED, Status.UNSUPPORTED)
    assert "a data table that depends on another one" in nested.cells["G2"].reason


def test_a_random_number_in_a_table_makes_it_volatile(tmp_path: Path) -> None:
    cells = {**BEAM, "A3": "=A1*RAND()", "C2": 4.0, "D1": "=A3", "D2": table("D2:D2", 'r1="A1"')}
    assert results(tmp_path, cells).cells["D2"].status is Status.VOLATILE


def test_tables_reach_over_sheets_and_leave_large_areas_read_before_as_they_were(tmp_path: Path) -> None:
    far = {f"A{row}": f"=S!A1+{row}" for row in range(1, 101)}
    cells = {"A1": 1.0, "B1": "=SUM(T!A1:A100)", "C2": 2.0, "D1": "=B1", "D2": table("D2:D2", 'r1="A1"'), "E1": "=B1"}
    found = results(tmp_path, cells, others={"T": far})
    total = sum(range(1, 101))
    assert (found["D2"], found["B1"], found["E1"]) == (total + 200.0, total + 100.0, total + 100.0)
