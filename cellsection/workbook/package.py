"""The zip package of a saved workbook: checked before anything in it is unpacked, its parts read on demand.

book.xlsx
├── [Content_Types].xml, _rels/.rels        what the parts are, where the workbook part is
└── xl/workbook.xml, xl/worksheets/*.xml …  read in pieces, none of them written anywhere
"""

from __future__ import annotations

import posixpath
import zipfile
import zlib
from collections.abc import Iterator
from pathlib import Path
from typing import NamedTuple
from urllib.parse import unquote

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Limits
from cellsection.workbook.markup import Element, tree

__all__ = ["Package", "Relationship", "canonical"]

ENCRYPTED = "EncryptedPackage".encode(
    "utf-16-le"
)  # the stream that holds a workbook under a password (MS-OFFCRYPTO 2.3.4.4)
OLE2_DIRECTORY = 50_000_000  # bytes in which the directory of its container is looked for
OLE2 = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"
PIECE = 1 << 17
METHODS = (zipfile.ZIP_STORED, zipfile.ZIP_DEFLATED)  # the only two that the standards allow
WORTH_A_RATIO = 10_000_000  # bytes; a smaller part may be as dense as it likes
DAMAGE = (zipfile.BadZipFile, zlib.error, EOFError, OSError, NotImplementedError, RuntimeError, ValueError)
AGAIN = "Save the workbook again"


class Relationship(NamedTuple):
    """What a part says about another: the kind, its name in the package or its address, whether it is outside."""

    kind: str
    target: str
    external: bool


