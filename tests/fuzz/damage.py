"""Damage to the parts of a book and to the zip file around them."""

from __future__ import annotations

import io
import re
import struct
import warnings
import zipfile
from random import Random

from tests.fuzz.formulas import Spelling, formula

__all__ = ["damaged_markup", "damaged_zip", "packed"]

VALUES = (
    "", "0", "-1", "1", "2", "1.5", "1e999", "NaN", "INF", "0x10", "true", "99999999999999999999", "2147483648",
    "A0", "A1", "XFD1048576", "XFE1", "A1:XFD1048576", "A1:A1048576", "B9:A1", "A1:B2 C3", "#REF!", "ZZZZ1", "s",
    "str", "inlineStr", "b", "e", "n", "d", "array", "shared", "dataTable", "float", "string", "boolean", "date",
    "../../../etc/passwd", "/etc/passwd", "file:///etc/passwd", "http://127.0.0.1:9/x", "C:\\x", "r1", "r99",
    "\u202e", "é" * 50, "x" * 40_000, "_xD800_", "_x0000_", "&lt;", "9" * 400, "-0", "1E-400", "9999-99-99",
    "0000-00-00", "2026-12-01T25:61:61", "PT99999999999H", "P1Y", "PT-1S", "16384", "16385", "1048576", "1048577",
    "4000000000", "S", "Two", "of:=", "of:", "msoxl:=A1", "oooc:=[.A1]", "=1",
)  # fmt: skip
TOKEN = re.compile(rb'"[^"<>]*"|>[^<>]+<')
ELEMENT = re.compile(rb"<[^<>]*>")
NAMES = (
    "../outside.xml", "/outside.xml", "C:\\outside.xml", "\\\\host\\x", "xl//workbook.xml", "XL/WORKBOOK.XML",
    "a/" * 300+"b", "\x00", "é", "xl/workbook.xml/", ".", "..", "", "con", "xl\\workbook.xml",
    "[Content_Types].xml", "content.xml", "mimetype",
)  # fmt: skip
INSERTS = (
    b'<!DOCTYPE x [<!ENTITY a "b">]>', b"&a;", b"&#0;", b"&#xD800;", b"<![CDATA[x]]>", b"<?xml version='1.0'?>",
    b"<!-- -- -->", b"\x00", b"\xff\xfe", b"\xef\xbb\xbf", b"<", b">", b"&", b"]]>", b"<c/>", b"<f>1</f>",
    b"<v>1</v>", b"<row>", b"</row>", b"<x:y/>", b" xmlns=''", b"<a>" * 300, b"<si/>", b"<t>x</t>", b"<is/>",
    b"<table:table-row/>", b"<text:p/>", b"<table:covered-table-cell/>", b"\xed\xa0\x80",
)  # fmt: skip


def damaged_markup(rng: Random, part: bytes, spelling: Spelling) -> bytes:
    """A part with one to four things wrong or strange in it."""
    for _ in range(rng.randint(1, 4)):
        part = one_damage(rng, part, spelling)
    return part


def one_damage(rng: Random, part: bytes, spelling: Spelling) -> bytes:
    kind = rng.random()
    if kind < 0.55 and (tokens := list(TOKEN.finditer(part))):
        match = rng.choice(tokens)
        if rng.random() < 0.35:
            new = escaped(formula(rng, spelling))
            new = b"of:=" + new if spelling == "openformula" else new
        else:
            new = escaped(rng.choice(VALUES))
        return part[: match.start() + 1] + new + part[match.end() - 1 :]
    if kind < 0.8 and (elements := list(ELEMENT.finditer(part))):
        one, other = rng.choice(elements), rng.choice(elements)
        start, end = one.span()
        piece = part[min(start, other.start()) : max(end, other.end())][:2000]
        return rng.choice(
            (
                part[:start] + part[end:],
                part[:end] + one[0] + part[end:],
                part[:start] + other[0] + part[end:],
                part[: other.end()] + piece + part[other.end() :],
                part[:start] + part[max(end, other.end()) :],
                part[:start] + re.sub(rb'\s[\w:]+="[^"]*"', b"", one[0], count=1) + part[end:],
            )
        )
    at = rng.randint(0, len(part))
    if kind < 0.9:
        return part[:at] + rng.choice(INSERTS) + part[at:]
    if kind < 0.95:
        return part[:at]
    return part[:at] + bytes([rng.randint(0, 255)]) + part[at + 1 :]


def escaped(text: str) -> bytes:
    """A text as an attribute holds it, now and then not escaped."""
    text = text if text == "&lt;" else text.replace("&", "&amp;").replace("<", "&lt;").replace('"', "&quot;")
    return text.encode("utf-8", "surrogatepass")


def packed(rng: Random, parts: dict[str, bytes]) -> bytes:
    """A zip file of parts, some of them perhaps twice, missing, or under a strange name."""
    entries = list(parts.items())
    for _ in range(rng.choice((0, 0, 1, 2))):
        name, content = entries.pop(rng.randrange(len(entries))) if len(entries) > 1 else entries[0]
        entries += rng.choice(
            (
                [],
                [(name, content)] * 2,
                [(rng.choice(NAMES), content)],
                [(name.upper(), content)],
                [(name, b"")],
                [(name, content * 2)],
            )
        )
    if rng.random() < 0.05:
        entries.append(("nested.zip", packed(rng, parts)))
    held = io.BytesIO()
    with (
        warnings.catch_warnings(action="ignore"),
        zipfile.ZipFile(held, "w", rng.choice((zipfile.ZIP_STORED, zipfile.ZIP_DEFLATED))) as package,
    ):
        for name, content in entries:
            package.writestr(zipfile.ZipInfo(name or "x", (2026, 12, 1, 8, 0, 0)), content, package.compression)
    return held.getvalue()


def damaged_zip(rng: Random, data: bytes) -> bytes:
    """The bytes of a zip file with one to four of them wrong, most often where sizes, names and offsets stand."""
    changed = bytearray(data)
    for _ in range(rng.randint(1, 4)):
        kind = rng.random()
        heads = [
            match.start() for match in re.finditer(rb"PK(?:\x01\x02|\x03\x04|\x05\x06|\x06\x06|\x06\x07)", changed)
        ]
        if kind < 0.45 and heads:
            at = rng.choice(heads) + rng.randint(0, 45)
            number = rng.choice((0, 1, 0x7FFF, 0xFFFF, 0xFFFF_FFFF, 0x7FFF_FFFF, rng.getrandbits(32)))
            piece = struct.pack("<I", number)[: rng.choice((1, 2, 4))]
            changed[at : at + len(piece)] = piece
        elif kind < 0.7 and changed:
            changed[rng.randrange(len(changed))] ^= 1 << rng.randint(0, 7)
        elif kind < 0.8:
            del changed[rng.randint(0, len(changed)) :]
        elif kind < 0.87:
            del changed[: rng.randint(0, min(len(changed), 100))]
        elif kind < 0.94:
            changed += changed[rng.randint(0, len(changed)) :]
        else:
            at = rng.randint(0, len(changed))
            changed[at:at] = bytes(rng.randint(0, 255) for _ in range(rng.randint(1, 20)))
    return bytes(changed)
