"""CONVERT: units of measure by what they measure, in multiples of the SI unit of each (OpenFormula 1.2, CONVERT).

The names, the factors and which names take a prefix are those of the standard and of the application: the light year
takes one and the square light year does not, the imperial pint does and the imperial gallon does not.
"""

from __future__ import annotations

from cellsection.workbook.builtins.registry import ErrorResult, builtin
from cellsection.workbook.coercion import NA

INCH, FOOT, YARD, MILE, NAUTICAL = 0.0254, 0.3048, 0.9144, 1609.344, 1852.0
LIGHT_YEAR, POINT, GALLON = 9_460_730_472_580_800.0, 0.0254 / 72, 231 * 0.0254**3

# what is measured: names, factor; a star before a name lets it take a decimal prefix
TABLE: dict[str, dict[str, float]] = {
    "mass": {
        "*g": 1.0, "sg": 14593.9029372064, "lbm": 453.59237, "*u": 1.660538782e-24, "ozm": 28.349523125,
        "grain": 0.06479891, "cwt shweight": 45359.237, "uk_cwt lcwt hweight": 50802.34544, "stone": 6350.29318,
        "ton": 907184.74, "uk_ton LTON brton": 1016046.9088,
    },
    "length": {
        "*m": 1.0, "mi": MILE, "Nmi": NAUTICAL, "in": INCH, "ft": FOOT, "yd": YARD, "*ang": 1e-10, "ell": 1.143,
        "*ly": LIGHT_YEAR, "*parsec *pc": 3.08567758128155e16, "Picapt Pica": POINT, "pica": 12 * POINT,
        "survey_mi": 5280 * 1200 / 3937,
    },
    "time": {"yr": 31_557_600.0, "day d": 86400.0, "hr": 3600.0, "mn min": 60.0, "*sec *s": 1.0},
    "pressure": {
        "*Pa *p": 1.0, "*atm *at": 101325.0, "*mmHg": 133.322, "psi": 6894.75729316836, "Torr": 101325 / 760,
    },
    "force": {"*N": 1.0, "*dyn *dy": 1e-5, "lbf": 4.4482216152605, "*pond": 9.80665e-3},
    "energy": {
        "*J": 1.0, "*e": 1e-7, "*c": 4.184, "*cal": 4.1868, "*eV *ev": 1.602176487e-19, "HPh hh": 2684519.537696173,
        "*Wh *wh": 3600.0, "flb": 1.3558179483314, "BTU btu": 1055.05585262,
    },
    "power": {"*W *w": 1.0, "HP h": 745.699871582270, "PS": 735.49875},
    "magnetism": {"*T": 1.0, "*ga": 1e-4},
    "speed": {
        "*m/s *m/sec": 1.0, "*m/h *m/hr": 1 / 3600, "*mph": MILE / 3600, "kn": NAUTICAL / 3600,
        "admkn": 6080 * FOOT / 3600,
    },
    "area": {
        "uk_acre": 4840 * YARD**2, "us_acre": 43560 * (1200 / 3937) ** 2, "*ar": 100.0, "ha": 1e4, "Morgen": 2500.0,
    },
    "volume": {
        "tsp": GALLON / 768, "tspm": 5e-6, "tbs": GALLON / 256, "oz": GALLON / 128, "cup": GALLON / 16,
        "pt us_pt": GALLON / 8, "*uk_pt": 0.00056826125, "qt": GALLON / 4, "uk_qt": 0.0011365225, "gal": GALLON,
        "uk_gal": 0.00454609, "*l *L *lt": 1e-3, "barrel": 42 * GALLON, "bushel": 2150.42 * INCH**3,
        "GRT regton": 100 * FOOT**3, "MTON": 40 * FOOT**3,
    },
    "information": {"*bit": 1.0, "*byte": 8.0},
}  # fmt: skip
# lengths whose squares and cubes are units too, as "ft2" and "ft^2"
LENGTHS = {
    "*m": 1.0, "mi": MILE, "Nmi": NAUTICAL, "in": INCH, "ft": FOOT, "yd": YARD, "*ang": 1e-10, "ly": LIGHT_YEAR,
    "Picapt": POINT, "Pica": POINT,
}  # fmt: skip
PREFIXES = {
    "Y": 1e24, "Z": 1e21, "E": 1e18, "P": 1e15, "T": 1e12, "G": 1e9, "M": 1e6, "k": 1e3, "h": 100.0, "da": 10.0,
    "e": 10.0, "d": 0.1, "c": 0.01, "m": 1e-3, "u": 1e-6, "n": 1e-9, "p": 1e-12, "f": 1e-15, "a": 1e-18, "z": 1e-21,
    "y": 1e-24,
}  # fmt: skip
BINARY = {each + "i": 1024.0**k for k, each in enumerate("kMGTPEZY", start=1)}
# temperatures: kelvin = (reading + shift) * step
TEMPERATURES = {
    "C": (273.15, 1.0), "cel": (273.15, 1.0), "F": (459.67, 5 / 9), "fah": (459.67, 5 / 9), "K": (0.0, 1.0),
    "kel": (0.0, 1.0), "Rank": (0.0, 5 / 9), "Reau": (273.15 * 0.8, 1.25),
}  # fmt: skip


def named_units() -> dict[str, tuple[str, float, int]]:
    """Each name: what it measures, its factor, and the power in which a prefix enters (0: it takes none)."""
    found: dict[str, tuple[str, float, int]] = {}
    for measured, rows in TABLE.items():
        for names, factor in rows.items():
            for name in names.split():
                found[name.lstrip("*")] = (measured, factor, int(name.startswith("*")))
    for name, factor in LENGTHS.items():
        for power, measured in ((2, "area"), (3, "volume")):
            for mark in ("", "^"):
                entry = (measured, factor**power, power if name.startswith("*") else 0)
                found[f"{name.lstrip('*')}{mark}{power}"] = entry
    return found


UNITS = named_units()


def measure(name: str) -> tuple[str, float]:
    """What a unit measures, and its factor; #N/A where there is no such unit."""
    if name in UNITS:
        return UNITS[name][:2]
    for prefix, scale in (*PREFIXES.items(), *BINARY.items()):
        measured, factor, power = (
            UNITS.get(name[len(prefix) :], ("", 0.0, 0)) if name.startswith(prefix) else ("", 0, 0)
        )
        if power and (prefix not in BINARY or measured == "information"):
            return measured, factor * scale**power
    raise ErrorResult(NA)


def temperature(name: str) -> tuple[float, float] | None:
    """Shift and step of a scale of temperature, None where it is none; only the kelvin takes a prefix."""
    if name in TEMPERATURES:
        return TEMPERATURES[name]
    for kelvin in ("K", "kel"):
        prefix = name.removesuffix(kelvin)
        if prefix != name and prefix in PREFIXES:
            return 0.0, PREFIXES[prefix]
    return None


@builtin("CONVERT", "measure text text")
def convert(x: float, have: str, want: str) -> float:
    source, target = temperature(have), temperature(want)
    if source and target:
        return x if have == want else (x + source[0]) * source[1] / target[1] - target[0]
    (first, a), (second, b) = measure(have), measure(want)
    if first != second:
        raise ErrorResult(NA)
    return x * a / b
