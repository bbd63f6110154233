"""The zip package of a saved workbook: checked before anything in it is unpacked, its parts kept as bytes.

book.xlsx
├── [Content_Types].xml, _rels/.rels        what the parts are, where the workbook part is
└── xl/workbook.xml, xl/worksheets/*.xml …  read on demand
"""

from __future__ import annotations

import posixpath
import zipfile
import zlib
from pathlib import Path
from typing import IO

from lxml import etree

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Limits

__all__ = ["Package", "parsed"]

OLE2 = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"


class Package:
    """The parts of a workbook file by name. Raises WorkbookError for what cannot be, or should not be, unpacked."""

    def __init__(self, path: str | Path, limits: Limits) -> None:
        self.path = Path(path)
        self.name = self.path.name
        try:
            file: IO[bytes] = self.path.open("rb")
        except OSError as problem:
            raise WorkbookError(
                f"{self.name} cannot be opened ({problem.strerror or problem})", remedy="Check the path and its rights"
            ) from problem
        with file:
            head = file.read(8)
        if head == OLE2:
            raise WorkbookError(
                f"{self.name} is in the old binary format or encrypted",
                remedy="Save it as .xlsx without a password",
            )
        try:
            self._zip = zipfile.ZipFile(self.path)
        except (zipfile.BadZipFile, OSError, ValueError, NotImplementedError) as problem:
            raise WorkbookError(
                f"{self.name} is not a readable workbook file ({problem})", remedy="Save it again as .xlsx or .ods"
            ) from problem
        self._check(limits)

    def _check(self, limits: Limits) -> None:
        infos = self._zip.infolist()
        if len(infos) > limits.parts:
            raise self.refused(f"it has {len(infos)} parts, more than {limits.parts}")
        total = 0
        seen: set[str] = set()
        for info in infos:
            name = info.filename
            if info.flag_bits & 1:
                raise WorkbookError(f"{self.name} is encrypted", remedy="Save it without a password")
            if name in seen:
                raise self.refused(f"its part {name} is there twice")
            seen.add(name)
            total += info.file_size
            if info.file_size > 10_000_000 and info.file_size > limits.ratio * max(info.compress_size, 1):
                raise self.refused(f"its part {name} unpacks to more than {limits.ratio} times its size")
        if total > limits.unzipped_bytes:
            raise self.refused(f"it unpacks to {total:,} bytes, more than {limits.unzipped_bytes:,}")
        self.names = seen

    def refused(self, why: str) -> WorkbookError:
        """A refusal of the whole file."""
        return WorkbookError(
            f"{self.name} is refused: {why}", remedy="Save it again, or raise the limit if you trust it"
        )

    def __contains__(self, name: str) -> bool:
        return name in self.names

    def part(self, name: str) -> bytes:
        """The bytes of a part. Raises WorkbookError where it is missing or damaged."""
        try:
            data = self._zip.read(name)
            if b"<!DOCTYPE" in data[:2048].replace(b"\0", b""):  # utf-16 too, whose every other byte is 0
                raise self.refused(f"its part {name} declares a document type, which no workbook needs")
            return data
        except KeyError:
            raise WorkbookError(f"{self.name} lacks its part {name}", remedy="Save the workbook again") from None
        except (zipfile.BadZipFile, zlib.error, EOFError, OSError, NotImplementedError, RuntimeError) as problem:
            raise WorkbookError(
                f"{self.name}: its part {name} is damaged ({problem})", remedy="Save the workbook again"
            ) from problem

    def relationships(self, part: str) -> dict[str, tuple[str, str, bool]]:
        """Relationships of a part: id -> (kind, target part or address, external)."""
        folder, base = posixpath.split(part)
        name = posixpath.join(folder, "_rels", base + ".rels")
        if name not in self:
            return {}
        found = {}
        for element in parsed(self.part(name), self.name, name):
            target, external = element.get("Target", ""), element.get("TargetMode") == "External"
            if not external:
                target = posixpath.normpath(posixpath.join("/", folder, target)).lstrip("/")
            found[element.get("Id", "")] = (element.get("Type", "").rsplit("/", 1)[-1], target, external)
        return found

    def close(self) -> None:
        """Let go of the file."""
        self._zip.close()


def parsed(data: bytes, book: str, part: str) -> etree._Element:
    """The root element of a small XML part; no entities, no network."""
    parser = etree.XMLParser(resolve_entities=False, no_network=True, load_dtd=False, huge_tree=False)
    try:
        return etree.fromstring(data, parser)
    except (etree.XMLSyntaxError, ValueError) as problem:
        raise WorkbookError(
            f"{book}: its part {part} is not well-formed XML ({problem})", remedy="Save the workbook again"
        ) from problem
