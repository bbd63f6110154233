"""Published values that wait for a chapter of the mechanics: kept as data, switched on by moving them to a reading.

Every row is either computed now (tables.py, figures.py, worked.py) or named here; a test holds that no row is in both
or in neither.
"""

from __future__ import annotations

from tests.published.published import Row

__all__ = ["CHAPTERS", "awaited_chapter"]

PLASTIC = "plastic"
TORSION = "torsion constant"
WARPING = "warping and shear centre"
SHEAR = "shear flow"
CRACKED = "cracked"
CHAPTERS = (PLASTIC, TORSION, WARPING, SHEAR, CRACKED)

QUANTITIES = {  # of rolled and cold-formed sections, and of figures
    **dict.fromkeys(("Wpl", "Wpl,y", "Wpl,z", "Wpl,yy", "Wpl,zz", "Z", "Zx", "Zy", "shape factor"), PLASTIC),
    **dict.fromkeys(("Zx (axis parallel to base)", "Z / (b h^2)"), PLASTIC),
    **dict.fromkeys(("It", "J", "Ct", "C"), TORSION),
    **dict.fromkeys(("Iw", "ym(shear centre to centroid)", "xM (shear centre to centroid, thin-walled)"), WARPING),
    "Cw (sharp-corner midline)": WARPING,
    "xo (sharp-corner m + round-corner xbar)": WARPING,
    "m web midline to SC (sharp-corner midline)": WARPING,
}
THIN_WALLED = {
    **dict.fromkeys(
        (
            "Cw",
            "e",
            "e (shear centre from web midline)",
            "e (shear centre from flange-2 midline)",
            "e (shear centre from the circle centre)",
        ),
        WARPING,
    ),
    "J": TORSION,
}
WORKED = {
    "tau max": SHEAR,
    "tau min in web": SHEAR,
    "shear flow f": SHEAR,
    "max screw spacing": SHEAR,
    **dict.fromkeys(("n", "x", "kd cracked", "fs at 90 ft kip", "Icr", "fc", "fs"), CRACKED),
    "e": WARPING,
    "Wno=bf ho/4": WARPING,
    "Sw1=tf bf^2 ho/16": WARPING,
    "a=sqrt(E Cw/(G J))": WARPING,
    "Qw=Z/2": WARPING,
}


def awaited_chapter(row: Row) -> str | None:
    """The chapter a row waits for, None where it is none of these."""
    match row.source.group:
        case "torsion solid":
            return TORSION
        case "thin-walled":
            return THIN_WALLED.get(row.quantity)
        case "worked example":
            return WORKED.get(row.quantity)
    return QUANTITIES.get(row.quantity)
