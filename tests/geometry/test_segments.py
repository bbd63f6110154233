"""The closed forms of the segments against their derivation by sympy and against quadrature by mpmath."""

from __future__ import annotations

from fractions import Fraction
from math import cos, hypot, isclose, pi, radians, sin, tan

import mpmath
import pytest
import sympy as sp
from hypothesis import given, settings
from hypothesis import strategies as st

from cellsection.geometry import Arc, Line, Moments
from cellsection.geometry.caps import AREA, FIRST, RISE, SPAN, cap_factors

x, y, u, alpha = sp.symbols("x y u alpha", real=True, positive=True)
# Six forms P dx + Q dy whose line integrals are the six integrals of the area, since dQ/dx - dP/dy is the integrand:
# (-y/m, x/m) f for f homogeneous of degree m - 2, the choice that gives nothing along lines through the origin.
INTEGRANDS = {"A": sp.Integer(1), "Qx": y, "Qy": x, "Ix": y**2, "Iy": x**2, "Ixy": x * y}
coordinate = st.floats(-1e3, 1e3)


def green(f: sp.Expr) -> tuple[sp.Expr, sp.Expr]:
    degree = sp.Poly(f, x, y).total_degree()
    return -y * f / (degree + 2), x * f / (degree + 2)


def along(f: sp.Expr, px: sp.Expr, py: sp.Expr, t: sp.Symbol, start: sp.Expr, end: sp.Expr) -> sp.Expr:
    """The line integral of the form of f along a parametrised curve."""
    P, Q = green(f)
    place = {x: px, y: py}
    integrand = P.subs(place, simultaneous=True) * sp.diff(px, t) + Q.subs(place, simultaneous=True) * sp.diff(py, t)
    return sp.integrate(sp.expand(integrand), (t, start, end))


@pytest.mark.parametrize("symbol", INTEGRANDS)
def test_the_forms_have_the_integrands_as_their_curl(symbol: str) -> None:
    P, Q = green(INTEGRANDS[symbol])
    assert sp.expand(sp.diff(Q, x) - sp.diff(P, y) - INTEGRANDS[symbol]) == 0


@pytest.mark.parametrize("symbol", INTEGRANDS)
def test_the_integrals_of_a_line_follow_from_greens_theorem(symbol: str) -> None:
    x1, y1, x2, y2 = sp.symbols("x1 y1 x2 y2", real=True)
    derived = along(INTEGRANDS[symbol], x1 + u * (x2 - x1), y1 + u * (y2 - y1), u, 0, 1)
    # The code's own arithmetic, run on symbols.
    coded = getattr(Line(x1, y1, x2, y2).integrals(), symbol)
    assert sp.nsimplify(sp.expand(coded - derived), rational=True).equals(0)


# The cap of half angle alpha on the unit circle: xi out of the chord, eta along it.
SINE, RISES = sp.sin(alpha), 1 - sp.cos(alpha)
CAP = {"area": sp.Integer(1), "first": x, "rise": x**2, "span": y**2}
DIVISOR = {"area": SINE * RISES, "first": SINE * RISES**2, "rise": SINE * RISES**3, "span": SINE**3 * RISES}


def cap_integral(factor: str) -> sp.Expr:
    """By Green's theorem: along the arc and back along the chord, about the middle of the chord."""
    theta = sp.Symbol("theta", real=True)
    arc = along(CAP[factor], sp.cos(theta) - sp.cos(alpha), sp.sin(theta), theta, -alpha, alpha)
    chord = along(CAP[factor], sp.Integer(0), SINE * (1 - 2 * u), u, 0, 1)
    return arc + chord


@pytest.mark.parametrize("factor", CAP)
@pytest.mark.parametrize("half_angle", ["0.001", "0.2", "0.7853981633974483", "0.999", "1.001", "1.5", "1.5707963"])
def test_the_cap_factors_follow_from_greens_theorem(factor: str, half_angle: str) -> None:
    derived = (cap_integral(factor) / DIVISOR[factor]).subs(alpha, sp.Rational(half_angle)).evalf(30)
    coded = getattr(cap_factors(float(sp.tan(sp.Rational(half_angle) / 2).evalf(30))), factor)
    # Just above the change from series to closed form, the second moment along the rise cancels to 1/30.
    assert coded == pytest.approx(float(derived), rel=5e-14 if factor == "rise" else 5e-15)


