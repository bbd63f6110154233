"""One part of a built-up section: a region placed in the section's axes, and how it counts."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from cellsection.geometry import Region

__all__ = ["Part"]


@dataclass(frozen=True, slots=True)
class Part:
    """A part as the mechanics see it, all lengths in one unit.

    region : the area itself, placed and turned in the section's axes (x right, y up)
    sign : 1 solid, -1 cut-out
    n : modular ratio E_part / E_reference, positive
    row : the part's row in its parts block as the engineer counts it (the header is row 1), for messages
    """

    label: str
    shape: str
    region: Region
    sign: int = 1
    n: float = 1.0
    row: int | None = None
    strength: float | None = None
    stage: float | None = None
    no_tension: bool = False

    @property
    def weight(self) -> float:
        """What the part's area integrals are multiplied by: sign times modular ratio."""
        return self.sign * self.n
