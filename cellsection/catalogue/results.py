"""Functions that give the properties of a section."""

from __future__ import annotations

from typing import TypeAlias

from cellsection.catalogue.arguments import ReadBlock, block, number, words
from cellsection.catalogue.record import CellFunction, Example, Returns
from cellsection.section import LEDGER_COLUMNS
from cellsection.section import about as moments_about
from cellsection.section import fibres as extreme_fibres
from cellsection.section import ledger as ledger_of
from cellsection.section import principal as principal_of
from cellsection.section import totals as totals_of

__all__ = ["RESULTS", "power_unit"]

Listing: TypeAlias = tuple[tuple[str, float, str], ...]
PARALLEL = "parallel-axis theorem for composite areas (Steiner); any text on mechanics of materials, from memory"

TOTALS = {
    "A": 2, "x": 1, "y": 1, "Ix": 4, "Iy": 4, "Ixy": 4, "Ip": 4, "rx": 1, "ry": 1, "I1": 4, "I2": 4, "angle": 0,
}  # fmt: skip
PRINCIPAL = {"I1": 4, "I2": 4, "angle": 0, "r1": 1, "r2": 1}
ABOUT = {"Ix": 4, "Iy": 4, "Ixy": 4}
LEDGER_POWERS = dict(zip(LEDGER_COLUMNS[1:], (2, 1, 1, 3, 3, 4, 4, 1, 1, 4, 4), strict=True))


def power_unit(power: int, unit: str) -> str:
    """The unit of a length to a power, "L" where the block names none; power 0 is an angle.

    >>> power_unit(4, "mm"), power_unit(2, "")
    ('mm⁴', 'L²')
    """
    return (unit or "L") + {1: "", 2: "²", 3: "³", 4: "⁴"}[power] if power else "°"


def listed(values: dict[str, float], powers: dict[str, int], unit: str) -> Listing:
    """Rows symbol, value, unit."""
    return tuple((symbol, values[symbol], power_unit(power, unit)) for symbol, power in powers.items())


def asked(
    which: str | tuple[tuple[str, ...], ...] | None, values: dict[str, float], powers: dict[str, int], unit: str
) -> object:
    """All rows, one number for one symbol, or numbers in the shape of the list of symbols."""
    if which is None:
        return listed(values, powers, unit)
    if isinstance(which, str):
        return values[which]
    return tuple(tuple(values[symbol] for symbol in row) for row in which)


def totals(parts: ReadBlock, which: str | tuple[tuple[str, ...], ...] | None) -> object:
    """Totals of the composite section."""
    return asked(which, totals_of(parts.parts)._asdict(), TOTALS, parts.unit)


def ledger(parts: ReadBlock) -> object:
    """The hand method, a row a part."""
    whole = ledger_of(parts.parts)
    units = {name: f"{name} [{power_unit(power, parts.unit)}]" for name, power in LEDGER_POWERS.items()}
    header = ("part", *(units[name] if parts.unit else name for name in LEDGER_COLUMNS[1:]))
    return (header, *(tuple(row) for row in (*whole.rows, whole.total)))


def about(parts: ReadBlock, x: float | None, y: float | None, turn: float | None) -> Listing:
    """Second moments about any axes."""
    Ix, Iy, Ixy = moments_about(parts.parts, x or 0.0, y or 0.0, turn or 0.0)
    return listed({"Ix": Ix, "Iy": Iy, "Ixy": Ixy}, ABOUT, parts.unit)


def principal(parts: ReadBlock, which: str | tuple[tuple[str, ...], ...] | None) -> object:
    """Principal moments, their direction and radii."""
    return asked(which, principal_of(parts.parts)._asdict(), PRINCIPAL, parts.unit)


def fibres(parts: ReadBlock, turn: float | None) -> object:
    """Extreme fibres and elastic moduli."""
    found = extreme_fibres(parts.parts, turn or 0.0)
    return tuple((side, fibre.distance, fibre.modulus) for side, fibre in found._asdict().items())


