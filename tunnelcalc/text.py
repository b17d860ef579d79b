"""Text as people and other programs write it: decoding, numbers, near misses."""

from __future__ import annotations

import difflib
import re
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


DECIMAL = re.compile(
    r"(?:[^\d.,]{0,12}\d+\+)?[+-]?(?:\d+[.,]\d*|[.,]\d+)(?:[eE][+-]?\d+)?", re.ASCII
)
"""A number with one decimal sign, of either kind; a chainage such as km 12+345,60 is one."""

_DATE = re.compile(
    r"\d{4}-\d\d-\d\d|\d{1,2}[./]\d{1,2}[./]\d{2,4}$"
    r"|\d{1,2}[-. ]*(jan|feb|mar|apr|may|jun|jul|aug|sep|oct|nov|dec)",
    re.ASCII | re.IGNORECASE,
)
_GROUPS = re.compile(
    r"([+-]?\d{1,3}(?:([., '\u00a0\u2009\u202f\u2019])\d{3})+)(?:([.,])(\d+))?", re.ASCII
)


def without_groups(text: str) -> str | None:
    """A number that is written with thousands separators, plainly; None where it is not one.

    One group alone, as in 1,234 or 1.234, may as well be decimals: that is None.
    """
    found = _GROUPS.fullmatch(text.strip())
    if found is None:
        return None
    whole, separator, sign, rest = found.groups()
    groups = whole.split(separator)
    if any(len(group) != 3 for group in groups[1:]) or sign == separator:
        return None
    if separator in ".," and sign is None and len(groups) == 2:
        return None
    return "".join(groups) + (f".{rest}" if rest else "")


def number_fix(text: str) -> str:
    """What to write in place of a text that should be a number."""
    if _DATE.match(text.strip()):
        return "format the cell as a number and write it again: it was taken for a date"
    plain = without_groups(text)
    if plain is not None:
        return f"write {plain}, without thousands separators"
    whole, comma, rest = text.strip().partition(",")
    if comma and as_number(f"{whole}.{rest}") is not None:
        if len(rest) == 3 and rest.isdigit():
            return f"write {whole}{rest} or {whole}.{rest}, whichever is meant"
        return f"write {whole}.{rest}, with a decimal point"
    return "write a plain number with a decimal point, without unit or thousands separator"


MOST_WORDS = 15
NEAREST = 5


def words_near(words: Sequence[str], written: str = "") -> str:
    """The words of a choice for a message; of very many, those nearest to what was written."""
    if len(words) <= MOST_WORDS:
        return " or ".join(words)
    near = sorted(words, key=lambda word: -_likeness(written, word)) if written else [*words]
    return " or ".join(near[:NEAREST]) + f" or one of {len(words) - NEAREST} more"


def meant(name: str, known: Iterable[str]) -> str | None:
    """A question with the known names that a misspelt one most likely means, equally near ones
    all; None where none is near."""
    nearest = suggestion(name, (known := list(known)))
    if nearest is None:
        return None
    least = _likeness(name, nearest)
    near = sorted({nearest, *(word for word in known if _likeness(name, word) >= least)})
    listed = " or ".join(
        ", ".join(quoted(w) for w in part) for part in (near[:-1], near[-1:]) if part
    )
    return f"did you mean {listed}?"


def _likeness(one: str, other: str) -> float:
    return difflib.SequenceMatcher(None, other.lower(), one.strip().lower()).ratio()


def suggestion(name: str, known: Iterable[str]) -> str | None:
    """The known name that a misspelt one most likely means."""
    by_lower = {candidate.lower(): candidate for candidate in known}
    close = difflib.get_close_matches(name.strip().lower(), by_lower, n=1, cutoff=0.7)
    return by_lower[close[0]] if close else None