class Package:
    """The parts of a workbook file by name. Raises WorkbookError for what cannot be, or should not be, unpacked.

    Part names are compared as the standard asks, without regard to case; a backslash in one counts as a slash.
    """

    def __init__(self, path: str | Path, limits: Limits) -> None:
        self.path, self.limits = Path(path), limits
        self.name = self.path.name
        if self.path.exists() and not self.path.is_file():
            raise WorkbookError(f"{self.name} is no file", remedy="Name a saved workbook")
        try:
            self._file = self.path.open("rb")
        except OSError as problem:
            raise WorkbookError(
                f"{self.name} cannot be opened ({problem.strerror or problem})", remedy="Check the path and its rights"
            ) from None
        try:
            self._open()
        except BaseException:
            self._file.close()
            raise

    def _open(self) -> None:
        head = self._file.read(8)
        if head == OLE2:
            encrypted = ENCRYPTED in self._file.read(OLE2_DIRECTORY)
            what = "is encrypted" if encrypted else "is in the old binary format (.xls)"
            raise WorkbookError(
                f"{self.name} {what}", remedy="Save it without a password" if encrypted else "Save it as .xlsx"
            )
        try:
            self._zip = zipfile.ZipFile(self._file)
        except DAMAGE as problem:
            raise WorkbookError(
                f"{self.name} is not a readable workbook file ({problem})", remedy="Save it again as .xlsx or .ods"
            ) from None
        self._parts: dict[str, zipfile.ZipInfo] = {}
        self._asked_for = 0  # bytes of the parts read so far
        infos = self._zip.infolist()
        if len(infos) > self.limits.parts:
            raise self.refused(f"it has {len(infos):,} parts, more than {self.limits.parts:,}")
        for info in infos:
            self._check(info)
        total = sum(info.file_size for info in infos)
        if total > self.limits.unzipped_bytes:
            raise self.refused(f"it unpacks to {total:,} bytes, more than {self.limits.unzipped_bytes:,}")

    def _check(self, info: zipfile.ZipInfo) -> None:
        """Enter a part, or refuse the file for it."""
        key = canonical(info.filename)
        if info.flag_bits & 1:
            raise WorkbookError(f"{self.name} is encrypted", remedy="Save it without a password")
        if key in self._parts:
            raise WorkbookError(f"{self.name} is refused: its part {info.filename} is there twice", remedy=AGAIN)
        if info.compress_type not in METHODS:
            raise WorkbookError(
                f"{self.name} is refused: its part {info.filename} is packed by a method that no workbook uses",
                remedy=AGAIN,
            )
        self._parts[key] = info

    def refused(self, why: str) -> WorkbookError:
        """A refusal of the whole file, as it asks for more than a limit allows."""
        return WorkbookError(
            f"{self.name} is refused: {why}", remedy="Save it again, or raise the limit if you trust it"
        )

    def __contains__(self, name: str) -> bool:
        return canonical(name) in self._parts

    @property
    def names(self) -> list[str]:
        """The names of all parts as the file spells them, in its order."""
        return [info.filename for info in self._parts.values()]

    def where(self, name: str) -> str:
        """How a message names a part."""
        return f"{self.name}: its part {name}"

    def pieces(self, name: str) -> Iterator[bytes]:
        """The bytes of a part to be read, as they are unpacked; see `unpacked`. What is read in all has its limit."""
        info = self._parts.get(canonical(name))
        self._asked_for += info.file_size if info else 0
        if self._asked_for > self.limits.markup_bytes:
            raise self.refused(f"its sheets, texts and names unpack to more than {self.limits.markup_bytes:,} bytes")
        return self.unpacked(name)

    def unpacked(self, name: str) -> Iterator[bytes]:
        """The bytes of a part as they are unpacked. Raises WorkbookError where it is missing, damaged or too dense."""
        info = self._parts.get(canonical(name))
        if info is None:
            raise WorkbookError(f"{self.name} lacks its part {name}", remedy=AGAIN)
        if info.file_size > WORTH_A_RATIO and info.file_size > self.limits.ratio * max(info.compress_size, 1):
            raise self.refused(f"its part {name} unpacks to more than {self.limits.ratio} times its size")
        read = 0
        try:
            with self._zip.open(info) as part:  # never gives more than the size stated, whatever is packed in it
                while piece := part.read(PIECE):
                    read += len(piece)
                    yield piece
        except DAMAGE as problem:
            raise WorkbookError(f"{self.where(name)} is damaged ({problem})", remedy=AGAIN) from None
        if read != info.file_size:
            raise WorkbookError(f"{self.where(name)} is damaged (it is shorter than stated)", remedy=AGAIN)

    def part(self, name: str) -> bytes:
        """The bytes of a part."""
        return b"".join(self.pieces(name))

    def tree(self, name: str) -> Element:
        """A small part as a tree of elements."""
        return tree(self.pieces(name), self.where(name))

    def relationships(self, part: str) -> dict[str, Relationship]:
        """Relationships of a part ("" for the package itself) by their id."""
        folder, base = posixpath.split(part)
        name = posixpath.join(folder, "_rels", base + ".rels")
        found: dict[str, Relationship] = {}
        if name in self:
            for element in self.tree(name).along("Relationship"):
                target, external = element.get("Target"), element.get("TargetMode") == "External"
                if not external:  # a path that climbs out of the package names no part, and is never opened as a file
                    target = posixpath.normpath(posixpath.join("/", folder, target)).lstrip("/")
                    target = target if target in self else unquote(target)
                found[element.get("Id")] = Relationship(element.get("Type").rsplit("/", 1)[-1], target, external)
        return found

    def copy_into(
        self, target: zipfile.ZipFile, changed: dict[str, bytes], dropped: frozenset[str] = frozenset()
    ) -> None:
        """Copy all parts but those dropped into another package in their order, the contents of some replaced."""
        for key, info in self._parts.items():
            if key in dropped:
                continue
            fresh = zipfile.ZipInfo(info.filename, info.date_time)
            fresh.compress_type, fresh.external_attr, fresh.comment = (
                info.compress_type, info.external_attr, info.comment,
            )  # fmt: skip
            fresh.create_system, fresh.file_size = info.create_system, len(changed.get(key, b"")) or info.file_size
            with target.open(fresh, "w") as part:
                for piece in [changed[key]] if key in changed else self.unpacked(info.filename):
                    part.write(piece)

    def close(self) -> None:
        """Let go of the file."""
        self._zip.close()
        self._file.close()

    def __enter__(self) -> Package:
        return self

    def __exit__(self, *_: object) -> None:
        self.close()


def canonical(name: str) -> str:
    """A part's name as the standard compares it."""
    return name.replace("\\", "/").lstrip("/").casefold()
