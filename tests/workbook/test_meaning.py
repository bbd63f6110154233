"""What a formula must not be mistaken for, and what happens at the edges; expected values are worked out by hand."""

from __future__ import annotations

from collections.abc import Callable, Mapping

import pytest

from cellsection.workbook.addresses import read_ref
from cellsection.workbook.book import Book, Formula, Limits, Sheet, Table
from cellsection.workbook.recalculate import recalculated
from cellsection.workbook.relative import Pattern, relative_key
from cellsection.workbook.results import FormulaCell, Status
from cellsection.workbook.values import ErrorValue, Scalar

Cells = Mapping[str, Scalar]


def sheet(name: str, cells: Cells, arrays: Mapping[str, str], dynamic: tuple[str, ...]) -> Sheet:
    made = Sheet(name)
    for address, content in cells.items():
        bounds = read_ref(address)
        assert bounds is not None
        place = bounds[:2]
        if isinstance(content, str) and content.startswith("="):
            filled = address in arrays or address in dynamic
            area = read_ref(arrays.get(address, address)) if filled else None
            kind = "array" if filled else "cell"
            made.formulas[place] = Formula(content[1:], *place, kind, area, address in dynamic)  # type: ignore[arg-type]
        else:
            made.values[place] = content
    return made


def calculated(
    cells: Cells,
    *,
    names: Mapping[str, str] | None = None,
    tables: tuple[Table, ...] = (),
    others: Mapping[str, Cells] | None = None,
    arrays: Mapping[str, str] | None = None,
    dynamic: tuple[str, ...] = (),
    resolve: Callable[[str], Callable[..., object] | None] | None = None,
    limits: Limits | None = None,
) -> dict[str, FormulaCell]:
    """The formula cells of sheet S by address, and those of other sheets by sheet and address."""
    sheets = [sheet(name, each, arrays or {}, dynamic) for name, each in {"S": cells, **(others or {})}.items()]
    book = Book(
        "book", "xlsx", sheets, {("", name.upper()): Formula(text, 1, 1) for name, text in (names or {}).items()}
    )
    book.tables = {table.name.upper(): table for table in tables}
    found = recalculated(book, resolve, limits).cells
    return {each.address if each.sheet == "S" else f"{each.sheet}!{each.address}": each for each in found}


def values(found: dict[str, FormulaCell]) -> dict[str, Scalar]:
    return {key: cell.value.code if isinstance(cell.value, ErrorValue) else cell.value for key, cell in found.items()}


# Two formulas that look alike after their references are made relative, and are not


def test_columns_of_a_table_that_are_named_like_cells_stay_apart() -> None:
    cells: Cells = {"A1": "A1", "B1": "A2", "A2": 5.0, "B2": 7.0, "D2": "=SUM(T[A1])", "D3": "=SUM(T[A2])"}
    found = calculated(cells, tables=(Table("T", "S", (1, 1, 2, 2), ("A1", "A2")),))
    assert values(found) == {"D2": 5.0, "D3": 7.0}


def test_columns_of_the_own_table_are_those_of_the_table_the_formula_stands_in() -> None:
    cells: Cells = {"A1": "x", "A2": 5.0, "B1": "f", "B2": "=[@x]", "A4": "x", "A5": 7.0, "B4": "f", "B5": "=[@x]"}
    tables = (Table("T", "S", (1, 1, 2, 2), ("x", "f")), Table("U", "S", (4, 1, 5, 2), ("x", "f")))
    assert values(calculated(cells, tables=tables)) == {"B2": 5.0, "B5": 7.0}


def test_names_that_would_be_cells_beyond_the_last_column_stay_apart() -> None:
    assert values(calculated({"B1": "=ZZZ1", "B2": "=ZZZ2"}, names={"ZZZ1": "1", "ZZZ2": "2"})) == {
        "B1": 1.0,
        "B2": 2.0,
    }


def test_sheets_that_are_named_like_cells_stay_apart() -> None:
    others: dict[str, Cells] = {"Tab1": {"A1": 1.0}, "Tab2": {"A1": 10.0}, "Tab3": {"A1": 100.0}}
    found = calculated({"A1": "=SUM(Tab1:Tab2!$A$1)", "A2": "=SUM(Tab2:Tab3!$A$1)"}, others=others)
    assert values(found) == {"A1": 11.0, "A2": 110.0}


