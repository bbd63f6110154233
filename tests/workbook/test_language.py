"""What a formula means: references, operators, arrays, names, and what is not in the language."""

from __future__ import annotations

from pathlib import Path

import pytest

from cellsection.errors import FormulaError
from cellsection.workbook.book import Book, Formula, Sheet
from cellsection.workbook.grammar import parsed
from cellsection.workbook.nodes import Binary, Call, Join, Missing, Name, Reference, Structured, Unary
from cellsection.workbook.recalculate import recalculated
from cellsection.workbook.relative import moved_text, relative_key
from cellsection.workbook.results import Status
from tests.workbook.small import results

COLUMN = {"A1": 1.0, "A2": 2.0, "A3": 3.0}


def test_a_sign_binds_tighter_than_a_power() -> None:
    tree = parsed("-2^2")
    assert isinstance(tree, Binary)
    assert isinstance(tree.left, Unary)


def test_references_are_kept_relative_to_their_cell() -> None:
    assert parsed("B3", 2, 1) == parsed("C4", 3, 2)
    assert parsed("$B$3", 2, 1) == parsed("$B$3", 9, 9)
    assert parsed("B3", 2, 1) != parsed("B3", 3, 1)


@pytest.mark.parametrize(
    ("text", "kind"),
    [
        ("'Roof beam'!$A$1", Reference),
        ("A:A", Reference),
        ("3:7", Reference),
        ("Sheet1:Sheet3!B2", Reference),
        ("[1]Loads!A1", Reference),
        ("Parts[[#This Row],[area]]", Structured),
        ("Parts[@area]", Structured),
        ("(A1,B2)", Join),
        ("A1:B3 B2:C9", Join),
        ("INDEX(A1:A9,3):A5", Join),
        ("rate", Name),
        ("LOG10(3)", Call),
        ("[1]!CS_TOTALS(A1:B2)", Call),
    ],
)
def test_each_construct_is_read_as_what_it_is(text: str, kind: type) -> None:
    assert isinstance(parsed(text), kind)


def test_openformula_reads_into_the_same_tree() -> None:
    assert parsed("SUM([.A1:.B3];[$Loads.$C$1])", 4, 4, "openformula") == parsed("SUM(A1:B3,Loads!$C$1)", 4, 4)
    assert parsed("[.A1:.B2]![.B2:.C3]", 4, 4, "openformula") == parsed("A1:B2 B2:C3", 4, 4)
    assert parsed("{1;2|3;4}", language="openformula") == parsed("{1,2;3,4}")


@pytest.mark.parametrize(
    "name", ["_xlfn.CS_TOTALS", "_xll.CS_TOTALS", "_xldudf_CS_TOTALS", "cs_totals", "[1]!CS_TOTALS"]
)
def test_every_spelling_of_a_section_function_is_one_call(name: str) -> None:
    tree = parsed(f"{name}(A1:B2)")
    assert isinstance(tree, Call)
    assert tree.name == "CS_TOTALS"


def test_an_argument_left_empty_is_missing() -> None:
    tree = parsed("IF(A1,,2)")
    assert isinstance(tree, Call)
    assert isinstance(tree.arguments[1], Missing)


@pytest.mark.parametrize(
    "text", ["1+", "(1", "1)", "1 2", "SUM(1", '"open', "{1,2;3}", "A1 B1 +", "()", "*3", "=1", "1..2", "A1#B"]
)
def test_what_is_not_in_the_language_is_a_clean_finding(text: str) -> None:
    with pytest.raises(FormulaError):
        parsed(text)


def test_deep_nesting_ends_in_a_finding_and_not_in_a_crash() -> None:
    with pytest.raises(FormulaError, match="nest"):
        parsed("(" * 3000 + "1" + ")" * 3000)
    assert parsed("-" * 9000 + "1") in (parsed("--1"), parsed("1"))


