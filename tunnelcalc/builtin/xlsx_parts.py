"""What lies beneath a workbook: the packed parts and their sizes, and marks in a sheet's XML.

The library for workbooks hands out values. It unpacks whatever it is given, and does not tell a
formula without a stored result from an empty cell, nor, row by row, which cells are merged.
"""

from __future__ import annotations

import io
import zipfile
from dataclasses import dataclass, field
from typing import IO
from xml.parsers import expat

LARGEST_UNPACKED_BYTES = 256 * 1024 * 1024
LARGEST_OTHER_PART_BYTES = 32 * 1024 * 1024
"""Parts other than sheets and texts: styles and the like are held in memory as a whole."""
MOST_CELLS_IN_A_ROW = 16384
"""More columns than that no spreadsheet has."""
_HEAD_BYTES = 4096
_DOCUMENT_TYPE = ("declares a document type", "save the table again as .xlsx")
"""With it, a few bytes may stand for any number: no spreadsheet writes one."""
_OLD_OR_LOCKED = b"\xd0\xcf\x11\xe0"


class WorkbookError(Exception):
    """A workbook is refused. The arguments: what is wrong, and what to do."""


def check_package(content: bytes) -> None:
    """Raises WorkbookError where a file is no workbook that may safely be unpacked."""
    if content.startswith(_OLD_OR_LOCKED):
        raise WorkbookError(
            "is protected by a password, or a workbook of the old kind (.xls)",
            "save it as .xlsx without a password",
        )
    try:
        archive = zipfile.ZipFile(io.BytesIO(content))
    except (zipfile.BadZipFile, ValueError, NotImplementedError, OSError):
        raise WorkbookError(
            "is not a workbook, or a damaged one", "save it again as .xlsx"
        ) from None
    parts = archive.infolist()
    size = sum(part.file_size for part in parts)
    if size > LARGEST_UNPACKED_BYTES or any(map(_is_swollen, parts)):
        raise WorkbookError(
            f"unpacks to {size / 1e6:.0f} MB, more than can be read",
            "save the table alone, values only, in a new workbook or as CSV",
        )
    for part in filter(_is_parsed, parts):
        with archive.open(part) as stream:
            if b"<!DOCTYPE" in stream.read(_HEAD_BYTES):
                raise WorkbookError(*_DOCUMENT_TYPE)


def _is_parsed(part: zipfile.ZipInfo) -> bool:
    return part.filename.endswith((".xml", ".rels"))


def _is_swollen(part: zipfile.ZipInfo) -> bool:
    streamed = "/worksheets/" in part.filename or "sharedStrings" in part.filename
    return _is_parsed(part) and not streamed and part.file_size > LARGEST_OTHER_PART_BYTES


@dataclass(slots=True)
class SheetMarks:
    """Merged ranges as written (`B2:C3`), and (row, column) of formulas without a result."""

    merged: list[str] = field(default_factory=list)
    without_result: list[tuple[int, int]] = field(default_factory=list)


def sheet_marks(part: IO[bytes]) -> SheetMarks:
    """Marks in the XML of a sheet. Raises WorkbookError where no spreadsheet writes such XML."""
    scan = _Scan()
    parser = expat.ParserCreate(namespace_separator=" ")
    parser.StartElementHandler = scan.start
    parser.EndElementHandler = scan.end
    parser.CharacterDataHandler = scan.text
    parser.StartDoctypeDeclHandler = scan.doctype
    parser.buffer_text = True
    parser.ParseFile(part)
    return scan.marks


class _Scan:
    def __init__(self) -> None:
        self.marks = SheetMarks()
        self.row = self.cells = 0
        self.reference = ""
        self.formula = self.result = self.in_value = self.is_text = False

    def start(self, tag: str, attributes: dict[str, str]) -> None:
        name = tag.rpartition(" ")[2]
        if name == "c":
            self.cells += 1
            if self.cells > MOST_CELLS_IN_A_ROW:
                raise WorkbookError("has a row of too many cells", "save the table again as .xlsx")
            self.reference = attributes.get("r", "")
            self.is_text = attributes.get("t") == "str"
            self.formula = self.result = False
        elif name == "v":
            self.in_value = True
            self.result |= self.is_text  # the result may be an empty text
        elif name == "f":
            self.formula = True
        elif name == "row":
            self.row = int(attributes.get("r", self.row + 1))
            self.cells = 0
        elif name == "mergeCell":
            self.marks.merged.append(attributes.get("ref", ""))

    def text(self, text: str) -> None:
        if self.in_value and text.strip():
            self.result = True

    def end(self, tag: str) -> None:
        name = tag.rpartition(" ")[2]
        if name == "v":
            self.in_value = False
        elif name == "c" and self.formula and not self.result:
            column = _column(self.reference) or self.cells
            self.marks.without_result.append((self.row, column))

    def doctype(self, *_: object) -> None:
        raise WorkbookError(*_DOCUMENT_TYPE)


def _column(reference: str) -> int:
    """The number of the column in a reference such as AB12; 0 where there is none."""
    number = 0
    for letter in reference.rstrip("0123456789"):
        number = number * 26 + ord(letter.upper()) - ord("A") + 1
    return number
