"""The mechanics of a section built up of parts, one chapter a file."""

from cellsection.section.composite import Totals, about, totals
from cellsection.section.faults import Fault, faults
from cellsection.section.fibres import Fibre, Fibres, fibres
from cellsection.section.ledger import LEDGER_COLUMNS, Ledger, LedgerRow, ledger
from cellsection.section.part import Part
from cellsection.section.principal import Principal, principal
from cellsection.section.transformed import radius_of_gyration

__all__ = [
    "LEDGER_COLUMNS",
    "Fault",
    "Fibre",
    "Fibres",
    "Ledger",
    "LedgerRow",
    "Part",
    "Principal",
    "Totals",
    "about",
    "faults",
    "fibres",
    "ledger",
    "principal",
    "radius_of_gyration",
    "totals",
]
