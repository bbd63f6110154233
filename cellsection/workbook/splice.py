"""Changes to the XML of a part, each a stretch of bytes and what replaces it; all bytes between them stay."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass
from typing import TypeAlias

from cellsection.errors import WorkbookError

__all__ = ["TAG", "Edit", "Span", "as_utf8", "name_of", "opened", "replaced", "with_attribute", "without"]

Edit: TypeAlias = tuple[int, int, bytes]
TAG = re.compile(rb"""<([^\s/>]+)[^"'>]*(?:"[^"]*"[^"'>]*|'[^']*'[^"'>]*)*>""")
ATTRIBUTE = re.compile(rb"""\s+([^\s=/>]+)\s*=\s*("[^"]*"|'[^']*')""")  # met in turn, none is found within another
DECLARATION = re.compile(rb"""\s*<\?xml[^>]*?encoding\s*=\s*["']([^"']+)["'][^>]*\?>""")
WIDE = (b"\xff\xfe", b"\xfe\xff")  # how a part in UTF-16 opens


@dataclass(slots=True)
class Span:
    """Where an element lies in the part: its start tag, its content, its end tag."""

    start: int
    opened: int
    closed: int = 0
    end: int = 0

    @property
    def empty(self) -> bool:
        """Whether it is a tag without content, such as <row/>."""
        return self.end == self.opened

    def close(self, data: bytes, at: int) -> None:
        """The element ends, with an end tag at `at`; one without content ends with its start tag."""
        if data[self.opened - 2 : self.opened] == b"/>":
            self.closed = self.end = self.opened
        else:
            self.closed, self.end = at, data.index(b">", at) + 1


def opened(data: bytes, at: int) -> tuple[int, int]:
    """Where the start tag at `at` begins and ends."""
    tag = TAG.match(data, at)
    assert tag is not None  # the parser has seen it
    return at, tag.end()


def name_of(tag: bytes) -> bytes:
    """The name in a start tag, with its prefix."""
    match = TAG.match(tag)
    assert match is not None
    return match[1]


def without(tag: bytes, names: Iterable[bytes]) -> bytes:
    """A start tag, open at its end, without some of its attributes.

    >>> without(b'<c r="A1" t="str" s="3"/>', [b"t"])
    b'<c r="A1" s="3"'
    """
    unwanted = frozenset(names)
    bare = ATTRIBUTE.sub(lambda m: b"" if m[1] in unwanted else m[0], tag)
    return bare.rstrip(b">").rstrip(b"/").rstrip()


def with_attribute(tag: bytes, name: bytes, value: bytes) -> bytes:
    """A start tag with an attribute set where it stands, or added at the end.

    >>> with_attribute(b'<f t="array" ref="A1:A2">', b"ref", b"A1:A5")
    b'<f t="array" ref="A1:A5">'
    """
    new = b' %b="%b"' % (name, value)
    changed = ATTRIBUTE.sub(lambda m: new if m[1] == name else m[0], tag)
    if any(m[1] == name for m in ATTRIBUTE.finditer(tag)):
        return changed
    end = b"/>" if tag.endswith(b"/>") else b">"
    return tag[: -len(end)].rstrip() + new + end


def as_utf8(data: bytes, where: str) -> bytes:
    """A part in UTF-8, in which new texts can be set: as it is, or turned into it without its declaration."""
    if data.startswith(WIDE):
        encoding = "utf-16"
    else:
        declared = DECLARATION.match(data)
        encoding = declared[1].decode("ascii", "replace").lower() if declared else "utf-8"
        if encoding == "utf-8":
            return data
    try:
        text = data.decode(encoding)
    except (LookupError, UnicodeDecodeError) as problem:
        raise WorkbookError(f"{where} cannot be decoded ({problem})", remedy="Save the workbook again") from None
    return re.sub(r"\s*<\?xml[^>]*\?>", "", text, count=1).encode()


def replaced(data: bytes, edits: Iterable[Edit]) -> bytes:
    """The part with its edits made; what is put in at a place comes before what is replaced from there."""
    pieces, done = [], 0
    for start, end, new in sorted(edits, key=lambda edit: edit[:2]):  # stable: what is put in keeps its order
        pieces += [data[done:start], new]
        done = end
    return b"".join([*pieces, data[done:]])
