"""A value as a cell of an .xlsx sheet holds it: its kind in the t of the cell, its text in a <v>."""

from __future__ import annotations

import re
from collections.abc import Mapping

from cellsection.workbook.values import ErrorValue, Scalar

__all__ = ["saved_form"]

ESCAPE = re.compile("[\x00-\x08\x0b-\x1f\ud800-\udfff\ufffe\uffff]|_(?=x[0-9A-Fa-f]{4}_)")
# The errors that the file format can hold; newer ones are saved as #VALUE! beside a richer value in another part.
KNOWN_ERRORS = frozenset(("#NULL!", "#DIV/0!", "#VALUE!", "#REF!", "#NAME?", "#NUM!", "#N/A", "#GETTING_DATA"))


def saved_form(value: Scalar, prefix: bytes, rich: Mapping[str, str]) -> tuple[bytes, bytes]:
    """The t attribute (and vm) and the <v> that hold a value, each with its markup."""
    kind, text, space = b"", "", b""
    if value is None:
        return b"", b""
    if isinstance(value, bool):
        kind, text = b' t="b"', str(int(value))
    elif isinstance(value, ErrorValue):
        kind, text = b' t="e"', value.code if value.code in KNOWN_ERRORS else "#VALUE!"
        if value.code in rich and value.code not in KNOWN_ERRORS:
            kind += b' vm="%b"' % rich[value.code].encode()
    elif isinstance(value, str):
        kind, text = b' t="str"', ESCAPE.sub(lambda m: f"_x{ord(m[0]):04X}_", value)
        text = text.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;")
        space = b' xml:space="preserve"' if text != text.strip() else b""
    else:
        text = repr(int(value)) if value == int(value) and abs(value) < 1e15 else repr(value)
    return kind, b"<%bv%b>%b</%bv>" % (prefix, space, text.encode(), prefix)