@pytest.mark.parametrize(
    ("one", "other", "alike"),
    [
        (("A:C", 1, 1), ("B:D", 1, 2), True),
        (("A:C", 1, 1), ("A:C", 1, 2), False),
        (("3:7", 1, 1), ("4:8", 2, 1), True),
        (("3:7", 1, 1), ("3:7", 2, 1), False),
        (("$3:$7", 1, 1), ("$3:$7", 2, 1), True),
        (("$A1+A$1", 1, 1), ("$A2+A$1", 2, 1), True),
        (("A$1", 1, 1), ("A$1", 1, 2), False),
        (("SUM(3)", 1, 1), ("SUM(4)", 2, 1), False),
        (("[1]S!A1", 1, 1), ("[2]S!A2", 2, 1), False),
        (("A1!B1", 1, 1), ("A2!B2", 2, 1), False),
    ],
)
def test_formulas_share_a_form_only_where_they_mean_the_same(
    one: tuple[str, int, int], other: tuple[str, int, int], alike: bool
) -> None:
    assert (relative_key(*one, "excel") == relative_key(*other, "excel")) is alike


def test_a_pattern_tells_how_a_formula_reads_in_another_row() -> None:
    text = 'SUM(A2:B$1)*5%+$C3&"A2%"'
    pattern = Pattern(text, 2, 4, "excel")
    assert pattern.key == relative_key(text, 2, 4, "excel")
    assert pattern.text_in(2) == text
    assert pattern.text_in(12) == 'SUM(A12:B$1)*5%+$C13&"A2%"'


# Arrays


def test_choices_over_arrays_are_made_element_by_element() -> None:
    cells: Cells = {
        "A1": 1.0, "A2": 2.0, "A3": 1.0, "B1": 10.0, "B2": 20.0, "B3": 30.0, "C1": -1.0, "C2": -2.0, "C3": -3.0,
        "E1": "=SUM(CHOOSE(A1:A3,B1:B3,C1:C3))", "F1": "=SUM(SWITCH(A1:A3,1,B1:B3,C1:C3))",
        "G1": "=SUM(IFS(A1:A3=1,B1:B3,TRUE,C1:C3))", "H1": "=SUM(IF(A1:A3=1,B1:B3,C1:C3))",
    }  # fmt: skip
    found = calculated(cells, arrays={address: address for address in ("E1", "F1", "G1", "H1")})
    assert values(found) == dict.fromkeys(("E1", "F1", "G1", "H1"), 38.0)  # 10 - 2 + 30


def test_a_result_does_not_spill_over_what_stands_in_its_way() -> None:
    found = calculated({"A1": "=SEQUENCE(3)", "A2": 99.0, "B1": "=A2"}, dynamic=("A1",))
    assert values(found) == {"A1": "#SPILL!", "B1": 99.0}


def test_a_result_larger_than_the_file_says_is_seen_by_what_was_read_before() -> None:
    found = calculated({"A1": "=SUM(C1:C9)", "C1": "=SEQUENCE(4)", "D1": "=SUM(C1#)"}, dynamic=("C1",))
    assert values(found) == {"A1": 10.0, "D1": 10.0, "C1": 1.0, "C2": 2.0, "C3": 3.0, "C4": 4.0}


def test_whole_columns_are_worked_through_in_full() -> None:
    assert values(calculated({"A1": 1.0, "A2": 2.0, "D1": '=SUMPRODUCT(--(A:A=""))'})) == {"D1": 1_048_574.0}


# References


def test_what_several_areas_share_with_another() -> None:
    assert values(calculated({"A1": 1.0, "A2": 2.0, "A3": 4.0, "B1": "=SUM((A1:A2,A3:A3) A2:A3)"})) == {"B1": 6.0}


def test_a_name_relative_to_its_cell_goes_round_the_edge_of_the_sheet() -> None:
    # A name for "the cell to the left", made in A1, is kept in the file as the last column: memory of the application.
    assert values(calculated({"A5": 3.0, "B5": "=left1"}, names={"left1": "S!XFD1"})) == {"B5": 3.0}


def test_rows_that_a_table_does_not_have_are_errors() -> None:
    cells: Cells = {
        "A1": "x",
        "A2": 5.0,
        "C1": "=SUM(T[[#Totals],[x]])",
        "C2": "=T[[#This Row],[x]]",
        "C9": "=T[[#This Row],[x]]",
    }
    found = calculated(cells, tables=(Table("T", "S", (1, 1, 2, 1), ("x",)),))
    assert values(found) == {"C1": "#REF!", "C2": 5.0, "C9": "#VALUE!"}


# Limits


