"""What a cell hands over is read alike by all functions: number, text, blank, one cell as a table, row and column."""

from __future__ import annotations

from math import inf, nan
from typing import Any

import pytest

from cellsection.catalogue import CATALOGUE
from cellsection.errors import InputError

CIRCLE = (("part", "shape", "d [mm]"), ("bar", "circle", 30.0))
AREA = 706.8583470577034  # 225·π
BLOCK_FUNCTIONS = [
    name for name, function in CATALOGUE.items() if function.arguments[:1] and function.arguments[0].name == "parts"
]
# A call that works, each argument given.
FULL: dict[str, tuple[Any, ...]] = {
    "CS_PARTS": ("circle", ((30.0,),), ((5.0,),), 0.0, 1.0, 1.0, "centroid"),
    "CS_POLYGON": (((0.0, 0.0), (9.0, 0.0), (0.0, 9.0)), 1.0, 1.0),
    "CS_MOVED": (CIRCLE, 1.0, 2.0, 30.0, 4.0, 5.0),
    "CS_MIRRORED": (CIRCLE, "x", 5.0),
    "CS_JOINED": (CIRCLE, CIRCLE),
    "CS_TOTALS": (CIRCLE, "A"),
    "CS_LEDGER": (CIRCLE,),
    "CS_ABOUT": (CIRCLE, 1.0, 2.0, 30.0),
    "CS_PRINCIPAL": (CIRCLE, "I1"),
    "CS_FIBRES": (CIRCLE, 30.0),
    "CS_FAULTS": (CIRCLE, 1.0),
    "CS_OUTLINE": (CIRCLE, 1.0, 24.0),
    "CS_AGREES": (1.0, 1.0, 0.1),
    "CS_EDITION": (),
}
CASES = [(name, k) for name, call in FULL.items() for k in range(len(call)) if name != "CS_JOINED" or k == 0]


def ids(case: object) -> str:
    return f"{case[0]}-{CATALOGUE[case[0]].arguments[case[1]].name}" if isinstance(case, tuple) else str(case)


def replaced(name: str, k: int, value: object) -> tuple[Any, ...]:
    call = list(FULL[name])
    call[k] = value
    return tuple(call)


def call(name: str, *raw: Any) -> Any:
    return CATALOGUE[name].call(*raw)


def test_every_function_has_a_full_call_here() -> None:
    assert {name: len(made) for name, made in FULL.items()} == {
        name: len(function.arguments) + (name == "CS_JOINED") for name, function in CATALOGUE.items()
    }
    for name, made in FULL.items():
        call(name, *made)


@pytest.mark.parametrize("blank", [None, ""])
@pytest.mark.parametrize("case", CASES, ids=ids)
def test_a_blank_is_a_default_or_is_missed_by_name(case: tuple[str, int], blank: object) -> None:
    name, k = case
    argument = CATALOGUE[name].arguments[k]
    if argument.optional:
        call(name, *replaced(name, k, blank))
        return
    with pytest.raises(InputError, match="blank") as caught:
        call(name, *replaced(name, k, blank))
    assert caught.value.argument.split(" ")[0] == argument.name


@pytest.mark.parametrize("case", CASES, ids=ids)
def test_arguments_left_out_at_the_end_are_defaults_or_missed_by_name(case: tuple[str, int]) -> None:
    name, k = case
    left = FULL[name][:k]
    first = next((a for a in CATALOGUE[name].arguments[k:] if not a.optional), None)
    if first is None:
        call(name, *left)
        return
    with pytest.raises(InputError, match=r"missing|blank") as caught:
        call(name, *left)
    assert caught.value.argument.split(" ")[0] == first.name


@pytest.mark.parametrize("name", [name for name in FULL if name != "CS_JOINED"])
def test_one_argument_too_many_is_refused(name: str) -> None:
    with pytest.raises(InputError, match=rf"it takes {len(FULL[name])}\. Write {name}\("):
        call(name, *FULL[name], 1.0)


@pytest.mark.parametrize("case", CASES, ids=ids)
def test_one_cell_may_come_as_a_table_of_one(case: tuple[str, int]) -> None:
    name, k = case
    value = FULL[name][k]
    if not isinstance(value, tuple):
        assert call(name, *replaced(name, k, ((value,),))) == call(name, *FULL[name])