def test_alike_formulas_have_one_relative_key_and_texts_are_left_alone() -> None:
    assert relative_key("B3*$C$1", 2, 1, "excel") == relative_key("B4*$C$1", 3, 1, "excel")
    assert relative_key('"B3"&B3', 2, 1, "excel") != relative_key('"B4"&B4', 3, 1, "excel")
    assert relative_key("LOG10(B3)", 2, 1, "excel") != relative_key("LOG11(B4)", 3, 1, "excel")
    assert relative_key("[.B3]*2", 2, 1, "openformula") == relative_key("[.B4]*2", 3, 1, "openformula")


@pytest.mark.parametrize(
    ("one", "other", "language"),
    [
        ("SUM(T[Q1])", "SUM(T[Q2])", "excel"),  # columns of a table that read like cells
        ("T[[#This Row],[Q1]]", "T[[#This Row],[Q2]]", "excel"),
        ("XYZ1*2", "XYZ2*2", "excel"),  # beyond the last column XFD these are names
        ("'Q1'!A$1", "'Q2'!A$1", "excel"),
        ('IF(A$1="B1",1)', 'IF(A$1="B2",1)', "excel"),
        ("[@area]*2", "[@area]*2", "excel"),  # the table that the formula stands in
        ("SUM([.A:.A])", "SUM([.A:.A])", "openformula"),  # relative, and so another column elsewhere
        ("SUM([.2:.2])", "SUM([.2:.2])", "openformula"),
    ],
)
def test_formulas_that_differ_never_share_a_compiled_form(one: str, other: str, language: str) -> None:
    assert relative_key(one, 1, 1, language) != relative_key(other, 2, 2, language)


def test_quarters_of_a_table_and_names_beyond_the_last_column_are_kept_apart(tmp_path: Path) -> None:
    cells = {"A1": 1.0, "B1": 2.0, "C1": "=XYZ1*10", "C2": "=XYZ2*10"}
    found = results(tmp_path, cells, {"XYZ1": "S!$A$1", "XYZ2": "S!$B$1"})
    assert (found["C1"], found["C2"]) == (10.0, 20.0)


def test_a_shared_formula_is_shown_as_it_reads_in_its_own_cell() -> None:
    assert moved_text("A1*$B$2+LOG10(C3)", 2, 1, "excel") == "B3*$B$2+LOG10(D5)"
    assert moved_text("SUM(A:A)+'A1'!B2", 1, 1, "excel") == "SUM(B:B)+'A1'!C3"


def test_a_cell_outside_an_array_formula_takes_the_value_of_its_own_row(tmp_path: Path) -> None:
    found = results(tmp_path, {**COLUMN, "B2": "=A1:A3*10", "B5": "=A1:A3*10", "C1": "=SUM(A1:A3*2)"})
    assert found["B2"] == 20.0
    assert found["B5"] == "#VALUE!"


def test_an_array_formula_fills_its_area_and_pads_it(tmp_path: Path) -> None:
    found = results(tmp_path, {**COLUMN, "B1": "{=A1:A3*10}B1:B4", "C1": "{=7}C1:C2", "D1": "{={1,2}}D1:E2"})
    assert [found[f"B{k}"] for k in range(1, 5)] == [10.0, 20.0, 30.0, "#N/A"]
    assert [found["C1"], found["C2"]] == [7.0, 7.0]
    assert [found[a] for a in ("D1", "E1", "D2", "E2")] == [1.0, 2.0, 1.0, 2.0]


def test_an_array_argument_is_taken_whole_outside_array_formulas_too(tmp_path: Path) -> None:
    found = results(tmp_path, {**COLUMN, "B1": "=SUMPRODUCT(--(A1:A3>1))", "B2": "=SUM({1,2,3})"})
    assert found["B1"] == 2.0
    assert found["B2"] == 6.0


