"""Faults, outlines, agreement and edition: what odd questions are answered."""

from __future__ import annotations

from typing import Any

import pytest

from cellsection.catalogue import CATALOGUE
from cellsection.catalogue.view import NO_FAULTS
from cellsection.errors import InputError

CROSS = (
    ("part", "shape", "b", "h", "d", "y"),
    ("web", "rectangle", 10.0, 400.0, None, 200.0),
    ("flange", "rectangle", 200.0, 20.0, None, 410.0),
    (None, "circle", None, None, 8.0, 100.0),
)
FLANGE = ((-100.0, 400.0), (100.0, 400.0), (100.0, 420.0), (-100.0, 420.0), (-100.0, 400.0))


def call(name: str, *raw: Any) -> Any:
    return CATALOGUE[name].call(*raw)


def labelled(*labels: object) -> tuple[tuple[object, ...], ...]:
    """Circles of diameter 10, 20, 30 ... with these labels."""
    return (("part", "shape", "d"), *((label, "circle", 10.0 * k) for k, label in enumerate(labels, start=1)))


@pytest.mark.parametrize("part", ["flange", " Flange ", 2, 2.0, (("flange",),)], ids=str)
def test_a_part_is_named_by_label_or_place(part: object) -> None:
    assert call("CS_OUTLINE", CROSS, part, 5) == FLANGE


@pytest.mark.parametrize("points", [5, 6, 48, 500])
def test_an_outline_has_just_as_many_rows_as_asked_for(points: int) -> None:
    outline = call("CS_OUTLINE", CROSS, 2, points)
    assert len(outline) == points
    assert outline[0] == outline[-1]
    assert set(FLANGE) <= set(outline)


def test_an_outline_is_of_48_points_unless_said() -> None:
    assert len(call("CS_OUTLINE", CROSS, 3)) == 48


@pytest.mark.parametrize(
    ("part", "says"),
    [
        ("gusset", 'no part is labelled "gusset". Choose from web, flange.'),
        ("3", 'no part is labelled "3". Choose from web, flange.'),
        (0, "there is no part 0. Give a label as text, or a number from 1 to 3."),
        (4, "there is no part 4. "),
        (1.5, "there is no part 1.5. "),
        (-1, "there is no part -1. "),
        (True, "TRUE is a logical, not a number. "),
        (((1.0,), (2.0,)), "a range stands where one value should. "),
    ],
    ids=str,
)
def test_a_part_that_is_not_there_is_refused(part: object, says: str) -> None:
    with pytest.raises(InputError) as caught:
        call("CS_OUTLINE", CROSS, part, 5)
    assert str(caught.value).startswith(f"part: {says}")


def test_a_label_that_two_parts_share_names_none() -> None:
    with pytest.raises(InputError, match='2 parts are labelled "Bar"'):
        call("CS_OUTLINE", labelled("bar", "BAR"), "Bar", 5)
    assert call("CS_OUTLINE", labelled("bar", "bar"), 2, 5)[0] == (10.0, 0.0)


def test_a_number_that_is_the_label_of_another_part_names_none() -> None:
    with pytest.raises(InputError, match="2 is the place of one part and the label of another"):
        call("CS_OUTLINE", labelled(2.0, 1.0), 2, 5)
    assert call("CS_OUTLINE", labelled(2.0, 1.0), "2", 5)[0] == (5.0, 0.0)
    assert call("CS_OUTLINE", labelled(1.0, 2.0), 2, 5)[0] == (10.0, 0.0)


@pytest.mark.parametrize("points", [0, -3, 3, 4, 5.5, 1e9, 100001])
def test_an_impossible_number_of_points_is_refused(points: float) -> None:
    with pytest.raises(InputError, match="points") as caught:
        call("CS_OUTLINE", CROSS, 1, points)
    assert caught.value.argument == "points"


