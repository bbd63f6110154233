"""Every cell function, declared once: the hosts, the manual, the Python face and the tests follow from here."""

from collections.abc import Mapping
from types import MappingProxyType

from cellsection.catalogue.arguments import Argument
from cellsection.catalogue.assemble import ASSEMBLE
from cellsection.catalogue.record import CellFunction, Example, Returns
from cellsection.catalogue.results import RESULTS
from cellsection.catalogue.view import VIEW

__all__ = ["CATALOGUE", "Argument", "CellFunction", "Example", "Returns"]

CATALOGUE: Mapping[str, CellFunction] = MappingProxyType(
    {function.name: function for function in (*ASSEMBLE, *RESULTS, *VIEW)}
)