def test_unions_intersections_and_ranges_made_of_results(tmp_path: Path) -> None:
    found = results(
        tmp_path,
        {
            **COLUMN,
            "B1": "=SUM((A1,A3))",
            "B2": "=SUM(A1:A3 A2:C2)",
            "B3": "=SUM(A1 C1)",
            "B4": "=SUM(INDEX(A1:A3,2):A3)",
        },
    )
    assert [found[f"B{k}"] for k in range(1, 5)] == [4.0, 2.0, "#NULL!", 5.0]


def test_references_reach_over_sheets(tmp_path: Path) -> None:
    others = {"Wind load": {"A1": 5.0}, "Snow": {"A1": 7.0}}
    found = results(
        tmp_path, {"A1": "='Wind load'!A1*2", "A2": "=SUM('Wind load:Snow'!A1)", "A3": "=Gone!A1"}, None, others
    )
    assert found["A1"] == 10.0
    assert found["A2"] == 12.0
    assert "Gone" in found.cells["A3"].reason


def test_names_stand_for_cells_constants_and_formulas(tmp_path: Path) -> None:
    names = {"plates": "S!$A$1:$A$3", "gamma": "1.1", "doubled": "SUM(plates)*2", "loop": "loop+1"}
    cells = {**COLUMN, "B1": "=SUM(plates)*gamma", "B2": "=doubled", "B3": "=nowhere", "B4": "=loop"}
    found = results(tmp_path, cells, names)
    assert found["B1"] == pytest.approx(6.6)
    assert found["B2"] == 12.0
    assert found["B3"] == "#NAME?"
    assert "loop" in found.cells["B4"].reason


def test_a_name_of_one_cell_is_that_cell_inside_an_array_formula(tmp_path: Path) -> None:
    cells = {**COLUMN, "B1": 2.0, "C1": "{=INDEX(A1:A3,which,0)}C1:D1", "E1": "{=A1:A3*which}E1:E3"}
    found = results(tmp_path, cells, {"which": "S!$B$1"})
    assert [found["C1"], found["D1"]] == [2.0, 2.0]
    assert [found["E1"], found["E3"]] == [2.0, 6.0]


def test_let_and_lambda_bind_their_own_names(tmp_path: Path) -> None:
    found = results(
        tmp_path,
        {
            **COLUMN,
            "B1": "=_xlfn.LET(_xlpm.x,2,_xlpm.y,_xlpm.x+1,_xlpm.x*_xlpm.y)",
            "B2": "=_xlfn.LAMBDA(_xlpm.a,_xlpm.a^2)(5)",
            "B3": "=SUM(_xlfn.MAP(A1:A3,_xlfn.LAMBDA(_xlpm.v,_xlpm.v*10)))",
            "B4": "=area(3)",
            "B5": "=_xlfn.REDUCE(0,A1:A3,_xlfn.LAMBDA(_xlpm.s,_xlpm.v,_xlpm.s+_xlpm.v))",
        },
        {"area": "_xlfn.LAMBDA(_xlpm.d,PI()*_xlpm.d^2/4)"},
    )
    assert [found["B1"], found["B2"], found["B3"], found["B5"]] == [6.0, 25.0, 60.0, 6.0]
    assert found["B4"] == pytest.approx(7.0685834705770345)  # pi 9/4


def test_the_last_subtraction_snaps_to_zero_but_not_inside_brackets(tmp_path: Path) -> None:
    found = results(tmp_path, {"A1": "=0.1+0.2-0.3", "A2": "=(0.1+0.2-0.3)", "A3": "=0.1+0.2=0.3"})
    assert found["A1"] == 0.0
    assert found["A2"] == 5.551115123125783e-17  # the double that is left over, IEEE 754
    assert found["A3"] is True