@pytest.mark.parametrize("gap", [None, 0.0, 5.0, 1e6])
def test_a_sound_section_has_no_faults_whatever_the_gap(gap: float | None) -> None:
    assert call("CS_FAULTS", CROSS[:3], gap) == NO_FAULTS


def test_a_fault_is_a_row_of_four_texts() -> None:
    (fault,) = call("CS_FAULTS", CROSS)
    assert len(fault) == 4
    assert all(isinstance(text, str) and text and len(text) <= 255 for text in fault)
    assert "web" in fault[0]
    assert "row 4" in fault[1]


def test_a_negative_gap_is_refused() -> None:
    with pytest.raises(InputError, match=r"^gap: gap -1 is negative"):
        call("CS_FAULTS", CROSS, -1)


def test_a_gap_that_lacing_bridges_is_no_fault() -> None:
    # Two discs of 30 mm, 500 mm apart from centre to centre: 470 mm between them.
    apart = (("shape", "d [mm]", "x [mm]"), ("circle", 30.0, 0.0), ("circle", 30.0, 500.0))
    assert "470 mm apart" in call("CS_FAULTS", apart)[0][1]
    assert call("CS_FAULTS", apart, 470.1) == NO_FAULTS


def test_a_section_without_totals_is_told_as_a_fault() -> None:
    faults = call("CS_FAULTS", (("shape", "d", "sign"), ("circle", 30.0, -1.0)))
    assert any("net area is negative" in fault[1] for fault in faults)


@pytest.mark.parametrize(
    ("value", "reference", "tolerance", "agrees"),
    [
        (868000.0, 868000.0, None, True),
        (868000.0, 868000.0001, None, True),
        (868000.0, 868001.0, None, False),
        (1.05, 1.0, 0.05001, True),
        (1.06, 1.0, 0.05, False),
        (-1.0, -1.0005, 0.001, True),
        (1.0, -1.0, 0.5, False),
        (0.0, 0.0, None, True),
        (1e-12, 0.0, None, False),  # nothing but 0 agrees with 0: the tolerance is relative
        ("no faults", "No faults ", None, True),
        ("no faults", "faults", None, False),
    ],
)
def test_agreement_is_relative_to_the_reference(
    value: object, reference: object, tolerance: float | None, agrees: bool
) -> None:
    assert call("CS_AGREES", value, reference, tolerance) is agrees


@pytest.mark.parametrize(
    ("raw", "argument"),
    [
        ((1.0, "1"), "reference"),
        (("1", 1.0), "value"),
        ((True, 1.0), "value"),
        ((None, 1.0), "value"),
        ((1.0, None), "reference"),
        ((1.0, 1.0, -0.1), "tolerance"),
        ((1.0, 1.0, 1.0), "tolerance"),
        ((((1.0,), (2.0,)), 1.0), "value"),
    ],
    ids=str,
)
def test_what_cannot_be_compared_is_refused(raw: tuple[object, ...], argument: str) -> None:
    with pytest.raises(InputError) as caught:
        call("CS_AGREES", *raw)
    assert caught.value.argument == argument


def test_the_edition_is_the_same_each_time() -> None:
    name, version, digest = call("CS_EDITION").split()
    assert (name, len(digest), version.count(".")) == ("cellsection", 12, 2)
    assert call("CS_EDITION") == f"{name} {version} {digest}"


def test_equal_looking_cells_of_other_kinds_are_not_taken_for_each_other() -> None:
    # A block just read is kept; 1 and TRUE are equal in Python, and must not be here.
    good = (("shape", "d"), ("circle", 1.0))
    assert call("CS_TOTALS", good, "A") > 0.0
    with pytest.raises(InputError, match="TRUE is a logical"):
        call("CS_TOTALS", (("shape", "d"), ("circle", True)), "A")
    with pytest.raises(InputError, match="is not a number"):
        call("CS_TOTALS", (("shape", "d"), ("circle", [1.0])), "A")