def test_text_longer_than_a_cell_holds_is_an_error() -> None:
    assert values(calculated({"A1": '=REPT("x",30000)&REPT("y",30000)'})) == {"A1": "#VALUE!"}


def test_long_sums_need_no_deep_stack() -> None:
    assert values(calculated({"A1": "=" + "+".join(["1"] * 4000)})) == {"A1": 4000.0}


def test_what_is_not_reached_in_time_keeps_its_saved_value_and_says_so() -> None:
    found = calculated({"A1": "=SUM(MAP(SEQUENCE(9),LAMBDA(x,x)))", "A2": "=1"}, limits=Limits(seconds=-1.0))
    assert [found[address].status for address in ("A1", "A2")] == [Status.NOT_VERIFIED] * 2
    assert "time limit" in found["A1"].reason


def test_a_name_that_calls_itself_in_a_lambda_is_followed() -> None:
    assert values(calculated({"A1": "=fact(5)"}, names={"fact": "LAMBDA(n,IF(n<2,1,n*fact(n-1)))"})) == {"A1": 120.0}


def test_a_name_that_calls_itself_without_end_is_a_finding() -> None:
    cell = calculated({"A1": "=ever(5)", "A2": "=1"}, names={"ever": "LAMBDA(n,ever(n+1))"})["A1"]
    assert cell.status is Status.UNSUPPORTED
    assert "deep" in cell.reason


def test_reducing_without_a_start_begins_with_the_first_element() -> None:
    found = calculated({"A1": "=REDUCE(,{2,3,4},LAMBDA(a,b,a*b))", "A2": "=SUM(SCAN(,{2,3,4},LAMBDA(a,b,a*b)))"})
    assert values(found) == {"A1": 24.0, "A2": 32.0}  # 2 + 6 + 24


# Faults of functions


def test_several_areas_are_no_argument_for_a_host_function() -> None:
    found = calculated({"A1": 1.0, "A2": 2.0, "B1": "=CS_X((A1,A2))"}, resolve=lambda _: lambda *_: 1.0)
    assert values(found) == {"B1": "#VALUE!"}


def test_a_fault_of_the_program_stays_in_its_cell() -> None:
    found = calculated({"A1": "=1+LAMBDA(x,x)", "A2": "=A1", "A3": "=2"})
    assert [found[address].status for address in ("A1", "A2")] == [Status.UNSUPPORTED, Status.NOT_VERIFIED]
    assert found["A3"].value == 2.0


# Functions as arguments, parameters left out, references by number


def test_a_parameter_that_a_call_leaves_out_says_so() -> None:
    cells: Cells = {
        "A1": "=_xlfn.LAMBDA(_xlpm.x,_xlop.y,IF(_xlfn.ISOMITTED(_xlop.y),_xlpm.x,_xlpm.x+_xlop.y))(3)",
        "A2": "=_xlfn.LAMBDA(_xlpm.x,_xlop.y,IF(_xlfn.ISOMITTED(_xlop.y),_xlpm.x,_xlpm.x+_xlop.y))(3,4)",
        "A3": "=_xlfn.LAMBDA(_xlpm.x,_xlop.y,IF(_xlfn.ISOMITTED(_xlop.y),_xlpm.x,_xlpm.x+_xlop.y))(3,)",
    }
    assert values(calculated(cells)) == {"A1": 3.0, "A2": 7.0, "A3": 3.0}


def test_a_function_of_the_application_is_handed_over_by_its_name() -> None:
    cells: Cells = {"A1": 1.0, "A2": 4.0, "B1": 2.0, "B2": 3.0, "C1": "=SUM(BYROW(A1:B2,_xleta.MAX))"}
    assert values(calculated({**cells, "C2": "=SUM(MAP(A1:A2,_xleta.SQRT))"})) == {"C1": 6.0, "C2": 3.0}


def test_indirect_reads_rows_and_columns_by_number() -> None:
    cells: Cells = {
        "A1": 1.0, "A2": 2.0, "B1": 10.0, "B2": 20.0,
        "D2": '=INDIRECT("R2C2",FALSE)', "E2": '=INDIRECT("RC[-3]",FALSE)',
        "F2": '=SUM(INDIRECT("R[-1]C1:R2C2",FALSE))',
        "G2": '=SUM(INDIRECT("S!C1",FALSE))', "H2": '=INDIRECT("R[-5]C1",FALSE)',
    }  # fmt: skip
    assert values(calculated(cells)) == {"D2": 20.0, "E2": 20.0, "F2": 33.0, "G2": 3.0, "H2": "#REF!"}