@pytest.mark.parametrize("bad", [nan, inf, 1e300, "7", True], ids=str)
@pytest.mark.parametrize(
    "case", [case for case in CASES if CATALOGUE[case[0]].arguments[case[1]].kind == "number"], ids=ids
)
def test_a_number_must_be_one_to_compute_with(case: tuple[str, int], bad: object) -> None:
    name, k = case
    with pytest.raises(InputError) as caught:
        call(name, *replaced(name, k, bad))
    assert caught.value.argument == CATALOGUE[name].arguments[k].name
    assert len(str(caught.value).splitlines()) == 1


@pytest.mark.parametrize(
    "case", [case for case in CASES if CATALOGUE[case[0]].arguments[case[1]].kind in ("number", "word")], ids=ids
)
def test_a_range_is_no_single_value(case: tuple[str, int]) -> None:
    name, k = case
    with pytest.raises(InputError) as caught:
        call(name, *replaced(name, k, ((1.0,), (2.0,))))
    assert caught.value.argument == CATALOGUE[name].arguments[k].name
    assert len(str(caught.value).splitlines()) == 1


@pytest.mark.parametrize("name", BLOCK_FUNCTIONS)
@pytest.mark.parametrize("block", [3.0, "circle", True, ((3.0,),), (("shape", "d"),)], ids=str)
def test_what_is_no_parts_block_is_refused_by_every_function(name: str, block: object) -> None:
    with pytest.raises(InputError) as caught:
        call(name, *replaced(name, 0, block))
    assert caught.value.argument.startswith("parts")


def test_a_symbol_gives_a_number_and_a_range_of_them_its_own_shape() -> None:
    assert call("CS_TOTALS", CIRCLE, "A") == pytest.approx(AREA, rel=1e-12)
    assert call("CS_TOTALS", CIRCLE, (("a",), ("X",))) == ((pytest.approx(AREA, rel=1e-12),), (0.0,))
    assert call("CS_TOTALS", CIRCLE, (("A", "x"),)) == ((pytest.approx(AREA, rel=1e-12), 0.0),)
    assert call("CS_TOTALS", CIRCLE, (("A",),)) == pytest.approx(AREA, rel=1e-12)
    assert isinstance(call("CS_PRINCIPAL", CIRCLE, "angle"), float)


@pytest.mark.parametrize("name", ["CS_TOTALS", "CS_PRINCIPAL"])
@pytest.mark.parametrize(
    ("which", "row"), [("Wel", None), ((("I1",), ("J",)), 2), ((("I1",), (None,)), 2), (5.0, None)]
)
def test_a_symbol_that_is_none_is_refused_by_its_row(name: str, which: object, row: int | None) -> None:
    with pytest.raises(InputError, match="is no symbol here") as caught:
        call(name, CIRCLE, which)
    assert (caught.value.argument, caught.value.row) == ("which", row)


def test_the_second_of_joined_blocks_is_named_as_such() -> None:
    with pytest.raises(InputError, match=r"^parts 2, row 2, column d \[mm\]: "):
        call("CS_JOINED", CIRCLE, (CIRCLE[0], ("bar", "circle", -1.0)))


def test_units_follow_the_headers() -> None:
    units = [row[2] for row in call("CS_TOTALS", CIRCLE)]
    assert units == ["mm²", "mm", "mm", "mm⁴", "mm⁴", "mm⁴", "mm⁴", "mm", "mm", "mm⁴", "mm⁴", "°"]
    bare = (("shape", "d"), ("circle", 30.0))
    assert [row[2] for row in call("CS_ABOUT", bare)] == ["L⁴", "L⁴", "L⁴"]
    assert call("CS_LEDGER", CIRCLE)[0][:6] == ("part", "A [mm²]", "x [mm]", "y [mm]", "A·x [mm³]", "A·y [mm³]")
    assert call("CS_LEDGER", bare)[0][:6] == ("part", "A", "x", "y", "A·x", "A·y")


