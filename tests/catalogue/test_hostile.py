"""Whatever the cells hold, a function gives finite numbers and texts, or refuses in one line that fits in a cell."""

from __future__ import annotations

from math import isfinite
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellsection.catalogue import CATALOGUE, CellFunction
from cellsection.errors import InputError
from cellsection.geometry import DATUMS, SHAPES
from cellsection.section.headers import ORDER

LONGEST = 250
numbers = st.one_of(
    st.sampled_from(
        [0.0, 1.0, -1.0, 2.0, 10.0, 200.0, 360.0, 1e-9, 1e12, 1e49, 1e-49, 1e300, float("nan"), float("inf")]
    ),
    st.floats(),
    st.integers(-10, 500),
)
anything = st.one_of(
    st.none(), numbers, st.booleans(), st.text(max_size=60), st.sampled_from(["", "10", "A", "x", "Ix"])
)
headers = st.one_of(st.sampled_from([*ORDER, "x [mm]", "b [cm]", "note", "t_w"]), anything)
shapes = st.one_of(st.sampled_from([*SHAPES, "polygon", "node"]), anything)


@st.composite
def nearly_blocks(draw: st.DrawFn) -> tuple[tuple[Any, ...], ...]:
    """A block as a person might have it: the columns of one shape and some more, the rows more or less right."""
    word = draw(st.sampled_from(list(SHAPES)))
    header = ["shape", *SHAPES[word].required, *draw(st.lists(headers, max_size=3))]
    rows: list[tuple[Any, ...]] = [tuple(header)]
    for _ in range(draw(st.integers(1, 3))):
        cells = {"shape": st.one_of(st.just(word), shapes), "datum": st.one_of(st.sampled_from(DATUMS), anything)}
        sound = draw(st.booleans())
        ordinary = st.floats(1.0, 300.0) if sound else st.one_of(st.floats(1.0, 300.0), anything)
        rows.append(tuple(draw(cells.get(name, ordinary) if isinstance(name, str) else anything) for name in header))
    return tuple(rows)


def answer(function: CellFunction, raw: list[Any]) -> Any:
    """What the function gives, or its refusal."""
    try:
        return function.call(*raw)
    except InputError as refusal:
        return refusal


tables = st.lists(st.tuples(anything, anything), min_size=1, max_size=4).map(tuple)
blocks = st.one_of(nearly_blocks(), nearly_blocks(), nearly_blocks(), tables, anything)


@pytest.mark.parametrize("name", CATALOGUE)
@settings(max_examples=100, deadline=None)
@given(data=st.data())
def test_any_cells_are_answered_or_refused(name: str, data: st.DataObject) -> None:
    function = CATALOGUE[name]
    raw = [
        data.draw(blocks if argument.kind.startswith("parts") else st.one_of(st.none(), anything, tables))
        for argument in function.arguments
    ]
    made = answer(function, raw)
    if isinstance(made, InputError):
        assert len(str(made).splitlines()) == 1
        assert len(str(made)) <= LONGEST
        assert made.remedy
        return
    cells = [cell for row in made for cell in row] if isinstance(made, tuple) else [made]
    assert cells
    for cell in cells:
        assert isinstance(cell, (str, bool)) or (isinstance(cell, float) and isfinite(cell))
