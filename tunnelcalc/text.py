"""Text as people and other programs write it: decoding, numbers, near misses."""

from __future__ import annotations

import difflib
from collections.abc import Iterable, Sequence

from tunnelcalc.errors import Problems, Where


def decoded(file: str, content: bytes, problems: Problems) -> str | None:
    """Text of a UTF-8 file; None, with a problem, where it is not text."""
    if b"\0" in content:
        problems.add(
            Where(file),
            "is not a text file: it holds null bytes",
            fix="save it as plain text in UTF-8",
        )
        return None
    try:
        return content.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = content.count(b"\n", 0, error.start) + 1
        problems.add(
            Where(file, line),
            f"is not UTF-8 text: byte 0x{content[error.start]:02x} cannot be read",
            fix="save it as plain text in UTF-8",
        )
        return None


LONGEST_QUOTE = 80


def quoted(text: str) -> str:
    """Text in quotes for a message."""
    return f'"{shown(text)}"'


def shown(text: str) -> str:
    """Text for a message: one line, no control characters, not longer than a line."""
    if len(text) > LONGEST_QUOTE:
        text = text[: LONGEST_QUOTE - 3] + "..."
    return "".join(c if c.isprintable() else ascii(c)[1:-1] for c in text)


MOST_NAMES = 20


def few(names: Sequence[str]) -> str:
    """Names in a row; of very many, the first."""
    more = len(names) - MOST_NAMES
    return ", ".join(map(shown, names[:MOST_NAMES])) + (f" and {more} more" if more > 0 else "")


def as_number(text: str) -> float | None:
    """A number as people write it; None for what is none. `1_000`, `nan`, `inf` are none.

    A number too large for a double is infinite, and so outside every range.
    """
    if not text.isascii() or "_" in text or not any(c.isdigit() for c in text):
        return None
    try:
        return float(text)
    except ValueError:
        return None


def number_fix(text: str) -> str:
    """What to write in place of a text that should be a number."""
    whole, comma, rest = text.strip().partition(",")
    if comma and as_number(f"{whole}.{rest}") is not None:
        if len(rest) == 3 and rest.isdigit():
            return f"write {whole}{rest} or {whole}.{rest}, whichever is meant"
        return f"write {whole}.{rest}, with a decimal point"
    return "write a plain number with a decimal point, without unit or thousands separator"


def suggestion(name: str, known: Iterable[str]) -> str | None:
    """The known name that a misspelt one most likely means."""
    by_lower = {candidate.lower(): candidate for candidate in known}
    close = difflib.get_close_matches(name.strip().lower(), by_lower, n=1, cutoff=0.7)
    return by_lower[close[0]] if close else None