@pytest.mark.parametrize(("factor", "terms"), [("area", AREA), ("first", FIRST), ("rise", RISE), ("span", SPAN)])
def test_the_series_of_a_cap_are_the_taylor_series_of_its_integrals(factor: str, terms: tuple[float, ...]) -> None:
    lowest = {"area": 3, "first": 5, "rise": 7, "span": 5}[factor]
    series = sp.Poly(sp.series(cap_integral(factor), alpha, 0, lowest + 9).removeO(), alpha)
    for i in range(5):
        exact = series.coeff_monomial(alpha ** (lowest + 2 * i))
        assert terms[i] == float(Fraction(int(exact.p), int(exact.q)))


def test_a_flat_cap_is_a_parabolas() -> None:
    # Archimedes: two thirds of the rectangle on chord and rise; the others by integrating b(1 - z²) over the chord.
    assert cap_factors(0.0) == pytest.approx((4 / 3, 8 / 15, 32 / 105, 4 / 15), rel=1e-15)
    assert cap_factors(1e-200) == pytest.approx(cap_factors(0.0), rel=1e-15)


def quadrature(arc: Arc, x0: float, y0: float) -> Moments:
    """Green's theorem by Gauss and Legendre in 20 digits, from the centre and radii an arc of a circle must have."""
    with mpmath.workdps(20):
        mx, my = (mpmath.mpf(arc.x1) + arc.x2) / 2, (mpmath.mpf(arc.y1) + arc.y2) / 2
        ex, ey = (mpmath.mpf(arc.x2) - arc.x1) / 2, (mpmath.mpf(arc.y2) - arc.y1) / 2
        half = 2 * mpmath.atan(mpmath.mpf(arc.T))
        s, v = mpmath.sin(half), 1 - mpmath.cos(half)

        def place(t: mpmath.mpf) -> tuple[mpmath.mpf, mpmath.mpf]:
            along, out = mpmath.sin(t) / s, (mpmath.cos(t) - mpmath.cos(half)) / v
            return mx - x0 + ex * along + arc.bx * out, my - y0 + ey * along + arc.by * out

        def slope(t: mpmath.mpf) -> tuple[mpmath.mpf, mpmath.mpf]:
            along, out = mpmath.cos(t) / s, -mpmath.sin(t) / v
            return ex * along + arc.bx * out, ey * along + arc.by * out

        def form(power_x: int, power_y: int) -> float:
            def integrand(t: mpmath.mpf) -> mpmath.mpf:
                (px, py), (dx, dy) = place(t), slope(t)
                return (px * dy - py * dx) * px**power_x * py**power_y / (power_x + power_y + 2)

            return float(mpmath.quad(integrand, [-half, half], method="gauss-legendre"))

        return Moments(form(0, 0), form(0, 1), form(1, 0), form(0, 2), form(2, 0), form(1, 1))


@settings(max_examples=25)  # the quadrature is slow
@given(coordinate, coordinate, coordinate, coordinate, st.floats(-1.0, 1.0).filter(lambda t: abs(t) > 1e-6))
def test_the_integrals_of_an_arc_agree_with_quadrature(x1: float, y1: float, x2: float, y2: float, T: float) -> None:
    arc = Arc.circular(x1, y1, x2, y2, T)
    reach = 1.0 + hypot(x1, y1) + hypot(x2, y2)
    scale = [reach**2, reach**3, reach**3, reach**4, reach**4, reach**4]
    for met, expected, natural in zip(arc.integrals(3.0, -4.0), quadrature(arc, 3.0, -4.0), scale, strict=True):
        assert abs(met - expected) <= 1e-14 * natural