@pytest.mark.parametrize("column", [("circle", "tube"), (("circle",), ("tube",)), (("circle", "tube"),)])
def test_shapes_of_parts_may_come_as_a_row_or_a_column(column: Any) -> None:
    column = column if isinstance(column[0], tuple) else tuple((each,) for each in column)
    made = call("CS_PARTS", column, ((30.0, None), (40.0, 4.0)), ((0.0,), (9.0,)))
    assert made == (("shape", "d", "t", "x", "y"), ("circle", 30.0, "", 0.0, 0.0), ("tube", 40.0, 4.0, 0.0, 9.0))


PARTS_FAULTS = {
    "there are fewer offsets than parts": (("circle", ((3.0,), (4.0,)), ((0.0,),)), "at", None),
    "there are three offsets for a part": (("circle", ((3.0,),), ((0.0, 1.0, 2.0),)), "at", None),
    "there are more shapes than parts": (((("tube",),) * 3, ((3.0,), (4.0,)), ((0.0,), (1.0,))), "shape", None),
    "a shape is unknown": (((("circle",), ("ring",)), ((3.0,), (4.0,)), ((0.0,), (1.0,))), "shape", 2),
    "a shape is blank": (((("circle",), (None,)), ((3.0,), (4.0,)), ((0.0,), (1.0,))), "shape", 2),
    "a plate has no place here": (("plate", ((3.0,),), ((0.0,),)), "shape", 1),
    "a dimension is missing": (("tube", ((30.0, 3.0), (40.0, None)), ((0.0,), (1.0,))), "size", 2),
    "there is a dimension too many": (("circle", ((30.0, 3.0),), ((0.0,),)), "size", 1),
    "a dimension is text": (("circle", ((30.0,), ("4",)), ((0.0,), (1.0,))), "size", 2),
    "a dimension is impossible": (("tube", ((30.0, 3.0), (40.0, 20.0)), ((0.0,), (1.0,))), "size", 2),
    "an offset is blank": (("circle", ((30.0,), (4.0,)), ((0.0,), (None,))), "at", 2),
    "a sign is 2": (("circle", ((30.0,), (4.0,)), ((0.0,), (1.0,)), None, ((1.0,), (2.0,))), "sign", 2),
    "a modular ratio is 0": (("circle", ((30.0,),), ((0.0,),), None, None, 0.0), "n", 1),
    "a datum is unknown": (("circle", ((30.0,),), ((0.0,),), None, None, None, "upper"), "datum", 1),
    "a turn is text": (("circle", ((30.0,),), ((0.0,),), "quarter"), "turn", 1),
    "signs are a table": (("circle", ((30.0,), (4.0,)), ((0.0,), (1.0,)), None, ((1.0, 1.0),) * 2), "sign", None),
}  # fmt: skip


@pytest.mark.parametrize(("raw", "argument", "row"), PARTS_FAULTS.values(), ids=PARTS_FAULTS)
def test_separate_ranges_are_refused_by_argument_and_row_when(raw: Any, argument: str, row: int | None) -> None:
    with pytest.raises(InputError) as caught:
        call("CS_PARTS", *raw)
    assert (caught.value.argument, caught.value.row) == (argument, row)
    assert len(str(caught.value).splitlines()) == 1


POLYGON_FAULTS = {
    "it has two corners": (((0.0, 0.0), (1.0, 0.0)), None, None),
    "it has three columns": (((0.0, 0.0, 0.0), (1.0, 0.0, 0.0), (0.0, 1.0, 0.0)), None, None),
    "a coordinate is text": (((0.0, 0.0), ("1", 0.0), (0.0, 1.0)), None, None),
    "its sides cross": (((0.0, 0.0), (40.0, 0.0), (10.0, 30.0), (30.0, 30.0)), None, None),
    "its headers are among the corners": ((("x", "y"), (0.0, 0.0), (1.0, 0.0), (0.0, 1.0)), None, None),
}


@pytest.mark.parametrize("raw", POLYGON_FAULTS.values(), ids=POLYGON_FAULTS)
def test_a_polygon_is_refused_when(raw: Any) -> None:
    with pytest.raises(InputError) as caught:
        call("CS_POLYGON", *raw)
    assert caught.value.argument == "points"