BEAM = (
    ("part", "shape", "b [mm]", "h [mm]", "y [mm]"),
    ("flange", "rectangle", 90.0, 20.0, 50.0),
    ("stem", "rectangle", 30.0, 40.0, 20.0),
)
TEE_WHY = "bracket tee: A = 1800 + 1200, y = (1800·50 + 1200·20)/3000 = 38"

RESULTS = (
    CellFunction(
        "CS_TOTALS",
        totals,
        (block("parts"), words("which", "one symbol, or a range of symbols", tuple(TOTALS), "all of them")),
        Returns(
            "12 x 3, or as `which`",
            "rows symbol, value, unit for A x y Ix Iy Ixy Ip rx ry I1 I2 angle; one number for one symbol; numbers in"
            " the shape of the range for several",
        ),
        "Area, centroid, second moments, radii of gyration and principal moments of the whole section.",
        PARALLEL,
        Example(
            '=CS_TOTALS(A1:E3,"Ix")',
            {"A1": BEAM},
            868000.0,
            f"{TEE_WHY}; Ix = 90·20³/12 + 1800·12² + 30·40³/12 + 1200·18² = 868 000 mm⁴",
        ),
    ),
    CellFunction(
        "CS_LEDGER",
        ledger,
        (block("parts"),),
        Returns(
            "(parts + 2) x 12",
            "the header, a row a part (part, A, x, y, A·x, A·y, own Ix, own Iy, dx, dy, A·dy², A·dx²), the totals row",
        ),
        "The hand method written out: a row a part, and the totals row.",
        PARALLEL,
        Example(
            "=INDEX(CS_LEDGER(A1:E3),4,11)",
            {"A1": BEAM},
            648000.0,
            f"{TEE_WHY}; sum of A·dy² = 1800·12² + 1200·18² = 648 000 mm⁴",
        ),
    ),
    CellFunction(
        "CS_ABOUT",
        about,
        (
            block("parts"),
            number("x", "x of the point the axes go through", "L", "0"),
            number("y", "y of the point the axes go through", "L", "0"),
            number("turn", "degrees by which the axes are turned anticlockwise", "°", "0"),
        ),
        Returns("3 x 3", "rows symbol, value, unit for Ix Iy Ixy about those axes"),
        "Second moments about axes through any point, at any angle.",
        f"{PARALLEL}; rotation of axes (Mohr)",
        Example(
            "=INDEX(CS_ABOUT(A1:E3,0,38),1,2)",
            {"A1": BEAM},
            868000.0,
            f"{TEE_WHY}; about the centroid this is Ix = 868 000 mm⁴ again",
        ),
    ),
    CellFunction(
        "CS_PRINCIPAL",
        principal,
        (block("parts"), words("which", "one symbol, or a range of symbols", tuple(PRINCIPAL), "all of them")),
        Returns("5 x 3, or as `which`", "rows symbol, value, unit for I1 I2 angle r1 r2; angle from x to axis 1"),
        "Principal second moments, the angle from x to axis 1, and the radii of gyration.",
        "rotation of axes to the principal ones (Mohr); any text on mechanics of materials, from memory",
        Example(
            '=CS_PRINCIPAL(A1:D2,"angle")',
            {"A1": (("shape", "b", "h", "turn"), ("rectangle", 120.0, 12.0, 30.0))},
            -60.0,
            "a strip of 12 by 120 turned by 30°: its stiff axis is square to it, at 30° - 90°",
        ),
    ),
    CellFunction(
        "CS_FIBRES",
        fibres,
        (block("parts"), number("turn", "degrees by which the axes are turned anticlockwise", "°", "0")),
        Returns(
            "4 x 3",
            "rows top, bottom, left, right: side, distance of the extreme fibre from the centroid, elastic modulus;"
            " with `turn` the principal angle, the principal moduli",
        ),
        "Extreme fibres and elastic section moduli.",
        "W = I / c (section modulus); any text on mechanics of materials, from memory",
        Example(
            "=INDEX(CS_FIBRES(A1:E3),2,3)",
            {"A1": BEAM},
            868000 / 38,
            f"{TEE_WHY}; bottom fibre 38 away: 868 000 / 38 = 22 842.1 mm³",
        ),
    ),
)