def test_the_integrals_of_an_arc_of_an_ellipse_agree_with_quadrature() -> None:
    arc = Arc.circular(1.0, 0.5, -0.5, 2.0, 0.7).mapped(3.0, 0.4, -0.2, 0.5)
    assert arc.integrals(0.3, 0.1) == pytest.approx(quadrature(arc, 0.3, 0.1), rel=1e-14)


@pytest.mark.parametrize("radius", [1e3, 1e6, 1e9, 1e12])
def test_a_flat_arc_keeps_its_digits(radius: float) -> None:
    # A chord of 2 on ever larger circles: the cap's area tends to (2/3)·chord·sagitta with the sagitta 1/(2R).
    arc = Arc.circular(1.0, 0.0, -1.0, 0.0, T=tan(mpmath.asin(1 / mpmath.mpf(radius)) / 2))
    with mpmath.workdps(60):
        half = mpmath.asin(1 / mpmath.mpf(radius))
        exact = mpmath.mpf(radius) ** 2 * (half - mpmath.sin(half) * mpmath.cos(half))
    assert pytest.approx(float(exact), rel=1e-14) == arc.integrals().A


@given(st.floats(0.0, 360.0), st.floats(0.01, 180.0), st.floats(0.0, 360.0))
def test_the_extent_of_an_arc_is_that_of_its_circle_where_it_turns(
    start: float, sweep: float, direction: float
) -> None:
    first, last, phi = radians(start), radians(start + sweep), radians(direction)
    arc = Arc.circular(5 * cos(first), 5 * sin(first), 5 * cos(last), 5 * sin(last), tan((last - first) / 4))
    low, high = arc.extent(cos(phi), sin(phi))
    ends = 5 * cos(first - phi), 5 * cos(last - phi)
    inside = (phi - first) % (2 * pi) < last - first
    opposite = (phi + pi - first) % (2 * pi) < last - first
    assert isclose(high, 5.0 if inside else max(ends), abs_tol=1e-12)
    assert isclose(low, -5.0 if opposite else min(ends), abs_tol=1e-12)


@given(st.floats(0.01, 1.0), st.floats(-1.0, 0.9), st.floats(0.01, 1.0), st.floats(-1.0, 1.0))
def test_a_piece_of_an_arc_lies_on_it(T: float, start: float, share: float, z: float) -> None:
    whole = Arc.circular(2.0, 1.0, -1.0, 3.0, T).mapped(1.5, 0.2, 0.0, 0.7)
    px, py = whole.piece(start, start + share * (1.0 - start)).point(z)
    # In the frame of half chord and rise the curve is X² + (1 - T²) Y + T² Y² = 1, Y >= 0 (z eliminated by hand).
    ex, ey = (whole.x2 - whole.x1) / 2, (whole.y2 - whole.y1) / 2
    dx, dy = px - (whole.x1 + whole.x2) / 2, py - (whole.y1 + whole.y2) / 2
    size = ex * whole.by - ey * whole.bx
    X, Y = (dx * whole.by - dy * whole.bx) / size, (ex * dy - ey * dx) / size
    assert pytest.approx(1.0, abs=1e-11) == X * X + (1 - T * T) * Y + T * T * Y * Y
    assert Y >= -1e-11


def test_a_line_through_an_arc_meets_it_where_the_circle_says() -> None:
    arc = Arc.circular(5.0, 0.0, -5.0, 0.0, 1.0)
    met = [arc.point(z) for z in arc.stations(0.0, 1.0, 3.0)]
    assert met == [pytest.approx((4.0, 3.0)), pytest.approx((-4.0, 3.0))]
    assert arc.stations(0.0, 1.0, 5.1) == []


def test_an_arc_is_drawn_no_farther_off_than_asked() -> None:
    arc = Arc.circular(100.0, 0.0, -100.0, 0.0, 1.0)
    for chord in (10.0, 0.1, 1e-4):
        pieces = arc.divisions(chord)
        assert 100.0 * (1.0 - cos(pi / pieces / 2)) <= chord * (1 + 1e-9)
        assert 100.0 * (1.0 - cos(pi / (pieces - 1) / 2)) > chord if pieces > 2 else True
