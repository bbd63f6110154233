"""The zip package: what is refused before it is unpacked, and what is found under another spelling."""

from __future__ import annotations

import struct
import zipfile
from pathlib import Path

import pytest

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Limits
from cellsection.workbook.package import Package
from cellsection.workbook.reader import read_book
from tests.workbook.small import PACKAGE, RELATIONS, parts_of, zipped

SHEET = "xl/worksheets/sheet1.xml"


def parts() -> dict[str, str | bytes]:
    return dict(parts_of({"S": {"A1": 1.0}}, {}))


def refusal(path: Path, limits: Limits | None = None) -> str:
    with pytest.raises(WorkbookError) as met:
        read_book(path, limits or Limits())
    assert met.value.remedy
    return str(met.value)


def test_part_names_are_compared_without_case_and_with_either_slash(tmp_path: Path) -> None:
    renamed = {("XL\\Worksheets\\Sheet1.XML" if name == SHEET else name): each for name, each in parts().items()}
    assert read_book(zipped(tmp_path / "book.xlsx", renamed), Limits()).sheets[0].values == {(1, 1): 1.0}


def test_names_that_differ_in_case_only_are_one_part_twice(tmp_path: Path) -> None:
    assert "twice" in refusal(zipped(tmp_path / "book.xlsx", {**parts(), SHEET.upper(): b""}))


@pytest.mark.parametrize("target", ["../../../../etc/hostname", "/etc/hostname", "file:///etc/hostname"])
def test_a_target_outside_the_package_is_a_missing_part_and_no_file(tmp_path: Path, target: str) -> None:
    changed = parts()
    changed["xl/_rels/workbook.xml.rels"] = (
        f'<Relationships xmlns="{PACKAGE}"><Relationship Id="r1" Type="{RELATIONS}/worksheet" Target="{target}"/>'
        "</Relationships>"
    )
    assert "lacks its part" in refusal(zipped(tmp_path / "book.xlsx", changed))


def test_an_entry_with_a_path_of_its_own_is_written_nowhere(tmp_path: Path) -> None:
    outside = tmp_path / "outside.txt"
    path = zipped(tmp_path / "book.xlsx", {**parts(), str(outside): b"x", "../above.txt": b"x"})
    assert read_book(path, Limits()).sheets[0].values
    assert [each.name for each in tmp_path.iterdir()] == ["book.xlsx"]


def test_an_encrypted_entry_is_told(tmp_path: Path) -> None:
    path = zipped(tmp_path / "book.xlsx", parts())
    data = bytearray(path.read_bytes())
    at = data.index(b"PK\x01\x02")
    data[at + 8] |= 1
    path.write_bytes(data)
    assert "encrypted" in refusal(path)


def test_a_wrong_checksum_is_told(tmp_path: Path) -> None:
    path = tmp_path / "book.xlsx"
    with zipfile.ZipFile(path, "w") as package:  # stored, so that a changed byte is still a text
        for name, content in parts().items():
            package.writestr(name, content)
    data = path.read_bytes()
    path.write_bytes(data.replace(b"<v>1.0</v>", b"<v>2.0</v>", 1))
    assert "damaged" in refusal(path)


def test_a_part_longer_than_it_says_is_damaged_and_not_unpacked(tmp_path: Path) -> None:
    path = zipped(tmp_path / "book.xlsx", {**parts(), SHEET: b" " * 5_000_000})
    data = bytearray(path.read_bytes())
    at = data.index(SHEET.encode(), data.index(b"PK\x01\x02")) - 46
    data[at + 24 : at + 28] = struct.pack("<I", 100)  # the uncompressed size in the central directory
    path.write_bytes(data)
    pieces: list[bytes] = []
    with Package(path, Limits()) as package, pytest.raises(WorkbookError, match="damaged"):
        pieces.extend(package.pieces(SHEET))
    assert sum(map(len, pieces)) <= 100


def test_a_packing_method_that_no_workbook_uses_is_refused(tmp_path: Path) -> None:
    path = tmp_path / "book.xlsx"
    with zipfile.ZipFile(path, "w", zipfile.ZIP_LZMA) as package:
        for name, content in parts().items():
            package.writestr(name, content)
    assert "method" in refusal(path)


def test_media_that_is_never_needed_is_never_unpacked(tmp_path: Path) -> None:
    path = zipped(tmp_path / "book.xlsx", {**parts(), "xl/media/image1.bmp": b"\0" * 30_000_000})
    assert read_book(path, Limits(ratio=10)).sheets[0].values


def test_a_folder_is_no_workbook(tmp_path: Path) -> None:
    assert "is no file" in refusal(tmp_path)


@pytest.mark.parametrize(
    ("sheet", "word"),
    [
        ("<a>" * 300 + "</a>" * 300, "deeper than 256"),
        ('<a b="' + "x" * 9_000_000 + '"/>', "bytes"),
        ('<!-- ... --><!DOCTYPE a [<!ENTITY b "c">]><a>&b;</a>', "document type"),
        ('<?xml version="1.0" encoding="utf-7"?><a/>', "utf-7"),
        ("<worksheet><sheetData><row><c><v>" + "1" * 2_000_000 + "</v></c></row></sheetData></worksheet>", "characters"),  # noqa: E501
    ],
)  # fmt: skip
def test_xml_that_asks_for_too_much_is_refused(tmp_path: Path, sheet: str, word: str) -> None:
    unusual = sheet.replace("<sheetData>", "<sheetData><!-- through the parser -->")
    assert word in refusal(zipped(tmp_path / "book.xlsx", {**parts(), SHEET: unusual}))


def test_a_comment_longer_than_any_head_hides_no_document_type(tmp_path: Path) -> None:
    sheet = f'<!--{"-x" * 9000}--><!DOCTYPE a [<!ENTITY b SYSTEM "file:///etc/hostname">]><a>&b;</a>'
    assert "document type" in refusal(zipped(tmp_path / "book.xlsx", {**parts(), SHEET: sheet}))


@pytest.mark.parametrize("name", ["xl/workbook.bin", "xl/workbook.xml"])
def test_a_binary_workbook_is_told_from_what_is_none(tmp_path: Path, name: str) -> None:
    said = refusal(zipped(tmp_path / "book.xlsx", {name: b"\x83\x01\x00"}))
    assert ("xlsb" in said) == name.endswith(".bin")


def test_encrypted_open_documents_are_told(tmp_path: Path) -> None:
    manifest = (
        '<m:manifest xmlns:m="urn:oasis:names:tc:opendocument:xmlns:manifest:1.0">'
        '<m:file-entry m:full-path="content.xml"><m:encryption-data/></m:file-entry></m:manifest>'
    )
    path = zipped(tmp_path / "book.ods", {"content.xml": b"\x00\x01", "META-INF/manifest.xml": manifest})
    assert "encrypted" in refusal(path)
