"""From the bytes of a text table to its text, and to the character that separates its cells."""

from __future__ import annotations

import codecs
import re

from tunnelcalc.errors import Problems, Where

SEPARATORS = ("\t", ";", ",")
"""In this order: a name may well hold a comma, and hardly a tab."""

_HEADER_REACH = 65536
_QUOTED = re.compile(r'"(?:[^"]|"")*"')
_ANNOUNCED = re.compile(r'"?sep=([\t;,])"?\r?\n', re.IGNORECASE)
_PACKED, _OLD_WORKBOOK = b"PK\x03\x04", b"\xd0\xcf\x11\xe0"
_ENCODINGS = "UTF-8, or UTF-16 with its byte order mark"
_SAVE = 'save the table as "CSV UTF-8"'


def text_of(file: str, content: bytes, problems: Problems) -> str | None:
    """The text of a table; None, with a problem, where it is none. No encoding is guessed."""
    wide = content.startswith((codecs.BOM_UTF16_LE, codecs.BOM_UTF16_BE))
    if content.startswith((_PACKED, _OLD_WORKBOOK)):
        what = "is a workbook or another packed file, not text"
        fix = "give a workbook the ending .xlsx, or save the table as CSV"
        problems.add(Where(file), what, allowed=_ENCODINGS, fix=fix)
        return None
    if not wide and b"\0" in content:
        what = "is not a text file: it holds null bytes"
        problems.add(Where(file), what, allowed=_ENCODINGS, fix=_SAVE)
        return None
    try:
        text = content.decode("utf-16" if wide else "utf-8-sig")
    except UnicodeDecodeError as error:
        _tell_undecodable(file, content, wide, error, problems)
        return None
    if "\0" in text:
        what = "is not a text file: it holds null characters"
        problems.add(Where(file), what, allowed=_ENCODINGS, fix=_SAVE)
        return None
    return text


def _tell_undecodable(
    file: str, content: bytes, wide: bool, error: UnicodeDecodeError, problems: Problems
) -> None:
    if wide:
        what, where = "is not UTF-16 text, although it begins with the mark of it", Where(file)
    else:
        where = Where(file, content.count(b"\n", 0, error.start) + 1)
        what = f"is not UTF-8 text: byte 0x{content[error.start]:02x} cannot be read"
    fix = f"{_SAVE}; plain CSV may be Windows-1252, which is not guessed"
    problems.add(where, what, allowed=_ENCODINGS, fix=fix)


def separator_of(text: str) -> str:
    """What stands between the cells of the header row, outside quotes; a comma if nothing does."""
    announced = announced_separator(text)
    if announced:
        return announced
    bare = _QUOTED.sub("x", text[:_HEADER_REACH])
    blank = "".join((*SEPARATORS, " "))
    header = next((line for line in re.split(r"[\r\n]", bare) if line.strip(blank)), "")
    return next((separator for separator in SEPARATORS if separator in header), ",")


def announced_separator(text: str) -> str:
    """What a first line such as `sep=;` says, which some spreadsheets write and read."""
    found = _ANNOUNCED.match(text)
    return found[1] if found else ""