def test_no_result_is_ever_infinite_or_not_a_number(tmp_path: Path) -> None:
    found = results(
        tmp_path, {"A1": "=1E308*10", "A2": "=10^400", "A3": "=0^0", "A4": "=EXP(1000)", "A5": "=-1^0.5", "A6": "=0^-1"}
    )
    assert [found[f"A{k}"] for k in range(1, 7)] == ["#NUM!", "#NUM!", "#NUM!", "#NUM!", "#NUM!", "#DIV/0!"]


# Idioms of ordinary cells, without an array formula; each value is worked out by hand from the two columns.
STEEL = {"A1": "S355", "A2": "S275", "A3": "S355", "A4": "S355", "B1": 12.0, "B2": 16.0, "B3": 20.0, "B4": 25.0}


@pytest.mark.parametrize(
    ("formula", "value"),
    [
        ("SUM({1,2,3}*2)", 12.0),
        ("MAX({1,2,3}*{1;2})", 6.0),
        ('SUM(SUMIF(A1:A4,{"S355","S275"},B1:B4))', 73.0),
        ('SUM(COUNTIF(A1:A4,{"S355","S275"}))', 4.0),
        ("SUM(LARGE(B1:B4,{1,2}))", 45.0),
        ('VLOOKUP("S275",CHOOSE({1,2},A1:A4,B1:B4),2,0)', 16.0),
        ("VLOOKUP(16,IF({1,0},B1:B4,A1:A4),2,0)", "S275"),
        ('LOOKUP(2,1/(A1:A4="S275"),B1:B4)', 16.0),
        ("MATCH(TRUE,INDEX(B1:B4>12,0),0)", 2.0),
        ('MATCH(1,INDEX((A1:A4="S355")*(B1:B4>12),0),0)', 3.0),
        ("{1,2}+1", 2.0),
    ],
)
def test_arrays_written_out_are_arrays_in_ordinary_cells_too(tmp_path: Path, formula: str, value: object) -> None:
    assert results(tmp_path, {**STEEL, "D7": "=" + formula})["D7"] == value


@pytest.mark.parametrize(
    ("formula", "value"),
    [("SUM(SWITCH(A1:A3,1,B1:B3,0))", 5.0), ("SUM(IFS(A1:A3>0,B1:B3))", 18.0), ("SUM(CHOOSE(A1:A3,B1:B3,1,2))", 8.0)],
)
def test_a_choice_over_an_array_chooses_element_by_element(tmp_path: Path, formula: str, value: float) -> None:
    cells = {**COLUMN, "B1": 5.0, "B2": 6.0, "B3": 7.0, "C1": "{=" + formula + "}C1:C1"}
    assert results(tmp_path, cells)["C1"] == value


def test_a_union_is_no_range_for_a_host_function(tmp_path: Path) -> None:
    found = results(tmp_path, {"A1": 1.0, "B1": "=CS_X((A1,A2))", "B2": "=1+1"}, resolve=lambda _name: lambda *_: 1.0)
    assert (found["B1"], found["B2"]) == ("#VALUE!", 2.0)


def test_a_function_where_a_value_should_be_spoils_its_own_cell_only(tmp_path: Path) -> None:
    found = results(tmp_path, {"A1": "=1+_xlfn.LAMBDA(_xlpm.x,_xlpm.x)", "A2": "=1+1"})
    assert found.cells["A1"].status is Status.UNSUPPORTED
    assert found["A2"] == 2.0


def test_a_text_longer_than_a_cell_holds_is_an_error(tmp_path: Path) -> None:
    assert results(tmp_path, {"A1": '=REPT("a",32767)&"b"'})["A1"] == "#VALUE!"


def test_a_result_that_would_cover_an_occupied_cell_does_not_spill() -> None:
    sheet = Sheet("S", {(2, 1): 9.0})
    sheet.formulas[1, 1] = Formula("SEQUENCE(3)", 1, 1, kind="array", area=(1, 1, 1, 1), dynamic=True)
    (cell,) = recalculated(Book("book", "xlsx", [sheet])).cells
    assert str(cell.value) == "#SPILL!"
