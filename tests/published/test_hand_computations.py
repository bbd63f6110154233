"""Sections recomputed without the library: by the hand method in exact fractions, by corner pieces, and by sympy.

Dimensions are invented; nothing here is compared with what the library printed before.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from math import cos, isclose, pi, radians, sin, sqrt

import mpmath
import pytest
import sympy

from tests.published import hand
from tests.published.awaited import awaited_chapter
from tests.published.published import Row, rows
from tests.published.sections import Section, block
from tests.published.tables import rolled_block, wall

EXACT = 1e-12
CHORDED = 1e-7  # the tapered channel by hand is a polygon of 4000 chords an arc


@dataclass(frozen=True)
class Rectangle:
    """Width, height and centre of a rectangle, and what its area counts."""

    b: Fraction
    h: Fraction
    x: Fraction
    y: Fraction
    weight: Fraction = Fraction(1)


def rectangle(b: float, h: float, x: float, y: float, weight: Fraction | int = 1) -> Rectangle:
    return Rectangle(*(Fraction(str(size)) for size in (b, h, x, y)), Fraction(weight))


@dataclass(frozen=True)
class ByHand:
    """The hand method: sums of areas and first moments, then the parallel-axis theorem, in fractions."""

    parts: tuple[Rectangle, ...]

    @property
    def A(self) -> Fraction:
        return sum((part.weight * part.b * part.h for part in self.parts), Fraction(0))

    @property
    def x(self) -> Fraction:
        return sum((part.weight * part.b * part.h * part.x for part in self.parts), Fraction(0)) / self.A

    @property
    def y(self) -> Fraction:
        return sum((part.weight * part.b * part.h * part.y for part in self.parts), Fraction(0)) / self.A

    @property
    def Ix(self) -> Fraction:
        y = self.y
        terms = (part.weight * part.b * part.h * (part.h**2 / 12 + (part.y - y) ** 2) for part in self.parts)
        return sum(terms, Fraction(0))

    @property
    def Iy(self) -> Fraction:
        x = self.x
        terms = (part.weight * part.b * part.h * (part.b**2 / 12 + (part.x - x) ** 2) for part in self.parts)
        return sum(terms, Fraction(0))

    @property
    def Ixy(self) -> Fraction:
        x, y = self.x, self.y
        terms = (part.weight * part.b * part.h * (part.x - x) * (part.y - y) for part in self.parts)
        return sum(terms, Fraction(0))


def agree(section: Section, expected: object, tolerance: float = EXACT) -> None:
    """A, centroid and second moments of a section against the same properties computed elsewhere."""
    A, second = float(expected.A), float(expected.Ix + expected.Iy)  # type: ignore[attr-defined]
    sizes = {"A": A, "x": sqrt(second / A), "y": sqrt(second / A), "Ix": second, "Iy": second, "Ixy": second}
    for symbol, size in sizes.items():
        by_hand = float(getattr(expected, symbol))
        assert isclose(section.totals[symbol], by_hand, rel_tol=0.0, abs_tol=size * tolerance), symbol


def test_a_crane_girder_with_a_channel_cap_is_the_sum_of_its_rectangles() -> None:
    # Plate girder 780 deep; the channel 320 x 80 lies over its top flange, web up, flanges hanging down outside it.
    girder = {"shape": "I", "h": 780.0, "b": 260.0, "tw": 12.0, "tf": 18.0, "x": 0.0, "y": 0.0, "datum": "bottom"}
    cap = {"shape": "channel", "h": 320.0, "b": 80.0, "tw": 10.0, "tf": 13.0, "x": 0.0, "y": 750.0, "turn": -90.0}
    cap["datum"] = "centre"
    expected = ByHand(
        (
            rectangle(260, 18, 0, 9),
            rectangle(12, 744, 0, 390),
            rectangle(260, 18, 0, 771),
            rectangle(320, 10, 0, 785),
            rectangle(13, 70, -153.5, 745),
            rectangle(13, 70, 153.5, 745),
        )
    )
    section = Section(block("mm", girder, cap))
    agree(section, expected)
    top, modulus = section.fibre("top")
    assert isclose(top, float(790 - expected.y), rel_tol=EXACT)
    assert isclose(modulus, float(expected.Ix / (790 - expected.y)), rel_tol=EXACT)
    assert isclose(section.fibre("left")[0], 160.0, rel_tol=EXACT)


def test_a_crane_girder_with_angles_under_its_flange_is_the_sum_of_its_rectangles() -> None:
    girder = {"shape": "I", "h": 700.0, "b": 240.0, "tw": 10.0, "tf": 16.0, "x": 0.0, "y": 0.0, "datum": "bottom"}
    # Two angles 90 x 60 x 8 against the web, their long legs up under the top flange: heels at (±5, 684), turned over.
    right = {"shape": "angle", "h": 90.0, "b": 60.0, "t": 8.0, "x": 5.0, "y": 684.0, "turn": -90.0}
    left = {"shape": "angle", "h": 60.0, "b": 90.0, "t": 8.0, "x": -5.0, "y": 684.0, "turn": 180.0}
    right["datum"] = left["datum"] = "bottom left"
    expected = ByHand(
        (
            rectangle(240, 16, 0, 8),
            rectangle(10, 668, 0, 350),
            rectangle(240, 16, 0, 692),
            # turned by -90 about its heel the upright leg 90 lies to the right, the lying leg 60 hangs down
            rectangle(90, 8, 50, 680),
            rectangle(8, 52, 9, 650),
            # turned by 180 about its heel: 90 to the left, 60 down
            rectangle(90, 8, -50, 680),
            rectangle(8, 52, -9, 650),
        )
    )
    agree(Section(block("mm", girder, right, left)), expected)


def test_a_boxed_column_with_a_hole_is_its_plates_less_the_hole() -> None:
    column = {"shape": "I", "h": 280.0, "b": 220.0, "tw": 9.0, "tf": 15.0}
    sides = [{"shape": "rectangle", "b": 12.0, "h": 250.0, "x": x} for x in (-104.0, 104.0)]
    hole = {"shape": "rectangle", "b": 26.0, "h": 15.0, "x": 40.0, "y": 132.5, "sign": -1.0}
    expected = ByHand(
        (
            rectangle(220, 15, 0, 132.5),
            rectangle(220, 15, 0, -132.5),
            rectangle(9, 250, 0, 0),
            rectangle(12, 250, -104, 0),
            rectangle(12, 250, 104, 0),
            rectangle(26, 15, 40, 132.5, -1),
        )
    )
    agree(Section(block("mm", column, *sides, hole)), expected)


def test_a_flitch_beam_counts_its_steel_by_the_modular_ratio() -> None:
    ratio = Fraction(210, 11)
    timber = [{"shape": "rectangle", "b": 70.0, "h": 320.0, "x": x, "n": 1.0} for x in (-40.0, 40.0)]
    plate = {"shape": "rectangle", "b": 10.0, "h": 260.0, "y": -20.0, "n": float(ratio)}
    expected = ByHand((rectangle(70, 320, -40, 0), rectangle(70, 320, 40, 0), rectangle(10, 260, 0, -20, ratio)))
    section = Section(block("mm", *timber, plate))
    agree(section, expected)
    assert isclose(section.fibre("top")[1], float(expected.Ix / (160 - expected.y)), rel_tol=EXACT)


def test_a_rolled_beam_loses_its_bolt_holes() -> None:
    # h 300 b 150 tw 7.1 tf 10.7 r 15, four holes of 22 through the flanges at 40 from the middle.
    beam = {"shape": "I", "h": 300.0, "b": 150.0, "tw": 7.1, "tf": 10.7, "r": 15.0, "x": 75.0, "y": 150.0}
    corners = [(x, y) for x in (35.0, 115.0) for y in (5.35, 294.65)]
    holes = [{"shape": "rectangle", "b": 22.0, "h": 10.7, "x": x, "y": y, "sign": -1.0} for x, y in corners]
    expected = hand.i_section(300, 150, 7.1, 10.7, 15)
    for x, y in corners:
        expected.rectangle(x - 11, y - 5.35, x + 11, y + 5.35, -1)
    agree(Section(block("mm", beam, *holes)), expected)


def test_a_beam_strengthened_by_a_plate_below_moves_its_centroid() -> None:
    beam = {"shape": "I", "h": 190.0, "b": 200.0, "tw": 6.5, "tf": 10.0, "r": 18.0, "y": 0.0, "datum": "bottom left"}
    plate = {"shape": "rectangle", "b": 180.0, "h": 12.0, "x": 10.0, "y": -12.0, "datum": "bottom left"}
    expected = hand.i_section(190, 200, 6.5, 10, 18).rectangle(10, -12, 190, 0)
    section = Section(block("mm", beam, plate))
    agree(section, expected)
    assert isclose(section.fibre("bottom")[1], float(expected.Ix / (expected.y + 12)), rel_tol=EXACT)


def test_a_rolled_crane_beam_with_a_rolled_channel_cap_keeps_its_fillets() -> None:
    # I 500 x 200 x 10.2 x 16 r 21; channel 300 x 100 x 9.5 x 15 r 15 over it, web up, flanges outside the flange.
    beam = {"shape": "I", "h": 500.0, "b": 200.0, "tw": 10.2, "tf": 16.0, "r": 21.0, "x": 0.0, "y": 0.0}
    beam["datum"] = "bottom"
    cap = {"shape": "channel", "h": 300.0, "b": 100.0, "tw": 9.5, "tf": 15.0, "r": 15.0, "x": 0.0, "y": 509.5}
    cap |= {"datum": "left", "turn": -90.0}
    expected = hand.HandTotals().rectangle(-150, 500, 150, 509.5)
    for side in (1, -1):
        expected.rectangle(min(side * 135, side * 150), 409.5, max(side * 135, side * 150), 500)
        expected.corner(side * 135, 500, -side, -1, 15)
        expected.corner(side * 5.1, 16, side, 1, 21).corner(side * 5.1, 484, side, -1, 21)
    expected.rectangle(-100, 0, 100, 16).rectangle(-100, 484, 100, 500).rectangle(-5.1, 16, 5.1, 484)
    agree(Section(block("mm", beam, cap)), expected)


def test_the_principal_axes_of_a_strengthened_angle_are_the_eigenvectors_of_its_tensor() -> None:
    # An angle 150 x 100 x 12 with a plate 100 x 10 on the back of its long leg.
    angle = {"shape": "angle", "h": 150.0, "b": 100.0, "t": 12.0, "x": 0.0, "y": 0.0, "datum": "bottom left"}
    plate = {"shape": "rectangle", "b": 10.0, "h": 100.0, "x": -10.0, "y": 0.0, "datum": "bottom left"}
    expected = ByHand((rectangle(12, 150, 6, 75), rectangle(88, 12, 56, 6), rectangle(10, 100, -5, 50)))
    section = Section(block("mm", angle, plate))
    agree(section, expected)
    Ix, Iy, Ixy = (
        sympy.Rational(value.numerator, value.denominator) for value in (expected.Ix, expected.Iy, expected.Ixy)
    )
    # About a direction (cos, sin) the second moment is Ix cos² + Iy sin² - 2 Ixy sin cos.
    tensor = sympy.Matrix([[Ix, -Ixy], [-Ixy, Iy]])
    (I2, _, (minor,)), (I1, _, (major,)) = sorted(tensor.eigenvects(), key=lambda each: float(each[0]))
    assert isclose(section.principal["I1"], float(I1), rel_tol=EXACT)
    assert isclose(section.principal["I2"], float(I2), rel_tol=EXACT)
    assert isclose(section.principal["r2"], float(sympy.sqrt(I2 / sympy.Rational(str(expected.A)))), rel_tol=EXACT)
    slope = sympy.tan(sympy.pi * sympy.Float(section.principal["angle"], 30) / 180)
    assert isclose(float(slope), float(major[1] / major[0]), rel_tol=1e-10)
    assert minor.dot(major).equals(0)


def test_the_principal_moduli_of_an_angle_follow_from_its_outline_turned() -> None:
    # Angle 100 x 65 x 8, r 10, toes 5: the outline with its arcs in chords, turned into the principal axes.
    h, b, t, r1, r2 = 100.0, 65.0, 8.0, 10.0, 5.0
    outline = [(0.0, 0.0), (b, 0.0), *hand.arc((b - r2, t - r2), r2, 0.0, pi / 2)]
    outline += [*hand.arc((t + r1, t + r1), r1, -pi / 2, -pi), *hand.arc((t - r2, h - r2), r2, 0.0, pi / 2), (0.0, h)]
    section = Section(block("mm", {"shape": "angle", "h": h, "b": b, "t": t, "r": r1, "r2": r2}))
    turn = section.principal["angle"]
    c, s = cos(radians(turn)), sin(radians(turn))
    turned = [(c * x + s * y, c * y - s * x) for x, y in outline]
    expected = hand.polygon(turned)
    assert abs(expected.Ixy) < 1e-6 * expected.Ix
    reach = {
        "top": (max(y for _, y in turned) - expected.y, expected.Ix),
        "bottom": (expected.y - min(y for _, y in turned), expected.Ix),
        "left": (expected.x - min(x for x, _ in turned), expected.Iy),
        "right": (max(x for x, _ in turned) - expected.x, expected.Iy),
    }
    for side, distance, modulus in section.call("CS_FIBRES", turn):
        by_hand, second_moment = reach[side]
        assert isclose(distance, float(by_hand), rel_tol=CHORDED), side
        assert isclose(modulus, float(second_moment / by_hand), rel_tol=CHORDED), side


@pytest.mark.parametrize(("unit", "millimetres"), [("mm", 1.0), ("cm", 10.0), ("m", 1000.0), ("in", 25.4)])
def test_a_section_is_the_same_in_every_unit(unit: str, millimetres: float) -> None:
    sizes = {"h": 300.0, "b": 150.0, "tw": 7.1, "tf": 10.7, "r": 15.0}
    part = {"shape": "I", **{name: size / millimetres for name, size in sizes.items()}}
    expected = hand.i_section(*sizes.values())
    listed = {symbol: (value, named) for symbol, value, named in Section(block(unit, part)).call("CS_TOTALS")}
    for symbol, power, sign in (("A", 2, "²"), ("Ix", 4, "⁴"), ("Iy", 4, "⁴"), ("rx", 1, "")):
        value, named = listed[symbol]
        by_hand = mpmath.sqrt(expected.Ix / expected.A) if symbol == "rx" else getattr(expected, symbol)
        assert named == f"{unit}{sign}"
        assert isclose(value * millimetres**power, float(by_hand), rel_tol=EXACT)


def test_moments_about_any_axes_are_the_integrals_sympy_finds() -> None:
    # A right triangle with legs 90 and 60 about axes through (20, -15).
    x, y = sympy.symbols("x y")
    region = ((y, 0, 60 * (1 - x / 90)), (x, 0, 90))
    part = {"shape": "triangle", "b": 90.0, "h": 60.0, "a": 0.0, "x": 0.0, "y": 0.0, "datum": "bottom left"}
    about = Section(block("mm", part)).about(20.0, -15.0)
    for symbol, integrand in (("Ix", (y + 15) ** 2), ("Iy", (x - 20) ** 2), ("Ixy", (x - 20) * (y + 15))):
        assert isclose(about[symbol], float(sympy.integrate(integrand, *region)), rel_tol=EXACT)


def rolled_by_hand(row: Row) -> hand.HandTotals:
    size = row.number
    match row.source.shape:
        case "I" | "T" as shape:
            if "kdes" in row.given:
                own = (size("d"), size("bf"), size("tw"), size("tf"), size("kdes") - size("tf"))
            else:
                own = (size("h"), size("b"), size("tw"), size("tf"), size("r"))
            return hand.i_section(*own) if shape == "I" else hand.tee(*own)
        case "U":
            return hand.channel(*(size(name) for name in ("h", "b", "tw", "tf", "r")))
        case "UPN":
            names = ("h", "b", "tw", "tf", "tf_at", "slope", "r1", "r2")
            return hand.tapered_channel(*(size(name) for name in names))
        case "L":
            r1, r2 = (float(row.given.get(name, 0)) for name in ("r1", "r2"))
            return hand.angle(size("a"), size("b"), size("t"), r1, r2)
        case "RHS":
            return hand.box(size("H"), size("B"), wall(row), size("ro"), size("ri"))
        case "CHS":
            return hand.tube(size("D"), wall(row))
        case "":
            return hand.lipped_channel(*(size(name) for name in ("D", "B", "d", "t", "R")))
    mean, outstand_middle = size("tf_mean"), (size("tw") + size("bf")) / 2
    return hand.tapered_channel(size("d"), size("bf"), size("tw"), mean, outstand_middle, 1 / 6, 0.0, 0.0)


def one_row_a_section() -> list[Row]:
    """One row for every section of the tables; the sections of the same dimensions in two tables both."""
    tables = [
        row
        for row in rows()
        if awaited_chapter(row) is None
        and row.source.group not in ("figure", "worked example")
        and "Access" not in row.source.name
    ]
    return list({(row.source.name, row.section): row for row in tables}.values())


@pytest.mark.parametrize("row", one_row_a_section(), ids=lambda row: f"{row.section} ({row.source.name})")
def test_a_rolled_section_is_rectangles_and_corner_pieces(row: Row) -> None:
    agree(Section(rolled_block(row)), rolled_by_hand(row), CHORDED if row.source.shape.startswith("UPN") else EXACT)
